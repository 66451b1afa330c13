"""The closed list of units, and the registry that knows no others."""

from __future__ import annotations

SYMBOLS: dict[str, str] = {
    "mm": "1e-3 * meter",
    "cm": "1e-2 * meter",
    "m": "meter",
    "km": "1e3 * meter",
    "in": "0.0254 * meter",
    "ft": "0.3048 * meter",
    "yd": "0.9144 * meter",
    "N": "kilogram * meter / second ** 2",
    "kN": "1e3 * kilogram * meter / second ** 2",
    "MN": "1e6 * kilogram * meter / second ** 2",
    "lbf": "4.4482216152605 * kilogram * meter / second ** 2",
    "kip": "4448.2216152605 * kilogram * meter / second ** 2",
    "Pa": "kilogram / meter / second ** 2",
    "kPa": "1e3 * kilogram / meter / second ** 2",
    "MPa": "1e6 * kilogram / meter / second ** 2",
    "GPa": "1e9 * kilogram / meter / second ** 2",
    "psi": "6894.757293168361 * kilogram / meter / second ** 2",
    "ksi": "6894757.293168361 * kilogram / meter / second ** 2",
    "psf": "47.88025898033584 * kilogram / meter / second ** 2",
    "ksf": "47880.25898033584 * kilogram / meter / second ** 2",
    "plf": "14.593902937206364 * kilogram / second ** 2",
    "klf": "14593.902937206364 * kilogram / second ** 2",
    "pcf": "157.08746384624617 * kilogram / meter ** 2 / second ** 2",
    "g": "1e-3 * kilogram",
    "kg": "kilogram",
    "t": "1e3 * kilogram",
    "lb": "0.45359237 * kilogram",
    "s": "second",
    "Hz": "1 / second",
    "deg": "0.017453292519943295 * radian",
    "rad": "radian",
    "K": "kelvin",
    "°C": "kelvin",
    "%": "0.01 * radian",
}
"""Symbol -> its size. pcf is a weight by volume (lbf/ft³); % and the angles are numbers; °C is a
temperature, whose zero is added where the literal is read."""

LENGTHS = frozenset({"mm", "cm", "m", "km", "in", "ft", "yd"})
FORCES = frozenset({"N", "kN", "MN", "lbf", "kip"})
ZERO_CELSIUS = 273.15
STANDARD_GRAVITY = 9.80665  # m/s²; standard acceleration of free fall, 3rd CGPM (1901)

_PINT_NAMES = {"°C": "degree_celsius_difference", "%": "percent", "in": "inch_", "deg": "degree_"}


def pint_name(symbol: str) -> str:
    """Return the name under which the registry holds a symbol of the list."""
    return _PINT_NAMES.get(symbol, symbol)
