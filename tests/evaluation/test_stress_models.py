"""The models of a stress with limits, and the curved bar: results by hand and by closed forms.

The rectangle is 100 mm wide and 200 mm deep unless a test says otherwise: A = 20 000 mm², W_el = b·h²/6 =
666.7 cm³, W_pl = b·h²/4 = 1000 cm³. With f_y = 300 MPa M_el = 200 kN·m, M_pl = 300 kN·m, N_pl = 6000 kN.
"""

from __future__ import annotations

import math

import pytest

from tests.evaluation.stresses import RECTANGLE, parts, result, section, stress, values

MPA, KNM, MM = 1e6, 1e3, 1e-3
ARCS = 2e-5  # arcs are edges; their areas are exact, their third moments are not quite


def approx(value: float, rel: float = 1e-9) -> object:
    """Return what is equal to a value within a relative tolerance; zero within 1e-6 Pa or 1e-12 m."""
    return pytest.approx(value, rel=rel, abs=1e-6 if value == 0.0 else 0.0)


# --- plastic ----------------------------------------------------------------------------------------------

PLASTIC = ("model = plastic", "f_y = 300 MPa")


@pytest.mark.parametrize(
    ("forces", "expected"),
    [
        (("M = 150 kN·m",), {"M_pl": 300 * KNM, "utilisation": 0.5, "M_el": 200 * KNM, "shape_factor": 1.5}),
        (("M = 150 kN·m",), {"x_c": 0.1, "na_depth": 0.0, "σ_bottom": 300 * MPA, "σ_top": -300 * MPA}),
        (("M = -150 kN·m",), {"M_pl": -300 * KNM, "utilisation": 0.5, "σ_bottom": -300 * MPA}),
        # with N/N_pl = 1/2: M_N = M_pl (1 - (N/N_pl)²), and b·x_c·f = (N_pl + |N|)/2
        (("M = 225 kN·m", "N = -3000 kN"), {"M_pl": 225 * KNM, "utilisation": 1.0, "x_c": 0.15}),
        (("M = 90 kN·m", "N = 3000 kN"), {"M_pl": 225 * KNM, "utilisation": 0.4, "x_c": 0.05}),
        (("M = 90 kN·m", "N = 3000 kN"), {"na_depth": -0.05, "shape_factor": 1.5}),  # above: depth is down
        (("M_lat = 75 kN·m",), {"M_pl_lat": 150 * KNM, "utilisation": 0.5, "σ_max": 300 * MPA}),
        (("N = -3000 kN",), {"M_pl": 225 * KNM, "x_c": 0.15}),  # the moment that N leaves, sagging
    ],
)
def test_a_rectangle_that_yields(forces: tuple[str, ...], expected: dict[str, float]) -> None:
    found = values(*PLASTIC, *forces)
    assert {name: found[name] for name in expected} == {n: approx(v) for n, v in expected.items()}


@pytest.mark.parametrize("model", ["plastic", "elastic_plastic"])
def test_an_axial_force_that_takes_all_leaves_no_moment(model: str) -> None:
    """100 × 200 mm at 250 MPa: N_pl = 5 MN."""
    at_limit = stress(f"model = {model}", "N = 5 MN", "f_y = 250 MPa")
    beyond = stress(f"model = {model}", "N = 5.1 MN", "f_y = 250 MPa")
    assert [d.code for d in beyond.diagnostics] == ["beyond-plastic"]
    assert beyond.diagnostics[0].hint.endswith("N_pl = 5.000\u00a0MN")
    if model == "plastic":
        assert "no moment is left" in at_limit.diagnostics[0].hint
    else:
        assert at_limit.diagnostics == ()


def test_a_hogging_section_yields_at_a_negative_moment() -> None:
    found = values("model = plastic", "M = -10 kN·m", "f_y = 250 MPa")
    assert found["M_pl"] == approx(-250e6 * 0.1 * 0.2**2 / 4)
    assert found["M_el"] == approx(-250e6 * 0.1 * 0.2**2 / 6)
    assert found["shape_factor"] == approx(1.5)


def test_only_the_moments_given_have_a_plastic_one() -> None:
    assert "M_pl_lat" not in values(*PLASTIC, "M = 150 kN·m")
    assert "M_pl" not in values(*PLASTIC, "M_lat = 75 kN·m")
    assert "utilisation" not in values(*PLASTIC, "N = -3000 kN")


