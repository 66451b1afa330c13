"""A physical quantity with the unit it is shown in."""

from __future__ import annotations

import math
import re
from dataclasses import dataclass
from functools import cache
from typing import TypeAlias

import pint
from pint.facets.plain import PlainQuantity

from calcgen.quantities.registry import registry
from calcgen.quantities.units import SYMBOLS, ZERO_CELSIUS, pint_name

Quantity: TypeAlias = PlainQuantity[float]
"""A pint quantity with a plain number."""

Dimension: TypeAlias = tuple[tuple[str, int | float], ...]
"""Exponents of the base dimensions, sorted, without zeros: (('[length]', 1),)."""

UnitFactors: TypeAlias = tuple[tuple[str, float], ...]
"""Symbols of the closed list with their exponents, in the order written."""


@dataclass(frozen=True)
class Measure:
    """A value in SI base units, and the unit chosen to show it in.

    Attributes
    ----------
    quantity : pint quantity, reduced to SI base units.
    unit : the unit it is shown in, as text of the language; None where nothing chose one.
    """

    quantity: Quantity
    unit: str | None = None

    @property
    def si(self) -> float:
        """The magnitude in SI base units (m, kg, s, K, rad)."""
        return float(self.quantity.magnitude)

    @property
    def dimension(self) -> Dimension:
        """Exponents of the base dimensions."""
        return dimension_of(self.quantity)

    @property
    def finite(self) -> bool:
        """Whether the magnitude is a finite number."""
        return math.isfinite(self.si)

    def shown_in(self, unit: str | None) -> Measure:
        """Return the same quantity with another unit to show it in."""
        return Measure(self.quantity, unit)


def dimension_of(quantity: Quantity) -> Dimension:
    """Return the dimension of a pint quantity (angles have none)."""
    return _dimension(quantity.units)


@cache
def _dimension(units: pint.Unit) -> Dimension:
    cleaned = ((name, round(float(str(power)), 9)) for name, power in units.dimensionality.items())
    return tuple(sorted((n, int(p) if p == int(p) else p) for n, p in cleaned if p))


def measure(value: float, unit: str | None, factors: UnitFactors = ()) -> Measure:
    """Return `value` times the product of `factors`, shown in `unit`.

    A lone °C is a temperature: its zero is added.
    """
    if factors == (("°C", 1),):
        return Measure(registry().Quantity(value + ZERO_CELSIUS, "kelvin"), unit)
    quantity = registry().Quantity(value, _pint_unit(factors)).to_base_units()
    return Measure(quantity, unit)


@cache
def _pint_unit(factors: UnitFactors) -> pint.Unit:
    unit = registry().Unit("")
    for symbol, power in factors:
        unit = unit * registry().Unit(pint_name(symbol)) ** power
    return unit


def from_si(value: float, unit: str) -> Measure:
    """Return a value given in SI base units, of the dimension of `unit` and shown in it."""
    size = unit_size(unit)
    return Measure(registry().Quantity(value, size.units), unit)


def magnitude_in(quantity: Measure, unit: str) -> float:
    """Return the number that stands before `unit` when the quantity is shown in it."""
    if unit == "°C":
        return quantity.si - ZERO_CELSIUS
    return quantity.si / float(unit_size(unit).magnitude)


@cache
def unit_size(unit: str) -> Quantity:
    """Return one `unit` in SI base units.

    Raises
    ------
    ValueError
        When the text is not a unit of the closed list.
    """
    return registry().Quantity(1.0, _pint_unit(unit_factors(unit))).to_base_units()


def pretty(unit: str) -> str:
    """Return a unit as typed in the program's own form: `mm^4` becomes `mm⁴`."""
    base, *powers = unit.split("^")
    return base + "".join(p[: _digits(p)].translate(_TO_SUPERSCRIPTS) + p[_digits(p) :] for p in powers)


def _digits(text: str) -> int:
    return len(text) - len(text.lstrip("-0123456789"))


_TO_SUPERSCRIPTS = str.maketrans("0123456789-", "⁰¹²³⁴⁵⁶⁷⁸⁹⁻")
_SUPERSCRIPTS = str.maketrans("⁰¹²³⁴⁵⁶⁷⁸⁹⁻", "0123456789-")


_BETWEEN = re.compile(r"·|-(?=[^\d.])")  # a hyphen before a symbol joins; one before digits is a sign
_FACTOR = re.compile(r"([^\d^⁰¹²³⁴⁵⁶⁷⁸⁹⁻.]+)(?:([⁰¹²³⁴⁵⁶⁷⁸⁹⁻]+)|\^(-?\d*\.?\d+(?:e-?\d+)?))?")


@cache
def unit_factors(unit: str) -> UnitFactors:
    """Split a unit in the program's own form into symbols and exponents: `kN·m/m`, `kip-ft`, `mm⁴`, `kg^0.5`.

    Raises
    ------
    ValueError
        When a symbol is not in the closed list.
    """
    factors: list[tuple[str, float]] = []
    for sign, part in zip([1] + [-1] * unit.count("/"), unit.split("/"), strict=True):
        for item in _BETWEEN.split(part):
            match = _FACTOR.fullmatch(item)
            if match and match[1] in SYMBOLS:
                raised = match[2].translate(_SUPERSCRIPTS) if match[2] else match[3] or "1"
                power = float(raised)
                factors.append((match[1], sign * (int(power) if power.is_integer() else power)))
            elif item not in ("", "1"):
                raise ValueError(f"unknown unit {item!r} in {unit!r}")
    return tuple(factors)
