"""The cases and combinations of a beam block."""

from __future__ import annotations

from collections.abc import Collection, Iterator, Mapping, Sequence
from dataclasses import dataclass

from calcgen.evaluation.blocks.beam_lines import Lines
from calcgen.evaluation.blocks.beam_sets import BeamSets
from calcgen.evaluation.results.beam import SetResult
from calcgen.language.blocks.beam import (
    CaseLine,
    CombinationLine,
    LoadLine,
    SetLine,
    SupportLine,
    TrainLine,
)
from calcgen.language.nodes import Named
from calcgen.mechanics.beam import (
    Load,
)
from calcgen.text import Span, nearest


@dataclass(frozen=True)
class Combination:
    """A combination's name, its group ('' where none is written) and the factor of each case.

    `generated`: by a standard set, from the kinds of the cases.
    """

    name: str
    group: str
    factors: Mapping[str, float]
    span: Span
    generated: bool = False


def case_kinds(lines: Lines) -> dict[str, str]:
    """Return the kind of each declared case, '' where none is written."""
    kinds: dict[str, str] = {}
    for line in lines.of(CaseLine):
        if line.target.name in kinds:
            lines.fault("written-twice", line.span, f"the case '{line.target.name}' is declared twice")
        lines.keep_free_of_results(line.target)
        kinds[line.target.name] = line.kind.name if line.kind is not None else ""
    return kinds


def combinations_of(
    lines: Lines, kinds: Mapping[str, str], cases: Mapping[str, list[Load]], sets: BeamSets
) -> tuple[Combination, ...]:
    """Return the combinations, written and generated; report what they name and what they leave out."""
    typed = lines.of(CombinationLine)
    groups = {line.group.name for line in typed if line.group is not None}
    groups |= {line.target.name for line in lines.of(SetLine)}
    found: list[Combination] = []
    for line in lines.block.lines:
        if isinstance(line, SetLine) and line.span in sets.by_line:
            found += _generated(lines, line, sets.by_line[line.span], groups, {c.name for c in found})
        if not isinstance(line, CombinationLine):
            continue
        name = line.target.name
        if any(c.name == name for c in found):
            lines.fault("written-twice", line.target.span, f"the combination '{name}' is given twice")
        if name in groups:
            lines.fault("written-twice", line.target.span, f"'{name}' is the name of a group, too")
        for label in (line.target, line.group):
            if label is not None:
                lines.keep_free_of_results(label)
        factors: dict[str, float] = {}
        for term in line.terms:
            case = term.case.name
            if case not in cases and case not in kinds:
                close = nearest(case, cases)
                lines.fault(
                    "unknown-case",
                    term.case.span,
                    f"there is no load case '{case}'",
                    hint=f"the nearest is '{close}'" if close else f"cases are {', '.join(cases)}",
                )
            factor = 1.0 if term.factor is None else lines.number(term.factor, "number")
            factors[case] = factors.get(case, 0.0) + term.sign * factor
        group = line.group.name if line.group is not None else ""
        found.append(Combination(name, group, factors, line.span))
    _warn_of_unused(lines, found)
    _warn_of_unloaded(lines, found, cases)
    return tuple(found)


def _generated(
    lines: Lines, line: SetLine, result: SetResult, groups: Collection[str], names: Collection[str]
) -> Iterator[Combination]:
    """Give the combinations of a set; report a name that is taken."""
    lines.keep_free_of_results(line.target)
    lines.keep_free_of_results(Named(result.combinations[0].name, line.target.span))
    taken = [c.name for c in result.combinations if c.name in names or c.name in groups]
    if taken:
        lines.fault(
            "written-twice",
            line.target.span,
            f"this set makes a combination '{taken[0]}', and there is one, or a group, of that name",
            hint="choose another name for the set's group, or for the other",
        )
    for c in result.combinations:
        yield Combination(c.name, result.group, c.factors, line.span, generated=True)


def _warn_of_unloaded(lines: Lines, found: Sequence[Combination], cases: Mapping[str, list[Load]]) -> None:
    """Report cases that combinations take and in which nothing acts."""
    used = {case for c in found for case in c.factors}
    moving = {line.case.name for line in lines.of(TrainLine)}
    for line in lines.of(CaseLine):
        name = line.target.name
        if name in used and name not in moving and not cases.get(name) and not lines.failed:
            lines.report.warning(
                "case-without-load",
                line.target.span,
                f"the load case '{name}' has no load",
                hint=f"write load {name} uniform 3 kN/m, or remove the case",
            )


def _warn_of_unused(lines: Lines, found: Sequence[Combination]) -> None:
    """Report settlements and cases that are in no combination."""
    used = {case for c in found for case in c.factors}
    settling = [s for s in lines.of(SupportLine) if s.settles is not None]
    for support in settling if found else ():
        if support.settles_case is None:
            lines.fault(
                "unknown-case",
                support.span,
                "this settlement belongs to no load case, so no combination has it",
                hint="write in which case it acts: settles 5 mm in S",
            )
    named = [c.target for c in lines.of(CaseLine)] + [c.case for c in lines.of(LoadLine)]
    named += [c.case for c in lines.of(TrainLine)]
    named += [s.settles_case for s in settling if s.settles_case is not None]
    for target in named:
        if found and not lines.failed and target.name not in used:
            used.add(target.name)
            lines.report.warning(
                "case-unused",
                target.span,
                f"no combination uses the load case '{target.name}'",
                hint="its loads have no effect on any result",
            )
