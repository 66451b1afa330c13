"""The combinations of a standard set: every way in which cases may act together, each with its factors.

Of an action the cases that may act together do so in every selection; those that are alternatives act one at
a time. A case that varies by itself, in patterns or with a train, may act nowhere, so that no
combination without it is needed.
"""

from __future__ import annotations

import math
from collections.abc import Iterable, Iterator, Mapping, Sequence
from dataclasses import dataclass
from itertools import combinations as subsets
from itertools import product
from typing import Final, TypeAlias

from calcgen.evaluation.combination_sets.standard import (
    ALWAYS,
    APART,
    ITS_OWN,
    LOADS,
    Expression,
    Standard,
    StandardSet,
)

LIMIT: Final = 400
"""Most combinations of one set; a checker reads no more of them."""

ONE_AT_A_TIME: Final = frozenset({"wind", "snow", "temperature", "rain", "roof", "accidental", "seismic"})
"""Kinds whose cases are alternatives: two directions of wind are two cases (common practice)."""

_DIGITS = 12  # decimals of a factor: 1.5·0.7 is 1.05
_TRIED = 50 * LIMIT  # selections gone through before a set counts as too large


class TooMany(ValueError):  # noqa: N818 - said as it reads
    """A set has more than `LIMIT` combinations."""


@dataclass(frozen=True)
class Case:
    """A load case as a set sees it.

    `action`: its kind; cases of one are one action. `alternative`: it never acts beside another alternative
    of its action. `varies`: it is in patterns or has a train. `psi`: ψ_0, ψ_1, ψ_2, where they are known.
    `own`: a partial factor of its own, in place of γ_G, γ_Q or γ_SET.
    """

    name: str
    action: str
    alternative: bool = False
    varies: bool = False
    psi: tuple[float, float, float] | None = None
    own: float | None = None


@dataclass(frozen=True)
class Generated:
    """A combination: the factor of each case, the number of its expression in the set, and what leads."""

    factors: Mapping[str, float]
    expression: int
    leading: tuple[str, ...] = ()


_Selection: TypeAlias = tuple[tuple[Case, ...], Mapping[str, float]]
"""Cases that act, with their factors; a factor of zero is left out."""


def load_of(action: str, standard: Standard) -> str | None:
    """Return the symbol of an action in a standard, None where the standard has no factors for it."""
    return LOADS[standard].get(action, "Q" if standard == "EN" else None)


def generate(
    chosen: StandardSet, cases: Sequence[Case], partial: Mapping[str, float]
) -> tuple[Generated, ...]:
    """Return the combinations of a set without duplicates, in the order of its expressions.

    `partial` has γ_G, γ_G_inf, γ_Q, γ_SET and ξ. Cases of kinds that the standard does not know are left out.

    Raises
    ------
    TooMany
        Where there are more than `LIMIT`.
    ValueError
        Where a case needs ψ and has none; `needed` tells it before.
    """
    actions = by_action(cases, chosen.standard)
    found: dict[tuple[tuple[str, float], ...], Generated] = {}
    tried = 0
    for number, expression in enumerate(chosen.expressions):
        for leading, selections in _selections(expression, actions, chosen.standard, partial):
            tried += 1
            if tried > _TRIED:
                raise TooMany
            factors = {name: f for _, chosen_factors in selections for name, f in chosen_factors.items()}
            if factors:
                found.setdefault(tuple(sorted(factors.items())), Generated(factors, number, leading))
    kept = _uncovered(tuple(found.values()), frozenset(c.name for c in cases if c.varies))
    if len(kept) > LIMIT:
        raise TooMany
    return kept


def by_action(cases: Sequence[Case], standard: Standard) -> dict[str, tuple[Case, ...]]:
    """Return the cases of each action that a standard knows."""
    found: dict[str, tuple[Case, ...]] = {}
    for case in cases:
        if load_of(case.action, standard) is not None:
            found[case.action] = (*found.get(case.action, ()), case)
    return found


def needed(chosen: StandardSet, cases: Sequence[Case]) -> dict[str, frozenset[str]]:
    """Return the symbols of the factors that a set takes for each case, such as 'γ_Q' and 'ψ_0'."""
    actions = by_action(cases, chosen.standard)
    several = sum(load_of(action, chosen.standard) == "Q" for action in actions) > 1
    found: dict[str, frozenset[str]] = {case.name: frozenset() for each in actions.values() for case in each}
    for expression in chosen.expressions:
        for term in expression.terms:
            for part in term.parts:
                if part.load == "Q_i" and expression.leads and not several:
                    continue
                for action, members in actions.items():
                    if load_of(action, chosen.standard) == part.load.partition("_1")[0].partition("_i")[0]:
                        for case in members:
                            found[case.name] |= {*term.factors, *part.factors}
    return found


