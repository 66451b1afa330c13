"""Closed forms of beams, each for a kind of support or load, written once for numbers and for symbols.

All are from memory: "AISC" is Table 3-23 of the AISC Steel Construction Manual, 15th ed., with the number of
the case; "Roark" is Roark's Formulas for Stress and Strain, 7th ed., Table 8.1; others are statics or virtual
work. Memory is no proof: `tests/mechanics/test_beam_formulas.py` integrates each beam again in symbols.
Signs are those of `calcgen.mechanics.beam`; `b` is L - a.
"""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass, fields

from tests.exact.singularity import RIGID, Action, Chain, Held, Number, Piece


@dataclass(frozen=True)
class Symbols:
    """Length, a place in it, stiffnesses and sizes of loads; `k` and `K` are springs, `D` a settlement.

    `t` is a free curvature, positive as M, and `S` the stiffness against shear.
    """

    L: Number
    a: Number
    EI: Number
    P: Number
    w: Number
    C: Number
    D: Number
    k: Number
    K: Number
    S: Number
    t: Number

    @property
    def b(self) -> Number:
        """What is left of the length."""
        return self.L - self.a

    def root(self, x: Number) -> Number:
        """Square root of a number, with the digits of the letters."""
        one = self.L / self.L
        return (x * one) ** (one / 2)


NAMES = tuple(f.name for f in fields(Symbols))


@dataclass(frozen=True)
class Read:
    """A result: w, slope, θ, M or V at a place; R or MR of a support, by number."""

    quantity: str
    where: Number


def R(number: int) -> Read:
    """Force of a support, positive up."""
    return Read("R", number)


def MR(number: int) -> Read:
    """Couple of a support, positive anticlockwise."""
    return Read("MR", number)


def M(x: Number) -> Read:
    """Moment at a place, just right of it."""
    return Read("M", x)


def V(x: Number) -> Read:
    """Shear force at a place, just right of it."""
    return Read("V", x)


def w(x: Number) -> Read:
    """Deflection at a place."""
    return Read("w", x)


def turn(x: Number) -> Read:
    """Rotation of the section at a place."""
    return Read("θ", x)


@dataclass(frozen=True)
class Formulas:
    """A beam and what its source says of it."""

    name: str
    source: str
    chain: Callable[[Symbols], Chain]
    results: Callable[[Symbols], Mapping[Read, Number]]


@dataclass(frozen=True)
class Peak:
    """The largest value of M or w along a beam, and its place: formulas with roots."""

    name: str
    source: str
    chain: Callable[[Symbols], Chain]
    quantity: str
    value: Callable[[Symbols], Number]
    place: Callable[[Symbols], Number]


def beam(s: Symbols, held: tuple[Held, ...], *actions: Action, length: Number = None) -> Chain:
    """Give a prismatic beam of the length L."""
    return Chain((Piece(s.L if length is None else length, ((1 / s.EI,),)),), held, actions)


def at(x: Number) -> Held:
    """Hold the deflection."""
    return Held(x)


def wall(x: Number, **more: Number) -> Held:
    """Hold the deflection and the rotation."""
    return Held(x, RIGID, RIGID, **more)


def simple(s: Symbols) -> tuple[Held, ...]:
    """Hold both ends simply."""
    return (at(0 * s.L), at(s.L))


def propped(s: Symbols) -> tuple[Held, ...]:
    """Fix the left end and hold the right one simply."""
    return (wall(0 * s.L), at(s.L))


def clamped(s: Symbols) -> tuple[Held, ...]:
    """Fix both ends."""
    return (wall(0 * s.L), wall(s.L))


def two_spans(s: Symbols) -> tuple[Held, ...]:
    """Two spans of L."""
    return (at(0 * s.L), at(s.L), at(2 * s.L))


def force(x: Number, value: Number) -> Action:
    """A force, down."""
    return Action("force", x, value)


def couple(x: Number, value: Number) -> Action:
    """A couple, clockwise."""
    return Action("couple", x, value)


def load(s: Symbols, value: Number, start: Number = None, end: Number = None, to: Number = None) -> Action:
    """A load from `value` to `to` on a stretch; uniform, and over the whole length, where nothing is said."""
    return Action("load", 0 * s.L if start is None else start, value, s.L if end is None else end, to)


