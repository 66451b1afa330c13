"""Shear areas of standards against published values and the clauses by hand."""

import math
from typing import TypeAlias

import pytest

from calcgen.mechanics.section import section_properties
from calcgen.mechanics.shapes import SHAPES, box, form_for, i_shape
from calcgen.mechanics.standard_areas import Standard, shear_area
from calcgen.profiles.catalogue import builtin_catalogue

MM, CM, IN = 1e-3, 1e-2, 0.0254

# h, b, t_w, t_f, r in mm; A_v,z in cm², tolerance of its rounding; from memory of EN 10365 and mill tables
ROLLED = [
    ("IPE 80", (80, 46, 3.8, 5.2, 5), 3.58, 1.54e-3),
    ("IPE 200", (200, 100, 5.6, 8.5, 12), 14.0, 3.93e-3),
    ("IPE 300", (300, 150, 7.1, 10.7, 15), 25.68, 5e-4),
    ("IPE 500", (500, 200, 10.2, 16, 21), 59.87, 5e-4),
    ("HE 200 A", (190, 200, 6.5, 10, 18), 18.08, 5e-4),
    ("HE 300 B", (300, 300, 11, 19, 27), 47.43, 5e-4),
]


@pytest.mark.parametrize(("sizes", "published", "rel"), [c[1:] for c in ROLLED], ids=[c[0] for c in ROLLED])
def test_published_areas_of_rolled_sections(sizes: tuple[float, ...], published: float, rel: float) -> None:
    shape = i_shape(**{n: s * MM for n, s in zip(("h", "b", "t_w", "t_f", "r"), sizes, strict=True)})
    A = section_properties(shape.outline).area
    (found,) = shear_area("i_shape", shape.dimensions, A, "eurocode", rolled=True)
    assert found.value / CM**2 == pytest.approx(published, rel=rel)
    assert (found.direction, found.clause) == ("vertical", "EN 1993-1-1 6.2.6(3) a")


def test_the_web_is_the_least() -> None:
    """A deep thin I-section without fillets: η h_w t_w, by hand."""
    sizes = {"h": 1.0, "b": 0.1, "t_w": 0.01, "t_f": 0.01, "r": 0.0}
    A = 2 * 0.1 * 0.01 + 0.98 * 0.01
    (found,) = shear_area("i_shape", sizes, A, "eurocode", rolled=True, eta=1.2)
    assert found.value == pytest.approx(1.2 * 0.98 * 0.01)
    (found,) = shear_area("i_shape", sizes, A, "eurocode", rolled=True)
    assert found.value == pytest.approx(A - 2 * 0.1 * 0.01 + 0.01 * 0.01)


JOIST = {"h": 0.3, "b": 0.15, "t_w": 0.008, "t_f": 0.012, "r": 0.015}
UNEQUAL = {"h": 0.3, "b_t": 0.15, "t_t": 0.012, "b_b": 0.1, "t_b": 0.02, "t_w": 0.008}
TEE = {"h": 0.15, "b": 0.1, "t_w": 0.006, "t_f": 0.01, "r": 0.008}
ROUND = {"d": 0.1, "t": 0.005}
BOX = {"h": 0.2, "b": 0.1, "t": 0.008}
ROUNDED = {**BOX, "r_i": 0.008}
A = 0.006  # m², any

