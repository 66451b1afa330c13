"""Short ways to evaluate a stress block in tests."""

from __future__ import annotations

from calcgen.evaluation.calc import Setting, evaluate_all
from calcgen.evaluation.conventions import Axes
from calcgen.evaluation.results.calc import EvaluatedCalc
from calcgen.evaluation.results.stress import StressResult
from calcgen.language.document import calc_from
from calcgen.profiles.catalogue import builtin_catalogue
from calcgen.quantities.display import Style
from calcgen.text import SourceFile
from tests.evaluation.helpers import fence

RECTANGLE = fence("section main", "shape = rectangle(b = 100 mm, h = 200 mm)")


def section(*lines: str) -> str:
    """Return the block of the section `main`."""
    return fence("section main", *lines)


def parts(*lines: str) -> str:
    """Return the section `main` of timber (10 GPa, the reference) and steel (200 GPa), with these lines."""
    return section(*lines, "modulus timber = 10 GPa", "modulus steel = 200 GPa", "reference = timber")


def stress(
    *lines: str, working: tuple[str, ...] = (), section: str = RECTANGLE, style: Style | None = None
) -> EvaluatedCalc:
    """Evaluate the stress `s` of the section `main`, and a working block after it."""
    text = f"# T\n{section}{fence('stress s', 'section = main', *lines)}{fence('working', *working)}"
    style = style or Style()
    axes: Axes = "american" if style.system == "US" else "eurocode"
    calc = calc_from(SourceFile("calcs/C-1.md", text))
    (found,) = evaluate_all([calc], Setting(axes, style, builtin_catalogue(), frozenset()))
    return found


def result(calc: EvaluatedCalc) -> StressResult:
    """Return the stress block of a calc."""
    return next(s for s in calc.segments if isinstance(s, StressResult))


def values(*lines: str, section: str = RECTANGLE) -> dict[str, float]:
    """Return the results of a stress in SI units, those of parts and points after a dot.

    The block has no fault, and its second route holds.
    """
    calc = stress(*lines, section=section)
    assert [d.message for d in calc.diagnostics] == []
    assert calc.second_route
    assert [r for r in calc.second_route if not r.holds] == []
    found = result(calc)
    of_parts = {f"{part}.{r.name}": r.value.si for part, rows in found.parts.items() for r in rows}
    return {r.name: r.value.si for r in found.results} | of_parts
