"""Which unit a value is shown in when nothing chose one, and how a number is written."""

from __future__ import annotations

import math
from collections.abc import Mapping
from dataclasses import dataclass
from decimal import ROUND_HALF_UP, Context, Decimal
from typing import Literal

from calcgen.quantities.measure import Dimension, Measure, dimension_of, magnitude_in, unit_size

# By dimension: (lower limit of |value| in SI base units, unit); the first whose limit is reached.
_SI: tuple[tuple[tuple[float, str], ...], ...] = (
    ((1.0, "m"), (0.0, "mm")),
    ((0.1, "m²"), (0.0, "cm²")),
    ((0.1, "m³"), (0.0, "cm³")),
    ((0.01, "m⁴"), (0.0, "cm⁴")),
    ((0.0, "cm⁶"),),
    ((0.0, "kN"),),
    ((0.0, "kN·m"),),
    ((0.0, "kN/m"),),
    ((5e9, "GPa"), (1e5, "MPa"), (0.0, "kPa")),
    ((0.0, "kN/m³"),),
    ((0.0, "kN·m²"),),
    ((0.0, "1/m"),),
    ((0.0, "kg"),),
    ((0.0, "kg/m"),),
    ((0.0, "kg/m²"),),
    ((0.0, "kg/m³"),),
    ((0.0, "s"),),
    ((0.0, "Hz"),),
    ((0.0, "K"),),
    ((0.0, "1/K"),),
    ((0.0, "m/s²"),),
)
_US: tuple[tuple[tuple[float, str], ...], ...] = (
    ((1.2192, "ft"), (0.0, "in")),
    ((0.92903, "ft²"), (0.0, "in²")),
    ((0.0, "in³"),),
    ((0.0, "in⁴"),),
    ((0.0, "in⁶"),),
    ((0.0, "kip"),),
    ((0.0, "kip-ft"),),
    ((14593.9, "klf"), (0.0, "plf")),
    ((6.89e5, "ksi"), (47880.0, "psi"), (0.0, "psf")),
    ((0.0, "pcf"),),
    ((0.0, "kip-in²"),),
    ((0.0, "1/in"),),
    ((0.0, "lb"),),
    ((0.0, "lb/ft"),),
    ((0.0, "lb/ft²"),),
    ((0.0, "lb/ft³"),),
    ((0.0, "s"),),
    ((0.0, "Hz"),),
    ((0.0, "K"),),
    ((0.0, "1/K"),),
    ((0.0, "ft/s²"),),
)

KINDS: dict[str, str] = {
    "length": "m",
    "area": "m²",
    "section modulus": "m³",
    "second moment": "m⁴",
    "warping constant": "m⁶",
    "force": "N",
    "moment": "N·m",
    "line load": "N/m",
    "stress": "Pa",
    "weight by volume": "N/m³",
    "bending stiffness": "N·m²",
    "curvature": "1/m",
    "mass": "kg",
    "mass by length": "kg/m",
    "mass by area": "kg/m²",
    "density": "kg/m³",
    "time": "s",
    "frequency": "Hz",
    "temperature": "K",
    "expansion": "1/K",
    "acceleration": "m/s²",
}
"""Kinds of quantity by the field's word, each with a unit of its dimension."""

WHOLE = 1e6  # up to here a whole plain number is written out


def describe(dimension: Dimension) -> str:
    """Return a dimension in words: 'force', 'length', or 'mass·length²·time⁻³' where there is no word."""
    if not dimension:
        return "a plain number"
    for word, unit in KINDS.items():
        if dimension_of(unit_size(unit)) == dimension:
            return word
    names = (f"{name.strip('[]')}{_superscript(power) if power != 1 else ''}" for name, power in dimension)
    return "·".join(names)


