"""The cover: how each calc stands, and what to look at first."""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Mapping, Sequence
from dataclasses import dataclass

from calcgen.evaluation.results.calc import EvaluatedCalc
from calcgen.evaluation.results.lines import InputRow, InputsResult
from calcgen.site import addresses
from calcgen.site.calc_page import sheet_texts
from calcgen.site.facts import ChangeView, PackageInput
from calcgen.site.registers import calc_link
from calcgen.site.standing import StandingView, standing_view
from calcgen.site.views import DiagnosticView, Link, diagnostic_view, utilisation_text

MOST_CHANGES = 12  # listed on the cover; the trail has all
MOST_FED = 4  # inputs told of a calc that changes because of what feeds it
NEAR = 0.95  # of its limit: a check from here on is looked at first


@dataclass(frozen=True)
class CalcEntry:
    """A calc as the cover lists it."""

    calc: Link
    title: str
    standing: StandingView
    conclusion: str
    revision: str


@dataclass(frozen=True)
class Matter:
    """One thing to look at: where it is, and what it is in a few words."""

    link: Link
    text: str


@dataclass(frozen=True)
class Matters:
    """Things of one kind to look at; `more` leads to the register that has them all."""

    heading: str
    items: tuple[Matter, ...]
    more: Link | None = None


@dataclass(frozen=True)
class CoverView:
    """The cover. `nothing` names the kinds under which there is nothing to look at."""

    facts: tuple[tuple[str, str], ...]
    calcs: tuple[CalcEntry, ...]
    diagnostics: tuple[DiagnosticView, ...]
    matters: tuple[Matters, ...]
    nothing: str
    pending: bool


def cover_view(package: PackageInput) -> CoverView:
    """Return the cover of a package."""
    by_path = {calc.calc.source.path: calc.number for calc in package.calcs}
    kinds = (
        Matters("in error", tuple(_errors(package))),
        Matters("not evaluated", tuple(_unevaluated(package))),
        Matters("exceeded checks", tuple(_checks(package, exceeded=True)), _more(addresses.CHECKS)),
        Matters(
            "checks within 5 % of the limit", tuple(_checks(package, exceeded=False)), _more(addresses.CHECKS)
        ),
        Matters("premises not met", tuple(_premises(package))),
        Matters("open assumptions", tuple(_assumptions(package)), _more(addresses.ASSUMPTIONS)),
        Matters("unreferenced inputs", tuple(_inputs(package)), _more(addresses.INPUTS)),
        Matters("warnings", tuple(_warnings(package))),
        Matters(_changed_heading(package), tuple(_changes(package)), _more(addresses.TRAIL)),
        Matters("calcs downstream of these changes", tuple(_downstream(package)), _more(addresses.MAP)),
    )
    return CoverView(
        facts=_facts(package),
        calcs=tuple(_entry(calc) for calc in package.calcs),
        diagnostics=tuple(
            diagnostic_view(d, f"diagnostic-{n}", by_path.get(d.source.path, ""))
            for n, d in enumerate(package.diagnostics, start=1)
        ),
        matters=tuple(k for k in kinds if k.items),
        nothing=", ".join(k.heading for k in kinds if not k.items),
        pending=package.pending,
    )


def _changed_heading(package: PackageInput) -> str:
    return "changes that the trail does not record yet" if package.pending else "last changes"


def _facts(package: PackageInput) -> tuple[tuple[str, str], ...]:
    project = package.project
    facts = (
        ("number", project.number),
        ("client", project.client),
        ("originator", project.originator),
        ("checker", project.checker),
        ("axes", f"{project.axes}, depth {project.depth}"),
        ("units", f"{project.units}, {project.digits} significant figures"),
        ("calcs", str(len(package.calcs))),
        ("built", package.built),
    )
    return tuple((label, text) for label, text in facts if text)


def _entry(calc: EvaluatedCalc) -> CalcEntry:
    sheet = sheet_texts(calc)
    return CalcEntry(
        calc_link(calc),
        calc.calc.title,
        standing_view(calc),
        calc.reason or sheet.get("conclusion", ""),
        sheet.get("revision", ""),
    )


def _at(calc: EvaluatedCalc, anchor: str, text: str) -> Matter:
    return Matter(Link(calc.number, addresses.link(addresses.calc_page(calc.number), anchor)), text)


def _more(path: str) -> Link:
    return Link("all", addresses.link(path))


def _errors(package: PackageInput) -> Iterator[Matter]:
    for calc in package.calcs:
        errors = [d for d in calc.diagnostics if d.severity == "error"]
        for number, d in enumerate(errors, start=1):
            yield _at(calc, f"diagnostic-{number}", f"line {d.line}: {d.message}")