def test_a_square_bent_about_its_diagonal() -> None:
    """W_pl = a³√2/6, so that each moment is f a³/6; the shape factor is 2."""
    square = section("shape = rectangle(b = 100 mm, h = 100 mm)")
    found = values(*PLASTIC, "M = 20 kN·m", "M_lat = 20 kN·m", section=square)
    assert (found["M_pl"], found["M_pl_lat"]) == (approx(50 * KNM), approx(50 * KNM))
    assert found["shape_factor"] == approx(2.0)
    assert found["na_angle"] == approx(math.pi / 4)  # tension at the bottom and on the right
    assert found["x_c"] == approx(0.1 / math.sqrt(2.0))


@pytest.mark.parametrize(
    ("shape", "M_pl", "shape_factor"),
    [
        ("circle(d = 100 mm)", 300e6 * 0.1**3 / 6, 16 / (3 * math.pi)),
        ("rectangle(b = 100 mm, h = 100 mm) turned 45 deg", 300e6 * 0.1**3 * math.sqrt(2) / 6, 2.0),
        ("tube(d = 100 mm, t = 10 mm)", 300e6 * (0.1**3 - 0.08**3) / 6, None),
        ("box(h = 200 mm, b = 100 mm, t = 10 mm)", 300e6 * (0.1 * 0.2**2 - 0.08 * 0.18**2) / 4, None),
        # two flanges and web: b t (h - t) + t_w (h - 2t)²/4
        (
            "i_shape(h = 300 mm, b = 150 mm, t_w = 8 mm, t_f = 12 mm)",
            300e6 * (0.15 * 0.012 * 0.288 + 0.008 * 0.276**2 / 4),
            None,
        ),
        # tee: the axis is the lower edge of the flange where both have the same area
        ("tee(h = 220 mm, b = 100 mm, t_w = 10 mm, t_f = 20 mm)", 300e6 * 0.002 * (0.01 + 0.1), None),
    ],
)
def test_plastic_moments_of_shapes(shape: str, M_pl: float, shape_factor: float | None) -> None:
    found = values(*PLASTIC, "M = 1 kN·m", section=section(f"shape = {shape}"))
    assert found["M_pl"] == approx(M_pl, ARCS)
    assert found["shape_factor"] == approx(shape_factor or found["M_pl"] / found["M_el"], ARCS)


TWO_MATERIALS = parts(
    "part wood = rectangle(b = 100 mm, h = 200 mm) at (0 mm, 0 mm) of timber",
    "part plate = rectangle(b = 100 mm, h = 10 mm) at (0 mm, -105 mm) of steel",
    "strength timber = 30 MPa",
    "strength steel = 300 MPa",
)


def test_a_plate_below_timber_yields() -> None:
    """300 kN in the plate and 100 t·30 MPa of timber pull, 100 (200 - t)·30 MPa press: t = 50 mm."""
    found = values("model = plastic", "M = 20 kN·m", section=TWO_MATERIALS)
    about_top = 300e3 * 0.205 + 150e3 * 0.175 - 450e3 * 0.075
    assert found["M_pl"] == approx(about_top)
    assert found["x_c"] == approx(0.15)
    assert found["plate.σ_max"] == found["plate.σ_min"] == approx(300 * MPA)
    assert found["wood.σ_max"] == approx(30 * MPA)
    assert found["wood.σ_min"] == approx(-30 * MPA)
    assert found["σ_top"] == approx(-30 * MPA)


CONCRETE = section(
    "part rib = rectangle(b = 300 mm, h = 500 mm) of concrete",
    "bars low = 4 of 20 mm from (-100 mm, -200 mm) to (100 mm, -200 mm) of steel",
    "modulus concrete = 10 GPa",
    "modulus steel = 200 GPa",
    "strength concrete = 20 MPa",
    "strength steel = 500 MPa",
    "reference = concrete",
)
A_S = 4 * math.pi * 0.02**2 / 4


def test_reinforced_concrete_at_its_plastic_moment() -> None:
    found = values("model = plastic", "M = 100 kN·m", section=CONCRETE)
    x = 500e6 * A_S / (0.3 * 20e6)
    assert found["x_c"] == approx(x)
    assert found["M_pl"] == approx(500e6 * A_S * (0.45 - x / 2))
    assert found["low"] == approx(500 * MPA)
    assert found["rib.σ_max"] == 0.0
    assert "shape_factor" not in found  # concrete in tension yields at once
    assert "M_el" not in found


