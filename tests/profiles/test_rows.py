"""Every printed figure of every row against the outline that the row's own dimensions make.

The rows are from memory, so this is what finds a slip in them: a transposed digit of a size spoils all
properties of its row, one of a property spoils that property. How far the two may differ, and why, stands in
the head of each catalogue.
"""

from __future__ import annotations

import itertools
import math
from collections.abc import Iterator, Mapping

import pytest

from calcgen.mechanics.section import SectionProperties, section_properties
from calcgen.mechanics.shapes import box, form_for
from calcgen.profiles import Profile, builtin_catalogue
from tests.profiles.printed import Figure, printed

STEEL = 7850.0  # kg/m³, EN 1991-1-1 Table A.4
STEEL_US = 3.4 * 0.45359237 / 0.3048 / 0.0254**2  # kg/m³, from 3.4 lb/ft per in²

ALL = tuple(builtin_catalogue())
EVERY = pytest.mark.parametrize("profile", ALL, ids=lambda profile: profile.designation)


def outline_of(profile: Profile) -> SectionProperties:
    sizes = profile.dimensions
    return section_properties(form_for(profile.shape, list(sizes)).build(**sizes).outline)


def of_outline(profile: Profile) -> Mapping[str, float]:
    """Properties of the outline under the names of the published ones."""
    own, sizes = outline_of(profile), profile.dimensions
    width, depth = (sizes["d"], sizes["d"]) if profile.shape == "tube" else (sizes["b"], sizes["h"])
    names = ("A", "I_h", "I_v", "W_el_h", "W_el_v", "W_pl_h", "W_pl_v", "i_h", "i_v", "i_2")
    return {name: getattr(own, name) for name in names} | {
        "x_bar": own.x_bar + 0.5 * width,  # outlines stand with their middle at (0, 0)
        "y_bar": own.y_bar + 0.5 * depth,
    }


@EVERY
def test_printed_properties_are_those_of_the_outline(profile: Profile) -> None:
    own = of_outline(profile)
    figures = printed(profile.family)[profile.designation]
    checked = [name for name in own if name in figures]
    # of a few European hollow sections no more than the area is recalled; test_european_rows.py counts them
    hollow = profile.family.endswith((" hot", " cold"))
    assert len(checked) >= 6 or (hollow and set(checked) <= {"A"})
    for name in checked:
        assert own[name] == pytest.approx(figures[name].value, rel=1.001 * profile.tolerances[name]), name


@EVERY
def test_figures_of_a_row_agree_among_themselves(profile: Profile) -> None:
    """I = A i² and W = I/c, c the farthest fibre, within what rounding the printed figures allows.

    No outline enters, so this finds slips too small for the tolerances above.
    """
    figures = printed(profile.family)[profile.designation]
    for radius, inertia in (("i_h", "I_h"), ("i_v", "I_v")):
        if {radius, inertia, "A"} <= figures.keys():
            i, second, A = figures[radius], figures[inertia], figures["A"]
            slack = 2.0 * relative(i) + relative(second) + relative(A)
            assert A.value * i.value**2 == pytest.approx(second.value, rel=1.01 * slack), inertia
    for modulus, inertia, size, centroid in (
        ("W_el_h", "I_h", "h", "y_bar"),
        ("W_el_v", "I_v", "b", "x_bar"),
    ):
        halved = profile.shape in {"i_shape", "box"} or (profile.shape == "channel" and size == "h")
        if {modulus, inertia} <= figures.keys() and (halved or centroid in figures):
            W, second, whole = figures[modulus], figures[inertia], figures[size]
            heel = Figure(0.5 * whole.value, 0.5 * whole.rounding) if halved else figures[centroid]
            c = whole.value - heel.value
            c_rounding = 0.5 * whole.rounding if halved else whole.rounding + heel.rounding
            slack = relative(W) + relative(second) + c_rounding / c
            assert W.value * c == pytest.approx(second.value, rel=1.01 * slack), modulus


def relative(figure: Figure) -> float:
    return figure.rounding / figure.value