@dataclass(frozen=True)
class Style:
    """How values are shown in a project.

    Attributes
    ----------
    system : 'SI' or 'US'.
    digits : significant figures.
    depth : sense in which a coordinate measured from the neutral axis is positive.
    preferred : unit by kind of quantity (see `KINDS`), before the system's own.
    """

    system: Literal["SI", "US"] = "SI"
    digits: int = 4
    depth: Literal["down", "up"] = "down"
    preferred: tuple[tuple[str, str], ...] = ()

    def unit_of(self, value: Measure) -> str:
        """Return the unit a value is shown in: its own, the project's, the system's, or base units."""
        if value.unit is not None:
            return value.unit
        return self.default_unit(value.dimension, abs(value.si))

    def default_unit(self, dimension: Dimension, size: float = 0.0) -> str:
        """Return the unit for a dimension and a magnitude in SI base units."""
        if not dimension:
            return ""
        for kind, unit in self.preferred:
            if dimension_of(unit_size(KINDS[kind])) == dimension:
                return unit
        for choices in _US if self.system == "US" else _SI:
            if dimension_of(unit_size(choices[-1][1])) == dimension:
                return next(unit for limit, unit in choices if size >= limit)
        return _base_unit(dimension)


@dataclass(frozen=True)
class Shown:
    """A value ready to be read: '33.93' and 'kN·m'. The minus sign is a true one."""

    number: str
    unit: str = ""

    @property
    def text(self) -> str:
        """Number and unit with a no-break space between them."""
        gap = "" if self.unit in ("", "°") else "\u00a0"
        return f"{self.number}{gap}{self.unit}"


def show(value: Measure, style: Style, digits: int | None = None) -> Shown:
    """Return a value in its unit with the style's significant figures; a whole plain number stays whole."""
    unit = style.unit_of(value)
    number = rounded(magnitude_in(value, unit))
    if unit == "" and number.is_integer() and abs(number) < WHOLE:
        return Shown(f"{number:.0f}".replace("-", "−"))
    return Shown(number_text(number, digits or style.digits), unit)


def number_text(number: float, digits: int = 4) -> str:
    """Return a number with `digits` significant figures, halves rounded up, never cutting its integer part.

    From a million and below a ten-thousandth it is written with a power of ten.

    >>> number_text(33.931), number_text(-0.336049), number_text(24170.2), number_text(2.1e11)
    ('33.93', '−0.3360', '24170', '2.100 × 10¹¹')
    """
    if math.isnan(number) or math.isinf(number):
        return "not finite"
    if number == 0:
        return "0"
    exact = Decimal(repr(abs(rounded(number))))  # 8.4375, not 8.43749999999999
    figures = Context(prec=digits, rounding=ROUND_HALF_UP).create_decimal(exact)
    exponent = figures.adjusted()
    sign = "−" if number < 0 else ""
    if exponent >= 6 or exponent < -4:
        return f"{sign}{figures.scaleb(-exponent):.{digits - 1}f} × 10{_superscript(exponent)}"
    places = max(0, digits - 1 - exponent)
    return f"{sign}{exact.quantize(Decimal(1).scaleb(-places), rounding=ROUND_HALF_UP):f}"


def utilisation_text(value: float | None) -> str:
    """Return a utilisation with three decimals, more where it would read 1.000 without being 1."""
    if value is None:
        return "—"
    if abs(value) >= 10:
        return number_text(value, 4)
    texts = (f"{value:.{places}f}" for places in range(3, 13))
    return next((t for t in texts if value == 1 or float(t) != 1), f"{value:.3f}").replace("-", "−")


def rounded(number: float, digits: int = 12) -> float:
    """Return a number rounded to significant digits, so that last-bit differences don't show.

    Negative zero becomes zero.
    """
    if number == 0 or not math.isfinite(number):
        return 0.0 if number == 0 else number
    return float(f"{number:.{digits - 1}e}")


def _superscript(power: float) -> str:
    return f"{power:g}".translate(str.maketrans("0123456789-.", "⁰¹²³⁴⁵⁶⁷⁸⁹⁻·"))


_BASE_SYMBOLS: Mapping[str, str] = {"[length]": "m", "[mass]": "kg", "[time]": "s", "[temperature]": "K"}


def _base_unit(dimension: Dimension) -> str:
    return "·".join(f"{_BASE_SYMBOLS[name]}{_raised(power)}" for name, power in dimension)


def _raised(power: float) -> str:
    """Return an exponent as written behind a unit; one that is not whole has no superscript of its own."""
    if power == 1:
        return ""
    return _superscript(power) if isinstance(power, int) else f"^{power!r}"
