"""Printed figures of the American catalogues against rules of their own, beside those of `test_rows.py`.

Most hold one printed figure against others and need no outline: slips of memory show in them. The rules are
those of thin-walled theory, or named beside the test.
"""

from __future__ import annotations

import math
import re
from collections.abc import Mapping

import pytest

from calcgen.profiles import Profile, builtin_catalogue
from tests.profiles.printed import Figure, printed
from tests.profiles.test_rows import STEEL_US, outline_of, relative

CATALOGUE = builtin_catalogue()
WEIGHT = re.compile(r"x([\d.]+)$")


def rows(*families: str) -> list[tuple[Profile, Mapping[str, Figure]]]:
    return [(p, printed(name)[p.designation]) for name in families for p in CATALOGUE.family(name)]


def closed(d: float, t: float) -> float:
    return math.pi / 64.0 * (d**4 - (d - 2.0 * t) ** 4)


@pytest.mark.parametrize(
    ("family", "count"),
    [
        ("W", 283), ("M", 13), ("S", 28), ("C", 29), ("MC", 39), ("L", 127), ("WT", 132),
        ("HSS", 360), ("HSS round", 128), ("Pipe", 35),
    ],
)  # fmt: skip
def test_no_row_is_lost(family: str, count: int) -> None:
    assert len(CATALOGUE.family(family)) == count


def test_nominal_mass_is_that_of_the_printed_area() -> None:
    """3.4 lb/ft per in², which no outline enters; nominal masses are rounded."""
    for profile, figures in rows("W", "M", "S", "C", "MC", "L", "WT"):
        if "A" in figures:
            mass = figures["mass"]
            slack = 0.012 * mass.value + mass.rounding
            assert STEEL_US * figures["A"].value == pytest.approx(mass.value, abs=slack), profile.designation


def test_designations_name_the_mass() -> None:
    """W18x50 weighs 50 lb/ft, and a tee cut from it half of that."""
    for profile, figures in rows("W", "M", "S", "C", "MC", "WT"):
        named = WEIGHT.search(profile.designation)
        assert named is not None
        assert figures["mass"].value * 0.3048 / 0.45359237 == pytest.approx(float(named[1]), rel=1e-9)


@pytest.mark.parametrize("family", ["W", "M", "S"])
def test_warping_constant_is_that_of_the_printed_flanges(family: str) -> None:
    """C_w = I_y (d - t_f)²/4, for tapered flanges too."""
    for profile, figures in rows(family):
        if {"I_w", "I_v"} <= figures.keys():
            arm = figures["h"].value - figures["t_f"].value
            slack = relative(figures["I_v"]) + relative(figures["I_w"]) + 0.004
            slack += 2.0 * (figures["h"].rounding + figures["t_f"].rounding) / arm
            expected = 0.25 * figures["I_v"].value * arm**2
            assert figures["I_w"].value == pytest.approx(expected, rel=slack), profile.designation


def test_tees_are_halves_of_wide_flange_shapes() -> None:
    """Each tee has the flange and web of the W shape of twice its mass, half its depth, A, I_y, S_y and J."""
    wide = {
        (round(p.published["mass"], 6), round(p.dimensions["h"] / 0.0254)): p for p in CATALOGUE.family("W")
    }
    for profile, figures in rows("WT"):
        mass, depth = 2.0 * profile.published["mass"], 2.0 * profile.dimensions["h"] / 0.0254
        near = [p for (m, h), p in wide.items() if abs(m - mass) < 1e-5 and abs(h - depth) <= 0.7]
        (parent,) = near
        whole = printed("W")[parent.designation]
        for size in ("b", "t_w", "t_f", "k_des"):
            assert figures[size].value == whole[size].value, profile.designation
        for name in ("h", "A", "I_v", "W_el_v", "W_pl_v", "I_t"):
            if name in figures and name in whole:
                slack = figures[name].rounding + 0.5 * whole[name].rounding + 0.011 * figures[name].value
                assert figures[name].value == pytest.approx(0.5 * whole[name].value, abs=slack), (
                    profile.designation,
                    name,
                )
        if "i_v" in figures and "i_v" in whole:
            slack = 1.01 * (figures["i_v"].rounding + whole["i_v"].rounding)
            assert figures["i_v"].value == pytest.approx(whole["i_v"].value, abs=slack), profile.designation


