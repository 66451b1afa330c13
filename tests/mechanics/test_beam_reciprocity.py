"""Equilibrium, reciprocity and mirror symmetry of random beams, with trains and patterns too.

The beams are those of `test_beam_oracles.py`; here nothing is solved a second time: the relations hold
between the program's own results, and the formulas of them are written out.
"""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest

from calcgen.mechanics.actions import Actions, Combination
from calcgen.mechanics.beam import (
    PLANES,
    BeamModel,
    BendingStiffness,
    CaseSolution,
    DistributedLoad,
    Load,
    PointLoad,
    Quantity,
    Stretch,
    Support,
    solve,
)
from calcgen.mechanics.combinations import ReactionPart
from calcgen.mechanics.envelope import effects
from calcgen.mechanics.trains import Train
from tests.exact.chains import loads_of, model_of
from tests.exact.singularity import Action, Chain
from tests.mechanics.test_beam_oracles import places_of, random_actions, random_chain
from tests.mechanics.test_beam_properties import mirrored, mirrored_load

POINTS, WEIGHTS = np.polynomial.legendre.leggauss(5)  # exact up to the ninth power


def resultant(action: Action) -> tuple[float, float]:
    """Return the force, and the clockwise moment about x = 0, of a load."""
    if action.kind == "force":
        return action.value, action.value * action.start
    if action.kind == "couple":
        return 0.0, action.value
    if action.kind == "curvature":
        return 0.0, 0.0
    last = action.value if action.value_end is None else action.value_end
    length = action.end - action.start
    total = (action.value + last) / 2 * length
    if action.kind == "moments":
        return 0.0, total
    lever = action.start * total + length**2 * (action.value + 2 * last) / 6
    return total, lever


@pytest.mark.parametrize("seed", range(200, 230))
def test_reactions_carry_the_loads(seed: int) -> None:
    """ΣF = 0, and ΣM = 0 about the start, in each plane by itself: axes may lean, forces do not."""
    chain = random_chain(seed)
    solution = solve(model_of(chain), {"case": loads_of(chain)})["case"]
    for plane in range(len(chain.pieces[0].flexibility)):
        pairs = [
            (r.x, r.force, r.moment) if plane == 0 else (r.x, r.force_lat, r.moment_lat)
            for r in solution.reactions
        ]
        acting = [resultant(action) for action in chain.actions if action.plane == plane]
        forces = [force for force, _ in acting] + [-R for _, R, _ in pairs]
        moments = [moment for _, moment in acting] + [-R * x - M for x, R, M in pairs]
        assert abs(sum(forces)) <= 1e-9 * sum(map(abs, forces))
        assert abs(sum(moments)) <= 1e-9 * sum(abs(R * x) + abs(M) for x, R, M in pairs) + 1e-9


def work(forces: CaseSolution, acting: Chain, moved: CaseSolution, other: Chain) -> tuple[float, float]:
    """Return the work of one state's loads and reactions on the displacements of the other, and its size.

    The moments of the one on the free curvatures of the other are taken off: the rest is the same both ways.
    """
    terms: list[float] = []
    nodes = np.array(places_of(replace(acting, actions=(*acting.actions, *other.actions))))
    half = np.diff(nodes)[:, None] / 2
    x = ((nodes[:-1] + nodes[1:])[:, None] / 2 + half * POINTS).ravel()
    dx = (half * WEIGHTS).ravel()

    def read(state: CaseSolution, name: str, plane: int, at: float | np.ndarray) -> np.ndarray:
        quantity: Quantity = f"{name}{'_lat' if plane else ''}"  # type: ignore[assignment]
        return state.values(quantity, np.atleast_1d(at))

    def spread(action: Action) -> np.ndarray:
        last = action.value if action.value_end is None else action.value_end
        part = (x - action.start) / (action.end - action.start)
        return np.where((part >= 0) & (part <= 1), action.value + (last - action.value) * part, 0.0)

    for action in acting.actions:
        on = "w" if action.kind in ("force", "load") else "rotation"
        if action.kind in ("force", "couple"):
            terms.append(action.value * float(read(moved, on, action.plane, action.start)[0]))
        elif action.kind != "curvature":
            terms.append(float(np.sum(spread(action) * read(moved, on, action.plane, x) * dx)))
    bows = (a for a in other.actions if a.kind == "curvature")
    terms += [-float(np.sum(spread(bow) * read(forces, "M", bow.plane, x) * dx)) for bow in bows]
    for reaction in forces.reactions:
        for plane in range(len(acting.pieces[0].flexibility)):
            R = reaction.force_lat if plane else reaction.force
            M = reaction.moment_lat if plane else reaction.moment
            terms.append(-R * float(read(moved, "w", plane, reaction.x)[0]))
            if M:
                terms.append(-M * float(read(moved, "rotation", plane, reaction.x)[0]))
    return sum(terms), sum(map(abs, terms))


