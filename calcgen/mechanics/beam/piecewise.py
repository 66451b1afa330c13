"""Polynomials on the unit interval, constant term first: values, integrals, bounds and roots."""

from __future__ import annotations

from math import comb

import numpy as np

from calcgen.mechanics.arrays import FloatArray

DEGREE = 5
"""Of the deflection under a linear load: the highest degree that occurs."""

# Row i turns coefficients into the i-th Bernstein coefficient: b_i = Σ_k C(i,k)/C(n,k) a_k.
_BERNSTEIN = np.array(
    [[comb(i, k) / comb(DEGREE, k) for k in range(DEGREE + 1)] for i in range(DEGREE + 1)], dtype=np.float64
)
# Relative size below which a leading coefficient, or the imaginary part of a root, is rounding.
_TINY_COEFFICIENT = 1e-14
_TINY_IMAGINARY = 1e-7


def values(coefficients: FloatArray, t: FloatArray) -> FloatArray:
    """Evaluate polynomials (..., 6) at `t`, broadcast against their leading axes."""
    result = np.zeros(np.broadcast_shapes(coefficients.shape[:-1], np.shape(t)))
    for k in range(coefficients.shape[-1] - 1, -1, -1):
        result = result * t + coefficients[..., k]
    return result


def integral(coefficients: FloatArray, axis: int) -> FloatArray:
    """Integrate from 0 along the axis of the coefficients; the highest one must be zero."""
    moved = np.moveaxis(coefficients, axis, -1)
    result = np.zeros_like(moved)
    result[..., 1:] = moved[..., :-1] / np.arange(1, moved.shape[-1])
    return np.moveaxis(result, -1, axis)


def bounds(coefficients: FloatArray) -> tuple[FloatArray, FloatArray]:
    """Bound each polynomial (n, 6) on [0, 1] from below and above, by its Bernstein coefficients."""
    control = coefficients @ _BERNSTEIN.T
    return control.min(axis=-1), control.max(axis=-1)


def roots(coefficients: FloatArray) -> FloatArray:
    """Real roots of one polynomial in (0, 1), ascending; none for a constant."""
    size = np.abs(coefficients).max()
    significant = np.flatnonzero(np.abs(coefficients) > _TINY_COEFFICIENT * size)
    if size == 0.0 or significant[-1] == 0:
        return np.zeros(0)
    found = np.roots(coefficients[significant[-1] :: -1])
    real = found.real[np.abs(found.imag) <= _TINY_IMAGINARY]
    return np.sort(real[(real > 0.0) & (real < 1.0)])


def derivative(coefficients: FloatArray) -> FloatArray:
    """Differentiate polynomials (..., 6); the result has one coefficient less."""
    return np.asarray(coefficients[..., 1:] * np.arange(1, coefficients.shape[-1]))