def _warnings(package: PackageInput) -> Iterator[Matter]:
    for calc in package.calcs:
        errors = sum(d.severity == "error" for d in calc.diagnostics)
        warnings = [d for d in calc.diagnostics if d.severity == "warning"]
        for number, d in enumerate(warnings, start=errors + 1):
            yield _at(calc, f"diagnostic-{number}", f"line {d.line}: {d.message}")


def _unevaluated(package: PackageInput) -> Iterator[Matter]:
    for calc in package.calcs:
        if calc.standing == "not evaluated":
            yield _at(calc, "", calc.reason)


def _checks(package: PackageInput, *, exceeded: bool) -> Iterator[Matter]:
    for calc in package.calcs:
        for check in calc.checks:
            near = check.satisfied and check.utilisation is not None and check.utilisation > NEAR
            if not check.satisfied if exceeded else near:
                used = utilisation_text(check.utilisation)
                text = check.label if check.utilisation is None else f"{check.label}: {used} of 1"
                yield _at(calc, check.address, text)


def _premises(package: PackageInput) -> Iterator[Matter]:
    for calc in package.calcs:
        for premise in calc.premises:
            if premise.verdict == "not met":
                yield _at(calc, premise.of, f"{premise.of}, {premise.premise}: {premise.detail}")


def _assumptions(package: PackageInput) -> Iterator[Matter]:
    for calc in package.calcs:
        for anchor, item in addresses.assumptions_of(calc):
            if item.open:
                where = anchor if calc.segments else ""
                yield _at(calc, where, f"{item.number} {item.text.text}: {item.basis.text}")


def _inputs(package: PackageInput) -> Iterator[Matter]:
    for calc in package.calcs:
        for segment in calc.segments:
            if isinstance(segment, InputsResult):
                for row in segment.rows:
                    if isinstance(row, InputRow) and not row.referenced:
                        note = row.node.annotations.note.text
                        text = f"{row.name} = {row.shown.text}"
                        yield _at(calc, row.name, f"{text}, {note}" if note else text)


def _changes(package: PackageInput) -> Iterator[Matter]:
    """Yield the first of the changes; the trail has those that it records, the calcs mark all of them."""
    changes = _latest(package)
    for change in changes[:MOST_CHANGES]:
        yield Matter(change_link(change.address, package, change.name), change_text(change))
    if len(changes) > MOST_CHANGES:
        rest = f"{len(changes) - MOST_CHANGES} more changes"
        if package.pending:
            yield Matter(Link("calcs", "#standing-of-calcs"), f"{rest}, marked there")
        else:
            yield Matter(Link("trail", addresses.link(addresses.TRAIL)), rest)


def _latest(package: PackageInput) -> Sequence[ChangeView]:
    """Return the changes that the trail does not record yet where there are any, else its newest ones."""
    if package.pending:
        return package.unrecorded
    return package.history[0].changes if package.history else ()


def _downstream(package: PackageInput) -> Iterator[Matter]:
    """Yield each calc that changes because of what feeds it, with the inputs that have changed."""
    for number, changes in fed_changes(_latest(package)).items():
        texts = [_fed_text(c, c.name.removeprefix(number).lstrip()) for c in changes]
        more = f"; and {len(texts) - MOST_FED} more" if len(texts) > MOST_FED else ""
        link = change_link(changes[0].address, package, number)
        yield Matter(link, "; ".join(texts[:MOST_FED]) + more)


def _fed_text(change: ChangeView, name: str) -> str:
    """Return a fed input with what it was and is; by its name alone where that takes several numbers."""
    return name if ";" in change.before else f"{name}: {change.before} → {change.after}"


def fed_changes(changes: Iterable[ChangeView]) -> Mapping[str, Sequence[ChangeView]]:
    """Return by calc, in order, the inputs that follow from changes of other calcs."""
    found: dict[str, list[ChangeView]] = {}
    for change in changes:
        if change.fed:
            found.setdefault(change.address.partition("#")[0], []).append(change)
    return dict(sorted(found.items()))


def change_link(address: str, package: PackageInput, name: str = "") -> Link:
    """Return the link to an item of the trail, or to the trail where it is on no page any more."""
    link = _item_link(address, package)
    return Link(name or link.text, link.href)


def _item_link(address: str, package: PackageInput) -> Link:
    number, _, anchor = address.partition("#")
    if number == "references" and anchor in package.references:
        return Link(anchor, addresses.link(addresses.REFERENCES, anchor))
    calc = package.by_number.get(number)
    if calc is None:
        return Link(address, addresses.link(addresses.TRAIL))
    known = addresses.anchors_of(calc) | {a for a, _ in addresses.assumptions_of(calc) if calc.segments}
    return Link(address, addresses.link(addresses.calc_page(number), anchor if anchor in known else ""))


def change_text(change: ChangeView) -> str:
    """Return a change in a few words."""
    moved = " → ".join(text for text in (change.before, change.after) if text)
    return ": ".join(text for text in (change.what, moved) if text)
