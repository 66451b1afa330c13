"""Evaluated calcs -> the drawing of which feeds which."""

from __future__ import annotations

from collections.abc import Callable, Mapping, Sequence

from calcgen.evaluation.feeding import Fed, fed_inputs
from calcgen.evaluation.results.calc import EvaluatedCalc
from calcgen.evaluation.results.common import FedBlock
from calcgen.figures.map_drawing import MapArrow, MapCalc, MapDrawing, MapValue
from calcgen.quantities.display import utilisation_text
from calcgen.quantities.symbols import plain


def map_drawing(
    calcs: Sequence[EvaluatedCalc],
    was: Mapping[str, str],
    page_of: Callable[[str], str],
    values_of: Callable[[str, str], str],
) -> MapDrawing:
    """Return the map of calcs.

    `was` gives the mark of an input that changed by its address, 'W-12#R'; `page_of` where a calc's page is,
    `values_of` where the values are that one calc takes from another.
    """
    carried: dict[tuple[str, str], list[MapValue]] = {}
    for fed in fed_inputs(calcs):
        mark = was.get(f"{fed.taker}#{fed.name}", "")
        carried.setdefault((fed.origin.calc, fed.taker), []).append(_value(fed, mark))
    return MapDrawing(
        "map",
        "which calc feeds which",
        tuple(_calc(calc, page_of(calc.number)) for calc in sorted(calcs, key=lambda c: c.number)),
        tuple(
            MapArrow(giver, taker, tuple(values), values_of(giver, taker))
            for (giver, taker), values in sorted(carried.items())
        ),
    )


def _calc(calc: EvaluatedCalc, href: str) -> MapCalc:
    check = calc.governing
    told = check is not None and check.utilisation is not None and calc.standing in ("satisfied", "exceeded")
    used = utilisation_text(check.utilisation) if check is not None and told else ""
    return MapCalc(calc.number, calc.calc.title, calc.standing, used, href)


def _value(fed: Fed, was: str) -> MapValue:
    name = plain(fed.name)
    if fed.row is not None and isinstance(fed.row.value, FedBlock):
        return MapValue(name, fed.row.value.what, ": ", was)
    return MapValue(name, fed.text, was=was)
