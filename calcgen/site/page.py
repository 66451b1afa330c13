"""What is written to the package: pages that a template lays out, and files as they are."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TypeAlias


@dataclass(frozen=True)
class Frame:
    """What every page of a package shows around its content.

    Attributes
    ----------
    pages : (text, path) of the pages that every page leads to.
    program : name and version; built may be empty.
    """

    project: str
    number: str
    pages: tuple[tuple[str, str], ...]
    program: str
    built: str


@dataclass(frozen=True)
class HtmlPage:
    """A page.

    Attributes
    ----------
    path : in the package, with '/'.
    title : of the document, and after the project's in the running head.
    content : the view that the template shows.
    digest : of the sources behind the page, in hexadecimal.
    head : of the printed sheets.
    """

    path: str
    template: str
    title: str
    content: object
    frame: Frame
    digest: str
    head: str

    @property
    def root(self) -> str:
        """The way from the page to the root of the package."""
        return "../" * self.path.count("/")


@dataclass(frozen=True)
class FilePage:
    """A file written as it is."""

    path: str
    content: bytes


Page: TypeAlias = HtmlPage | FilePage