def factor_of(symbols: Iterable[str], case: Case, partial: Mapping[str, float]) -> float:
    """Return the product of the factors of a case."""
    return round(math.prod((_value(symbol, case, partial) for symbol in symbols), start=1.0), _DIGITS)


def _value(symbol: str, case: Case, partial: Mapping[str, float]) -> float:
    if symbol.startswith("ψ_"):
        if case.psi is None:
            raise ValueError(f"the case {case.name} has no ψ")
        return case.psi[int(symbol[2:])]
    if symbol in ("γ_G", "γ_Q", "γ_SET") and case.own is not None:
        return case.own
    return partial[symbol] if symbol in partial else float(symbol)


def _selections(
    expression: Expression,
    actions: Mapping[str, tuple[Case, ...]],
    standard: Standard,
    partial: Mapping[str, float],
) -> Iterator[tuple[tuple[str, ...], tuple[_Selection, ...]]]:
    """Give what leads and what acts, for every way in which the loads of an expression may act."""
    variable = [action for action in actions if load_of(action, standard) == "Q"]
    for lead in (*variable, None) if expression.leads else (None,):
        beside = [a for a in variable if a != lead] if lead is not None or not expression.leads else []
        slots: list[list[_Selection]] = []
        leading_slot: int | None = None
        for term in expression.terms:
            (first, *_) = loads = [part.load for part in term.parts]
            if first == "Q_i":
                for action in beside:
                    slots.append(_slot(term.factors + term.parts[0].factors, action, actions, partial))
                    slots[-1].append(((), {}))
                continue
            if first == "Q_1":
                if lead is not None:
                    leading_slot = len(slots)
                    slots.append(_slot(term.factors + term.parts[0].factors, lead, actions, partial))
                continue
            options = [
                option
                for part in term.parts
                for action in actions
                if load_of(action, standard) == part.load
                for option in _slot(term.factors + part.factors, action, actions, partial)
            ]
            if not options and first in ITS_OWN and len(loads) == 1:
                return
            if not ALWAYS.issuperset(loads):
                options.append(((), {}))
            if options:
                slots.append(options)
        for selections in product(*slots):
            acting = {case.action for chosen, _ in selections for case in chosen}
            if standard == "EN" and any(apart <= acting for apart in APART):
                continue
            leading = tuple(selections[leading_slot][1]) if leading_slot is not None else ()
            yield leading, selections


def _slot(
    symbols: tuple[str, ...],
    action: str,
    actions: Mapping[str, tuple[Case, ...]],
    partial: Mapping[str, float],
) -> list[_Selection]:
    """Return the selections of an action that differ, without cases whose factor is zero."""
    found: dict[tuple[str, ...], _Selection] = {}
    for chosen in choices(actions[action]):
        factors = {case.name: factor_of(symbols, case, partial) for case in chosen}
        acting = tuple(case for case in chosen if factors[case.name] != 0.0)
        if acting:
            kept = {case.name: factors[case.name] for case in acting}
            found.setdefault(tuple(kept), (acting, kept))
    return list(found.values())


def choices(cases: Sequence[Case]) -> tuple[tuple[Case, ...], ...]:
    """Return the ways in which an action may act, the fullest first; permanent cases act as one.

    Raises
    ------
    TooMany
        Where the subsets alone are more than `LIMIT`.
    """
    if all(case.action == "permanent" for case in cases):
        return (tuple(cases),)
    alternatives = [case for case in cases if case.alternative]
    free = [case for case in cases if not case.alternative and not case.varies]
    if 2 ** len(free) > LIMIT:
        raise TooMany
    parts = [chosen for size in range(len(free), -1, -1) for chosen in subsets(free, size)]
    found = []
    for part in parts:
        for one in ([*((each,) for each in alternatives), ()]) if alternatives else ((),):
            names = {case.name for case in (*part, *one)}
            acting = tuple(c for c in cases if c.name in names or (c.varies and not c.alternative))
            if acting:
                found.append(acting)
    return tuple(found)


def _uncovered(found: Sequence[Generated], varying: frozenset[str]) -> tuple[Generated, ...]:
    """Leave out a combination where another has the same factors, and larger ones of cases that vary.

    Such a case gives every effect between none and its largest, so the larger factor has the effects of the
    smaller one.
    """
    alike: dict[frozenset[tuple[str, float]], list[Generated]] = {}
    for each in found:
        fixed = frozenset((name, f) for name, f in each.factors.items() if name not in varying)
        alike.setdefault(fixed, []).append(each)

    def covers(other: Generated, each: Generated) -> bool:
        return other is not each and all(
            other.factors.get(name, 0.0) >= each.factors.get(name, 0.0) for name in varying
        )

    covered = {id(e) for group in alike.values() for e in group if any(covers(o, e) for o in group)}
    return tuple(each for each in found if id(each) not in covered)
