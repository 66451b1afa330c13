"""Number literals: decimals, fractions of inches and feet, feet and inches, each with its unit."""

from __future__ import annotations

import math
import re

from calcgen.language.errors import ReadingError
from calcgen.language.nodes import Number
from calcgen.language.pieced import Pieced
from calcgen.language.units_text import UnitMatch, meant_unit, unit_at
from calcgen.quantities.units import LENGTHS

_DECIMAL = re.compile(r"(?:[0-9]+(?:\.[0-9]+)?|\.[0-9]+)(?:[eE][-+]?[0-9]+)?")
_FRACTION = re.compile(r"(?:([0-9]+)[ \u00a0])?([0-9]+)/([0-9]+)(?![0-9.]*[0-9eE])")
_INCHES = re.compile(
    r"[ \u00a0](?:([0-9]+(?:\.[0-9]+)?)(?![0-9]*/))?(?:[ \u00a0]?([0-9]+)/([0-9]+))?(?=[ \u00a0]?in\b)"
)
_BELOW = re.compile(r"/(\w+[2-6])\b")
_DASH_INCHES = re.compile(r"-[0-9][0-9./ \u00a0]*in\b")
_TIMES = re.compile(r"[-·](\w+)\b")
_SPACES = " \u00a0\u202f\u2009"


def digits_end(text: str, at: int) -> int:
    """Return the end of the digits of a number that starts at an offset; `at` itself where none does."""
    match = _DECIMAL.match(text, at)
    return match.end() if match else at


def number_at(text: Pieced, at: int, before: str) -> tuple[Number, int]:
    """Read the literal that starts at an offset; `before` is the operator in front of it, or ''.

    Returns the literal and the offset of its end.

    Raises
    ------
    ReadingError
        For a fraction with two readings, a zero denominator, a number too large to hold.
    """
    return _fraction(text, at, before) or _decimal(text, at)


def _fraction(text: Pieced, at: int, before: str) -> tuple[Number, int] | None:
    match = _FRACTION.match(text.text, at)
    if match is None:
        return None
    unit, unit_start = _unit(text.text, match.end())
    if unit is None:
        if match[1] is None:
            return None
        raise ReadingError(
            "fraction-without-unit",
            text.span(at, match.end()),
            "a whole number and a fraction need the unit in or ft",
            hint=f"write {match[1]} + {match[2]}/{match[3]} for a plain number",
        )
    whole, above, below = match[1], match[2], match[3]
    if not unit.is_plain("in", "ft") or (whole is None and before in ("/", "^")):
        part = f"{above}/{below}"
        first = f"({whole} + {part})" if whole else f"({part})"
        raise ReadingError(
            "fraction-with-two-readings",
            text.span(at, unit.end),
            f"'{text.text[at : unit.end]}' has two readings",
            hint=f"write {first}*(1 {unit.text}) or {above}/({below} {unit.text})",
        )
    value = (float(whole) if whole else 0.0) + _ratio(text, match, 2, 3)
    return _literal(text, at, value, unit, unit_start)


def _decimal(text: Pieced, at: int) -> tuple[Number, int]:
    match = _DECIMAL.match(text.text, at)
    if match is None:
        raise TypeError("the caller looks whether a number starts here")
    value = float(match[0])
    unit, unit_start = _unit(text.text, match.end())
    if unit is None:
        return _literal(text, at, value, None, match.end())
    _refuse_lookalikes(text, match[0], unit)
    inches = _INCHES.match(text.text, unit.end) if unit.is_plain("ft") and match[0].isdigit() else None
    if inches is None or (inches[1] is None and inches[2] is None):
        return _literal(text, at, value, unit, unit_start)
    below = _unit(text.text, inches.end())[0]
    if below is None or not below.is_plain("in"):
        return _literal(text, at, value, unit, unit_start)
    more = float(inches[1] or 0) + (_ratio(text, inches, 2, 3) if inches[2] else 0.0)
    return _literal(text, at, value + more / 12, unit, unit_start, below.end)


def _literal(
    text: Pieced, at: int, value: float, unit: UnitMatch | None, unit_start: int, end: int | None = None
) -> tuple[Number, int]:
    end = end or (unit.end if unit else unit_start)
    span = text.span(at, end)
    if not math.isfinite(value):
        raise ReadingError("number-too-large", span, "this number is too large to be held")
    node = unit.node(text, unit_start) if unit else None
    return Number(value, node, text.text[at:end], span), end


def _unit(text: str, at: int) -> tuple[UnitMatch | None, int]:
    """Return the unit after a number that ends at `at`, one space at most between, and where it starts."""
    start = at + 1 if at < len(text) and text[at] in _SPACES else at
    return unit_at(text, start), start


def _ratio(text: Pieced, match: re.Match[str], above: int, below: int) -> float:
    if float(match[below]) == 0:
        raise ReadingError(
            "division-by-zero", text.span(*match.span(below)), "the denominator of a fraction is zero"
        )
    return float(match[above]) / float(match[below])


def _refuse_lookalikes(text: Pieced, number: str, unit: UnitMatch) -> None:
    """Report what is easily read in another way.

    `3 kN/m2`, where m2 may be meant for m² or for a name; `6 ft-3 in`, a length or a difference; `3 lb-ft`,
    where lb is a mass.
    """
    digit = _BELOW.match(text.text, unit.end)
    meant = meant_unit(digit[1]) if digit else None
    if digit and meant and meant[:-1] == digit[1][:-1]:
        raise ReadingError(
            "unknown-unit",
            text.span(*digit.span(1)),
            f"'{digit[1]}' is no unit",
            hint=f"write {number} {unit.text}/{meant}, or put spaces around / to divide by a name",
        )
    inches = _DASH_INCHES.match(text.text, unit.end) if unit.is_plain("ft") else None
    if inches:
        typed = f"{number} ft"
        raise ReadingError(
            "dash-with-two-readings",
            text.span(unit.end, inches.end()),
            f"'{typed}{inches[0]}' has two readings",
            hint=f"write {typed} {inches[0][1:]} for a length, or {typed} - {inches[0][1:]} to subtract",
        )
    length = _TIMES.match(text.text, unit.end)
    if length and length[1] in LENGTHS and unit.is_plain("lb", "kg"):
        force = "lbf-" if unit.text == "lb" else "kN·"
        raise ReadingError(
            "mass-in-product",
            text.span(unit.end - len(unit.text), length.end()),
            f"'{unit.text}' is a mass, and only a force and a length make a product of units",
            hint=f"a moment is in {force}{length[1]}",
        )
