"""The map: which calc feeds which, drawn, and every value that one takes from another."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass

from markupsafe import Markup

from calcgen.evaluation.feeding import Fed
from calcgen.evaluation.results.calc import EvaluatedCalc
from calcgen.evaluation.results.common import FedBlock
from calcgen.site import addresses
from calcgen.site.facts import PackageInput
from calcgen.site.figure import FigureSvg
from calcgen.site.views import Link, lettered

MOST_NEIGHBOURS = 12  # calcs told on the page of one that they feed, or that feeds them


@dataclass(frozen=True)
class FeedEntry:
    """A value that one calc takes from another.

    `anchor` stands at the first of those that the one takes from the other, '' at the rest of them; `was` is
    the mark of a value that changed.
    """

    anchor: str
    giver: Link
    given: Markup
    given_href: str
    taker: Link
    taken: Markup
    taken_href: str
    value: str
    was: str


@dataclass(frozen=True)
class MapView:
    """Which calc feeds which; `alone` are the calcs that neither feed nor are fed."""

    figures: tuple[FigureSvg, ...]
    feeds: tuple[FeedEntry, ...]
    alone: tuple[Link, ...]


@dataclass(frozen=True)
class Neighbour:
    """A calc that feeds another or is fed by it; `values` tells how many values and leads to them."""

    calc: Link
    values: Link


@dataclass(frozen=True)
class Neighbours:
    """The calcs on one side of a calc: 'fed by' or 'feeds'; `more` leads to those that are not listed."""

    heading: str
    calcs: tuple[Neighbour, ...]
    more: Link | None


def map_view(package: PackageInput) -> MapView:
    """Return which calc feeds which, by the calc that feeds, then by the one that is fed."""
    linked = {number for fed in package.fed for number in (fed.origin.calc, fed.taker)}
    alone = tuple(_calc(calc.number) for calc in package.calcs if calc.number not in linked)
    ranked = sorted(package.fed, key=lambda fed: (fed.origin.calc, fed.taker))
    return MapView(package.map, tuple(_entries(ranked, package)), alone)


def neighbours(calc: EvaluatedCalc, package: PackageInput) -> tuple[Neighbours, ...]:
    """Return what feeds a calc and what it feeds; a side where there is nothing is left out."""
    before, after = package.neighbours.get(calc.number, ((), ()))
    sides = (
        ("fed by", [_neighbour(n, count, addresses.feeds_link(n, calc.number)) for n, count in before]),
        ("feeds", [_neighbour(n, count, addresses.feeds_link(calc.number, n)) for n, count in after]),
    )
    return tuple(_side(heading, found) for heading, found in sides if found)


def _side(heading: str, found: list[Neighbour]) -> Neighbours:
    rest = len(found) - MOST_NEIGHBOURS
    more = Link(f"and {rest} more", addresses.link(addresses.MAP)) if rest > 0 else None
    return Neighbours(heading, tuple(found[:MOST_NEIGHBOURS]), more)


def _neighbour(number: str, count: int, href: str) -> Neighbour:
    return Neighbour(_calc(number), Link(f"{count} value{'s' if count > 1 else ''}", href))


def _entries(feeds: Iterable[Fed], package: PackageInput) -> Iterable[FeedEntry]:
    told: set[str] = set()
    for fed in feeds:
        anchor = addresses.feeds_anchor(fed.origin.calc, fed.taker)
        yield _entry(fed, "" if anchor in told else anchor, package)
        told.add(anchor)


def _entry(fed: Fed, anchor: str, package: PackageInput) -> FeedEntry:
    giver, page = package.by_number[fed.origin.calc], addresses.calc_page(fed.taker)
    place = addresses.nearest_anchor(fed.origin.name, addresses.anchors_of(giver))
    previous = package.previous.get(f"{fed.taker}#{fed.name}")
    evaluated = fed.row is not None
    kind = f"{fed.row.value.kind} " if fed.row is not None and isinstance(fed.row.value, FedBlock) else ""
    return FeedEntry(
        anchor=anchor,
        giver=_calc(giver.number),
        given=Markup("{}{}{}").format(
            kind, lettered(tuple(fed.origin.name.split("."))), fed.origin.arguments
        ),
        given_href=addresses.link(addresses.calc_page(giver.number), place),
        taker=_calc(fed.taker),
        taken=lettered((fed.name,)),
        taken_href=addresses.link(page, fed.name)
        if evaluated
        else addresses.source_line(fed.taker, fed.line),
        value=fed.text or "—",
        was=previous.was if previous is not None else "",
    )


def _calc(number: str) -> Link:
    return Link(number, addresses.calc_link(number))
