"""`assumptions`: number | text | basis."""

from __future__ import annotations

from dataclasses import dataclass

from calcgen.language.nodes import Column
from calcgen.text import Span


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
