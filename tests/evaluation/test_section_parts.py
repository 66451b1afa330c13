"""Sections of parts, holes, bars and materials: closed forms, what is read of a part, faults."""

from __future__ import annotations

import math

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from calcgen.evaluation.results.calc import EvaluatedCalc
from calcgen.evaluation.results.section import SectionResult
from tests.evaluation.helpers import codes, evaluated, fence

RIB = "part rib = rectangle(b = 300 mm, h = 500 mm) of concrete"
CONCRETE = ("modulus concrete = 12 GPa", "modulus steel = 200 GPa", "reference = concrete")
FLITCH = (
    "part oak_l = rectangle(b = 75 mm, h = 250 mm) at (-41 mm, 0 mm) of oak",
    "part plate = rectangle(b = 7 mm, h = 220 mm) of steel",
    "part oak_r = rectangle(b = 75 mm, h = 250 mm) at (41 mm, 0 mm) of oak",
)
MODULI = ("modulus oak = 11 GPa", "modulus steel = 210 GPa", "reference = oak")
TEE = (
    "part web = rectangle(b = 10 mm, h = 200 mm)",
    "part cap = rectangle(b = 100 mm, h = 10 mm) at (0 mm, 105 mm)",
)
TEE_I = 10 * 200**3 / 12 + 2000 * 35**2 + 100 * 10**3 / 12 + 1000 * 70**2  # mm⁴, about y = 35 mm
N_OAK = 210 / 11
FLITCH_I = 2 * 75 * 250**3 / 12 + N_OAK * 7 * 220**3 / 12
N = 200 / 12
BARS_A = 4 * math.pi * 100 + 402  # mm²
SLAB_A = 300 * 500 + (N - 1) * BARS_A
SLAB_Y = (N - 1) * (-200 * 400 * math.pi + 210 * 402) / SLAB_A
SLAB_I = (
    300 * 500**3 / 12
    + 300 * 500 * SLAB_Y**2
    + (N - 1) * (400 * math.pi * (-200 - SLAB_Y) ** 2 + 402 * (210 - SLAB_Y) ** 2)
)
SLAB = (
    RIB,
    "bars low = 4 of 20 mm from (-100 mm, -200 mm) to (100 mm, -200 mm) of steel",
    "bars top = 402 mm² at (0 mm, 210 mm) of steel",
    *CONCRETE,
)


def section(lines: tuple[str, ...], *asked: str, axes: str = "eurocode") -> EvaluatedCalc:
    text = "# T\n" + fence("section main", *lines) + fence("working", *asked)
    (calc,) = evaluated(text, axes=axes)  # type: ignore[arg-type]
    return calc


def result(calc: EvaluatedCalc) -> SectionResult:
    return next(s for s in calc.segments if isinstance(s, SectionResult))


def value(calc: EvaluatedCalc, name: str) -> float:
    found = calc.values[name][0]
    assert not isinstance(found, str | bool)
    return found.si


@pytest.mark.parametrize(
    ("lines", "name", "expected"),
    [  # mm; parallel axes, sums and differences of areas, transformed areas
        (TEE, "main.A", 3000.0),
        (TEE, "main.y_bar", 35.0),
        (TEE, "main.I_y", TEE_I),
        (TEE, "main.h", 210.0),
        (TEE, "main.b", 100.0),
        (TEE, "main.cap.A", 1000.0),
        (TEE, "main.cap.I_y", 100 * 10**3 / 12),
        (TEE, "main.cap.W_el_y", TEE_I / 75),
        (TEE, "main.cap.W_el_y_b", TEE_I / 65),
        (TEE, "main.web.W_el_y", TEE_I / 135),
        (
            ("shape = rectangle(b = 100 mm, h = 200 mm)", "hole o = circle(d = 50 mm)"),
            "main.A",
            2e4 - 625 * math.pi,
        ),
        (
            ("shape = rectangle(b = 100 mm, h = 200 mm)", "hole o = circle(d = 50 mm)"),
            "main.I_y",
            100 * 200**3 / 12 - math.pi * 50**4 / 64,
        ),
        (("shape = rectangle(b = 100 mm, h = 200 mm)", "hole o = circle(d = 50 mm)"), "main.b", 100.0),
        (
            (  # a part fills the hole above it
                "part a = rectangle(b = 100 mm, h = 200 mm)",
                "hole o = rectangle(b = 40 mm, h = 60 mm) at (10 mm, 20 mm)",
                "part q = rectangle(b = 40 mm, h = 60 mm) at (10 mm, 20 mm)",
            ),
            "main.I_z",
            200 * 100**3 / 12,
        ),
        ((*FLITCH, *MODULI), "main.A", 2 * 75 * 250 + N_OAK * 7 * 220),
        ((*FLITCH, *MODULI), "main.I_y", FLITCH_I),
        ((*FLITCH, *MODULI), "main.plate.W_el_y", FLITCH_I / (N_OAK * 110)),
        ((*FLITCH, *MODULI), "main.oak_l.W_el_y_t", FLITCH_I / 125),
        ((*FLITCH, *MODULI), "main.plate.n", N_OAK),
        (
            (*FLITCH, *MODULI, "strength oak = 30 MPa", "strength steel = 275 MPa"),
            "main.W_pl_y",
            2 * 75 * 250**2 / 4 + 275 / 30 * 7 * 220**2 / 4,
        ),
        (SLAB, "main.A", SLAB_A),
        (SLAB, "main.y_bar", SLAB_Y),
        (SLAB, "main.I_y", SLAB_I),
        (SLAB, "main.low.A", 400 * math.pi),
    ],
)
def test_closed_forms(lines: tuple[str, ...], name: str, expected: float) -> None:
    calc = section(lines, f"x = {name}")
    assert codes(calc) == []
    power = {"A": 2, "y": 1, "I": 4, "h": 1, "b": 1, "W": 3, "n": 0}[name.split(".")[-1][0]]
    # circles are polygons of many corners with the exact area; their second moment is that of the polygon
    assert value(calc, "x") == pytest.approx(expected / 1000**power, rel=1e-6)
    assert all(r.holds for r in result(calc).second_route)


