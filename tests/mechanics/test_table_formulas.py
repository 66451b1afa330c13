"""Torsion and warping constants against the catalogues and published values.

The bounds are what the formulas reach over all rows of a family; most of it is rounding of sizes and values.
"""

import math

import pytest

from calcgen.mechanics.table_formulas import Standard, channel_shear_centre, table_torsion, table_warping
from calcgen.profiles.catalogue import Profile, builtin_catalogue

MM, CM, IN = 1e-3, 1e-2, 0.0254

# family: lowest and highest of formula/published - 1, in per cent
SPREADS_OF_I_T = {
    "IPE": (-0.4, 0.2),  # printed to 0.01 cm⁴: IPE 80 with 0.70
    "HEA": (-0.1, 0.1),
    "HEB": (-0.1, 0.1),
    "HEM": (-0.1, 0.1),
    "UPE": (-0.5, 0.3),
    "UPN": (-0.9, 2.1),  # the formula takes the flanges as parallel
    "W": (-0.7, 1.2),
    "WT": (-0.9, 1.0),
    "C": (0.6, 3.5),
    "HSS": (-0.2, 3.0),
    "HSS round": (-0.3, 0.5),
}
SPREADS_OF_I_W = {
    "IPE": (-1.7, 0.4),  # printed to 10 cm⁶: IPE 80 with 0.12e3
    "HEA": (-0.1, 0.1),
    "HEB": (-0.2, 0.1),
    "HEM": (-0.1, 0.1),
    "W": (-0.9, 1.4),
    "M": (-0.5, 0.4),
    "S": (-0.4, 0.5),
    "C": (-0.8, 0.6),
    "MC": (-0.6, 0.8),
}


def rows(family: str, *symbols: str) -> list[Profile]:
    found = [row for row in builtin_catalogue().family(family) if row.published.keys() >= set(symbols)]
    assert len(found) > 10
    return found


@pytest.mark.parametrize("family", SPREADS_OF_I_T)
def test_torsion_constants_of_catalogues(family: str) -> None:
    low, high = SPREADS_OF_I_T[family]
    for row in rows(family, "I_t"):
        found = table_torsion(row.shape, row.dimensions, row.axes)
        assert found is not None
        percent = 100.0 * (found.value / row.published["I_t"] - 1.0)
        assert low < percent < high, row.designation


@pytest.mark.parametrize("family", SPREADS_OF_I_W)
def test_warping_constants_of_catalogues(family: str) -> None:
    low, high = SPREADS_OF_I_W[family]
    for row in rows(family, "I_w", "I_h", "I_v"):
        found = table_warping(
            row.shape, row.dimensions, row.axes, I_h=row.published["I_h"], I_v=row.published["I_v"]
        )
        assert found is not None
        percent = 100.0 * (found.value / row.published["I_w"] - 1.0)
        assert low < percent < high, row.designation


NAMES = {
    "i_shape": ("h", "b", "t_w", "t_f", "r"),
    "tee": ("h", "b", "t_w", "t_f", "r"),
    "channel": ("h", "b", "t_w", "t_f", "r"),
    "angle": ("h", "b", "t", "r_1"),
    "box": ("h", "b", "t", "r_o", "r_i"),
    "tube": ("d", "t"),
}

# Published values from memory of the tables named; the tolerance is their rounding. mm, cm⁴; in, in⁴.
SINGLE: list[tuple[str, str, Standard, tuple[float, ...], float, float]] = [
    ("IPE 300, EN 10365", "i_shape", "eurocode", (300, 150, 7.1, 10.7, 15), 20.12, 5e-4),
    ("HE 300 B, EN 10365", "i_shape", "eurocode", (300, 300, 11, 19, 27), 185.0, 5e-4),
    ("UPE 200, EN 10365", "channel", "eurocode", (200, 80, 6, 11, 13), 8.88, 1e-3),
    ("UPE 300, EN 10365", "channel", "eurocode", (300, 100, 9.5, 15, 15), 31.5, 1.6e-3),
    ("PFC 200x90x30, British tables", "channel", "eurocode", (200, 90, 7, 14, 12), 18.3, 2.8e-3),
    ("SHS 100x5, EN 10210-2", "box", "eurocode", (100, 100, 5, 7.5, 5), 439, 1.2e-3),
    ("SHS 100x5, EN 10219-2", "box", "eurocode", (100, 100, 5, 10, 5), 441, 1.2e-3),
    ("CHS 168.3x8, EN 10210-2", "tube", "eurocode", (168.3, 8), 2595, 5e-4),
    ("HSS8x4x1/4, AISC", "box", "american", (8, 4, 0.233, 0.466, 0.233), 35.3, 5e-3),
    ("W18x50, AISC", "i_shape", "american", (18, 7.5, 0.355, 0.57, 0.402), 1.24, 4.1e-3),
    ("half of W18x50, AISC", "tee", "american", (9, 7.5, 0.355, 0.57, 0.402), 0.62, 8.1e-3),
    ("L4x4x1/4, AISC; r = 3/8 in", "angle", "american", (4, 4, 0.25, 0.375), 0.0438, 1.2e-3),
    ("L4x4x1/2, AISC; r = 3/8 in", "angle", "american", (4, 4, 0.5, 0.375), 0.322, 1.6e-3),
    ("L4x4x3/4, AISC; r = 3/8 in", "angle", "american", (4, 4, 0.75, 0.375), 1.02, 5e-3),
    ("L8x8x1, AISC; r = 5/8 in", "angle", "american", (8, 8, 1, 0.625), 5.08, 1e-3),
]