def test_tees_have_their_centroid_where_it_is_printed() -> None:
    """The printed distance from the outer face of the flange, against the outline and against S_x = I_x/c."""
    for profile, figures in rows("WT"):
        if "y_top" in figures:
            y = figures["y_top"]
            own = 0.5 * profile.dimensions["h"] - outline_of(profile).y_bar
            assert own == pytest.approx(y.value, rel=0.0105), profile.designation
            c = figures["h"].value - y.value
            slack = relative(figures["I_h"]) + relative(figures["W_el_h"])
            slack += (figures["h"].rounding + y.rounding) / c
            assert figures["W_el_h"].value * c == pytest.approx(figures["I_h"].value, rel=1.01 * slack)


def test_torsion_constant_of_tees_is_rectangles_and_a_junction_circle() -> None:
    """Half of El Darwish and Johnston's formula for I-shapes, 1965 (from memory); see `test_rows.py`."""
    for profile, figures in rows("WT"):
        h, b, t_w, t_f, r = (profile.dimensions[size] for size in ("h", "b", "t_w", "t_f", "r"))
        circle = ((t_f + r) ** 2 + t_w * (r + 0.25 * t_w)) / (2.0 * r + t_f)
        alpha = -0.042 + 0.2204 * t_w / t_f + 0.1355 * r / t_f - 0.0865 * r * t_w / t_f**2
        alpha -= 0.0725 * (t_w / t_f) ** 2
        expected = b * t_f**3 / 3.0 - 0.21 * t_f**4 + (h - t_f) * t_w**3 / 3.0 + alpha * circle**4
        limit = max(0.02 * expected, figures["I_t"].rounding)
        assert figures["I_t"].value == pytest.approx(expected, rel=0.0, abs=limit), profile.designation


@pytest.mark.parametrize(
    ("family", "least", "largest"), [("S", 1.17, 1.39), ("M", 1.10, 1.15), ("MC", 0.98, 1.18)]
)
def test_open_torsion_constant_lies_near_its_rectangles(family: str, least: float, largest: float) -> None:
    """Tapers and fillets add to the rectangles, more in heavy small shapes; no closer model at hand."""
    for profile, figures in rows(family):
        h, b, t_w, t_f = (profile.dimensions[size] for size in ("h", "b", "t_w", "t_f"))
        rectangles = (2.0 * b * t_f**3 + (h - 2.0 * t_f) * t_w**3) / 3.0
        slack = relative(figures["I_t"])
        assert least - slack < figures["I_t"].value / rectangles < largest + slack, profile.designation


def test_tubes_agree_with_closed_forms() -> None:
    """A, I, S, Z and J of a circular ring, S = 2 I/d among the printed figures, and J = 2 I."""
    for profile, figures in rows("HSS round", "Pipe"):
        d, t = profile.dimensions["d"], profile.dimensions["t"]
        second = closed(d, t)
        expected = {
            "A": math.pi * t * (d - t),
            "I_h": second,
            "W_el_h": 2.0 * second / d,
            "W_pl_h": (d**3 - (d - 2.0 * t) ** 3) / 6.0,
            "I_t": 2.0 * second,
        }
        for name in expected.keys() & figures.keys():
            slack = max(0.005, relative(figures[name]))
            assert figures[name].value == pytest.approx(expected[name], rel=slack), (
                profile.designation,
                name,
            )
        if {"I_h", "W_el_h"} <= figures.keys():
            slack = 1.01 * (relative(figures["I_h"]) + relative(figures["W_el_h"]))
            assert figures["W_el_h"].value * d == pytest.approx(2.0 * figures["I_h"].value, rel=slack)
        if {"I_h", "I_t"} <= figures.keys():
            slack = 1.01 * (relative(figures["I_h"]) + relative(figures["I_t"]))
            assert figures["I_t"].value == pytest.approx(2.0 * figures["I_h"].value, rel=slack)
        for about_x, about_y in (("I_h", "I_v"), ("W_el_h", "W_el_v"), ("W_pl_h", "W_pl_v"), ("i_h", "i_v")):
            assert figures.get(about_x) == figures.get(about_y)


@pytest.mark.parametrize("family", ["HSS round", "Pipe"])
def test_design_wall_of_tubes(family: str) -> None:
    """0.93 of the nominal wall (AISC 360-16 B4.2); those of pipe lie up to 0.8 % above it."""
    for profile, _ in rows(family):
        nominal = profile.stated["t_nom"]
        above = profile.dimensions["t"] - 0.93 * nominal
        assert -0.001 * 0.0254 < above < max(0.001 * 0.0254, 0.0075 * nominal), profile.designation


def test_flange_slopes_of_miscellaneous_channels_are_those_of_the_head() -> None:
    slopes = {round(p.dimensions["slope"], 4) for p in CATALOGUE.family("MC")}
    of_the_head = {round(math.tan(math.radians(angle)), 4) for angle in (2, 3, 5)} | {0.1667}
    assert slopes <= of_the_head
