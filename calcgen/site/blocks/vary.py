"""`vary`: its lines as typed, the figure, and a table with a row for each run of the calc."""

from __future__ import annotations

from dataclasses import dataclass

from markupsafe import Markup

from calcgen.evaluation.results.vary import VaryResult, VaryRun
from calcgen.language.nodes import Column
from calcgen.quantities.symbols import plain
from calcgen.site.context import Context
from calcgen.site.figure import FigureSvg
from calcgen.site.views import RowView, TextRow, utilisation_text


@dataclass(frozen=True)
class RunView:
    """A run: its value, mass and values as text; `word` its verdict, '' without one.

    `governing` names the check that governs, with its utilisation. `remark` marks the present value and the
    lightest section; `fault` says why there are no values.
    """

    value: str
    cells: tuple[str, ...]
    word: str
    governing: str
    remark: str
    fault: str


@dataclass(frozen=True)
class VaryView:
    """A repeated calc; `heads` are those of the values, `checked` whether any run has checks."""

    name: str
    input: str
    row: RowView
    lines: tuple[TextRow, ...]
    figures: tuple[FigureSvg, ...]
    heads: tuple[str, ...]
    checked: bool
    runs: tuple[RunView, ...]
    outcome: str
    template: str = "blocks/vary.html"


def vary_view(result: VaryResult, context: Context) -> VaryView:
    """Return a repeated calc."""
    masses = [run.mass_shown for run in result.runs if run.mass_shown is not None]
    heads = [_with_unit(plain(result.input), result.unit)]
    if masses:
        heads.append(f"mass, {masses[0].unit}")
    heads += [_with_unit(head, unit) for head, unit in zip(result.heads, result.units, strict=True)]
    return VaryView(
        name=result.name,
        input=plain(result.input),
        row=RowView(result.name, Markup(""), Markup(""), result.line, context.was(result.name)),
        lines=tuple(_line(*line, context) for line in result.lines),
        figures=context.figures(result.name),
        heads=tuple(heads),
        checked=any(run.checked for run in result.runs),
        runs=tuple(_run(run, massed=bool(masses)) for run in result.runs),
        outcome=_outcome(result),
    )


def _line(typed: str, note: Column, reference: Column, number: int, context: Context) -> TextRow:
    return TextRow(RowView("", context.words(note), context.words(reference), number), typed)


def _run(run: VaryRun, *, massed: bool) -> RunView:
    mass = ("—" if run.mass_shown is None else run.mass_shown.number,) if massed else ()
    governing = ""
    if run.governing is not None:
        label, utilisation = run.governing
        governing = f"{label} {utilisation_text(utilisation)}"
    remarks = ["present value"] if run.present else []
    remarks += ["the lightest that satisfies every check"] if run.lightest else []
    return RunView(
        value=run.shown.number,
        cells=(*mass, *run.texts),
        word=("satisfied" if run.satisfied else "exceeded") if run.checked else "",
        governing=governing,
        remark="; ".join(remarks),
        fault=run.fault,
    )


def _outcome(result: VaryResult) -> str:
    """Return what was sought among sections, in words: whether one satisfies every check."""
    if not result.pattern:
        return ""
    if not any(run.checked for run in result.runs):
        return "No section is marked: this calc has no checks, or no section can be evaluated."
    lightest = " and ".join(run.shown.text for run in result.runs if run.lightest)
    if lightest:
        return f"The lightest of these sections that satisfies every check of this calc: {lightest}."
    return "None of these sections satisfies every check of this calc."


def _with_unit(name: str, unit: str) -> str:
    return f"{name}, {unit}" if unit else name
