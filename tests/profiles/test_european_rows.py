"""Printed figures of European angles and hollow sections, beside the rules of `test_rows.py`.

The rows are from memory of EN 10056-1, EN 10210-2 and EN 10219-2, and so are the rules that name no other
source. Figures of the hollow sections are held to the last digit that the table prints.
"""

from __future__ import annotations

import math
from collections.abc import Iterator, Mapping

import pytest

from calcgen.profiles import Profile, builtin_catalogue
from tests.profiles.printed import Figure, printed
from tests.profiles.test_rows import STEEL, of_outline, outline_of, relative

CATALOGUE = builtin_catalogue()
SQUARE, OBLONG, ROUND = ("SHS hot", "SHS cold"), ("RHS hot", "RHS cold"), ("CHS hot", "CHS cold")
HOLLOW = (*SQUARE, *OBLONG, *ROUND)
WHOLE = {"I": 1e-8, "W": 1e-6}  # cm⁴ and cm³: what the first letter of a property's name counts in


def rows(*families: str) -> Iterator[tuple[Profile, Mapping[str, Figure]]]:
    for family in families:
        for profile in CATALOGUE.family(family):
            yield profile, printed(family)[profile.designation]


def last_digit(name: str, figure: Figure) -> float:
    """Room for a printed figure; large ones are rounded twice, 1494.6 to 1495 and to 1500."""
    unit = WHOLE.get(name[0], math.inf)
    return 1.005 * (figure.rounding + (0.5 * unit if figure.rounding > unit else 0.0))


@pytest.mark.parametrize(
    ("family", "count", "recalled"),
    [
        ("L EN", 90, 90),
        ("SHS hot", 142, 139), ("RHS hot", 143, 139), ("CHS hot", 220, 200),
        ("SHS cold", 140, 129), ("RHS cold", 113, 100), ("CHS cold", 146, 145),
    ],
)  # fmt: skip
def test_no_row_is_lost(family: str, count: int, recalled: int) -> None:
    """Rows, and those among them whose second moment is recalled."""
    assert len(CATALOGUE.family(family)) == count
    assert sum("I_h" in figures or "I_v" in figures for _, figures in rows(family)) == recalled


@pytest.mark.parametrize(
    ("spelling", "designation", "family"),
    [
        ("shs100x100x5", "SHS 100x100x5", "SHS hot"),
        ("SHS 100×100×5", "SHS 100x100x5", "SHS hot"),
        ("shs 100 x 100 x 5 cf", "SHS 100x100x5 CF", "SHS cold"),
        ("RHS200x100x8", "RHS 200x100x8", "RHS hot"),
        ("RHS 200×100×8CF", "RHS 200x100x8 CF", "RHS cold"),
        ("chs168.3x8", "CHS 168.3x8", "CHS hot"),
        ("CHS 168.3 x 8 CF", "CHS 168.3x8 CF", "CHS cold"),
        ("L100x100x10", "L 100x100x10", "L EN"),
        ("L 150×75×10", "L 150x75x10", "L EN"),
        ("L4x4x1/4", "L4x4x1/4", "L"),
    ],
)
def test_spellings(spelling: str, designation: str, family: str) -> None:
    profile = CATALOGUE.find(spelling)
    assert profile is not None
    assert (profile.designation, profile.family) == (designation, family)


def test_designations_are_the_sizes() -> None:
    for profile, _ in rows("L EN", *HOLLOW):
        sizes = [profile.dimensions[name] for name in ("d", "h", "b", "t") if name in profile.dimensions]
        written = "x".join(f"{1000.0 * size:g}" for size in sizes)
        start = profile.family.split()[0]
        end = " CF" if profile.family.endswith("cold") else ""
        assert profile.designation == f"{start} {written}{end}"
        if "b" in profile.dimensions:
            h, b = profile.dimensions["h"], profile.dimensions["b"]
            assert h == b if start == "SHS" else h > b if start == "RHS" else h >= b


@pytest.mark.parametrize("family", [*SQUARE, *OBLONG])
def test_corner_radii_are_those_the_standard_computes_with(family: str) -> None:
    for profile, _ in rows(family):
        t = profile.dimensions["t"]
        if family.endswith("hot"):
            outside, inside = 1.5, 1.0  # EN 10210-2
        elif t <= 0.006:
            outside, inside = 2.0, 1.0  # EN 10219-2
        else:
            outside, inside = (2.5, 1.5) if t <= 0.010 else (3.0, 2.0)
        assert profile.dimensions["r_o"] == pytest.approx(outside * t, rel=1e-9)
        assert profile.dimensions["r_i"] == pytest.approx(inside * t, rel=1e-9)


