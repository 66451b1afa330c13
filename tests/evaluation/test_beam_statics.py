"""What a beam block says of statics: how an unstable beam moves, faults at their line, results at a place."""

from __future__ import annotations

import pytest

from calcgen.evaluation.results.calc import EvaluatedCalc
from calcgen.quantities.measure import Measure
from tests.evaluation.helpers import codes, evaluated, fence

RECTANGLE = fence("section s", "shape = rectangle(b = 100 mm, h = 200 mm)")
ANGLE = fence("section s", "shape = angle(h = 150 mm, b = 90 mm, t = 12 mm)")
EI = "EI = 20000 kN·m^2"
LOAD = "load G uniform 3 kN/m"
SECTION = ("section = s", "E = 210 GPa")


def beam(*lines: str, working: tuple[str, ...] = (), before: str = "") -> EvaluatedCalc:
    (calc,) = evaluated("# T\n" + before + fence("beam b", *lines) + fence("working", *working))
    return calc


def si(calc: EvaluatedCalc, name: str) -> float:
    value = calc.values[name][0]
    assert isinstance(value, Measure)
    return value.si


HINGE = "add a support, or remove a hinge"
SUPPORT = "add a support"
SIDEWAYS = "add a support that holds it sideways"


@pytest.mark.parametrize(
    ("lines", "message", "hint"),
    [
        (
            ("span = 6 m", EI, "support pin at 2 m"),
            "the beam can turn vertically about the only support that holds it, at 2 m",
            SUPPORT,
        ),
        (
            ("span = 6 m", EI, "support spring 5 kN/mm at 6 m"),
            "the beam can turn vertically about the only support that holds it, at 6 m",
            SUPPORT,
        ),
        (
            ("span = 6 m", EI, "support spring 0 kN/mm rotation 5 kN·m at 0 m"),
            "nothing holds the beam vertically",
            SUPPORT,
        ),
        (
            ("span = 6 m", *SECTION, "support pin lateral at 0 m", "support pin lateral at 6 m"),
            "nothing holds the beam vertically",
            SUPPORT,
        ),
        (
            (
                "span = 10 m",
                EI,
                *(f"support fixed at {x} m" for x in (0, 10)),
                *(f"hinge at {x} m" for x in (3, 5, 7)),
            ),
            "the stretch between 3 m and 5 m can rotate: a hinge at each end; "
            "that between 5 m and 7 m moves with it",
            HINGE,
        ),
        (
            ("span = 4 m, 6 m, 4 m", EI, "hinge at 5 m", "hinge at 7 m", "hinge at 9 m"),
            "the stretch between 5 m and 7 m can rotate: a hinge at each end; "
            "that between 7 m and 9 m moves with it",
            HINGE,
        ),
        (
            ("span = 4 m, 6 m", EI, "hinge at 1 m", "hinge at 3 m"),
            "the stretch between 0 m and 1 m can rotate: a hinge at 1 m; "
            "that between 1 m and 3 m moves with it",
            HINGE,
        ),
        (
            ("span = 6 m, 2 m", EI, "support pin at 0 m", "support pin at 6 m", "hinge at 7 m"),
            "the stretch between 7 m and 8 m can rotate: a hinge at 7 m",
            HINGE,
        ),
        (
            ("span = 6 m", EI, "support fixed at 0 m", "hinge at 4 m"),
            "the stretch between 4 m and 6 m can rotate: a hinge at 4 m",
            HINGE,
        ),
        (
            ("span = 4 m, 6 m, 4 m", EI, "hinge at 2 m", "hinge at 6 m", "hinge at 12 m"),
            "the stretch between 0 m and 2 m can rotate: a hinge at 2 m; that between 2 m and 6 m, "
            "that between 6 m and 12 m and that between 12 m and 14 m move with it",
            HINGE,
        ),
        (
            (
                "span = 9 m",
                EI,
                "support spring 0 kN/m rotation 9 kN·m at 1 m",
                "support fixed at 9 m",
                "hinge at 2 m",
                "hinge at 4 m",
            ),
            "the stretch between 0 m and 2 m can shift: a hinge at 2 m; "
            "that between 2 m and 4 m moves with it",
            HINGE,
        ),
        (
            (
                "span = 6 m",
                *SECTION,
                "support fixed at 0 m",
                "support pin lateral at 0 m",
                "load W lateral uniform 1 kN/m",
            ),
            "the beam can turn laterally about the only support that holds it, at 0 m",
            SIDEWAYS,
        ),
        (
            (
                "span = 6 m, 6 m",
                *SECTION,
                "support pin at 0 m",
                "support pin at 6 m",
                "support lateral spring 0 kN/m at 6 m",
                "support pin at 12 m",
                "hinge at 8 m",
                "load W lateral uniform 1 kN/m",
            ),
            "the stretch between 0 m and 8 m can rotate sideways: a hinge at 8 m; "
            "that between 8 m and 12 m moves with it",
            f"{SIDEWAYS}, or remove a hinge",
        ),
    ],
)
def test_an_unstable_beam_is_described(lines: tuple[str, ...], message: str, hint: str) -> None:
    calc = beam(*lines, LOAD, before=RECTANGLE)
    assert codes(calc) == ["unstable"]
    assert calc.diagnostics[0].message.replace("\u00a0", " ") == message
    assert calc.diagnostics[0].hint == hint


