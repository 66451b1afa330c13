"""What differs between two states of a project, and whether by hand or only downstream."""

from __future__ import annotations

import re
from collections.abc import Iterator, Mapping
from dataclasses import dataclass
from typing import Literal, TypeAlias

from calcgen.trail.canonical import Json, canonical

Item: TypeAlias = Mapping[str, Json]
"""Fields: kind, text, value, unit, note, reference, utilisation; what an item has not is absent."""

State: TypeAlias = Mapping[str, Item]
"""The items of a project by address, such as 'W-12#M_Ed'."""

How = Literal["added", "removed", "edited", "moved"]

# What a person writes; everything else in an item follows from this and from other items.
_WRITTEN = ("kind", "text", "note", "reference")


@dataclass(frozen=True)
class Change:
    """One address whose item differs; `before` or `after` is None where the item does not exist."""

    address: str
    before: Item | None
    after: Item | None

    @property
    def how(self) -> How:
        """Edited by hand (its text, note or reference differs), or moved: same text, other value."""
        if self.before is None:
            return "added"
        if self.after is None:
            return "removed"
        same = all(self.before.get(field) == self.after.get(field) for field in _WRITTEN)
        return "moved" if same else "edited"

    @property
    def kind(self) -> str:
        """Kind of the item: 'input', 'formula', 'check' ...; that of `after` where there is one."""
        item = self.after if self.after is not None else self.before or {}
        return str(item.get("kind", ""))

    @property
    def calc(self) -> str:
        """Number of the calc that the address belongs to."""
        return self.address.partition("#")[0]

    @property
    def utilisation(self) -> tuple[float | None, float | None]:
        """Utilisation before and after; None where there is none."""
        return _utilisation(self.before), _utilisation(self.after)


@dataclass(frozen=True)
class Changes:
    """The changes between two states, sorted by address; false when there are none."""

    all: tuple[Change, ...]

    def __iter__(self) -> Iterator[Change]:
        return iter(self.all)

    def __len__(self) -> int:
        return len(self.all)

    @property
    def by_hand(self) -> tuple[Change, ...]:
        """Those that someone made: added, removed, edited."""
        return tuple(change for change in self.all if change.how != "moved")

    @property
    def downstream(self) -> tuple[Change, ...]:
        """Those that follow from the others: same text, other value."""
        return tuple(change for change in self.all if change.how == "moved")

    @property
    def checks(self) -> tuple[Change, ...]:
        """Those of checks, each with its utilisation before and after."""
        return tuple(change for change in self.all if change.kind == "check")

    @property
    def calcs(self) -> tuple[str, ...]:
        """Numbers of the calcs concerned, sorted."""
        return tuple(sorted({change.calc for change in self.all}, key=natural))


def compare(before: State, after: State) -> Changes:
    """Return what differs between two states; values are compared as the trail writes them.

    Raises
    ------
    ValueError
        When a number is not finite.
    """
    found = []
    for address in sorted(before.keys() | after.keys(), key=natural):
        old, new = before.get(address), after.get(address)
        if _text(old) != _text(new):
            found.append(Change(address, old, new))
    return Changes(tuple(found))


def natural(text: str) -> tuple[tuple[int, int, str], ...]:
    """Return a key that sorts W-2 before W-12."""
    parts = re.findall(r"([0-9]+)|([^0-9]+)", text)
    return tuple((0, int(digits), digits) if digits else (1, 0, other) for digits, other in parts)


def _text(item: Item | None) -> str | None:
    return None if item is None else canonical(item)


def _utilisation(item: Item | None) -> float | None:
    value = item.get("utilisation") if item else None
    return float(value) if isinstance(value, int | float) else None
