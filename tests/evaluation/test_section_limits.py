"""Numbers that no section has: one diagnostic each, and no exception; and what a shape's faults tell."""

from __future__ import annotations

import math

import pytest

from calcgen.evaluation.quantity import LARGEST
from calcgen.evaluation.results.calc import EvaluatedCalc
from calcgen.evaluation.results.section import SectionResult
from calcgen.quantities.display import KINDS
from tests.evaluation.helpers import codes, evaluated, fence

PLATE = "part a = rectangle(b = 100 mm, h = 200 mm)"


def section(*lines: str, force: str = "M = 3 kN·m", axes: str = "eurocode") -> EvaluatedCalc:
    text = "# T\n" + fence("section main", *lines) + fence("stress s", "section = main", force)
    (calc,) = evaluated(text, axes=axes)  # type: ignore[arg-type]
    return calc


def said(calc: EvaluatedCalc) -> str:
    (d,) = calc.diagnostics
    return f"{d.message} / {d.label} / {d.hint}".replace("\u00a0", " ")


@pytest.mark.parametrize(
    ("lines", "code", "words"),
    [
        (("shape = circle(d = 1e60 mm)",), "number-too-large", ("length of 1.000 × 10⁶⁰ mm", "10⁹ mm")),
        ((PLATE + " at (1e300 mm, 0 mm)",), "number-too-large", ("1.000 × 10³⁰⁰ mm",)),
        ((PLATE + " at (0 mm, 1e308 mm)",), "number-too-large", ("1.000 × 10³⁰⁸ mm",)),
        ((PLATE, "part q = circle(d = 1 m) at (1e12 mm, 198 mm)"), "number-too-large", ("10¹² mm",)),
        ((PLATE, "hole g = circle(d = 1e-9 mm) at (-32 mm, 1e12 mm)"), "number-too-large", ()),
        ((PLATE, "modulus c = 1e308 GPa"), "number-too-large", ("stress of 1e308 GPa", "10⁶ GPa")),
        ((PLATE, "strength c = 1e308 MPa"), "number-too-large", ("1e308 MPa",)),
        ((PLATE + " turned 1e20 deg",), "number-too-large", ("angle of 1.000 × 10²⁰", "360000 deg")),
        ((PLATE + " turned 1e308 deg",), "number-too-large", ("an angle of",)),
        (("shape = circle(d = 1e-60 mm)",), "too-far-apart", ("its size is 1.000 × 10⁻⁶⁰ mm",)),
        ((PLATE, "hole g = circle(d = 1e-9 mm)"), "too-far-apart", ("too small",)),
        (
            (PLATE, "part q = circle(d = 10 mm) at (100 km, 0 mm)"),
            "too-far-apart",
            ("7.854 mm thick", "reaches 1.000 × 10⁸ mm"),
        ),
        (  # each is well beside its own place; the first vanishes beside the second
            (PLATE, "part q = circle(d = 10 km) at (900 km, 0 mm)"),
            "too-far-apart",
            ("100.0 mm thick", "reaches 9.050 × 10⁸ mm"),
        ),
        ((PLATE, "modulus c = 1e-300 GPa"), "too-far-apart", ("modulus of 'c'", "1.000 × 10⁻³⁰⁰ GPa")),
        (
            (
                PLATE + " of c",
                "part q = circle(d = 10 mm) at (70 mm, 0 mm) of d",
                "modulus c = 1 MPa",
                "modulus d = 1e6 GPa",
                "strength c = 1 MPa",
                "reference = c",
            ),
            "too-far-apart",
            (),
        ),
    ],
)
def test_one_clear_diagnostic(lines: tuple[str, ...], code: str, words: tuple[str, ...]) -> None:
    calc = section(*lines)
    if "1 MPa" in " ".join(lines):  # a ratio of 10⁹ is the largest
        assert codes(calc) == []
        calc = section(*(line.replace("modulus c = 1 MPa", "modulus c = 0.9 MPa") for line in lines))
    assert codes(calc) == [code]
    assert all(each in said(calc) for each in words), said(calc)


@pytest.mark.parametrize("force", ["M = 1e308 kN·m", "N = -1e300 kN", "V = 1e308 kN", "T = 1e20 kN·m"])
def test_forces(force: str) -> None:
    calc = section(PLATE, force=force)
    assert codes(calc) == ["number-too-large"]
    assert "the limit is 1.000 × 10¹" in said(calc)


@pytest.mark.parametrize("kind", [k for k in LARGEST if k in KINDS])
def test_the_limit_itself_can_be_computed_with(kind: str) -> None:
    """Products of six lengths, or a stress over the least area, are still numbers."""
    assert math.isfinite(LARGEST[kind] ** 6)


