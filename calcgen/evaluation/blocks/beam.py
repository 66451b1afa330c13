"""`beam NAME`: solved for each case, combined, and read by group, combination, span and place."""

from __future__ import annotations

import math
import re
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from functools import cache, partial
from itertools import chain, count

from calcgen.evaluation.blocks.beam_influence_results import (
    influence_named,
    influence_route,
    read_influence,
    solved_influences,
)
from calcgen.evaluation.blocks.beam_lines import SPAN, is_result, length_text
from calcgen.evaluation.blocks.beam_model import BeamData, read_beam
from calcgen.evaluation.blocks.beam_premises import premises
from calcgen.evaluation.blocks.beam_reading import Reading, beam_measure
from calcgen.evaluation.blocks.beam_results import (
    group_results,
    moments_along,
    places_of_results,
    relieving_cases,
)
from calcgen.evaluation.blocks.beam_second_route import second_route
from calcgen.evaluation.blocks.beam_states import Solved, States
from calcgen.evaluation.results.beam import BeamResult, CombinationResult, GroupResult, Listing
from calcgen.evaluation.results.common import Plain, Result
from calcgen.evaluation.scope import Scope
from calcgen.language.blocks.beam import BeamBlock
from calcgen.language.calc import FailedBlock
from calcgen.language.nodes import Column, Name
from calcgen.mechanics.actions import Combination
from calcgen.mechanics.beam import UnstableBeam, solve
from calcgen.quantities.display import Style, show
from calcgen.quantities.measure import Measure, from_si
from calcgen.quantities.symbols import plain
from calcgen.text import Report, Span, nearest


@dataclass(frozen=True)
class BeamThing:
    """A beam in the scope: its results by group, combination, span and place."""

    result: BeamResult
    style: Style
    kind: str = "beam"

    def read(self, name: Name, arguments: tuple[Plain, ...] | None, report: Report) -> Measure | None:
        """Return a result; report one that does not exist, or that has several states."""
        parts, spans = list(name.parts[1:]), list(name.spans[1:])
        line = influence_named(self.result, parts[-1])
        if line is not None and len(parts) == 1:
            return read_influence(self.result, line, parts[0], arguments, self.style, report, spans[0])
        if line is not None:
            report.error(
                "no-such-result",
                spans[-1],
                f"the influence line '{plain(line.name)}' belongs to the beam as a whole",
                hint=f"write {self.result.name}.{parts[-1]}",
            )
            return None
        states = self._states(parts, spans, report)
        if states is None:
            return None
        stretch: tuple[float, float] | None = None
        if parts and SPAN.match(parts[0]):
            number = int(parts[0].removeprefix("span_"))
            all_spans = self.result.spans
            if not 1 <= number <= len(all_spans):
                report.error(
                    "no-such-result",
                    spans[0],
                    f"the beam '{plain(self.result.name)}' has {len(all_spans)} spans",
                )
                return None
            stretch = all_spans[number - 1]
            parts.pop(0)
            spans.pop(0)
        if len(parts) != 1:
            report.error(
                "no-such-result",
                spans[-1] if spans else name.span,
                "the name of a result is missing" if not parts else f"'{plain(parts[-1])}' has no results",
                hint="results are M_max, V_abs, w_max, R_1, M_max(2.5 m), …",
            )
            return None
        return Reading(self.result, states, self.style, report, spans[0]).read(parts[0], stretch, arguments)

    def _states(self, parts: list[str], spans: list[Span], report: Report) -> States | None:
        """Take the name of a group or combination off the parts and return its states."""
        groups = {g.name: g.states for g in self.result.groups}
        if "" in groups:
            return groups[""]
        singles = {c.name: c.states for g in self.result.groups for c in g.combinations}
        known = {**singles, **groups}
        head = parts[0]
        if not known:
            report.error(
                "no-such-result",
                spans[0],
                f"the beam '{plain(self.result.name)}' has no load, so it has influence lines alone",
                hint=f"such as {self.result.name}.{self.result.influences[0].name}_max",
            )
            return None
        if head in known:
            parts.pop(0)
            spans.pop(0)
            return known[head]
        names = ", ".join(known)
        if is_result(head):
            report.error(
                "no-such-result",
                spans[0],
                f"results of '{plain(self.result.name)}' hang on a combination or a group",
                hint=f"write {self.result.name}.{next(iter(groups))}.{head}; there are {names}",
            )
            return None
        close = nearest(head, known)
        report.error(
            "no-such-result",
            spans[0],
            f"'{plain(self.result.name)}' has no combination or group '{plain(head)}'",
            hint=f"the nearest is '{close}'" if close else f"there are {names}",
        )
        return None


