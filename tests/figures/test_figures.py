"""What holds for every figure, whatever it shows, in both places."""

import re
import subprocess
import sys
from functools import cache
from itertools import combinations
from xml.etree import ElementTree as ET

import matplotlib as mpl
import pytest

from calcgen.figures.labels import Box
from calcgen.figures.picture import WIDTHS, Label, Picture, Width, label_boxes
from calcgen.figures.svg import COLOURS, render
from tests.figures.drawings import DRAWINGS, compose

SVG = "{http://www.w3.org/2000/svg}"
OVERLONG = {"section-long note", "beam-long labels"}  # text wider than a narrow place, whatever is done

cases = pytest.mark.parametrize(("name", "width"), [(n, w) for n in DRAWINGS for w in WIDTHS])


@cache
def picture_of(name: str, width: Width) -> Picture:
    return compose(DRAWINGS[name], width)


@cache
def svg_of(name: str, width: Width) -> str:
    return render(picture_of(name, width))


def parsed(text: str) -> ET.Element:
    return ET.fromstring(text)  # noqa: S314  our own


@cases
def test_no_label_overlaps_another(name: str, width: Width) -> None:
    for (first, a), (second, b) in combinations(label_boxes(picture_of(name, width)), 2):
        assert not a.overlaps(b), f"{first!r} over {second!r}"


@cases
def test_no_label_is_clipped(name: str, width: Width) -> None:
    picture = picture_of(name, width)
    frame = picture.frame
    for text, box in label_boxes(picture):
        inside = (
            frame.left <= box.left
            and box.right <= frame.right
            and frame.top <= box.top
            and box.bottom <= frame.bottom
        )
        assert inside, text


@cases
def test_a_figure_is_no_wider_than_its_place(name: str, width: Width) -> None:
    frame = picture_of(name, width).frame
    if name not in OVERLONG:
        assert frame.right - frame.left <= WIDTHS[width] + 0.1


@cases
def test_the_svg_is_well_formed_and_says_what_it_shows(name: str, width: Width) -> None:
    picture = picture_of(name, width)
    root = parsed(svg_of(name, width))
    assert root.get("role") == "img"
    assert "width" not in root.attrib
    assert [len(root.findall(SVG + tag)) for tag in ("title", "desc")] == [1, 1]
    assert (root.findtext(SVG + "title"), root.findtext(SVG + "desc")) == (picture.title, picture.description)
    named = {e.get("id") for e in root if e.tag in (SVG + "title", SVG + "desc")}
    assert set((root.get("aria-labelledby") or "").split()) == named


@cases
def test_each_label_is_one_run_of_text(name: str, width: Width) -> None:
    picture = picture_of(name, width)
    runs = [text.text for text in parsed(svg_of(name, width)).iter(f"{SVG}text")]
    assert runs == [text for text, _ in label_boxes(picture)]


@cases
def test_the_same_drawing_gives_the_same_bytes(name: str, width: Width) -> None:
    assert render(compose(DRAWINGS[name], width)) == svg_of(name, width)


@cases
def test_colours_are_variables_of_the_page(name: str, width: Width) -> None:
    text = svg_of(name, width)
    assert set(re.findall(r"#[0-9a-f]{6}", text)) <= set(COLOURS.values())
    assert re.findall(r"(?<!, )#[0-9a-f]{6}", text) == []


def test_ids_are_unique_over_all_figures_of_a_page() -> None:
    once = {drawing.ident: name for name, drawing in DRAWINGS.items()}
    figures = [svg_of(name, width) for name in once.values() for width in WIDTHS]
    ids = [found for text in figures for found in re.findall(r' id="([^"]*)"', text)]
    assert len(ids) == len(set(ids))
    for text in figures:
        here = set(re.findall(r' id="([^"]*)"', text))
        assert set(re.findall(r"url\(#([^)]*)\)", text)) <= here


def test_drawing_leaves_matplotlib_as_it_was() -> None:
    before = dict(mpl.rcParams)
    render(picture_of("beam-simple", "wide"))
    assert dict(mpl.rcParams) == before


@pytest.mark.parametrize(
    ("work", "absent"),
    [
        ("import tests.figures.drawings", "matplotlib"),
        (
            "from tests.figures.drawings import *; from calcgen.figures.svg import render;"
            " render(compose(SECTION, 'wide'))",
            "matplotlib.pyplot",
        ),
    ],
)
def test_only_drawing_imports_matplotlib_and_never_pyplot(work: str, absent: str) -> None:
    code = f"import sys; {work}; sys.exit({absent!r} in sys.modules)"
    assert subprocess.run([sys.executable, "-c", code], check=False).returncode == 0


def test_markup_in_a_label_is_text() -> None:
    box = Box(0, 0, 100, 20)
    text = render(Picture("x", "<b> & $y$", "d", box, (Label(50, 15, 'M < "N" & $x_1$ 漢'),)))
    assert parsed(text).findtext(f"{SVG}text") == 'M < "N" & $x_1$ 漢'
