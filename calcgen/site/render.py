"""Pages -> bytes: jinja templates with autoescape, in which an unknown name is an error."""

from __future__ import annotations

import re
from collections.abc import Iterable
from functools import cache
from importlib.resources import files
from pathlib import Path
from urllib.parse import quote

from jinja2 import Environment, FileSystemLoader, StrictUndefined

from calcgen.site.page import FilePage, HtmlPage, Page


class Rendered:
    """The bytes of pages: a page that is the same object as before is not laid out again."""

    def __init__(self) -> None:
        self._kept: dict[str, tuple[HtmlPage, bytes]] = {}

    def bytes_of(self, page: HtmlPage) -> bytes:
        """Return the bytes of a page."""
        kept = self._kept.get(page.path)
        if kept is None or kept[0] is not page:
            template = _environment().get_template(page.template)
            text = template.render(page=page, frame=page.frame, root=page.root, content=page.content)
            kept = self._kept[page.path] = (page, text.encode())
        return kept[1]


def render(pages: Iterable[Page], rendered_before: Rendered | None = None) -> dict[str, bytes]:
    """Return the contents of a package by path: its pages, its files, and the shared assets."""
    rendered = dict(_assets())
    before = rendered_before or Rendered()
    for page in pages:
        if isinstance(page, FilePage):
            rendered[page.path] = page.content
        else:
            rendered[page.path] = before.bytes_of(page)
    return rendered


@cache
def template_folder() -> Path:
    """Return the folder of templates and assets: within the installed package, or beside it in the tree."""
    package = Path(str(files("calcgen")))
    within, beside = package / "site_templates", package.parent / "site_templates"
    return within if within.is_dir() else beside


@cache
def _environment() -> Environment:
    environment = Environment(
        loader=FileSystemLoader(template_folder()),
        autoescape=True,
        undefined=StrictUndefined,
        trim_blocks=True,
        lstrip_blocks=True,
        keep_trailing_newline=True,
    )
    environment.filters["css_text"] = _css_text
    environment.filters["anchor"] = quote
    return environment


@cache
def _assets() -> tuple[tuple[str, bytes], ...]:
    """Return style sheet, script and fonts with their licences."""
    root = template_folder()
    found = sorted(p for p in (root / "assets").rglob("*") if p.is_file())
    return tuple((p.relative_to(root).as_posix(), p.read_bytes()) for p in found)


def _css_text(text: str) -> str:
    r"""Return a text as the inside of a CSS string; what could end it, or the style, is written as \hex."""
    return re.sub(r"[^\w .,;:()·–—-]", lambda m: f"\\{ord(m[0]):x} ", text)