@pytest.mark.parametrize("family", HOLLOW)
def test_hollow_sections_hold_to_the_last_digit(family: str) -> None:
    """The mass is 0.785 kg/m for each cm² of the area, as the standards have it."""
    for profile, figures in rows(family):
        own = dict(of_outline(profile))
        own["mass"] = STEEL * own["A"]
        for name in own.keys() & figures.keys():
            assert own[name] == pytest.approx(
                figures[name].value, rel=0.0, abs=last_digit(name, figures[name])
            ), (profile.designation, name)


@pytest.mark.parametrize("family", [*SQUARE, *OBLONG])
def test_torsion_constant_of_boxes_is_that_of_the_annex(family: str) -> None:
    """I_t = t³ h/3 + 2 K A_h with K = 2 A_h t/h, h the length of the mid-line and A_h the area inside it."""
    for profile, figures in rows(family):
        if "I_t" in figures:
            h, b, t, r_o, r_i = (profile.dimensions[size] for size in ("h", "b", "t", "r_o", "r_i"))
            corner = 0.5 * (r_o + r_i)
            length = 2.0 * (b - t + h - t) - 2.0 * corner * (4.0 - math.pi)
            area = (b - t) * (h - t) - corner**2 * (4.0 - math.pi)
            expected = t**3 * length / 3.0 + 4.0 * area**2 * t / length
            figure = figures["I_t"]
            assert expected == pytest.approx(figure.value, rel=0.0, abs=last_digit("I_t", figure)), (
                profile.designation
            )


@pytest.mark.parametrize("family", ROUND)
def test_tubes_agree_with_closed_forms(family: str) -> None:
    """A, I, W_el, W_pl of a ring, which no outline enters, and I_t = 2 I."""
    for profile, figures in rows(family):
        d, t = profile.dimensions["d"], profile.dimensions["t"]
        second = math.pi / 64.0 * (d**4 - (d - 2.0 * t) ** 4)
        expected = {
            "A": math.pi * t * (d - t),
            "I_h": second,
            "W_el_h": 2.0 * second / d,
            "W_pl_h": (d**3 - (d - 2.0 * t) ** 3) / 6.0,
            "I_t": 2.0 * second,
        }
        for name in expected.keys() & figures.keys():
            assert expected[name] == pytest.approx(
                figures[name].value, rel=0.0, abs=last_digit(name, figures[name])
            ), (profile.designation, name)


@pytest.mark.parametrize("family", [*SQUARE, *ROUND])
def test_square_and_round_sections_have_one_figure_for_both_axes(family: str) -> None:
    for _, figures in rows(family):
        for name in ("I", "W_el", "W_pl", "i"):
            assert figures.get(f"{name}_h") == figures.get(f"{name}_v")


def test_cold_formed_corners_take_material_away() -> None:
    """The same walls with rounder corners: less area, and a lower I about either axis. Rings are the same."""
    both = 0
    for profile, figures in rows(*(family for family in HOLLOW if family.endswith("cold"))):
        hot = CATALOGUE.find(profile.designation.removesuffix(" CF"))
        if hot is not None:
            both += 1
            other = printed(hot.family)[hot.designation]
            for name in ("mass", "A", "I_h", "I_v"):
                if name in figures and name in other:
                    if profile.shape == "tube":
                        assert figures[name] == other[name], profile.designation
                    else:
                        assert figures[name].value < other[name].value, (profile.designation, name)
    assert both > 250


def test_toes_of_angles_have_half_the_root_radius() -> None:
    for profile, _ in rows("L EN"):
        assert profile.dimensions["r_2"] == pytest.approx(0.5 * profile.dimensions["r_1"], rel=1e-9)


def test_equal_angles_have_one_figure_for_both_legs() -> None:
    for profile, figures in rows("L EN"):
        if profile.dimensions["h"] == profile.dimensions["b"]:
            for one, other in (("I_h", "I_v"), ("W_el_h", "W_el_v"), ("i_h", "i_v"), ("y_bar", "x_bar")):
                assert figures.get(one) == figures.get(other)


def test_principal_moments_of_angles_are_those_of_the_outline() -> None:
    """I_1 and I_2 (u-u and v-v) and the radii; the tolerance is that of the file's head or the last digit."""
    for profile, figures in rows("L EN"):
        own = outline_of(profile)
        expected = {
            "I_1": own.I_1,
            "I_2": own.I_2,
            "i_1": math.sqrt(own.I_1 / own.A),
            "i_2": math.sqrt(own.I_2 / own.A),
        }
        for name in expected.keys() & figures.keys():
            limit = max(0.006, 1.005 * relative(figures[name]))
            assert expected[name] == pytest.approx(figures[name].value, rel=limit), (
                profile.designation,
                name,
            )