@EVERY
def test_mass_is_that_of_steel(profile: Profile) -> None:
    mass = printed(profile.family)[profile.designation]["mass"]
    if profile.axes == "eurocode":
        expected, tolerance = STEEL * outline_of(profile).A, 0.005
    elif profile.family == "HSS":  # the nominal wall weighs, the design wall bears
        t = profile.stated["t_nom"]
        nominal = box(b=profile.dimensions["b"], h=profile.dimensions["h"], t=t, r_o=2.0 * t)
        expected, tolerance = STEEL_US * section_properties(nominal.outline).A, 0.004
    elif profile.shape == "tube":
        t = profile.stated["t_nom"]
        expected, tolerance = STEEL_US * math.pi * t * (profile.dimensions["d"] - t), 0.005
    elif profile.family == "M":  # whose outline lacks the fillets
        expected, tolerance = STEEL_US * outline_of(profile).A, 0.02
    else:  # a nominal mass
        expected, tolerance = STEEL_US * outline_of(profile).A, 0.0175
    assert mass.value == pytest.approx(expected, rel=0.0, abs=max(tolerance * expected, mass.rounding))


@pytest.mark.parametrize(
    "profile", [p for p in ALL if p.axes == "eurocode"], ids=lambda profile: profile.designation
)
def test_mass_is_that_of_steel_on_the_printed_area(profile: Profile) -> None:
    """No outline enters and no tolerance but the rounding of both figures; the American ones stand apart."""
    figures = printed(profile.family)[profile.designation]
    if "A" in figures:
        slack = relative(figures["A"]) + relative(figures["mass"])
        assert figures["mass"].value == pytest.approx(STEEL * figures["A"].value, rel=1.01 * slack)


@EVERY
def test_hollow_sections_bear_by_the_design_wall(profile: Profile) -> None:
    if profile.family == "HSS":
        # 0.93 of the nominal wall, to three decimals of an inch (AISC 360-16 B4.2)
        t, t_nom = profile.dimensions["t"], profile.stated["t_nom"]
        assert t == pytest.approx(0.93 * t_nom, abs=0.00051 * 0.0254)
        assert profile.dimensions["r_o"] == pytest.approx(2.0 * t)


@pytest.mark.parametrize("profile", builtin_catalogue().family("W"), ids=lambda profile: profile.designation)
def test_root_radius_is_one_that_other_shapes_have_too(profile: Profile) -> None:
    """The rolls have few radii; a slip in k_des or t_f makes one of its own (k_des to three figures)."""
    others = [other.dimensions["r"] for other in builtin_catalogue().family("W") if other is not profile]
    assert any(profile.dimensions["r"] == pytest.approx(r, abs=0.0065 * 0.0254) for r in others)


@pytest.mark.parametrize("profile", builtin_catalogue().family("C"), ids=lambda profile: profile.designation)
def test_american_channels_keep_the_rolled_profile(profile: Profile) -> None:
    """Slope 1 in 6; radii from the thinnest web of the depth, t: t + 0.10 in and 0.6 t (from memory)."""
    sizes = profile.dimensions
    same_depth = [p.dimensions for p in builtin_catalogue().family("C") if p.dimensions["h"] == sizes["h"]]
    t = min(p["t_w"] for p in same_depth)
    assert sizes["slope"] == pytest.approx(1.0 / 6.0, abs=0.00005)
    assert sizes["r"] == pytest.approx(t + 0.10 * 0.0254, abs=0.0051 * 0.0254)
    assert sizes["r_toe"] == pytest.approx(0.6 * t, abs=0.0051 * 0.0254)
    assert len({p["t_f"] for p in same_depth}) == 1


def torsion(family: str, name: str) -> Iterator[tuple[Profile, Figure]]:
    for profile in builtin_catalogue().family(family):
        if name in printed(family)[profile.designation]:
            yield profile, printed(family)[profile.designation][name]


