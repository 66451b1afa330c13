"""The search index: what can be found, and where it leads."""

from __future__ import annotations

import json
from urllib.parse import unquote

import pytest

from calcgen.site.search import entries, index_file, spelled
from tests.site.helpers import FAULTY, STRINGER, Outline, package, pages

WHOLE = package(STRINGER, FAULTY)


@pytest.mark.parametrize(
    ("words", "href"),
    [
        ("zeroline", "C-1.html#main-figure-1"),  # text in a figure
        ("imposed load", "C-1.html#q_k"),
        ("bending at midspan", "C-1.html#check-bending-at-midspan"),
        ("IPE 240", "C-1.html#main"),
        ("sigma_max", "C-1.html#midspan.σ_max"),  # Greek letters spelled out
        ("grating", "C-1.html#A1"),
        ("General arrangement", "references.html#DWG"),
        ("heavier load", "trail.html#entry-1"),
        ("adds length", "C-2.html#diagnostic-1"),
        ("see 30.38 kN·m", "C-1.html#text-12"),
    ],
)
def test_found(words: str, href: str) -> None:
    found = [
        unquote(e.href) for e in entries(WHOLE) if words in f"{e.heading} {e.words}".replace("\xa0", " ")
    ]
    assert href in found


def test_every_entry_leads_to_a_place() -> None:
    ids = {path: set(Outline(text).ids) for path, text in pages(WHOLE).items()}
    for entry in entries(WHOLE):
        page, _, anchor = unquote(entry.href).partition("#")
        assert page in ids
        assert not anchor or anchor in ids[page], entry.href


def test_the_index_is_a_script_that_holds_json() -> None:
    text = index_file(WHOLE).decode()
    rows = json.loads(text.removeprefix("window.calcgenIndex = ").removesuffix(";\n"))
    assert len(rows) == len(list(entries(WHOLE)))
    assert all(len(row) == 4 for row in rows)


def test_names_are_found_as_typed_as_shown_and_spelled_out() -> None:
    assert spelled("σ_c_max") == "σ_c_max σ_c,max sigma_c_max"
