"""What pages show that evaluation does not know: the project, its references, its history."""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterable, Mapping
from dataclasses import dataclass, field
from functools import cached_property
from typing import Literal, TypeVar

from calcgen.evaluation.feeding import Fed, fed_inputs
from calcgen.evaluation.results.calc import EvaluatedCalc
from calcgen.site.figure import FigureSvg
from calcgen.text import Diagnostic

T = TypeVar("T")


@dataclass(frozen=True)
class ProjectFacts:
    """What project.toml says; empty texts where it says nothing."""

    title: str
    axes: Literal["eurocode", "american"]
    number: str = ""
    client: str = ""
    originator: str = ""
    checker: str = ""
    depth: Literal["down", "up"] = "down"
    units: Literal["SI", "US"] = "SI"
    digits: int = 4


@dataclass(frozen=True)
class ReferenceFacts:
    """A document of references.toml."""

    title: str
    number: str = ""
    edition: str = ""
    author: str = ""
    publisher: str = ""
    year: str = ""
    note: str = ""


@dataclass(frozen=True)
class PreviousValue:
    """What an item was before it changed, and when it last stood: '4.000 kPa', 'at P1' or 'on 2026-12-01'."""

    text: str
    when: str = ""

    @property
    def was(self) -> str:
        """The mark beside the item."""
        return f"was {self.text} {self.when}".rstrip()


@dataclass(frozen=True)
class ChangeView:
    """One change of an entry; `before` or `after` is empty where the item did not exist.

    `address` is as the trail has it, 'W-12#M_Ed', `name` as it is read, 'W-12 M_Ed'; `what` says what kind of
    item it is and how it changed; `fed` marks an input that follows from a change of the calc it comes from.
    """

    address: str
    name: str
    what: str
    before: str
    after: str
    fed: bool = False


@dataclass(frozen=True)
class HistoryView:
    """One entry of the trail, as its page shows it."""

    when: str
    who: str
    why: str
    changes: tuple[ChangeView, ...]
    heading: str = ""


@dataclass(frozen=True)
class PackageInput:
    """Everything a package is made of.

    Attributes
    ----------
    calcs : in the order in which the package lists them.
    figures : by calc number and block name.
    conventions : the axes and signs in force.
    previous : by address, 'W-12#q_k'.
    history : newest entry first.
    pending : whether there are changes that the trail does not record yet.
    unrecorded : those changes; empty where the trail has no entry yet, and all is new.
    diagnostics : those of the project's own files.
    version : of the program.
    built : when the package was built, as text; may be empty.
    images : contents by path in the project, for the images that calcs show.
    map : which calc feeds which, in one figure or several.
    """

    project: ProjectFacts
    calcs: tuple[EvaluatedCalc, ...]
    references: Mapping[str, ReferenceFacts]
    figures: Mapping[tuple[str, str], tuple[FigureSvg, ...]]
    conventions: tuple[FigureSvg, ...]
    previous: Mapping[str, PreviousValue]
    history: tuple[HistoryView, ...]
    version: str
    pending: bool = False
    unrecorded: tuple[ChangeView, ...] = ()
    diagnostics: tuple[Diagnostic, ...] = ()
    built: str = ""
    images: Mapping[str, bytes] = field(default_factory=dict)
    map: tuple[FigureSvg, ...] = ()

    @cached_property
    def by_number(self) -> Mapping[str, EvaluatedCalc]:
        """The calcs by their numbers, in the order in which the package lists them."""
        return {calc.number: calc for calc in self.calcs}

    @cached_property
    def numbers(self) -> frozenset[str]:
        """The numbers of all calcs."""
        return frozenset(self.by_number)

    @cached_property
    def positions(self) -> Mapping[str, int]:
        """By number, the place of a calc among all, from 0."""
        return {number: place for place, number in enumerate(self.by_number)}

    @cached_property
    def fed(self) -> tuple[Fed, ...]:
        """What calcs take from each other."""
        return fed_inputs(self.calcs)

    @cached_property
    def neighbours(self) -> Mapping[str, tuple[tuple[tuple[str, int], ...], tuple[tuple[str, int], ...]]]:
        """By number, the calcs that feed a calc and those that it feeds, each with the number of values."""
        counts = sorted(Counter((fed.origin.calc, fed.taker) for fed in self.fed).items())
        before = _grouped((taker, (giver, count)) for (giver, taker), count in counts)
        after = _grouped((giver, (taker, count)) for (giver, taker), count in counts)
        return {number: (before.get(number, ()), after.get(number, ())) for number in before.keys() | after}

    @cached_property
    def marks(self) -> Mapping[str, tuple[tuple[str, PreviousValue], ...]]:
        """What the changed items of each calc were, by its number."""
        return _grouped((address.partition("#")[0], (address, p)) for address, p in self.previous.items())

    @cached_property
    def drawn(self) -> Mapping[str, tuple[tuple[str, tuple[FigureSvg, ...]], ...]]:
        """The figures of each calc with the names of their blocks, by its number."""
        return _grouped((number, (name, row)) for (number, name), row in self.figures.items())


def _grouped(pairs: Iterable[tuple[str, T]]) -> Mapping[str, tuple[T, ...]]:
    found: dict[str, list[T]] = {}
    for key, value in pairs:
        found.setdefault(key, []).append(value)
    return {key: tuple(values) for key, values in found.items()}
