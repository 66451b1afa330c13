"""What pages say of calcs that feed calcs: whole blocks, faults upstream, what a change does downstream."""

from __future__ import annotations

import json
from collections.abc import Mapping
from datetime import UTC, datetime
from html import unescape
from pathlib import Path
from re import DOTALL, search, sub

import pytest

from calcgen.outcome import Request
from calcgen.pipeline import Workshop, build
from calcgen.site.results_json import results
from calcgen.site.search import entries
from tests.evaluation.helpers import fence
from tests.site.helpers import FAULTY, package, pages

FIRST = (
    "# First\n"
    + fence("inputs", "q = 3 kN/m | load | [DWG]")
    + fence("section main", 'shape = rolled("IPE 240")')
    + fence("table k | [DWG]", "      | 20 mm | 40 mm", "0 kN  | 1.0   | 2.0", "10 kN | 3.0   | 4.0")
    + fence("beam b", "span = 4 m", "EI = 10 MN·m^2", "load G uniform q")
)
SECOND = (
    "# Second\n"
    + fence(
        "inputs",
        "girder = main of C-1 | the girder | [DWG p. 2]",
        "k of C-1",
        "M = b.M(1.5 m) of C-1",
    )
    + fence("working", "W = girder.W_el_y", "a = k(5 kN, 20 mm)", "M <= W*235 MPa | bending")
    + fence("stress s", "section = girder", "M = M")
)
THIRD = "# Third\n" + fence("inputs", "g = girder of C-2", "M of C-2") + fence("working", "σ = M/g.W_el_y")


def plain(html: str) -> str:
    """Return the text of a piece of a page, its white space as one space."""
    return " ".join(unescape(sub(r"<[^>]+>", "", html)).split())


def row(page: str, anchor: str) -> str:
    found = search(rf'<tr id="{anchor}".*?</tr>', page, DOTALL)
    assert found is not None, anchor
    return found[0]


@pytest.fixture(scope="module")
def site() -> Mapping[str, str]:
    return pages(package(FIRST, SECOND, THIRD))


class TestRows:
    def test_a_block_says_what_it_is_and_leads_to_where_it_is(self, site: Mapping[str, str]) -> None:
        found = row(site["C-2.html"], "girder")
        assert "section IPE 240" in plain(found)
        assert '<a href="C-1.html#main">section main of C-1</a>' in found
        assert "the girder" in found
        assert "p. 2</a>" in found  # what the third column cites stands beside it
        assert "unreferenced" not in found
        assert 'id="main"' in site["C-1.html"]

    def test_a_block_taken_on_leads_to_the_row_that_took_it(self, site: Mapping[str, str]) -> None:
        assert '<a href="C-2.html#girder">section girder of C-2</a>' in row(site["C-3.html"], "g")

    def test_a_value_at_a_place_says_at_which(self, site: Mapping[str, str]) -> None:
        assert "b.M(1.5 m) of C-1" in plain(row(site["C-2.html"], "M"))

    def test_what_is_looked_up_stands_below_the_inputs(self, site: Mapping[str, str]) -> None:
        found = plain(site["C-2.html"])
        assert "looked up in k" in found
        assert "between the rows 0 kN and 10 kN" in found
        assert 'id="k-lookup-1"' in site["C-2.html"]

    def test_a_stress_leads_to_the_row_of_its_section(self, site: Mapping[str, str]) -> None:
        assert '<a href="#girder">girder</a>' in site["C-2.html"]

    def test_the_register_has_them(self, site: Mapping[str, str]) -> None:
        found = site["inputs.html"]
        assert "section main of C-1</a>" in found
        assert "IPE 240" in found

    def test_search_finds_them_by_designation(self) -> None:
        found = [e for e in entries(package(FIRST, SECOND)) if e.href == "C-2.html#girder"]
        assert [("IPE 240" in e.words, e.kind) for e in found] == [(True, "input")]

    def test_results_have_no_value_and_say_what_it_is(self) -> None:
        calcs = json.loads(json.dumps(results(package(FIRST, SECOND))))["calcs"]
        assert calcs["C-2"]["inputs"]["girder"] == {
            "value": None,
            "unit": "",
            "note": "the girder; section main of C-1: IPE 240",
            "reference": "[DWG p. 2]",
            "line": 3,
        }


