"""A crane runway of one span and of two, typed, against stepping by hand formulas.

Moments and reactions under one force are written out: statics for one span, and for two equal ones the
reactions of AISC Manual Table 3-23 case 31 (proven in `tests/mechanics/test_beam_formulas.py`). The wheels
step across in both directions, then more finely about the worst step; no influence line or solver is used.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass

import numpy as np
import pytest

from calcgen.mechanics.arrays import FloatArray
from calcgen.quantities.measure import Measure
from tests.evaluation.helpers import codes, evaluated, fence

L = 8.0  # m
SHARE = 0.12  # of each wheel load, sideways


@dataclass(frozen=True)
class Runway:
    """Spans of L, and the reactions under a unit force at `x`: one array for each support."""

    spans: int
    reactions: Callable[[FloatArray], list[FloatArray]]

    def effect(self, name: str, wheels: FloatArray, loads: tuple[float, ...], x: FloatArray) -> FloatArray:
        """Return M at `x`, (steps, places), or a reaction, with wheels at `wheels`, (wheels, steps)."""
        on = (wheels >= 0.0) & (wheels <= self.spans * L)
        P = np.array(loads)[:, None] * on
        at = np.clip(wheels, 0.0, self.spans * L)
        R = [(P * r).sum(axis=0) for r in self.reactions(at)]
        if name.startswith("R"):
            return np.asarray(R[int(name[-1]) - 1][:, None])
        M = np.zeros(x.shape)
        for i, force in enumerate(R):
            M += force[:, None] * np.maximum(x - i * L, 0.0)
        for wheel, load in zip(at, P, strict=True):
            M -= load[:, None] * np.maximum(x - wheel[:, None], 0.0)
        return M


def one_span(a: FloatArray) -> list[FloatArray]:
    return [(L - a) / L, a / L]


def two_spans(x: FloatArray) -> list[FloatArray]:
    mirrored = x > L
    a = np.where(mirrored, 2 * L - x, x)
    b = L - a
    near = b * (4 * L**2 - a * (L + a)) / (4 * L**3)
    middle = a * (2 * L**2 + b * (L + a)) / (2 * L**3)
    far = -a * b * (L + a) / (4 * L**3)
    return [np.where(mirrored, far, near), middle, np.where(mirrored, near, far)]


def stepped(
    runway: Runway, name: str, loads: tuple[float, float], gap: float, sign: float, at: float | None
) -> float:
    """Return the largest (sign 1) or smallest (-1) value over positions and both directions.

    Without a place `at`, the moment is read under each wheel and at each support: between, it is straight.
    """
    best = -np.inf
    length = runway.spans * L
    for front, back in (loads, loads[::-1]):  # the train that runs the other way has its wheels the other way
        u = np.linspace(-gap, length, 801)
        for _ in range(12):
            wheels = np.array([u, u + gap])
            still = [k * L for k in range(runway.spans + 1)] if at is None else [at]
            places = [np.full_like(u, x) for x in still]
            if at is None:
                places += [np.clip(wheel, 0.0, length) for wheel in wheels]
            found = sign * runway.effect(name, wheels, (front, back), np.array(places).T)
            i = int(np.argmax(found.max(axis=1)))
            best = max(best, float(found[i].max()))
            step = u[1] - u[0]
            u = np.linspace(u[i] - 2 * step, u[i] + 2 * step, 41)
    return sign * best


SIMPLE, CONTINUOUS = Runway(1, one_span), Runway(2, two_spans)


@pytest.mark.parametrize("runway", [SIMPLE, CONTINUOUS], ids=["simple", "continuous"])
@pytest.mark.parametrize(
    "wheels", [(140.0, 90.0), pytest.param((110.0, 110.0), marks=pytest.mark.slow)], ids=["unequal", "equal"]
)
def test_a_crane_runway(runway: Runway, wheels: tuple[float, float]) -> None:
    gap = 3.2
    names: dict[str, tuple[str, float, float | None]] = {
        "M_max": ("M", 1.0, None),
        "M_max(3 m)": ("M", 1.0, 3.0),
        "M_min(3 m)": ("M", -1.0, 3.0),
        "R_1_max": ("R_1", 1.0, 0.0),
        "R_2_max": ("R_2", 1.0, 0.0),
    }
    if runway.spans == 2:
        names |= {"M_min": ("M", -1.0, None), "M_min(8 m)": ("M", -1.0, L), "R_3_min": ("R_3", -1.0, 0.0)}
    lines = (
        f"span = {', '.join(['8 m'] * runway.spans)}",
        "section = s",
        "E = 210 GPa",
        f"load C train {wheels[0]} kN, {wheels[1]} kN spaced {gap} m lateral {SHARE}",
        "combination U = 1.5*C",
    )
    lateral = [name.replace("(", "_lat(") if "(" in name else f"{name}_lat" for name in names]
    asked = [f"asked_{i} = b.U.{name}" for i, name in enumerate([*names, *lateral])]
    section = fence("section s", 'shape = rolled("HEA 400")')
    (calc,) = evaluated(f"# T\n{section}{fence('beam b', *lines)}{fence('working', *asked)}")
    assert codes(calc) == []
    assert [r for r in calc.second_route if not r.holds] == []
    found = [calc.values[f"asked_{i}"][0] for i in range(len(asked))]
    for i, (name, (what, sign, at)) in enumerate(names.items()):
        worst = 1.5 * stepped(runway, what, wheels, gap, sign, at)
        vertical, sideways = found[i], found[i + len(names)]
        assert isinstance(vertical, Measure)
        assert isinstance(sideways, Measure)
        size = abs(worst) + 1e-9
        assert vertical.si / 1e3 == pytest.approx(worst, abs=1e-8 * size), name
        assert sign * vertical.si / 1e3 >= sign * worst - 1e-9 * size, name  # no step exceeds it
        assert sideways.si == pytest.approx(SHARE * vertical.si, rel=1e-8, abs=1e-6), name
