"""The pint registry of the closed list, built once."""

from __future__ import annotations

from functools import cache

import pint

from calcgen.quantities.units import SYMBOLS, pint_name


@cache
def registry() -> pint.UnitRegistry[float]:
    """Return the registry: the SI base units used here and the symbols of the closed list, nothing else."""
    units: pint.UnitRegistry[float] = pint.UnitRegistry(None, case_sensitive=True, cache_folder=None)
    for base, dimension in (
        ("meter", "[length]"),
        ("kilogram", "[mass]"),
        ("second", "[time]"),
        ("kelvin", "[temperature]"),
        ("radian", "[]"),
    ):
        units.define(f"{base} = {dimension}")
    for symbol, size in SYMBOLS.items():
        units.define(f"{pint_name(symbol)} = {size}")
    return units