@pytest.mark.parametrize(
    ("family", "tolerance"),
    [("IPE", 0.01), ("HEA", 0.01), ("HEB", 0.01), ("HEM", 0.01), ("W", 0.02)],  # W: sizes to three figures
)
def test_torsion_constant_is_rectangles_and_junction_circles(family: str, tolerance: float) -> None:
    """El Darwish and Johnston, Torsion of structural shapes, 1965 (from memory).

    The European tables write the factor of the circle as (0.1 r/t_f + 0.145) t_w/t_f.
    """
    for profile, figure in torsion(family, "I_t"):
        h, b, t_w, t_f, r = (profile.dimensions[size] for size in ("h", "b", "t_w", "t_f", "r"))
        circle = ((t_f + r) ** 2 + t_w * (r + 0.25 * t_w)) / (2.0 * r + t_f)
        if profile.axes == "eurocode":
            alpha = (0.1 * r / t_f + 0.145) * t_w / t_f
        else:
            alpha = -0.042 + 0.2204 * t_w / t_f + 0.1355 * r / t_f - 0.0865 * r * t_w / t_f**2
            alpha -= 0.0725 * (t_w / t_f) ** 2
        flanges = 2.0 / 3.0 * b * t_f**3 - 0.42 * t_f**4
        expected = flanges + (h - 2.0 * t_f) * t_w**3 / 3.0 + 2.0 * alpha * circle**4
        limit = max(tolerance * expected, figure.rounding)
        assert figure.value == pytest.approx(expected, rel=0.0, abs=limit), profile.designation


@pytest.mark.parametrize(
    ("family", "tolerance"), [("IPE", 0.003), ("HEA", 0.003), ("HEB", 0.003), ("HEM", 0.003), ("W", 0.02)]
)
def test_warping_constant_is_that_of_the_flanges(family: str, tolerance: float) -> None:
    """I_w = t_f b³ (h - t_f)²/24, thin-walled theory."""
    for profile, figure in torsion(family, "I_w"):
        h, b, t_f = (profile.dimensions[size] for size in ("h", "b", "t_f"))
        expected = t_f * b**3 * (h - t_f) ** 2 / 24.0
        limit = max(tolerance * expected, figure.rounding)
        assert figure.value == pytest.approx(expected, rel=0.0, abs=limit), profile.designation


def test_hollow_torsion_constant() -> None:
    """Bredt's 4 A² t/L on the mid-line, whose corner radius is 1.5 t."""
    for profile, figure in torsion("HSS", "I_t"):
        h, b, t = (profile.dimensions[size] for size in ("h", "b", "t"))
        corner = 1.5 * t
        length = 2.0 * (b - t + h - t) - 2.0 * corner * (4.0 - math.pi)
        area = (b - t) * (h - t) - corner**2 * (4.0 - math.pi)
        expected = 4.0 * area**2 * t / length
        assert figure.value == pytest.approx(expected, rel=0.0075), profile.designation


def channel_mid_line(profile: Profile) -> tuple[float, float]:
    """I_t of rectangles and I_w of a mid-line channel with parallel flanges, thin-walled theory."""
    h, b, t_w, t_f = (profile.dimensions[size] for size in ("h", "b", "t_w", "t_f"))
    h_m, b_m = h - t_f, b - 0.5 * t_w
    I_t = (2.0 * b * t_f**3 + (h - 2.0 * t_f) * t_w**3) / 3.0
    flanges, web = b_m * t_f, h_m * t_w
    return I_t, flanges * b_m**2 * h_m**2 / 12.0 * (3.0 * flanges + 2.0 * web) / (6.0 * flanges + web)


