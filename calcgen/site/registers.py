"""The registers over all calcs: inputs, assumptions, checks, references."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

from markupsafe import Markup

from calcgen.evaluation.results.calc import EvaluatedCalc
from calcgen.evaluation.results.lines import InputRow, InputsResult
from calcgen.language.nodes import Citation
from calcgen.site import addresses
from calcgen.site.citations import cited_lines
from calcgen.site.facts import PackageInput, ReferenceFacts
from calcgen.site.feeds import source_link
from calcgen.site.views import BarView, Link, bar, lettered, utilisation_text, words


@dataclass(frozen=True)
class InputEntry:
    """An input of the register."""

    calc: Link
    symbol: Markup
    href: str
    value: str
    note: Markup
    reference: Markup
    referenced: bool


@dataclass(frozen=True)
class AssumptionEntry:
    """An assumption of the register."""

    calc: Link
    number: str
    href: str
    text: Markup
    basis: Markup
    open: bool


@dataclass(frozen=True)
class CheckEntry:
    """A check of the register; `order` sorts by utilisation, exceeded ones first."""

    calc: Link
    check: Link
    word: str
    utilisation: str
    order: str
    bar: BarView | None
    reference: Markup


@dataclass(frozen=True)
class ReferenceEntry:
    """A document with the places that cite it."""

    key: str
    title: str
    facts: str
    note: str
    places: tuple[Link, ...]


def calc_link(calc: EvaluatedCalc) -> Link:
    """Return the link to a calc's page."""
    return Link(calc.number, addresses.calc_link(calc.number))


def input_entries(package: PackageInput) -> tuple[InputEntry, ...]:
    """Return all inputs, unreferenced ones first."""
    found = [
        InputEntry(
            calc_link(calc),
            lettered((row.name,)),
            _on_page(calc, row.name),
            row.shown.text,
            words(row.node.annotations.note, package.references),
            _source_of(row, package),
            row.referenced,
        )
        for calc, row in _inputs(package)
    ]
    return tuple(sorted(found, key=lambda e: e.referenced))


def assumption_entries(package: PackageInput) -> tuple[AssumptionEntry, ...]:
    """Return all assumptions, open ones first."""
    found = [
        AssumptionEntry(
            calc_link(calc),
            item.number,
            _on_page(calc, anchor) if calc.segments else addresses.source_line(calc.number, line),
            words(item.text, package.references),
            words(item.basis, package.references),
            item.open,
        )
        for calc in package.calcs
        for anchor, item in addresses.assumptions_of(calc)
        for line in [calc.calc.source.line_number(item.span)]
    ]
    return tuple(sorted(found, key=lambda e: not e.open))


def check_entries(package: PackageInput) -> tuple[CheckEntry, ...]:
    """Return all checks, exceeded ones first, then by utilisation."""
    ranked = [
        (
            (not check.satisfied, check.utilisation if check.utilisation is not None else -1.0),
            CheckEntry(
                calc_link(calc),
                Link(check.label, _on_page(calc, check.address)),
                "satisfied" if check.satisfied else "exceeded",
                utilisation_text(check.utilisation),
                f"{check.utilisation if check.utilisation is not None else -1.0:.12g}",
                bar(check),
                words(check.reference, package.references),
            ),
        )
        for calc in package.calcs
        for check in calc.checks
    ]
    return tuple(entry for _, entry in sorted(ranked, key=lambda pair: pair[0], reverse=True))


def reference_entries(package: PackageInput) -> tuple[ReferenceEntry, ...]:
    """Return the documents by key, each with the places that cite it."""
    places: dict[str, list[Link]] = {key: [] for key in package.references}
    for calc in package.calcs:
        for citation, anchor, line in cited_lines(calc):
            if citation.key in places:
                href = _on_page(calc, anchor) if anchor else addresses.source_line(calc.number, line)
                places[citation.key].append(Link(_cited_as(calc, citation, line), href))
    return tuple(
        ReferenceEntry(key, facts.title, _bibliography(facts), facts.note, tuple(dict.fromkeys(places[key])))
        for key, facts in sorted(package.references.items())
    )


def _inputs(package: PackageInput) -> Iterator[tuple[EvaluatedCalc, InputRow]]:
    for calc in package.calcs:
        for segment in calc.segments:
            if isinstance(segment, InputsResult):
                yield from ((calc, row) for row in segment.rows if isinstance(row, InputRow))


def _source_of(row: InputRow, package: PackageInput) -> Markup:
    reference = words(row.node.annotations.reference, package.references)
    return Markup(" ").join(part for part in (source_link(row, package), reference) if part)


def _on_page(calc: EvaluatedCalc, anchor: str) -> str:
    return addresses.link(addresses.calc_page(calc.number), anchor)


def _cited_as(calc: EvaluatedCalc, citation: Citation, line: int) -> str:
    place = f", {citation.place}" if citation.place else ""
    return f"{calc.number}, line {line}{place}"


def _bibliography(facts: ReferenceFacts) -> str:
    return ", ".join(p for p in (facts.author, facts.number, facts.edition, facts.publisher, facts.year) if p)