def test_bars_in_compression_displace_concrete() -> None:
    """Upper bars within the compressed block: A_s' (f_y - f_c) and the block."""
    doubly = CONCRETE.replace("reference", "bars top = 500 mm² at (0 mm, 200 mm) of steel\nreference")
    found = values("model = plastic", "M = 100 kN·m", section=doubly)
    C_s = 0.5e-3 * (500e6 - 20e6)
    x = (500e6 * A_S - C_s) / (0.3 * 20e6)
    assert x > 0.05  # the upper bars lie in the block
    assert found["x_c"] == approx(x)
    assert found["M_pl"] == approx(C_s * 0.4 + 0.3 * x * 20e6 * (0.45 - x / 2))
    assert found["top"] == approx(-500 * MPA)


# --- elastic-plastic --------------------------------------------------------------------------------------

YIELDING = ("model = elastic_plastic", "f_y = 300 MPa", "E = 200 GPa")


def test_a_rectangle_between_first_yield_and_the_plastic_moment() -> None:
    """M = M_el (3 - (c/h)²)/2 of a core c; half the gap between M_el and M_pl leaves c = h/√2."""
    found = values(*YIELDING, "M = 250 kN·m")
    c = 0.2 / math.sqrt(2.0)
    assert found["core"] == approx(c)
    assert found["κ"] == approx(2 * 300e6 / 200e9 / c)
    assert found["R"] == approx(1 / found["κ"])
    assert found["ε_max"] == approx(300e6 / 200e9 * math.sqrt(2.0))
    assert found["ε_min"] == -found["ε_max"]
    assert found["σ_max"] == approx(300 * MPA)
    # unloading takes 1.25 f_y away at the edge, and that part of it at the core's
    assert found["σ_res_min"] == approx(-max(0.25, 1 - 1.25 / math.sqrt(2.0)) * 300 * MPA)
    assert found["σ_res_max"] == -found["σ_res_min"]
    assert found["utilisation"] == approx(250 / 300)


def test_unloading_leaves_compression_where_tension_yielded() -> None:
    """Elastically the edge would have 1.45 f_y; the largest residual stress is at the core's edge."""
    calc = stress(*YIELDING, "M = 290 kN·m")
    place = next(r.place for r in result(calc).results if r.name == "σ_res_max")
    assert place.replace("\u00a0", " ") == "at (−50.00 mm, −31.62 mm)"  # c = h √0.1, tension side
    unloaded = result(calc).unloaded
    assert unloaded is not None
    assert unloaded.at_bottom() == approx((1 - 1.45) * 300 * MPA)
    assert unloaded.at_top() == approx(0.45 * 300 * MPA)


def test_below_first_yield_nothing_remains() -> None:
    elastic, found = values("M = 150 kN·m", "E = 200 GPa"), values(*YIELDING, "M = 150 kN·m")
    assert {n: found[n] for n in elastic} == {n: approx(v) for n, v in elastic.items()}
    assert found["σ_res_max"] == found["σ_res_min"] == 0.0
    assert found["core"] == approx(0.2)


def test_axial_force_beside_a_moment_beyond_first_yield() -> None:
    """One edge yields: N = -3000 kN, and a linear zone from the far edge; moments about the middle by hand.

    With stress -f over a depth p at the top and linear below it to s at the bottom, h = 0.2:
    N = -f b h + (f + s) b (h - p)/2; M = (f + s) b (h - p)/2·(h/2 - (h - p)/3). For p = h/4, s = 0:
    N = -300·100·200 + 300·100·150/2 = -3750 kN; M = 2250 kN·50 mm = 112.5 kN·m.
    """
    found = values(*YIELDING, "N = -3750 kN", "M = 112.5 kN·m")
    assert found["σ_bottom"] == pytest.approx(0.0, abs=1.0)
    assert found["core"] == approx(0.15)
    assert found["κ"] == approx(300e6 / 200e9 / 0.15)
    assert found["ε_min"] == approx(-300e6 / 200e9 * 0.2 / 0.15)


# --- without tension --------------------------------------------------------------------------------------


