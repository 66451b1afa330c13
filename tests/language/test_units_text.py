"""Units after a number: the closed list, its products and quotients."""

from __future__ import annotations

import pytest

from calcgen.language.units_text import meant_unit, unit_at
from calcgen.quantities.measure import pretty, unit_factors
from calcgen.quantities.units import FORCES, LENGTHS, SYMBOLS


@pytest.mark.parametrize("symbol", SYMBOLS)
def test_every_symbol_of_the_list_is_read(symbol: str) -> None:
    match = unit_at(symbol, 0)
    assert match is not None
    assert (match.text, match.end) == (symbol, len(symbol))


@pytest.mark.parametrize("length", sorted(LENGTHS))
@pytest.mark.parametrize("force", sorted(FORCES))
def test_a_force_times_a_length_is_written_in_three_ways(force: str, length: str) -> None:
    for between in ("·", "-", ""):
        match = unit_at(f"{force}{between}{length}", 0)
        assert match is not None
        assert [(f.symbol, f.power) for f in match.factors] == [(force, 1), (length, 1)]


@pytest.mark.parametrize(
    ("typed", "factors"),
    [
        ("mm²", [("mm", 2)]),
        ("mm^4", [("mm", 4)]),
        ("m⁻¹", [("m", -1)]),
        ("m^-1", [("m", -1)]),
        ("1/K", [("K", -1)]),
        ("kN/m³", [("kN", 1), ("m", -3)]),
        ("kN·m/m", [("kN", 1), ("m", 1), ("m", -1)]),
        ("kip-in²", [("kip", 1), ("in", 2)]),
        ("kNm²", [("kN", 1), ("m", 2)]),
        ("ft-kip", [("ft", 1), ("kip", 1)]),
        ("kg/m/s^2", [("kg", 1), ("m", -1), ("s", -2)]),
    ],
)
def test_factors(typed: str, factors: list[tuple[str, int]]) -> None:
    match = unit_at(typed, 0)
    assert match is not None
    assert match.end == len(typed)
    assert [(f.symbol, f.power) for f in match.factors] == factors
    assert list(unit_factors(pretty(match.text))) == factors, "the display side reads what is read here"


@pytest.mark.parametrize(
    ("typed", "read"),
    [
        ("m*L", "m"),
        ("kN/L", "kN"),
        ("kN/ m", "kN"),
        ("kN·L", "kN"),
        ("kN-N", "kN"),
        ("m^2.5", "m"),
        ("m^n", "m"),
        ("m^999", "m"),
        ("mm^2L", "mm"),
    ],
)
def test_a_unit_ends_before_what_is_none(typed: str, read: str) -> None:
    match = unit_at(typed, 0)
    assert match is not None
    assert typed[: match.end] == read


@pytest.mark.parametrize(
    "typed", ["", "L", "mL", "KN", "m_1", "m'", "m2", "1", "1/", "1/L", "µm", "/m", "·m"]
)
def test_no_unit(typed: str) -> None:
    assert unit_at(typed, 0) is None


@pytest.mark.parametrize(
    ("typed", "meant"),
    [
        ("KN", "kN"),
        ("Mpa", "MPa"),
        ("knm", "kN·m"),
        ("feet", "ft"),
        ("mm2", "mm²"),
        ("L", None),
        ("M_Ed", None),
    ],
)
def test_the_unit_meant(typed: str, meant: str | None) -> None:
    assert meant_unit(typed) == meant
