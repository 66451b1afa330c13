"""Evaluated calcs -> the state that the trail compares: an item for each input, formula, check and block."""

from __future__ import annotations

from collections.abc import Collection, Iterable, Mapping, Sequence

from calcgen.evaluation.results.beam import BeamResult
from calcgen.evaluation.results.calc import EvaluatedCalc
from calcgen.evaluation.results.common import FedBlock, Plain
from calcgen.evaluation.results.lines import (
    AssumptionsResult,
    CheckResult,
    CheckRow,
    DerivedRow,
    InputRow,
    InputsResult,
    WorkingResult,
)
from calcgen.evaluation.results.named import named_results
from calcgen.evaluation.results.section import SectionResult
from calcgen.evaluation.results.stress import StressResult
from calcgen.evaluation.results.table import TableResult
from calcgen.evaluation.results.vary import VaryResult
from calcgen.language.blocks.assumptions import Assumption
from calcgen.quantities.display import Style, rounded
from calcgen.quantities.measure import Measure, magnitude_in
from calcgen.text import Span
from calcgen.trail.canonical import Json
from calcgen.trail.changes import Item, State


def state_of(
    calcs: Sequence[EvaluatedCalc],
    references: Mapping[str, str],
    before: State,
    style: Style,
    unread: Collection[str] = (),
) -> State:
    """Return the state of a project.

    A calc that is in error or not evaluated, or whose file cannot be read (`unread`), keeps the items it had
    `before`: what cannot be evaluated now has not been taken back. `references` gives each key's title and
    edition in one text.
    """
    state: dict[str, Item] = {
        f"references#{key}": {"kind": "reference", "text": text} for key, text in references.items()
    }
    kept = {*unread, *(c.number for c in calcs if c.standing in ("in error", "not evaluated"))}
    state |= {a: item for a, item in before.items() if a.partition("#")[0] in kept}
    for calc in calcs:
        if calc.number not in kept:
            state |= {f"{calc.number}#{address}": item for address, item in _items(calc, style)}
    return state


def _items(calc: EvaluatedCalc, style: Style) -> Iterable[tuple[str, Item]]:
    source = calc.calc.source

    def text(span: Span) -> str:
        return " ".join(source.slice(span).split())

    for segment in calc.segments:
        match segment:
            case InputsResult(rows=inputs):
                for row in inputs:
                    if isinstance(row, InputRow):
                        typed = text(row.node.statement_span)
                        if isinstance(row.value, FedBlock):
                            yield row.name, _fed(typed, row.value, row, style)
                        else:
                            yield row.name, _valued("input", typed, row.value, row, style)
            case WorkingResult(rows=rows):
                for line in rows:
                    if isinstance(line, DerivedRow):
                        yield (
                            line.name,
                            _valued("formula", text(line.node.statement_span), line.value, line, style),
                        )
                    elif isinstance(line, CheckRow):
                        yield line.result.address, _check(line.result, line.node.statement)
            case AssumptionsResult(block=block):
                for a in block.items:
                    yield a.number, _assumption(a)
            case SectionResult() | BeamResult() | StressResult():
                yield from _block(segment, _block_text(calc, segment.span), style)
            case TableResult():
                typed = _block_text(calc, segment.span)
                yield segment.name, {"kind": "table", "text": typed, "results": {}}
            case VaryResult():
                typed = _block_text(calc, segment.span)
                yield segment.name, {"kind": "vary", "text": typed, "results": {}}
            case _:
                pass


def _block(
    segment: SectionResult | BeamResult | StressResult, text: str, style: Style
) -> Iterable[tuple[str, Item]]:
    match segment:
        case SectionResult():
            kind = "section"
        case BeamResult():
            kind = "beam"
        case StressResult():
            kind = "stress"
            if segment.check is not None:
                yield segment.check.address, _check(segment.check, f"{segment.name}: limit")
    results = {name: r.value for name, r in named_results(segment)}
    found = _results(results, style) | (_generated(segment) if isinstance(segment, BeamResult) else {})
    yield segment.name, {"kind": kind, "text": text, "results": found}


def _generated(beam: BeamResult) -> dict[str, Json]:
    """Return the combinations of standard sets: factors change with inputs, or with the program."""
    return {
        c.name: [" + ".join(f"{rounded(factor):.12g}*{case}" for case, factor in c.factors.items()), ""]
        for each in beam.sets
        for c in each.combinations
    }


def _assumption(a: Assumption) -> Item:
    return {"kind": "assumption", "text": a.text.text, "reference": a.basis.text, "open": a.open}


def _valued(kind: str, text: str, value: Plain, row: InputRow | DerivedRow, style: Style) -> Item:
    number, unit = plain_value(value, style)
    return {
        "kind": kind,
        "text": text,
        "value": number,
        "unit": unit,
        "note": row.node.annotations.note.text,
        "reference": row.node.annotations.reference.text,
    }


def _check(result: CheckResult, statement: str) -> Item:
    return {
        "kind": "check",
        "text": statement,
        "label": result.label,
        "utilisation": result.utilisation,
        "satisfied": result.satisfied,
        "reference": result.reference.text,
    }


def _fed(text: str, block: FedBlock, row: InputRow, style: Style) -> Item:
    """Return an input that is a block of another calc: which one it is, and what it gives."""
    return {**_valued("input", text, block.what, row, style), "results": _results(block.results, style)}


def _results(results: Mapping[str, Measure], style: Style) -> dict[str, Json]:
    return {name: list(plain_value(value, style)) for name, value in results.items()}


def plain_value(value: Plain, style: Style) -> tuple[float | str | bool, str]:
    """Return a value as number and unit, rounded to 12 significant digits in the unit it is shown in."""
    if isinstance(value, Measure):
        unit = style.unit_of(value)
        return rounded(magnitude_in(value, unit)), unit
    return value, ""


def _block_text(calc: EvaluatedCalc, head: Span) -> str:
    """Return the lines of a block as typed, from its info string to its closing fence."""
    block = next(s.span for s in calc.calc.segments if s.span.start <= head.start < s.span.end)
    return "\n".join(line.rstrip() for line in calc.calc.source.slice(block).strip().splitlines())
