"""`inputs`: what is given, and where it comes from."""

from __future__ import annotations

from dataclasses import dataclass, replace

from markupsafe import Markup

from calcgen.evaluation.results.common import FedBlock
from calcgen.evaluation.results.lines import InputRow, InputsResult
from calcgen.quantities.symbols import plain
from calcgen.site.context import Context
from calcgen.site.equations import named, stated
from calcgen.site.feeds import source_link
from calcgen.site.lookups import rows_of
from calcgen.site.views import TextRow, ValueRow


@dataclass(frozen=True)
class InputsView:
    """The inputs of one block, and by the name of a table of another calc what is looked up in it."""

    rows: tuple[ValueRow | TextRow, ...]
    lookups: tuple[tuple[str, tuple[ValueRow, ...]], ...]
    template: str = "blocks/inputs.html"


def inputs_view(result: InputsResult, context: Context) -> InputsView:
    """Return the inputs of a block."""
    tables = (r.name for r in result.rows if isinstance(r, InputRow) and isinstance(r.value, FedBlock))
    return InputsView(
        tuple(
            _row(row, context) if isinstance(row, InputRow) else context.failed(row) for row in result.rows
        ),
        tuple((plain(name), rows) for name in tables for rows in [rows_of(name, context)] if rows),
    )


def _row(row: InputRow, context: Context) -> ValueRow:
    view = context.row(row.name, row.node.annotations, row.line)
    if row.origin is not None:
        view = replace(view, reference=source_link(row, context.package) + Markup(" ") + view.reference)
    if isinstance(row.value, FedBlock):
        return ValueRow(view, named(row.name, f"{row.value.kind} {row.shown.text}"))
    return ValueRow(view, stated(row.name, row.shown), "" if row.referenced else "unreferenced")
