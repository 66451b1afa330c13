"""`beam`: its lines, figures, results by group, premises, the second route."""

from __future__ import annotations

import re
from collections.abc import Iterable, Sequence
from dataclasses import dataclass

from markupsafe import Markup

from calcgen.evaluation.results.beam import BeamResult, CombinationResult, GroupResult, InfluenceResult
from calcgen.evaluation.results.common import Premise, Result
from calcgen.language.nodes import Column
from calcgen.mechanics.beam.results import Side
from calcgen.quantities.symbols import canonical, plain
from calcgen.site.addresses import result_anchor
from calcgen.site.blocks.beam_sets import SetView, factor_rows, set_view
from calcgen.site.context import Context
from calcgen.site.equations import Equation, combination, stated
from calcgen.site.figure import FigureSvg
from calcgen.site.mathml import symbol
from calcgen.site.views import RouteRow, RowView, ValueRow, lettered, result_row, route_row

# Others stand in the table by another name, or are extremes of one span.
_FURTHER = re.compile(r"θ_|w_rel_|x_[MV]_0_|(span_\d+\.)?C_[b1]$")


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

    `further` are rotations at supports, deflections from the chords, where M and V change sign, and moment
    shape factors; `generated` the standard set that the group has.
    """

    name: str
    combinations: str
    results: tuple[ValueRow, ...]
    further: tuple[ValueRow, ...]
    generated: SetView | None = None
    along: tuple[tuple[str, str, str, str, str], ...] = ()
    """Place, largest moment and its cause, smallest moment and its cause."""


@dataclass(frozen=True)
class OrdinatesView:
    """Ordinates of influence lines: a head for each line, and a row for each place of the unit load.

    A row has the place and the ordinate of each line; where one of them jumps there are two rows.
    """

    heads: tuple[Markup, ...]
    rows: tuple[tuple[str, tuple[str, ...]], ...]


@dataclass(frozen=True)
class BeamView:
    """A beam."""

    name: str
    row: RowView
    section: str
    settings: tuple[Equation, ...]
    lines: tuple[BeamLineView, ...]
    figures: tuple[FigureSvg, ...]
    set_factors: tuple[ValueRow, ...]
    groups: tuple[GroupView, ...]
    influences: tuple[ValueRow, ...]
    ordinates: OrdinatesView | None
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
        set_factors=factor_rows(result),
        groups=tuple(_group(result, group) for group in result.groups),
        influences=tuple(
            result_row(r, result_anchor(result.name, "", r.name), line.line_number)
            for line in result.influences
            for r in line.results
        ),
        ordinates=ordinates_view(result.influences) if result.influences else None,
        premises=result.premises,
        second_route=tuple(route_row(r) for r in result.second_route),
    )


def ordinates_view(lines: Sequence[InfluenceResult]) -> OrdinatesView:
    """Return the ordinates of influence lines, which are all listed at the same places."""
    listed = [{(o.x, o.side): o for o in line.ordinates} for line in lines]
    jumps = {x for ordinates in listed for x, side in ordinates if side is not None}
    rows: list[tuple[str, tuple[str, ...]]] = []
    for x, place in dict.fromkeys((o.x, o.place) for line in lines for o in line.ordinates):
        sides: tuple[Side | None, ...] = ("left", "right") if x in jumps else (None,)
        for side in sides:
            own = [ordinates.get((x, side)) or ordinates[x, None] for ordinates in listed]
            beside = f"just {side} of " if side is not None else ""
            rows.append((f"{beside}{place}", tuple(o.result.shown.number for o in own)))
    heads = (lettered((line.name,)) + (f", {line.unit}" if line.unit else "") for line in lines)
    return OrdinatesView(tuple(heads), tuple(rows))


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
    for influence in beam.influences:
        if influence.line_number == number:
            symbol_of, _, where = influence.of.partition(" ")
            sides = lettered((influence.name,)), lettered((symbol_of.replace(",", "_"),))
            return BeamLineView(row, word, Markup("{} = {} {}").format(*sides, where))
    return BeamLineView(row, word, rest)


def _combinations(beam: BeamResult) -> tuple[CombinationResult, ...]:
    return tuple(c for group in beam.groups for c in group.combinations if c.name)


def _factors(solved: CombinationResult) -> Equation:
    """Return a combination as the sum of its cases with their factors."""
    terms: list[str] = []
    for case, factor in solved.factors.items():
        size = f"{abs(factor):.6g}"
        sign = '<mo form="infix">−</mo>' if factor < 0 else '<mo form="infix">+</mo>' if terms else ""
        times = "" if size == "1" else f'<mn>{size}</mn><mspace width="0.17em"/>'
        terms.append(f"{sign}{times}{symbol(case)}")
    return combination(solved.name, terms)


def _group(beam: BeamResult, group: GroupResult) -> GroupView:
    chosen = next((each for each in beam.sets if each.group == group.name), None)
    generated = {c.name for c in chosen.combinations} if chosen is not None else set()
    names = [plain(c.name) for c in group.combinations if c.name and c.name not in generated]
    if chosen is not None:
        count = len(chosen.combinations)
        names.insert(0, f"{chosen.name}, {count} combination{'s' if count > 1 else ''}")
    alone = names == [plain(group.name)]

    def rows(results: Iterable[Result]) -> tuple[ValueRow, ...]:
        return tuple(result_row(r, result_anchor(beam.name, group.name, r.name), beam.line) for r in results)

    return GroupView(
        name=plain(group.name) if group.name else "",
        combinations="" if alone else ", ".join(names),
        results=rows(group.results),
        further=rows(r for r in group.further if _FURTHER.match(r.name)),
        generated=set_view(beam.name, chosen) if chosen is not None else None,
        along=tuple(
            (row.at, row.high.shown.text, row.high.place, row.low.shown.text, row.low.place)
            for row in group.along()
        ),
    )
