"""Walks a package in a browser and tells what is wrong with it, in words."""

from __future__ import annotations

from collections.abc import Iterator
from contextlib import contextmanager
from dataclasses import dataclass
from pathlib import Path
from typing import Literal, TypeAlias
from urllib.parse import quote, unquote, urlsplit

from playwright.sync_api import Browser, Page

Medium: TypeAlias = Literal["screen", "print"]


@dataclass(frozen=True)
class Surface:
    """What a page is laid out on; the width of a printed sheet is that between its margins."""

    name: str
    width: int
    medium: Medium


DESKTOP = Surface("desktop", 1280, "screen")
SURFACES = (
    DESKTOP,
    Surface("tablet", 820, "screen"),
    Surface("phone", 390, "screen"),
    Surface("A4", 695, "print"),  # 184 mm
    Surface("Letter", 717, "print"),  # 190 mm
)

_CHECKS = (Path(__file__).parent / "page_checks.js").read_text(encoding="utf-8")
_LINKS = (
    "() => [...document.querySelectorAll('a[href], img[src], link[href], script[src]')]"
    # the address of a link in a figure is an object
    ".map((e) => e.href?.baseVal === undefined ? e.href || e.src : new URL(e.href.baseVal, e.baseURI).href)"
)
_IDS = "() => [...document.querySelectorAll('[id]')].map((e) => e.id)"
_FIGURES = (
    "() => [...document.querySelectorAll('figure[id]')].map((figure) => [figure.id,"
    " [...figure.querySelectorAll('.wide text')].map((t) => t.textContent.trim())"
    ".sort((a, b) => b.length - a.length)[0] ?? ''])"
)


@dataclass(frozen=True)
class Survey:
    """What a walk over all pages found.

    Attributes
    ----------
    console : what pages say on the console, and what they fail to load.
    links : links that lead to no file of the package, or to no anchor on its page.
    overflows : by surface, what is wider than its place, or would be split between sheets.
    figures : address of each figure with the longest text in it.
    """

    console: tuple[str, ...]
    links: tuple[str, ...]
    overflows: dict[str, tuple[str, ...]]
    figures: tuple[tuple[str, str], ...]


def survey(browser: Browser, package: Path) -> Survey:
    """Open every page of a package once, and lay it out on every surface."""
    console: list[str] = []
    overflows: dict[str, list[str]] = {surface.name: [] for surface in SURFACES}
    links: dict[str, list[str]] = {}
    ids: dict[str, set[str]] = {}
    figures: list[tuple[str, str]] = []
    with opened(browser) as page:
        page.on("console", lambda m: console.append(m.text) if m.type in ("error", "warning") else None)
        page.on("pageerror", lambda fault: console.append(str(fault)))
        page.on("requestfailed", lambda request: console.append(f"{request.url} cannot be loaded"))
        for path in sorted(p.relative_to(package).as_posix() for p in package.rglob("*.html")):
            said = len(console)
            page.goto(address(package, path))
            page.evaluate("() => document.fonts.ready.then(() => true)")
            links[path], ids[path] = page.evaluate(_LINKS), set(page.evaluate(_IDS))
            figures += [(f"{path}#{anchor}", text) for anchor, text in page.evaluate(_FIGURES) if text]
            for surface in SURFACES:
                page.set_viewport_size({"width": surface.width, "height": 900})
                page.emulate_media(media=surface.medium)
                found = page.evaluate(f"({_CHECKS})({str(surface.medium == 'print').lower()})")
                overflows[surface.name] += [f"{path}: {text}" for text in found]
            console[said:] = [f"{path}: {text}" for text in console[said:]]
    return Survey(
        tuple(console),
        tuple(_broken(package.resolve(), links, ids)),
        {name: tuple(found) for name, found in overflows.items()},
        tuple(figures),
    )


def search(browser: Browser, package: Path, words: str) -> list[str]:
    """Return the addresses that the search page finds for some words, relative to the package."""
    with opened(browser) as page:
        page.goto(address(package, "search.html", words))
        page.wait_for_function("() => document.getElementById('search-count').textContent")
        found = page.evaluate(
            "() => [...document.querySelectorAll('#search-results a')].map((a) => a.getAttribute('href'))"
        )
    return [unquote(str(href)) for href in found]


@contextmanager
def opened(browser: Browser, *, dark: bool = False, scripts: bool = True) -> Iterator[Page]:
    """Yield a blank page on a desktop."""
    context = browser.new_context(
        viewport={"width": DESKTOP.width, "height": 900},
        color_scheme="dark" if dark else "light",
        java_script_enabled=scripts,
    )
    try:
        yield context.new_page()
    finally:
        context.close()


def address(package: Path, path: str, query: str = "") -> str:
    """Return the address of a page on disk."""
    return (package / path).resolve().as_uri() + (f"?q={quote(query)}" if query else "")


def _broken(root: Path, links: dict[str, list[str]], ids: dict[str, set[str]]) -> Iterator[str]:
    for path, targets in links.items():
        for target in dict.fromkeys(targets):
            parts = urlsplit(target)
            if parts.scheme != "file":
                continue
            file = Path(unquote(parts.path))
            if not file.is_file() or not file.is_relative_to(root):
                yield f"{path}: {target} is not in the package"
            elif parts.fragment and unquote(parts.fragment) not in ids[file.relative_to(root).as_posix()]:
                yield f"{path}: {unquote(target)} is no place on its page"
