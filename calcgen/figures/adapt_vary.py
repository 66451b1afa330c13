"""Repeated calcs -> drawings in the units shown."""

from __future__ import annotations

from calcgen.evaluation.results.vary import VaryResult, VaryRun
from calcgen.figures.vary import Panel, Trial, VaryDrawing
from calcgen.quantities.display import Style, show
from calcgen.quantities.measure import Measure, magnitude_in
from calcgen.quantities.symbols import plain


def vary_drawing(result: VaryResult, ident: str, style: Style) -> VaryDrawing | None:
    """Return the values over the input, or over the mass of sections; None where nothing can be drawn."""
    over_mass = bool(result.pattern)
    runs = [run for run in result.runs if not over_mass or run.mass is not None]
    if not any(value is not None for run in runs for value in run.values):
        return None
    name = plain(result.input)
    present, said = _present(result, style)
    lightest = [run for run in runs if run.lightest]
    unit = next((run.mass.unit or "" for run in runs if run.mass is not None), "")
    return VaryDrawing(
        ident=ident,
        title=f"this calc over {result.pattern if over_mass else name}",
        axis=f"mass, {unit}" if over_mass else _with_unit(name, result.unit),
        panels=tuple(
            Panel(_with_unit(head, unit), None if unit else 1.0)
            for head, unit in zip(result.heads, result.units, strict=True)
        ),
        trials=tuple(_trial(run, result) for run in runs),
        joined=not over_mass,
        present=present,
        present_label=said,
        note=_lightest_note(lightest, style),
        description=f"{'; '.join(result.heads)} over {'the mass of sections' if over_mass else name}, "
        f"{len(result.runs)} values.",
    )


def _trial(run: VaryRun, result: VaryResult) -> Trial:
    place = run.mass if result.pattern else run.value
    return Trial(
        x=magnitude_in(place, place.unit or "") if isinstance(place, Measure) else 0.0,
        values=tuple(
            None if value is None else magnitude_in(value, unit)
            for value, unit in zip(run.values, result.units, strict=True)
        ),
        fulfils=run.satisfied,
        ringed=run.lightest,
    )


def _present(result: VaryResult, style: Style) -> tuple[float | None, str]:
    """Return the place of the calc's own value on the axis, and its text."""
    if not result.pattern:
        now = result.present
        if not isinstance(now, Measure):
            return None, ""
        ends = [run.value.si for run in result.runs if isinstance(run.value, Measure)]
        if not min(ends) <= now.si <= max(ends):
            return None, ""
        return magnitude_in(now, result.unit), f"{plain(result.input)} = {show(now, style).text} in this calc"
    run = next((run for run in result.runs if run.present), None)
    if run is None or run.mass is None:
        return None, ""
    return magnitude_in(run.mass, run.mass.unit or ""), f"{run.shown.text} in this calc"


def _lightest_note(lightest: list[VaryRun], style: Style) -> str:
    if not lightest or lightest[0].mass is None:
        return ""
    names = " and ".join(run.shown.text for run in lightest)
    return f"ringed: {names}, {show(lightest[0].mass, style).text}, the lightest that satisfies every check"


def _with_unit(name: str, unit: str) -> str:
    return f"{name}, {unit}" if unit else name
