"""A calc as read: its title, and prose and blocks in order."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass, fields, is_dataclass
from functools import cache, cached_property

from markdown_it.token import Token

from calcgen.language.blocks import Block as Block
from calcgen.language.nodes import Column
from calcgen.language.nodes import Place as Place
from calcgen.text import Diagnostic, SourceFile, Span


@dataclass(frozen=True)
class Prose:
    """A run of CommonMark between live blocks, as tokens.

    Inline tokens of type 'value' (content: the dotted canonical name and arguments as typed) stand for
    places; 'math_inline' and 'math_block' for TeX. `places` lists the places, so that evaluation can look
    them up: the n-th 'value' token of the run belongs to the n-th place.
    """

    tokens: tuple[Token, ...]
    places: tuple[Place, ...]
    images: tuple[tuple[str, Span], ...]
    span: Span


@dataclass(frozen=True)
class FailedBlock:
    """A live block of which nothing can be used: its kind is not available yet, or its head is wrong."""

    kind: str
    span: Span


@dataclass(frozen=True)
class Calc:
    """One calc file as read.

    `number` is the file's stem, `title` the text of its first level-1 heading (the number when there is
    none). `segments` leaves the title's heading out. `diagnostics` are those of reading.
    """

    number: str
    title: str
    source: SourceFile
    segments: tuple[Prose | Block | FailedBlock, ...]
    failed_names: frozenset[str]
    diagnostics: tuple[Diagnostic, ...]

    @cached_property
    def columns(self) -> tuple[Column, ...]:
        """The second and third columns of the lines of live blocks, in the order of the nodes."""
        return tuple(c for s in self.segments if not isinstance(s, Prose) for c in _columns(s))


def _columns(node: object) -> Iterator[Column]:
    if isinstance(node, Column):
        yield node
    elif isinstance(node, tuple):
        for item in node:
            yield from _columns(item)
    else:
        kind: type = type(node)
        for name in _parts(kind):
            yield from _columns(getattr(node, name))


@cache
def _parts(kind: type) -> tuple[str, ...]:
    """Return the names of what a node of this type is made of: asked for hundreds of thousands of nodes."""
    return tuple(part.name for part in fields(kind)) if is_dataclass(kind) else ()
