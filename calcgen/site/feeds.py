"""Links between calcs that feed each other."""

from __future__ import annotations

from markupsafe import Markup, escape

from calcgen.evaluation.results.calc import EvaluatedCalc, Hindrance
from calcgen.evaluation.results.common import FedBlock
from calcgen.evaluation.results.lines import InputRow
from calcgen.site import addresses
from calcgen.site.facts import PackageInput


def source_link(row: InputRow, package: PackageInput) -> Markup:
    """Return where a fed input comes from, as a link to its place: 'section main of W-07'; '' for others."""
    if row.origin is None:
        return Markup("")
    feeder = package.by_number.get(row.origin.calc)
    anchor = addresses.nearest_anchor(row.origin.name, addresses.anchors_of(feeder)) if feeder else ""
    href = addresses.link(addresses.calc_page(row.origin.calc), anchor)
    kind = f"{row.value.kind} " if isinstance(row.value, FedBlock) else ""
    name = escape(row.origin.name).replace(".", Markup(".<wbr>"))  # a long one breaks between its parts
    arguments = row.origin.arguments.replace(" ", "\N{NO-BREAK SPACE}")
    return Markup('<a href="{}">{}{}{} of {}</a>').format(href, kind, name, arguments, row.origin.calc)


def reason(calc: EvaluatedCalc) -> Markup:
    """Return why a calc is not evaluated; the calcs at fault are links to their faults."""
    if not calc.hindrances:
        return escape(calc.reason)
    return Markup("; ").join(_told(h) for h in calc.hindrances)


def _told(hindrance: Hindrance) -> Markup:
    """Return a hindrance; the calc in error leads to its diagnostics."""
    links = {
        word: Markup('<a href="{}">{}</a>').format(
            addresses.link(addresses.calc_page(number), "diagnostics" if number == hindrance.root else ""),
            number,
        )
        for word, number in (("calc", hindrance.calc), ("root", hindrance.root))
    }
    return escape(hindrance.words).format(**links)
