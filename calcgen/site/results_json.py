"""`results.json`: the results of a package for other programs."""

from __future__ import annotations

import json
import math
from collections.abc import Iterable
from typing import TypeAlias

from calcgen.evaluation.results.beam import BeamResult
from calcgen.evaluation.results.calc import EvaluatedCalc
from calcgen.evaluation.results.common import FedBlock, Plain, Result
from calcgen.evaluation.results.lines import CheckResult, DerivedRow, InputRow, InputsResult, WorkingResult
from calcgen.evaluation.results.section import SectionResult
from calcgen.evaluation.results.stress import StressResult
from calcgen.language.blocks.assumptions import AssumptionsBlock
from calcgen.quantities.display import Shown, rounded
from calcgen.quantities.measure import Measure, magnitude_in
from calcgen.site.facts import PackageInput

Json: TypeAlias = "dict[str, Json] | list[Json] | str | float | bool | None"

PATH = "results.json"


def results_file(package: PackageInput) -> bytes:
    """Return the contents of results.json: sorted keys, UTF-8, a line feed at its end."""
    text = json.dumps(results(package), ensure_ascii=False, allow_nan=False, indent=1, sort_keys=True)
    return f"{text}\n".encode()


def results(package: PackageInput) -> Json:
    """Return the results as JSON holds them."""
    project = package.project
    return {
        "program": {"name": "calcgen", "version": package.version},
        "project": {
            "title": project.title,
            "number": project.number,
            "axes": project.axes,
            "depth": project.depth,
            "units": project.units,
        },
        "calcs": {calc.number: _calc(calc) for calc in package.calcs},
    }


def _calc(calc: EvaluatedCalc) -> Json:
    sections: dict[str, Json] = {}
    beams: dict[str, Json] = {}
    combinations: dict[str, Json] = {}
    stresses: dict[str, Json] = {}
    inputs: dict[str, Json] = {}
    values: dict[str, Json] = {}
    for segment in calc.segments:
        match segment:
            case InputsResult(rows=given):
                inputs |= {row.name: _input(row) for row in given if isinstance(row, InputRow)}
            case WorkingResult(rows=lines):
                values |= {row.name: _derived(row) for row in lines if isinstance(row, DerivedRow)}
            case SectionResult():
                sections[segment.name] = _section(segment)
            case BeamResult():
                beams[segment.name] = _beam(segment)
                if segment.sets:
                    combinations[segment.name] = _combinations(segment)
            case StressResult():
                stresses[segment.name] = _stress(segment)
            case _:
                pass
    return {
        "title": calc.calc.title,
        "file": calc.calc.source.path,
        "standing": calc.standing,
        "inputs": inputs,
        "values": values,
        "sections": sections,
        "assumptions": _assumptions(calc),
        "beams": beams,
        **({"combinations": combinations} if combinations else {}),
        "stresses": stresses,
        "methods": {},
        "checks": [_check(check) for check in calc.checks],
        "premises": [{"of": p.of, "premise": p.premise, "verdict": p.verdict} for p in calc.premises],
        "residuals": [
            {"of": r.of, "what": r.what, "residual": _number(r.residual), "tolerance": _number(r.tolerance)}
            for r in calc.second_route
        ],
        "diagnostics": [
            {
                "severity": d.severity,
                "line": d.line,
                "column": d.column,
                "message": d.message,
                "hint": d.hint,
            }
            for d in calc.diagnostics
        ],
    }


def _input(row: InputRow) -> Json:
    annotations = row.node.annotations
    note, reference = annotations.note.text, annotations.reference.text
    if isinstance(row.value, FedBlock):  # no value of its own: what it gives stands in the calc it comes from
        origin = row.origin.text if row.origin is not None else ""
        note = "; ".join(text for text in (note, f"{row.value.kind} {origin}: {row.shown.text}") if text)
        value: dict[str, Json] = {"value": None, "unit": ""}
    else:
        value = _value(row.value, row.shown)
    return {**value, "note": note, "reference": reference, "line": row.line}


def _derived(row: DerivedRow) -> Json:
    return {**_value(row.value, row.shown), "line": row.line}


def _assumptions(calc: EvaluatedCalc) -> Json:
    return [
        {"number": a.number, "text": a.text.text, "open": a.open, "basis": a.basis.text}
        for block in calc.calc.segments
        if isinstance(block, AssumptionsBlock)
        for a in block.items
    ]


def _section(section: SectionResult) -> Json:
    """Return the properties; those of a part, or of bars, stand under its name."""
    found = _results((*section.results, *section.further))
    for owner in section.owners:
        if owner.results:
            found[owner.name] = _results(owner.results)
    return found


def _stress(stress: StressResult) -> Json:
    """Return the results; those of a part, of bars or of a point as `plate.σ_max`."""
    found = _results(stress.results)
    for name, rows in stress.parts.items():
        found |= {f"{name}.{key}": value for key, value in _results(rows).items()}
    return found


def _beam(beam: BeamResult) -> Json:
    """Return the results by combination and group; without combinations they hang on the beam itself.

    So do influence lines, with combinations or without: each result and each ordinate by its name. Of a
    standard set the group has results, and its combinations stand in 'combinations'.
    """
    found: dict[str, Json] = {}
    for line in beam.influences:
        found |= _results((*line.results, *line.further, *(ordinate.result for ordinate in line.ordinates)))
    for group in beam.groups:
        if not group.name:
            return found | _results((*group.results, *group.further))
        found |= {c.name: _results(c.results) for c in group.combinations if c.results}
        found[group.name] = _results((*group.results, *group.further))
    return found


def _combinations(beam: BeamResult) -> dict[str, Json]:
    """Return the combinations that standard sets generate: group, factors and source."""
    return {
        c.name: {
            "group": each.group,
            "factors": {case: _number(factor) for case, factor in c.factors.items()},
            "source": each.expressions[c.expression].source,
        }
        for each in beam.sets
        for c in each.combinations
    }


def _results(results: Iterable[Result]) -> dict[str, Json]:
    return {r.name: _value(r.value, r.shown) for r in results}


def _check(check: CheckResult) -> Json:
    unit = check.left_shown.unit
    return {
        "label": check.label,
        "demand": _quantity(check.demand, unit),
        "capacity": _quantity(check.capacity, unit),
        "utilisation": None if check.utilisation is None else _number(check.utilisation),
        "satisfied": check.satisfied,
        "reference": check.reference.text,
        "line": check.line,
    }


def _value(value: Plain, shown: Shown) -> dict[str, Json]:
    if isinstance(value, Measure):
        return _quantity(value, shown.unit)
    return {"value": value, "unit": ""}


def _quantity(value: Measure, unit: str) -> dict[str, Json]:
    return {"value": _number(magnitude_in(value, unit)), "unit": unit}


def _number(value: float) -> float | None:
    return rounded(value) if math.isfinite(value) else None
