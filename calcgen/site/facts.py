"""What pages show that evaluation does not know: the project, its references, its history."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field
from typing import Literal

from calcgen.evaluation.results.calc import EvaluatedCalc
from calcgen.site.figure import FigureSvg
from calcgen.text import Diagnostic


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
    item it is and how it changed.
    """

    address: str
    name: str
    what: str
    before: str
    after: str


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
    diagnostics : those of the project's own files.
    version : of the program.
    built : when the package was built, as text; may be empty.
    images : contents by path in the project, for the images that calcs show.
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
    diagnostics: tuple[Diagnostic, ...] = ()
    built: str = ""
    images: Mapping[str, bytes] = field(default_factory=dict)
