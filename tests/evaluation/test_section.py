"""Sections: shapes as written, catalogued profiles, names under both conventions, faults."""

from __future__ import annotations

import math

import pytest

from calcgen.evaluation.conventions import PROPERTIES, names
from calcgen.evaluation.results.calc import EvaluatedCalc
from calcgen.evaluation.results.section import SectionResult
from tests.evaluation.helpers import codes, evaluated, fence, shown


def section(shape: str, *lines: str, axes: str = "eurocode") -> EvaluatedCalc:
    text = "# T\n" + fence("section main", f"shape = {shape}") + fence("working", *lines)
    (calc,) = evaluated(text, axes=axes)  # type: ignore[arg-type]
    return calc


def result(calc: EvaluatedCalc) -> SectionResult:
    return next(s for s in calc.segments if isinstance(s, SectionResult))


@pytest.mark.parametrize(
    ("shape", "name", "text"),
    [  # closed forms: b·h, b·h³/12, b·h²/6, b·h²/4, π·d⁴/64, h/√12
        ("rectangle(b = 100 mm, h = 200 mm)", "A", "200.0 cm²"),
        ("rectangle(b = 100 mm, h = 200 mm)", "I_y", "6667 cm⁴"),
        ("rectangle(b = 100 mm, h = 200 mm)", "I_z", "1667 cm⁴"),
        ("rectangle(b = 100 mm, h = 200 mm)", "W_el_y", "666.7 cm³"),
        ("rectangle(b = 100 mm, h = 200 mm)", "W_pl_y", "1000 cm³"),
        ("rectangle(b = 100 mm, h = 200 mm)", "i_y", "57.74 mm"),
        ("rectangle(b = 100 mm, h = 200 mm)", "Q_y", "500.0 cm³"),
        ("rectangle(b = 100 mm, h = 200 mm) turned 90 deg", "I_y", "1667 cm⁴"),
        ("rectangle(b = 100 mm, h = 200 mm) at (10 mm, -20 mm)", "y_bar", "−20.00 mm"),
        ("circle(d = 100 mm)", "I_y", "490.9 cm⁴"),
        ("tube(d = 100 mm, t = 10 mm)", "A", "28.27 cm²"),
        ("box(b = 100 mm, h = 200 mm, t = 10 mm)", "I_y", "2779 cm⁴"),
        ("polygon((0 mm, 0 mm), (90 mm, 0 mm), (0 mm, 60 mm))", "I_yz", "−40.50 cm⁴"),  # -b²·h²/72
        ('rolled("IPE 240")', "W_pl_y", "366.6 cm³"),  # EN 10365, from memory
        ('rolled("ipe240")', "h", "240.0 mm"),
        ('rolled("IPE 240") turned 90 deg', "I_z", "3892 cm⁴"),
    ],
)
def test_property(shape: str, name: str, text: str) -> None:
    calc = section(shape, f"x = main.{name}")
    assert codes(calc) == []
    found = {r.name: r.shown.text.replace("\u00a0", " ") for r in result(calc).results}
    assert found.get(name, shown(calc, "x")) == text


@pytest.mark.parametrize(
    ("radii", "area"),
    [  # 100 x 100 x 5 from memory of EN 10210-2 (1.5 t and 1.0 t) and EN 10219-2 (2.0 t and 1.0 t)
        ("r_o = 7.5 mm", 18.7),
        ("r_o = 7.5 mm, r_i = 5 mm", 18.7),
        ("r_o = 10 mm", 18.4),
    ],
)
def test_corner_radii_of_hollow_sections(radii: str, area: float) -> None:
    calc = section(f"box(b = 100 mm, h = 100 mm, t = 5 mm, {radii})")
    (A,) = (r for r in result(calc).results if r.name == "A")
    assert A.value.si == pytest.approx(area * 1e-4, rel=0.003)


def test_american_names() -> None:
    calc = section(
        'rolled("W18x50")', "Z = main.Z_x", "S = main.S_x", "r = main.r_y", "t = main.t_f", axes="american"
    )
    assert codes(calc) == []
    assert shown(calc, "Z") == "101.0 in³"  # AISC Manual Table 1-1, from memory
    assert shown(calc, "S") == "88.90 in³"
    assert shown(calc, "r") == "1.650 in"
    assert shown(calc, "t") == "0.5700 in"


