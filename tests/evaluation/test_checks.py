"""Checks: verdict, utilisation, and the statements that are none."""

from __future__ import annotations

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st

from tests.evaluation.helpers import codes, working


@pytest.mark.parametrize(
    ("statement", "satisfied", "utilisation"),
    [
        ("3 kN <= 4 kN", True, 0.75),
        ("4 kN <= 4 kN", True, 1.0),
        ("5 kN <= 4 kN", False, 1.25),
        ("4 kN >= 3 kN", True, 0.75),
        ("3 kN >= 4 kN", False, 4 / 3),
        ("3 kN < 4 kN", True, 0.75),
        ("4 kN < 4 kN", False, None),  # at its limit: not satisfied, and no ratio of at most 1 may say so
        ("-60 kN <= -50 kN", True, 50 / 60),  # both negative
        ("-40 kN <= -50 kN", False, 50 / 40),
        ("-40 kN >= -50 kN", True, 0.8),
        ("12 kN >= 0 kN", True, None),  # against a literal zero
        ("-1 kN >= 0 kN", False, None),
        ("-1 kN <= 0 kN", True, None),
        ("0.1 + 0.2 <= 0.3", True, 1.0),  # not decided by the last bit
        ("1000 mm <= 1 m", True, 1.0),
        ("abs(-3 kN) <= 4 kN", True, 0.75),
        ("1 kN - 1 kN <= 4 kN", True, 0.0),
        ("4 kN <= 1 kN - 1 kN", False, None),  # no capacity at all
    ],
)
def test_verdict(statement: str, satisfied: bool, utilisation: float | None) -> None:
    calc = working(statement)
    (check,) = calc.checks
    assert check.satisfied is satisfied
    assert check.utilisation == (None if utilisation is None else pytest.approx(utilisation, rel=1e-11))
    assert calc.standing == ("satisfied" if satisfied else "exceeded")


@pytest.mark.parametrize(
    ("lines", "found"),
    [
        (("3 kN <= 4 m",), ["dimension-mismatch"]),
        (("-3 kN <= 4 kN",), ["opposite-signs"]),
        (("1 <= 2", "1 <= 2"), ["label-used-twice"]),
        (("1 <= 2 | bending", "1 <= 3 | bending"), ["label-used-twice"]),
        (("1 < 2 < 3",), ["chain"]),
    ],
)
def test_statements_that_are_no_check(lines: tuple[str, ...], found: list[str]) -> None:
    calc = working(*lines)
    assert len(codes(calc)) == len(found)
    assert calc.standing == "in error"


def test_labels_and_addresses() -> None:
    calc = working("1 <= 2 | bending at midspan", "1 <= 2 | bending, at midspan", "1   <=  3")
    assert [c.label for c in calc.checks] == ["bending at midspan", "bending, at midspan", "1 <= 3"]
    assert len({c.address for c in calc.checks}) == 3
    assert calc.checks[0].address == "check-bending-at-midspan"


def test_governing_is_an_exceeded_check_before_the_greatest_ratio() -> None:
    calc = working("0.99 <= 1 | a", "-1 kN >= 0 kN | uplift", "0.5 <= 1 | b")
    assert calc.governing is not None
    assert calc.governing.label == "uplift"


sides = st.floats(min_value=1e-6, max_value=1e6).map(lambda v: float(f"{v:.6e}"))


@given(sides, sides, st.booleans(), st.sampled_from(["<=", ">="]))
def test_utilisation_is_at_most_one_exactly_when_satisfied(
    a: float, b: float, negative: bool, operator: str
) -> None:
    sign = "-" if negative else ""
    (check,) = working(f"{sign}{a!r} {operator} {sign}{b!r}").checks
    assert check.utilisation is not None
    assert check.satisfied == (check.utilisation <= 1)
    left, right = (-a, -b) if negative else (a, b)
    if not math.isclose(a, b, rel_tol=1e-10):
        assert check.satisfied == (left <= right if operator == "<=" else left >= right)