@pytest.mark.parametrize("seed", range(300, 330))
def test_the_work_of_two_states_on_each_other_is_equal(seed: int) -> None:
    """Betti's theorem with loads of every kind, settlements, springs, hinges, shear and free curvatures.

    W_ab - ∫M_a κ_0b dx = W_ba - ∫M_b κ_0a dx, where W_ab is what the loads and reactions of a do on b.
    """
    chain = random_chain(seed)
    rng = np.random.default_rng(seed)
    chain = replace(chain, hinges=()) if rng.random() < 0.5 else chain
    one = replace(chain, held=tuple(replace(h, settles=0.0) for h in chain.held))
    other = replace(chain, actions=random_actions(rng, chain))
    states = [solve(model_of(c), {"case": loads_of(c)})["case"] for c in (one, other)]
    there, size = work(states[0], one, states[1], other)
    back, size_back = work(states[1], other, states[0], one)
    assert there == pytest.approx(back, rel=1e-9, abs=1e-9 * max(size, size_back))


def moving(seed: int) -> tuple[BeamModel, Actions]:
    """Return a beam of two to four spans in both planes, with a pattern, a permanent load and a train."""
    rng = np.random.default_rng(seed)
    places = np.concatenate([[0.0], np.cumsum(rng.uniform(3.0, 8.0, int(rng.integers(2, 5))))])
    length = float(places[-1]) + float(rng.choice([0.0, 1.5]))
    step = length * float(rng.uniform(0.2, 0.8))
    v, lat = 10.0 ** rng.uniform(6.5, 7.5, 2)
    skew = float(rng.uniform(-0.6, 0.6) * np.sqrt(v * lat))
    model = BeamModel(
        length,
        (
            Stretch(0.0, step, BendingStiffness(float(v), float(lat), skew)),
            Stretch(step, length, BendingStiffness(float(2 * v), float(lat), skew / 2)),
        ),
        tuple(Support(float(x), lateral=float(rng.choice([np.inf, 1e6]))) for x in places),
    )
    n = int(rng.integers(1, 4))
    train = Train(
        tuple(float(p) for p in rng.uniform(2e4, 8e4, n)),
        tuple(float(d) for d in rng.uniform(0.8, 4.0, n - 1)),
        float(rng.uniform(-0.2, 0.2)),
    )
    q, tip = rng.uniform(2e3, 9e3, 2)
    cases: dict[str, tuple[Load, ...]] = {
        "G": (DistributedLoad.uniform(0.0, length, float(q)),),
        "Q": (
            DistributedLoad(0.0, length, float(q), float(tip)),
            PointLoad(float(places[1]) / 3, float(tip)),
            DistributedLoad.uniform(0.0, length, float(q) / 9, "lateral"),
        ),
        "T": (),
    }
    return model, Actions(cases, frozenset({"Q"}), {"T": (train,)})


COMBINATIONS = (
    Combination("U1", {"G": 1.35, "Q": 1.5, "T": 1.0}),
    Combination("U2", {"G": 1.0, "T": 1.5}),
)


@pytest.mark.parametrize("seed", range(4))
def test_trains_and_patterns_see_the_same_from_the_other_end(seed: int) -> None:
    """M, sideways M and reactions stay, V changes its sign; a train runs in both directions anyway."""
    model, actions = moving(seed)
    cases = {
        name: tuple(mirrored_load(load, model) for load in loads) for name, loads in actions.cases.items()
    }
    here = effects(model, actions, COMBINATIONS)
    there = effects(mirrored(model), Actions(cases, actions.patterned, actions.trains), COMBINATIONS)
    for plane in PLANES:
        suffix = "" if plane == "vertical" else "_lat"
        M: Quantity = f"M{suffix}"  # type: ignore[assignment]
        V: Quantity = f"V{suffix}"  # type: ignore[assignment]
        a, b = here.extremes(M), there.extremes(M)
        size = max(abs(a.max.value), abs(a.min.value))
        assert (b.max.value, b.min.value) == pytest.approx(
            (a.max.value, a.min.value), rel=1e-7, abs=1e-7 * size
        )
        a, b = here.extremes(V), there.extremes(V)
        size = max(abs(a.max.value), abs(a.min.value))
        assert (b.max.value, b.min.value) == pytest.approx(
            (-a.min.value, -a.max.value), rel=1e-7, abs=1e-7 * size
        )
        for x in (0.3 * model.length, 0.55 * model.length):
            one, other = here.at(M, x), there.at(M, model.length - x)
            assert other.max.value == pytest.approx(one.max.value, rel=1e-9, abs=1e-9 * size)
            assert other.min.value == pytest.approx(one.min.value, rel=1e-9, abs=1e-9 * size)
        part: ReactionPart = f"force{suffix}"  # type: ignore[assignment]
        last = len(model.supports) - 1
        for number in range(last + 1):
            one, other = here.reaction(number, part), there.reaction(last - number, part)
            assert other.max.value == pytest.approx(one.max.value, rel=1e-9, abs=1e-9 * size)
            assert other.min.value == pytest.approx(one.min.value, rel=1e-9, abs=1e-9 * size)
