"""Evaluates the manual, and calcs of a small project, without building a package."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from functools import cache

from calcgen.evaluation.calc import Setting, evaluate_all
from calcgen.evaluation.results.calc import EvaluatedCalc
from calcgen.language.document import calc_from
from calcgen.profiles.catalogue import builtin_catalogue, read_catalogue
from calcgen.project import load_project
from calcgen.quantities.display import Style
from calcgen.text import Diagnostic, SourceFile
from tests.projects.manual import MANUAL

FEEDS = "# Feeds\n\n```inputs\nP = 12 kN\n```\n"


@cache
def evaluated_manual() -> Mapping[str, EvaluatedCalc]:
    """Return the manual's calcs by number."""
    files, found = load_project(MANUAL)
    assert found == ()
    assert files.project is not None
    catalogue = builtin_catalogue()
    for source in files.profiles:
        profiles, faults = read_catalogue(source.path, source.text)
        catalogue, twice = catalogue.joined(profiles)
        assert (*faults, *twice) == ()
    p = files.project
    style = Style(p.units, p.digits, p.depth, p.preferred_units)
    setting = Setting(p.axes, style, catalogue, frozenset(files.references))
    return {c.number: c for c in evaluate_all([calc_from(s) for s in files.calcs], setting)}


def diagnosed(text: str) -> Sequence[Diagnostic]:
    """Return the diagnostics of a calc D-1 whose project has a calc D-2 and the key DWG-201."""
    sources = (SourceFile("calcs/D-1.md", text), SourceFile("calcs/D-2.md", FEEDS))
    setting = Setting("eurocode", Style(), builtin_catalogue(), frozenset({"DWG-201"}))
    return [d for c in evaluate_all([calc_from(s) for s in sources], setting) for d in c.diagnostics]