@pytest.mark.parametrize(
    ("shape", "name", "expected", "tolerance"),
    [  # mm
        # S. Timoshenko and J. N. Goodier, Theory of elasticity, table of k_1 for b/a = 2, from memory: 0.229
        ("rectangle(b = 100 mm, h = 200 mm)", "I_t", 0.229 * 200 * 100**3, 0.003),
        ("circle(d = 80 mm)", "I_t", math.pi * 80**4 / 32, 1e-12),
        ("ellipse(b = 60 mm, h = 100 mm)", "I_t", math.pi * 30**3 * 50**3 / (30**2 + 50**2), 1e-12),
        ("rectangle(b = 100 mm, h = 200 mm)", "A_s_z", 5 / 6 * 2e4, 1e-3),  # Cowper, ν = 0
        ("rectangle(b = 100 mm, h = 200 mm)", "k_t", 200 / 6, 1e-9),
        ("rectangle(b = 100 mm, h = 200 mm)", "k_l", 100 / 6, 1e-9),
        ("circle(d = 80 mm)", "k_b", 80 / 8, 1e-3),
        # mid-line forms: h_0² t_f b³/24; e = h_0² b_0² t_f/(4 I_y) from the web's middle
        ("i_shape(h = 210 mm, b = 100 mm, t_w = 6 mm, t_f = 10 mm)", "I_w", 200**2 * 10 * 100**3 / 24, 1e-9),
        ("rectangle(b = 100 mm, h = 200 mm) at (30 mm, 40 mm)", "x_s", 30.0, 1e-9),
    ],
)
def test_torsion_shear_and_kern(shape: str, name: str, expected: float, tolerance: float) -> None:
    calc = section((f"shape = {shape}",), f"x = main.{name}")
    assert codes(calc) == []
    power = {"I_t": 4, "I_w": 6, "A_s_z": 2}.get(name, 1)
    assert value(calc, "x") == pytest.approx(expected / 1000**power, rel=tolerance)


@pytest.mark.parametrize(
    ("shape", "axes", "name", "expected", "clause"),
    [  # AISC 360-16 G2.1: d t_w; EN 1993-1-1 6.2.6(3): g, a tube 2A/π; turned, the directions change places
        ('rolled("W18x50")', "american", "A_w", 18.0 * 0.355 * 25.4**2, "AISC 360-16 G2.1"),
        ("tube(d = 100 mm, t = 10 mm)", "eurocode", "A_v_y", 2 * (1e4 - 80**2) / 4, "EN 1993-1-1 6.2.6(3) g"),
        ('rolled("IPE 300") turned 90 deg', "eurocode", "A_v_y", 2568, "EN 1993-1-1 6.2.6(3) a"),
    ],
)
def test_shear_areas_of_the_standard(shape: str, axes: str, name: str, expected: float, clause: str) -> None:
    calc = section((f"shape = {shape}",), f"x = main.{name}", axes=axes)
    assert codes(calc) == []
    assert value(calc, "x") == pytest.approx(expected * 1e-6, rel=1e-3)
    assert next(r.provenance for r in result(calc).results if r.name == name) == clause


