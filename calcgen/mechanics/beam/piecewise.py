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
    found = all_roots(coefficients[None])[0]
    return np.sort(found[~np.isnan(found)])


def all_roots(coefficients: FloatArray) -> FloatArray:
    """Real roots of polynomials (k, d) in (0, 1), (k, d - 1), nan in place of those that are not there."""
    k, d = coefficients.shape
    size = np.abs(coefficients).max(axis=1, keepdims=True, initial=0.0)
    scaled = coefficients / np.where(size > 0.0, size, 1.0)
    degree = d - 1 - np.argmax((np.abs(scaled) > _TINY_COEFFICIENT)[:, ::-1], axis=1)
    zeros = np.argmax(scaled != 0.0, axis=1)  # so many roots are 0 itself
    found = np.full((k, d - 1), np.nan)
    kinds = degree * d + zeros
    for kind in np.unique(kinds[(size[:, 0] > 0.0) & (degree > zeros)]).tolist():
        m, z = divmod(kind, d)
        of = kinds == kind
        found[of, : m - z] = _nonzero_roots(scaled[of, z : m + 1])
    with np.errstate(invalid="ignore"):
        return np.where((found > 0.0) & (found < 1.0), found, np.nan)


def _nonzero_roots(c: FloatArray) -> FloatArray:
    """Real roots of polynomials (k, m + 1) of degree m, (k, m), nan in place of the others."""
    m = c.shape[1] - 1
    if m == 1:
        return -c[:, :1] / c[:, 1:]
    if m == 2:
        # Without taking like numbers from each other.
        square = c[:, 1] ** 2 - 4.0 * c[:, 0] * c[:, 2]
        double = -c[:, 1] / (2.0 * c[:, 2])
        with np.errstate(invalid="ignore", divide="ignore"):
            q = -(c[:, 1] + np.copysign(np.sqrt(square), c[:, 1])) / 2.0
            pair = np.stack([q / c[:, 2], c[:, 0] / q], axis=1)
            near = (square <= 0.0) & (np.sqrt(-square) <= 2.0 * _TINY_IMAGINARY * np.abs(c[:, 2]))
        pair[near] = double[near, None]
        return pair
    companion = np.zeros((len(c), m, m))
    companion[:, np.arange(1, m), np.arange(m - 1)] = 1.0
    companion[:, 0] = -c[:, m - 1 :: -1] / c[:, m:]
    values = np.linalg.eigvals(companion)
    return np.where(np.abs(values.imag) <= _TINY_IMAGINARY, values.real, np.nan)


def derivative(coefficients: FloatArray) -> FloatArray:
    """Differentiate polynomials (..., 6); the result has one coefficient less."""
    return np.asarray(coefficients[..., 1:] * np.arange(1, coefficients.shape[-1]))