def test_inclined_axes_need_supports_sideways() -> None:
    """A vertical load moves an angle sideways; held about its horizontal axis it needs no such support."""
    lines = (
        "span = 6 m",
        *SECTION,
        *(f"support pin at {x} m" for x in (0, 6)),
        *(f"support lateral spring 0 kN/m at {x} m" for x in (0, 6)),
        LOAD,
    )
    assert codes(beam(*lines, before=ANGLE)) == ["unstable"]
    assert codes(beam(*lines, "restrained = yes", before=ANGLE)) == []


@pytest.mark.parametrize(
    ("lines", "code", "place"),
    [  # the block's head is line 5, its first line the 6th
        (("support spring foo at 0 m",), "unknown-name", (8, 16)),
        (("support spring 5 kN at 0 m",), "wrong-dimension", (8, 16)),
        (("support spring 5 kN/m rotation foo at 0 m",), "unknown-name", (8, 32)),
        (("support pin rotation 5 kN at 0 m",), "wrong-dimension", (8, 22)),
        (("support pin rotation -5 kN·m at 0 m",), "not-positive", (8, 22)),
        (("load W lateral uniform 3 kN/m",), "beam", (8, 1)),
        (("support pin at 0 m", "support pin lateral at 3 m settles 2 mm"), "beam", (9, 1)),
        (("support spring 0 kN/m at 3 m settles 2 mm", "support pin at 0 m"), "beam", (8, 38)),
        (("hinge at 2 m", "support fixed at 0 m", "load G moment 3 kN·m at 2 m"), "beam", (10, 25)),
    ],
)
def test_a_fault_stands_at_its_line(lines: tuple[str, ...], code: str, place: tuple[int, int]) -> None:
    calc = beam("span = 6 m", EI, *lines, "support pin at 6 m", LOAD, before=RECTANGLE)
    assert codes(calc) == [code]
    (fault,) = calc.diagnostics
    assert fault.span is not None
    source = (fault.span.start, fault.span.end)
    text = "# T\n" + RECTANGLE + fence("beam b", "span = 6 m", EI, *lines)
    line = text.count("\n", 0, source[0]) + 1
    assert (line, source[0] - text.rfind("\n", 0, source[0])) == place


def test_ends_that_resist_turning_in_part() -> None:
    """A pin with a rotational spring: w·L²/12 over 1 + 2EI/(K L)."""
    calc = beam(
        "span = 6 m",
        EI,
        "support pin rotation 5000 kN·m at 0 m | base plate",
        "support roller rotation 5000 kN·m at 6 m",
        LOAD,
        working=("m = b.M_R_1", "n = b.M(6 m)"),
    )
    assert codes(calc) == []
    expected = 3e3 * 6**2 / 12 / (1 + 2 * 20e6 / (5e6 * 6))
    assert si(calc, "m") == pytest.approx(expected, rel=1e-10)
    assert si(calc, "n") == pytest.approx(-expected, rel=1e-10)


CHORD = (
    "span = 6 m, 4 m, 1 m",
    EI,
    "support pin at 0 m",
    "support spring 2 kN/mm at 6 m",
    "support pin at 10 m",
    LOAD,
    "load G point 5 kN at 2 m",
)


def test_results_at_a_place() -> None:
    """The larger magnitude of a jump, and the deflection from the chord of supports that have moved."""
    calc = beam(
        *CHORD,
        working=(
            "v = b.V_abs(2 m)",
            "p = b.V_max(2 m)",
            "q = b.V_min(2 m)",
            "m = b.M_abs(6 m)",
            "n = b.M(6 m)",
            "w = b.w_rel(3 m)",
            "u = b.w(3 m) - b.w(6 m)/2",
            "o = b.w_rel(6 m)",
        ),
    )
    assert codes(calc) == []
    assert si(calc, "p") - si(calc, "q") == pytest.approx(5e3, rel=1e-9)
    assert si(calc, "v") == max(abs(si(calc, "p")), abs(si(calc, "q")))
    assert si(calc, "m") == pytest.approx(abs(si(calc, "n")), rel=1e-12)
    assert si(calc, "w") == pytest.approx(si(calc, "u"), rel=1e-9)
    assert si(calc, "o") == pytest.approx(0.0, abs=1e-12)


@pytest.mark.parametrize(
    ("name", "says"),
    [
        ("w_rel(10.5 m)", "no span"),
        ("w_rel", "at a place"),
        ("span_1.R_1", "not to a span"),
        ("span_1.θ_2_max", "not to a span"),
        ("w_rel_max(3 m)", "of a span"),
        ("w_rel_lat(3 m)", "lateral"),
    ],
)
def test_results_that_are_not_there_say_what_is(name: str, says: str) -> None:
    calc = beam(*CHORD, working=(f"x = b.{name}",))
    assert codes(calc) == ["no-such-result"]
    assert says in calc.diagnostics[0].message
    assert calc.diagnostics[0].hint