def test_a_shear_area_that_the_standard_does_not_name() -> None:
    calc = section(("shape = rectangle(b = 100 mm, h = 200 mm)",), "x = main.A_v_z")
    assert codes(calc) == ["no-such-result"]
    assert "EN 1993-1-1 6.2.6(3) names none" in calc.diagnostics[0].message


def test_a_profile_without_a_published_constant_takes_its_table_formula() -> None:
    calc = section(('shape = rolled("L 100x100x10")',), "x = main.I_t")
    (I_t,) = (r for r in result(calc).results if r.name == "I_t")
    assert I_t.provenance.startswith("table formula: rectangles and junction circle")
    assert "; finite elements" in I_t.provenance


def test_shear_centre_of_a_channel() -> None:
    """Behind the web, at e = h_0² b_0² t_f/(4 I_y) by the mid-line; I_y that of the mid-line."""
    calc = section(("shape = channel(h = 210 mm, b = 85 mm, t_w = 10 mm, t_f = 10 mm)",), "x = main.x_s")
    I_y = 10 * 200**3 / 12 + 2 * 80 * 10 * 100**2
    e = 200**2 * 80**2 * 10 / (4 * I_y)
    assert value(calc, "x") == pytest.approx((-42.5 + 5 - e) / 1000, rel=1e-9)


def test_monosymmetry_is_negative_with_the_larger_flange_on_top() -> None:
    calc = section(("shape = tee(h = 200 mm, b = 150 mm, t_w = 8 mm, t_f = 12 mm)",), "x = main.β")
    assert value(calc, "x") < 0.0


def test_where_a_value_comes_from() -> None:
    def routes(*lines: str) -> dict[str, str]:
        return {r.name: r.provenance for r in result(section(lines)).results}

    channel = routes("shape = channel(h = 200 mm, b = 75 mm, t_w = 8.5 mm, t_f = 11.5 mm)")
    assert channel["A"] == "from the outline"
    assert channel["I_t"].startswith("finite elements, within ")
    assert "mid-line formula Σ l t³/3, open section" in channel["I_t"]
    assert channel["I_w"].startswith("sectorial coordinates of the mid-line, open section; finite elements ")
    assert routes("shape = circle(d = 80 mm)")["I_t"].startswith("polar second moment of a circle, exact")
    assert routes(*FLITCH, *MODULI)["I_y"] == "transformed to oak"
    assert routes('shape = rolled("IPE 300")')["I_t"] == "published"
    # beside a plate a profile's published values are those of no section any more
    plated = routes(
        'part profile = rolled("IPE 300")', "part plate = rectangle(b = 150 mm, h = 10 mm) at (0 mm, 155 mm)"
    )
    assert plated["I_y"] == "from the outline"


def test_one_catalogued_part_keeps_its_published_values() -> None:
    calc = section(('part profile = rolled("IPE 300") of steel', "modulus steel = 210 GPa"), "x = main.I_y")
    assert value(calc, "x") == pytest.approx(8356e-8, rel=1e-9)  # EN 10365, from memory
    assert result(calc).modulus == 210e9


def test_separate_pieces_are_said_and_have_no_shear_centre() -> None:
    lines = (
        "part low = rectangle(b = 100 mm, h = 10 mm) at (0 mm, -50 mm)",
        "part high = rectangle(b = 100 mm, h = 10 mm) at (0 mm, 50 mm)",
    )
    calc = section(lines, "x = main.y_s")
    assert codes(calc) == ["no-such-result"]
    assert "separate pieces" in calc.diagnostics[0].message
    assert any("2 separate pieces" in note for note in result(calc).notes)
    assert value(section(lines, "x = main.I_t"), "x") == pytest.approx(2 * 100 * 10**3 / 3 * 1e-12, rel=0.07)


def test_a_hole_can_part_a_part() -> None:
    calc = section((TEE[0], "hole slot = rectangle(b = 20 mm, h = 20 mm)"))
    assert [len(part.outlines) for part in result(calc).parts] == [2]
    assert any("'slot' leaves 2 pieces" in note for note in result(calc).notes)


