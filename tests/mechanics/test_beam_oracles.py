"""Random beams against two oracles written here: singularity functions, and scipy's collocation solver.

The beams have one plane or two that are coupled, walls, pins, springs and rotational springs, settlements,
hinges, overhangs, steps of stiffness, shear deformation, free curvatures, and loads of every kind.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import replace
from decimal import Decimal, localcontext
from itertools import pairwise

import numpy as np
import pytest
from scipy.integrate import solve_bvp

from calcgen.mechanics.arrays import FloatArray
from calcgen.mechanics.beam import PLANES, CaseSolution, Quantity, solve
from calcgen.mechanics.beam.results import Side
from tests.exact.chains import loads_of, model_of, supports_of
from tests.exact.singularity import RIGID, Action, Chain, Held, Piece, in_digits, solved

KINDS = ("force", "couple", "load", "moments", "curvature")
QUANTITIES = {"w": "w", "θ": "rotation", "M": "M", "V": "V"}


def random_chain(seed: int) -> Chain:
    """Return a beam that stands: a hinge lies in a span whose left part stands by itself."""
    rng = np.random.default_rng(seed)
    planes = int(rng.integers(1, 3))
    spans = rng.uniform(1.0, 8.0, int(rng.integers(1, 5)))
    left, right = (float(rng.choice([0.0, 1.3])) for _ in range(2))
    places = left + np.concatenate([[0.0], np.cumsum(spans)])
    length = float(places[-1]) + right
    walled = left == 0.0 and rng.random() < 0.5
    held = [
        _held(rng, float(x), plane, walled and i == 0)
        for i, x in enumerate(places)
        for plane in range(planes)
    ]
    hinges = tuple(
        float(a + rng.uniform(0.2, 0.8) * (b - a))
        for i, (a, b) in enumerate(pairwise(places))
        if (i > 0 or walled) and rng.random() < 0.4
    )
    if (
        hinges
    ):  # a rotation that is held beyond a hinge would not harm, but one spring at each support is enough
        held = [h if h.x == 0.0 else replace(h, rotation=None) for h in held]
    steps = sorted(rng.uniform(0.05, 0.95, int(rng.integers(0, 3))) * length)
    pieces = tuple(_piece(rng, float(end), planes) for end in (*steps, length))
    chain = Chain(pieces, tuple(held), (), hinges)
    return replace(chain, actions=random_actions(rng, chain))


def random_actions(rng: np.random.Generator, chain: Chain) -> tuple[Action, ...]:
    """Return one to five loads of any kind, anywhere on the beam."""
    length, planes = chain.pieces[-1].end, len(chain.pieces[0].flexibility)
    return tuple(_action(rng, length, planes) for _ in range(int(rng.integers(1, 6))))


def _held(rng: np.random.Generator, x: float, plane: int, wall: bool) -> Held:
    w = RIGID if wall or rng.random() < 0.6 else float(10 ** rng.uniform(4.5, 7.0))
    rotations = [None, None, None, RIGID, float(10 ** rng.uniform(4.5, 7.0))]
    rotation = RIGID if wall else rotations[int(rng.integers(5))]
    settles = float(rng.choice([0.0, 0.0, rng.uniform(-0.01, 0.01)]))
    return Held(x, w, rotation, plane, settles)


def _piece(rng: np.random.Generator, end: float, planes: int) -> Piece:
    v, lat = 10.0 ** rng.uniform(6.0, 7.5, 2)
    coupling = float(rng.uniform(-0.8, 0.8) * np.sqrt(v * lat))
    B = [[float(v), coupling], [coupling, float(lat)]] if planes == 2 else [[float(v)]]
    shear = [float(s) for s in 1.0 / 10.0 ** rng.uniform(5.5, 7.5, planes)]
    F = np.linalg.inv(np.array(B))
    return Piece(end, F.tolist(), shear if rng.random() < 0.5 else [0.0] * planes)


def _action(rng: np.random.Generator, length: float, planes: int) -> Action:
    kind = KINDS[int(rng.integers(len(KINDS)))]
    start, end = sorted(rng.uniform(0.0, 1.0, 2) * length)
    size = 1e-3 if kind == "curvature" else 1e4
    first, last = rng.uniform(-size, size, 2)
    plane = int(rng.integers(planes))
    if kind in ("force", "couple"):
        return Action(kind, float(start), float(first), plane=plane)  # type: ignore[arg-type]
    value_end = None if kind == "curvature" else float(last)
    return Action(kind, float(start), float(first), float(end), value_end, plane)  # type: ignore[arg-type]


def places_of(chain: Chain) -> list[float]:
    """Return where something acts or changes."""
    found = {0.0, *(p.end for p in chain.pieces), *(h.x for h in chain.held), *chain.hinges}
    for action in chain.actions:
        found |= {action.start} if action.end is None else {action.start, action.end}
    return sorted(found)


def of_program(solution: CaseSolution, symbol: str, plane: int, x: list[float], side: Side) -> FloatArray:
    name: Quantity = QUANTITIES[symbol] + ("_lat" if plane else "")  # type: ignore[assignment]
    return solution.values(name, np.array(x), side)


def assert_alike(
    found: dict[tuple[str, int], FloatArray],
    expected: dict[tuple[str, int], FloatArray],
    length: float,
    part: float,
) -> None:
    """Compare with a part of the largest value of each quantity in all planes; V counts as M over the length.

    The planes are one system, and rounding of the stronger is rounding of both.
    """
    size = {
        symbol: max(float(np.abs(values).max()) for (s, _), values in expected.items() if s == symbol)
        for symbol in QUANTITIES
    }
    size["V"] = max(size["V"], size["M"] / length)
    for (symbol, plane), values in expected.items():
        off = float(np.abs(found[symbol, plane] - values).max())
        assert off <= part * size[symbol], (symbol, PLANES[plane], off / size[symbol])


@pytest.mark.parametrize(
    "seed", [*range(30), *(pytest.param(seed, marks=pytest.mark.slow) for seed in range(1000, 1200))]
)
def test_against_singularity_functions(seed: int) -> None:
    chain = random_chain(seed)
    length = chain.pieces[-1].end
    solution = solve(model_of(chain), {"case": loads_of(chain)})["case"]
    planes = range(len(chain.pieces[0].flexibility))
    at = [*places_of(chain), *np.linspace(0.0, length, 12)[1:-1]]
    _, numbers = supports_of(chain)
    with localcontext(prec=50):
        exact = solved(in_digits(chain), one=Decimal(1))
        for side in ("left", "right"):
            x = [a for a in at if (a > 0.0 if side == "left" else a < length)]
            expected = {
                (symbol, p): np.array([float(exact.at(symbol, Decimal(a), p, side)) for a in x])
                for symbol in QUANTITIES
                for p in planes
            }
            found = {(symbol, p): of_program(solution, symbol, p, x, side) for symbol, p in expected}
            assert_alike(found, expected, length, 1e-9)
            force = max(float(np.abs(expected["V", p]).max()) for p in planes)
            couple = max(float(np.abs(expected["M", p]).max()) for p in planes)
        for i, (held, number) in enumerate(zip(chain.held, numbers, strict=True)):
            own = solution.reactions[number]
            pair = (own.force, own.moment) if held.plane == 0 else (own.force_lat, own.moment_lat)
            scale = max(force, couple / length)
            assert pair[0] == pytest.approx(float(exact.reaction(i)), abs=1e-9 * scale)
            assert pair[1] == pytest.approx(float(exact.restraint(i)), abs=1e-9 * couple)


class Collocation:
    """A chain as one boundary value problem: each element is stretched to 0 … 1, and all are solved at once.

    The state of an element and plane is w, θ, M and V, in units of the beam's length, a force and a
    stiffness, so that the numbers are near 1.
    """

    def __init__(self, chain: Chain) -> None:
        self.chain = chain
        self.planes = len(chain.pieces[0].flexibility)
        self.nodes = np.array(places_of(chain))
        self.h = np.diff(self.nodes)
        self.length = float(self.nodes[-1])
        self.force = 1e4
        self.moment = self.force * self.length
        self.stiffness = 1e7
        self.w = self.moment * self.length**2 / self.stiffness
        self.unit = {"w": self.w, "θ": self.w / self.length, "M": self.moment, "V": self.force}
        middles = (self.nodes[:-1] + self.nodes[1:]) / 2
        ends = [piece.end for piece in chain.pieces]
        self.pieces = [chain.pieces[int(np.searchsorted(ends, x))] for x in middles]
        self.size = 4 * self.planes
        self.matrix = np.zeros((len(self.h), self.size, self.size))
        self.given = np.zeros((len(self.h), self.size, 2))  # at the start and the end of each element
        for e, (piece, h) in enumerate(zip(self.pieces, self.h, strict=True)):
            self._element(e, piece, h, middles[e])

    def _element(self, e: int, piece: Piece, h: float, middle: float) -> None:
        A, g, unit = self.matrix[e], self.given[e], self.unit
        for p in range(self.planes):
            w, turn, M, V = range(4 * p, 4 * p + 4)
            A[w, turn] = h * unit["θ"] / unit["w"]
            A[w, V] = h * piece.shear[p] * unit["V"] / unit["w"]
            for q in range(self.planes):
                A[turn, 4 * q + 2] = -h * piece.flexibility[p][q] * unit["M"] / unit["θ"]
            A[M, V] = h * unit["V"] / unit["M"]
        rows = {"load": (3, -1.0, "V"), "moments": (2, 1.0, "M"), "curvature": (1, -1.0, "θ")}
        for action in self.chain.actions:
            if action.kind not in rows or not action.start < middle < action.end:
                continue
            last = action.value if action.value_end is None else action.value_end
            x = self.nodes[e : e + 2]
            values = action.value + (last - action.value) * (x - action.start) / (action.end - action.start)
            row, sign, symbol = rows[action.kind]
            g[4 * action.plane + row] += sign * h * values / unit[symbol]

    def rates(self, t: FloatArray, y: FloatArray) -> FloatArray:
        states = y.reshape(len(self.h), self.size, -1)
        given = self.given[:, :, :1] * (1 - t) + self.given[:, :, 1:] * t
        return np.asarray((self.matrix @ states + given).reshape(y.shape))

    def jacobian(self, t: FloatArray, _: FloatArray) -> FloatArray:
        n = len(self.h) * self.size
        whole = np.zeros((n, n))
        for e in range(len(self.h)):
            own = slice(e * self.size, (e + 1) * self.size)
            whole[own, own] = self.matrix[e]
        return np.repeat(whole[:, :, None], len(t), axis=2)

    def joints(self) -> tuple[FloatArray, FloatArray, FloatArray]:
        """Return the conditions at the nodes: rows over the states at t = 0 and at t = 1, and right sides."""
        n = len(self.h) * self.size
        at_start, at_end, known = [], [], []

        def condition(node: int, p: int, terms: dict[tuple[str, int], float], right: float = 0.0) -> None:
            """Terms are of w, θ, M or V beside the node, to its left (-1) or right (+1)."""
            start, end = np.zeros(n), np.zeros(n)
            for (name, side), factor in terms.items():
                e = node if side > 0 else node - 1
                if 0 <= e < len(self.h):
                    column = e * self.size + 4 * p + list(self.unit).index(name)
                    (start if side > 0 else end)[column] += factor
            at_start.append(start)
            at_end.append(end)
            known.append(right)

        for node, x in enumerate(self.nodes):
            for p in range(self.planes):
                self._joint(node, float(x), p, condition)
        return np.array(at_start), np.array(at_end), np.array(known)

    def _joint(self, node: int, x: float, p: int, condition: Callable[..., None]) -> None:
        """Four conditions inside, two at an end: continuity, or what a support or hinge puts in its place."""
        unit, inner = self.unit, 0 < node < len(self.h)
        near = 1 if node == 0 else -1
        held = next((h for h in self.chain.held if h.x == x and h.plane == p), None)
        hinged = x in self.chain.hinges
        force = sum(a.value for a in self.chain.actions if (a.kind, a.start, a.plane) == ("force", x, p))
        couple = sum(a.value for a in self.chain.actions if (a.kind, a.start, a.plane) == ("couple", x, p))
        if inner:
            condition(node, p, {("w", 1): 1.0, ("w", -1): -1.0})
        if held is not None and held.w == RIGID:
            condition(node, p, {("w", near): 1.0}, held.settles / unit["w"])
        else:  # V falls by the load and rises by the reaction k (w - settlement)
            k = 0.0 if held is None or held.w is None else held.w
            terms = {("V", 1): 1.0, ("V", -1): -1.0, ("w", near): -k * unit["w"] / unit["V"]}
            settles = 0.0 if held is None else held.settles
            condition(node, p, terms, (-force - k * settles) / unit["V"])
        if hinged:
            condition(node, p, {("M", 1): 1.0})
            condition(node, p, {("M", -1): 1.0})
            return
        if inner:
            condition(node, p, {("θ", 1): 1.0, ("θ", -1): -1.0})
        if held is not None and held.rotation == RIGID:
            condition(node, p, {("θ", near): 1.0})
        else:  # M rises by the couple and falls by what the spring takes
            k = 0.0 if held is None or held.rotation is None else held.rotation
            terms = {("M", 1): 1.0, ("M", -1): -1.0, ("θ", near): k * unit["θ"] / unit["M"]}
            condition(node, p, terms, couple / unit["M"])

    def solve(self) -> dict[tuple[str, int, int], FloatArray]:
        """Return w, θ, M and V of each plane at the quarter points of each element, by element."""
        start, end, known = self.joints()
        t = np.linspace(0.0, 1.0, 9)
        found = solve_bvp(
            self.rates,
            lambda a, b: start @ a + end @ b - known,
            t,
            np.zeros((len(known), len(t))),
            fun_jac=self.jacobian,
            bc_jac=lambda *_: (start, end),
            tol=1e-8,
            max_nodes=2000,
        )
        assert found.success
        states = found.sol(QUARTERS).reshape(len(self.h), self.planes, 4, len(QUARTERS))
        return {
            (symbol, p, e): states[e, p, i] * self.unit[symbol]
            for i, symbol in enumerate(self.unit)
            for p in range(self.planes)
            for e in range(len(self.h))
        }


QUARTERS = np.array([0.25, 0.5, 0.75])


@pytest.mark.parametrize(
    "seed", [*range(100, 106), *(pytest.param(seed, marks=pytest.mark.slow) for seed in range(106, 130))]
)
def test_against_a_collocation_solver(seed: int) -> None:
    chain = random_chain(seed)
    solution = solve(model_of(chain), {"case": loads_of(chain)})["case"]
    problem = Collocation(chain)
    by_element = problem.solve()
    x = [float(a + q * h) for a, h in zip(problem.nodes[:-1], problem.h, strict=True) for q in QUARTERS]
    expected = {
        (symbol, p): np.concatenate([by_element[symbol, p, e] for e in range(len(problem.h))])
        for symbol in QUANTITIES
        for p in range(problem.planes)
    }
    found = {(symbol, p): of_program(solution, symbol, p, x, "right") for symbol, p in expected}
    assert_alike(found, expected, problem.length, 1e-6)
