"""`vary`: one input, the values it takes in turn, and what is shown of each."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from calcgen.language.blocks.reading import BlockText, Outcome, read_each
from calcgen.language.cursor import Cursor
from calcgen.language.errors import ReadingError
from calcgen.language.expressions import expression
from calcgen.language.lines import Line
from calcgen.language.nodes import Annotations, Expression, Named, Text
from calcgen.text import Related, Report, Span

STOPS = frozenset({"steps", "from", "to", "over"})
"""Words that end an expression in this block."""

_FORMS = 'write L = 26 steps from 4 m to 9 m, or profile over "IPE *" for a text'


@dataclass(frozen=True)
class Steps:
    """`26 steps from 4 m to 9 m`: so many values, evenly apart, both ends among them."""

    count: Expression
    start: Expression
    end: Expression


@dataclass(frozen=True)
class Over:
    """`over "IPE *"`: the sections whose designations match, `*` being any text."""

    pattern: Text


@dataclass(frozen=True)
class Varied:
    """The line that says which input is varied, and through which values."""

    target: Named
    values: Steps | Over
    annotations: Annotations
    span: Span
    statement_span: Span


@dataclass(frozen=True)
class Show:
    """A line of expressions to show."""

    expressions: tuple[Expression, ...]
    annotations: Annotations
    span: Span
    statement_span: Span


@dataclass(frozen=True)
class VaryBlock:
    """A calc repeated: over the values of one input, with what is shown of each."""

    varied: Varied
    shows: tuple[Show, ...]
    span: Span
    head_span: Span

    @property
    def expressions(self) -> tuple[Expression, ...]:
        """All that is shown, in the order written."""
        return tuple(e for show in self.shows for e in show.expressions)


def read_vary(block: BlockText, report: Report) -> Outcome[VaryBlock]:
    """Read one line of an input and one or more of `show`; it defines no name."""
    nodes, failed = read_each(block.lines, report, _read_line, STOPS)
    varied = [node for node in nodes if isinstance(node, Varied)]
    shows = tuple(node for node in nodes if isinstance(node, Show))
    if not failed:
        _complete(block, varied, shows, report)
    if failed or len(varied) != 1 or not shows:
        return Outcome(None)
    return Outcome(VaryBlock(varied[0], shows, block.span, block.head_span))


def _complete(block: BlockText, varied: Sequence[Varied], shows: Sequence[Show], report: Report) -> None:
    """Report what is missing, and a second input."""
    if not varied:
        report.error("vary-incomplete", block.head_span, "no input is varied", hint=_FORMS)
    elif not shows:
        report.error(
            "vary-incomplete",
            block.head_span,
            "nothing is shown",
            hint="write show, and the values of interest: show M_Ed/M_c_Rd, beam.SLS.w_max",
        )
    for second in varied[1:]:
        report.error(
            "written-twice",
            second.target.span,
            "a second input is varied in this block",
            hint="write a block for each input",
            related=(Related(varied[0].target.span, "the first one"),),
        )


def _read_line(line: Line, cursor: Cursor) -> Varied | Show:
    if cursor.sees("show") and cursor.following.text not in ("=", "over"):
        return _read_show(line, cursor)
    target = cursor.named("an input")
    values: Steps | Over
    if cursor.accept("over"):
        pattern = cursor.token.value
        if not isinstance(pattern, Text):
            raise cursor.misplaced("a pattern of designations in quotes is missing", 'over "IPE *"')
        cursor.take()
        values = Over(pattern)
    else:
        cursor.expect("=", _FORMS)
        if cursor.sees("over"):
            raise ReadingError(
                "unexpected",
                cursor.span(cursor.token),
                "'over' stands without '='",
                hint=f"write {target.name} over {cursor.following.text}",
            )
        values = _steps(cursor)
    cursor.finish()
    return Varied(target, values, line.annotations, line.span, line.statement_span)


def _steps(cursor: Cursor) -> Steps:
    count = expression(cursor)
    cursor.expect("steps", _FORMS)
    cursor.expect("from", _FORMS)
    start = expression(cursor)
    cursor.expect("to", _FORMS)
    return Steps(count, start, expression(cursor))


def _read_show(line: Line, cursor: Cursor) -> Show:
    word = cursor.take()
    if cursor.ended:
        raise ReadingError(
            "vary-incomplete",
            cursor.span(word),
            "nothing is shown",
            hint="write show, and the values of interest: show M_Ed/M_c_Rd, beam.SLS.w_max",
        )
    found = [expression(cursor)]
    while cursor.accept(","):
        found.append(expression(cursor))
    cursor.finish()
    return Show(tuple(found), line.annotations, line.span, line.statement_span)