def test_parallel_flanged_channels_twist_as_rectangles_and_junction_circles() -> None:
    """El Darwish and Johnston's L-junctions, Torsion of structural shapes, 1965 (from memory).

    The end losses are those of four free ends, as the European tables have them.
    """
    for profile, figure in torsion("UPE", "I_t"):
        h, b, t_w, t_f, r = (profile.dimensions[size] for size in ("h", "b", "t_w", "t_f", "r"))
        circle = 2.0 * (3.0 * r + t_w + t_f - math.sqrt(2.0 * (2.0 * r + t_w) * (2.0 * r + t_f)))
        alpha = -0.0908 + 0.2621 * t_w / t_f + 0.1231 * r / t_f - 0.0752 * r * t_w / t_f**2
        alpha -= 0.0945 * (t_w / t_f) ** 2
        flanges = 2.0 / 3.0 * b * t_f**3 - 0.42 * t_f**4
        expected = flanges + (h - 2.0 * t_f) * t_w**3 / 3.0 + 2.0 * alpha * circle**4
        limit = max(0.002 * expected, 1.01 * figure.rounding)
        assert figure.value == pytest.approx(expected, rel=0.0, abs=limit), profile.designation


def test_warping_constant_of_parallel_flanged_channels_keeps_pace_with_the_mid_line_model() -> None:
    """The tables' model is a little below it, the more the thicker the walls; no closer model at hand."""
    ratios = [
        (figure.value / channel_mid_line(profile)[1], relative(figure), profile.designation)
        for profile, figure in torsion("UPE", "I_w")
    ]
    assert len(ratios) == 14
    for (one, its_rounding, _), (other, rounding, designation) in itertools.pairwise(ratios):
        assert 0.925 < other < 0.975
        assert one == pytest.approx(other, abs=0.007 + its_rounding + rounding), designation


def test_american_channels_warp_as_parallel_flanged() -> None:
    """The tables' own model; sizes to three figures."""
    for profile, figure in (*torsion("C", "I_w"), *torsion("MC", "I_w")):
        assert figure.value == pytest.approx(channel_mid_line(profile)[1], rel=0.025), profile.designation


@pytest.mark.parametrize(("name", "spread"), [("I_t", 1.05), ("I_w", 1.025)])
@pytest.mark.parametrize("deep", [False, True], ids=["to UPN 300", "above UPN 300"])
def test_tapered_channels_keep_one_ratio_to_the_mid_line_model(name: str, spread: float, deep: bool) -> None:
    """The tables' model of tapered flanges is another, but over like shapes its ratio to this one holds.

    No closer model at hand; a figure that leaves the ratio of its neighbours is a slip.
    """
    ratios = [
        figure.value / channel_mid_line(profile)[("I_t", "I_w").index(name)]
        for profile, figure in torsion("UPN", name)
        if (profile.dimensions["h"] > 0.3) == deep
    ]
    assert len(ratios) >= 4
    assert max(ratios) / min(ratios) < spread


@pytest.mark.parametrize(("family", "largest"), [("L", 1.17), ("C", 1.26)])
def test_open_torsion_constant_lies_above_its_rectangles(family: str, largest: float) -> None:
    """Fillets and tapers add to the rectangles, the more the smaller the section; no closer model at hand."""
    for profile, figure in torsion(family, "I_t"):
        sizes = profile.dimensions
        if family == "C":
            rectangles = channel_mid_line(profile)[0]
        else:
            rectangles = (sizes["h"] + sizes["b"] - sizes["t"]) * sizes["t"] ** 3 / 3.0
        assert 1.0 - figure.rounding / figure.value < figure.value / rectangles < largest, profile.designation


@pytest.mark.parametrize(
    ("family", "sizes"),
    [
        ("IPE", (80, 100, 120, 140, 160, 180, 200, 220, 240, 270, 300, 330, 360, 400, 450, 500, 550, 600)),
        ("UPN", (*range(80, 161, 20), *range(180, 321, 20), 350, 380, 400)),
        ("UPE", (*range(80, 241, 20), 270, 300, 330, 360, 400)),
        *((f"HE{of}", (*range(100, 361, 20), *range(400, 701, 50), 800, 900, 1000)) for of in "ABM"),
    ],
)
def test_european_series_are_complete(family: str, sizes: tuple[int, ...]) -> None:
    """EN 10365:2017, from memory; sorted by mass, which is by size."""
    rows = builtin_catalogue().family(family)
    assert [profile.designation for profile in rows] == [f"{family} {size}" for size in sizes]