@pytest.mark.parametrize("size", ["1e-7 mm", "1 km", "1e9 mm"])
def test_very_small_and_large_sections(size: str) -> None:
    calc = section(f"shape = rectangle(b = {size}, h = {size})")
    assert codes(calc) == []
    (found,) = (s for s in calc.segments if isinstance(s, SectionResult))
    assert found.values["I_h"] == pytest.approx(found.values["A"] ** 2 / 12, rel=1e-12)
    assert all(r.holds for r in found.second_route)


def test_a_part_a_kilometre_away_keeps_its_digits() -> None:
    calc = section(PLATE, "part q = rectangle(b = 10 mm, h = 20 mm) at (1 km, 0 mm)")
    assert codes(calc) == []


# --- what the faults of a shape tell ----------------------------------------------------------------------


@pytest.mark.parametrize(
    ("shape", "room"),
    [  # the largest size that fits, by geometry
        (
            "i_shape(h = 300 mm, b = 150 mm, t_w = 8 mm, t_f = 12 mm, r = 80 mm)",
            "r = 71.00 mm",
        ),  # (150 - 8)/2
        ("i_shape(h = 300 mm, b = 150 mm, t_w = 160 mm, t_f = 12 mm)", "t_w = 150.0 mm"),
        ("i_shape(h = 300 mm, b = 150 mm, t_w = 8 mm, t_f = 12 mm, slope = 90 %)", "slope = 0.3380"),
        ("tube(d = 100 mm, t = 60 mm)", "t = 50.00 mm"),
        ("box(b = 100 mm, h = 80 mm, t = 5 mm, r_o = 60 mm)", "r_o = 40.00 mm"),
        ("angle(h = 100 mm, b = 60 mm, t = 10 mm, r_2 = 11 mm)", "r_2 = 10.00 mm"),
        (
            "strip(t = 2 mm, r = 90 mm, (0 mm, 0 mm), (50 mm, 0 mm), (50 mm, 50 mm))",
            "r = 49.00 mm",
        ),  # 50 - t/2
        ("rectangle(b = -1 mm, h = 3 mm)", ""),
    ],
)
def test_what_would_fit(shape: str, room: str) -> None:
    calc = section(f"shape = {shape}")
    assert codes(calc) == ["shape-does-not-fit"]
    hint = calc.diagnostics[0].hint.replace("\u00a0", " ")
    assert hint == (f"beside the other sizes there is room up to {room}" if room else "")


@pytest.mark.parametrize(
    ("points", "crossing", "edges"),
    [
        (  # a bow tie, whose area is zero
            "(0 mm, 0 mm), (100 mm, 100 mm), (100 mm, 0 mm), (0 mm, 100 mm)",
            "(50.00 mm, 50.00 mm)",
            ("from (0 mm, 0 mm) to (100.0 mm, 100.0 mm)", "from (100.0 mm, 0 mm) to (0 mm, 100.0 mm)"),
        ),
        (  # one with an area, its first corner written twice
            "(0 mm, 0 mm), (0 mm, 0 mm), (90 mm, 90 mm), (90 mm, 0 mm), (0 mm, 45 mm)",
            "(30.00 mm, 30.00 mm)",
            ("from (0 mm, 0 mm) to (90.00 mm, 90.00 mm)", "from (90.00 mm, 0 mm) to (0 mm, 45.00 mm)"),
        ),
        (  # a corner on an edge
            "(0 mm, 0 mm), (90 mm, 0 mm), (90 mm, 50 mm), (40 mm, 0 mm), (0 mm, 50 mm)",
            "(40.00 mm, 0 mm)",
            ("from (0 mm, 0 mm) to (90.00 mm, 0 mm)", "from (90.00 mm, 50.00 mm) to (40.00 mm, 0 mm)"),
        ),
    ],
)
def test_where_an_outline_crosses_itself(points: str, crossing: str, edges: tuple[str, str]) -> None:
    calc = section(f"shape = polygon({points})")
    assert codes(calc) == ["outline"]
    (d,) = calc.diagnostics
    assert d.message.replace("\u00a0", " ") == f"the outline crosses or touches itself at {crossing}"
    assert edges[0] in d.label.replace("\u00a0", " ")
    assert edges[1] in d.related[0].label.replace("\u00a0", " ")


