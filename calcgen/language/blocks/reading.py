"""What the readers of blocks share: the text they get, what they return, and a loop over lines."""

from __future__ import annotations

from collections.abc import Callable, Iterable
from dataclasses import dataclass
from typing import Generic, TypeVar

from calcgen.language.cursor import Cursor
from calcgen.language.errors import ReadingError
from calcgen.language.lines import Line
from calcgen.language.names import defined_names
from calcgen.language.nodes import Column, Named
from calcgen.text import Related, Report, Span, nearest

NodeT = TypeVar("NodeT")
BlockT_co = TypeVar("BlockT_co", covariant=True)


@dataclass(frozen=True)
class BlockText:
    """A live block as it stands in the file: its head and its lines.

    Attributes
    ----------
    reference : what the head says after '|', in kinds that have rows; None without it.
    """

    kind: str
    name: Named | None
    head_span: Span
    span: Span
    lines: tuple[Line, ...]
    reference: Column | None = None

    @property
    def target(self) -> Named:
        """The name of a block whose kind has one."""
        if self.name is None:
            raise TypeError(f"a {self.kind} block is read with its name")
        return self.name


@dataclass(frozen=True)
class Outcome(Generic[BlockT_co]):
    """What a reader made of a block.

    Attributes
    ----------
    block : None where nothing of the block can be used.
    failed_names : names that lines in error, or a block in error, would have defined.
    """

    block: BlockT_co | None
    failed_names: frozenset[str] = frozenset()


def read_each(
    lines: Iterable[Line],
    report: Report,
    read: Callable[[Line, Cursor], NodeT],
    stops: frozenset[str] = frozenset(),
) -> tuple[list[NodeT], list[Line]]:
    """Read line by line; return the nodes, and the lines whose fault was reported."""
    nodes: list[NodeT] = []
    failed: list[Line] = []
    for line in lines:
        try:
            if not line.statement.text:
                raise ReadingError(
                    "empty-statement",
                    line.span,
                    "the first column is empty",
                    hint="statement | what it is | where it comes from",
                )
            nodes.append(read(line, Cursor(line.statement, stops)))
        except ReadingError as fault:
            fault.report_to(report)
            failed.append(line)
    return nodes, failed


def names_of(lines: Iterable[Line]) -> frozenset[str]:
    """Return the names that lines in error would have defined."""
    return frozenset[str]().union(*(defined_names(line.statement.text) for line in lines))


def one_of(word: str, span: Span, known: Iterable[str], what: str) -> None:
    """Raise where a word is not one of those that are possible."""
    words = tuple(known)
    if word in words:
        return
    found = nearest(word, words)
    hint = f"the nearest is '{found}'; " if found else ""
    raise ReadingError(
        "unknown-word", span, f"'{word}' is no {what}", hint=f"{hint}possible are {', '.join(words)}"
    )


def only_once(key: Named, seen: dict[str, Span], what: str) -> None:
    """Raise where a key stands a second time in a block; remember it otherwise."""
    if key.name in seen:
        raise ReadingError(
            "written-twice",
            key.span,
            f"the {what} '{key.name}' stands twice in this block",
            related=(Related(seen[key.name], "the first time"),),
        )
    seen[key.name] = key.span


def not_available_yet(what: str, span: Span) -> ReadingError:
    """Return the answer to what the language has and this release does not evaluate."""
    return ReadingError("not-available-yet", span, f"{what} is not available yet")
