"""The suites of tests/invalid: every fault of reading at its line and column."""

from __future__ import annotations

import re
from pathlib import Path

import pytest

from calcgen.language.document import calc_from
from calcgen.text.codes import CODES
from tests.language.specimens import Specimen, check, specimens

_FOLDER = Path(__file__).parent.parent / "invalid"
_ROOT = Path(__file__).parent.parent.parent
_SPECIMENS = specimens(_FOLDER)
_ELSEWHERE = {  # faults of other files than calcs; see tests/language/test_project.py and test_document.py
    "bad-reference-key",
    "key-missing",
    "no-calcs",
    "no-project",
    "not-utf-8",
    "toml-syntax",
    "unknown-key",
    "unreadable-file",
    "wrong-value",
}


@pytest.mark.parametrize("specimen", _SPECIMENS, ids=lambda s: s.where)
def test_specimen(specimen: Specimen) -> None:
    check(specimen, lambda source: calc_from(source).diagnostics)


def codes_of_reading() -> set[str]:
    """Return the codes that stand in the sources of reading."""
    files = [*(_ROOT / "calcgen" / "language").rglob("*.py"), _ROOT / "calcgen" / "project.py"]
    text = "\n".join(f.read_text(encoding="utf-8") for f in files)
    pattern = (
        r"""(?:ReadingError|\berror|warning)\(\s*"([a-z0-9-]+)"|code: str = "([a-z0-9-]+)"|"(bad-name)"\)"""
    )
    return {next(filter(None, groups)) for groups in re.findall(pattern, text)}


def test_every_code_is_in_the_table() -> None:
    assert codes_of_reading() <= set(CODES)
    assert len(codes_of_reading()) > 50


def test_every_code_of_reading_has_a_specimen() -> None:
    shown = {place.split()[1] for s in _SPECIMENS for place, _ in s.expected}
    assert codes_of_reading() - shown == _ELSEWHERE
