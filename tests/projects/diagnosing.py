"""The diagnostics of an example: of a calc D-1 in a small project, or of the project's own files."""

from __future__ import annotations

from collections.abc import Sequence
from datetime import UTC, datetime
from pathlib import Path

from calcgen.evaluation.calc import Setting, evaluate_all
from calcgen.language.document import calc_from
from calcgen.pipeline import Request, Workshop, build
from calcgen.profiles.catalogue import builtin_catalogue
from calcgen.quantities.display import Style
from calcgen.text import Diagnostic, SourceFile

FEEDS = "# Feeds\n\n```inputs\nP = 12 kN\n```\n"
PROJECT = {
    "project.toml": 'title = "A project"\naxes = "eurocode"\n',
    "references.toml": '["DWG-201"]\ntitle = "Plan"\n',
    "calcs/D-1.md": "# Example\n",
    "calcs/D-2.md": FEEDS,
}
USES_PROFILE = '# Example\n\n```section main\nshape = rolled("J 200")\n```\n'


def diagnosed(text: str, kind: str, folder: Path) -> Sequence[Diagnostic]:
    """Return what the program finds in an example of the manual; `kind` as in `Message`."""
    if kind in ("", "file"):
        return diagnosed_calc(text if kind == "file" else f"# Example\n\n{text}")
    uses = {"calcs/D-1.md": USES_PROFILE} if kind.startswith("profiles/") else {}
    return built(PROJECT | uses | {kind: text}, folder)


def diagnosed_calc(text: str) -> Sequence[Diagnostic]:
    """Return the diagnostics of a calc D-1 whose project has a calc D-2 and the key DWG-201."""
    sources = (SourceFile("calcs/D-1.md", text), SourceFile("calcs/D-2.md", FEEDS))
    setting = Setting("eurocode", Style(), builtin_catalogue(), frozenset({"DWG-201"}))
    return [d for c in evaluate_all([calc_from(s) for s in sources], setting) for d in c.diagnostics]


def built(files: dict[str, str | bytes], folder: Path) -> Sequence[Diagnostic]:
    """Write a project and return the diagnostics of its build."""
    root = folder / "project"
    for path, content in files.items():
        target = root / path
        target.parent.mkdir(parents=True, exist_ok=True)
        target.write_bytes(content if isinstance(content, bytes) else content.encode())
    root.mkdir(exist_ok=True)
    when = datetime(2026, 12, 1, tzinfo=UTC)
    request = Request(root, folder / "package", when, "A. Reed", records=False, durable=False)
    return build(request, Workshop()).diagnostics
