"""Live blocks: one file a kind, and the one table that lists them."""

from __future__ import annotations

from collections.abc import Callable
from typing import TypeAlias

from calcgen.language.blocks.assumptions import AssumptionsBlock, read_assumptions
from calcgen.language.blocks.beam import BeamBlock
from calcgen.language.blocks.beam_lines import read_beam
from calcgen.language.blocks.inputs import InputsBlock, read_inputs
from calcgen.language.blocks.reading import BlockText, Outcome
from calcgen.language.blocks.section import SectionBlock, read_section
from calcgen.language.blocks.sheet import SheetBlock, read_sheet
from calcgen.language.blocks.stress import StressBlock, read_stress
from calcgen.language.blocks.table import TableBlock, read_table
from calcgen.language.blocks.vary import VaryBlock, read_vary
from calcgen.language.blocks.working import WorkingBlock, read_working
from calcgen.text import Report

Block: TypeAlias = (
    SheetBlock
    | AssumptionsBlock
    | InputsBlock
    | WorkingBlock
    | SectionBlock
    | BeamBlock
    | StressBlock
    | TableBlock
    | VaryBlock
)

READERS: dict[str, Callable[[BlockText, Report], Outcome[Block]]] = {
    "sheet": read_sheet,
    "assumptions": read_assumptions,
    "inputs": read_inputs,
    "working": read_working,
    "section": read_section,
    "beam": read_beam,
    "stress": read_stress,
    "table": read_table,
    "vary": read_vary,
}
"""Kinds of block that are read, each with its reader."""

NAMED = frozenset({"section", "beam", "stress", "table"})
"""Kinds whose head carries a name."""

ROWED = frozenset({"table"})
"""Kinds with rows of cells instead of lines of three columns, and a reference in their head."""

LATER = ("method", "takes", "proof")
"""Kinds of the language that are answered 'not available yet'."""