@pytest.mark.parametrize(
    ("lines", "name", "code", "words"),
    [
        ((*FLITCH, *MODULI), "main.W_el_y", "no-such-result", "main.oak_l, main.plate, main.oak_r"),
        ((*FLITCH, *MODULI), "main.W_pl_y", "no-such-result", "strength oak, steel"),
        ((*FLITCH, *MODULI), "main.I_t", "no-such-result", "not available for a composite section"),
        (TEE, "main.cup.A", "no-such-result", "the nearest is 'cap'"),
        (TEE, "main.cap.W_el", "no-such-result", "nearest property is 'W_el_"),
        (TEE, "main.cap.S_x", "other-convention", "write W_el_y"),
        (TEE, "main.cap", "block-is-no-value", "main.cap.…"),
    ],
)
def test_what_cannot_be_read(lines: tuple[str, ...], name: str, code: str, words: str) -> None:
    calc = section(lines, f"x = {name}")
    assert codes(calc) == [code]
    assert words in f"{calc.diagnostics[0].message} / {calc.diagnostics[0].hint}"


PLAIN = "part a = rectangle(b = 100 mm, h = 100 mm)"


@pytest.mark.parametrize(
    ("lines", "place", "code", "words"),
    [
        (
            (PLAIN, "part q = rectangle(b = 40 mm, h = 40 mm) at (60 mm, 0 mm)"),
            "2:6",
            "parts-overlap",
            ("'q' overlaps 'a' around (45.00 mm, 0 mm)", "10.00 mm wide and 40.00 mm high"),
        ),
        (
            (PLAIN, "hole q = circle(d = 10 mm) at (80 mm, 0 mm)"),
            "2:6",
            "hole-outside",
            ("(80.00 mm, 0 mm)", "25.00 mm away"),
        ),
        (
            (PLAIN, "hole q = rectangle(b = 10 mm, h = 10 mm) at (48 mm, 0 mm)"),
            "2:6",
            "hole-outside",
            ("30.0 %",),
        ),
        (("hole q = circle(d = 10 mm)", PLAIN), "1:6", "hole-outside", ("above it",)),
        ((PLAIN, "hole q = circle(d = 120 mm)"), "2:6", "hole-outside", ("15.9 %",)),
        (
            (PLAIN, "hole q = rectangle(b = 100 mm, h = 100 mm)"),
            "2:6",
            "nothing-left",
            ("nothing of the part 'a'",),
        ),
        ((PLAIN, "part A = circle(d = 10 mm) at (80 mm, 0 mm)"), "2:6", "name-hides-result", ("'A'",)),
        ((*FLITCH, *MODULI[1:]), "1:68", "modulus-missing", ("'oak'", "modulus oak = …")),
        (
            (FLITCH[0], PLAIN.replace("a =", "q =") + " at (60 mm, 0 mm) of steel", "modulus oak = 9 GPa"),
            "2:64",
            "modulus-missing",
            ("'steel'",),
        ),
        ((*FLITCH, *MODULI[:2]), "0:4", "reference-missing", ("reference = oak or reference = steel",)),
        ((*FLITCH, *MODULI[:2], "reference = steal"), "6:13", "unknown-material", ("nearest is 'steel'",)),
        (
            (*FLITCH, *MODULI, "strength ok = 3 MPa"),
            "7:10",
            "material-unused",
            ("nearest material is 'oak'",),
        ),
        ((*FLITCH, MODULI[0], "modulus steel = 0 GPa", MODULI[2]), "5:17", "not-positive", ("modulus 0",)),
        ((*FLITCH, MODULI[0], "modulus steel = 3 kN", MODULI[2]), "5:17", "wrong-dimension", ()),
        (
            (
                FLITCH[0],
                FLITCH[1].replace(" of steel", ""),
                FLITCH[2],
                "part x = circle(d = 1 mm) at (0 mm, 200 mm) of steel",
                *MODULI,
            ),
            "2:6",
            "material-missing",
            ("oak, steel",),
        ),
        (
            (RIB.replace(" of concrete", ""), "bars q = 3 mm² at (0 mm, 0 mm) of steel"),
            "1:6",
            "material-missing",
            (),
        ),
        ((RIB, "bars q = 300 mm² at (0 mm, 0 mm)", *CONCRETE), "2:6", "material-missing", ()),
        (
            (RIB, "bars q = 3 mm² at (0 mm, 260 mm) of steel", *CONCRETE),
            "2:6",
            "bars-outside",
            ("1 bar lies",),
        ),
        ((RIB, "bars q = 4 of 20 mm at (0 mm, 0 mm) of steel", *CONCRETE), "2:10", "bars", ("4 bars",)),
        ((RIB, "bars q = 2.5 of 20 mm at (0 mm, 0 mm) of steel", *CONCRETE), "2:10", "bars", ("whole",)),
        ((RIB, "bars q = 0 mm² at (0 mm, 0 mm) of steel", *CONCRETE), "2:10", "not-positive", ("area",)),
        (
            (RIB, "bars q = 1 of -2 mm at (0 mm, 0 mm) of steel", *CONCRETE),
            "2:15",
            "not-positive",
            ("diameter",),
        ),
        ((RIB, "bars q = 20 mm at (0 mm, 0 mm) of steel", *CONCRETE), "2:10", "wrong-dimension", ("area",)),
        (
            ("shape = polygon((0 mm, 0 mm), (9 mm, 9 mm), (9 mm, 0 mm), (0 mm, 5 mm))",),
            "1:17",
            "outline",
            ("crosses or touches itself",),
        ),
        (
            ("shape = i_shape(h = 200 mm, b = 100 mm, t_w = 5 mm, t_f = 8 mm, r = 90 mm)",),
            "1:69",
            "shape-does-not-fit",
            ("r = 90.00 mm", "does not fit"),
        ),
    ],
)
def test_fault(lines: tuple[str, ...], place: str, code: str, words: tuple[str, ...]) -> None:
    """Lines count from the block's first one; 0 is its head."""
    calc = section(lines, "x = main.A")
    assert codes(calc) == [code]  # and nothing more for what depends on it
    (d,) = calc.diagnostics
    assert f"{d.line - 2}:{d.column}" == place
    said = f"{d.message} / {d.label} / {d.hint}".replace("\u00a0", " ")
    assert all(each in said for each in words), said


