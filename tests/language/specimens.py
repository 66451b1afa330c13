"""Specimens: a Markdown file is a suite of calc files with the diagnostics expected of each.

A heading names a case; a fence of four marks holds the calc file; the fence `expected` below it has one line
a diagnostic: `line:column code`, then, after two spaces, words that its message or hint must have.
"""

from __future__ import annotations

import re
from collections.abc import Callable, Sequence
from dataclasses import dataclass
from pathlib import Path

from calcgen.text import Diagnostic, SourceFile

Diagnose = Callable[[SourceFile], Sequence[Diagnostic]]

_CASE = re.compile(r"^````([^\n]*)\n(.*?)^````\n+```expected\n(.*?)^```$", re.MULTILINE | re.DOTALL)
_EXPECTED = re.compile(r"(\d+:\d+ [a-z0-9-]+)(?:  (.+))?")


@dataclass(frozen=True)
class Specimen:
    """One case: where it stands in its suite, its calc, and the diagnostics expected."""

    where: str
    path: str
    text: str
    expected: tuple[tuple[str, str], ...]


def specimens(folder: Path) -> list[Specimen]:
    """Return the cases of every suite of a folder."""
    return [s for path in sorted(folder.glob("*.md")) for s in _suite(path)]


def _suite(path: Path) -> list[Specimen]:
    text = path.read_text(encoding="utf-8")
    found = []
    for match in _CASE.finditer(text):
        line = text.count("\n", 0, match.start()) + 1
        rows = [_EXPECTED.fullmatch(row) for row in match[3].splitlines()]
        assert all(rows), f"{path.name}:{line}: an expected line reads 'line:column code  words'"
        expected = tuple((row[1], row[2] or "") for row in rows if row)
        found.append(Specimen(f"{path.name}:{line}", match[1].strip() or "calcs/S-1.md", match[2], expected))
    assert len(found) == text.count("```expected"), f"{path.name}: a case is written wrong"
    return found


def check(specimen: Specimen, diagnose: Diagnose) -> None:
    """Hold what is found in a specimen against what is expected, all of it and in order."""
    diagnostics = diagnose(SourceFile(specimen.path, specimen.text))
    assert [f"{d.line}:{d.column} {d.code}" for d in diagnostics] == [e for e, _ in specimen.expected]
    for diagnostic, (place, words) in zip(diagnostics, specimen.expected, strict=True):
        said = f"{diagnostic.message} / {diagnostic.hint}"
        assert words in said, f"{specimen.where}, {place}: {words!r} is not in {said!r}"
