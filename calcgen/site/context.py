"""What the composers of a calc's page share: the calc, what surrounds it, and how a row is made of a line."""

from __future__ import annotations

from dataclasses import dataclass

from markupsafe import Markup, escape

from calcgen.evaluation.results.calc import EvaluatedCalc
from calcgen.evaluation.results.lines import FailedRow
from calcgen.language.nodes import Annotations, Column
from calcgen.site.facts import PackageInput
from calcgen.site.figure import FigureSvg
from calcgen.site.prose import ProseRenderer
from calcgen.site.views import RowView, TextRow, words
from calcgen.text import SourceFile


@dataclass(frozen=True)
class Context:
    """A calc whose page is being composed; `anchors` are those of its values and blocks."""

    calc: EvaluatedCalc
    package: PackageInput
    anchors: frozenset[str]
    prose: ProseRenderer

    @property
    def source(self) -> SourceFile:
        """The calc's source."""
        return self.calc.calc.source

    def words(self, column: Column) -> Markup:
        """Return the text of a column with its citations as links."""
        return words(column, self.package.references)

    def was(self, anchor: str) -> str:
        """Return the mark of an item that changed, or ''."""
        previous = self.package.previous.get(f"{self.calc.number}#{anchor}")
        return previous.was if previous is not None else ""

    def figures(self, block: str) -> tuple[FigureSvg, ...]:
        """Return the figures of a block."""
        return self.package.figures.get((self.calc.number, block), ())

    def row(self, anchor: str, annotations: Annotations, line: int) -> RowView:
        """Return what a line says beside its statement."""
        note, reference = self.words(annotations.note), self.words(annotations.reference)
        return RowView(anchor, note, reference, line, self.was(anchor) if anchor else "")

    def failed(self, row: FailedRow) -> TextRow:
        """Return a line that could not be evaluated, with the diagnostic that says why."""
        errors = [d.line for d in self.calc.diagnostics if d.severity == "error"]
        own = [n for n, line in enumerate(errors, start=1) if line == row.line]
        why = "not evaluated" if own else "not evaluated: it depends on a line in error"
        target = f"#diagnostic-{own[0]}" if own else "#diagnostics"
        return TextRow(RowView("", escape(why), Markup(""), row.line), " ".join(row.text.split()), target)
