"""A beam with its loads, combinations and groups."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from typing import Literal

from calcgen.evaluation.blocks.beam_states import States
from calcgen.evaluation.results.common import Premise, Result, SecondRoute
from calcgen.language.nodes import Column
from calcgen.mechanics.beam import BeamModel
from calcgen.text import Span


@dataclass(frozen=True)
class CombinationResult:
    """One combination with the factor of each case, its states, and every named result of it."""

    name: str
    factors: Mapping[str, float]
    states: States
    results: tuple[Result, ...]


@dataclass(frozen=True)
class GroupResult:
    """A group of combinations ('' is the beam itself: all cases together).

    `results` are shown in its table; `further` are the same under names that the table does not use.
    """

    name: str
    combinations: tuple[CombinationResult, ...]
    states: States
    results: tuple[Result, ...]
    further: tuple[Result, ...]


@dataclass(frozen=True)
class LoadRow:
    """One load as shown: '5.0 kN/m from 6 m to 14 m'; `label` its size alone; `values` in SI, places in m.

    A train has the load of each axle in `values`, and `number` counts the trains of its case, from 0.
    """

    case: str
    kind: str
    plane: Literal["vertical", "lateral"]
    text: str
    label: str
    values: tuple[float, ...]
    start: float
    end: float
    note: Column
    reference: Column
    line: int
    number: int = 0


@dataclass(frozen=True)
class BeamResult:
    """A beam with its model, loads, and results by group; numbers in SI.

    `spans` are the stretches of the `span` line, from and to; `support_kinds` has the word of each support of
    the model, `support_notes` how it settles; `patterned` the cases that act on adverse spans alone; `lines`
    each line as typed, with its columns.
    """

    name: str
    section: str
    model: BeamModel
    spans: tuple[tuple[float, float], ...]
    support_kinds: tuple[str, ...]
    support_notes: tuple[str, ...]
    case_kinds: Mapping[str, str]
    patterned: frozenset[str]
    loads: tuple[LoadRow, ...]
    groups: tuple[GroupResult, ...]
    settings: tuple[Result, ...]
    restrained: bool | None
    premises: tuple[Premise, ...]
    second_route: tuple[SecondRoute, ...]
    lines: tuple[tuple[str, Column, Column, int], ...]
    line: int
    span: Span
