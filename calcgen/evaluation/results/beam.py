"""A beam with its loads, combinations and groups."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass
from typing import Literal, TypeAlias

from calcgen.evaluation.blocks.beam_states import States
from calcgen.evaluation.combination_sets.standard import Expression as StandardExpression
from calcgen.evaluation.results.common import Premise, Result, SecondRoute
from calcgen.language.nodes import Column
from calcgen.mechanics.beam import BeamModel, Plane
from calcgen.mechanics.beam.results import Side
from calcgen.mechanics.influence import InfluenceLine
from calcgen.text import Span

Listing: TypeAlias = Callable[[], tuple[tuple[Result, ...], tuple[Result, ...]]]
"""Gives the named results: those that a table shows, and further ones; found once, when first asked for."""


@dataclass(frozen=True)
class CombinationResult:
    """One combination with the factor of each case, its states, and every named result of it.

    One that a set generates has no list of results: they are many, and each is read by its name.
    """

    name: str
    factors: Mapping[str, float]
    states: States
    listing: Listing

    @property
    def results(self) -> tuple[Result, ...]:
        """Every named result of it."""
        shown, further = self.listing()
        return (*shown, *further)


@dataclass(frozen=True)
class Along:
    """The largest and the smallest moment at a place; the `place` of each result tells what causes it."""

    at: str
    high: Result
    low: Result


@dataclass(frozen=True)
class GroupResult:
    """A group of combinations ('' is the beam itself: all cases together).

    `along` gives the moments along the beam, with what causes each, where trains change that from place to
    place; nothing where none crosses.
    """

    name: str
    combinations: tuple[CombinationResult, ...]
    states: States
    listing: Listing
    along: Callable[[], tuple[Along, ...]]

    @property
    def results(self) -> tuple[Result, ...]:
        """The results that its table shows."""
        return self.listing()[0]

    @property
    def further(self) -> tuple[Result, ...]:
        """The same under names that the table does not use."""
        return self.listing()[1]


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
class Ordinate:
    """An ordinate of an influence line: unit load at `x`, m, `place` as read; at a jump on one `side`."""

    x: float
    place: str
    side: Side | None
    result: Result


@dataclass(frozen=True, eq=False)
class InfluenceResult:
    """An influence line: what a unit load does, as a function of the load's place.

    `of` is what it is of, as read: 'M at 7 m'; `meaning` that in words with its sign; `load` the plane of the
    unit load; `place` where the effect is felt, m. `unit` is that of ordinates. `results` are its extremes
    and areas, `further` the places of the load for the extremes; `ordinates` those at tenths of the fields
    between supports, at hinges and at the places that the lines of the beam are of.
    """

    name: str
    of: str
    meaning: str
    load: Plane
    place: float
    line: InfluenceLine
    unit: str
    results: tuple[Result, ...]
    further: tuple[Result, ...]
    ordinates: tuple[Ordinate, ...]
    line_number: int


@dataclass(frozen=True)
class FactorRow:
    """Factors of combination sets in force: symbols with values, what they are, where they come from."""

    values: tuple[tuple[str, float], ...]
    meaning: str
    source: str


@dataclass(frozen=True)
class SetCombination:
    """A generated combination: its factors, the number of its expression in the set, the cases that lead."""

    name: str
    factors: Mapping[str, float]
    expression: int
    leading: tuple[str, ...]


@dataclass(frozen=True)
class SetResult:
    """A standard combination set as generated for a beam.

    `group` is what its combinations are a group of, `name` that of the set; `cases` those that it takes, by
    their symbol in the standard; `remarks` say how cases act together, and which are left out.
    """

    group: str
    name: str
    cases: Mapping[str, tuple[str, ...]]
    expressions: tuple[StandardExpression, ...]
    combinations: tuple[SetCombination, ...]
    remarks: tuple[str, ...]
    line: int


@dataclass(frozen=True)
class BeamResult:
    """A beam with its model, loads, and results by group; numbers in SI.

    `spans` are the stretches of the `span` line, from and to; `support_kinds` has the word of each support of
    the model, `support_notes` how it settles, vertically and sideways; `patterned` the cases that act on
    adverse spans alone; `lines` each line as typed, with its columns; `influences` its influence lines, which
    belong to no combination; `sets` its standard combination sets, and `set_factors` what they take;
    `section_names` the section of each stretch of the model, '' where it has EI alone; `compare` asks the
    second route.
    """

    name: str
    section: str
    model: BeamModel
    spans: tuple[tuple[float, float], ...]
    support_kinds: tuple[str, ...]
    support_notes: tuple[tuple[str, str], ...]
    case_kinds: Mapping[str, str]
    patterned: frozenset[str]
    loads: tuple[LoadRow, ...]
    groups: tuple[GroupResult, ...]
    settings: tuple[Result, ...]
    restrained: bool | None
    premises: tuple[Premise, ...]
    compare: Callable[[], tuple[SecondRoute, ...]]
    lines: tuple[tuple[str, Column, Column, int], ...]
    line: int
    span: Span
    influences: tuple[InfluenceResult, ...] = ()
    sets: tuple[SetResult, ...] = ()
    set_factors: tuple[FactorRow, ...] = ()
    section_names: tuple[str, ...] = ()

    @property
    def second_route(self) -> tuple[SecondRoute, ...]:
        """What the second route finds; found once, when first asked for."""
        return self.compare()
