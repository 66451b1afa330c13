"""Random beams as an engineer types them, against singularity functions: both planes, SI and US units."""

from __future__ import annotations

from dataclasses import dataclass, field
from decimal import Decimal, localcontext
from itertools import pairwise

import numpy as np
import pytest

from calcgen.evaluation.results.calc import EvaluatedCalc
from calcgen.quantities.measure import Measure
from tests.evaluation.helpers import evaluated, fence
from tests.exact.singularity import RIGID, Action, Chain, Held, Piece, Solved, in_digits, solved

FT, LBF = 0.3048, 4.4482216152605
EXPANSION = 1.2e-5  # 1/K
E = 11e9  # Pa
FACTORS = {"A": 1.5, "B": -0.7, "S": 1.0}


@dataclass
class Typed:
    """A beam while it is drawn: the lines that are typed, and the same in SI for the oracle."""

    rng: np.random.Generator
    us: bool
    sections: list[str] = field(default_factory=list)
    lines: list[str] = field(default_factory=list)
    pieces: list[Piece] = field(default_factory=list)
    depths: list[float] = field(default_factory=list)
    held: list[Held] = field(default_factory=list)
    actions: list[Action] = field(default_factory=list)
    hinges: list[float] = field(default_factory=list)

    def length(self, x: float) -> str:
        return f"{x / FT!r} ft" if self.us else f"{x * 1e3!r} mm"

    def force(self, value: float, per: str = "") -> str:
        """Return a force as typed; `per` is 'm' for a force by length, and '·m' for a couple."""
        number = value / LBF
        if self.us:
            number *= {"": 1.0, "/m": FT, "·m": 1 / FT}[per]
            unit = {"": "lbf", "/m": "plf", "·m": "lbf-ft"}[per]
            return f"{number!r} {unit}"
        return f"{value / 1e3!r} kN{per}"

    def add_stretches(self, ends: list[float]) -> None:
        """Parallelograms that lean: ∫xy dA = b h² s/12, s the shift of the top."""
        start = 0.0
        for i, end in enumerate(ends):
            b, h, s = (float(v) for v in self.rng.uniform((0.05, 0.1, -0.2), (0.3, 0.5, 0.2)))
            corners = [(-b - s, -h), (b - s, -h), (b + s, h), (-b + s, h)]
            points = ", ".join(f"({self.length(x / 2)}, {self.length(y / 2)})" for x, y in corners)
            self.sections.append(fence(f"section p{i}", f"shape = polygon({points})"))
            where = f" from {self.length(start)} to {self.length(end)}" if len(ends) > 1 else ""
            self.lines.append(f"section = p{i}{where}")
            I_h, I_v, I_hv = b * h**3 / 12, b * h * (b**2 + s**2) / 12, b * h**2 * s / 12
            # With σ = E (κ d + κ_lat r), d down and r right: M = ∫σ d dA, M_lat = ∫σ r dA.
            F = np.linalg.inv(E * np.array([[I_h, -I_hv], [-I_hv, I_v]]))
            self.pieces.append(Piece(end, F.tolist()))
            self.depths.append(h)
            start = end

    def add_support(self, x: float, plane: int, *, wall: bool) -> None:
        rng = self.rng
        k, turning = (float(v) for v in 10 ** rng.uniform(5.0, 7.0, 2))
        kind = (
            "fixed"
            if wall
            else str(rng.choice(["pin", "roller", "spring", "pin rotation", "spring rotation"]))
        )
        stiffness = f" {self.force(k, '/m')}" if kind.startswith("spring") else ""
        rotation = f" rotation {self.force(turning, '·m')}" if kind.endswith("rotation") else ""
        settles = float(rng.choice([0.0, rng.uniform(-0.01, 0.01)]))
        text = (
            f"support {'lateral ' if plane else ''}{kind.split()[0]}{stiffness}{rotation} at {self.length(x)}"
        )
        self.lines.append(text + (f" settles {self.length(settles)} in S" if settles else ""))
        self.held.append(
            Held(
                x,
                k if stiffness else RIGID,
                RIGID if wall else turning if rotation else None,
                plane,
                FACTORS["S"] * settles,
            )
        )

    def add_load(self, length: float) -> None:
        rng = self.rng
        case, plane = str(rng.choice(["A", "B"])), int(rng.integers(2))
        start, end = (float(x) for x in sorted(rng.uniform(0.0, length, 2)))
        first, last = (float(v) for v in rng.uniform(-2e4, 2e4, 2))
        kind = str(rng.choice(["point", "moment", "uniform", "linear", "moments", "gradient"]))
        stretch = f"from {self.length(start)} to {self.length(end)}"
        factor = FACTORS[case]
        words = {
            "point": f"point {self.force(first)} at {self.length(start)}",
            "moment": f"moment {self.force(first, '·m')} at {self.length(start)}",
            "uniform": f"uniform {self.force(first, '/m')} {stretch}",
            "linear": f"linear {self.force(first, '/m')} to {self.force(last, '/m')} {stretch}",
            "moments": f"moment {self.force(first)} {stretch}",
            "gradient": f"gradient {first / 1e3!r} K {stretch}",
        }[kind]
        plane = 0 if kind == "gradient" else plane
        self.lines.append(f"load {case} {'lateral ' if plane else ''}{words}")
        if kind == "gradient":
            edges = [0.0, *(p.end for p in self.pieces)]
            for (a, b), h in zip(pairwise(edges), self.depths, strict=True):
                if max(a, start) < min(b, end):
                    bow = -EXPANSION * first / 1e3 / h
                    self.actions.append(Action("curvature", max(a, start), factor * bow, min(b, end)))
        elif kind in ("point", "moment"):
            word = "force" if kind == "point" else "couple"
            self.actions.append(Action(word, start, factor * first, plane=plane))  # type: ignore[arg-type]
        else:
            word = "moments" if kind == "moments" else "load"
            value_end = factor * (last if kind == "linear" else first)
            self.actions.append(Action(word, start, factor * first, end, value_end, plane))  # type: ignore[arg-type]


