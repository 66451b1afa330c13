"""What each calc takes from another, whether it could be evaluated or not."""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Mapping
from dataclasses import dataclass

from calcgen.evaluation.blocks.inputs import origin_of
from calcgen.evaluation.results.beam import BeamResult
from calcgen.evaluation.results.calc import EvaluatedCalc
from calcgen.evaluation.results.common import Origin
from calcgen.evaluation.results.lines import InputRow, InputsResult
from calcgen.evaluation.results.named import named_results
from calcgen.evaluation.results.section import SectionResult
from calcgen.evaluation.results.stress import StressResult
from calcgen.language.blocks.inputs import Feed, InputsBlock


@dataclass(frozen=True)
class Fed:
    """An input that is taken from another calc.

    Attributes
    ----------
    origin : the calc that gives, and the name there.
    taker, name : the calc that takes, and the name here.
    row : the input as evaluated; None where it could not be.
    line : of the input in the source of the taker.
    given : the value as the calc that gives shows it; '' where it has none, or is in error itself.
    """

    origin: Origin
    taker: str
    name: str
    row: InputRow | None
    line: int
    given: str = ""

    @property
    def text(self) -> str:
        """The value: as taken, else as given; '' where there is none."""
        return self.row.shown.text if self.row is not None else self.given


def fed_inputs(calcs: Iterable[EvaluatedCalc]) -> tuple[Fed, ...]:
    """Return all inputs that calcs take from each other, in the order of the calcs and of their text.

    A feed from a calc that does not exist is left out: it has its diagnostic.
    """
    by_number = {calc.number: calc for calc in calcs}
    return tuple(fed for calc in by_number.values() for fed in _of(calc, by_number))


def _of(calc: EvaluatedCalc, by_number: Mapping[str, EvaluatedCalc]) -> Iterator[Fed]:
    rows = {
        row.line: row
        for segment in calc.segments
        if isinstance(segment, InputsResult)
        for row in segment.rows
        if isinstance(row, InputRow)
    }
    source = calc.calc.source
    for block in calc.calc.segments:
        for item in block.items if isinstance(block, InputsBlock) else ():
            if isinstance(item.value, Feed):
                line = source.line_number(item.span)
                origin = origin_of(item.value, source)
                giver = by_number.get(origin.calc)
                if giver is not None:
                    given = _given(giver, origin)
                    yield Fed(origin, calc.number, item.target.name, rows.get(line), line, given)


def _given(giver: EvaluatedCalc, origin: Origin) -> str:
    if origin.arguments or giver.standing in ("in error", "not evaluated"):
        return ""
    if origin.name in giver.values:
        return giver.values[origin.name][1].text
    block, _, name = origin.name.partition(".")
    results = (
        result.shown.text
        for segment in giver.segments
        if isinstance(segment, SectionResult | BeamResult | StressResult) and segment.name == block
        for each, result in named_results(segment)
        if each == name
    )
    return next(results, "")
