"""Lines of working as equations: which steps are shown."""

from __future__ import annotations

import pytest
from markupsafe import Markup

from calcgen.evaluation.results.calc import EvaluatedCalc
from calcgen.evaluation.results.lines import CheckRow, DerivedRow, WorkingResult
from calcgen.site import equations
from calcgen.site.equations import Equation
from tests.evaluation.helpers import working


def rows(calc: EvaluatedCalc) -> tuple[DerivedRow | CheckRow, ...]:
    block = next(s for s in calc.segments if isinstance(s, WorkingResult))
    return tuple(row for row in block.rows if isinstance(row, DerivedRow | CheckRow))


def read(equation: Equation) -> str:
    """Return an equation as it is read from left to right, steps parted by '; '."""
    steps = (Markup("").join(step).striptags() for step in equation.steps)
    return (equation.left.striptags() + "; ".join(steps)).replace("\xa0", " ")


INPUTS = ("L = 6 m", "w = 5 kN/m", "n = 3", 'grade = "S275"')


@pytest.mark.parametrize(
    ("line", "expected"),
    [
        ("M = w*L^2/8", "M=w\u2062L28; =5.000kN/m·(6.000m)28; =22.50kN·m"),
        ("a = L", "a=L; =6.000m"),  # numbers put in would repeat the result
        ("b = 1.35", "b=1.350"),
        ("c = 2*3", "c=2·3; =6"),
        ("d = n + 1 when n > 2\n  = 0 otherwise", "d={n+1when n>20otherwise; =3+1; =4"),
    ],
)
def test_derived(line: str, expected: str) -> None:
    calc = working(line, inputs=INPUTS)
    (row,) = rows(calc)
    assert isinstance(row, DerivedRow)
    assert read(equations.derived(row, calc.calc.source)) == expected


def test_the_case_taken_says_why() -> None:
    calc = working("d = n + 1 when n > 2\n  = 0 otherwise", inputs=INPUTS)
    (row,) = rows(calc)
    assert isinstance(row, DerivedRow)
    aside = equations.derived(row, calc.calc.source).aside
    assert aside.striptags().replace("\xa0", " ") == "as 3>2"


@pytest.mark.parametrize(
    ("line", "expected"),
    [
        ("L <= 7 m", "L≤7m; 6.000≤7.000m"),
        ("L <= 5 m", "L≤5m; 6.000>5.000m"),  # an exceeded check shows how the sides stand
        ("n/4 + n/8 <= 2", "n4+n8≤2; 34+38≤2; 1.125≤2"),
    ],
)
def test_checks(line: str, expected: str) -> None:
    calc = working(line, inputs=INPUTS)
    (row,) = rows(calc)
    assert isinstance(row, CheckRow)
    assert read(equations.check(row, calc.calc.source)) == expected


def test_a_long_equation_asks_for_room() -> None:
    short = working("M = w*L^2/8", inputs=INPUTS)
    long = working("M = w*L^2*" + "*".join(["n"] * 40), inputs=INPUTS)
    found = [equations.derived(rows(c)[0], c.calc.source) for c in (short, long)]  # type: ignore[arg-type]
    assert [e.room for e in found] == ["", "broadest"]
