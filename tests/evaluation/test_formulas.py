"""Formulas: values, units, dimensions, and each fault at its place."""

from __future__ import annotations

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st

from calcgen.quantities.measure import Measure
from tests.evaluation.helpers import codes, shown, working

INPUTS = (
    "L = 6.0 m",
    "q = 5 kPa",
    "s = 900 mm",
    "P = 40 kN",
    'grade = "S275"',
    "on = yes",
    "n = 4",
    "T_1 = 20 °C",
)


@pytest.mark.parametrize(
    ("formula", "text"),
    [
        ("1.5*q*s*L^2/8", "30.38 kN·m"),
        ("L + 250 mm", "6.250 m"),  # the first unit is kept
        ("250 mm + L", "6250 mm"),
        ("L/250", "0.02400 m"),
        ("2*L - s/3", "11.70 m"),
        ("-L^2", "−36.00 m²"),
        ("(-L)^2", "36.00 m²"),
        ("2^3^2", "512"),
        ("2^-1", "0.5000"),
        ("sqrt(L^2 + (8 m)^2)", "10.00 m"),
        ("cbrt(-8)", "−2"),
        ("sqrt(4 m)", "2.000 m^0.5"),  # on the way to something else
        ("sqrt(4 kPa)*sqrt(9 kPa)", "6.000 kPa"),
        ("(1 m)^0.3333", "1.000 m^0.3333"),
        ("cbrt(8 m)", "2.000 m^0.333333333"),
        ("1/sqrt(4 m)", "0.5000 m^-0.5"),
        ("abs(-P)", "40.00 kN"),
        ("min(L, 5 m, 7 m)", "5.000 m"),
        ("max(L, 7000 mm)", "7000 mm"),
        ("sin(30 deg)", "0.5000"),
        ("cos(π/3)", "0.5000"),
        ("tan(45 deg)", "1"),
        ("atan2(1 m, 1 m)*180/pi", "45"),
        ("asin(1) + acos(1) + atan(0)", "1.571"),
        ("exp(1)", "2.718"),
        ("ln(exp(2))", "2"),
        ("log10(1000)", "3"),
        ("round(L/7, 5 mm)", "0.8550 m"),
        ("ceil(L/7, 5 mm)", "0.8600 m"),
        ("floor(L/7, 5 mm)", "0.8550 m"),
        ("ceil(250 mm, 5 mm)", "250.0 mm"),  # not 255 for the last bit of 0.25
        ("interpolate(2 m, 1 m, 10 kN, 3 m, 30 kN)", "20.00 kN"),
        ("P/1 kN", "40"),
        ("3 kN/m*L", "18.00 kN"),
        ("3 kN/m * L", "18.00 kN"),
        ("10 kg*g_n", "0.09807 kN"),
        ("T_1 + 15 K", "35.00 °C"),
        ("T_1 - 5 °C", "15.00 K"),
        ("-10 °C", "−10.00 °C"),  # below zero, not the opposite of a temperature
        ("T_1 - -10 °C", "30.00 K"),
        ("5 %*P", "2.000 kN"),
        ("n*P", "160.0 kN"),
        ("P/n", "10.00 kN"),
    ],
)
def test_value(formula: str, text: str) -> None:
    calc = working(f"x = {formula}", inputs=INPUTS)
    assert codes(calc) == []
    assert shown(calc, "x") == text


@pytest.mark.parametrize(
    ("statement", "code", "column"),
    [
        ("x = P + L", "dimension-mismatch", 7),
        ("x = L - 3", "dimension-mismatch", 7),
        ("x = min(P, L)", "dimension-mismatch", 5),
        ("x = sin(L)", "dimension-mismatch", 9),
        ("x = round(L, 5 kN)", "dimension-mismatch", 5),
        ("x = 2^L", "exponent-has-dimension", 7),
        ("x = P/(L - 6 m)", "division-by-zero", 6),
        ("x = 0^-1", "division-by-zero", 6),
        ("x = sqrt(-P)", "outside-domain", 5),
        ("x = (-2)^0.5", "outside-domain", 9),
        ("x = ln(0)", "outside-domain", 5),
        ("x = asin(2)", "outside-domain", 5),
        ("x = interpolate(9 m, 1 m, 1, 3 m, 2)", "outside-domain", 17),
        ("x = interpolate(2 m, 1 m, 1, 1 m, 2)", "division-by-zero", 5),
        ("x = round(L, 0 mm)", "outside-domain", 5),
        ("x = exp(1000)", "outside-domain", 5),
        ("x = -T_1", "outside-domain", 5),
        ("x = 1e200*1e200", "not-finite", 10),
        ("x = 2^5000", "not-finite", 6),
        ("x = grade + 1", "not-a-number", 5),
        ("x = sqrt(on)", "not-a-number", 10),
        ("x = M_Ed", "unknown-name", 5),
        ("x = L.y", "no-such-result", 7),
        ("x = L(2 m)", "not-a-function", 5),
        ("x [kN] = L", "unit-mismatch", 4),
        ("L = 3 m", "name-defined-twice", 1),
        ("g_n = 9.81", "reserved-name", 1),
        ("x = 5 kN/s", "unit-or-name", 10),
    ],
)
def test_fault(statement: str, code: str, column: int) -> None:
    calc = working(statement, inputs=INPUTS)
    assert [(d.code, d.column) for d in calc.diagnostics] == [(code, column)]
    assert calc.standing == "in error"
    assert "x" not in calc.values


