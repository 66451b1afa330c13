"""The style sheet: contrast of every colour of text on both grounds, and the fonts it asks for."""

from __future__ import annotations

import re

import pytest

from calcgen.site.render import template_folder

ASSETS = template_folder() / "assets"
CSS = (ASSETS / "site.css").read_text(encoding="utf-8")
PAIRS = {
    name: (light, dark)
    for name, light, dark in re.findall(r"--([a-z-]+): light-dark\((#\w{6}), (#\w{6})\);", CSS)
}
AA = 4.5  # WCAG 2.2, 1.4.3: contrast of text of ordinary size


def luminance(colour: str) -> float:
    """Relative luminance as WCAG 2.2 defines it."""
    parts = [int(colour[i : i + 2], 16) / 255 for i in (1, 3, 5)]
    r, g, b = (p / 12.92 if p <= 0.04045 else ((p + 0.055) / 1.055) ** 2.4 for p in parts)
    return 0.2126 * r + 0.7152 * g + 0.0722 * b


def contrast(one: str, other: str) -> float:
    high, low = sorted((luminance(one), luminance(other)), reverse=True)
    return (high + 0.05) / (low + 0.05)


@pytest.mark.parametrize("dark", [False, True])
@pytest.mark.parametrize(
    ("text", "ground"),
    [
        *((t, "paper") for t in ("ink", "muted", "tension", "compression", "satisfied", "exceeded", "open")),
        ("ink", "ground"),
        ("muted", "ground"),
        ("ink", "open-tint"),
        ("muted", "open-tint"),
        ("open", "open-tint"),
        ("ink", "mark"),
        ("ink", "section-fill"),
    ],
)
def test_text_stands_out(text: str, ground: str, *, dark: bool) -> None:
    assert contrast(PAIRS[text][dark], PAIRS[ground][dark]) >= AA


@pytest.mark.parametrize("dark", [False, True])
@pytest.mark.parametrize("pair", [("tension", "compression"), ("satisfied", "exceeded")])
def test_opposites_part_in_greyscale(pair: tuple[str, str], *, dark: bool) -> None:
    one, other = (PAIRS[name][dark] for name in pair)
    assert contrast(one, other) > 1.4


def test_fonts_are_there_small_and_with_their_licences() -> None:
    asked = set(re.findall(r'url\("(fonts/[^"]+)"\)', CSS))
    assert asked == {f"fonts/{p.name}" for p in (ASSETS / "fonts").glob("*.woff2")}
    assert sum((ASSETS / a).stat().st_size for a in asked) < 400_000
    listed = (ASSETS / "fonts" / "FONTS.md").read_text(encoding="utf-8")
    assert all(p.name in listed for p in (ASSETS / "fonts").iterdir() if p.name != "FONTS.md")


def test_nothing_is_fetched_from_elsewhere() -> None:
    texts = [
        p.read_text(encoding="utf-8")
        for p in template_folder().rglob("*.*")
        if p.suffix in (".css", ".js", ".html")
    ]
    assert not any(re.search(r"https?://|fetch\(|@import", text) for text in texts)