@pytest.mark.parametrize(
    ("e", "x_c", "sigma"),
    [  # e in mm; N = -100 kN; e <= h/6 keeps the whole depth compressed
        (0.0, None, 5.0),
        (20.0, 0.2, 5.0 * (1 + 6 * 20 / 200)),
        (200 / 6, 0.2, 10.0),
        (50.0, 3 * (0.1 - 0.05), 2 * 100e-3 / (0.1 * 0.15)),
        (90.0, 3 * (0.1 - 0.09), 2 * 100e-3 / (0.1 * 0.03)),
        (99.9, 3 * (0.1 - 0.0999), 2 * 100e-3 / (0.1 * 0.0003)),
    ],
)
def test_a_rectangle_without_tension(e: float, x_c: float | None, sigma: float) -> None:
    for sign in (1.0, -1.0):
        found = values("model = no_tension", "N = -100 kN", f"M = {sign * 100e3 * e * MM!r} N*1 m")
        assert found["σ_min"] == approx(-sigma * MPA, 1e-8)
        assert found.get("x_c") == (None if x_c is None else approx(x_c, 1e-8))
        assert found["σ_top" if sign > 0 else "σ_bottom"] == approx(-sigma * MPA, 1e-8)


def test_a_disc_whose_axis_passes_through_its_middle() -> None:
    """σ rises from the diameter to the edge: N = 2σR²/3, M = πσR³/8."""
    R, N = 0.1, 100e3
    e = 3 * math.pi * R / 16
    found = values(
        "model = no_tension",
        "N = -100 kN",
        f"M = {N * e!r} N*1 m",
        section=section("shape = circle(d = 200 mm)"),
    )
    assert found["σ_min"] == approx(-1.5 * N / R**2, ARCS)
    assert found["x_c"] == approx(R, ARCS)
    assert found["na_depth"] == pytest.approx(0.0, abs=ARCS * R)


def test_a_resultant_near_a_corner_presses_a_triangle() -> None:
    """A pyramid of stress over a triangle of legs a, c holds N = σ a c/6 at a/4, c/4 from the corner."""
    a, c, N = 0.06, 0.12, 100e3
    e_x, e_y = 0.05 - a / 4, 0.1 - c / 4
    # the corner is at the top left: the compression there, tension (if there were any) bottom right
    found = values(
        "model = no_tension", "N = -100 kN", f"M = {N * e_y!r} N*1 m", f"M_lat = {N * e_x!r} N*1 m"
    )
    assert found["σ_min"] == approx(-6 * N / (a * c))
    assert found["na_angle"] == approx(math.atan2(c, a))
    assert found["x_c"] == approx(a * c / math.hypot(a, c))
    where = next(
        r.place
        for r in result(
            stress(
                "model = no_tension", "N = -100 kN", f"M = {N * e_y!r} N*1 m", f"M_lat = {N * e_x!r} N*1 m"
            )
        ).results
        if r.name == "σ_min"
    )
    assert where.replace("\u00a0", " ") == "at (−50.00 mm, 100.0 mm)"


# --- cracked ----------------------------------------------------------------------------------------------

N_E = 20.0  # 200/10 GPa


def test_a_cracked_rectangle() -> None:
    """b x²/2 = n A_s (d - x); σ_c = 2M/(b x z), σ_s = M/(A_s z), z = d - x/3."""
    found = values("model = cracked", "M = 100 kN·m", section=CONCRETE)
    b, d, n_A = 0.3, 0.45, N_E * A_S
    x = (-n_A + math.sqrt(n_A**2 + 2 * b * n_A * d)) / b
    z = d - x / 3
    assert found["x_c"] == approx(x)
    assert found["σ_min"] == found["σ_top"] == approx(-2 * 100e3 / (b * x * z))
    assert found["low"] == found["low.σ_max"] == approx(100e3 / (A_S * z))
    assert found["σ_max"] == found["low"]
    assert found["I_cr"] == approx(b * x**3 / 3 + n_A * (d - x) ** 2)
    assert found["σ_bottom"] == found["rib.σ_max"] == 0.0
    # from the centroid of the uncracked, transformed section, which lies below the middle
    assert found["na_depth"] == approx(x - 0.25 - (N_E - 1) * A_S * 0.2 / (0.15 + (N_E - 1) * A_S))
    assert found["κ"] == approx(100e3 / (10e9 * found["I_cr"]))


def test_the_same_upside_down_has_the_opposite_moment() -> None:
    down = CONCRETE.replace("-200 mm) to", "200 mm) to").replace("(100 mm, -200 mm)", "(100 mm, 200 mm)")
    found, turned = (
        values("model = cracked", f"M = {M} kN·m", section=text)
        for M, text in ((100, CONCRETE), (-100, down))
    )
    assert turned["low"] == approx(found["low"])
    assert turned["x_c"] == approx(found["x_c"])
    assert turned["na_depth"] == approx(-found["na_depth"])
    assert turned["σ_bottom"] == approx(found["σ_top"])


