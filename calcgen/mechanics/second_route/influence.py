"""Influence lines found again: unit loads on the beam, and what they do by the principle of least work.

Between supports, hinges and loads the moment runs straight, so its values beside these places, with the
forces of the supports, describe the beam whole. Of all that are in equilibrium with the load, those are right
whose strain energy is least (Castigliano, Menabrea); the multipliers of the conditions of equilibrium are the
deflections and rotations of the places. No stiffness, no cubic and no reciprocity enters, and no load stands
where one of the first route did. Signs are those of `calcgen.mechanics.beam`.
"""

from __future__ import annotations

from collections.abc import Sequence
from itertools import pairwise, product
from typing import Final

import numpy as np

from calcgen.mechanics.arrays import FloatArray
from calcgen.mechanics.beam import FREE, RIGID, BeamModel, Plane
from calcgen.mechanics.influence import InfluenceLine
from calcgen.mechanics.second_route.residual import Residual, relative
from calcgen.mechanics.sought import AtPlace, Sought

TOLERANCE: Final = 1e-8
"""Relative: far above rounding, far below an error of method."""
ROUNDING: Final = 1e-10
"""A smaller difference is rounding of this route, which loses five digits where a load is close, and none."""
AT: Final = (0.13, 0.38, 0.62, 0.87)
"""Places of the load in each interval: four fix the cubic that the line is there."""
MOST: Final = 240
"""Places of the load in intervals, at most; of more, as many are taken evenly along the beam."""
SHORT: Final = 1e-5
"""Part of the beam's length: no load stands in a shorter interval, and one so far beside what is sought."""
CANCELLED: Final = 1e-6
"""Part of the largest effect of the same kind anywhere; a line below it is what cancelling effects leave."""


def influence_residuals(
    model: BeamModel, lines: Sequence[tuple[Sought, Plane, InfluenceLine]]
) -> tuple[Residual, ...]:
    """Compare influence lines, each with what it is of and the plane of its load, with unit loads.

    A residual is the largest difference at any place of the load, over the largest ordinate; its `what` is
    the number of the line.
    """
    sought = sorted({s.x for s, _, _ in lines if isinstance(s, AtPlace)})
    loads = _places(model, sought)
    least = _LeastWork(model, tuple(_merged(model, [*_breaks(model), *sought, *loads])))
    planes = list(dict.fromkeys(plane for _, plane, _ in lines))
    states = {plane: least.states([(x, plane) for x in loads]) for plane in planes}
    found = []
    for number, (what, plane, line) in enumerate(lines):
        again, size = least.effect(states[plane], what)
        values = line.values(np.array(loads))
        scale = max(float(np.abs(values).max()), line.extremes().abs, CANCELLED * size)
        difference = again - values
        worst = float(difference[np.argmax(np.abs(difference))])
        if abs(worst) <= ROUNDING * scale:
            worst = 0.0
        found.append(
            Residual(
                str(number),
                relative(worst, scale),
                TOLERANCE,
                f"unit loads at {len(loads)} places, by least work, over the largest ordinate",
            )
        )
    return tuple(found)


def _breaks(model: BeamModel) -> list[float]:
    ends = [stretch.end for stretch in model.stretches]
    return [0.0, model.length, *ends, *model.hinges, *(support.x for support in model.supports)]


def _places(model: BeamModel, sought: Sequence[float]) -> list[float]:
    """Give the places of the load: inside each interval, and close beside what is sought."""
    step = SHORT * model.length
    cuts = _merged(model, [*_breaks(model), *sought])
    found = [a + part * (b - a) for a, b in pairwise(cuts) if b - a > step for part in AT]
    if len(found) > MOST:
        found = [found[i] for i in np.linspace(0, len(found) - 1, MOST).astype(int)]
    beside = [x + way * step for x in sought for way in (-1.0, 1.0)]
    apart = [x for x in beside if 0.0 < x < model.length and min(abs(x - cut) for cut in cuts) > 0.9 * step]
    return _merged(model, [*found, *apart])


def _merged(model: BeamModel, places: Sequence[float]) -> list[float]:
    """Give places in order, each once."""
    found: list[float] = []
    for x in sorted(min(max(x, 0.0), model.length) for x in places):
        if not found or not model.same(found[-1], x):
            found.append(x)
    return found


