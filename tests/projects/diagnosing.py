"""The diagnostics of an example: of a calc D-1 in a small project, or of a project's own files."""

from __future__ import annotations

from collections.abc import Sequence

from calcgen.evaluation.calc import Setting, evaluate_all
from calcgen.language.document import calc_from
from calcgen.profiles.catalogue import Catalogue, builtin_catalogue, read_catalogue
from calcgen.project import project_from, references_from
from calcgen.quantities.display import Style
from calcgen.text import Diagnostic, SourceFile

FEEDS = "# Feeds\n\n```inputs\nP = 12 kN\n```\n"
PROFILE = '# Profile\n\n```section main\nshape = rolled("J 200")\n```\n'


def diagnosed(text: str, kind: str) -> Sequence[Diagnostic]:
    """Return what the program finds in an example of the manual; `kind` as in `Explained`."""
    match kind:
        case "project.toml":
            return project_from(SourceFile(kind, text))[1]
        case "references.toml":
            return references_from(SourceFile(kind, text))[1]
        case "profiles/office.csv":
            profiles, faults = read_catalogue(kind, text)
            assert not faults
            return _evaluated(PROFILE, builtin_catalogue().joined(profiles)[0])
        case "file":
            return _evaluated(text, builtin_catalogue())
        case _:
            return _evaluated(f"# Example\n\n{text}", builtin_catalogue())


def _evaluated(text: str, catalogue: Catalogue) -> Sequence[Diagnostic]:
    sources = (SourceFile("calcs/D-1.md", text), SourceFile("calcs/D-2.md", FEEDS))
    setting = Setting("eurocode", Style(), catalogue, frozenset({"DWG-201"}))
    return [d for c in evaluate_all([calc_from(s) for s in sources], setting) for d in c.diagnostics]
