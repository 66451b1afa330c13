"""The lines of a beam block -> the model and loads of mechanics."""

from __future__ import annotations

import math
from collections.abc import Mapping
from dataclasses import dataclass

from calcgen.evaluation.blocks.beam_carried import require_carried
from calcgen.evaluation.blocks.beam_combinations import Combination, case_kinds, combinations_of
from calcgen.evaluation.blocks.beam_influence import Wanted, influences_of
from calcgen.evaluation.blocks.beam_lines import Lines
from calcgen.evaluation.blocks.beam_loads import loads_of
from calcgen.evaluation.blocks.beam_sets import BeamSets, sets_of
from calcgen.evaluation.blocks.beam_shear import ShearDeformation, choose, shear_modulus_of, shear_stiffnesses
from calcgen.evaluation.blocks.beam_stiffness import common_modulus, modulus_of, properties_of, stiffness_of
from calcgen.evaluation.blocks.beam_supports import hinges_of, supports_of
from calcgen.evaluation.blocks.beam_trains import patterned_of, require_lateral, trains_of
from calcgen.evaluation.blocks.section import SectionThing, section_named
from calcgen.evaluation.formulas import Evaluator
from calcgen.evaluation.quantity import quantity_of
from calcgen.evaluation.results.beam import LoadRow
from calcgen.evaluation.scope import Scope
from calcgen.language.blocks.beam import (
    BeamBlock,
    BeamSetting,
    SpanLine,
)
from calcgen.mechanics.actions import Actions
from calcgen.mechanics.beam import BeamModel, Stretch
from calcgen.quantities.measure import Measure
from calcgen.text import Related


@dataclass(frozen=True)
class BeamData:
    """A beam block in SI: the model, what acts on it in each case, and what the page shows beside them.

    `sections` holds the section of each stretch that has one, `section_names` its name for every stretch, ''
    without one; `G` and `expansion` stand where they are given.
    """

    model: BeamModel
    actions: Actions
    case_kinds: Mapping[str, str]
    rows: tuple[LoadRow, ...]
    combinations: tuple[Combination, ...]
    sections: tuple[SectionThing, ...]
    section_names: tuple[str, ...]
    E: Measure | None
    G: Measure | None
    expansion: Measure | None
    shear: ShearDeformation
    support_kinds: tuple[str, ...]
    support_notes: tuple[tuple[str, str], ...]
    restrained: BeamSetting | None
    is_restrained: bool
    spans: tuple[float, ...]
    influences: tuple[Wanted, ...]
    sets: BeamSets


def read_beam(block: BeamBlock, scope: Scope) -> BeamData | None:
    """Return the beam of a block; report every fault of its lines."""
    lines = Lines(block, scope)
    spans = _spans(lines)
    if spans is None:
        _read_what_needs_no_length(lines)
        return None
    lines.length = sum(spans)
    settings = _settings(lines)
    is_restrained = _truth(lines, settings.get("restrained"))
    shears = _truth(lines, settings.get("shear_deformation"))
    E = modulus_of(lines, settings.get("E"))
    G = shear_modulus_of(lines, settings)
    expansion = _expansion(lines, settings.get("expansion"))
    properties, shear_stiffness = shear_stiffnesses(lines, properties_of(lines, E), G)
    supports = supports_of(lines, spans)
    hinges = hinges_of(lines, supports.all)
    kinds = case_kinds(lines)
    cases, rows = loads_of(lines, properties, expansion)
    for case, load in supports.settling:
        cases.setdefault(case, []).append(load)
    trains, train_rows = trains_of(lines, kinds)
    patterned = patterned_of(lines, kinds, cases)
    # The other loads of a case with a train act wherever it stands.
    absent = patterned | {case for case in trains if not cases.get(case)}
    sets = sets_of(lines, kinds, cases, absent, settings)
    combinations = combinations_of(lines, kinds, cases, sets)
    if lines.failed:
        return None
    stretches = tuple(Stretch(p.start, p.end, stiffness_of(p, restrained=is_restrained)) for p in properties)
    try:
        model = BeamModel(lines.length, stretches, supports.all, hinges)
    except ValueError as fault:
        lines.fault("beam", lines.block.head_span, str(fault))
        return None
    require_lateral(lines, model)
    require_carried(lines, model)
    sections = tuple(p.section for p in properties if p.section is not None)
    model, shear = choose(
        lines, model, sections, shear_stiffness, settings.get("shear_deformation"), wanted=shears
    )
    groups = {name: c.span for c in combinations for name in (c.name, c.group) if name}
    influences = influences_of(lines, model, groups)
    if lines.failed:
        return None
    return BeamData(
        model=model,
        actions=Actions({name: tuple(loads) for name, loads in cases.items()}, patterned, trains),
        case_kinds=kinds,
        rows=(*rows, *train_rows),
        combinations=combinations,
        sections=sections,
        section_names=tuple(p.section.result.name if p.section is not None else "" for p in properties),
        E=common_modulus(properties, E),
        G=G,
        expansion=expansion,
        shear=shear,
        support_kinds=supports.kinds,
        support_notes=supports.notes,
        restrained=settings.get("restrained"),
        is_restrained=is_restrained,
        spans=spans,
        influences=influences,
        sets=sets,
    )


def _read_what_needs_no_length(lines: Lines) -> None:
    """Report the faults of the sections and the modulus of a beam whose spans are at fault."""
    for setting in lines.of(BeamSetting):
        if setting.key.name == "section":
            section_named(setting.value, lines.scope)
        elif setting.key.name == "E":
            modulus_of(lines, setting)


def _spans(lines: Lines) -> tuple[float, ...] | None:
    typed = lines.of(SpanLine)
    if not typed:
        lines.fault("span-missing", lines.block.head_span, "the beam has no span", hint="write span = 6 m")
        return None
    if len(typed) > 1:
        lines.fault("written-twice", typed[1].span, "the spans are given twice")
    lengths = []
    for node in typed[0].lengths:
        length = lines.number(node, "length")
        if length <= 0:
            lines.fault("not-positive", node.span, "a span must be longer than zero")
        lengths.append(length)
    whole = math.fsum(lengths)
    for node, length in zip(typed[0].lengths, lengths, strict=True):
        if 0 < length <= 1e-9 * whole:
            lines.fault(
                "no-length",
                node.span,
                "the span has no length: beside the others it is a place",
                hint="a span must be longer than a billionth of the beam",
            )
    return None if lines.failed else tuple(lengths)


def _settings(lines: Lines) -> dict[str, BeamSetting]:
    """Return the settings of the whole beam by key."""
    found: dict[str, BeamSetting] = {}
    for line in lines.of(BeamSetting):
        if line.start is not None:
            continue
        if line.key.name in found:
            first = found[line.key.name]
            lines.fault(
                "written-twice",
                line.key.span,
                f"'{line.key.name}' is given twice",
                related=(Related(first.key.span, "first here"),),
            )
        found.setdefault(line.key.name, line)
    return found


def _expansion(lines: Lines, line: BeamSetting | None) -> Measure | None:
    """Return the coefficient of thermal expansion, None where it is not given or wrong."""
    if line is None:
        return None
    value = quantity_of(line.value, "expansion", lines.scope)
    lines.failed = lines.failed or value is None
    return value


def _truth(lines: Lines, line: BeamSetting | None) -> bool:
    if line is None:
        return False
    value = Evaluator(lines.scope).value(line.value)
    if isinstance(value, bool):
        return value
    if value is not None:
        lines.fault("not-yes-or-no", line.value.span, f"'{line.key.name}' is yes or no")
    lines.failed = True
    return False