TEE = section(
    "part flange = rectangle(b = 900 mm, h = 80 mm) at (0 mm, 290 mm) of concrete",
    "part web = rectangle(b = 300 mm, h = 500 mm) of concrete",
    "bars low = 6 of 32 mm from (-100 mm, -200 mm) to (100 mm, -200 mm) of steel",
    "bars top = 1000 mm² at (0 mm, 290 mm) of steel",
    "modulus concrete = 10 GPa",
    "modulus steel = 200 GPa",
    "reference = concrete",
)


def test_a_cracked_tee_with_two_layers() -> None:
    """The first moments of flange, web, upper bars (n - 1) and lower bars (n) balance about the axis."""
    found = values("model = cracked", "M = 400 kN·m", section=TEE)
    A_low, d = 6 * math.pi * 0.032**2 / 4, 0.53
    flange, top, low = 0.9 * 0.08, (N_E - 1) * 1e-3, N_E * A_low
    # flange (x - 0.04) + 0.3 (x - 0.08)²/2 + top (x - 0.04) = low (d - x)
    a, b = 0.15, flange + top + low - 0.3 * 0.08
    c = 0.15 * 0.08**2 - 0.04 * (flange + top) - low * d
    x = (-b + math.sqrt(b * b - 4 * a * c)) / (2 * a)
    assert x > 0.08  # in the web
    I_h = (
        0.9 * 0.08**3 / 12 + flange * (x - 0.04) ** 2 + 0.3 * (x - 0.08) ** 3 / 3
        + top * (x - 0.04) ** 2 + low * (d - x) ** 2
    )  # fmt: skip
    assert found["x_c"] == approx(x)
    assert found["I_cr"] == approx(I_h)
    assert found["low"] == approx(N_E * 400e3 * (d - x) / I_h)
    assert found["top"] == approx(-N_E * 400e3 * (x - 0.04) / I_h)
    assert found["flange.σ_min"] == approx(-400e3 * x / I_h)
    assert found["web.σ_min"] == approx(-400e3 * (x - 0.08) / I_h)


def test_concrete_without_bars_of_its_own_cracks_as_well() -> None:
    """A haunch below the bars, and a flange above that reaches below the axis, add nothing in tension."""
    whole = TEE.replace("bars top = 1000 mm² at (0 mm, 290 mm) of steel\n", "")
    haunched = whole.replace(
        "bars low", "part foot = rectangle(b = 200 mm, h = 50 mm) at (0 mm, -275 mm) of concrete\nbars low"
    )
    found, same = (values("model = cracked", "M = 400 kN·m", section=text) for text in (whole, haunched))
    assert {n: same[n] for n in ("x_c", "I_cr", "low", "σ_top")} == {
        n: approx(found[n]) for n in ("x_c", "I_cr", "low", "σ_top")
    }
    assert same["foot.σ_max"] == 0.0
    thin = whole.replace("modulus", "strength concrete = 14 MPa\nstrength steel = 100 MPa\nmodulus", 1)
    plastic = values("model = plastic", "M = 1 kN·m", section=thin)
    assert plastic["x_c"] == approx(6 * math.pi * 0.032**2 / 4 * 100 / 14 / 0.9)  # within the flange
    assert plastic["flange.σ_max"] == 0.0


def test_a_cracked_rectangle_under_an_eccentric_force() -> None:
    """With x chosen, N and M about the middle of the outline follow: b x σ/2 and n σ (d - x)/x A_s.

    Forces act at the centroid of the uncracked, transformed section, which lies below the middle.
    """
    x, sigma_c, d = 0.2, 10e6, 0.45
    sigma_s = N_E * sigma_c * (d - x) / x
    C, T = 0.3 * x * sigma_c / 2, A_S * sigma_s
    y_bar = -(N_E - 1) * A_S * 0.2 / (0.3 * 0.5 + (N_E - 1) * A_S)
    N, M = T - C, C * (0.25 - x / 3 - y_bar) + T * (0.2 + y_bar)
    found = values("model = cracked", f"N = {N!r} N", f"M = {M!r} N*1 m", section=CONCRETE)
    assert found["x_c"] == approx(x)
    assert found["σ_min"] == approx(-sigma_c)
    assert found["low"] == approx(sigma_s)
    assert "I_cr" not in found  # it is defined for bending alone