def test_printed_moments_of_angles_agree_among_themselves() -> None:
    """I_1 + I_2 = I_y + I_z and I = A i², within what rounding allows; no outline enters."""
    for profile, figures in rows("L EN"):
        names = ("I_1", "I_2", "I_h", "I_v")
        if all(name in figures for name in names):
            first, second, about_y, about_z = (figures[name] for name in names)
            slack = sum(figures[name].rounding for name in names)
            total = about_y.value + about_z.value
            assert first.value + second.value == pytest.approx(total, abs=1.01 * slack), profile.designation
        for radius, moment in (("i_1", "I_1"), ("i_2", "I_2")):
            if {radius, moment} <= figures.keys():
                slack = relative(figures["A"]) + 2.0 * relative(figures[radius]) + relative(figures[moment])
                assert figures["A"].value * figures[radius].value ** 2 == pytest.approx(
                    figures[moment].value, rel=1.01 * slack
                ), (profile.designation, moment)


def test_mass_of_angles_is_that_of_the_printed_area() -> None:
    for profile, figures in rows("L EN"):
        slack = relative(figures["A"]) + relative(figures["mass"])
        assert STEEL * figures["A"].value == pytest.approx(figures["mass"].value, rel=1.01 * slack), (
            profile.designation
        )


# [1] Structural Design Essentials, TU Delft open textbook, steel section tables, read; the others from memory
# of the tables of the standards.
@pytest.mark.parametrize(
    ("designation", "name", "value", "unit", "rounding", "source"),
    [
        ("SHS 100x100x5", "A", 18.7, 1e-4, 0.05, "[1]"),
        ("SHS 100x100x5", "I_h", 279, 1e-8, 0.5, "[1]"),
        ("SHS 100x100x5", "W_el_h", 55.9, 1e-6, 0.05, "[1]"),
        ("SHS 100x100x5", "W_pl_h", 66.4, 1e-6, 0.05, "EN 10210-2"),
        ("SHS 100x100x5", "I_t", 439, 1e-8, 0.5, "EN 10210-2"),
        ("SHS 100x100x5 CF", "A", 18.4, 1e-4, 0.05, "EN 10219-2"),
        ("SHS 100x100x5 CF", "I_h", 271, 1e-8, 0.5, "EN 10219-2"),
        ("SHS 100x100x5 CF", "W_el_h", 54.2, 1e-6, 0.05, "EN 10219-2"),
        ("SHS 100x100x5 CF", "W_pl_h", 64.6, 1e-6, 0.05, "EN 10219-2"),
        ("SHS 100x100x5 CF", "I_t", 441, 1e-8, 0.5, "EN 10219-2"),
        ("CHS 168.3x8", "A", 40.3, 1e-4, 0.05, "[1]"),
        ("CHS 168.3x8", "I_h", 1300, 1e-8, 5.0, "[1]"),
        ("CHS 168.3x8", "W_el_h", 154, 1e-6, 0.5, "[1]"),
        ("CHS 168.3x8", "W_pl_h", 206, 1e-6, 0.5, "EN 10210-2"),
        ("CHS 168.3x8", "I_t", 2595, 1e-8, 0.5, "EN 10210-2"),
        ("L 100x100x10", "A", 19.2, 1e-4, 0.05, "EN 10056-1"),
        ("L 100x100x10", "I_h", 177, 1e-8, 0.5, "EN 10056-1"),
        ("L 100x100x10", "W_el_h", 24.6, 1e-6, 0.05, "EN 10056-1"),
        ("L 100x100x10", "y_bar", 2.82, 1e-2, 0.005, "EN 10056-1"),
        ("L 100x100x10", "I_1", 280, 1e-8, 0.5, "EN 10056-1"),
        ("L 100x100x10", "I_2", 73.0, 1e-8, 0.05, "EN 10056-1"),
    ],
)
def test_open_cases(
    designation: str, name: str, value: float, unit: float, rounding: float, source: str
) -> None:
    """Published by the catalogue and of its outline: the same figures recalled once more, or read."""
    profile = CATALOGUE.find(designation)
    assert profile is not None
    assert profile.published[name] == pytest.approx(value * unit, rel=1e-9), source
    own = {**of_outline(profile), "I_1": outline_of(profile).I_1, "I_2": outline_of(profile).I_2}
    if name in own:
        assert own[name] == pytest.approx(value * unit, rel=0.0, abs=rounding * unit), source


def test_no_mass_of_a_formula_passes_for_a_recalled_one() -> None:
    """A row without a recalled mass says so, and recalls nothing else."""
    for profile, figures in rows(*HOLLOW):
        if "mass by the standard's formula" in profile.source:
            assert not figures.keys() & {"A", "I_h", "W_el_h", "W_pl_h", "i_h", "I_t"}, profile.designation
