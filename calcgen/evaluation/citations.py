"""Citations: every key cited is in references.toml."""

from __future__ import annotations

import re

from calcgen.language.calc import Calc
from calcgen.language.nodes import Citation
from calcgen.text import Report, nearest

_CITED = re.compile(r"\[([^\s\[\]|]+)[^\[\]]*\]")


def citations_of(calc: Calc) -> tuple[Citation, ...]:
    """Return the citations of a calc in the order they stand."""
    return tuple(sorted((c for column in calc.columns for c in column.citations), key=lambda c: c.span))


def check_citations(calc: Calc, known: frozenset[str], report: Report) -> None:
    """Report each cited key that the project's references do not have."""
    for citation in citations_of(calc):
        if citation.key not in known:
            found = nearest(citation.key, known)
            report.error(
                "unknown-reference",
                citation.span,
                f"'{citation.key}' is not in references.toml",
                hint=f"the nearest key is '{found}'" if found else "add it there, with its title and edition",
            )

    for column in calc.columns:
        found_here = [] if column.citations else _CITED.findall(column.text)
        if any(key in known for key in found_here):
            report.warning(
                "citation-in-note",
                column.span,
                "a citation in the second column is not a reference",
                hint="citations stand in the third column: statement | what it is | [KEY place]",
            )
