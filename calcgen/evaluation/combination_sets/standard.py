"""The combination sets of standards as data: expressions, ψ factors and partial factors, a source for each.

`expressions.csv` has an expression a row, as the standard writes it: a load with its factors, loads joined by
'or' of which one acts at a time. (6.10a) with γ_G,inf is left out: ψ_0 is 1 at most, so its combinations lie
between those of (6.10b) with γ_G,inf. All three files are written from memory.
"""

from __future__ import annotations

import csv
import re
from collections.abc import Iterator, Mapping
from dataclasses import dataclass
from functools import cache
from importlib.resources import files
from typing import Final, Literal, TypeAlias

Standard: TypeAlias = Literal["EN", "ASCE"]

LOADS: Final[Mapping[Standard, Mapping[str, str]]] = {
    "EN": {"permanent": "G", "settlement": "G_set", "accidental": "A_d", "seismic": "A_Ed"},
    "ASCE": {
        "permanent": "D",
        "imposed": "L",
        "roof": "L_r",
        "snow": "S",
        "rain": "R",
        "wind": "W",
        "seismic": "E",
    },
}
"""Symbol of each kind of case (EN 1990 6.4.3; ASCE 7 2.2); in EN 1990 any other kind is a variable action."""

ALWAYS: Final = frozenset({"G", "D", "A_d", "A_Ed", "E"})
"""Loads that an expression does not leave out. Of the others each may be absent: EN 1990 takes a variable
action where it is unfavourable, ASCE 7 2.3.1 and 2.4.1 ask for loads that do not act; a settlement is taken
where it is unfavourable (EN 1992-1-1 2.3.1.3(4))."""

ITS_OWN: Final = frozenset({"W", "E", "A_d", "A_Ed"})
"""Loads that an expression is written for: a beam without wind has no combinations of wind."""

APART: Final = (frozenset({"roof", "snow"}), frozenset({"roof", "wind"}))
"""Actions that do not act together by EN 1991-1-1 3.3.2(1); in ASCE 7 the expressions say it."""

_TOKEN = re.compile(r"\(|\)|\+|or\b|[^\s()+]+")


@dataclass(frozen=True)
class Part:
    """A load of a term with its own factors: numbers, or symbols such as γ_Q and ψ_0."""

    factors: tuple[str, ...]
    load: str


@dataclass(frozen=True)
class Term:
    """`0.5 (L_r or S or R)`: one of its parts acts, with the factors before the parenthesis as well."""

    factors: tuple[str, ...]
    parts: tuple[Part, ...]


@dataclass(frozen=True)
class Expression:
    """One expression of a set, and its place in the standard."""

    source: str
    terms: tuple[Term, ...]

    @property
    def leads(self) -> bool:
        """Whether one variable action leads the others."""
        return any(part.load == "Q_1" for term in self.terms for part in term.parts)


@dataclass(frozen=True)
class StandardSet:
    """The expressions of one set."""

    name: str
    standard: Standard
    expressions: tuple[Expression, ...]


@dataclass(frozen=True)
class Psi:
    """ψ_0, ψ_1 and ψ_2 of a kind of case, or of one of its categories; '' where it has none."""

    kind: str
    category: str
    values: tuple[float, float, float]
    meaning: str
    source: str


@dataclass(frozen=True)
class Recommended:
    """A partial factor or ξ with the value recommended for it."""

    value: float
    meaning: str
    source: str


@cache
def standard_sets() -> Mapping[str, StandardSet]:
    """Return the sets by name."""
    expressions: dict[str, list[Expression]] = {}
    for row in _rows("expressions.csv"):
        found = Expression(row["source"], parsed(row["expression"]))
        expressions.setdefault(row["set"], []).append(found)
    return {
        name: StandardSet(name, "EN" if name.startswith("EN") else "ASCE", tuple(each))
        for name, each in expressions.items()
    }


@cache
def psi_factors() -> tuple[Psi, ...]:
    """Return the ψ factors of EN 1990."""
    return tuple(
        Psi(
            row["kind"],
            row["category"],
            (float(row["psi_0"]), float(row["psi_1"]), float(row["psi_2"])),
            row["meaning"],
            row["source"],
        )
        for row in _rows("psi.csv")
    )


@cache
def recommended() -> Mapping[str, Recommended]:
    """Return the partial factors and ξ by symbol."""
    return {
        row["factor"]: Recommended(float(row["value"]), row["meaning"], row["source"])
        for row in _rows("partial.csv")
    }


def parsed(text: str) -> tuple[Term, ...]:
    """Return the terms of an expression.

    >>> parsed("1.2 D + 0.5 (S or R)")[1].factors
    ('0.5',)

    Raises
    ------
    ValueError
        For a text that is no expression.
    """
    terms: list[Term] = []
    words: list[str] = []
    tokens = iter(_TOKEN.findall(text))
    for token in tokens:
        if token == "(":  # noqa: S105 - a parenthesis
            terms.append(Term(tuple(words), tuple(_alternatives(tokens, text))))
            words = []
        elif token == "+":  # noqa: S105 - a sign
            terms += [_single(words)] if words else []
            words = []
        else:
            words.append(token)
    return tuple([*terms, _single(words)] if words else terms)


def _alternatives(tokens: Iterator[str], text: str) -> Iterator[Part]:
    words: list[str] = []
    for token in tokens:
        if token in ("or", ")"):
            yield _part(words)
            words = []
            if token == ")":  # noqa: S105 - a parenthesis
                return
        else:
            words.append(token)
    raise ValueError(f"a parenthesis is not closed: {text}")


def _single(words: list[str]) -> Term:
    return Term((), (_part(words),))


def _part(words: list[str]) -> Part:
    if not words:
        raise ValueError("a load is missing")
    return Part(tuple(words[:-1]), words[-1])


def _rows(name: str) -> Iterator[dict[str, str]]:
    text = (files(__package__) / name).read_text(encoding="utf-8")
    yield from csv.DictReader(text.splitlines())
