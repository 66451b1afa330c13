"""The names of a calc while it is evaluated from top to bottom."""

from __future__ import annotations

from dataclasses import dataclass, field
from typing import Protocol

from calcgen.evaluation.results.common import Plain
from calcgen.evaluation.results.table import TableResult
from calcgen.language.nodes import CONSTANTS, FUNCTIONS, Name, Named
from calcgen.quantities.display import Style
from calcgen.quantities.measure import Measure, from_si, measure
from calcgen.quantities.symbols import plain
from calcgen.quantities.units import STANDARD_GRAVITY
from calcgen.text import Related, Report, Span, nearest

_CONSTANT_VALUES = {
    "π": measure(3.141592653589793, None),
    "g_n": from_si(STANDARD_GRAVITY, "m/s²"),
}


_CALLED = frozenset({"table"})  # kinds that are read by their name with arguments


class Thing(Protocol):
    """What a block defines: its results are read by dotted names, those of a table by its name, called."""

    @property  # read-only, so that a frozen type fits
    def kind(self) -> str:
        """The kind of block, for messages: 'section'."""
        ...

    def read(self, name: Name, arguments: tuple[Plain, ...] | None, report: Report) -> Measure | None:
        """Return the result that `name` asks for; report and return None when there is none."""
        ...


@dataclass
class Scope:
    """What is defined so far. It grows while a calc is evaluated and is read by calcs fed from it.

    Attributes
    ----------
    failed : names that would be defined, had their line not failed: using one reports nothing more.
    """

    report: Report
    style: Style
    values: dict[str, Plain] = field(default_factory=dict)
    things: dict[str, Thing] = field(default_factory=dict)
    failed: set[str] = field(default_factory=set)
    places: dict[str, Span] = field(default_factory=dict)
    later: frozenset[str] = frozenset()

    def define(self, target: Named) -> bool:
        """Claim a name for the line that defines it; report a name that is taken or reserved."""
        name = target.name
        if name in CONSTANTS or name in FUNCTIONS:
            self.report.error(
                "reserved-name",
                target.span,
                f"'{name}' is reserved",
                hint="choose another name, or add a subscript",
            )
            self.failed.add(name)
            self.failed.add(name)
            return False
        if name in self.places:
            first = self.places[name]
            line = self.report.source.line_number(first)
            self.report.error(
                "name-defined-twice",
                target.span,
                f"'{plain(name)}' is already defined on line {line}",
                hint="a name is defined once; give this one a subscript of its own",
                related=(Related(first, "defined here"),),
            )
            return False
        self.places[name] = target.span
        return True

    def value(
        self, name: Name, arguments: tuple[Plain, ...] | None, report: Report | None = None
    ) -> Plain | None:
        """Return the value a name stands for; report and return None when it has none."""
        to = report or self.report
        head = name.parts[0]
        if len(name.parts) == 1 and arguments is None:
            if head in CONSTANTS:
                return _CONSTANT_VALUES["π" if head in ("pi", "π") else head]
            if head in self.values:
                return self.values[head]
        if head in self.failed:
            return None
        if head in self.things:
            thing = self.things[head]
            called = thing.kind in _CALLED
            if len(name.parts) == 1 and not (called and arguments is not None):
                to.error(
                    "block-is-no-value",
                    name.span,
                    f"'{plain(head)}' is a {thing.kind}, not a value",
                    hint=f"look up one of its values: {head}(row, column)"
                    if called
                    else f"name one of its results after a dot: {head}.…",
                )
                return None
            return thing.read(name, arguments, to)
        self._unknown(name, arguments, to)
        return None

    def _is_head_of_table(self, word: str) -> bool:
        tables = (getattr(thing, "result", None) for thing in self.things.values())
        return any(
            head.value == word
            for table in tables
            if isinstance(table, TableResult)
            for head in (*table.rows, *table.columns)
        )

    def _unknown(self, name: Name, arguments: tuple[Plain, ...] | None, to: Report) -> None:
        head = name.parts[0]
        if head in self.values:
            if len(name.parts) > 1:
                to.error(
                    "no-such-result",
                    name.spans[1],
                    f"'{plain(head)}' is a value and has no parts",
                    hint="only sections, beams and stresses have results after a dot",
                )
            else:
                to.error(
                    "not-a-function",
                    name.span,
                    f"'{plain(head)}' is a value, not a function",
                    hint="write * to multiply by what stands in parentheses",
                )
            return
        known = [*self.values, *self.things, *self.failed]
        found = nearest(head, known)
        if head in self.later:
            hint = "it is defined further down; blocks are evaluated from top to bottom, so move it up"
        elif self._is_head_of_table(head):
            hint = f'quotes are missing: "{head}" is a head of a table'
        elif found:
            hint = f"the nearest name defined above is '{found}'"
        elif arguments is not None:
            found = nearest(head, FUNCTIONS)
            hint = f"the nearest function is '{found}'" if found else "define it above, in inputs or working"
        else:
            hint = "define it above, in inputs or working"
        to.error("unknown-name", name.spans[0], f"'{plain(head)}' is not defined", hint=hint)