@pytest.mark.parametrize(
    ("shape", "standard", "sizes", "published", "rel"), [c[1:] for c in SINGLE], ids=[c[0] for c in SINGLE]
)
def test_published_torsion_constants(
    shape: str, standard: Standard, sizes: tuple[float, ...], published: float, rel: float
) -> None:
    length, fourth = (MM, CM**4) if standard == "eurocode" else (IN, IN**4)
    named = {name: size * length for name, size in zip(NAMES[shape], sizes, strict=True)}
    found = table_torsion(shape, named, standard)
    assert found is not None
    assert found.value / fourth == pytest.approx(published, rel=rel)


def test_published_warping_constants() -> None:
    """From memory: L4x4x1/2, AISC Table 1-7."""
    leg = {"h": 4 * IN, "b": 4 * IN, "t": 0.5 * IN}
    found = table_warping("angle", leg, "american", I_h=1.0, I_v=1.0)
    assert found is not None
    assert found.value / IN**6 == pytest.approx(0.366, rel=1.4e-3)


def test_a_thin_channel_has_the_warping_constant_of_its_mid_line() -> None:
    """Closed form t_f b³ h²/12 (3 b t_f + 2 h t_w)/(6 b t_f + h t_w), from memory of Timoshenko & Gere."""
    b, h, t_w, t_f = 0.1, 0.3, 1e-6, 2e-6
    sizes = {"h": h, "b": b, "t_w": t_w, "t_f": t_f}
    found = table_warping("channel", sizes, "american", I_h=t_w * h**3 / 12 + b * t_f * h**2 / 2, I_v=1.0)
    assert found is not None
    exact = t_f * b**3 * h**2 / 12 * (3 * b * t_f + 2 * h * t_w) / (6 * b * t_f + h * t_w)
    assert found.value == pytest.approx(exact, rel=1e-4)
    assert table_warping("channel", sizes, "eurocode", I_h=1.0, I_v=1.0) is None


def test_shear_centre_of_a_channel() -> None:
    """C15x50, e_o = 0.583 in from the back of the web; AISC Table 1-5, from memory."""
    sizes = {"h": 15 * IN, "b": 3.72 * IN, "t_w": 0.716 * IN, "t_f": 0.65 * IN}
    assert channel_shear_centre(sizes) / IN - 0.358 == pytest.approx(0.583, rel=3e-3)


def test_a_thin_box_without_radii_is_bredt() -> None:
    """Closed form 4 A_m² t/s for a vanishing wall."""
    found = table_torsion("box", {"b": 0.1, "h": 0.2, "t": 1e-6}, "eurocode")
    assert found is not None
    assert found.value == pytest.approx(4.0 * 0.02**2 * 1e-6 / 0.6, rel=1e-4)


def test_two_tees_make_an_i_section() -> None:
    sizes = {"b": 0.15, "t_w": 7.1 * MM, "t_f": 10.7 * MM, "r": 0.015}
    standards: tuple[Standard, ...] = ("eurocode", "american")
    for standard in standards:
        whole = table_torsion("i_shape", {"h": 0.3, **sizes}, standard)
        half = table_torsion("tee", {"h": 0.15, **sizes}, standard)
        assert whole is not None
        assert half is not None
        assert half.value == pytest.approx(0.5 * whole.value, rel=1e-12)


def test_slender_plates_without_fillets() -> None:
    """Σ b t³/3 of thin walls: ends and junctions vanish with t/b."""
    t = 1e-5
    angle = table_torsion("angle", {"h": 0.1, "b": 0.06, "t": t}, "american")
    assert angle is not None
    assert angle.value == pytest.approx(0.16 * t**3 / 3.0, rel=1e-3)
    sloped = {"h": 0.2, "b": 0.06, "t_w": t, "t_f": t, "slope": 1e-9}
    parallel = table_torsion("channel", {**sloped, "slope": 0.0}, "american")
    tapered = table_torsion("channel", sloped, "american")
    assert parallel is not None
    assert tapered is not None
    assert tapered.value == pytest.approx(parallel.value, rel=1e-6)
    assert math.isclose(parallel.value, 0.32 * t**3 / 3.0, rel_tol=1e-3)


@pytest.mark.parametrize("shape", ["rectangle", "zed", "polygon"])
def test_other_shapes_have_no_table(shape: str) -> None:
    assert table_torsion(shape, {"b": 0.1, "h": 0.2}, "eurocode") is None
    assert table_warping(shape, {"b": 0.1, "h": 0.2}, "eurocode", I_h=1.0, I_v=1.0) is None
    unequal = {"h": 0.2, "b_t": 0.1, "t_t": 0.01, "b_b": 0.1, "t_b": 0.01, "t_w": 0.01}
    assert table_torsion("i_shape", unequal, "american") is None