def evaluate_beam(block: BeamBlock, scope: Scope, *, repeated: bool = False) -> BeamResult | FailedBlock:
    """Solve the beam, combine its cases, and define its name.

    In a `repeated` calc it has no premises and warns of nothing, as nobody reads them there, and its second
    route goes over what is read.
    """
    free = scope.define(block.target)
    data = read_beam(block, scope)
    result = _solved(block, data, scope, repeated=repeated) if data is not None else None
    if result is None or not free:
        if free:
            scope.failed.add(block.target.name)
        return FailedBlock("beam", block.span)
    scope.things[block.target.name] = BeamThing(result, scope.style)
    return result


def _solved(block: BeamBlock, data: BeamData, scope: Scope, *, repeated: bool) -> BeamResult | None:
    name = block.target.name
    try:
        grouped = _grouped(data)
        cuts = places_of_results(data.model, _ends(data.spans))
        cases = solve(data.model, data.actions.cases)
        solved = Solved(data.model, data.actions, cases, tuple(grouped.values()), cuts, together=not repeated)
    except UnstableBeam as fault:
        support = "a support" if fault.plane == "vertical" else "a support that holds it sideways"
        hint = f"add {support}{', or remove a hinge' if fault.hinges else ''}"
        scope.report.error("unstable", block.head_span, _motion(fault, scope.style), hint=hint)
        return None
    except ValueError as fault:
        scope.report.error("beam", block.head_span, str(fault))
        return None
    groups = _groups(data, grouped, solved, scope.style)
    influences = solved_influences(data.influences, data.model, scope.style, scope.report)
    if influences is None:
        return None
    if not groups and not influences:
        scope.report.error("load-missing", block.head_span, f"the beam '{plain(name)}' has no load")
        return None
    if not repeated:
        _warn_of_relieving(data, groups, solved, scope.report)
    return BeamResult(
        name=name,
        section=", ".join(dict.fromkeys(s.result.name for s in data.sections)),
        model=data.model,
        spans=_ends(data.spans),
        support_kinds=data.support_kinds,
        support_notes=data.support_notes,
        case_kinds={case: data.case_kinds.get(case, "") for case in data.actions.cases},
        patterned=data.actions.patterned,
        loads=data.rows,
        groups=groups,
        settings=_shown_settings(data, scope.style),
        restrained=data.is_restrained if data.restrained is not None else None,
        premises=()
        if repeated
        else premises(name, data, groups, _other_deflection(data, groups), scope.style),
        compare=cache(
            lambda: (
                *second_route(name, data, groups, of_read=repeated),
                *influence_route(name, data.model, data.influences, influences),
            )
        ),
        lines=_lines(block, scope),
        line=scope.report.source.line_number(block.head_span),
        span=block.head_span,
        influences=influences,
        sets=data.sets.results,
        set_factors=data.sets.factors,
        section_names=data.section_names,
    )


def _warn_of_relieving(data: BeamData, groups: Sequence[GroupResult], solved: Solved, report: Report) -> None:
    """Report permanent cases that relieve and stand above 1.0, at the combinations that govern."""
    spans = {c.name: c.span for c in data.combinations}
    taken = {*spans, *(group.name for group in groups)}
    free = next(name for name in chain(("X",), (f"X_{n}" for n in count(1))) if name not in taken)
    for group in groups:
        factors = {c.name: c.factors for c in group.combinations}
        for (case, governs), results in relieving_cases(group, solved.cases, data.case_kinds).items():
            one = " + ".join(
                f"{'1.0' if name == case else f'{factor:.12g}'}*{name}"
                for name, factor in factors[governs].items()
                if factor != 0.0
            ).replace("+ -", "- ")
            alone = group.name == governs
            together = (
                f"give {governs} a group, combination {governs} in ULS = ..., and add " if alone else "add "
            )
            report.warning(
                "relieving-permanent",
                spans[governs],
                f"the permanent case '{plain(case)}' relieves {_listed(results)} of '{plain(group.name)}', "
                f"where {plain(governs)} governs and takes it at {factors[governs][case]:.12g}",
                hint=f"{together}combination {free} in {'ULS' if alone else group.name} = {one}",
            )


