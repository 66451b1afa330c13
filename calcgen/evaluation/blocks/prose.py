"""Prose and the sheet: values in text, looked up when the whole calc is known."""

from __future__ import annotations

from calcgen.evaluation.formulas import Evaluator, shown
from calcgen.evaluation.results.lines import ProseResult, SheetResult
from calcgen.evaluation.scope import Scope
from calcgen.language.blocks.sheet import SheetBlock
from calcgen.language.calc import Prose
from calcgen.language.nodes import Place
from calcgen.quantities.display import Shown


def evaluate_prose(prose: Prose, scope: Scope) -> ProseResult:
    """Return prose with the final value of each place; a place without a value is reported."""
    return ProseResult(prose, tuple(_value(place, scope) for place in prose.places))


def evaluate_sheet(block: SheetBlock, scope: Scope) -> SheetResult:
    """Return the sheet's texts with values put in; '…' stands where a value is missing."""
    texts: dict[str, str] = {}
    for entry in block.entries:
        parts = [piece if isinstance(piece, str) else _text(piece, scope) for piece in entry.pieces]
        texts[entry.key] = "".join(parts)
    return SheetResult(block, texts)


def _value(place: Place, scope: Scope) -> Shown | None:
    value = Evaluator(scope).value(place.name)
    return None if value is None else shown(value, scope)


def _text(place: Place, scope: Scope) -> str:
    value = _value(place, scope)
    return "…" if value is None else value.text
