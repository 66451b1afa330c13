"""Times of sections, as ratios to plain numpy passes over the same data.

A pass is ∫y² dA by Green's theorem over the edges, written in one line. The I-section has fillets; the
numerical solution of torsion and shear meshes, factorises and solves, with nothing remembered.
"""

from __future__ import annotations

import math
import statistics
import time
from collections.abc import Callable

import numpy as np

from calcgen.mechanics.outline import Outline, outline
from calcgen.mechanics.saint_venant import saint_venant
from calcgen.mechanics.section import section_properties
from calcgen.mechanics.shapes import i_shape

CORNERS = 100_000


def lobed(corners: int) -> Outline:
    """A disc with five lobes."""
    theta = np.linspace(0.0, 2.0 * math.pi, corners, endpoint=False)
    radius = 1.0 + 0.3 * np.cos(5.0 * theta)
    return outline(np.column_stack((radius * np.cos(theta), radius * np.sin(theta))))


def numpy_pass(part: Outline) -> float:
    """∫y² dA about the origin."""
    (x0, y0), (x1, y1) = (points.T for points in part.edges)
    return float(np.sum((x0 * y1 - x1 * y0) * (y0 * y0 + y0 * y1 + y1 * y1))) / 12.0


def process_seconds(work: Callable[[], object], rounds: int = 7) -> float:
    """Return the median of the processor's time: others on the machine don't count."""
    times = []
    for _ in range(rounds):
        began = time.process_time()
        work()
        times.append(time.process_time() - began)
    return statistics.median(times)


def solve(depth: float) -> None:
    saint_venant(i_shape(h=depth, b=0.15, t_w=0.0071, t_f=0.0107, r=0.015).outline)


def rows() -> list[tuple[str, float, float]]:
    """What was timed, its seconds, and those of a pass over the same corners."""
    many = lobed(CORNERS)
    i_section = i_shape(h=0.3, b=0.15, t_w=0.0071, t_f=0.0107, r=0.015).outline
    pass_many = process_seconds(lambda: numpy_pass(many))
    pass_few = process_seconds(lambda: [numpy_pass(i_section) for _ in range(1000)]) / 1000
    depths = iter(np.linspace(0.29, 0.31, 50).tolist())  # another one each time
    lobes = iter(range(CORNERS, CORNERS + 50))
    solve(next(depths))  # loads scipy
    return [
        (f"properties, {CORNERS:,} corners", process_seconds(lambda: section_properties(many)), pass_many),
        ("properties, I with fillets", process_seconds(lambda: section_properties(i_section)), pass_few),
        ("torsion and shear, I with fillets", process_seconds(lambda: solve(next(depths))), pass_few),
        (
            f"torsion and shear, {CORNERS:,} corners, checked first",
            process_seconds(lambda: saint_venant(lobed(next(lobes))), rounds=3),
            pass_many,
        ),
    ]


def main() -> None:
    for name, seconds, single in rows():
        print(f"{name:52} {1e3 * seconds:8.1f} ms   {seconds / single:9.0f} × a numpy pass")  # noqa: T201


if __name__ == "__main__":
    main()
