"""Bars of a section: their part, how many there may be, and what they leave of the part they lie in."""

from __future__ import annotations

import math
import time

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from calcgen.evaluation.results.calc import EvaluatedCalc
from calcgen.evaluation.results.section import SectionResult
from calcgen.mechanics.boolean import inside
from calcgen.mechanics.outline import outline
from tests.evaluation.helpers import codes, evaluated, fence

RIB = "part rib = rectangle(b = 100 mm, h = 100 mm) of concrete"
MODULI = ("modulus concrete = 10 GPa", "modulus steel = 200 GPa", "reference = concrete")


def section(*bars: str) -> EvaluatedCalc:
    (calc,) = evaluated("# T\n" + fence("section main", RIB, *bars, *MODULI))
    return calc


def result(calc: EvaluatedCalc) -> SectionResult:
    return next(s for s in calc.segments if isinstance(s, SectionResult))


def row(
    count: str, d: str, start: str = "(-40 mm, 0 mm)", end: str = "(40 mm, 0 mm)", name: str = "q"
) -> str:
    return f"bars {name} = {count} of {d} from {start} to {end} of steel"


@pytest.mark.parametrize(
    ("bars", "place", "code", "words"),
    [
        ((row("1e11", "20 mm"),), "4:10", "bars", ("1.000 × 10¹¹ bars", "1000 that one line takes")),
        ((row("1001", "20 mm"),), "4:10", "bars", ("1001 bars",)),
        ((row("1e300", "20 mm"),), "4:10", "number-too-large", ("1.000 × 10³⁰⁰",)),
        (
            ("bars q = 10000 mm² at (0 mm, 0 mm) of steel",),
            "4:6",
            "bars",
            ("more area than it has", "bars of 10000 mm² in a part of 10000 mm²"),
        ),
        (  # together, not each: said at the last, with the first beside it
            (
                "bars q = 5001 mm² at (0 mm, 10 mm) of steel",
                "bars p = 5001 mm² at (0 mm, -10 mm) of steel",
            ),
            "5:6",
            "bars",
            ("more area than it has", "bars of 10002 mm²"),
        ),
        (  # 4 x 1000 mm² at the corners have 4000·45² mm⁴ about either axis; the rib has 100⁴/12 mm⁴, and
            # 4000·45² = 8.10e6 < 8.33e6, but 4000·50² = 10.0e6 is more
            tuple(
                f"bars {n} = 1000 mm² at ({x} mm, {y} mm) of steel"
                for n, x, y in (("k", -50, -50), ("m", 50, -50), ("p", 50, 50), ("q", -50, 50))
            ),
            "7:6",
            "bars",
            ("more stiffness than it has", "bars of 4000 mm² in a part of 10000 mm²"),
        ),
    ],
)
def test_faults(bars: tuple[str, ...], place: str, code: str, words: tuple[str, ...]) -> None:
    calc = section(*bars)
    assert codes(calc) == [code]
    (d,) = calc.diagnostics
    assert f"{d.line}:{d.column}" == place
    said = f"{d.message} / {d.label} / {d.hint}".replace("\u00a0", " ")
    assert all(each in said for each in words), said


def test_bars_that_leave_stiffness_are_no_fault() -> None:
    corners = (("k", -45, -45), ("m", 45, -45), ("p", 45, 45), ("q", -45, 45))
    calc = section(*(f"bars {n} = 1000 mm² at ({x} mm, {y} mm) of steel" for n, x, y in corners))
    assert codes(calc) == []


@settings(max_examples=30, deadline=None)
@given(
    share=st.floats(0.01, 1.2),
    x=st.floats(-50, 50),
    y=st.floats(-50, 50),
    n=st.floats(1e-6, 20),
)
def test_stiffness_is_positive_or_there_is_no_section(share: float, x: float, y: float, n: float) -> None:
    """Whatever the bars are of, softer than their part too."""
    lines = [
        f"bars {name} = {5000 * share} mm² at ({x * s} mm, {y * s} mm) of steel"
        for name, s in (("p", 1), ("q", -1))
    ]
    text = "# T\n" + fence(
        "section main", RIB, *lines, *(MODULI[0], f"modulus steel = {10 * n} GPa", MODULI[2])
    )
    (calc,) = evaluated(text)
    found = [s for s in calc.segments if isinstance(s, SectionResult)]
    assert found or "bars" in codes(calc)
    for each in found:
        assert min(each.values[key] for key in ("A", "I_h", "I_v", "I_2")) > 0.0


