"""Prose -> HTML: CommonMark with values, mathematics, links that are safe, images of the project."""

from __future__ import annotations

import hashlib
import posixpath
import re
from collections.abc import Mapping, Sequence
from html import escape
from typing import Any
from urllib.parse import SplitResult, unquote, urlsplit

from markdown_it.renderer import RendererHTML
from markdown_it.token import Token
from markdown_it.utils import OptionsDict
from markupsafe import Markup

from calcgen.evaluation.results import ProseResult
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

    def render_prose(self, result: ProseResult) -> Markup:
        """Return a run of prose; the n-th value stands at the n-th place."""
        self._values = list(result.values)
        tokens = self._levelled(result.prose.tokens)
        return Markup(self.render(tokens, parser().options, {}))  # noqa: S704 - html is off

    def _levelled(self, tokens: Sequence[Token]) -> list[Token]:
        """Return the tokens with headings below the title's, none of which skips a level."""
        levelled = []
        heading = ""
        for token in tokens:
            if token.type == "heading_open":
                self._level = min(max(2, int(token.tag[1:])), self._level + 1)
                heading = f"h{self._level}"
            levelled.append(token.copy(tag=heading) if token.type.startswith("heading_") else token)
        return levelled

    # The names of these methods are types of tokens, by which the renderer finds them.

    def value(self, tokens: Sequence[Token], idx: int, options: OptionsDict, env: Any) -> str:
        """Render the value of a name."""
        shown = self._values.pop(0) if self._values else None
        name = tokens[idx].content
        if shown is None:
            return f'<span class="missing">{escape(name)} has no value</span>'
        anchor = nearest_anchor(name, self._anchors)
        if not anchor:
            return f'<span class="value">{escape(shown.text)}</span>'
        return f'<a class="value" href="{link("", anchor)}">{escape(shown.text)}</a>'

    def math_inline(self, tokens: Sequence[Token], idx: int, options: OptionsDict, env: Any) -> str:
        """Render `$...$`."""
        return _mathematics(tokens[idx].content, block=False)

    def math_inline_double(self, tokens: Sequence[Token], idx: int, options: OptionsDict, env: Any) -> str:
        """Render `$$...$$` within a line."""
        return _mathematics(tokens[idx].content, block=False)

    def math_block(self, tokens: Sequence[Token], idx: int, options: OptionsDict, env: Any) -> str:
        """Render a paragraph of mathematics."""
        return f'<div class="scrolls">{_mathematics(tokens[idx].content, block=True)}</div>\n'

    def image(self, tokens: Sequence[Token], idx: int, options: OptionsDict, env: Any) -> str:
        """Render an image of the project; its description where the file is none."""
        token = tokens[idx]
        description = self.renderInlineAsText(token.children or [], options, env)
        path = image_path(self._path, str(token.attrGet("src") or ""))
        asset = self._images.get(path) if path is not None else None
        if asset is None:
            return f'<span class="missing">image not found: {escape(description or str(path or ""))}</span>'
        return f'<img src="{link(asset)}" alt="{escape(description)}">'

    def link_open(self, tokens: Sequence[Token], idx: int, options: OptionsDict, env: Any) -> str:
        """Render a link; one that leads nowhere in the package keeps its text alone."""
        href = self._href(str(tokens[idx].attrGet("href") or ""))
        if href is None:
            self._closing.append("")
            return ""
        self._closing.append("</a>")
        return f'<a href="{escape(href)}">'

    def link_close(self, tokens: Sequence[Token], idx: int, options: OptionsDict, env: Any) -> str:
        """Render the end of a link."""
        return self._closing.pop() if self._closing else ""

    def table_open(self, tokens: Sequence[Token], idx: int, options: OptionsDict, env: Any) -> str:
        """Render the start of a table, which scrolls within its own width."""
        return '<div class="scrolls"><table>\n'

    def table_close(self, tokens: Sequence[Token], idx: int, options: OptionsDict, env: Any) -> str:
        """Render the end of a table."""
        return "</table></div>\n"

    def th_open(self, tokens: Sequence[Token], idx: int, options: OptionsDict, env: Any) -> str:
        """Render the head of a column."""
        return f'<th scope="col"{_alignment(tokens[idx])}>'

    def td_open(self, tokens: Sequence[Token], idx: int, options: OptionsDict, env: Any) -> str:
        """Render a cell."""
        return f"<td{_alignment(tokens[idx])}>"

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


def _alignment(token: Token) -> str:
    style = str(token.attrGet("style") or "")
    match = re.fullmatch(r"text-align:(left|right|center)", style)
    return f' class="{match[1]}"' if match else ""


def _mathematics(tex: str, *, block: bool) -> str:
    found = mathml_of(tex, block=block)
    if found is not None:
        return found
    return f'<code class="missing">{escape(tex.strip())}</code> <span class="missing">(not readable as TeX)</span>'