FORMULAS: tuple[Formulas, ...] = (
    Formulas(
        "simple, uniform load",
        "AISC 1",
        lambda s: beam(s, simple(s), load(s, s.w)),
        lambda s: {
            R(0): s.w * s.L / 2,
            R(1): s.w * s.L / 2,
            V(s.a): s.w * (s.L / 2 - s.a),
            M(s.a): s.w * s.a * s.b / 2,
            w(s.L / 2): 5 * s.w * s.L**4 / (384 * s.EI),
            w(s.a): s.w * s.a * (s.L**3 - 2 * s.L * s.a**2 + s.a**3) / (24 * s.EI),
            turn(0 * s.L): s.w * s.L**3 / (24 * s.EI),
        },
    ),
    Formulas(
        "simple, load rising from zero to w",
        "AISC 2, W = wL/2",
        lambda s: beam(s, simple(s), load(s, 0 * s.w, to=s.w)),
        lambda s: {
            R(0): s.w * s.L / 6,
            R(1): s.w * s.L / 3,
            V(s.a): s.w * s.L / 6 - s.w * s.a**2 / (2 * s.L),
            M(s.a): s.w * s.a * (s.L**2 - s.a**2) / (6 * s.L),
            w(s.a): s.w * s.a * (3 * s.a**4 - 10 * s.L**2 * s.a**2 + 7 * s.L**4) / (360 * s.EI * s.L),
        },
    ),
    Formulas(
        "simple, load rising to w in the middle",
        "AISC 3, W = wL/2",
        lambda s: beam(
            s,
            simple(s),
            load(s, 0 * s.w, end=s.L / 2, to=s.w),
            load(s, s.w, start=s.L / 2, to=0 * s.w),
        ),
        lambda s: {
            R(0): s.w * s.L / 4,
            M(s.L / 2): s.w * s.L**2 / 12,
            w(s.L / 2): s.w * s.L**4 / (120 * s.EI),
        },
    ),
    Formulas(
        "simple, uniform load on a stretch at the left",
        "AISC 5",
        lambda s: beam(s, simple(s), load(s, s.w, end=s.a)),
        lambda s: {
            R(0): s.w * s.a * (2 * s.L - s.a) / (2 * s.L),
            R(1): s.w * s.a**2 / (2 * s.L),
            w(s.a): s.w * s.a**2 * s.b * (4 * s.a * s.L - 3 * s.a**2) / (24 * s.EI * s.L),
        },
    ),
    Formulas(
        "simple, uniform load on a stretch at the right; rising on it",
        "Roark 2e",
        lambda s: beam(s, simple(s), load(s, s.w, start=s.a, to=3 * s.w)),
        lambda s: {R(0): s.w * s.b**2 / (2 * s.L) + 2 * s.w * s.b**2 / (6 * s.L)},
    ),
    Formulas(
        "simple, force anywhere",
        "AISC 8",
        lambda s: beam(s, simple(s), force(s.a, s.P)),
        lambda s: {
            R(0): s.P * s.b / s.L,
            R(1): s.P * s.a / s.L,
            M(s.a): s.P * s.a * s.b / s.L,
            w(s.a): s.P * s.a**2 * s.b**2 / (3 * s.EI * s.L),
            turn(0 * s.L): s.P * s.a * s.b * (s.L + s.b) / (6 * s.EI * s.L),
            turn(s.L): -s.P * s.a * s.b * (s.L + s.a) / (6 * s.EI * s.L),
        },
    ),
    Formulas(
        "simple, two equal forces in symmetry",
        "AISC 9",
        lambda s: beam(s, simple(s), force(s.a, s.P), force(s.b, s.P)),
        lambda s: {
            M(s.L / 2): s.P * s.a,
            V(s.L / 2): 0 * s.P,
            w(s.L / 2): s.P * s.a * (3 * s.L**2 - 4 * s.a**2) / (24 * s.EI),
        },
    ),
    Formulas(
        "simple, couple anywhere",
        "Roark 3e, clockwise",
        lambda s: beam(s, simple(s), couple(s.a, s.C)),
        lambda s: {
            R(0): -s.C / s.L,
            M(s.a): s.C * s.b / s.L,
            w(s.a): -s.C * s.a * s.b * (s.a - s.b) / (3 * s.EI * s.L),
            turn(0 * s.L): s.C * (2 * s.L**2 - 6 * s.a * s.L + 3 * s.a**2) / (6 * s.EI * s.L),
        },
    ),
    Formulas(
        "simple, couples on a stretch at the left",
        "statics: the couple c·a, and its moment falls beyond it",
        lambda s: beam(s, simple(s), Action("moments", 0 * s.L, s.C, s.a)),
        lambda s: {R(0): -s.C * s.a / s.L, M(s.a): s.C * s.a * s.b / s.L, M(s.L): 0 * s.C},
    ),
    Formulas(
        "simple, couples rising from zero to the right",
        "statics",
        lambda s: beam(s, simple(s), Action("moments", 0 * s.L, 0 * s.C, s.L, s.C)),
        lambda s: {R(1): s.C / 2, M(s.L / 2): -s.C * s.L / 8},
    ),
    Formulas(
        "propped, uniform load",
        "AISC 12",
        lambda s: beam(s, propped(s), load(s, s.w)),
        lambda s: {
            R(0): 5 * s.w * s.L / 8,
            R(1): 3 * s.w * s.L / 8,
            MR(0): s.w * s.L**2 / 8,
            turn(s.L): -s.w * s.L**3 / (48 * s.EI),
            w(s.b): s.w * s.a * (s.L**3 - 3 * s.L * s.a**2 + 2 * s.a**3) / (48 * s.EI),
        },
    ),
    Formulas(
        "propped, force in the middle",
        "AISC 13",
        lambda s: beam(s, propped(s), force(s.L / 2, s.P)),
        lambda s: {
            R(1): 5 * s.P / 16,
            R(0): 11 * s.P / 16,
            M(0 * s.L): -3 * s.P * s.L / 16,
            M(s.L / 2): 5 * s.P * s.L / 32,
            w(s.L / 2): 7 * s.P * s.L**3 / (768 * s.EI),
        },
    ),
    Formulas(
        "propped, force anywhere, a from the prop",
        "AISC 14",
        lambda s: beam(s, propped(s), force(s.b, s.P)),
        lambda s: {
            R(1): s.P * s.b**2 * (s.a + 2 * s.L) / (2 * s.L**3),
            R(0): s.P * s.a * (3 * s.L**2 - s.a**2) / (2 * s.L**3),
            MR(0): s.P * s.a * s.b * (s.a + s.L) / (2 * s.L**2),
            w(s.b): s.P * s.a**2 * s.b**3 * (3 * s.L + s.a) / (12 * s.EI * s.L**3),
        },
    ),
    Formulas(
        "prop at the left, load on a stretch at the wall: uniform, and rising on it",
        "Roark 2c",
        lambda s: beam(s, (at(0 * s.L), wall(s.L)), load(s, s.w, start=s.a, to=2 * s.w)),
        lambda s: {
            R(0): s.w * s.b**3 * (3 * s.L + s.a) / (8 * s.L**3)
            + s.w * s.b**3 * (4 * s.L + s.a) / (40 * s.L**3)
        },
    ),
    Formulas(
        "prop at the left, couple anywhere",
        "Roark 3c, clockwise",
        lambda s: beam(s, (at(0 * s.L), wall(s.L)), couple(s.a, s.C)),
        lambda s: {
            R(0): -3 * s.C * (s.L**2 - s.a**2) / (2 * s.L**3),
            turn(0 * s.L): -s.C * s.b * (3 * s.a - s.L) / (4 * s.EI * s.L),
        },
    ),
    Formulas(
        "propped, couples throughout",
        "virtual work: the prop takes c·L³/3 over L³/3",
        lambda s: beam(s, propped(s), Action("moments", 0 * s.L, s.C, s.L)),
        lambda s: {R(1): s.C, MR(0): 0 * s.C, w(s.a): 0 * s.C},
    ),
    Formulas(
        "propped, the prop settles",
        "Roark, by superposition: 3EIΔ/L³",
        lambda s: beam(s, (wall(0 * s.L), Held(s.L, settles=s.D))),
        lambda s: {R(1): -3 * s.EI * s.D / s.L**3, M(0 * s.L): -3 * s.EI * s.D / s.L**2},
    ),
    Formulas(
        "fixed ends, uniform load",
        "AISC 15",
        lambda s: beam(s, clamped(s), load(s, s.w)),
        lambda s: {
            MR(0): s.w * s.L**2 / 12,
            MR(1): -s.w * s.L**2 / 12,
            M(s.L / 2): s.w * s.L**2 / 24,
            w(s.a): s.w * s.a**2 * s.b**2 / (24 * s.EI),
        },
    ),
    Formulas(
        "fixed ends, force in the middle",
        "AISC 16",
        lambda s: beam(s, clamped(s), force(s.L / 2, s.P)),
        lambda s: {
            M(0 * s.L): -s.P * s.L / 8,
            M(s.L / 2): s.P * s.L / 8,
            w(s.L / 2): s.P * s.L**3 / (192 * s.EI),
        },
    ),
    Formulas(
        "fixed ends, force anywhere",
        "AISC 17",
        lambda s: beam(s, clamped(s), force(s.a, s.P)),
        lambda s: {
            R(0): s.P * s.b**2 * (3 * s.a + s.b) / s.L**3,
            MR(0): s.P * s.a * s.b**2 / s.L**2,
            MR(1): -s.P * s.a**2 * s.b / s.L**2,
            M(s.a): 2 * s.P * s.a**2 * s.b**2 / s.L**3,
            w(s.a): s.P * s.a**3 * s.b**3 / (3 * s.EI * s.L**3),
        },
    ),
    Formulas(
        "fixed ends, couple anywhere",
        "Roark 3d, clockwise",
        lambda s: beam(s, clamped(s), couple(s.a, s.C)),
        lambda s: {
            R(0): -6 * s.C * s.a * s.b / s.L**3,
            M(0 * s.L): -s.C * (s.L**2 - 4 * s.a * s.L + 3 * s.a**2) / s.L**2,
        },
    ),
    Formulas(
        "fixed ends, load on a stretch at the right: uniform, and rising on it",
        "Roark 2d",
        lambda s: beam(s, clamped(s), load(s, s.w, start=s.a, to=2 * s.w)),
        lambda s: {
            R(0): s.w * s.b**3 * (s.L + s.a) / (2 * s.L**3)
            + s.w * s.b**3 * (3 * s.L + 2 * s.a) / (20 * s.L**3),
            M(0 * s.L): -s.w * s.b**3 * (s.L + 3 * s.a) / (12 * s.L**2)
            - s.w * s.b**3 * (2 * s.L + 3 * s.a) / (60 * s.L**2),
        },
    ),
    Formulas(
        "fixed ends, couples throughout",
        "statics: the ends take them as forces, and nothing bends",
        lambda s: beam(s, clamped(s), Action("moments", 0 * s.L, s.C, s.L)),
        lambda s: {R(1): s.C, MR(0): 0 * s.C, M(s.a): 0 * s.C},
    ),
    Formulas(
        "fixed ends, the right one settles",
        "6EIΔ/L², 12EIΔ/L³, any text on slope and deflection",
        lambda s: beam(s, (wall(0 * s.L), wall(s.L, settles=s.D))),
        lambda s: {
            MR(0): 6 * s.EI * s.D / s.L**2,
            MR(1): 6 * s.EI * s.D / s.L**2,
            R(1): -12 * s.EI * s.D / s.L**3,
            w(s.L / 2): s.D / 2,
        },
    ),
    Formulas(
        "cantilever, load rising to the wall",
        "AISC 18, W = wL/2; a from the tip",
        lambda s: beam(s, (wall(s.L),), load(s, 0 * s.w, to=s.w)),
        lambda s: {
            M(s.L): -s.w * s.L**2 / 6,
            w(s.a): s.w * (s.a**5 - 5 * s.L**4 * s.a + 4 * s.L**5) / (120 * s.EI * s.L),
        },
    ),
    Formulas(
        "cantilever, uniform load",
        "AISC 19; a from the tip",
        lambda s: beam(s, (wall(s.L),), load(s, s.w)),
        lambda s: {
            MR(0): -s.w * s.L**2 / 2,
            V(s.a): -s.w * s.a,
            w(s.a): s.w * (s.a**4 - 4 * s.L**3 * s.a + 3 * s.L**4) / (24 * s.EI),
        },
    ),
    Formulas(
        "fixed and guided, uniform load",
        "AISC 20",
        lambda s: beam(s, (wall(0 * s.L), Held(s.L, None, RIGID)), load(s, s.w)),
        lambda s: {
            M(0 * s.L): -s.w * s.L**2 / 3,
            MR(1): s.w * s.L**2 / 6,
            w(s.L): s.w * s.L**4 / (24 * s.EI),
        },
    ),
    Formulas(
        "cantilever, force anywhere, b from the wall",
        "AISC 21",
        lambda s: beam(s, (wall(s.L),), force(s.a, s.P)),
        lambda s: {
            M(s.L): -s.P * s.b,
            w(0 * s.L): s.P * s.b**2 * (3 * s.L - s.b) / (6 * s.EI),
            w(s.a): s.P * s.b**3 / (3 * s.EI),
            turn(0 * s.L): -s.P * s.b**2 / (2 * s.EI),
        },
    ),
    Formulas(
        "fixed and guided, force at the guide",
        "AISC 23",
        lambda s: beam(s, (wall(0 * s.L), Held(s.L, None, RIGID)), force(s.L, s.P)),
        lambda s: {M(0 * s.L): -s.P * s.L / 2, w(s.L): s.P * s.L**3 / (12 * s.EI)},
    ),
    Formulas(
        "cantilever, couple anywhere",
        "Roark 3a, clockwise",
        lambda s: beam(s, (wall(s.L),), couple(s.a, s.C)),
        lambda s: {
            w(0 * s.L): -s.C * (s.L**2 - s.a**2) / (2 * s.EI),
            turn(0 * s.L): s.C * s.b / s.EI,
        },
    ),
    Formulas(
        "cantilever, couples throughout",
        "virtual work: as a tip force of their intensity",
        lambda s: beam(s, (wall(0 * s.L),), Action("moments", 0 * s.L, s.C, s.L)),
        lambda s: {w(s.L): s.C * s.L**3 / (3 * s.EI), V(s.a): 0 * s.C, MR(0): s.C * s.L},
    ),
    Formulas(
        "overhang, uniform load throughout",
        "AISC 24",
        lambda s: beam(s, simple(s), load(s, s.w, end=s.L + s.a), length=s.L + s.a),
        lambda s: {
            R(0): s.w * (s.L**2 - s.a**2) / (2 * s.L),
            R(1): s.w * (s.L + s.a) ** 2 / (2 * s.L),
            M(s.L): -s.w * s.a**2 / 2,
            w(s.L + s.a): s.w * s.a * (4 * s.a**2 * s.L - s.L**3 + 3 * s.a**3) / (24 * s.EI),
        },
    ),
    Formulas(
        "overhang, uniform load on it",
        "AISC 25",
        lambda s: beam(s, simple(s), load(s, s.w, start=s.L, end=s.L + s.a), length=s.L + s.a),
        lambda s: {
            R(0): -s.w * s.a**2 / (2 * s.L),
            R(1): s.w * s.a * (2 * s.L + s.a) / (2 * s.L),
            w(s.L + s.a): s.w * s.a**3 * (4 * s.L + 3 * s.a) / (24 * s.EI),
        },
    ),
    Formulas(
        "overhang, force at its end",
        "AISC 26",
        lambda s: beam(s, simple(s), force(s.L + s.a, s.P), length=s.L + s.a),
        lambda s: {
            R(0): -s.P * s.a / s.L,
            M(s.L): -s.P * s.a,
            w(s.L + s.a): s.P * s.a**2 * (s.L + s.a) / (3 * s.EI),
        },
    ),
    Formulas(
        "overhang, uniform load between the supports",
        "AISC 27",
        lambda s: beam(s, simple(s), load(s, s.w), length=s.L + s.a),
        lambda s: {w(s.L + s.a): -s.w * s.L**3 * s.a / (24 * s.EI), M(s.L): 0 * s.w},
    ),
    Formulas(
        "two spans, uniform load on the left one",
        "AISC 29",
        lambda s: beam(s, two_spans(s), load(s, s.w), length=2 * s.L),
        lambda s: {
            R(0): 7 * s.w * s.L / 16,
            R(1): 5 * s.w * s.L / 8,
            R(2): -s.w * s.L / 16,
            M(s.L): -s.w * s.L**2 / 16,
        },
    ),
    Formulas(
        "two spans, force in the middle of the left one",
        "AISC 30",
        lambda s: beam(s, two_spans(s), force(s.L / 2, s.P), length=2 * s.L),
        lambda s: {R(0): 13 * s.P / 32, R(1): 11 * s.P / 16, R(2): -3 * s.P / 32},
    ),
    Formulas(
        "two spans, force anywhere on the left one",
        "AISC 31",
        lambda s: beam(s, two_spans(s), force(s.a, s.P), length=2 * s.L),
        lambda s: {
            R(0): s.P * s.b * (4 * s.L**2 - s.a * (s.L + s.a)) / (4 * s.L**3),
            R(1): s.P * s.a * (2 * s.L**2 + s.b * (s.L + s.a)) / (2 * s.L**3),
            R(2): -s.P * s.a * s.b * (s.L + s.a) / (4 * s.L**3),
            M(s.L): -s.P * s.a * s.b * (s.L + s.a) / (4 * s.L**2),
        },
    ),
    Formulas(
        "two spans, the middle support settles",
        "3EIΔ/L²",
        lambda s: beam(s, (at(0 * s.L), Held(s.L, settles=s.D), at(2 * s.L)), length=2 * s.L),
        lambda s: {M(s.L): 3 * s.EI * s.D / s.L**2, R(1): -6 * s.EI * s.D / s.L**3},
    ),
    Formulas(
        "two spans on a spring in the middle, uniform load",
        "virtual work: 5wL/4 over 1 + 6EI/(kL³)",
        lambda s: beam(
            s, (at(0 * s.L), Held(s.L, s.k), at(2 * s.L)), load(s, s.w, end=2 * s.L), length=2 * s.L
        ),
        lambda s: {R(1): 5 * s.w * s.L / 4 / (1 + 6 * s.EI / (s.k * s.L**3))},
    ),
    Formulas(
        "a spring that settles",
        "virtual work: Δ over the flexibilities of spring and beam",
        lambda s: beam(s, (at(0 * s.L), Held(s.L, s.k, settles=s.D), at(2 * s.L)), length=2 * s.L),
        lambda s: {R(1): -s.D / (1 / s.k + s.L**3 / (6 * s.EI))},
    ),
    Formulas(
        "cantilever on a tip spring, uniform load",
        "virtual work: 3wL/8 over 1 + 3EI/(kL³)",
        lambda s: beam(s, (wall(0 * s.L), Held(s.L, s.k)), load(s, s.w)),
        lambda s: {R(1): 3 * s.w * s.L / 8 / (1 + 3 * s.EI / (s.k * s.L**3))},
    ),
    Formulas(
        "simple span on springs, force anywhere",
        "statics: the supports sink by R/k",
        lambda s: beam(s, (Held(0 * s.L, s.k), Held(s.L, 2 * s.k)), force(s.a, s.P)),
        lambda s: {
            w(s.a): s.P * s.a**2 * s.b**2 / (3 * s.EI * s.L)
            + s.P * s.b**2 / (s.L**2 * s.k)
            + s.P * s.a**2 / (2 * s.L**2 * s.k)
        },
    ),
    Formulas(
        "a wall that turns, tip load",
        "statics: the section turns by PL/K",
        lambda s: beam(s, (Held(0 * s.L, RIGID, s.K),), force(s.L, s.P)),
        lambda s: {
            turn(0 * s.L): s.P * s.L / s.K,
            w(s.L): s.P * s.L**3 / (3 * s.EI) + s.P * s.L**2 / s.K,
        },
    ),
    Formulas(
        "a wall that sinks and turns, tip load",
        "statics",
        lambda s: beam(s, (Held(0 * s.L, s.k, s.K),), force(s.L, s.P)),
        lambda s: {w(s.L): s.P * s.L**3 / (3 * s.EI) + s.P * s.L**2 / s.K + s.P / s.k},
    ),
    Formulas(
        "ends held by equal rotational springs, uniform load",
        "virtual work: wL²/12 over 1 + 2EI/(KL)",
        lambda s: beam(s, (Held(0 * s.L, RIGID, s.K), Held(s.L, RIGID, s.K)), load(s, s.w)),
        lambda s: {
            MR(0): s.w * s.L**2 / 12 / (1 + 2 * s.EI / (s.K * s.L)),
            MR(1): -s.w * s.L**2 / 12 / (1 + 2 * s.EI / (s.K * s.L)),
        },
    ),
    Formulas(
        "one end held by a rotational spring, uniform load",
        "virtual work: wL²/8 over 1 + 3EI/(KL)",
        lambda s: beam(s, (Held(0 * s.L, RIGID, s.K), at(s.L)), load(s, s.w)),
        lambda s: {MR(0): s.w * s.L**2 / 8 / (1 + 3 * s.EI / (s.K * s.L))},
    ),
    Formulas(
        "simple, free curvature on a stretch at the right",
        "Roark 6e: it only bows",
        lambda s: beam(s, simple(s), Action("curvature", s.a, s.t, s.L)),
        lambda s: {
            M(s.a): 0 * s.t,
            w(s.a): s.t * s.a * s.b**2 / (2 * s.L),
            turn(s.L): -s.t * s.b * (s.L + s.a) / (2 * s.L),
        },
    ),
    Formulas(
        "prop at the left, free curvature on a stretch at the wall",
        "Roark 6c",
        lambda s: beam(s, (at(0 * s.L), wall(s.L)), Action("curvature", s.a, s.t, s.L)),
        lambda s: {R(0): -3 * s.EI * s.t * (s.L**2 - s.a**2) / (2 * s.L**3)},
    ),
    Formulas(
        "fixed ends, free curvature on a stretch at the right",
        "Roark 6d",
        lambda s: beam(s, clamped(s), Action("curvature", s.a, s.t, s.L)),
        lambda s: {
            R(0): -6 * s.EI * s.t * s.a * s.b / s.L**3,
            M(0 * s.L): s.EI * s.t * s.b * (3 * s.a - s.L) / s.L**2,
        },
    ),
    Formulas(
        "cantilever of two stiffnesses, tip load",
        "virtual work; three times as stiff from the wall to a",
        lambda s: Chain(
            (Piece(s.a, ((1 / (3 * s.EI),),)), Piece(s.L, ((1 / s.EI,),))),
            (wall(0 * s.L),),
            (force(s.L, s.P),),
        ),
        lambda s: {w(s.L): s.P * ((s.L**3 - s.b**3) / 3 + s.b**3) / (3 * s.EI)},
    ),
    Formulas(
        "simple span of three stretches, force in the middle",
        "virtual work; five times as stiff but for the outer eighths",
        lambda s: Chain(
            (
                Piece(s.L / 8, ((1 / s.EI,),)),
                Piece(7 * s.L / 8, ((1 / (5 * s.EI),),)),
                Piece(s.L, ((1 / s.EI,),)),
            ),
            simple(s),
            (force(s.L / 2, s.P),),
        ),
        lambda s: {w(s.L / 2): s.P * ((s.L / 8) ** 3 + ((s.L / 2) ** 3 - (s.L / 8) ** 3) / 5) / (6 * s.EI)},
    ),
    Formulas(
        "propped cantilever of two stiffnesses, uniform load",
        "virtual work; twice as stiff in the half at the wall",
        lambda s: Chain(
            (Piece(s.L / 2, ((1 / (2 * s.EI),),)), Piece(s.L, ((1 / s.EI,),))),
            propped(s),
            (load(s, s.w),),
        ),
        # ∫x³ and ∫x² from the prop: (L⁴/8)(1/16 + 15/32) over (L³/3)(1/8 + 7/16)
        lambda s: {R(1): s.w * s.L * 17 / 48},
    ),
    Formulas(
        "Gerber beam: spans of L, a hinge a beyond the middle support, uniform load",
        "statics",
        lambda s: Chain(
            (Piece(2 * s.L, ((1 / s.EI,),)),), two_spans(s), (load(s, s.w, end=2 * s.L),), (s.L + s.a,)
        ),
        lambda s: {
            R(2): s.w * s.b / 2,
            M(s.L + s.a): 0 * s.w,
            M(s.L): -s.w * s.L * s.a / 2,
            R(0): s.w * s.L / 2 - s.w * s.a / 2,
        },
    ),
    Formulas(
        "Gerber beam: a wall, a hinge at a, a roller",
        "statics, and the tip of a cantilever",
        lambda s: Chain((Piece(s.L, ((1 / s.EI,),)),), propped(s), (load(s, s.w),), (s.a,)),
        lambda s: {
            R(1): s.w * s.b / 2,
            MR(0): s.w * s.b * s.a / 2 + s.w * s.a**2 / 2,
            w(s.a): s.w * s.b * s.a**3 / (6 * s.EI) + s.w * s.a**4 / (8 * s.EI),
        },
    ),
    Formulas(
        "Gerber beam: the outer support settles",
        "kinematics: the hung part turns, and nothing bends",
        lambda s: Chain(
            (Piece(2 * s.L, ((1 / s.EI,),)),),
            (at(0 * s.L), at(s.L), Held(2 * s.L, settles=s.D)),
            (),
            (s.L + s.a,),
        ),
        lambda s: {M(s.L): 0 * s.D, w(2 * s.L - s.b / 2): s.D / 2, R(2): 0 * s.D},
    ),
    Formulas(
        "with shear: simple, uniform load",
        "Timoshenko: wx(L - x)/(2S) more",
        lambda s: Chain((Piece(s.L, ((1 / s.EI,),), (1 / s.S,)),), simple(s), (load(s, s.w),)),
        lambda s: {
            w(s.L / 2): 5 * s.w * s.L**4 / (384 * s.EI) + s.w * s.L**2 / (8 * s.S),
            turn(0 * s.L): s.w * s.L**3 / (24 * s.EI),
        },
    ),
    Formulas(
        "with shear: propped, uniform load",
        "virtual work: 3wL/8 (1 + 4EI/(SL²)) over 1 + 3EI/(SL²)",
        lambda s: Chain((Piece(s.L, ((1 / s.EI,),), (1 / s.S,)),), propped(s), (load(s, s.w),)),
        lambda s: {
            R(1): 3 * s.w * s.L / 8 * (1 + 4 * s.EI / (s.S * s.L**2)) / (1 + 3 * s.EI / (s.S * s.L**2))
        },
    ),
    Formulas(
        "with shear: fixed ends, the right one settles",
        "Przemieniecki, Theory of Matrix Structural Analysis, 5.6: 12EI/(L³(1 + Φ)), Φ = 12EI/(SL²)",
        lambda s: Chain(
            (Piece(s.L, ((1 / s.EI,),), (1 / s.S,)),), (wall(0 * s.L), wall(s.L, settles=s.D)), ()
        ),
        lambda s: {R(1): -12 * s.EI * s.D / s.L**3 / (1 + 12 * s.EI / (s.S * s.L**2))},
    ),
)