def _listed(names: Sequence[str]) -> str:
    return f"{', '.join(names[:-1])} and {names[-1]}" if len(names) > 1 else names[0]


def _grouped(data: BeamData) -> dict[str, list[Combination]]:
    """Return the combinations by their group; without any written, all cases act together."""
    by_group: dict[str, list[Combination]] = {}
    for written in data.combinations:
        combination = Combination(written.name, written.factors)
        by_group.setdefault(written.group or written.name, []).append(combination)
    return by_group or {"": [Combination("", dict.fromkeys(data.actions.cases, 1.0))]}


def _groups(
    data: BeamData, grouped: Mapping[str, Sequence[Combination]], solved: Solved, style: Style
) -> tuple[GroupResult, ...]:
    """Return the groups of combinations with their results, which are listed when they are asked for."""
    if not solved.cases:
        return ()
    spans = _ends(data.spans)

    def results(states: States) -> Listing:
        return cache(lambda: group_results(states, data.model, spans, style, beam_measure))

    generated = {c.name for c in data.combinations if c.generated}
    groups: list[GroupResult] = []
    for name, combinations in grouped.items():
        members: list[CombinationResult] = []
        for c in combinations:
            states = solved.states([c])
            listing = _nothing if c.name in generated and len(combinations) > 1 else results(states)
            members.append(CombinationResult(c.name, c.factors, states, listing))
        if len(members) > 1:
            states = solved.states(combinations)
            listing = results(states)
        along = cache(partial(moments_along, states, spans, style, beam_measure))
        groups.append(GroupResult(name, tuple(members), states, listing, along))
    return tuple(groups)


def _nothing() -> tuple[tuple[Result, ...], tuple[Result, ...]]:
    return (), ()


def _other_deflection(data: BeamData, groups: Sequence[GroupResult]) -> float | None:
    """Return the largest deflection by the other choice about shear, None where it is not known."""
    if data.shear.other is None or not groups:
        return None
    grouped = tuple(_grouped(data).values())
    cases = solve(data.shear.other, data.actions.cases)
    other = Solved(data.shear.other, data.actions, cases, grouped)
    return max(abs(other.states(group).extremes("w").abs.value) for group in grouped)


def _ends(lengths: tuple[float, ...]) -> tuple[tuple[float, float], ...]:
    return tuple((math.fsum(lengths[:i]), math.fsum(lengths[: i + 1])) for i in range(len(lengths)))


def _lines(block: BeamBlock, scope: Scope) -> tuple[tuple[str, Column, Column, int], ...]:
    """Return each line of the block as typed, with its second and third column."""
    source = scope.report.source
    return tuple(
        (
            " ".join(source.slice(line.span).partition("|")[0].split()),
            line.annotations.note,
            line.annotations.reference,
            source.line_number(line.span),
        )
        for line in block.lines
    )


def _shown_settings(data: BeamData, style: Style) -> tuple[Result, ...]:
    results = [
        Result(f"L_{i}" if len(data.spans) > 1 else "L", "span", m, show(m, style))
        for i, m in enumerate((beam_measure("x", s, style) for s in data.spans), start=1)
    ]
    for word, meaning, given in (
        ("E", "modulus of elasticity", data.E),
        ("G", "shear modulus", data.G),
        ("α_T", "coefficient of thermal expansion", data.expansion),
    ):
        if given is not None:
            results.append(Result(word, meaning, given, show(given, style)))
    for i, stretch in enumerate(data.model.stretches, start=1):
        number = "" if len(data.model.stretches) == 1 else f"_{i}"
        EI = from_si(stretch.stiffness.vertical, "N·m²").shown_in(None)
        results.append(
            Result(f"EI{number}", "bending stiffness about the horizontal axis", EI, show(EI, style))
        )
        if data.shear.included:
            GA_s = from_si(stretch.shear.vertical, "N").shown_in(None)
            results.append(
                Result(f"GA_s{number}", "shear stiffness for a vertical force", GA_s, show(GA_s, style))
            )
    return tuple(results)


def _motion(fault: UnstableBeam, style: Style) -> str:
    """Return how an unstable beam can move, in the project's unit of length."""
    unit = "ft" if style.system == "US" else "m"
    return re.sub(r"([\d.e+-]+) m\b", lambda m: length_text(float(m[1]), style, unit), str(fault))
