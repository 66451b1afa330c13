"""Picture to SVG text: matplotlib draws, then ids are made the figure's own and colours CSS variables."""

import re
from collections.abc import Iterable, Iterator, Sequence
from html import escape
from io import StringIO
from itertools import groupby
from math import ceil
from operator import itemgetter
from typing import TYPE_CHECKING
from xml.etree import ElementTree as ET

import numpy as np

from calcgen.figures.labels import Box, Point
from calcgen.figures.picture import Anchor, Colour, Label, Picture, Shape

if TYPE_CHECKING:
    from matplotlib.backend_bases import RendererBase
    from matplotlib.path import Path
    from matplotlib.transforms import Transform

# The colours on paper; a page overrides each through its CSS variable, on dark ground too.
COLOURS: dict[Colour, str] = {
    "ink": "#1c2126",
    "muted": "#59636c",
    "rule": "#b9c0c6",
    "paper": "#fefefe",
    "section": "#e3e8ea",
    "tension": "#b5501f",
    "compression": "#1b4a73",
}
VARIABLES: dict[Colour, str] = {
    "ink": "--ink",
    "muted": "--muted",
    "rule": "--rule",
    "paper": "--paper",
    "section": "--section-fill",
    "tension": "--tension",
    "compression": "--compression",
}
FONT = "'Calcgen Sans', 'DejaVu Sans', sans-serif"

_SVG = "{http://www.w3.org/2000/svg}"
_VARIABLE = {value: f"var({VARIABLES[name]}, {value})" for name, value in COLOURS.items()}
_COLOUR = re.compile("|".join(_VARIABLE))
_SPACE = re.compile(r"\s*([MLz])\s*")
_ANCHOR: dict[Anchor, str] = {"left": "start", "center": "middle", "right": "end"}
_HALO = f"; paint-order: stroke; stroke: {COLOURS['paper']}; stroke-width: 3px"


def render(picture: Picture) -> str:
    """SVG text of `picture`, the same bytes each time, without an XML declaration, for use inside a page.

    matplotlib's renderer is told the shapes directly: its figures and artists lay out and measure what has
    its place already. A line of text is written as it stands, for the reader's browser to set.
    """
    from matplotlib.backends.backend_svg import RendererSVG
    from matplotlib.transforms import Affine2D

    frame = picture.frame
    width, height = ceil(frame.right - frame.left), ceil(frame.bottom - frame.top)
    to_paper = Affine2D().translate(-frame.left, -frame.top).scale(1, -1).translate(0, height)
    out = StringIO()
    renderer = RendererSVG(width, height, out, metadata={"Date": None})  # type: ignore[no-untyped-call]
    for item in picture.items:
        if isinstance(item, Shape):
            _draw(renderer, item, to_paper)
    renderer.finalize()  # type: ignore[no-untyped-call]
    return _own(out.getvalue(), picture, width, height)


def _draw(renderer: "RendererBase", shape: Shape, to_paper: "Transform") -> None:
    from matplotlib.colors import to_rgba
    from matplotlib.transforms import TransformedPath

    gc = renderer.new_gc()
    if shape.opacity < 1:
        gc.set_alpha(shape.opacity)
    stroke = shape.stroke
    gc.set_linewidth(stroke.weight if stroke else 0)
    if stroke:
        gc.set_foreground(COLOURS[stroke.colour])
        gc.set_dashes(0, stroke.dash or None)
    if shape.clip:
        gc.set_clip_path(TransformedPath(_path(shape.clip, closed=True), to_paper))
    face = to_rgba(COLOURS[shape.fill]) if shape.fill else None
    renderer.draw_path(gc, _path(shape.rings, closed=shape.closed), to_paper, face)


def _path(rings: Sequence[tuple[Point, ...]], *, closed: bool) -> "Path":
    from matplotlib.path import Path

    lines = [(*ring, ring[0]) for ring in rings] if closed else rings
    ends = np.cumsum([len(line) for line in lines])
    codes = np.full(ends[-1], Path.LINETO)
    codes[[0, *ends[:-1]]] = Path.MOVETO
    if closed:
        codes[ends - 1] = Path.CLOSEPOLY
    path = Path(np.round(np.concatenate(lines), 2), codes)
    path.should_simplify = False
    return path


def _own(drawn: str, picture: Picture, width: float, height: float) -> str:
    """Keep what matplotlib drew, add the lines of text, and make ids and colours the page's."""
    tree = ET.fromstring(drawn)  # noqa: S314  our own text of a moment ago
    ids: dict[str, str] = {}
    defined = []
    for clip in tree.iter(f"{_SVG}clipPath"):
        ids[clip.attrib["id"]] = own = f"{picture.ident}-clip-{len(ids) + 1}"
        defined.append(f'<clipPath id="{own}">{"".join(_path_text(path, ids) for path in clip)}</clipPath>')
    paths = iter(tree.findall(f"{_SVG}path"))  # one for each shape, in their order
    texts = (
        _label_text(item, picture.frame) if isinstance(item, Label) else _path_text(next(paths), ids)
        for item in picture.items
    )
    shown = [(item.href, text) for item, text in zip(picture.items, texts, strict=True)]
    ident = escape(picture.ident)
    return "\n".join(
        [
            f'<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 {width:g} {height:g}"'
            # the parts of an image are not read out, nor its links followed
            f' role="{"group" if any(href for href, _ in shown) else "img"}"'
            f' aria-labelledby="{ident}-title {ident}-desc"'
            f' style="max-width: {width:g}px; font-family: {FONT}; stroke-linejoin: round">',
            f'<title id="{ident}-title">{escape(picture.title)}</title>',
            f'<desc id="{ident}-desc">{escape(picture.description)}</desc>',
            *([f"<defs>{''.join(defined)}</defs>"] if defined else []),
            *_linked(shown),
            "</svg>\n",
        ]
    )


def _linked(shown: Iterable[tuple[str, str]]) -> Iterator[str]:
    """Yield elements; those one after the other that lead to one place share a link."""
    for href, run in groupby(shown, key=itemgetter(0)):
        texts = [text for _, text in run]
        yield from [f'<a href="{escape(href)}">', *texts, "</a>"] if href else texts


def _path_text(path: ET.Element, ids: dict[str, str]) -> str:
    outline = _SPACE.sub(r"\1", path.get("d", "")).strip()
    reference = path.get("clip-path", "")
    clip = f' clip-path="url(#{ids[reference[5:-1]]})"' if reference else ""
    style = path.get("style")
    return f'<path d="{outline}"{clip}{_style(style) if style else ""}/>'


def _label_text(label: Label, frame: Box) -> str:
    x, y = _number(round(label.x, 2) - frame.left), _number(round(label.y, 2) - frame.top)
    turned = f' transform="rotate(-90 {x} {y})"' if label.turned else ""
    weight = "font-weight: 700; " if label.bold else ""
    style = f"{weight}font-size: {_number(label.size)}px; text-anchor: {_ANCHOR[label.anchor]}"
    style += f"; fill: {COLOURS[label.colour]}{_HALO if label.halo else ''}"
    return f'<text x="{x}" y="{y}"{turned}{_style(style)}>{escape(label.text)}</text>'


def _number(value: float) -> str:
    return f"{value:f}".rstrip("0").rstrip(".")


def _style(style: str) -> str:
    named = _COLOUR.sub(lambda found: _VARIABLE[found[0]], style.replace("; stroke-linejoin: round", ""))
    return f' style="{named.replace("; stroke-dashoffset: 0", "")}"'
