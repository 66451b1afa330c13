"""Evaluated beams as their figures draw them: supports of a plane, loads and their sense, what governs."""

from calcgen.figures.beam import BeamDrawing, compose_beam
from calcgen.figures.beam_loads import CoupleLoad, Distributed, Effect
from calcgen.figures.beam_supports import Support
from calcgen.figures.picture import label_boxes
from tests.figures.beams import ANGLE, MAIN, US, drawings_of

KINDS = (
    "span = 4 m, 4 m, 4 m",
    "section = main",
    "section = haunch from 2 m to 6 m",
    "E = 210 GPa",
    "expansion = 12e-6 1/K",
    "restrained = yes",
    "support fixed at 0 m",
    "support spring 12 kN/mm rotation 500 kN·m at 4 m",
    "support roller at 8 m settles 5 mm in S",
    "support spring 900 kN/m at 12 m",
    "support roller lateral at 10 m",
    "hinge at 9 m",
    "load G self_weight 78.5 kN/m³",
    "load C gradient -15 K from 0 m to 6 m",
    "load W moment 2 kN from 1 m to 3 m",
    "load W moment -4 kN·m at 12 m",
    "load W linear -2 kN/m to 4 kN/m from 6 m to 11 m",
    "load H lateral point -3 kN at 6 m",
    "combination U1 in ULS = 1.35*G + 1.5*C + 1.5*W + S",
    "combination U2 in ULS = 1.35*G + 1.5*H",
)
HAUNCH = MAIN + MAIN.replace("section main", "section haunch").replace("300 mm", "400 mm")


def plain(text: str) -> str:
    return text.replace("\u00a0", " ")


def both() -> tuple[BeamDrawing, BeamDrawing]:
    upright, sideways = drawings_of(*KINDS, before=HAUNCH)
    return upright, sideways


def symbols(drawing: BeamDrawing) -> list[tuple[float, str, str, bool]]:
    return [(s.x, s.kind, plain(s.label), s.turning) for s in drawing.supports]


def test_each_plane_has_its_supports_with_their_numbers_springs_and_settlements() -> None:
    upright, sideways = both()
    assert symbols(upright) == [
        (0, "fixed", "1", False),
        (4, "spring", "2\n12.00 kN/mm\n500.0 kN·m/rad", True),
        (8, "roller", "3\nsettles 5 mm in S", False),
        (12, "spring", "5\n900.0 kN/m", False),
    ]
    assert symbols(sideways) == [
        (0, "fixed", "1", False),
        (4, "spring", "2\n12.00 kN/mm\n500.0 kN·m/rad", True),
        (8, "roller", "3", False),
        (10, "roller", "4", False),
        (12, "spring", "5\n900.0 kN/m", False),
    ]


def test_lengths_run_between_the_supports_of_the_plane() -> None:
    upright, sideways = both()
    assert [plain(s.label) for s in upright.stretches] == ["4 m", "4 m", "4 m"]
    assert [plain(s.label) for s in sideways.stretches] == ["4 m", "4 m", "2 m", "2 m"]


def test_a_spring_that_resists_rotation_alone_has_no_other_symbol() -> None:
    (drawing,) = drawings_of(
        "span = 4 m",
        "EI = 8000 kN·m^2",
        "support pin at 0 m",
        "support spring 0 kN/m rotation 500 kN·m at 2 m",
        "support pin at 4 m",
        "load Q uniform 1 kN/m",
    )
    assert drawing.supports[1] == Support(2.0, "turning", "2\n500.0\u00a0kN·m/rad", turning=True)


def test_a_stretch_of_its_own_stiffness_is_named_and_drawn_heavier() -> None:
    upright, _ = both()
    assert [plain(part.label) for part in upright.parts] == ["main, 2 m", "haunch, 4 m", "main, 6 m"]
    weights = [
        item.stroke.weight
        for item in compose_beam(upright, "wide").items
        if not hasattr(item, "text") and item.stroke is not None and item.stroke.weight > 2.5
    ]
    assert len(weights) == 3
    assert weights[1] > weights[0] == weights[2]


def test_self_weight_follows_the_section_along_the_beam() -> None:
    upright, _ = both()
    weights = [load for load in upright.cases[0].loads if isinstance(load, Distributed)]
    assert [(load.start, load.end) for load in weights] == [(0, 2), (2, 6), (6, 12)]
    assert weights[1].first > weights[0].first == weights[2].first
    assert all(load.first == load.last for load in weights)