def test_a_calc_that_is_not_evaluated_leads_to_the_faults_behind_it() -> None:
    taker = "# T\n" + fence("inputs", "e of C-{}")
    found = pages(package(FAULTY, taker.format(1), taker.format(2)))
    assert (
        'Not evaluated: <a href="C-1.html#diagnostics">C-1</a>, which feeds it, is in error.'
        in found["C-2.html"]
    )
    assert (
        'Not evaluated: <a href="C-2.html">C-2</a>, which feeds it, is not evaluated because '
        '<a href="C-1.html#diagnostics">C-1</a> is in error.' in found["C-3.html"]
    )
    assert 'id="diagnostics"' in found["C-1.html"]


class TestAChangeUpstream:
    """Told by a build, which records it, and by one that only shows what is pending."""

    @staticmethod
    def project(root: Path) -> Path:
        (root / "calcs").mkdir()
        (root / "project.toml").write_text('title = "T"\naxes = "eurocode"\n', encoding="utf-8")
        (root / "references.toml").write_text('[DWG]\ntitle = "D"\n', encoding="utf-8")
        for number, text in (("C-1", FIRST), ("C-2", SECOND), ("C-3", THIRD)):
            (root / "calcs" / f"{number}.md").write_text(text, encoding="utf-8")
        return root

    @staticmethod
    def built(root: Path, workshop: Workshop, *, records: bool) -> dict[str, str]:
        when = datetime(2026, 12, 1, 9, 30, tzinfo=UTC)
        asked = Request(root, root / "package", when, "A. Mason", records=records, durable=False)
        assert build(asked, workshop).published
        return {p.name: p.read_text(encoding="utf-8") for p in (root / "package").glob("*.html")}

    @pytest.mark.parametrize("records", [True, False], ids=["build", "watch"])
    def test_every_calc_downstream_is_named_and_its_values_say_what_they_were(
        self, tmp_path: Path, records: bool
    ) -> None:
        root, workshop = self.project(tmp_path), Workshop()
        self.built(root, workshop, records=True)
        text = FIRST.replace("IPE 240", "IPE 270").replace("q = 3", "q = 4")
        (root / "calcs" / "C-1.md").write_text(text, encoding="utf-8")
        found = self.built(root, workshop, records=records)
        cover = plain(found["index.html"])
        assert "calcs downstream of these changes 2" in cover
        assert "C-2 M: 5.625 kN·m → 7.500 kN·m; girder: IPE 240 → IPE 270" in cover
        assert "C-3 M: 5.625 kN·m → 7.500 kN·m; g: IPE 240 → IPE 270" in cover
        assert "was IPE 240" in plain(row(found["C-2.html"], "girder"))
        assert "was IPE 240" in plain(row(found["C-3.html"], "g"))
        assert "was 5.625 kN·m" in plain(row(found["C-3.html"], "M"))
        assert "was " in plain(row(found["C-3.html"], "σ"))
        assert ("calcs downstream: C-2, C-3" in plain(found["trail.html"])) is records

    def test_a_feeder_that_is_deleted_leaves_nothing_behind(self, tmp_path: Path) -> None:
        root, workshop = self.project(tmp_path), Workshop()
        self.built(root, workshop, records=False)
        (root / "calcs" / "C-1.md").unlink()
        found = self.built(root, workshop, records=False)
        assert "there is no calc" in plain(found["C-2.html"])
        assert "IPE 240" not in plain(found["C-2.html"])
        assert "5.625" not in plain(found["C-3.html"])
        assert "because" not in plain(found["C-3.html"])
        assert "C-2, which feeds it, is in error" in plain(found["C-3.html"])