# by hand from the clauses: for a vertical and for a horizontal force
EN: Standard = "eurocode"
US: Standard = "american"
Areas: TypeAlias = tuple[float | None, float | None]
BY_HAND: list[tuple[str, str, dict[str, float], Standard, bool, Areas, str]] = [
    ("rolled channel", "channel", JOIST, EN, True, (A - 0.0036 + 0.023 * 0.012, None), "b"),
    ("rolled tee", "tee", TEE, EN, True, (A - 0.001 + 0.5 * 0.022 * 0.01, None), "c"),
    ("welded tee", "tee", TEE, EN, False, (0.006 * 0.145, None), "c"),
    ("welded I", "i_shape", JOIST, EN, False, (0.276 * 0.008, A - 0.276 * 0.008), "d"),
    ("welded unequal I", "i_shape", UNEQUAL, EN, False, (0.268 * 0.008, A - 0.268 * 0.008), "d"),
    ("welded channel", "channel", JOIST, EN, False, (None, A - 0.276 * 0.008), "e"),
    ("hollow section", "box", BOX, EN, True, (A * 2 / 3, A / 3), "f"),
    ("welded box", "box", BOX, EN, False, (2 * 0.184 * 0.008, A - 2 * 0.184 * 0.008), "d"),
    ("tube", "tube", ROUND, EN, True, (2 * A / math.pi, 2 * A / math.pi), "g"),
    ("flat", "rectangle", {"b": 0.01, "h": 0.1}, EN, True, (None, None), ""),
    ("angle", "angle", {"b": 0.1, "h": 0.1, "t": 0.01}, EN, True, (None, None), ""),
    ("W", "i_shape", JOIST, US, True, (0.3 * 0.008, 2 * 0.15 * 0.012), "G2.1"),
    ("plates", "i_shape", UNEQUAL, US, False, (0.3 * 0.008, 0.15 * 0.012 + 0.002), "G2.1"),
    ("C", "channel", JOIST, US, True, (0.3 * 0.008, 2 * 0.15 * 0.012), "G2.1"),
    ("WT", "tee", TEE, US, True, (0.15 * 0.006, 0.1 * 0.01), "G3"),
    ("L", "angle", {"h": 0.15, "b": 0.1, "t": 0.01}, US, True, (0.0015, 0.001), "G3"),
    ("HSS, radius unknown", "box", BOX, US, True, (2 * 0.176 * 0.008, 2 * 0.076 * 0.008), "G4"),
    ("HSS, radius known", "box", ROUNDED, US, True, (2 * 0.168 * 0.008, 2 * 0.068 * 0.008), "G4"),
    ("built-up box", "box", BOX, US, False, (2 * 0.184 * 0.008, 2 * 0.084 * 0.008), "G4"),
    ("round HSS", "tube", ROUND, US, True, (A / 2, A / 2), "G5"),
    ("bar", "circle", {"d": 0.1}, US, True, (None, None), ""),
]


@pytest.mark.parametrize(
    ("shape", "sizes", "standard", "rolled", "areas", "clause"),
    [c[1:] for c in BY_HAND],
    ids=[c[0] for c in BY_HAND],
)
def test_clauses_by_hand(
    shape: str,
    sizes: dict[str, float],
    standard: Standard,
    rolled: bool,
    areas: Areas,
    clause: str,
) -> None:
    found = shear_area(shape, sizes, A, standard, rolled=rolled)
    given = dict(zip(("vertical", "horizontal"), areas, strict=True))
    assert {area.direction: area.value for area in found} == pytest.approx(
        {direction: area for direction, area in given.items() if area is not None}
    )
    if clause:
        assert f" {clause}" in found[0].clause


def test_hollow_sections_share_their_area() -> None:
    """Both directions of a rectangular hollow section make up its area, and a square's are alike."""
    shape = box(b=0.1, h=0.1, t=0.005, r_o=0.0075)
    area = section_properties(shape.outline).area
    vertical, horizontal = shear_area("box", shape.dimensions, area, "eurocode", rolled=True)
    assert vertical.value == horizontal.value == pytest.approx(0.5 * area)


@pytest.mark.parametrize("shape", SHAPES)
def test_every_shape_is_answered(shape: str) -> None:
    for sizes in ({}, {"b_t": 0.1, "t_t": 0.01, "b_b": 0.1, "t_b": 0.01}):
        form = form_for(shape, sizes)
        given = {p.name: 0.01 if p.name.startswith(("t", "r")) else 0.1 for p in form.parameters}
        for standard in (EN, US):
            for rolled in (True, False):
                assert all(each.value > 0.0 for each in shear_area(shape, given, A, standard, rolled=rolled))


def test_catalogued_sections_have_less_than_their_area() -> None:
    for row in builtin_catalogue():
        A = row.published.get("A", math.nan)
        areas = shear_area(row.shape, row.dimensions, A, row.axes, rolled=True)
        assert areas or row.shape == "angle"
        assert not any(area.value > 0.9 * A or area.value < 0.05 * A for area in areas), row.designation
