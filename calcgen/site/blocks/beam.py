"""`beam`: its lines, figures, results by group, premises, the second route."""

from __future__ import annotations

import re
from collections.abc import Iterable
from dataclasses import dataclass

from markupsafe import Markup

from calcgen.evaluation.results.beam import BeamResult, CombinationResult, GroupResult
from calcgen.evaluation.results.common import Premise, Result
from calcgen.language.nodes import Column
from calcgen.quantities.symbols import canonical, plain
from calcgen.site.addresses import result_anchor
from calcgen.site.context import Context
from calcgen.site.equations import Equation, combination, stated
from calcgen.site.figure import FigureSvg
from calcgen.site.mathml import symbol
from calcgen.site.views import RouteRow, RowView, ValueRow, result_row, route_row

_FURTHER = re.compile(r"θ_|w_rel_|x_[MV]_0_")  # others stand in the table by another name, or are of one span


@dataclass(frozen=True)
class BeamLineView:
    """A line of the block: its words as read, or a combination with its factors."""

    row: RowView
    word: str
    text: str
    equation: Equation | None = None


@dataclass(frozen=True)
class GroupView:
    """A group of combinations and its results; the name is empty where all cases act together.

    `further` are rotations at supports, deflections from the chords, and where M and V change sign.
    """

    name: str
    combinations: str
    results: tuple[ValueRow, ...]
    further: tuple[ValueRow, ...]


@dataclass(frozen=True)
class BeamView:
    """A beam."""

    name: str
    row: RowView
    section: str
    settings: tuple[Equation, ...]
    lines: tuple[BeamLineView, ...]
    figures: tuple[FigureSvg, ...]
    groups: tuple[GroupView, ...]
    premises: tuple[Premise, ...]
    second_route: tuple[RouteRow, ...]
    template: str = "blocks/beam.html"


def beam_view(result: BeamResult, context: Context) -> BeamView:
    """Return a beam."""
    return BeamView(
        name=result.name,
        row=RowView(result.name, Markup(""), Markup(""), result.line, context.was(result.name)),
        section=result.section,
        settings=tuple(stated(s.name, s.shown) for s in result.settings),
        lines=tuple(_line(result, *line, context) for line in result.lines),
        figures=context.figures(result.name),
        groups=tuple(_group(result, group) for group in result.groups),
        premises=result.premises,
        second_route=tuple(route_row(r) for r in result.second_route),
    )


def _line(
    beam: BeamResult, typed: str, note: Column, reference: Column, number: int, context: Context
) -> BeamLineView:
    """Return a line of the block: loads and combinations as read, all others as typed."""
    row = RowView("", context.words(note), context.words(reference), number)
    word, _, rest = typed.partition(" ")
    for load in beam.loads:
        if load.line == number:
            sideways = "lateral " if load.plane == "lateral" else ""
            kind = load.kind.replace("_", " ")
            return BeamLineView(row, f"load {plain(load.case)}", f"{sideways}{kind} {load.text}")
    for solved in _combinations(beam):
        if word == "combination" and canonical(rest.split(maxsplit=1)[0]) == solved.name:
            return BeamLineView(row, "combination", "", _factors(solved))
    return BeamLineView(row, word, rest)


def _combinations(beam: BeamResult) -> tuple[CombinationResult, ...]:
    return tuple(c for group in beam.groups for c in group.combinations if c.name)


def _factors(solved: CombinationResult) -> Equation:
    """Return a combination as the sum of its cases with their factors."""
    terms: list[str] = []
    for case, factor in solved.factors.items():
        size = f"{abs(factor):.12g}"
        sign = '<mo form="infix">−</mo>' if factor < 0 else '<mo form="infix">+</mo>' if terms else ""
        times = "" if size == "1" else f'<mn>{size}</mn><mspace width="0.17em"/>'
        terms.append(f"{sign}{times}{symbol(case)}")
    return combination(solved.name, terms)


def _group(beam: BeamResult, group: GroupResult) -> GroupView:
    names = [plain(c.name) for c in group.combinations if c.name]
    alone = names == [plain(group.name)]

    def rows(results: Iterable[Result]) -> tuple[ValueRow, ...]:
        return tuple(result_row(r, result_anchor(beam.name, group.name, r.name), beam.line) for r in results)

    return GroupView(
        name=plain(group.name) if group.name else "",
        combinations="" if alone else ", ".join(names),
        results=rows(group.results),
        further=rows(r for r in group.further if _FURTHER.match(r.name)),
    )
