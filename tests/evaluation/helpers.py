"""Short ways to evaluate the text of a calc in tests."""

from __future__ import annotations

from typing import Literal

from calcgen.evaluation.calc import Setting, evaluate_all
from calcgen.evaluation.results.calc import EvaluatedCalc
from calcgen.language.document import calc_from
from calcgen.profiles.catalogue import builtin_catalogue
from calcgen.quantities.display import Style
from calcgen.text import SourceFile


def evaluated(
    *texts: str,
    axes: Literal["eurocode", "american"] = "eurocode",
    references: frozenset[str] = frozenset(),
    style: Style | None = None,
) -> tuple[EvaluatedCalc, ...]:
    """Evaluate calcs given as text; they are numbered C-1, C-2, …"""
    calcs = [calc_from(SourceFile(f"calcs/C-{n}.md", text)) for n, text in enumerate(texts, start=1)]
    style = style or Style(system="US" if axes == "american" else "SI")
    return evaluate_all(calcs, Setting(axes, style, builtin_catalogue(), references))


def fence(info: str, *lines: str) -> str:
    """Return a live block."""
    return "\n".join([f"```{info}", *lines, "```", ""])


def working(*lines: str, inputs: tuple[str, ...] = ()) -> EvaluatedCalc:
    """Evaluate a calc of one inputs and one working block."""
    blocks = [fence("inputs", *inputs)] if inputs else []
    (calc,) = evaluated("# Title\n\n" + "\n".join([*blocks, fence("working", *lines)]))
    return calc


def codes(calc: EvaluatedCalc) -> list[str]:
    """Return the codes of a calc's diagnostics."""
    return [d.code for d in calc.diagnostics]


def shown(calc: EvaluatedCalc, name: str) -> str:
    """Return a value as it is read, with a plain space."""
    return calc.values[name][1].text.replace("\u00a0", " ")