def test_loads_say_their_sense() -> None:
    upright, sideways = both()
    _, temperature, wind = upright.cases
    assert [plain(x.label) for x in temperature.loads if isinstance(x, Effect)] == [
        "15.00 K warmer at the bottom"
    ]
    assert wind.title == "W, negative: upwards or anticlockwise"
    couples = [(plain(x.label), x.clockwise) for x in wind.loads if isinstance(x, CoupleLoad)]
    assert couples == [("2.000 kN·m/m", True), ("−4.000 kN·m", False)]
    assert [case.title for case in sideways.cases] == ["H, negative: to the left"]
    assert "seen from above" in sideways.caption


def test_a_couple_per_length_has_its_unit_in_the_other_system_too() -> None:
    (drawing,) = drawings_of(
        "span = 10 ft", "EI = 8000 kN·m^2", "load W moment 2 kip from 1 ft to 3 ft", style=US
    )
    (load,) = drawing.cases[0].loads
    assert plain(load.label) == "2.000 kip-ft/ft"


def test_bending_about_inclined_axes_is_said_in_both_planes() -> None:
    lines = ("span = 5 m", "section = main", "E = 210 GPa", "load Q uniform 2 kN/m")
    upright, sideways = drawings_of(*lines, before=ANGLE)
    assert "inclined principal axes" in upright.caption
    assert "inclined principal axes" in sideways.caption
    (alone,) = drawings_of(*lines, "restrained = yes", before=ANGLE)
    assert alone.caption == "section main"


TWO_SPANS = (
    "span = 6 m, 6 m",
    "EI = 8000 kN·m^2",
    "load G uniform 3 kN/m",
    "load Q uniform 5 kN/m from 0 m to 6 m",
    "load R uniform 5 kN/m from 6 m to 12 m",
    "combination U1 in ULS = 1.35*G + 1.5*Q",
    "combination U2 in ULS = 1.35*G + 1.5*R",
)


def test_what_governs_at_a_place_can_be_read_off_the_figure() -> None:
    (drawing,) = drawings_of(*TWO_SPANS)
    _, moment, _ = drawing.diagrams
    assert len(moment.inner) == 2
    high, low = moment.strips
    assert [(s.state, s.start, s.end) for s in high.stretches] == [("U1", 0, 6), ("U2", 6, 12)]
    assert [(s.state, s.start, s.end) for s in low.stretches] == [("U2", 0, 6), ("U1", 6, 12)]
    texts = [text for text, _ in label_boxes(compose_beam(drawing, "wide"))]
    assert texts.count("U1") == texts.count("U2")
    assert texts.count("U1") >= 6  # V, M and w, both edges
    assert "max M is governed by U1 from 0 m to 6 m; U2 from 6 m to 12 m" in plain(
        compose_beam(drawing, "wide").description
    )


def test_combinations_that_are_equal_are_named_together() -> None:
    (drawing,) = drawings_of(*TWO_SPANS[:5], "combination A in S = G + Q", "combination B in S = Q + G")
    for diagram in drawing.diagrams:
        for strip in diagram.strips:
            assert [s.state for s in strip.stretches] == ["A or B"]


def test_patterns_that_govern_have_letters_and_a_key() -> None:
    (drawing,) = drawings_of("span = 6 m, 8 m, 6 m", "EI = 8000 kN·m^2", "load Q uniform 5 kN/m", "pattern Q")
    picture = compose_beam(drawing, "narrow")
    texts = [plain(text) for text, _ in label_boxes(picture)]
    key = " ".join(text for text in texts if " = " in text)
    assert "a = Q on spans 1 and 3" in key
    assert "a" in texts
    assert picture.listed == ()


def test_one_combination_with_a_train_has_nothing_to_name() -> None:
    (drawing,) = drawings_of("span = 6 m", "EI = 8000 kN·m^2", "load T train 10 kN, 10 kN spaced 1 m")
    assert all(diagram.lower and not diagram.strips and not diagram.inner for diagram in drawing.diagrams)


def test_what_does_not_act_in_a_plane_is_zero_throughout() -> None:
    lines = ("span = 5 m", "section = main", "E = 210 GPa", "support fixed at 0 m", "load Q uniform 2 kN/m")
    _, sideways = drawings_of(*lines, before=ANGLE)
    shear, moment, deflection = sideways.diagrams
    assert "zero throughout" in shear.note
    assert "zero throughout" in moment.note
    assert deflection.extremes
