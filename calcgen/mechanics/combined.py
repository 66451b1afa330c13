"""Combinations of what acts on a beam: largest and smallest sums of shares at places, and their causes."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

import numpy as np

from calcgen.mechanics.acting import Acting, Shares
from calcgen.mechanics.actions import Combination, Effect, Pattern, Placed
from calcgen.mechanics.arrays import FloatArray
from calcgen.mechanics.beam.results import TIE
from calcgen.mechanics.influence import BoolArray


@dataclass(frozen=True, eq=False)
class Combined:
    """Combinations of what acts on a beam."""

    acting: Acting
    combinations: tuple[Combination, ...]

    @cached_property
    def factors(self) -> tuple[FloatArray, FloatArray]:
        """Factors of the fixed cases (c, f) and of the actions that vary (c, v) in each combination."""
        fixed, varying = (
            np.array([[c.factors.get(name, 0.0) for name in names] for c in self.combinations]).reshape(
                len(self.combinations), len(names)
            )
            for names in (self.acting.fixed, self.acting.varying)
        )
        return fixed, varying

    @cached_property
    def moving(self) -> BoolArray:
        """Which combinations take a train, (c,)."""
        return np.asarray(np.any(self.factors[1][:, len(self.acting.by_length) :] != 0.0, axis=1))

    def sums(self, shares: Shares, *, low: bool) -> FloatArray:
        """Smallest, or largest, value of each combination at each place, (c, k)."""
        fixed, varying = self.factors
        adding, opposing = (shares.low, shares.high) if low else (shares.high, shares.low)
        return np.asarray(
            fixed @ shares.fixed + np.maximum(varying, 0.0) @ adding + np.minimum(varying, 0.0) @ opposing
        )

    def governing(self, shares: Shares, *, low: bool) -> Effect:
        """Give the extreme over combinations and places; of equal ones the first combination, then place."""
        sums = self.sums(shares, low=low)
        signed = -sums if low else sums
        best = float(signed.max())
        number = int(np.argmax(signed >= best - TIE * abs(best)))
        return self.effect(shares, *divmod(number, sums.shape[1]), low=low)

    def effect(self, shares: Shares, combination: int, place: int, *, low: bool) -> Effect:
        """Give the extreme of one combination at one of the places, and what causes it."""
        factors = self.combinations[combination].factors
        trains: list[Placed] = []
        for reach, (name, train, _) in zip(shares.reaches, self.acting.crossings, strict=False):
            factor = factors.get(name, 0.0)
            position = reach.position(place, low=low == (factor > 0.0))
            if factor != 0.0 and position is not None:
                trains.append(Placed(name, train, position))
        return Effect(
            float(self.sums(shares.at(place), low=low)[combination, 0]),
            float(shares.x[place]),
            "right" if shares.right[place] else "left",
            self.combinations[combination].name,
            self.loaded(shares.parts[:, place], combination, low=low),
            tuple(trains),
        )

    def loaded(self, parts: FloatArray, combination: int, *, low: bool) -> tuple[Pattern, ...]:
        """Give the lengths whose shares (j,) add to the extreme of a combination."""
        found: list[Pattern] = []
        for name in self.acting.by_length:
            factor = self.combinations[combination].factors.get(name, 0.0)
            wanted = parts * (-factor if low else factor) > 0.0
            numbers = [
                number
                for acts, (case, number) in zip(wanted, self.acting.parts, strict=True)
                if acts and case == name
            ]
            if factor != 0.0:
                found.append(Pattern(name, tuple(numbers)))
        return tuple(found)
