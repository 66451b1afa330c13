"""`assumptions`: number | text | basis."""

from __future__ import annotations

from dataclasses import dataclass

from calcgen.language.blocks.reading import BlockText, Outcome, only_once, read_each
from calcgen.language.cursor import Cursor
from calcgen.language.errors import ReadingError
from calcgen.language.lines import Line
from calcgen.language.nodes import Column, Named
from calcgen.text import Report, Span


@dataclass(frozen=True)
class Assumption:
    """One assumption; it is open while its basis starts with 'to be confirmed'."""

    number: str
    text: Column
    basis: Column
    span: Span

    @property
    def open(self) -> bool:
        """Whether it is still to be confirmed."""
        return self.basis.text.casefold().startswith("to be confirmed")


@dataclass(frozen=True)
class AssumptionsBlock:
    """The assumptions of one block."""

    items: tuple[Assumption, ...]
    span: Span


def read_assumptions(block: BlockText, report: Report) -> Outcome[AssumptionsBlock]:
    """Read `A1 | text | basis`."""
    seen: dict[str, Span] = {}

    def read(line: Line, _: Cursor) -> Assumption:
        number = line.statement_text
        only_once(Named(number, line.statement_span), seen, "assumption")
        if not line.annotations.note.text:
            raise ReadingError(
                "empty-assumption",
                line.span,
                f"the assumption '{number}' says nothing",
                hint="write A1 | what is assumed | on what basis",
            )
        return Assumption(number, line.annotations.note, line.annotations.reference, line.span)

    items, _ = read_each(block.lines, report, read)
    return Outcome(AssumptionsBlock(tuple(items), block.span))
