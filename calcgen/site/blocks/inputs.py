"""`inputs`: what is given, and where it comes from."""

from __future__ import annotations

from dataclasses import dataclass, replace

from markupsafe import Markup

from calcgen.evaluation.results.lines import InputRow, InputsResult
from calcgen.site import addresses
from calcgen.site.context import Context
from calcgen.site.equations import stated
from calcgen.site.views import TextRow, ValueRow


@dataclass(frozen=True)
class InputsView:
    """The inputs of one block."""

    rows: tuple[ValueRow | TextRow, ...]
    template: str = "blocks/inputs.html"


def inputs_view(result: InputsResult, context: Context) -> InputsView:
    """Return the inputs of a block."""
    return InputsView(
        tuple(_row(row, context) if isinstance(row, InputRow) else context.failed(row) for row in result.rows)
    )


def _row(row: InputRow, context: Context) -> ValueRow:
    view = context.row(row.name, row.node.annotations, row.line)
    if row.origin is not None:
        view = replace(view, reference=_origin(row, context) + Markup(" ") + view.reference)
    return ValueRow(view, stated(row.name, row.shown), "" if row.referenced else "unreferenced")


def _origin(row: InputRow, context: Context) -> Markup:
    """Return the link to the value in the calc that feeds this one."""
    if row.origin is None:
        return Markup("")
    feeder = next((c for c in context.package.calcs if c.number == row.origin.calc), None)
    anchor = addresses.nearest_anchor(row.origin.name, addresses.anchors_of(feeder)) if feeder else ""
    href = addresses.link(addresses.calc_page(row.origin.calc), anchor)
    return Markup('<a href="{}">{} of {}</a>').format(href, row.origin.name, row.origin.calc)