PEAKS: tuple[Peak, ...] = (
    Peak(
        "simple, load rising from zero to w",
        "AISC 2: 2W L/(9√3)",
        lambda s: beam(s, simple(s), load(s, 0 * s.w, to=s.w)),
        "M",
        lambda s: s.w * s.L**2 / (9 * s.root(3)),
        lambda s: s.L / s.root(3),
    ),
    Peak(
        "simple, uniform load on a stretch at the left",
        "AISC 5: R²/(2w)",
        lambda s: beam(s, simple(s), load(s, s.w, end=s.a)),
        "M",
        lambda s: (s.w * s.a * (2 * s.L - s.a) / (2 * s.L)) ** 2 / (2 * s.w),
        lambda s: s.a * (2 * s.L - s.a) / (2 * s.L),
    ),
    Peak(
        "simple, force anywhere",
        "AISC 8, seen from the other end",
        lambda s: beam(s, simple(s), force(s.a, s.P)),
        "w",
        lambda s: s.P * s.a * (s.L**2 - s.a**2) * s.root((s.L**2 - s.a**2) / 3) / (9 * s.EI * s.L),
        lambda s: s.L - s.root((s.L**2 - s.a**2) / 3),
    ),
    Peak(
        "propped, uniform load",
        "AISC 12: at L(1 + √33)/16 from the prop",
        lambda s: beam(s, propped(s), load(s, s.w)),
        "w",
        lambda s: s.w * s.L**4 * (39 + 55 * s.root(33)) / (65536 * s.EI),
        lambda s: s.L - s.L * (1 + s.root(33)) / 16,
    ),
    Peak(
        "propped, force in the middle",
        "AISC 13: PL³/(48√5 EI) at L/√5 from the prop",
        lambda s: beam(s, propped(s), force(s.L / 2, s.P)),
        "w",
        lambda s: s.P * s.L**3 / (48 * s.root(5) * s.EI),
        lambda s: s.L - s.L / s.root(5),
    ),
    Peak(
        "fixed ends, force anywhere",
        "AISC 17, b > a: 2Pb³a²/(3EI(3b + a)²)",
        lambda s: beam(s, clamped(s), force(s.a, s.P)),
        "w",
        lambda s: 2 * s.P * s.b**3 * s.a**2 / (3 * s.EI * (3 * s.b + s.a) ** 2),
        lambda s: s.L - 2 * s.b * s.L / (3 * s.b + s.a),
    ),
    Peak(
        "overhang, upwards between the supports, force at its end",
        "AISC 26: PaL²/(9√3 EI) at L/√3",
        lambda s: beam(s, simple(s), force(s.L + s.a, -s.P), length=s.L + s.a),
        "w",
        lambda s: s.P * s.a * s.L**2 / (9 * s.root(3) * s.EI),
        lambda s: s.L / s.root(3),
    ),
    Peak(
        "two spans, uniform load on the left one",
        "AISC 29: 49wL²/512 at 7L/16",
        lambda s: beam(s, two_spans(s), load(s, s.w), length=2 * s.L),
        "M",
        lambda s: 49 * s.w * s.L**2 / 512,
        lambda s: 7 * s.L / 16,
    ),
)