# --- curved -----------------------------------------------------------------------------------------------


@pytest.mark.parametrize(
    ("centre", "inner", "outer"), [("bottom", "bottom", "top"), ("top", "top", "bottom")]
)
@pytest.mark.parametrize(("M", "N"), [(10e3, 0.0), (-10e3, 0.0), (10e3, 50e3)])
def test_a_curved_rectangle(centre: str, inner: str, outer: str, M: float, N: float) -> None:
    """r_n = h/ln(r_o/r_i), σ = N/A ± M (r_n - r)/(A e r); R_c = 250 mm."""
    found = values("model = curved", "R_c = 250 mm", f"centre = {centre}", f"M = {M!r} N*1 m", f"N = {N!r} N")
    A, r_i, r_o = 0.02, 0.15, 0.35
    r_n = 0.2 / math.log(r_o / r_i)
    e = 0.25 - r_n
    opens = M if centre == "bottom" else -M  # tension on the inner side
    at_inner, at_outer = (N / A + opens * (r_n - r) / (A * e * r) for r in (r_i, r_o))
    assert found["r_n"] == approx(r_n)
    assert found["e"] == approx(e)
    assert found[f"σ_{inner}"] == approx(at_inner)
    assert found[f"σ_{outer}"] == approx(at_outer)
    assert found["σ_max"] == approx(max(at_inner, at_outer))
    assert found["σ_min"] == approx(min(at_inner, at_outer))
    straight = N / A + opens / (0.1 * 0.2**2 / 6)
    assert found["σ_straight"] == approx(straight)
    assert found["straight_error"] == approx(straight / at_inner - 1)
    r_0 = opens * r_n / (opens - N * e)  # σ = 0: M r_n = r (M - N e)
    below = (0.25 - r_0) * (1 if centre == "bottom" else -1)
    assert found["na_depth"] == approx(below)


def test_a_point_of_a_curved_bar() -> None:
    found = values(
        "model = curved", "R_c = 250 mm", "centre = bottom", "M = 10 kN·m", "point p = (0 mm, 50 mm)"
    )
    r_n = 0.2 / math.log(0.35 / 0.15)
    assert found["p"] == found["p.σ"] == approx(10e3 * (r_n - 0.3) / (0.02 * (0.25 - r_n) * 0.3))


def test_slight_curvature_is_that_of_a_straight_bar() -> None:
    found = values("model = curved", "R_c = 1 km", "centre = top", "M = 10 kN·m")
    assert found["σ_bottom"] == approx(15 * MPA, 1e-3)
    assert abs(found["straight_error"]) < 1e-4


# --- faults -----------------------------------------------------------------------------------------------


@pytest.mark.parametrize(
    ("lines", "code", "number"),
    [
        (("model = plastic", "M = 1 kN·m"), "strength-missing", ""),
        ((*PLASTIC, "M = 301 kN·m"), "beyond-plastic", "M_pl = 300.0 kN·m"),
        ((*PLASTIC, "M = 230 kN·m", "N = -3000 kN"), "beyond-plastic", "0.97"),
        ((*PLASTIC, "N = 6001 kN"), "beyond-plastic", "N_pl = 6000 kN"),
        ((*PLASTIC, "M_lat = 151 kN·m"), "beyond-plastic", "150.0 kN·m"),
        ((*YIELDING, "M = 300.1 kN·m"), "beyond-plastic", "300.0 kN·m"),
        ((*YIELDING, "N = -6001 kN"), "beyond-plastic", "−6000 kN"),
        (("model = no_tension", "M = 1 kN·m"), "no-equilibrium", "no axial force"),
        (("model = no_tension", "N = 1 kN"), "no-equilibrium", "0 mm"),
        (("model = no_tension", "N = -100 kN", "M = 10.1 kN·m"), "no-equilibrium", "101.0 mm"),
        (("model = cracked", "M = 1 kN·m"), "bars-missing", ""),
        (("model = curved", "M = 1 kN·m", "centre = top"), "setting-missing", "R_c"),
        (("model = curved", "M = 1 kN·m", "R_c = 1 m"), "setting-missing", "centre"),
        (("model = curved", "M = 1 kN·m", "R_c = 100 mm", "centre = top"), "radius-too-small", "100.0 mm"),
        (("model = curved", "M = 1 kN·m", "R_c = -1 m", "centre = top"), "not-positive", "−1"),
        (("model = curved", "M_lat = 1 kN·m", "R_c = 1 m", "centre = top"), "not-in-model", "1.000 kN·m"),
        (("M = 1 kN·m", "R_c = 1 m"), "not-in-model", ""),
        (("M = 1 kN·m", "centre = top"), "not-in-model", ""),
        ((*PLASTIC, "M = 1 kN·m", "V = 3 kN"), "not-in-model", "3.000 kN"),
        ((*PLASTIC, "M = 1 kN·m", "limit = 300 MPa"), "not-in-model", "M_pl"),
        (("model = no_tension", "N = -1 kN", "T = 3 kN·m"), "not-in-model", "3.000 kN·m"),
    ],
)
def test_fault(lines: tuple[str, ...], code: str, number: str) -> None:
    calc = stress(*lines)
    (fault,) = calc.diagnostics
    assert fault.code == code
    assert number in f"{fault.message} {fault.label} {fault.hint}".replace("\u00a0", " ")
    assert fault.span.start > calc.diagnostics[0].source.text.index("```stress")


