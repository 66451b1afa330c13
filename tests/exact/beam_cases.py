"""Beams with known answers: published tables, worked examples and closed forms, in SI base units.

Signs are those of `calcgen.mechanics.beam`. A case in multiples of w, L and EI has all three equal to 1.
"From memory" means that the source was not at hand when its numbers were written down.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from math import sqrt

from calcgen.mechanics.beam import (
    BeamModel,
    CaseSolution,
    DistributedLoad,
    Load,
    PointLoad,
    PointMoment,
    Settlement,
    fixed,
    pin,
    prismatic,
    roller,
)

E_STEEL = 210e9  # Pa
IPE_300 = 8356e-8  # m⁴, about the horizontal axis
CLOSED_FORM = 1e-10


@dataclass(frozen=True)
class Expected:
    """One published number: how to read it from a solution, its value, its relative tolerance."""

    what: str
    read: Callable[[CaseSolution], float]
    value: float
    tolerance: float


@dataclass(frozen=True)
class BeamCase:
    """A beam, its loads and what a source says of it."""

    name: str
    source: str
    model: BeamModel
    loads: tuple[Load, ...]
    expected: tuple[Expected, ...]


def _R(support: int) -> Callable[[CaseSolution], float]:
    return lambda s: s.reactions[support].force


def _M(x: float) -> Callable[[CaseSolution], float]:
    return lambda s: s.at("M", x)


def _w(x: float) -> Callable[[CaseSolution], float]:
    return lambda s: s.at("w", x)


def _M_max(start: float | None = None, end: float | None = None) -> Callable[[CaseSolution], float]:
    return lambda s: s.extremes("M", start, end).max


def _x_M(start: float | None = None, end: float | None = None) -> Callable[[CaseSolution], float]:
    return lambda s: s.extremes("M", start, end).x_max


def _w_max(s: CaseSolution) -> float:
    return s.extremes("w").max


def _x_w(s: CaseSolution) -> float:
    return s.extremes("w").x_max


def _equal_spans(count: int) -> BeamModel:
    return prismatic(float(count), 1.0, tuple(pin(float(x)) for x in range(count + 1)))


def _uniform(length: float, value: float = 1.0) -> tuple[Load, ...]:
    return (DistributedLoad.uniform(0.0, length, value),)


_EQUAL_SPANS = (
    "T. G. Hicks, Civil Engineering Formulas, 2nd ed., Table 2.1 (reactions and moments); "
    "deflections from memory of AISC Steel Construction Manual, 15th ed., Table 3-23"
)
_AISC = "AISC Steel Construction Manual, 15th ed., Table 3-23, from memory"

HE_320_A = 22930e-8  # m⁴
HE_320_A_W = 1479e-6  # m³
_ONE_OVERHANG = prismatic(8.0, E_STEEL * HE_320_A, (pin(0.0), roller(6.0)))
_OVERHANG_SOURCE = (
    "TU Delft, Structural Design Essentials (TeachBooks), worked example of a steel beam with one overhang"
)
_THIRD_POINTS = prismatic(9.0, 1e8, (pin(0.0), roller(9.0)))
_THIRD_POINTS_SOURCE = "Steel Buildings in Europe, Multi-Storey Steel Buildings Part 4, worked example A.4"


def _third_points(force: float) -> tuple[Load, ...]:
    return (PointLoad(3.0, force), PointLoad(6.0, force), *_uniform(9.0, 877.0))


CASES: tuple[BeamCase, ...] = (
    BeamCase(
        "simple span, uniform load",
        "wL/2, wL²/8, 5wL⁴/384EI, wL³/24EI",
        prismatic(6.0, E_STEEL * IPE_300, (pin(0.0), roller(6.0))),
        _uniform(6.0, 10e3),
        (
            Expected("R", _R(0), 30e3, CLOSED_FORM),
            Expected("M_max", _M_max(), 45e3, CLOSED_FORM),
            Expected("w_mid", _w(3.0), 9.6167e-3, 1e-4),
            Expected("w_mid", _w(3.0), 5 * 10e3 * 6**4 / (384 * E_STEEL * IPE_300), CLOSED_FORM),
            Expected("slope_end", lambda s: s.at("slope", 0.0), 0.00512891, 1e-4),
        ),
    ),
    BeamCase(
        "simple span, point load off the middle",
        f"{_AISC}, case 8; Pa(L² - a²)^1.5 / (9√3 EIL)",
        prismatic(6.0, E_STEEL * IPE_300, (pin(0.0), roller(6.0))),
        (PointLoad(2.0, 30e3),),
        (
            Expected("R_A", _R(0), 20e3, CLOSED_FORM),
            Expected("R_B", _R(1), 10e3, CLOSED_FORM),
            Expected("M_max", _M_max(), 40e3, CLOSED_FORM),
            Expected("w_load", _w(2.0), 6.0787e-3, 1e-4),
            Expected("w_max", _w_max, 6.61765e-3, 1e-4),
            Expected("x_w", _x_w, 6.0 - sqrt((36.0 - 4.0) / 3.0), CLOSED_FORM),
        ),
    ),
    BeamCase(
        "simple span, load rising from zero to the far end, total 1",
        f"{_AISC}, case 2",
        prismatic(1.0, 1.0, (pin(0.0), roller(1.0))),
        (DistributedLoad(0.0, 1.0, 0.0, 2.0),),
        (
            Expected("R_A", _R(0), 1 / 3, CLOSED_FORM),
            Expected("R_B", _R(1), 2 / 3, CLOSED_FORM),
            Expected("M_max", _M_max(), 0.1283, 5e-4),
            Expected("x_M", _x_M(), 1 / sqrt(3.0), CLOSED_FORM),
            Expected("w_max", _w_max, 0.01304, 5e-4),
            Expected("x_w", _x_w, 0.5193, 5e-4),
        ),
    ),
    BeamCase(
        "simple span, anticlockwise couple: the moment drops by it",
        "M₀ab(b - a)/(3EIL) in magnitude",
        prismatic(8.0, E_STEEL * IPE_300, (pin(0.0), roller(8.0))),
        (PointMoment(3.0, -24e3),),
        (
            Expected("R_A", _R(0), 3e3, CLOSED_FORM),
            Expected("R_B", _R(1), -3e3, CLOSED_FORM),
            Expected("M_left", lambda s: s.at("M", 3.0, "left"), 9e3, CLOSED_FORM),
            Expected("M_right", lambda s: s.at("M", 3.0, "right"), -15e3, CLOSED_FORM),
            Expected("w_couple", _w(3.0), -1.70964e-3, 1e-4),
            Expected("w_couple", _w(3.0), -24e3 * 3 * 5 * 2 / (3 * E_STEEL * IPE_300 * 8), CLOSED_FORM),
        ),
    ),
    BeamCase(
        "propped cantilever, uniform load",
        f"{_AISC}, case 12",
        prismatic(1.0, 1.0, (fixed(0.0), roller(1.0))),
        _uniform(1.0),
        (
            Expected("R_B", _R(1), 3 / 8, CLOSED_FORM),
            Expected("R_A", _R(0), 5 / 8, CLOSED_FORM),
            Expected("M_A", _M(0.0), -1 / 8, CLOSED_FORM),
            Expected("M_support, anticlockwise", lambda s: s.reactions[0].moment, 1 / 8, CLOSED_FORM),
            Expected("M_span", _M_max(), 9 / 128, CLOSED_FORM),
            Expected("x_M from the prop", lambda s: 1.0 - s.extremes("M").x_max, 3 / 8, CLOSED_FORM),
            Expected("w_max", _w_max, 0.0054, 0.0102),
            Expected("x_w from the prop", lambda s: 1.0 - s.extremes("w").x_max, 0.4215, 5e-4),
        ),
    ),
    BeamCase(
        "fixed ends, point load",
        "Pab²/L², Pa²b/L², 2Pa³b²/(3EI(3a + b)²) at 2aL/(3a + b)",
        prismatic(10.0, E_STEEL * 23130e-8, (fixed(0.0), fixed(10.0))),
        (PointLoad(6.0, 80e3),),
        (
            Expected("R_A", _R(0), 28.16e3, CLOSED_FORM),
            Expected("R_B", _R(1), 51.84e3, CLOSED_FORM),
            Expected("M_A", _M(0.0), -76.8e3, CLOSED_FORM),
            Expected("M_B", _M(10.0), -115.2e3, CLOSED_FORM),
            Expected("M_R_B, anticlockwise", lambda s: s.reactions[1].moment, -115.2e3, CLOSED_FORM),
            Expected("M_load", _M(6.0), 92.16e3, CLOSED_FORM),
            Expected("w_max", _w_max, 7.84029e-3, 1e-4),
            Expected("x_w", _x_w, 120 / 22, CLOSED_FORM),
        ),
    ),
    BeamCase(
        "overhang, uniform load throughout",
        f"{_AISC}, case 24; w(L + a)²(L - a)²/8L², wa(4a²L - L³ + 3a³)/24EI",
        prismatic(8.0, E_STEEL * 16270e-8, (pin(0.0), roller(6.0))),
        _uniform(8.0, 20e3),
        (
            Expected("R_A", _R(0), 160e3 / 3, CLOSED_FORM),
            Expected("R_B", _R(1), 320e3 / 3, CLOSED_FORM),
            Expected("M_span", _M_max(), 640e3 / 9, CLOSED_FORM),
            Expected("x_M", _x_M(), 8 / 3, CLOSED_FORM),
            Expected("M_B", _M(6.0), -40e3, CLOSED_FORM),
            Expected("w_tip", _w(8.0), -4.68288e-3, 1e-4),
            Expected("w_3m", _w(3.0), 7.24383e-3, 1e-4),
        ),
    ),
    BeamCase(
        "overhang: full load on the span, 0.9 of the permanent load on the overhang",
        _OVERHANG_SOURCE,
        _ONE_OVERHANG,
        (
            DistributedLoad.uniform(0.0, 6.0, 1.2 * 40.2e3 + 1.5 * 24e3),
            DistributedLoad.uniform(6.0, 8.0, 0.9 * 40.2e3),
        ),
        (
            Expected("M_C", _M(3.0), 342.9e3, 5e-4),
            Expected("σ_C", lambda s: s.at("M", 3.0) / HE_320_A_W, 231.8e6, 5e-4),
            # The example stops at midspan; the largest moment lies a little to its left, where V = 0.
            Expected("M_max", _M_max(), 240.66e3**2 / (2 * 84.24e3), CLOSED_FORM),
        ),
    ),
    BeamCase(
        "overhang: full load on the overhang",
        _OVERHANG_SOURCE,
        _ONE_OVERHANG,
        (DistributedLoad.uniform(6.0, 8.0, 1.2 * 40.2e3 + 1.5 * 24e3),),
        (
            Expected("M_B", _M(6.0), -168.5e3, 5e-4),
            Expected("σ_B", lambda s: -s.at("M", 6.0) / HE_320_A_W, 113.9e6, 5e-4),
        ),
    ),
    BeamCase(
        "overhang: variable load on the span",
        _OVERHANG_SOURCE,
        _ONE_OVERHANG,
        (DistributedLoad.uniform(0.0, 6.0, 24e3),),
        (Expected("w_C", _w(3.0), 8.4e-3, 0.00655),),
    ),
    BeamCase(
        "overhang: variable load on the overhang",
        _OVERHANG_SOURCE,
        _ONE_OVERHANG,
        (DistributedLoad.uniform(6.0, 8.0, 24e3),),
        (Expected("w_tip", _w(8.0), 5.0e-3, 0.011),),
    ),
    BeamCase(
        "third points, final stage",
        _THIRD_POINTS_SOURCE,
        _THIRD_POINTS,
        _third_points(152.25e3),
        (
            Expected("M", _M_max(), 465.6e3, 5e-4),
            Expected("V", lambda s: s.extremes("V").abs, 156.2e3, 5e-4),
        ),
    ),
    BeamCase(
        "third points, construction stage",
        _THIRD_POINTS_SOURCE,
        _THIRD_POINTS,
        _third_points(86.78e3),
        (
            Expected("M", _M_max(), 269.2e3, 5e-4),
            Expected("V", lambda s: s.extremes("V").abs, 90.73e3, 5e-4),
        ),
    ),
    BeamCase(
        "two equal spans",
        _EQUAL_SPANS,
        _equal_spans(2),
        _uniform(2.0),
        (
            Expected("R_1", _R(0), 0.375, CLOSED_FORM),
            Expected("R_2", _R(1), 1.25, CLOSED_FORM),
            Expected("M_2", _M(1.0), -0.125, CLOSED_FORM),
            Expected("M_span", _M_max(), 0.0703, 7.82e-4),
            Expected("x_M", _x_M(), 0.375, CLOSED_FORM),
            Expected("w_max", _w_max, 0.0054, 0.0102),
            Expected("x_w", _x_w, 0.4215, 5e-4),
        ),
    ),
    BeamCase(
        "three equal spans",
        _EQUAL_SPANS,
        _equal_spans(3),
        _uniform(3.0),
        (
            Expected("R_1", _R(0), 0.4, CLOSED_FORM),
            Expected("R_2", _R(1), 1.1, CLOSED_FORM),
            Expected("M_2", _M(1.0), -0.1, CLOSED_FORM),
            Expected("M_span_1", _M_max(0.0, 1.0), 0.08, CLOSED_FORM),
            Expected("M_span_2", _M_max(1.0, 2.0), 0.025, CLOSED_FORM),
            Expected("x_M_1", _x_M(0.0, 1.0), 0.4, CLOSED_FORM),
            Expected("w_max", _w_max, 0.0069, 0.00797),
            Expected("x_w", _x_w, 0.446, 0.00123),
        ),
    ),
    BeamCase(
        "four equal spans",
        _EQUAL_SPANS,
        _equal_spans(4),
        _uniform(4.0),
        (
            Expected("R_1", _R(0), 11 / 28, CLOSED_FORM),
            Expected("R_2", _R(1), 32 / 28, CLOSED_FORM),
            Expected("R_3", _R(2), 26 / 28, CLOSED_FORM),
            Expected("M_2", _M(1.0), -3 / 28, CLOSED_FORM),
            Expected("M_3", _M(2.0), -2 / 28, CLOSED_FORM),
            Expected("M_span_1", _M_max(0.0, 1.0), 0.0772, 7.12e-4),
            Expected("M_span_2", _M_max(1.0, 2.0), 0.0364, 0.00165),
            Expected("x_M_1", _x_M(0.0, 1.0), 0.393, 0.0014),
            Expected("x_M_2", lambda s: s.extremes("M", 1.0, 2.0).x_max - 1.0, 0.536, 0.00103),
            Expected("w_max", _w_max, 0.0065, 0.00846),
            Expected("x_w", _x_w, 0.44, 0.0125),
        ),
    ),
    BeamCase(
        "two spans, the middle support settles",
        "M = 3EIδ/L²",
        prismatic(10.0, E_STEEL * IPE_300, (pin(0.0), pin(5.0), pin(10.0))),
        (Settlement(1, 15e-3),),
        (
            Expected("M_B", _M(5.0), 3 * E_STEEL * IPE_300 * 15e-3 / 25, CLOSED_FORM),
            Expected("M_B", _M(5.0), 31.5857e3, 1e-4),
            Expected("R_A", _R(0), 6.31714e3, 1e-4),
            Expected("R_B", _R(1), -12.6343e3, 1e-4),
        ),
    ),
)