def typed(seed: int) -> Typed:
    """Draw a beam of one to three spans, with or without an overhang, a wall, hinges and steps."""
    rng = np.random.default_rng(seed)
    found = Typed(rng, us=seed % 2 == 1)
    places = np.concatenate([[0.0], np.cumsum(rng.uniform(2.0, 7.0, int(rng.integers(1, 4))))])
    length = float(places[-1]) + float(rng.choice([0.0, 1.5]))
    spans = [float(b - a) for a, b in pairwise(sorted({*map(float, places), length}))]
    found.lines += [f"span = {', '.join(found.length(s) for s in spans)}", f"E = {E!r} Pa"]
    found.lines += [f"expansion = {EXPANSION!r} 1/K"]
    length = sum(spans)
    found.add_stretches(
        [*sorted(float(x) for x in rng.uniform(0.1, 0.9, int(rng.integers(3))) * length), length]
    )
    walled = bool(rng.random() < 0.5)
    for i, x in enumerate(places):
        for plane in (0, 1):
            found.add_support(float(x), plane, wall=walled and i == 0)
    for i, (a, b) in enumerate(pairwise(places)):
        if (i > 0 or walled) and rng.random() < 0.4:
            found.hinges.append(float(a + rng.uniform(0.2, 0.8) * (b - a)))
    found.lines += [f"hinge at {found.length(x)}" for x in found.hinges]
    for _ in range(int(rng.integers(2, 6))):
        found.add_load(length)
    found.lines += ["load A point 0 kN at 0 m", "load B point 0 kN at 0 m"]
    return found


def exact(beam: Typed) -> Solved:
    """Return the oracle's solution in decimal numbers."""
    chain = Chain(tuple(beam.pieces), tuple(beam.held), tuple(beam.actions), tuple(beam.hinges))
    return solved(in_digits(chain), one=Decimal(1))


def si(calc: EvaluatedCalc, name: str) -> float:
    value = calc.values[name][0]
    assert isinstance(value, Measure)
    return value.si


@pytest.mark.parametrize(
    "seed", [*range(8), *(pytest.param(seed, marks=pytest.mark.slow) for seed in range(8, 60))]
)
def test_a_typed_beam(seed: int) -> None:
    beam = typed(seed)
    length = beam.pieces[-1].end
    terms = " + ".join(f"{factor!r}*{case}" for case, factor in FACTORS.items() if _used(beam, case))
    lines = [*beam.lines, f"combination U = {terms.replace('+ -', '- ')}"]
    x = [float(a) for a in beam.rng.uniform(0.0, length, 5)]
    x += [h.x for h in beam.held] + [a.start for a in beam.actions] + beam.hinges
    with localcontext(prec=40):
        oracle = exact(beam)
        expected: dict[str, tuple[str, float]] = {}
        for plane, suffix in enumerate(("", "_lat")):
            for a in sorted(set(x)):
                for symbol in ("M", "V", "w"):
                    sides = [float(oracle.at(symbol, Decimal(a), plane, s)) for s in ("left", "right")]
                    if a in (0.0, length):  # there is nothing beyond
                        sides = [sides[1 if a == 0.0 else 0]]
                    at = f"({beam.length(a)})"
                    expected[f"b.U.{symbol}_max{suffix}{at}"] = (symbol, max(sides))
                    expected[f"b.U.{symbol}_min{suffix}{at}"] = (symbol, min(sides))
            for i, held in enumerate(beam.held):
                if held.plane == plane:
                    expected[f"b.U.R_{i // 2 + 1}{suffix}"] = ("V", float(oracle.reaction(i)))
                    expected[f"b.U.M_R_{i // 2 + 1}{suffix}"] = ("M", float(oracle.restraint(i)))
                    expected[f"b.U.θ_{i // 2 + 1}{suffix}"] = (
                        "θ",
                        float(oracle.at("θ", Decimal(held.x), plane)),
                    )
    asked = fence("working", *(f"asked_{i} = {name}" for i, name in enumerate(expected)))
    (calc,) = evaluated(
        f"# T\n{''.join(beam.sections)}{fence('beam b', *lines)}{asked}",
        axes="american" if beam.us else "eurocode",
    )
    assert [d.message for d in calc.diagnostics if d.severity == "error"] == []
    assert [r for r in calc.second_route if not r.holds] == []
    size = {s: max(abs(v) for symbol, v in expected.values() if symbol == s) for s in ("M", "V", "w", "θ")}
    size["V"] = max(size["V"], size["M"] / length)
    for i, (name, (symbol, value)) in enumerate(expected.items()):
        assert si(calc, f"asked_{i}") == pytest.approx(value, rel=1e-9, abs=1e-9 * size[symbol]), name


def _used(beam: Typed, case: str) -> bool:
    return case != "S" or any(held.settles for held in beam.held)
