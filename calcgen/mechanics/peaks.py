"""Where curves along a beam, made of polynomials, are largest: by roots."""

from __future__ import annotations

from itertools import pairwise
from typing import Final, TypeAlias

import numpy as np

from calcgen.mechanics.arrays import FloatArray
from calcgen.mechanics.beam import piecewise
from calcgen.mechanics.beam.results import TIE
from calcgen.mechanics.influence import BoolArray

Places: TypeAlias = list[tuple[float, bool]]
"""Places along a beam, and whether the right side of each is meant, or the left."""

_AT_END: Final = 1e-9  # part of an element's length below which two places in it are one
_STRAIGHT: Final = 1e-13  # part of a polynomial's largest coefficient that is rounding


def divided(start: FloatArray, end: FloatArray, parts: int) -> tuple[FloatArray, BoolArray]:
    """Divide the intervals from `start` to `end`, (i,): places and their inner sides, (i, parts + 1)."""
    x = start[:, None] + (end - start)[:, None] * np.linspace(0.0, 1.0, parts + 1)
    x[:, -1] = end
    return x, np.broadcast_to(np.arange(parts + 1) < parts, x.shape)


def stationary(
    polynomials: FloatArray,
    factors: FloatArray,
    shares: FloatArray,
    low: FloatArray,
    high: FloatArray,
    best: float,
) -> list[tuple[int, float]]:
    """Give the places at which the largest of curves may exceed `best`: element and part of its length.

    Parameters
    ----------
    polynomials
        What each of c curves has in each of n elements in any case, (c, n, 6).
    factors, shares
        Each curve has the positive parts of its `factors` (c, j) times `shares` (j, n, 6) besides.
    low, high
        The part of each element that counts, (n,), as parts of its length; none where low >= high.
    best
        A value that some curve reaches.
    """
    # An element whose bound does not reach the best value so far has no part in the extreme.
    below, above = piecewise.bounds(shares)
    bound = piecewise.bounds(polynomials)[1]
    bound = bound + np.maximum(factors, 0.0) @ np.maximum(above, 0.0)
    bound = bound + np.minimum(factors, 0.0) @ np.minimum(below, 0.0)
    bound[:, low >= high] = -np.inf
    found: list[tuple[int, float]] = []
    for number in np.argsort(-bound, axis=None, kind="stable"):
        curve, element = (int(i) for i in np.unravel_index(number, bound.shape))
        if bound[curve, element] <= best + TIE * abs(best):
            break
        acting = factors[curve] != 0.0
        parts = factors[curve, acting, None] * shares[acting, element]
        t = _candidates(polynomials[curve, element], parts, float(low[element]), float(high[element]))
        values = piecewise.values(polynomials[curve, element], t)
        values += np.maximum(piecewise.values(parts[:, None], t), 0.0).sum(axis=0)
        best = max(best, float(values.max(initial=-np.inf)))
        found += [(element, float(each)) for each in t]
    return sorted(found)


def _candidates(polynomial: FloatArray, parts: FloatArray, low: float, high: float) -> FloatArray:
    """Give the places in (low, high) at which a polynomial plus the positive parts of others may peak.

    A part comes and goes at its roots; between those of all parts the sum is one polynomial.
    """
    roots = _roots(parts)
    found = roots[(roots > low) & (roots < high)].tolist()
    cuts = np.unique([low, high, *found])
    for a, b in pairwise(cuts[np.diff(cuts, append=np.inf) > _AT_END].tolist()):
        acting = parts[piecewise.values(parts, np.array((a + b) / 2)) > 0.0]
        turns = piecewise.roots(piecewise.derivative(polynomial + acting.sum(axis=0)))
        found += turns[(turns > a) & (turns < b)].tolist()
    return np.array(found, dtype=np.float64)


def _roots(polynomials: FloatArray) -> FloatArray:
    """Give the roots in (0, 1) of all the polynomials (k, 6) together; most are straight lines."""
    size = np.abs(polynomials).max(axis=1, keepdims=True)
    bent = np.any(np.abs(polynomials[:, 2:]) > _STRAIGHT * size, axis=1)
    a, b = polynomials[~bent, 0], polynomials[~bent, 1]
    with np.errstate(divide="ignore", invalid="ignore"):
        t = np.concatenate([-a / b, *(piecewise.roots(each) for each in polynomials[bent])])
    return np.asarray(t[(t > 0.0) & (t < 1.0)])