def test_every_fault_of_a_formula_is_reported_and_what_depends_on_it_is_not() -> None:
    calc = working("x = P + L", "y = a + b", "z = x + y", "z <= 3 kN", inputs=INPUTS)
    assert codes(calc) == ["dimension-mismatch", "unknown-name", "unknown-name"]
    assert calc.checks == ()


def test_a_name_defined_further_down_is_said_to_be() -> None:
    calc = working("x = y", "y = 2")
    assert "further down" in calc.diagnostics[0].hint


def test_the_nearest_name_is_hinted() -> None:
    calc = working("x = M_ed", inputs=("M_Ed = 3 kN·m",))
    assert "'M_Ed'" in calc.diagnostics[0].hint


CASES = (
    "χ = 1.0                 when λ <= 0.2",
    "  = 1/(λ + sqrt(λ^2 - 0.04)) when λ <= 3",
    "  = 0 otherwise",
)


@pytest.mark.parametrize(
    ("slenderness", "factor"), [(0.1, 1.0), (0.2, 1.0), (2.0, 1 / (2 + math.sqrt(3.96))), (4.0, 0.0)]
)
def test_cases(slenderness: float, factor: float) -> None:
    calc = working(*CASES, inputs=(f"λ = {slenderness}",))
    value = calc.values["χ"][0]
    assert codes(calc) == []
    assert isinstance(value, Measure)
    assert value.si == pytest.approx(factor, rel=1e-12)


@pytest.mark.parametrize(
    ("lines", "found"),
    [
        (("x = 1 when 2 < 1",), ["no-case-holds"]),
        (("x = 1 m when 1 < 2", "  = 1 kN otherwise"), ["cases-differ"]),  # also in the case not taken
        (("x = 1 when 1 < 2", "  = 1/0 otherwise"), []),  # arithmetic of a case not taken is not done
        (("x = 1 when 1 < 2", "  = q otherwise"), ["unknown-name"]),  # its names are
        (('x = 1 when "a" == "b" or not (1 m > 2 m and 3 <= 4)',), []),
        (('x = 1 when "a" < "b"',), ["not-a-number"]),
        (("x = 1 when 1 m < 2",), ["dimension-mismatch"]),
    ],
)
def test_faults_in_cases(lines: tuple[str, ...], found: list[str]) -> None:
    assert codes(working(*lines)) == found


@given(
    st.lists(
        st.floats(min_value=-1e6, max_value=1e6, allow_nan=False).map(lambda v: round(v, 3)),
        min_size=2,
        max_size=6,
    ),
    st.lists(st.sampled_from("+-*"), min_size=5, max_size=5),
)
def test_numbers_obey_the_rules_of_arithmetic(numbers: list[float], operators: list[str]) -> None:
    text = "".join(f"{n:f}{o}" for n, o in zip(numbers, operators, strict=False)).rstrip("+-*")
    while text and not text[-1].isdigit():
        text = text[:-1]
    calc = working(f"x = {text}")
    value = calc.values["x"][0]
    assert isinstance(value, Measure)
    # Python's own arithmetic is the oracle here: the same precedence for + - * and the sign
    assert value.si == pytest.approx(eval(text), rel=1e-12, abs=1e-12)  # noqa: S307


def test_a_dash_between_a_whole_number_and_a_fraction_is_told() -> None:
    calc = working("x = 3-1/2 in")
    assert codes(calc) == ["dimension-mismatch"]
    assert calc.diagnostics[0].hint == "write 3 1/2 in for a length"