def test_the_same_symbol_means_another_axis_under_the_other_convention() -> None:
    for axes, about in (("eurocode", "horizontal"), ("american", "vertical")):
        calc = section("rectangle(b = 1 in, h = 2 in)", "I = main.I_y", axes=axes)
        (I_y,) = (r for r in result(calc).results if r.name == "I_y")
        assert about in I_y.meaning


@pytest.mark.parametrize("p", PROPERTIES, ids=lambda p: p.key)
def test_a_name_of_the_other_convention_says_which_to_use(p: object) -> None:
    from calcgen.evaluation.conventions import PropertyName

    assert isinstance(p, PropertyName)
    for axes, other in (("eurocode", p.american), ("american", p.eurocode)):
        if not (other and p.name(axes)) or other in names(axes):  # type: ignore[arg-type]
            continue
        calc = section("rectangle(b = 100 mm, h = 200 mm)", f"x = main.{other}", axes=axes)
        assert codes(calc) == ["other-convention"]
        assert f"write {p.name(axes)}: {p.meaning}" in calc.diagnostics[0].hint  # type: ignore[arg-type]


@pytest.mark.parametrize(
    ("shape", "code"),
    [
        ("rectangle(b = 100 mm)", "argument-missing"),
        ("rectangle(b = 100 mm, h = 5 kN)", "wrong-dimension"),
        ("rectangle(b = 100, h = 200 mm)", "wrong-dimension"),
        ("rectangle(b = 0 mm, h = 200 mm)", "shape-does-not-fit"),
        ("rectangle(b = -1 mm, h = 200 mm)", "shape-does-not-fit"),
        ("rectangle(b = 100 mm, h = 200 mm, t = 3 mm)", "unknown-word"),
        ("rectangle(b = 100 mm, h = 200 mm, d = 3 mm)", "written-twice"),
        ("tube(d = 100 mm, t = 60 mm)", "shape-does-not-fit"),
        ("i_shape(h = 200 mm, b = 100 mm, t_w = 5 mm, t_f = 8 mm, r = 90 mm)", "shape-does-not-fit"),
        ("polygon((0 mm, 0 mm), (1 m, 1 m), (1 m, 0 mm), (0 mm, 1 m))", "outline"),
        ("strip(t = 2 mm, (0 mm, 0 mm))", "shape-does-not-fit"),
        ("strip(t = 2 mm, r = 90 mm, (0 mm, 0 mm), (50 mm, 0 mm), (50 mm, 50 mm))", "shape-does-not-fit"),
        ("strip((0 mm, 0 mm), (50 mm, 0 mm))", "argument-missing"),
        ("zed(h = 200 mm, b = 5 mm, t = 10 mm)", "shape-does-not-fit"),
        ('rolled("IPE 245")', "unknown-profile"),
        ("rolled(240 mm)", "rolled-arguments"),
    ],
)
def test_fault(shape: str, code: str) -> None:
    calc = section(shape, "x = main.A")
    assert codes(calc) == [code]  # and nothing more for what depends on it


def test_the_nearest_profiles_are_hinted() -> None:
    assert "IPE 240" in section('rolled("IPE 245")').diagnostics[0].hint


def test_a_property_that_is_not_there() -> None:
    calc = section("rectangle(b = 100 mm, h = 200 mm)", "x = main.W_ely")
    assert codes(calc) == ["no-such-result"]
    assert "'W_el_y'" in calc.diagnostics[0].hint


def test_published_values_govern_and_stand_beside_the_outline() -> None:
    found = result(section('rolled("IPE 300")'))
    by_name = {r.name: r for r in found.results}
    assert by_name["I_y"].provenance == "published"
    assert by_name["I_yz"].provenance == "from the outline"
    assert {p.name for p in found.published} >= {"A", "I_y", "I_z", "W_el_y", "W_pl_y"}
    assert all(abs(p.difference) <= p.tolerance for p in found.published)
    assert all(r.holds for r in found.second_route)


def test_principal_axes_of_an_angle() -> None:
    calc = section(
        "angle(h = 100 mm, b = 100 mm, t = 10 mm, r_1 = 12 mm, r_2 = 6 mm)", "a = main.α_p", "I = main.I_1"
    )
    # the stiffer axis of an equal angle, heel bottom left, is its axis of symmetry's normal… turned by 45°
    value = calc.values["a"][0]
    assert not isinstance(value, str | bool)
    assert abs(value.si) == pytest.approx(math.pi / 4, rel=1e-9)
    major = calc.values["I"][0]
    assert not isinstance(major, str | bool)
    assert major.si == pytest.approx(280e-8, rel=0.00196)  # EN 10056-1, from memory
