"""Times of beams, as ratios to the row before and to a plain numpy pass.

Continuous beams of equal spans. Fixed cases: 20 of them, each with a uniform load on two spans of three and
a point load on every fourth span, and 20 combinations of all cases in one group; solved, combined, and the
group's extremes of M, V, w and of each reaction. A pass is of the moments, cubics on each element: all
combinations at ten places an element, in two products of matrices. Trains: one of three axles, and one case
in patterns, in two combinations; the extremes of M, V, w and of the reactions, and those of each span, as
a page shows, where there are up to twelve. Blocks: the text of a beam, read and evaluated.

A train has some n positions that are looked at for each of n spans: trains grow with the square of n once
the work outgrows the calls.
"""

from __future__ import annotations

from collections.abc import Callable
from functools import partial

import numpy as np

from calcgen.mechanics.actions import Actions, Combination
from calcgen.mechanics.arrays import FloatArray
from calcgen.mechanics.beam import (
    BeamModel,
    DistributedLoad,
    Load,
    PointLoad,
    Quantity,
    combine_all,
    pin,
    prismatic,
    solve,
)
from calcgen.mechanics.combinations import Envelope
from calcgen.mechanics.envelope import effects
from calcgen.mechanics.trains import Train
from tests.benchmarks.sections import process_seconds
from tests.evaluation.helpers import evaluated

SPAN, EI = 5.0, 2e7
CASES = 20
SOUGHT: tuple[Quantity, ...] = ("M", "V", "w")
LISTED = 12


def beam(spans: int) -> BeamModel:
    return prismatic(spans * SPAN, EI, tuple(pin(i * SPAN) for i in range(spans + 1)))


def cases(spans: int) -> dict[str, list[Load]]:
    """Loads of the fixed cases."""
    found: dict[str, list[Load]] = {}
    for k in range(CASES):
        loads: list[Load] = [
            DistributedLoad.uniform(i * SPAN, (i + 1) * SPAN, (3 + k) * 1e3)
            for i in range(spans)
            if spans == 1 or (i + k) % 3
        ]
        loads += [PointLoad((i + 0.4) * SPAN, (k + 1) * 1e3) for i in range(spans) if (i + k) % 4 == 0]
        found[f"C{k}"] = loads
    return found


FACTORS = {f"U{j}": {f"C{k}": 1.0 + 0.1 * ((j + k) % 6) for k in range(CASES)} for j in range(CASES)}


def fixed_cases(model: BeamModel, loads: dict[str, list[Load]]) -> None:
    group = Envelope(combine_all(solve(model, loads), FACTORS))
    for quantity in SOUGHT:
        group.extremes(quantity)
    for support in range(len(model.supports)):
        group.reaction(support)


def numpy_pass(cubics: FloatArray, factors: FloatArray, powers: FloatArray) -> float:
    """Largest of all combinations at all places."""
    return float((factors @ (cubics @ powers).reshape(CASES, -1)).max())


def with_a_train(spans: int) -> None:
    model = beam(spans)
    actions = Actions(
        {
            "G": (DistributedLoad.uniform(0.0, model.length, 4e3),),
            "Q": (DistributedLoad.uniform(0.0, model.length, 8e3),),
        },
        frozenset({"Q"}),
        {"T": (Train((80e3, 80e3, 40e3), (1.2, 3.6)),)},
    )
    combinations = (
        Combination("U1", {"G": 1.35, "Q": 1.5, "T": 1.5}),
        Combination("U2", {"G": 1.0, "Q": 1.5, "T": 1.5}),
    )
    cuts = [i * SPAN for i in range(spans + 1)] if spans <= LISTED else []
    group = effects(model, actions, combinations, cuts=cuts)
    for quantity in SOUGHT:
        group.extremes(quantity)
    for support in range(len(model.supports)):
        group.reaction(support)


def block(spans: int, *lines: str) -> str:
    """The text of a beam block."""
    head = (f"span = {', '.join([f'{SPAN:g} m'] * spans)}", f"EI = {EI / 1e3:g} kN·m²")
    return "\n".join(["# Beam", "", "```beam b", *head, *lines, "```", ""])


def fixed_block(spans: int) -> str:
    lines = [f"case C{k} imposed" for k in range(CASES)]
    lines += [f"load C{k} uniform {3 + k} kN/m" for k in range(CASES)]
    lines += [f"load C{k} point {10 + k} kN at {(k % spans + 0.4) * SPAN:g} m" for k in range(CASES)]
    lines += [
        f"combination {name} in ULS = {' + '.join(f'{factor:g}*{case}' for case, factor in factors.items())}"
        for name, factors in list(FACTORS.items())[:4]
    ]
    return block(spans, *lines)


def train_block(spans: int) -> str:
    return block(
        spans,
        "case G permanent",
        "load G uniform 4 kN/m",
        "load Q uniform 8 kN/m",
        "load T train 80 kN, 80 kN, 40 kN spaced 1.2 m, 3.6 m",
        "pattern Q",
        "combination U1 in ULS = 1.35*G + 1.5*Q + 1.5*T",
        "combination U2 in ULS = 1.0*G + 1.5*Q + 1.5*T",
    )


def repeated(work: Callable[[], object], times: int) -> None:
    for _ in range(times):
        work()


def table(title: str, sizes: tuple[int, ...], work: Callable[[int], Callable[[], object]]) -> None:
    """Print a row for each number of spans."""
    powers = np.linspace(0.0, 1.0, 10) ** np.arange(4.0)[:, None]
    factors = np.array([list(each.values()) for each in FACTORS.values()])
    before: tuple[int, float] | None = None
    for spans in sizes:
        run = work(spans)
        run()
        seconds = process_seconds(run, rounds=3 if spans >= 30 else 5)
        one_pass = partial(numpy_pass, np.ones((CASES, 2 * spans, 4)), factors, powers)
        single = process_seconds(partial(repeated, one_pass, 20)) / 20
        growth = f"{seconds / before[1]:5.1f} × that of {before[0]:,}" if before is not None else ""
        print(  # noqa: T201
            f"{title}, {spans:,} span{'s' if spans > 1 else ''}".ljust(52),
            f"{1e3 * seconds:8.1f} ms   {seconds / single:9.0f} × a numpy pass   {growth}",
        )
        before = spans, seconds


def main() -> None:
    table(
        f"beam, {CASES} cases and combinations",
        (1, 10, 100, 1000),
        lambda n: partial(fixed_cases, beam(n), cases(n)),
    )
    table("beam, train and pattern", (1, 3, 10, 30), lambda n: partial(with_a_train, n))
    table(f"beam block, {CASES} cases", (1, 10, 100), lambda n: partial(evaluated, fixed_block(n)))
    table("beam block, train and pattern", (1, 3, 10, 30), lambda n: partial(evaluated, train_block(n)))


if __name__ == "__main__":
    main()
