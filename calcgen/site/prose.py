"""Prose -> HTML: CommonMark with values, mathematics, links that are safe, images of the project."""

from __future__ import annotations

import hashlib
import posixpath
import re
from collections.abc import Callable, Mapping, Sequence
from html import escape
from types import MethodType
from urllib.parse import SplitResult, unquote, urlsplit

from markdown_it.renderer import RendererHTML
from markdown_it.token import Token
from markupsafe import Markup

from calcgen.evaluation.results.lines import ProseResult
from calcgen.language.markdown import parser
from calcgen.quantities.display import Shown
from calcgen.site.addresses import calc_page, link, nearest_anchor
from calcgen.site.tex import mathml_of

_IMAGES = frozenset({".png", ".jpg", ".jpeg", ".gif", ".webp", ".svg"})


def image_path(calc: str, source: str) -> str | None:
    """Return the path in the project of an image that a calc shows, or None where it is no file of it.

    `calc` is the path of the calc's file, to which `source` is relative.
    """
    parts = _split(source)
    if parts is None or parts.scheme or parts.netloc or not parts.path or parts.path.startswith("/"):
        return None
    path = posixpath.normpath(posixpath.join(posixpath.dirname(calc), unquote(parts.path)))
    return None if path.startswith("..") else path


def image_asset(path: str, data: bytes) -> str | None:
    """Return the path in the package of an image, which tells its content; None where it is no image."""
    suffix = posixpath.splitext(path)[1].lower()
    if suffix not in _IMAGES:
        return None
    return f"assets/images/{hashlib.sha256(data).hexdigest()[:16]}{suffix}"


class ProseRenderer(RendererHTML):
    """Renders the prose of one calc from top to bottom.

    Parameters
    ----------
    path : of the calc's file in the project.
    images : path in the package by path in the project.
    calcs : numbers of the calcs that have a page.
    anchors : those on the calc's page.
    """

    def __init__(
        self, path: str, images: Mapping[str, str], calcs: frozenset[str], anchors: frozenset[str]
    ) -> None:
        super().__init__()
        self._path = path
        self._images = images
        self._calcs = calcs
        self._anchors = anchors
        self._values: list[Shown | None] = []
        self._level = 1
        self._closing: list[str] = []
        own: dict[str, Callable[[Token], str]] = {
            "value": self._value,
            "math_inline": lambda token: _mathematics(token.content, block=False),
            "math_inline_double": lambda token: _mathematics(token.content, block=False),
            "math_block": lambda token: (
                f'<div class="scrolls">{_mathematics(token.content, block=True)}</div>\n'
            ),
            "image": self._image,
            "link_open": self._link_open,
            "link_close": lambda _: self._closing.pop(),
            "table_open": lambda _: '<div class="scrolls"><table>\n',
            "table_close": lambda _: "</table></div>\n",
            "th_open": lambda token: f'<th scope="col"{_alignment(token)}>',
            "td_open": lambda token: f"<td{_alignment(token)}>",
        }
        self.rules |= {kind: _rule(write, self) for kind, write in own.items()}

    def render_prose(self, result: ProseResult) -> Markup:
        """Return a run of prose; the n-th value stands at the n-th place."""
        self._values = list(result.values)
        tokens = self._levelled(result.prose.tokens)
        return Markup(self.render(tokens, parser().options, {}))  # noqa: S704 - raw HTML is off

    def _levelled(self, tokens: Sequence[Token]) -> list[Token]:
        """Return the tokens with headings below the title's, none of which skips a level."""
        levelled = []
        for token in tokens:
            if token.type == "heading_open":
                self._level = min(max(2, int(token.tag[1:])), self._level + 1)
            heading = token.type in ("heading_open", "heading_close")
            levelled.append(token.copy(tag=f"h{self._level}") if heading else token)
        return levelled

    def _value(self, token: Token) -> str:
        shown, name = self._values.pop(0), token.content
        if shown is None:
            return f'<span class="missing">{escape(name)} has no value</span>'
        anchor = nearest_anchor(name, self._anchors)
        if not anchor:
            return f'<span class="value">{escape(shown.text)}</span>'
        return f'<a class="value" href="{link("", anchor)}">{escape(shown.text)}</a>'

    def _image(self, token: Token) -> str:
        """Return an image of the project; its description where the file is none."""
        description = self.renderInlineAsText(token.children or [], parser().options, {})
        path = image_path(self._path, str(token.attrGet("src") or ""))
        asset = self._images.get(path) if path is not None else None
        if asset is None:
            return f'<span class="missing">image not found: {escape(description or str(path or ""))}</span>'
        return f'<img src="{link(asset)}" alt="{escape(description)}">'

    def _link_open(self, token: Token) -> str:
        """Return the start of a link; one that leads nowhere in the package keeps its text alone."""
        href = self._href(str(token.attrGet("href") or ""))
        self._closing.append("" if href is None else "</a>")
        return "" if href is None else f'<a href="{escape(href)}">'

    def _href(self, target: str) -> str | None:
        parts = _split(target)
        if parts is None:
            return None
        if parts.scheme in ("http", "https", "mailto"):
            return target
        if parts.scheme or parts.netloc:
            return None
        if not parts.path:
            return target if parts.fragment else None
        match = re.fullmatch(r"(?:.*/)?([A-Za-z][A-Za-z0-9-]*)\.(?:md|html)", unquote(parts.path))
        if match and match[1] in self._calcs:
            return link(calc_page(match[1]), unquote(parts.fragment))
        return None


def _split(target: str) -> SplitResult | None:
    try:
        return urlsplit(target)
    except ValueError:  # no address at all
        return None


def _rule(write: Callable[[Token], str], renderer: RendererHTML) -> MethodType:
    """Return a rule as the renderer calls it."""

    def rule(_self: RendererHTML, tokens: Sequence[Token], index: int, _options: object, _env: object) -> str:
        return write(tokens[index])

    return MethodType(rule, renderer)


def _alignment(token: Token) -> str:
    style = str(token.attrGet("style") or "")
    match = re.fullmatch(r"text-align:(left|right|center)", style)
    return f' class="{match[1]}"' if match else ""


def _mathematics(tex: str, *, block: bool) -> str:
    found = mathml_of(tex, block=block)
    if found is not None:
        return f'<div class="scrolls">{found}</div>\n' if block else found
    return f'<code class="missing">{escape(tex.strip())}</code> <span>(not readable as TeX)</span>'
