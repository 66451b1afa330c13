"""Beams by singularity functions: an oracle that shares nothing with the program but the signs.

Every quantity along a beam is a sum of Macaulay's brackets <x - a>ⁿ, zero to the left of a. Loads and
reactions give V, and then M = ∫(V + m), κ = F M + κ_0, θ = -∫κ, w = ∫(θ + V/GA_s) follow term by term;
where the stiffness changes at s, a bracket times the step <x - s>⁰ is expanded into brackets at the later of
the two places. Reactions, the rotations that hinges take and the start of the beam are the unknowns, and
what supports and hinges demand are as many linear equations.

The arithmetic is that of the numbers given: with `Decimal` it has as many digits as asked for, and with
elements of a field of rational functions (sympy) the result is a formula.
"""

from __future__ import annotations

from collections.abc import Callable, Iterable, Mapping, Sequence
from dataclasses import dataclass, field
from decimal import Decimal
from math import comb
from typing import Any, Literal, TypeAlias

Number: TypeAlias = Any  # what has + - * / with its like and with integers: Decimal, Fraction, FracElement
Size: TypeAlias = Callable[[Number], float]

RIGID = "rigid"
Stiffness: TypeAlias = Number
"""A number, `RIGID`, or None where nothing is held."""


@dataclass(frozen=True)
class Held:
    """What holds one plane of the beam at `x`: its deflection, its rotation, and how far it settles."""

    x: Number
    w: Stiffness = RIGID
    rotation: Stiffness = None
    plane: int = 0
    settles: Number = 0


@dataclass(frozen=True)
class Piece:
    """A stretch: its flexibility, κ = F M over the planes, that against shear, 1/GA_s, and its end."""

    end: Number
    flexibility: Sequence[Sequence[Number]]
    shear: Sequence[Number] = (0, 0)


@dataclass(frozen=True)
class Action:
    """A load of one plane: a force or couple at `start`, or what goes linearly from `start` to `end`."""

    kind: Literal["force", "couple", "load", "moments", "curvature"]
    start: Number
    value: Number
    end: Number = None
    value_end: Number = None
    plane: int = 0


@dataclass(frozen=True)
class Chain:
    """The beam, in one plane or two, from x = 0 to the end of its last piece."""

    pieces: tuple[Piece, ...]
    held: tuple[Held, ...]
    actions: tuple[Action, ...]
    hinges: tuple[Number, ...] = ()


def in_digits(chain: Chain) -> Chain:
    """Give the same beam in decimal numbers, which have the digits of the context that they are used in."""

    def m(x: Number) -> Number:
        return x if x is None or isinstance(x, str) else Decimal(x)

    return Chain(
        tuple(
            Piece(m(p.end), [[m(f) for f in row] for row in p.flexibility], [m(f) for f in p.shear])
            for p in chain.pieces
        ),
        tuple(Held(m(h.x), m(h.w), m(h.rotation), h.plane, m(h.settles)) for h in chain.held),
        tuple(
            Action(a.kind, m(a.start), m(a.value), m(a.end), m(a.value_end), a.plane) for a in chain.actions
        ),
        tuple(m(h) for h in chain.hinges),
    )


Row: TypeAlias = dict[str, Number]
"""A linear form: a factor of each unknown, and the constant under the name ''."""


@dataclass
class Brackets:
    """Σ factor·<x - a>ⁿ: a linear form for each place and power."""

    size: Size
    terms: dict[tuple[Number, int], Row] = field(default_factory=dict)

    def add(self, a: Number, n: int, row: Mapping[str, Number], factor: Number = 1) -> Brackets:
        """Add one bracket."""
        own = self.terms.setdefault((a, n), {})
        for name, value in row.items():
            own[name] = own.get(name, 0) + factor * value
        return self

    def plus(self, other: Brackets, factor: Number = 1) -> Brackets:
        """Add another sum."""
        for (a, n), row in other.terms.items():
            self.add(a, n, row, factor)
        return self

    def integral(self, sign: int = 1) -> Brackets:
        """Give ∫ from 0 to x."""
        found = Brackets(self.size)
        for (a, n), row in self.terms.items():
            found.add(a, n + 1, {name: value * sign / (n + 1) for name, value in row.items()})
        return found

    def beyond(self, s: Number) -> Brackets:
        """Give the sum times the step <x - s>⁰."""
        found = Brackets(self.size)
        for (a, n), row in self.terms.items():
            if self.size(a) >= self.size(s):
                found.add(a, n, row)
            else:  # (x - a)ⁿ = Σ over k of C(n, k) (s - a)ⁿ⁻ᵏ (x - s)ᵏ
                for k in range(n + 1):
                    found.add(s, k, row, comb(n, k) * (s - a) ** (n - k) if n > k else 1)
        return found

    def times(self, factors: Sequence[tuple[Number, Number]]) -> Brackets:
        """Give the sum times what is `factor` from each of the places on, up to the next."""
        found = Brackets(self.size)
        before = None
        for s, factor in factors:
            step = factor if before is None else factor - before
            found.plus(self.beyond(s), step)
            before = factor
        return found

    def at(self, x: Number, side: Literal["left", "right"] = "right") -> Row:
        """Give the linear form of the value at a place, just beside it."""
        found: Row = {}
        for (a, n), row in self.terms.items():
            distance = self.size(x) - self.size(a)
            if distance < 0 or (distance == 0 and (n > 0 or side == "left")):
                continue
            power = (x - a) ** n if n else 1
            for name, value in row.items():
                found[name] = found.get(name, 0) + power * value
        return found