class _LeastWork:
    """A beam cut at `places`, ready for unit loads at any of them.

    Unknowns are numbered by name, place and plane: the moments "left" and "right" of a place, the "force" and
    the "couple" of a support; then, as multipliers, one for the "balance" of forces and one for the "turning"
    of couples at each place, and one for each "closed" hinge. Lengths are scaled by a span and energy by that
    of a unit force on it, so that all numbers are of like size.
    """

    def __init__(self, model: BeamModel, places: Sequence[float]) -> None:
        self.model, self.places = model, np.array(places)
        self.span = model.length / max(1, len(model.supports) - 1)
        self.flexibility, self.shear = self._flexibilities()
        self.energy = float(np.abs(self.flexibility).max()) * self.span**3
        self.number: dict[tuple[str, int, Plane], int] = {}
        self.stiff: list[tuple[int, int, float]] = []  # row, column, value of the strain energy's matrix
        self.conditions: list[tuple[int, int, float]] = []  # the same of the conditions of equilibrium
        last = len(places) - 1
        for i, plane in product(range(len(places)), model.planes):
            names = ["left"] if i == last else ["right"] if i == 0 else ["left", "right"]
            for name in names:
                self._add(name, i, plane)
            self._add_support(i, plane)
        self.forces = len(self.number)
        for i, plane in product(range(len(places)), model.planes):
            self._add_conditions(i, plane)
        for i in range(last):
            self._add_strain(i)

    def index(self, x: float) -> int:
        """Give the number of the place at `x`."""
        return int(np.argmin(np.abs(self.places - x)))

    def states(self, loads: Sequence[tuple[float, Plane]]) -> FloatArray:
        """Give all unknowns (k, n), scaled, under a unit load at each place and in each plane of `loads`."""
        from scipy.sparse import coo_array  # loaded only where influence lines are found again
        from scipy.sparse.linalg import splu

        n = len(self.number)
        entries = [*self.stiff, *self.conditions, *((j, i, -value) for i, j, value in self.conditions)]
        rows, columns, values = (np.array(part) for part in zip(*entries, strict=True))
        matrix = coo_array((values, (rows, columns)), shape=(n, n)).tocsc()
        known = np.zeros((n, len(loads)))
        for number, (x, plane) in enumerate(loads):
            known[self.number["balance", self.index(x), plane], number] = -1.0
        solved = splu(matrix)
        found = solved.solve(known)
        return np.asarray(found + solved.solve(known - matrix @ found)).T

    def effect(self, states: FloatArray, sought: Sought) -> tuple[FloatArray, float]:
        """Give what is sought in each state (k,), and the largest effect of its kind anywhere in the beam."""
        if isinstance(sought, AtPlace):
            part, _, lateral = sought.quantity.partition("_")
            plane: Plane = "lateral" if lateral else "vertical"
            i = self.index(sought.x)
            match part:
                case "M":
                    return self._of(states, sought.side, i, plane), self._largest(states, "left", "right")
                case "V":
                    return self._shear_at(states, sought, i, plane), self._largest(states, "shear")
                case "w":
                    return self._of(states, "balance", i, plane), self._largest(states, "balance")
                case "rotation":
                    return self._rotation(states, sought, i, plane), self._largest(states, "turning")
                case _:
                    V = self._shear_at(states, sought, i, plane)
                    g = self.shear[i - 1 if sought.side == "left" else i, self.model.planes.index(plane)]
                    return self._rotation(states, sought, i, plane) + g * V, self._largest(states, "turning")
        support = self.model.supports[sought.support]
        plane = "lateral" if sought.part.endswith("_lat") else "vertical"
        name, size = ("force", "shear") if sought.part.startswith("force") else ("couple", "left")
        return self._of(states, name, self.index(support.x), plane), self._largest(states, size)

    def _add(self, name: str, i: int, plane: Plane) -> int:
        return self.number.setdefault((name, i, plane), len(self.number))

    def _add_support(self, i: int, plane: Plane) -> None:
        """Add what the support at a place gives, and the energy of its springs."""
        for support in self.model.supports:
            if not self.model.same(support.x, float(self.places[i])):
                continue
            force, turning = support.restraints(plane)
            for name, stiffness, arm in (("force", force, 1.0), ("couple", turning, self.span)):
                if stiffness > FREE:
                    number = self._add(name, i, plane)
                    yielding = 0.0 if stiffness == RIGID else arm**2 / stiffness
                    self.stiff.append((number, number, yielding / self.energy))

    def _add_conditions(self, i: int, plane: Plane) -> None:
        """Add V_right - V_left - force = -load, M_right - M_left + couple = 0, and M_left = 0 at a hinge."""
        at = {name: self.number.get((name, i, plane)) for name in ("left", "right", "force", "couple")}
        terms: list[tuple[str, int | None, float]] = [
            ("balance", at["force"], -1.0),
            ("turning", at["right"], 1.0),
            ("turning", at["left"], -1.0),
            ("turning", at["couple"], 1.0),
        ]
        for j, sign in ((i, 1.0), (i - 1, -1.0)):
            if 0 <= j < len(self.places) - 1:
                slope = sign * self.span / float(self.places[j + 1] - self.places[j])
                terms.append(("balance", self.number["left", j + 1, plane], slope))
                terms.append(("balance", self.number["right", j, plane], -slope))
        if any(self.model.same(hinge, float(self.places[i])) for hinge in self.model.hinges):
            terms.append(("closed", at["left"], 1.0))
        for name, column, value in terms:
            if column is not None:
                self.conditions.append((self._add(name, i, plane), column, value))

    def _add_strain(self, j: int) -> None:
        """Add the energy ½∫F M² dx + ½∫g V² dx of an interval along which M runs straight."""
        h = float(self.places[j + 1] - self.places[j])
        planes = self.model.planes
        bent = h * self.span**2 / 6 / self.energy
        for (p, plane), (q, other) in product(enumerate(planes), repeat=2):
            ends = [self.number["right", j, plane], self.number["left", j + 1, plane]]
            others = [self.number["right", j, other], self.number["left", j + 1, other]]
            sheared = self.shear[j, p] * self.span**2 / h / self.energy if p == q else 0.0
            for (a, row), (b, column) in product(enumerate(ends), enumerate(others)):
                value = self.flexibility[j, p, q] * bent * (2 if a == b else 1)
                self.stiff.append((row, column, float(value + (sheared if a == b else -sheared))))

    def _flexibilities(self) -> tuple[FloatArray, FloatArray]:
        """Give the bending flexibility (n, p, p) and the shear flexibility (n, p) of each interval."""
        bending, shear = [], []
        for x in (self.places[:-1] + self.places[1:]) / 2:
            stretch = next(s for s in self.model.stretches if x <= s.end)
            own, two = stretch.stiffness, len(self.model.planes) == 2
            if two and own.lateral is not None:
                by = own.vertical * own.lateral - own.coupling**2
                bending.append(
                    [[own.lateral / by, -own.coupling / by], [-own.coupling / by, own.vertical / by]]
                )
            else:
                bending.append([[1.0 / own.vertical]])
            shear.append([1.0 / getattr(stretch.shear, plane) for plane in self.model.planes])
        return np.array(bending), np.array(shear)

    def _scale(self, name: str) -> float:
        """Give what one unit of an unknown stands for, in SI, with the sign of a deflection down."""
        match name:
            case "left" | "right" | "couple":
                return self.span
            case "balance":
                return -self.energy
            case "turning" | "closed":
                return self.energy / self.span
            case _:
                return 1.0

    def _of(self, states: FloatArray, name: str, i: int, plane: Plane) -> FloatArray:
        number = self.number.get((name, i, plane))
        return np.zeros(len(states)) if number is None else self._scale(name) * states[:, number]

    def _shear_at(self, states: FloatArray, sought: AtPlace, i: int, plane: Plane) -> FloatArray:
        j = i - 1 if sought.side == "left" else i
        return self._shears(states, j, plane)

    def _shears(self, states: FloatArray, j: int, plane: Plane) -> FloatArray:
        rise = self._of(states, "left", j + 1, plane) - self._of(states, "right", j, plane)
        return np.asarray(rise / (self.places[j + 1] - self.places[j]))

    def _rotation(self, states: FloatArray, sought: AtPlace, i: int, plane: Plane) -> FloatArray:
        turning = self._of(states, "turning", i, plane)
        return turning - self._of(states, "closed", i, plane) if sought.side == "left" else turning

    def _largest(self, states: FloatArray, *names: str) -> float:
        """Give the largest magnitude that unknowns of these names, or the shear, have in any state."""
        if names == ("shear",):
            cuts = product(range(len(self.places) - 1), self.model.planes)
            return max(float(np.abs(self._shears(states, j, plane)).max()) for j, plane in cuts)
        numbers = [(name, number) for (name, _, _), number in self.number.items() if name in names]
        return max(abs(self._scale(name)) * float(np.abs(states[:, n]).max()) for name, n in numbers)