@pytest.mark.parametrize(
    "forces", [("M = 300 kN·m",), ("M = 225 kN·m", "N = 3000 kN"), ("M = -300 kN·m",), ("N = 6000 kN",)]
)
def test_the_plastic_forces_themselves_can_be_carried(forces: tuple[str, ...]) -> None:
    if "N = 6000 kN" not in forces:
        assert values(*PLASTIC, *forces)["utilisation"] == approx(1.0)


def test_a_strength_missing_for_one_material_names_it() -> None:
    text = TWO_MATERIALS.replace("strength timber = 30 MPa\n", "")
    (fault,) = stress("model = plastic", "M = 1 kN·m", section=text).diagnostics
    assert fault.code == "strength-missing"
    assert "timber" in fault.message
    assert stress("model = plastic", "M = 1 kN·m", "f_y = 30 MPa", section=text).diagnostics == ()


def test_a_curved_bar_of_two_materials_is_refused() -> None:
    (fault,) = stress(
        "model = curved", "M = 1 kN·m", "R_c = 1 m", "centre = top", section=TWO_MATERIALS
    ).diagnostics
    assert fault.code == "not-in-model"


def test_a_shear_of_zero_is_taken_by_every_model() -> None:
    assert stress(*PLASTIC, "M = 1 kN·m", "V = 0 kN", section=RECTANGLE).diagnostics == ()


@pytest.mark.parametrize(
    ("lines", "where", "text"),
    [  # line 7 is the first after `section = main`
        (("model = plastic", "M = 1 kN·m"), (5, 4), "stress s"),
        ((*PLASTIC, "M = 301 kN·m"), (9, 5), "301 kN·m"),
        ((*PLASTIC, "N = 6001 kN", "M_lat = 1 kN·m"), (10, 9), "1 kN·m"),
        (("N = -100 kN", "model = no_tension", "M = 10.1 kN·m"), (9, 5), "10.1 kN·m"),
        (("M = 1 kN·m", "model = cracked"), (6, 11), "main"),
        (("model = curved", "M = 1 kN·m", "R_c = 100 mm", "centre = top"), (9, 7), "100 mm"),
        ((*PLASTIC, "M = 1 kN·m", "V = 3 kN | shear"), (10, 1), "V = 3 kN"),
        ((*PLASTIC, "M = 1 kN·m", "limit = 3 MPa"), (10, 1), "limit = 3 MPa"),
        (("M = 1 kN·m", "point p = (0 mm, 200 mm)"), (8, 11), "(0 mm, 200 mm)"),
        (("M = 1 kN·m", "point σ_1 = (0 mm, 0 mm)"), (8, 7), "σ_1"),
        (("M = 1 kN·m", "limit = -3 MPa"), (8, 9), "-3 MPa"),
        (("M = 1 kN·m", "limit = 3 kN"), (8, 9), "3 kN"),
    ],
)
def test_place_of_a_fault(lines: tuple[str, ...], where: tuple[int, int], text: str) -> None:
    (fault,) = stress(*lines).diagnostics
    source = fault.source.text
    start = fault.span.start
    assert source[start : fault.span.end].split(" | ")[0].strip() == text
    assert (source.count("\n", 0, start) + 1, start - source.rfind("\n", 0, start)) == where
