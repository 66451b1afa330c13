"""Influence lines of beam blocks: results by name, units, faults, and what must hold beside loads."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from calcgen.evaluation.blocks.beam_influence import readable
from calcgen.evaluation.blocks.beam_lines import is_result
from calcgen.evaluation.results.beam import BeamResult, InfluenceResult
from calcgen.evaluation.results.calc import EvaluatedCalc
from calcgen.evaluation.results.named import named_results
from calcgen.quantities.measure import Measure
from tests.evaluation.helpers import codes, evaluated, fence, shown

SIMPLE = ("span = 8 m", "EI = 40000 kN·m^2")
TWO = ("span = 10 m, 10 m", "EI = 200000 kN·m^2")
GERBER = (
    "span = 12 m, 8 m",
    "EI = 90000 kN·m^2",
    "support pin at 0 m",
    "support roller at 12 m",
    "support roller at 20 m",
    "hinge at 15 m",
)
THREE = ("span = 4 m, 6 m, 5 m", "EI = 30000 kN·m^2")
CANTILEVER = ("span = 3 m", "EI = 10000 kN·m^2", "support fixed at 0 m")
SPRUNG = ("support pin at 0 m", "support spring 5 kN/mm at 8 m")
SECTION = fence("section s", 'shape = rolled("IPE 300")')
UPRIGHT = ("span = 6 m, 6 m", "section = s", "E = 210 GPa")
ZED = fence("section s", "shape = zed(h = 200 mm, b = 70 mm, t = 4 mm)")


def beam(*lines: str, working: tuple[str, ...] = (), before: str = "") -> EvaluatedCalc:
    (calc,) = evaluated("# T\n" + before + fence("beam b", *lines) + fence("working", *working))
    return calc


def result(calc: EvaluatedCalc) -> BeamResult:
    return next(s for s in calc.segments if isinstance(s, BeamResult))


def only(calc: EvaluatedCalc) -> InfluenceResult:
    (line,) = result(calc).influences
    return line


def value(calc: EvaluatedCalc, name: str) -> float:
    found = calc.values[name][0]
    assert isinstance(found, Measure)
    return found.si


@pytest.mark.parametrize(
    ("beam_of", "line", "name", "text"),
    [
        (SIMPLE, "M at 3 m", "η(5 m)", "1.125 m"),
        (SIMPLE, "M at 3 m", "η_max", "1.875 m"),  # ab/L
        (SIMPLE, "M at 3 m", "x_η_max", "3.000 m"),
        (SIMPLE, "M at 3 m", "η_min", "0 m"),
        (SIMPLE, "M at 3 m", "η_area", "7.500 m²"),  # ab/2
        (SIMPLE, "V at 3 m", "η_left(3 m)", "−0.3750"),
        (SIMPLE, "V at 3 m", "η_right(3 m)", "0.6250"),
        (SIMPLE, "V at 3 m", "η_left(5 m)", "0.3750"),
        (SIMPLE, "V at 3 m", "η_area_max", "1.563 m"),  # b²/(2L)
        (SIMPLE, "V at 3 m", "η_area_min", "−0.5625 m"),  # a²/(2L)
        (SIMPLE, "V at 0 m", "η_max", "1"),
        (SIMPLE, "V at 8 m", "η_min", "−1"),
        (SIMPLE, "w at 4 m", "η_max", "0.2667 mm/kN"),  # L³/(48 EI)
        (SIMPLE, "w at 4 m", "η_area", "1.333 mm²/N"),  # 5 L⁴/(384 EI)
        (SIMPLE, "slope at 0 m", "η_area", "0.0005333 m/kN"),  # L³/(24 EI)
        (SIMPLE, "θ_2", "η_area", "−0.0005333 m/kN"),
        (SIMPLE, "R_1", "η(2 m)", "0.7500"),
        (TWO, "M at 10 m", "η_min", "−0.9623 m"),  # L/(6√3)
        (TWO, "M at 10 m", "x_η_min", "5.774 m"),
        (TWO, "V left of 10 m", "η_min", "−1"),
        (TWO, "V right of 10 m", "η_max", "1"),
        (TWO, "R_2", "η_area", "12.50 m"),  # 5 L/4
        (GERBER, "M at 6 m", "η_min", "−1.500 m"),  # above the hinge
        (GERBER, "M at 6 m", "x_η_min", "15.00 m"),
        (GERBER, "V at 17 m", "η(16 m)", "−0.2000"),
    ],
)
def test_result(beam_of: tuple[str, ...], line: str, name: str, text: str) -> None:
    calc = beam(*beam_of, f"influence η = {line}", working=(f"x = b.{name}",))
    assert codes(calc) == []
    assert shown(calc, "x") == text
    assert all(r.holds for r in result(calc).second_route)


def test_the_slope_beside_a_hinge() -> None:
    """Tip of an overhang c on a span L under P: P c (2L + 3c)/(6 EI); of a load at 18 m it gets 2/5."""
    calc = beam(*GERBER, "influence η = slope left of 15 m", working=("x = b.η(18 m)",))
    assert codes(calc) == []
    assert value(calc, "x") == pytest.approx(0.4 * 3 * (24 + 9) / (6 * 90000e3), rel=1e-9)


def test_a_cantilever() -> None:
    calc = beam(
        *CANTILEVER,
        "influence η_M = M at 0 m",
        "influence η_R = M_R_1",
        "influence η_w = w at 3 m",
        working=("a = b.η_M(3 m)", "c = b.η_R(3 m)", "d = b.η_w(3 m)", "e = b.η_w_area"),
    )
    assert codes(calc) == []
    assert [shown(calc, n) for n in "acde"] == ["−3.000 m", "3.000 m", "0.9000 mm/kN", "1.013 mm²/N"]


def test_under_us_units() -> None:
    (calc,) = evaluated(
        "# T\n"
        + fence(
            "beam b",
            "span = 24 ft",
            "EI = 2e6 kip-ft^2",
            "influence η_M = M at 12 ft",
            "influence η_w = w at 12 ft",
            "influence η_s = slope at 0 ft",
        )
        + fence(
            "working",
            "a = b.η_M_max",
            "c = b.η_M_area",
            "d = b.η_w_max",
            "e = b.η_w_area",
            "f = b.η_s(12 ft)",
        ),
        axes="american",
    )
    assert codes(calc) == []
    assert value(calc, "a") == pytest.approx(6 * 0.3048)
    assert value(calc, "d") == pytest.approx(24**3 / (48 * 2e6) * 0.3048 / 4448.2216152605)
    units = [calc.values[n][1].unit for n in "acdef"]
    assert units == ["ft", "ft²", "in/kip", "in/klf", "1/kip"]


def test_lateral_lines_have_a_lateral_load() -> None:
    calc = beam(
        *UPRIGHT,
        "influence η_1 = M_lat at 3 m",
        "influence η_2 = R_2_lat",
        "influence η_3 = w at 3 m",
        "influence η_4 = w_lat at 3 m",
        working=("a = b.η_1_max", "c = b.η_2(6 m)", "d = b.η_4_max/b.η_3_max"),
        before=SECTION,
    )
    assert codes(calc) == []
    assert [line.load for line in result(calc).influences] == ["lateral", "lateral", "vertical", "lateral"]
    assert shown(calc, "a") == "1.219 m"  # 13/64 L
    assert shown(calc, "c") == "1"
    assert value(calc, "d") == pytest.approx(8356 / 603.8, rel=1e-9)  # I_y/I_z of the section


def test_planes_that_are_coupled_have_lines_across() -> None:
    """Maxwell: w_lat at a under a vertical load at c is w at c under a lateral load at a."""
    calc = beam(
        *UPRIGHT,
        "influence η_1 = w_lat at 2 m under vertical",
        "influence η_2 = w at 5 m under lateral",
        "load G uniform 1 kN/m",
        working=("a = b.η_1(5 m)", "c = b.η_2(2 m)", "d = b.η_1_area*1 kN/m", "e = b.w_lat(2 m)"),
        before=ZED,
    )
    assert codes(calc) == []
    assert result(calc).influences[0].of.replace("\u00a0", " ") == "w_lat at 2 m under a vertical load"
    assert value(calc, "a") == pytest.approx(value(calc, "c"), rel=1e-9)
    assert value(calc, "a") != 0.0
    assert value(calc, "d") == pytest.approx(value(calc, "e"), rel=1e-9)


def test_influence_lines_need_no_load_and_no_combination() -> None:
    calc = beam(*SIMPLE, "influence η = M at 3 m", working=("a = b.η_max",))
    assert codes(calc) == []
    assert result(calc).groups == ()
    assert [(r.what, r.holds) for r in result(calc).second_route] == [("η", True)]
    assert {p.premise: p.verdict for p in result(calc).premises}["small deflections"] == "left to judgement"
    loaded = beam(*SIMPLE, "load G uniform 3 kN/m", "combination U = 1.35*G", "influence η = M at 3 m")
    assert codes(loaded) == []
    assert [r.what for r in result(loaded).second_route][-1] == "η"


def test_the_results_of_a_beam_without_load_are_missing_with_a_reason() -> None:
    calc = beam(*SIMPLE, "influence η = M at 3 m", working=("a = b.M_max", "c = b.U.M_max"))
    assert codes(calc) == ["no-such-result"] * 2
    assert calc.diagnostics[0].message == "the beam 'b' has no load, so it has influence lines alone"
    assert calc.diagnostics[0].hint == "such as b.η_max"


@pytest.mark.parametrize(
    ("name", "message", "hint"),
    [
        ("η", "'η' is the ordinate at a place", "write η(2.5 m), or η_max"),
        (
            "η(3 m)",
            "'η' jumps at 3\u00a0m",
            "write η_left(3 m) or η_right(3 m): the load just left or right of it",
        ),
        ("η(9 m)", "the place lies outside the beam", "the beam runs from 0 to 8\u00a0m"),
        ("η(2)", "a place on the beam is a length from its start", "such as M(2.5 m)"),
        ("η_max(2 m)", "'η_max' is a result of the whole line", "write η_max, or η(2.5 m)"),
        ("η_left", "'η_left' is the ordinate at a place", "write η_left(2.5 m), or η_max"),
        ("span_1.η_max", "the influence line 'η' belongs to the beam as a whole", "write b.η_max"),
        ("U.η_max", "the influence line 'η' belongs to the beam as a whole", "write b.η_max"),
    ],
)
def test_what_cannot_be_read(name: str, message: str, hint: str) -> None:
    calc = beam(
        *SIMPLE,
        "load G uniform 1 kN/m",
        "combination U = G",
        "influence η = V at 3 m",
        working=(f"a = b.{name}",),
    )
    assert codes(calc) == ["no-such-result"]
    assert (calc.diagnostics[0].message, calc.diagnostics[0].hint) == (message, hint)


@pytest.mark.parametrize(
    ("lines", "code", "place"),
    [
        ((*SIMPLE, "influence η = M at 9 m"), "outside-beam", (5, 20)),
        ((*SIMPLE, "influence η = M at 3 kN"), "wrong-dimension", (5, 20)),
        ((*SIMPLE, "influence η = R_3"), "no-such-result", (5, 15)),
        ((*SIMPLE, "influence η = M_R_1"), "no-such-result", (5, 15)),
        ((*SIMPLE, "influence η = V left of 0 m"), "outside-beam", (5, 25)),
        ((*SIMPLE, "influence η = V right of 8 m"), "outside-beam", (5, 26)),
        ((*SIMPLE, "influence η = M_lat at 3 m"), "beam", (5, 15)),
        ((*SIMPLE, "influence η = M at 3 m under lateral"), "beam", (5, 15)),
        ((*CANTILEVER, "influence η = V at 3 m"), "beam", (6, 20)),  # the tip
        ((*SIMPLE, *SPRUNG, "influence η = V at 8 m"), "beam", (7, 20)),
        ((*SIMPLE, "influence M_max = M at 3 m"), "name-hides-result", (5, 11)),
        ((*SIMPLE, "influence M = M at 3 m"), "name-hides-result", (5, 11)),
        ((*SIMPLE, "influence R_1 = R_1"), "name-hides-result", (5, 11)),
        ((*SIMPLE, "influence C_b = R_1"), "name-hides-result", (5, 11)),
        ((*SIMPLE, "influence η = R_1", "influence η_max = R_2"), "written-twice", (6, 11)),
        ((*TWO, "influence η = V at 10 m"), "two-sides", (5, 15)),
        ((*GERBER, "influence η = slope at 15 m"), "two-sides", (9, 15)),
        (
            (*TWO, "support fixed at 10 m", "support pin at 0 m", "influence η = M at 10 m"),
            "two-sides",
            (7, 15),
        ),
        (
            (*SIMPLE, "load G uniform 1 kN/m", "combination η = G", "influence η = R_1"),
            "written-twice",
            (7, 11),
        ),
        (
            (*SIMPLE, "load G uniform 1 kN/m", "combination U in η_max = G", "influence η = R_1"),
            "written-twice",
            (7, 11),
        ),
        (("span = 8 m", "EI = 1 kN·m^2", "support pin at 0 m", "influence η = M at 3 m"), "unstable", (2, 4)),
    ],
)
def test_fault(lines: tuple[str, ...], code: str, place: tuple[int, int]) -> None:
    calc = beam(*lines)
    assert [(d.code, d.line, d.column) for d in calc.diagnostics] == [(code, *place)]


def test_a_fault_says_what_to_write() -> None:
    def hint(*lines: str, before: str = "") -> str:
        (found,) = beam(*lines, before=before).diagnostics
        return f"{found.message}; {found.hint}".replace("\u00a0", " ")

    assert hint(*TWO, "influence η = V at 10 m") == (
        "V at 10 m has two values, one on each side; write V left of 10 m, or V right of 10 m"
    )
    assert hint(*UPRIGHT, "influence η = w_lat at 3 m under vertical", before=SECTION) == (
        "a vertical load has no sideways effect on this beam; "
        "only a section bent about axes that are not principal ones couples the planes"
    )
    assert hint(*SIMPLE, "influence η = M_R_2") == (
        "support 2 does not hold the rotation: it has no moment; "
    )


def test_every_fault_of_a_block_is_reported() -> None:
    calc = beam(*TWO, "influence a = M at 30 m", "influence c = R_9", "influence M_min = R_1")
    assert sorted(codes(calc)) == ["name-hides-result", "no-such-result", "outside-beam"]


def test_no_name_under_which_a_line_is_read_is_another_result() -> None:
    assert not any(is_result(name) for name in readable("η_1"))
    calc = beam(*SIMPLE, "influence η_1 = V at 3 m")
    named = {name for name, _ in named_results(result(calc))}
    assert {"η_1_max", "x_η_1_min", "η_1_area_min", "η_1(0.8 m)", "η_1_left(3 m)"} <= named


def test_each_ordinate_is_read_by_its_name() -> None:
    first = only(beam(*THREE, "influence η = V at 5.5 m"))
    names = [ordinate.result.name for ordinate in first.ordinates]
    calc = beam(
        *THREE, "influence η = V at 5.5 m", working=tuple(f"a{i} = b.{n}" for i, n in enumerate(names))
    )
    assert codes(calc) == []
    for number, ordinate in enumerate(first.ordinates):
        read = calc.values[f"a{number}"][0]
        assert isinstance(read, Measure)
        assert read.si == pytest.approx(ordinate.result.value.si, abs=1e-8)
    places = [ordinate.place.replace("\u00a0", " ") for ordinate in first.ordinates]
    assert places[:3] == ["0 m", "0.4 m", "0.8 m"]
    assert places.count("5.5 m") == 2  # before and behind the jump
    assert len(places) == 3 * 10 + 1 + 2


def test_the_ordinates_of_a_long_beam_are_at_halves() -> None:
    spans = ", ".join(["5 m"] * 13)
    line = only(beam(f"span = {spans}", "EI = 1000 kN·m^2", "influence η = R_3"))
    assert [o.x for o in line.ordinates] == pytest.approx([2.5 * i for i in range(27)])


# --- what must hold ---------------------------------------------------------------------------------------

OF = ("M at {x} m", "V at {x} m", "w at {x} m", "slope at {x} m")
READ = ("M({x} m)", "V({x} m)", "w({x} m)", "slope({x} m)")
places = st.integers(1, 149).filter(lambda tenths: tenths not in (40, 100)).map(lambda tenths: tenths / 10)


@settings(max_examples=15, deadline=None)
@given(places, places)
def test_an_ordinate_is_the_result_under_that_load_and_the_area_that_under_a_uniform_one(
    x: float, at: float
) -> None:
    if x == at:
        return
    lines = [f"influence η_{i} = {of.format(x=x)}" for i, of in enumerate(OF)]
    loads = ("load P point 1 kN at {at} m", "load Q uniform 1 kN/m", "combination A = P", "combination U = Q")
    working: list[str] = []
    for i, read in enumerate(READ):
        working += [f"a_{i} = b.η_{i}({at} m)*1 kN", f"p_{i} = b.A.{read.format(x=x)}"]
        working += [f"c_{i} = b.η_{i}_area*1 kN/m", f"q_{i} = b.U.{read.format(x=x)}"]
        working += [f"d_{i} = (b.η_{i}_area_max + b.η_{i}_area_min)*1 kN/m"]
    calc = beam(*THREE, *lines, *(load.format(at=at) for load in loads), working=tuple(working))
    assert codes(calc) == []
    for i, _ in enumerate(READ):
        assert value(calc, f"a_{i}") == pytest.approx(value(calc, f"p_{i}"), rel=1e-9, abs=1e-9)
        assert value(calc, f"c_{i}") == pytest.approx(value(calc, f"q_{i}"), rel=1e-9, abs=1e-9)
        assert value(calc, f"d_{i}") == pytest.approx(value(calc, f"q_{i}"), rel=1e-9, abs=1e-9)


@settings(max_examples=15, deadline=None)
@given(places, places)
def test_maxwell_and_betti(a: float, c: float) -> None:
    calc = beam(
        *THREE,
        f"influence η_a = w at {a} m",
        f"influence η_c = w at {c} m",
        f"influence η_s = slope at {a} m",
        "case S",
        f"load S moment 1 kN·m at {a} m",
        working=(f"x = b.η_a({c} m)", f"y = b.η_c({a} m)", f"u = b.η_s({c} m)*1 kN·m", f"v = b.w({c} m)"),
    )
    assert codes(calc) == []
    assert value(calc, "x") == pytest.approx(value(calc, "y"), rel=1e-9, abs=1e-18)
    # a couple turns what a force moves: the slope at a under a load at c is w at c under a couple at a
    assert value(calc, "u") == pytest.approx(value(calc, "v"), rel=1e-8, abs=1e-15)


@pytest.mark.parametrize("of", ["M at 2 m", "M at 10 m", "V at 7 m", "R_2", "w at 7 m"])
def test_a_train_stepped_over_the_line_gives_the_envelope_of_the_train(of: str) -> None:
    axles = ((60e3, 0.0), (20e3, 2.0), (40e3, 3.5))
    name, _, place = of.partition(" at ")
    reads = [f"{name}_{which}{f'({place})' if place else ''}" for which in ("max", "min")]
    calc = beam(
        *THREE,
        f"influence η = {of}",
        "load T train 60 kN, 20 kN, 40 kN spaced 2 m, 1.5 m",
        working=tuple(f"{n} = b.{read}" for n, read in zip("uv", reads, strict=True)),
    )
    assert codes(calc) == []
    line = only(calc).line
    found = [np.zeros(1)]
    for sense in (1.0, -1.0):
        first = np.arange(-1400, 7400) / 400  # steps of 2.5 mm, so that places are met exactly
        for side in ("left", "right"):  # an axle on a jump stands just left, or just right, of it
            total = np.zeros_like(first)
            for load, offset in axles:
                x = first - sense * offset
                on = (x >= 0.0) & (x <= 15.0)
                total[on] += load * line.values(x[on], side)
            found.append(total)
    sums = np.concatenate(found)
    size = float(np.abs(sums).max())
    assert value(calc, "u") >= sums.max() - 1e-9 * size
    assert value(calc, "v") <= sums.min() + 1e-9 * size
    assert sums.max() == pytest.approx(value(calc, "u"), abs=2e-4 * size)
    assert sums.min() == pytest.approx(value(calc, "v"), abs=2e-4 * size)


def test_patterned_spans_are_the_adverse_parts_of_the_line_where_it_changes_sign_at_supports() -> None:
    """M over a support, and in the middle of a span: their lines change sign above supports only."""
    calc = beam(
        *("span = 5 m, 5 m, 5 m", "EI = 30000 kN·m^2"),
        "load Q uniform 8 kN/m",
        "pattern Q",
        "influence η_B = M at 5 m",
        "influence η_R = R_2",
        working=(
            "a = b.M_min(5 m) - b.η_B_area_min*8 kN/m",
            "c = b.M_max(5 m) - b.η_B_area_max*8 kN/m",
            "d = b.R_2_max - b.η_R_area_max*8 kN/m",
            "e = b.R_2_min - b.η_R_area_min*8 kN/m",
        ),
    )
    assert codes(calc) == []
    for name in "acde":
        assert value(calc, name) == pytest.approx(0.0, abs=1e-6)


def test_fed_to_another_calc() -> None:
    first, second = evaluated(
        "# One\n" + fence("beam b", *SIMPLE, "influence η = M at 3 m"),
        "# Two\n" + fence("inputs", "m = b.η_max of C-1", "n = b.η(5 m) of C-1"),
    )
    assert codes(first) == codes(second) == []
    assert shown(second, "m") == "1.875 m"
    assert shown(second, "n") == "1.125 m"