@pytest.mark.parametrize("points", ["(0 mm, 0 mm), (9 mm, 0 mm), (5 mm, 0 mm)", "(0 mm, 0 mm), (9 mm, 0 mm)"])
def test_an_outline_without_area_or_corners(points: str) -> None:
    calc = section(f"shape = polygon({points})")
    assert codes(calc) == ["outline"]
    assert "itself" not in calc.diagnostics[0].message


def test_a_coordinate_that_is_rounding_reads_as_zero() -> None:
    calc = section(
        "part a = circle(d = 100 mm)", "part q = rectangle(b = 30 mm, h = 100 mm) at (0 mm, 99.9 mm)"
    )
    assert codes(calc) == ["parts-overlap"]
    assert "around (0 mm, 49.95 mm)" in said(calc)


@pytest.mark.parametrize(
    ("name", "what"), [("h", "depth"), ("t", "thickness"), ("I_y", "second moment of area")]
)
def test_a_part_with_the_name_of_a_property(name: str, what: str) -> None:
    calc = section(f"part {name} = circle(d = 10 mm)")
    assert codes(calc) == ["name-hides-result"]
    hint = calc.diagnostics[0].hint
    assert hint.startswith(f"main.{name} reads the {what}")
    assert hint.endswith(f"choose another name, such as {name}_1")


# --- what a page says beside the numbers ------------------------------------------------------------------


def notes(*lines: str, axes: str = "eurocode") -> str:
    calc = section(*lines, axes=axes)
    assert codes(calc) == []
    return " / ".join(next(s for s in calc.segments if isinstance(s, SectionResult)).notes)


def test_parts_that_touch_are_said_to_count_as_joined() -> None:
    back_to_back = ('part a = rolled("UPN 200")', 'part q = rolled("UPN 200") mirrored at (75 mm, 0 mm)')
    apart = (back_to_back[0], back_to_back[1].replace("75", "95"))
    assert "parts that touch count as joined along their whole contact: I_t, I_w" in notes(*back_to_back)
    assert "contact: J, C_w, shear centre" in notes(*back_to_back, axes="american")
    assert "count as joined" not in notes(*apart)
    assert "count as joined" not in notes(PLATE, "hole g = circle(d = 10 mm)")


def test_a_plastic_modulus_of_several_materials_says_on_what_strengths_it_stands() -> None:
    calc = section(
        PLATE + " of c",
        "part q = rectangle(b = 10 mm, h = 200 mm) at (55 mm, 0 mm) of d",
        *("modulus c = 10 GPa", "modulus d = 200 GPa", "strength c = 20 MPa", "strength d = 200 MPa"),
        "reference = c",
    )
    (found,) = (s for s in calc.segments if isinstance(s, SectionResult))
    (W_pl,) = (r for r in found.results if r.name == "W_pl_y")
    assert "one strength in tension and compression" in W_pl.provenance


def test_the_sign_of_the_monosymmetry_constant_is_that_of_its_definition() -> None:
    """A trapezium wider at the bottom has ∫y(x² + y²) dA of its own sign, whatever its flanges would be."""
    calc = section("shape = trapezium(b_t = 40 mm, b_b = 120 mm, h = 60 mm)")
    (found,) = (s for s in calc.segments if isinstance(s, SectionResult))
    (β,) = (r for r in found.results if r.name == "β")
    v = found.values
    # strips of the trapezium about its centroid: ∫x² over a width b is b³/12
    steps = 20000
    integral = 0.0
    for i in range(steps):
        y = -0.03 + 0.06 * (i + 0.5) / steps
        b = 0.12 - 0.08 * (y + 0.03) / 0.06
        Y = y - v["y_bar"]
        integral += Y * (b**3 / 12 + Y * Y * b) * 0.06 / steps
    assert v["beta"] == pytest.approx(integral / v["I_h"] - 2.0 * (v["y_s"] - v["y_bar"]), rel=1e-6)
    assert "∫y(x² + y²) dA / I − 2(y_s − y_bar)" in β.meaning
    assert "of an I-section negative" in β.meaning


@pytest.mark.parametrize("axes", ["eurocode", "american"])
def test_an_area_of_shear_deformation_says_its_direction(axes: str) -> None:
    """`A_s_y` is that for a horizontal force in one convention, for a vertical one in the other."""
    calc = section("shape = rectangle(b = 100 mm, h = 200 mm)", axes=axes)
    (found,) = (s for s in calc.segments if isinstance(s, SectionResult))
    (A_s_y,) = (r for r in found.results if r.name == "A_s_y")
    direction = "horizontal" if axes == "eurocode" else "vertical"
    assert A_s_y.meaning == f"area of shear deformation, for a {direction} shear force"
