"""What a calc takes from another: a value, or a whole block under a name of its own."""

from __future__ import annotations

from collections.abc import Collection, Iterable, Mapping
from dataclasses import dataclass, replace

from calcgen.evaluation.blocks.beam import BeamThing
from calcgen.evaluation.blocks.beam_lines import length_text
from calcgen.evaluation.blocks.section import SectionThing
from calcgen.evaluation.blocks.stress import StressThing
from calcgen.evaluation.blocks.table_lookup import TableThing
from calcgen.evaluation.formulas import Evaluator
from calcgen.evaluation.results.beam import BeamResult
from calcgen.evaluation.results.common import FedBlock, Plain
from calcgen.evaluation.results.named import named_results
from calcgen.evaluation.results.section import SectionResult
from calcgen.evaluation.results.table import TableResult
from calcgen.evaluation.scope import Scope, Thing
from calcgen.language.blocks.inputs import Feed
from calcgen.quantities.display import Style
from calcgen.quantities.measure import Measure
from calcgen.quantities.symbols import plain
from calcgen.text import Report, nearest

_MOST = 5  # spans or parts that are told one by one


@dataclass(frozen=True)
class Upstream:
    """What may feed the calc `taker`: the scopes of the calcs evaluated before it.

    `numbers` are those of all calcs, `unread` those of files that cannot be read.
    """

    taker: str
    scopes: Mapping[str, Scope]
    numbers: Collection[str]
    unread: Collection[str] = ()


def taken(feed: Feed, scope: Scope, upstream: Upstream) -> Plain | Thing | None:
    """Return what a calc takes from another; report a calc, a name or a result that does not exist."""
    source = source_of(feed, scope.report, upstream)
    if source is None:
        return None
    head = feed.name.parts[0]
    if len(feed.name.parts) == 1 and feed.name.arguments is None and head in source.things:
        return source.things[head]
    arguments: tuple[Plain, ...] | None = None
    if feed.name.arguments is not None:
        values = [Evaluator(scope).value(a) for a in feed.name.arguments]
        if any(v is None for v in values):
            return None
        arguments = tuple(v for v in values if v is not None)
    return source.value(feed.name, arguments, report=scope.report)


def source_of(feed: Feed, report: Report, upstream: Upstream) -> Scope | None:
    """Return the scope of the calc that feeds; report a calc, or a name there, that does not exist."""
    source = upstream.scopes.get(feed.calc)
    if source is None:
        _missing(feed, report, upstream)
        return None
    head = feed.name.parts[0]
    if head in source.values or head in source.things:
        return source
    found = nearest(head, [*source.values, *source.things])
    report.error(
        "unknown-name",
        feed.name.spans[0],
        f"the calc {feed.calc} has no '{plain(head)}'",
        hint=f"the nearest name there is '{found}'" if found else "it is defined in no block there",
    )
    return None


def _missing(feed: Feed, report: Report, upstream: Upstream) -> None:
    """Report a calc that does not exist, or whose file cannot be read."""
    message = f"there is no calc '{feed.calc}' in this project"
    found = nearest(feed.calc, (n for n in upstream.numbers if n != upstream.taker))
    hint = f"the nearest calc is '{found}'" if found else "a calc's number is the stem of its file's name"
    if feed.calc in upstream.unread:
        message = f"the file of the calc '{feed.calc}' cannot be read"
        hint = "its own fault is told on the cover"
    report.error("unknown-calc", feed.calc_span, message, hint=hint)


def under_name(thing: Thing, name: str) -> Thing:
    """Return a block under the name that it has in the calc that takes it."""
    match thing:
        case SectionThing(result=section):
            return replace(thing, result=replace(section, name=name))
        case BeamThing(result=beam):
            return replace(thing, result=replace(beam, name=name))
        case StressThing(result=stress):
            return replace(thing, result=replace(stress, name=name))
        case TableThing(result=table):
            return replace(thing, result=replace(table, name=name))
    raise AssertionError(thing)


def fed_block(thing: Thing, style: Style) -> tuple[FedBlock, str]:
    """Return a block as the calc that takes it has it, and which one it is, with its sizes."""
    match thing:
        case SectionThing(result=section):
            results = {name: r.value for name, r in named_results(section)}
            results |= {r.name: r.value for r in section.further}
            what = _section(section)
            return FedBlock("section", what, results), ", ".join([what, *_sizes(section)])
        case BeamThing(result=beam):
            results = {name: r.value for name, r in named_results(beam)}
            count = len(beam.spans)
            what = f"{count} span{'s' if count > 1 else ''}"
            return FedBlock("beam", what, results), _spans(beam, style)
        case StressThing(result=stress):
            results = {name: r.value for name, r in named_results(stress)}
            what = f"{_section(stress.section)}, {stress.model.replace('_', ' ')}"
            return FedBlock("stress", what, results), what
        case TableThing(result=table):
            rows, columns = len(table.rows), len(table.columns)
            what = f"{rows} row{'s' if rows > 1 else ''}, {columns} column{'s' if columns > 1 else ''}"
            return FedBlock("table", what, dict(_cells(table))), what
    raise AssertionError(thing)


def _section(section: SectionResult) -> str:
    """Return which section it is: 'IPE 240', 'rectangle', 'rib, flange, tension'."""
    names = [plain(owner.name) for owner in section.owners if owner.name]
    if not names:
        return section.designation or section.shape.replace("_", " ")
    return ", ".join(names) if len(names) <= _MOST else f"{len(names)} parts"


def _sizes(section: SectionResult) -> list[str]:
    """Return the two leading dimensions of a section that no catalogue names: depth and width, say."""
    if section.designation:
        return []
    names = {r.name for r in section.further}
    aliases = {"d", "b_f"} if "h" in names else set()
    return [f"{plain(r.name)} = {r.shown.text}" for r in section.further if r.name not in aliases][:2]


def _spans(beam: BeamResult, style: Style) -> str:
    unit = "ft" if style.system == "US" else "m"
    lengths = [length_text(end - start, style, unit) for start, end in beam.spans]
    if len(lengths) > _MOST:
        return f"{len(lengths)} spans, {length_text(beam.model.length, style, unit)} in all"
    return f"span{'s' if len(lengths) > 1 else ''} {', '.join(lengths)}"


def _cells(table: TableResult) -> Iterable[tuple[str, Measure]]:
    for row, cells in zip(table.rows, table.cells, strict=True):
        for column, cell in zip(table.columns, cells, strict=True):
            if cell is not None:
                yield f"({row.shown.text}, {column.shown.text})", cell.value