def test_touching_parts_do_not_overlap() -> None:
    turned = "part q = rectangle(b = 20 mm, h = 40 mm) turned 90 deg at (0 mm, 60 mm)"
    assert codes(section((PLAIN, turned))) == []


def test_bars_in_a_hole_are_nothing_to_warn_of() -> None:
    calc = section(
        (RIB, "hole duct = circle(d = 80 mm)", "bars q = 3 cm² at (0 mm, 0 mm) of steel", *CONCRETE)
    )
    assert codes(calc) == []
    (bars,) = result(calc).bars
    assert bars.hosts == ("",)


def test_a_beam_takes_the_reference_modulus_of_its_section() -> None:
    def beam(*lines: str) -> EvaluatedCalc:
        text = "# T\n" + fence("section main", *FLITCH, *MODULI)
        text += fence("beam joist", "span = 6 m", "section = main", *lines, "load Q uniform 2 kN/m")
        (calc,) = evaluated(text + fence("working", "w = joist.w_max"))
        return calc

    calc = beam()
    assert codes(calc) == []
    EI = 11e9 * FLITCH_I * 1e-12
    assert value(calc, "w") == pytest.approx(5 * 2000 * 6**4 / (384 * EI), rel=1e-9)
    assert codes(beam("E = 11 GPa")) == []
    assert codes(beam("E = 210 GPa")) == ["modulus-differs"]


def test_self_weight_is_that_of_the_real_area() -> None:
    text = "# T\n" + fence("section main", *FLITCH, *MODULI)
    text += fence("beam joist", "span = 6 m", "section = main", "load G self_weight 10 kN/m³")
    (calc,) = evaluated(text + fence("working", "R = joist.R_1"))
    assert value(calc, "R") == pytest.approx(0.5 * 6 * 10e3 * (2 * 75 * 250 + 7 * 220) * 1e-6, rel=1e-9)


@settings(max_examples=25, deadline=None)
@given(
    b=st.floats(20, 200),
    h=st.floats(20, 400),
    n=st.floats(0.1, 20),
    x=st.floats(-500, 500),
    y=st.floats(-500, 500),
)
def test_equal_moduli_make_a_section_of_one_material(
    b: float, h: float, n: float, x: float, y: float
) -> None:
    """Cut at its middle into two materials of one modulus, a rectangle keeps its properties."""
    whole = section((f"shape = rectangle(b = {b} mm, h = {h} mm) at ({x} mm, {y} mm)",))
    halves = section(
        (
            f"part low = rectangle(b = {b} mm, h = {h / 2} mm) at ({x} mm, {y - h / 4} mm) of one",
            f"part high = rectangle(b = {b} mm, h = {h / 2} mm) at ({x} mm, {y + h / 4} mm) of other",
            f"modulus one = {n} GPa",
            f"modulus other = {n} GPa",
            "reference = one",
        )
    )
    a, c = result(whole).values, result(halves).values
    for key in ("A", "I_h", "I_v"):
        assert c[key] == pytest.approx(a[key], rel=1e-9)
    assert c["y_bar"] == pytest.approx(a["y_bar"], abs=1e-9)