@pytest.mark.parametrize(
    ("bars", "place", "words"),
    [
        ((row("9", "10 mm"),), None, ()),  # 80/8 mm: they touch
        ((row("10", "10 mm"),), "4:6", ("overlap each other", "(−40.00 mm, 0 mm)")),
        (
            (row("4", "20 mm", end="(-40 mm, 0 mm)"),),
            "4:6",
            ("4 bars 'q' lie on one point, (−40.00 mm, 0 mm)",),
        ),
        (
            (row("4", "16 mm"), row("2", "12 mm", "(-40 mm, 13.9 mm)", "(40 mm, 30 mm)", "p")),
            "5:6",
            ("bars of 'q' and 'p' overlap: (−40.00 mm, 0 mm) and (−40.00 mm, 13.90 mm)",),
        ),
        ((row("4", "16 mm"), row("2", "12 mm", "(-40 mm, 14 mm)", "(40 mm, 30 mm)", "p")), None, ()),
        (
            (row("3", "16 mm"), "bars p = 5 mm² at (0 mm, 0 mm) of steel"),
            "5:6",
            ("lie on one point: (0 mm, 0 mm)",),
        ),
        ((row("3", "16 mm"), "bars p = 5 mm² at (8.1 mm, 0 mm) of steel"), None, ()),
        (  # inside the other, of whatever diameter it is itself
            (row("3", "16 mm"), "bars p = 5 mm² at (7.9 mm, 0 mm) of steel"),
            "5:6",
            ("overlap: (0 mm, 0 mm) and (7.900 mm, 0 mm)",),
        ),
    ],
)
def test_overlaps(bars: tuple[str, ...], place: str | None, words: tuple[str, ...]) -> None:
    calc = section(*bars)
    assert codes(calc) == ([] if place is None else ["bars-overlap"])
    for d in calc.diagnostics:
        assert (f"{d.line}:{d.column}", d.severity) == (place, "warning")
        assert all(each in d.message.replace("\u00a0", " ") for each in words), d.message


def test_many_bars_find_their_part_quickly() -> None:
    rng = np.random.default_rng(1)
    angles = np.linspace(0.0, 2.0 * math.pi, 512, endpoint=False)
    disc = outline(np.column_stack((np.cos(angles), np.sin(angles))))
    points = rng.uniform(-1.1, 1.1, (1000, 2))
    inside(points[:1], [disc])  # the library is loaded
    start = time.perf_counter()
    found = inside(points, [disc])
    assert time.perf_counter() - start < 0.3
    assert found.tolist() == [disc.contains((float(x), float(y))) for x, y in points]


@pytest.mark.parametrize("point", [(0.0, 0.5), (1.0, 1.0), (0.3, 0.0)])
def test_a_point_on_the_edge_lies_inside(point: tuple[float, float]) -> None:
    square = outline([(0, 0), (1, 0), (1, 1), (0, 1)])
    assert inside(np.array([point, (1.0 + 1e-6, 0.5)]), [square]).tolist() == [True, False]


def test_on_the_edge_of_two_parts_a_bar_belongs_to_the_first() -> None:
    (calc,) = evaluated(
        "# T\n"
        + fence(
            "section main",
            "part low = rectangle(b = 100 mm, h = 100 mm) of concrete",
            "part top = rectangle(b = 100 mm, h = 100 mm) at (0 mm, 100 mm) of concrete",
            "bars q = 3 mm² at (0 mm, 50 mm) of steel",
            "bars p = 3 mm² at (0 mm, 60 mm) of steel",
            *MODULI,
        )
    )
    assert [bars.hosts for bars in result(calc).bars] == [("low",), ("top",)]