@dataclass(frozen=True)
class Solved:
    """The results of a chain: w, θ, M and V of each plane, and the reactions by number in `held`."""

    lines: Mapping[tuple[str, int], Brackets]
    unknown: Mapping[str, Number]

    def at(
        self, quantity: str, x: Number, plane: int = 0, side: Literal["left", "right"] = "right"
    ) -> Number:
        """Give w, θ, M or V at a place."""
        row = self.lines[quantity, plane].at(x, side)
        return sum((self.unknown[name] * value for name, value in row.items()), 0 * self.unknown[""])

    def reaction(self, number: int) -> Number:
        """Give the force of a support, positive up."""
        return self.unknown.get(f"R{number}", 0)

    def restraint(self, number: int) -> Number:
        """Give the couple of a support, positive anticlockwise."""
        return self.unknown.get(f"K{number}", 0)


def solved(chain: Chain, size: Size = float, one: Number = 1) -> Solved:
    """Solve the chain; `size` gives the number by which places and pivots are ordered."""
    planes = range(len(chain.pieces[0].flexibility))
    lines: dict[tuple[str, int], Brackets] = {}
    start = 0 * one
    for p in planes:
        V, m = Brackets(size), Brackets(size)
        couples, free = Brackets(size), Brackets(size)
        for i, held in enumerate(chain.held):
            if held.plane == p and held.w is not None:
                V.add(held.x, 0, {f"R{i}": one})
            if held.plane == p and held.rotation is not None:
                couples.add(held.x, 0, {f"K{i}": -one})
        for action in (a for a in chain.actions if a.plane == p):
            match action.kind:
                case "force":
                    V.add(action.start, 0, {"": -action.value * one})
                case "couple":
                    couples.add(action.start, 0, {"": action.value * one})
                case "load":
                    V.plus(_spread(action, size, one).integral(), -1)
                case "moments":
                    m.plus(_spread(action, size, one))
                case "curvature":
                    free.plus(_spread(action, size, one))
        lines["V", p] = V
        lines["M", p] = Brackets(size).plus(V.integral()).plus(m.integral()).plus(couples)
        lines["κ_0", p] = free
    for p in planes:
        starts = [start, *(piece.end for piece in chain.pieces[:-1])]
        bent = Brackets(size).plus(lines["κ_0", p])
        for q in planes:
            factors = [(s, piece.flexibility[p][q]) for s, piece in zip(starts, chain.pieces, strict=True)]
            bent.plus(lines["M", q].times(factors))
        θ = bent.integral(-1).add(start, 0, {f"θ{p}": one})
        for h in chain.hinges:
            θ.add(h, 0, {f"h{chain.hinges.index(h)}.{p}": one})
        shear = [(s, piece.shear[p]) for s, piece in zip(starts, chain.pieces, strict=True)]
        slope = Brackets(size).plus(θ).plus(lines["V", p].times(shear))
        lines["θ", p] = θ
        lines["slope", p] = slope
        lines["w", p] = slope.integral().add(start, 0, {f"w{p}": one})
    return Solved(lines, _unknowns(list(_conditions(chain, lines)), size, one))


def _spread(action: Action, size: Size, one: Number) -> Brackets:
    """Give what goes linearly between two places, as brackets that begin at one and end at the other."""
    first = action.value * one
    last = first if action.value_end is None else action.value_end * one
    rise = (last - first) / (action.end - action.start)
    found = Brackets(size).add(action.start, 0, {"": first}).add(action.end, 0, {"": -last})
    return found.add(action.start, 1, {"": rise}).add(action.end, 1, {"": -rise})


def _conditions(chain: Chain, lines: Mapping[tuple[str, int], Brackets]) -> Iterable[Row]:
    """Give the linear forms that are zero: at supports, at hinges, and beyond the end."""
    end = chain.pieces[-1].end
    for p in range(len(chain.pieces[0].flexibility)):
        yield lines["V", p].at(end)
        yield lines["M", p].at(end)
        for h in chain.hinges:
            yield lines["M", p].at(h)
        for i, held in enumerate(chain.held):
            if held.plane != p:
                continue
            if held.w is not None:
                row = dict(lines["w", p].at(held.x))
                row[""] = row.get("", 0) - held.settles
                if held.w != RIGID:  # R = k (w - settlement)
                    row[f"R{i}"] = row.get(f"R{i}", 0) - 1 / held.w
                yield row
            if held.rotation is not None:
                row = dict(lines["θ", p].at(held.x))
                if held.rotation != RIGID:  # the section turns clockwise, the spring pushes back
                    row[f"K{i}"] = row.get(f"K{i}", 0) - 1 / held.rotation
                yield row


def _unknowns(rows: list[Row], size: Size, one: Number) -> dict[str, Number]:
    """Solve by elimination with the largest pivot."""
    names = sorted({name for row in rows for name in row if name})
    assert len(names) == len(rows), "as many conditions as unknowns"
    table = [[row.get(name, 0) * one for name in names] + [-row.get("", 0) * one] for row in rows]
    n = len(names)
    for j in range(n):
        best = max(range(j, n), key=lambda i: abs(size(table[i][j])))
        table[j], table[best] = table[best], table[j]
        pivot = table[j][j]
        assert pivot, "the beam is held"
        for i in range(j + 1, n):
            if table[i][j]:
                factor = table[i][j] / pivot
                table[i] = [a - factor * b for a, b in zip(table[i], table[j], strict=True)]
    found: list[Number] = [0] * n
    for i in range(n - 1, -1, -1):
        rest = table[i][n]
        for j in range(i + 1, n):
            rest -= table[i][j] * found[j]
        found[i] = rest / table[i][i]
    return {**dict(zip(names, found, strict=True)), "": one}
