"""Tables: what is looked up, interpolation against numpy and scipy, which lookups a page lists, faults."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy.interpolate import RegularGridInterpolator

from calcgen.evaluation.results.calc import EvaluatedCalc
from calcgen.evaluation.results.table import TableResult
from calcgen.quantities.measure import Measure
from tests.evaluation.helpers import codes, evaluated, fence, shown

K_MOD = fence(
    "table k_mod | EN 1995-1-1 Table 3.1",
    "        | permanent | medium | short",
    "class 1 | 0.60      | 0.80   | 0.90",
    "class 3 | 0.50      | 0.65   |",
)
K_T = fence("table k_t", "       | k", "20 mm  | 1.0", "40 mm  | 0.8", "100 mm | 0.5")
FALLING = fence("table k_f", "     | k", "4 m  | 10 kN", "2 m  | 20 kN", "-1 m | 50 kN")
PLANE = fence(
    "table c_p",
    "      | 0 deg   | 15 deg  | 45 deg",
    "0.5 m | 1.0 kPa | 1.5 kPa | 4 kPa",
    "2 m   | 2 kPa   | 700 Pa  | 3 kPa",
    "6 m   | -1 kPa  | 0 kPa   |",
)
CLASSES = fence("table timber", "    | f_m_k  | ρ_k", "C24 | 24 MPa | 350 kg/m³", "C30 | 30 MPa | 380 kg/m³")
PRINTED = fence("table printed", "    | C24 | C30", "f_m | 24 MPa | 30 MPa", "ρ | 350 kg/m³ | 380 kg/m³")
TABLES = K_MOD + K_T + FALLING + PLANE + CLASSES + PRINTED


def calc(*lines: str, inputs: tuple[str, ...] = (), tables: str = TABLES) -> EvaluatedCalc:
    blocks = (fence("inputs", *inputs) if inputs else "") + (fence("working", *lines) if lines else "")
    (found,) = evaluated(f"# T\n{tables}{blocks}")
    return found


LOOKED_UP = [
    ('k_mod("class 1", "medium")', "0.8000"),
    ('k_mod("class 3", "permanent")*2 kN', "1.000 kN"),
    ("k_t(20 mm)", "1"),
    ("k_t(0.04 m)", "0.8000"),
    ("k_t(35 mm)", "0.8500"),
    ('k_t(35 mm, "k")', "0.8500"),
    ("k_t(30 mm + 0.1 m - 0.1 m)", "0.9000"),
    ("k_t(0.1 m + 0.2 m - 0.2 m)", "0.5000"),  # 0.10000000000000003 m in binary
    ("k_f(3 m)", "15.00 kN"),
    ("k_f(0 m)", "40.00 kN"),
    ("c_p(0.5 m, 10 deg)", "1.333 kPa"),
    ("c_p(1 m, 15 deg)", "1.233 kPa"),
    ("c_p(2 m, 45 deg)", "3.000 kPa"),
    ('timber("C30", "ρ_k")', "380.0 kg/m³"),
    ('timber("C24", "f_m_k")', "24.00 MPa"),
    ('printed("ρ", "C24")', "350.0 kg/m³"),
]


@pytest.mark.parametrize(("expression", "value"), LOOKED_UP)
def test_values_looked_up(expression: str, value: str) -> None:
    found = calc(f"x = {expression}")
    assert codes(found) == []
    assert shown(found, "x") == value


def test_a_head_may_be_an_input() -> None:
    found = calc("k = k_mod(class, duration)", inputs=('class = "class 3"', 'duration = "medium"'))
    assert shown(found, "k") == "0.6500"


def test_temperatures_are_heads_and_values() -> None:
    table = fence("table T_g", "      | T", "-10 °C | 5 °C", "30 °C | 25 °C")
    found = calc("T = T_g(10 °C)", "a [K] = T_g(-10 °C)", tables=table)
    assert (shown(found, "T"), shown(found, "a")) == ("15.00 °C", "278.2 K")


HEIGHTS, ANGLES = (0.5, 2.0, 6.0), (0.0, 15.0, 45.0)
GRID = np.array([[1.0, 1.5, 4.0], [2.0, 0.7, 3.0], [-1.0, 0.25, 5.0]])
WHOLE = fence(
    "table g",
    " | " + " | ".join(f"{a} deg" for a in ANGLES),
    *(f"{h} m | " + " | ".join(f"{v} kPa" for v in row) for h, row in zip(HEIGHTS, GRID, strict=True)),
)


@settings(max_examples=25, deadline=None)
@given(st.floats(0.5, 6.0), st.floats(0.0, 45.0))
def test_along_rows_and_columns_the_value_is_bilinear(height: float, angle: float) -> None:
    h, a = round(height, 6), round(angle, 6)
    found = calc(f"x [kPa] = g({h:.6f} m, {a:.6f} deg)", tables=WHOLE)
    value = found.values["x"][0]
    assert isinstance(value, Measure)
    expected = RegularGridInterpolator((HEIGHTS, ANGLES), GRID)([h, a])[0]  # scipy, linear
    assert value.si / 1e3 == pytest.approx(float(expected), abs=1e-9)


@settings(max_examples=25, deadline=None)
@given(st.floats(20.0, 100.0))
def test_along_rows_the_value_is_piecewise_linear(depth: float) -> None:
    d = round(depth, 6)
    found = calc(f"x = k_t({d:.6f} mm)", tables=K_T)
    value = found.values["x"][0]
    assert isinstance(value, Measure)
    assert value.si == pytest.approx(float(np.interp(d, [20, 40, 100], [1.0, 0.8, 0.5])), abs=1e-11)


CALLS = [
    ('k_mod("class1", "medium")', '"class1"', "no-such-head", 'the nearest is "class 1"'),
    ('k_mod("class 1", "Medium")', '"Medium"', "no-such-head", 'the nearest is "medium"'),
    ('k_mod("medium", "class 1")', '"medium", "class 1"', "no-such-head", 'write k_mod("class 1", "medium")'),
    ("c_p(20 deg, 2 m)", "20 deg, 2 m", "no-such-head", "write c_p(2 m, 20 deg)"),
    ('k_mod("class 1", medium)', "medium", "unknown-name", 'quotes are missing: "medium" is a head'),
    ('k_mod(1, "medium")', "1", "no-such-head", "found by a text, this is a plain number"),
    ('k_t("20 mm")', '"20 mm"', "not-a-number", "found by length, this is a text"),
    ("k_t(yes)", "yes", "not-a-number", "this is yes or no"),
    ("k_t(2 kN)", "2 kN", "wrong-dimension", "found by length, this is force"),
    (
        "k_t(19.999 mm)",
        "19.999 mm",
        "table-range",
        "19.999 mm lies outside the rows of 'k_t', 20 mm to 100 mm",
    ),
    ("k_f(-2 m)", "-2 m", "table-range", "−2 m lies outside the rows of 'k_f', −1 m to 4 m"),
    ("c_p(2 m, 0.8)", "0.8", "table-range", "the columns of 'c_p'"),
    ('k_mod("class 3", "short")', 'k_mod("class 3", "short")', "table-empty-cell", "(class 3, short)"),
    ("c_p(3 m, 40 deg)", "c_p(3 m, 40 deg)", "table-empty-cell", "(6 m, 45 deg)"),
    ('k_mod("class 1")', 'k_mod("class 1")', "argument-count", "two arguments, row and column"),
    ("k_t(20 mm, 1, 2)", "k_t(20 mm, 1, 2)", "argument-count", "write k_t(20 mm)"),
    ("k_t()", "k_t()", "argument-count", "0 given"),
    ("k_mod", "k_mod", "block-is-no-value", "k_mod(row, column)"),
    ("k_mod.permanent", "permanent", "no-such-result", 'k_mod("class 1", "permanent")'),
    ('k_mode("class 1", "medium")', "k_mode", "unknown-name", "'k_mod'"),
]


@pytest.mark.parametrize(("expression", "place", "code", "words"), CALLS)
def test_faults_of_a_call(expression: str, place: str, code: str, words: str) -> None:
    (fault,) = calc(f"x = {expression}").diagnostics
    assert (fault.code, fault.source.slice(fault.span)) == (code, place)
    assert words in f"{fault.message} / {fault.hint}".replace("\u00a0", " ")


TABLE_FAULTS = [
    ((" | a", "1 m | 1", "2 kN | 2"), (4, 1, "wrong-dimension"), "length, this is force"),
    ((" | a", "1 m | 1", "3 m | 2", "2 m | 3"), (5, 1, "table-heads"), "out of order"),
    ((" | a", "1 m | 1", "1000 mm | 2"), (4, 1, "table-heads"), "out of order"),
    ((" | 2 m | 1 m | 1 m", "x | 1 | 2 | 3"), (2, 16, "table-heads"), "out of order"),
    ((" | a", "x | 1 kN", "y | 2"), (4, 5, "wrong-dimension"), "a plain number"),
    ((" | a | b", "1 m | 1 | 2 kN", "2 m | 1 | 2 m"), (4, 11, "wrong-dimension"), "length"),
    ((" | 1 m | 2 m", "x | 1 | 2 kN", "y | 1 kN | 2 kN"), (3, 9, "wrong-dimension"), "force"),
    ((" | 1 m | 2 m", "1 m | 1 | 2", "2 m | 1 kN | "), (4, 7, "wrong-dimension"), "force"),
    ((" | a | b", "x | 1 | 2 kN", "y | 1 m | 2 kN", "z | 1 | 3 kN"), (4, 5, "wrong-dimension"), "length"),
]


@pytest.mark.parametrize(("lines", "place", "words"), TABLE_FAULTS)
def test_faults_of_a_table(lines: tuple[str, ...], place: tuple[int, int, str], words: str) -> None:
    found = calc(tables=fence("table t", *lines))
    (fault,) = found.diagnostics
    assert (fault.line - 1, fault.column, fault.code) == place
    assert words in fault.message


def test_what_depends_on_a_table_in_error_reports_nothing_more() -> None:
    found = calc("a = t(1 m)", "b = 2*a", tables=fence("table t", " | a", "1 m | 1", "2 kN | 2"))
    assert codes(found) == ["wrong-dimension"]


def test_a_table_takes_a_name_of_the_calc() -> None:
    assert codes(calc(tables=K_T + K_T)) == ["name-defined-twice"]
    assert codes(calc("x = k_t(20 mm)", tables="")) == ["unknown-name"]
    below = "# T\n" + fence("working", "x = k_t(20 mm)") + K_T
    (found,) = evaluated(below)
    assert "further down" in found.diagnostics[0].hint


def test_a_case_not_taken_may_lie_outside_the_table() -> None:
    lines = ("k = k_t(d) when d <= 100 mm", "  = 0.5 otherwise")
    assert shown(calc(*lines, inputs=("d = 200 mm",)), "k") == "0.5000"
    outside = calc("k = k_t(d) when d > 0 mm", "  = 0.5 otherwise", inputs=("d = 200 mm",))
    assert codes(outside) == ["table-range"]


def test_a_case_not_taken_is_still_checked_for_dimensions() -> None:
    lines = ("k = k_t(2 kN) when d <= 100 mm", "  = 0.5 otherwise")
    assert codes(calc(*lines, inputs=("d = 200 mm",))) == ["wrong-dimension"]


def test_another_calc_takes_the_table_or_one_of_its_values() -> None:
    lines = ("k_mod of C-1", 'k = k_mod("class 1", "short") of C-1', 'a = k_mod("class 9", "short") of C-1')
    _, user = evaluated("# Basis\n" + K_MOD, "# User\n" + fence("inputs", *lines))
    assert shown(user, "k") == "0.9000"
    assert [(d.line, d.code) for d in user.diagnostics] == [(5, "no-such-head")]


def test_values_and_heads_stay_as_typed() -> None:
    (table,) = (s for s in calc(tables=PLANE).segments if isinstance(s, TableResult))
    assert [h.shown.text for h in table.columns] == ["0\u00a0deg", "15\u00a0deg", "45\u00a0deg"]
    texts = [None if cell is None else cell.shown.text.replace("\u00a0", " ") for cell in table.cells[2]]
    assert texts == ["−1 kPa", "0 kPa", None]


def test_every_lookup_is_listed_with_the_heads_it_finds() -> None:
    text = "# T\n" + K_MOD + K_T + "Here {k_t(20 mm)}.\n"
    text += fence("inputs", "d = 35 mm")
    text += fence(
        "working",
        'k = k_mod("class 1", "short") when d > 1 m',
        "  = k_t(d) when k_t(40 mm) < 1",
        "  = k_t(100 mm) otherwise",
        'k <= k_mod("class 1", "medium") + 1',
    )
    text += fence("beam b", "span = 4 m", "EI = 1000 kN·m^2", "load G uniform 5 kN/m*k_t(100 mm)")
    (found,) = evaluated(text)
    assert codes(found) == []
    assert [(x.table, x.rows, x.columns, x.value.text) for x in found.lookups] == [
        ("k_t", (0,), (0,), "1"),
        ("k_t", (0, 1), (0,), "0.8500"),
        ("k_t", (1,), (0,), "0.8000"),
        ("k_mod", (0,), (1,), "0.8000"),
        ("k_t", (2,), (0,), "0.5000"),
    ]
