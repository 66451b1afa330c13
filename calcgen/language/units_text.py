"""A unit after a number, read by longest match from the closed list."""

from __future__ import annotations

import re
import unicodedata
from dataclasses import dataclass

from calcgen.language.names import is_name_character
from calcgen.language.nodes import UnitText
from calcgen.language.pieced import Pieced
from calcgen.quantities.units import FORCES, LENGTHS, SYMBOLS
from calcgen.text import nearest

_POWER = re.compile(r"\^(-?[1-9][0-9]?)(?!\.?\w|')|(⁻?[¹²³⁴⁵⁶⁷⁸⁹][⁰¹²³⁴⁵⁶⁷⁸⁹]?)(?![⁰¹²³⁴⁵⁶⁷⁸⁹⁻])")
_PLAIN_DIGITS = str.maketrans("⁰¹²³⁴⁵⁶⁷⁸⁹⁻", "0123456789-")
_DOTS = "·⋅"
_RUN_TOGETHER = {f + n: (f, n) for f in FORCES for n in LENGTHS}
_WITH_DIGIT = re.compile(r"(.*\D)([2-6])")
_ALIASES = {
    "inch": "in",
    "inches": "in",
    "foot": "ft",
    "feet": "ft",
    "yard": "yd",
    "yards": "yd",
    "meter": "m",
    "meters": "m",
    "metre": "m",
    "metres": "m",
    "newton": "N",
    "newtons": "N",
    "kips": "kip",
    "lbs": "lbf' (force) or 'lb",
    "pound": "lbf' (force) or 'lb",
    "pounds": "lbf' (force) or 'lb",
    "sec": "s",
    "tonne": "t",
    "tonnes": "t",
    "degree": "deg",
    "degrees": "deg",
    "radian": "rad",
    "radians": "rad",
    "percent": "%",
    "°": "deg",
    "pli": "lbf/in",
    "pci": "lbf/in³",
}


@dataclass(frozen=True)
class Factor:
    """One symbol with its exponent, and where the symbol stands in the text."""

    symbol: str
    power: int
    start: int
    end: int


@dataclass(frozen=True)
class UnitMatch:
    """A unit found in a text: as read, its factors, those after a '/', and where it ends."""

    text: str
    factors: tuple[Factor, ...]
    joined: tuple[Factor, ...]
    end: int

    def is_plain(self, *symbols: str) -> bool:
        """Return whether the unit is one of `symbols`, to the first power."""
        return self.text in symbols

    def node(self, text: Pieced, start: int) -> UnitText:
        """Return the node of a unit that starts at `start`."""
        return UnitText(
            self.text,
            tuple((f.symbol, f.power) for f in self.factors),
            text.span(start, self.end),
            tuple((f.symbol, text.span(f.start, f.end)) for f in self.joined),
        )


def unit_at(text: str, start: int) -> UnitMatch | None:
    """Return the longest unit that starts at `start`: `kN·m/m`, `N/mm²`, `1/K`; None where there is none."""
    found = _side(text, start)
    if found is None and text.startswith("1/", start):
        found = UnitMatch("1", (), (), start + 1)
    if found is None:
        return None
    written, factors, joined, end = found.text, [*found.factors], list[Factor](), found.end
    while text.startswith("/", end) and (below := _side(text, end + 1)) is not None:
        written += "/" + below.text
        factors += [Factor(f.symbol, -f.power, f.start, f.end) for f in below.factors]
        joined += below.factors
        end = below.end
    return UnitMatch(written, tuple(factors), tuple(joined), end) if factors else None


def _side(text: str, start: int) -> UnitMatch | None:
    """Return a power of a symbol, or a force times a length."""
    end = _word_end(text, start)
    word = unicodedata.normalize("NFKC", text[start:end])
    if word in _RUN_TOGETHER:
        force, length = _RUN_TOGETHER[word]
        middle = start + len(force)
        power, mark, end_of_power = _power(text, end)
        factors = (Factor(force, 1, start, middle), Factor(length, power, middle, end))
        return UnitMatch(f"{force}·{length}{mark}", factors, (), end_of_power)
    first = _symbol(text, start, word, end)
    if first is None:
        return None
    others = LENGTHS if word in FORCES else FORCES if word in LENGTHS else frozenset[str]()
    mark = text[first.end : first.end + 1]
    if others and mark and mark in _DOTS + "-":
        end = _word_end(text, first.end + 1)
        word = unicodedata.normalize("NFKC", text[first.end + 1 : end])
        second = _symbol(text, first.end + 1, word, end)
        if second is not None and word in others:
            joint = "-" if mark == "-" else "·"
            return UnitMatch(first.text + joint + second.text, first.factors + second.factors, (), second.end)
    return first


def _symbol(text: str, start: int, word: str, end: int) -> UnitMatch | None:
    if word not in SYMBOLS:
        return None
    power, mark, end_of_power = _power(text, end)
    return UnitMatch(word + mark, (Factor(word, power, start, end),), (), end_of_power)


def _power(text: str, start: int) -> tuple[int, str, int]:
    match = _POWER.match(text, start)
    if match is None:
        return 1, "", start
    return int((match[1] or match[2]).translate(_PLAIN_DIGITS)), match[0], match.end()


def _word_end(text: str, start: int) -> int:
    if text.startswith(("%", "℃"), start):
        return start + 1
    end = start + 1 if text.startswith("°", start) else start
    while end < len(text) and is_name_character(text[end]):
        end += 1
    return end


def meant_unit(word: str) -> str | None:
    """Return the unit that a word which is none most likely means, for a hint."""
    if word in _ALIASES:
        return _ALIASES[word]
    digit = _WITH_DIGIT.fullmatch(word)
    if digit and (digit[1] in SYMBOLS or digit[1] in _RUN_TOGETHER):
        return digit[1] + "⁰¹²³⁴⁵⁶⁷⁸⁹"[int(digit[2])]
    if len(word) < 2 or "_" in word:
        return None
    found = nearest(word, [*SYMBOLS, *_RUN_TOGETHER], cutoff=0.75)
    return "·".join(_RUN_TOGETHER[found]) if found in _RUN_TOGETHER else found
