"""Picture to SVG text: matplotlib draws, then ids are made the figure's own and colours CSS variables."""

import re
import warnings
from collections.abc import Iterable
from functools import cache
from html import escape
from io import StringIO
from typing import TYPE_CHECKING
from xml.etree import ElementTree as ET

import numpy as np

from calcgen.figures.labels import Point
from calcgen.figures.picture import Colour, Label, Picture, Shape

if TYPE_CHECKING:
    from matplotlib.artist import Artist
    from matplotlib.backend_bases import RendererBase
    from matplotlib.path import Path
    from matplotlib.text import Text
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
_FAMILY = re.compile(r"font-family: [^;]*; ")
_SPACE = re.compile(r"\s*([MLz])\s*")
_HALO = f"; paint-order: stroke; stroke: {COLOURS['paper']}; stroke-width: 3px"


def render(picture: Picture) -> str:
    """SVG text of `picture`, the same bytes each time, without an XML declaration, for use inside a page."""
    from matplotlib import rc_context
    from matplotlib.figure import Figure
    from matplotlib.transforms import Affine2D

    frame = picture.frame
    width, height = np.ceil(frame.right - frame.left), np.ceil(frame.bottom - frame.top)
    to_paper = Affine2D().translate(-frame.left, -frame.top).scale(1, -1).translate(0, height)
    out = StringIO()
    # rc_context puts the settings back, so nothing outside sees them; a missing glyph is the reader's to have
    settings = rc_context(
        {
            "svg.fonttype": "none",
            "svg.hashsalt": "calcgen",
            "path.simplify": False,
            "lines.scale_dashes": False,
            "font.family": ["DejaVu Sans"],
            "text.usetex": False,
        }
    )
    with settings, warnings.catch_warnings():
        warnings.filterwarnings("ignore", message="Glyph .* missing", category=UserWarning)
        figure = Figure(figsize=(width / 72, height / 72), dpi=72)  # one point is one pixel
        figure.patch.set_visible(False)
        for order, item in enumerate(picture.items):
            artist = _artist(item, to_paper)
            artist.set_zorder(order)
            figure.add_artist(artist)
        figure.savefig(out, format="svg", metadata={"Date": None})
    return _own(out.getvalue(), picture, float(width), float(height))


@cache
def _line_type() -> "type[Text]":
    """Return the artist of one line of text, without the layout of paragraphs, which takes most time."""
    from matplotlib.text import Text

    class Line(Text):
        def draw(self, renderer: "RendererBase") -> None:
            gc = renderer.new_gc()
            gc.set_foreground(self.get_color())
            x, up = self.get_transform().transform(self.get_position())
            y = renderer.get_canvas_width_height()[1] - up  # the renderer of SVG counts down
            renderer.open_group("text", self.get_gid())
            renderer.draw_text(
                gc, x, y, self.get_text(), self.get_fontproperties(), self.get_rotation(), mtext=self
            )
            renderer.close_group("text")
            gc.restore()

    return Line


def _artist(item: Shape | Label, to_paper: "Transform") -> "Artist":
    from matplotlib.patches import PathPatch

    if isinstance(item, Label):
        return _line_type()(
            round(item.x, 2),
            round(item.y, 2),
            item.text,
            color=COLOURS[item.colour],
            fontsize=item.size,
            fontweight="bold" if item.bold else "normal",
            ha=item.anchor,
            va="baseline",
            rotation=90 if item.turned else 0,
            rotation_mode="anchor",
            parse_math=False,
            transform=to_paper,
            gid="halo" if item.halo else None,
        )
    stroke = item.stroke
    patch = PathPatch(
        _path(item.rings, closed=item.closed),
        facecolor=COLOURS[item.fill] if item.fill else "none",
        edgecolor=COLOURS[stroke.colour] if stroke else "none",
        linewidth=stroke.weight if stroke else 0,
        linestyle=(0, stroke.dash) if stroke and stroke.dash else "solid",
        capstyle="butt",
        joinstyle="round",
        alpha=item.opacity if item.opacity < 1 else None,
        transform=to_paper,
    )
    if item.clip:
        patch.set_clip_path(_path(item.clip, closed=True), to_paper)
    return patch


def _path(rings: Iterable[tuple[Point, ...]], *, closed: bool) -> "Path":
    from matplotlib.path import Path

    vertices: list[Point] = []
    codes: list[np.uint8] = []
    for ring in rings:
        points = [*ring, ring[0]] if closed else list(ring)
        vertices += points
        codes += [Path.MOVETO] + [Path.LINETO] * (len(points) - 1)
        if closed:
            codes[-1] = Path.CLOSEPOLY
    return Path(np.round(vertices, 2), codes)


def _own(drawn: str, picture: Picture, width: float, height: float) -> str:
    """Keep what matplotlib drew, and make ids, colours and type the page's."""
    tree = ET.fromstring(drawn)  # noqa: S314  our own text of a moment ago
    ids: dict[str, str] = {}
    defined = []
    for clip in tree.iter(f"{_SVG}clipPath"):
        ids[clip.attrib["id"]] = own = f"{picture.ident}-clip-{len(ids) + 1}"
        defined.append(f'<clipPath id="{own}">{"".join(_path_text(path, ids) for path in clip)}</clipPath>')
    shown = []
    for group in tree.find(f"{_SVG}g") or ():
        for element in group:
            if element.tag == f"{_SVG}path":
                shown.append(_path_text(element, ids))
            elif element.tag == f"{_SVG}text":
                shown.append(_label_text(element, halo=group.get("id") == "halo"))
    ident = escape(picture.ident)
    return "\n".join(
        [
            f'<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 {width:g} {height:g}" role="img"'
            f' aria-labelledby="{ident}-title {ident}-desc"'
            f' style="max-width: {width:g}px; font-family: {FONT}; stroke-linejoin: round">',
            f'<title id="{ident}-title">{escape(picture.title)}</title>',
            f'<desc id="{ident}-desc">{escape(picture.description)}</desc>',
            *([f"<defs>{''.join(defined)}</defs>"] if defined else []),
            *shown,
            "</svg>\n",
        ]
    )


def _path_text(path: ET.Element, ids: dict[str, str]) -> str:
    outline = _SPACE.sub(r"\1", path.get("d", "")).strip()
    reference = path.get("clip-path", "")
    clip = f' clip-path="url(#{ids[reference[5:-1]]})"' if reference else ""
    style = path.get("style")
    return f'<path d="{outline}"{clip}{_style(style) if style else ""}/>'


def _label_text(text: ET.Element, *, halo: bool) -> str:
    style = _FAMILY.sub("", text.get("style", "")) + (_HALO if halo else "")
    turn = text.get("transform", "")
    turned = "" if turn.startswith("rotate(-0 ") else f' transform="{turn}"'
    place = f'x="{text.get("x")}" y="{text.get("y")}"'
    return f"<text {place}{turned}{_style(style)}>{escape(text.text or '')}</text>"


def _style(style: str) -> str:
    named = _COLOUR.sub(lambda found: _VARIABLE[found[0]], style.replace("; stroke-linejoin: round", ""))
    return f' style="{named.replace("; stroke-dashoffset: 0", "")}"'
