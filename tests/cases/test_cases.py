"""Calcs with published answers, evaluated whole: see the suites `*.md` in this folder.

A heading names a case; the fence of four marks, `calc` and the convention of axes, holds the calc; each row
of the table below it is an expected value `name | value | unit | rel. tolerance | source`. A name is an
expression of the language over the calc; a plain number has the unit `-`. Tolerances cover the rounding of
the source; 'from memory' says that the source was not at hand when its number was written down.
"""

from __future__ import annotations

import re
from dataclasses import dataclass
from pathlib import Path
from typing import Literal, cast

import pytest

from calcgen.quantities.measure import Measure, from_si, magnitude_in
from tests.evaluation.helpers import evaluated, fence

Axes = Literal["eurocode", "american"]

_FOLDER = Path(__file__).parent
_CASE = re.compile(
    r"^## .+\n(?:(?!## |````).*\n)*````calc (eurocode|american)\n((?:(?!````).*\n)*)````\n\n((?:\|.*\n)+)",
    re.MULTILINE,
)
_HEAD = ["name", "value", "unit", "rel. tolerance", "source"]
_DIGITS = 12  # significant digits down to which a value on the border of its tolerance is judged


@dataclass(frozen=True)
class Expected:
    """One published value, in `unit`."""

    name: str
    value: float
    unit: str
    tolerance: float


@dataclass(frozen=True)
class Case:
    """A calc and the values that a source gives for it."""

    where: str
    axes: Axes
    text: str
    expected: tuple[Expected, ...]


def cases(path: Path) -> list[Case]:
    """Return the cases of a suite."""
    text = path.read_text(encoding="utf-8")
    found = [
        Case(f"{path.name}:{text.count(chr(10), 0, m.start()) + 1}", cast("Axes", m[1]), m[2], _rows(m[3]))
        for m in _CASE.finditer(text)
    ]
    headings = len(re.findall(r"^## ", re.sub(r"^````.*?^````$", "", text, flags=re.M | re.S), re.M))
    assert len(found) == headings, f"{path.name}: a case is written wrong"
    return found


def _rows(table: str) -> tuple[Expected, ...]:
    head, _, *rows = ([cell.strip() for cell in row.strip("|\n ").split("|")] for row in table.splitlines())
    assert head == _HEAD
    assert all(len(row) == len(_HEAD) and row[-1] for row in rows), "each value has a source"
    return tuple(
        Expected(name, float(value), "" if unit == "-" else unit, float(tolerance))
        for name, value, unit, tolerance, _ in rows
    )


_CASES = [case for path in sorted(_FOLDER.glob("*.md")) for case in cases(path)]


@pytest.mark.parametrize("case", _CASES, ids=lambda c: c.where)
def test_published_values(case: Case) -> None:
    names = {f"published_{i}": e for i, e in enumerate(case.expected)}
    asked = fence("working", *(f"{name} = {e.name}" for name, e in names.items()))
    (calc,) = evaluated(f"{case.text}\n{asked}", axes=case.axes)
    assert [d.message for d in calc.diagnostics] == []
    assert [c.label for c in calc.checks if not c.satisfied] == []
    assert [r for r in calc.second_route if not r.holds] == []
    found = {e: calc.values[name][0] for name, e in names.items()}
    assert [said for e, value in found.items() if (said := _difference(e, value))] == []


def _difference(expected: Expected, value: object) -> str:
    """Return what is wrong with a value, '' where it agrees."""
    assert isinstance(value, Measure)
    if value.dimension != from_si(1.0, expected.unit).dimension:
        return f"{expected.name} is no {expected.unit}"
    number = magnitude_in(value, expected.unit)
    off = float(f"{abs(number / expected.value - 1):.{_DIGITS}g}")
    if off <= expected.tolerance:
        return ""
    return f"{expected.name} = {number:.6g} {expected.unit}, published {expected.value:g}: {off:.2e} off"
