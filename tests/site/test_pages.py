"""Pages as a whole: well formed, every link leads somewhere, and what is asked of each stands on it."""

from __future__ import annotations

import re
from collections.abc import Mapping
from dataclasses import replace
from posixpath import dirname, join, normpath
from urllib.parse import unquote

import pytest

from calcgen.site.compose import compose
from calcgen.site.facts import PackageInput
from calcgen.site.page import FilePage
from calcgen.site.render import render
from tests.site.helpers import CHANGED, DRAWN, FAULTY, FED, STRINGER, Outline, package, pages

WHOLE = package(STRINGER, FED, FAULTY, "", "# Fed by what is in error\n\n```inputs\ne of C-3\n```\n")


@pytest.fixture(scope="module")
def site() -> Mapping[str, str]:
    return pages(WHOLE)


@pytest.fixture(scope="module")
def outlines(site: Mapping[str, str]) -> Mapping[str, Outline]:
    return {path: Outline(text) for path, text in site.items()}


def words(text: str) -> str:
    return " ".join(" ".join(Outline(text).words).split())


def row(text: str, anchor: str) -> str:
    """Return the words of the row with an anchor."""
    found = re.search(rf'<tr id="{re.escape(anchor)}".*?</tr>', text, re.DOTALL)
    assert found, anchor
    return words(found[0])


def test_the_package_has_its_pages(site: Mapping[str, str]) -> None:
    assert {"index.html", "C-1.html", "source/C-1.html", "search.html", "cautions.html"} <= site.keys()
    assert {"inputs.html", "assumptions.html", "checks.html", "references.html"} <= site.keys()
    assert {"map.html", "trail.html", "conventions.html"} <= site.keys()


def test_anchors_are_unique(outlines: Mapping[str, Outline]) -> None:
    for path, outline in outlines.items():
        assert len(outline.ids) == len(set(outline.ids)), path


def test_every_link_leads_to_a_page_and_a_place_on_it(outlines: Mapping[str, Outline]) -> None:
    for path, outline in outlines.items():
        for link in outline.links:
            target, _, anchor = link.partition("#")
            page = normpath(join(dirname(path), unquote(target))) if target else path
            assert page in outlines, (path, link)
            assert not anchor or unquote(anchor) in outlines[page].ids, (path, link)


def test_headings_start_at_one_and_skip_no_level(outlines: Mapping[str, Outline]) -> None:
    for path, outline in outlines.items():
        assert outline.headings[0] == 1, path
        assert outline.headings.count(1) == 1, path
        steps = zip(outline.headings, outline.headings[1:], strict=False)
        assert all(after <= before + 1 for before, after in steps), path


def test_the_same_input_gives_the_same_bytes() -> None:
    assert render(compose(WHOLE)) == render(compose(package(STRINGER, FED, FAULTY, *_last_two())))


def _last_two() -> tuple[str, ...]:
    return tuple(calc.calc.source.text for calc in WHOLE.calcs[3:])


def test_what_was_typed_is_escaped(site: Mapping[str, str]) -> None:
    for text in site.values():
        assert "Heron <Lock>" not in text
        assert "Heron &lt;Lock&gt;" in text


class TestCalcPage:
    def test_title_block(self, site: Mapping[str, str]) -> None:
        found = words(site["C-1.html"])
        for text in ("HL-7 Heron <Lock>", "A. Mason", "P2", "eurocode, depth down", "1 of 5"):
            assert text in found

    def test_standing_names_the_governing_check(self, site: Mapping[str, str]) -> None:
        found = site["C-1.html"]
        assert '<div class="standing exceeded">' in found
        assert "governing: a limit too low 1.519 of 1" in words(found)

    def test_an_input_says_where_it_comes_from(self, site: Mapping[str, str]) -> None:
        assert row(site["C-1.html"], "L").endswith("= 6.000 m # span HL/201 p. 3")
        assert "imposed load unreferenced" in row(site["C-1.html"], "q_k")

    def test_a_change_shows_the_value_it_had(self, site: Mapping[str, str]) -> None:
        assert "was 4.000 kPa at P1" in row(site["C-1.html"], "q_k")
        assert "was" not in row(site["C-1.html"], "L")

    def test_a_check_shows_its_sides_and_verdict(self, site: Mapping[str, str]) -> None:
        found = row(site["C-1.html"], "check-bending-at-midspan")
        assert "satisfied" in found
        assert "bending at midspan EN 1993-1-1 6.2.5" in found

    def test_results_of_blocks_have_addresses(self, outlines: Mapping[str, Outline]) -> None:
        ids = set(outlines["C-1.html"].ids)
        assert {"main.W_pl_y", "stringer.M_max", "midspan.σ_max", "main-figure-1", "A1"} <= ids

    def test_a_catalogued_property_stands_beside_the_outline(self, site: Mapping[str, str]) -> None:
        assert "published; outline" in row(site["C-1.html"], "main.A")

    def test_premises_and_second_route(self, site: Mapping[str, str]) -> None:
        found = words(site["C-1.html"])
        assert "left to judgement" in found
        assert "second route" in found
        assert "agrees" in found
        assert "differs" not in found

    def test_a_figure_is_drawn_for_both_widths(self, site: Mapping[str, str]) -> None:
        assert DRAWN.wide in site["C-1.html"]
        assert DRAWN.narrow in site["C-1.html"]

    def test_a_calc_in_error_shows_no_result_that_depends_on_it(self, site: Mapping[str, str]) -> None:
        found = words(site["C-3.html"])
        assert "'+' adds length and force" in found
        assert "calcs/C-3.md:8:7" in found
        assert "c = a + b not evaluated" in found
        assert "d = 2*c not evaluated: it depends on a line in error" in found
        assert "6.000 m" in row(site["C-3.html"], "e")
        assert "of 1" not in found.replace("of 5", "")

    def test_a_calc_that_is_not_evaluated_says_why(self, site: Mapping[str, str]) -> None:
        assert "Not evaluated: C-3 , which feeds it, is in error." in words(site["C-5.html"])

    def test_the_foot_names_program_caution_and_digest(self, site: Mapping[str, str]) -> None:
        found = words(site["C-1.html"])
        assert "calcgen 9.9.9" in found
        assert WHOLE.calcs[0].calc.source.digest[:16] in found
        assert "An aid to a competent engineer" in found


class TestCover:
    def test_what_to_look_at_first(self, site: Mapping[str, str]) -> None:
        found = words(site["index.html"])
        for text in (
            "in error 1",
            "not evaluated 1",
            "exceeded checks 1",
            "open assumptions 1",
            "unreferenced inputs 3",
            "last changes 1",
            "Nothing under: checks within 5 % of the limit, premises not met",
        ):
            assert text in found

    def test_pending_changes_are_said_and_listed(self) -> None:
        found = words(pages(package(STRINGER, pending=True, unrecorded=CHANGED.changes))["index.html"])
        assert "changes that the trail does not record yet 1" in found
        assert "C-1 q_k input edited: 4.000 kPa → 5.000 kPa" in found

    def test_a_check_just_below_its_limit(self) -> None:
        near = "# N\n\n```working\n0.96 <= 1 | tight\n0.95 <= 1 | less so\n```\n"
        found = words(pages(package(near))["index.html"])
        assert "checks within 5 % of the limit 1" in found
        assert "tight: 0.960 of 1" in found


class TestRegisters:
    def test_unreferenced_inputs_come_first(self, site: Mapping[str, str]) -> None:
        rows = re.findall(r"<tr>.*?</tr>", site["inputs.html"], re.DOTALL)[1:]
        flags = ["unreferenced" in r for r in rows]
        assert flags == sorted(flags, reverse=True)
        assert flags.count(True) == 3

    def test_open_assumptions_come_first(self, site: Mapping[str, str]) -> None:
        found = words(site["assumptions.html"])
        assert found.index("to be confirmed: survey") < found.index("agreed at review")

    def test_exceeded_checks_come_first(self, site: Mapping[str, str]) -> None:
        found = words(site["checks.html"])
        assert found.index("a limit too low") < found.index("bending at midspan")

    def test_references_list_the_places_that_cite_them(self, site: Mapping[str, str]) -> None:
        found = words(site["references.html"])
        assert "General arrangement" in found
        assert "C-1, line 15, p. 3" in found

    def test_the_map_shows_what_feeds_what(self, site: Mapping[str, str]) -> None:
        assert 'href="C-1.html#stringer.R_1"' in site["map.html"]
        assert 'href="C-2.html#R"' in site["map.html"]

    def test_the_trail_shows_before_and_after(self, site: Mapping[str, str]) -> None:
        assert "C-1 q_k input edited 4.000 kPa 5.000 kPa" in words(site["trail.html"])


def test_the_source_has_an_address_for_each_line(outlines: Mapping[str, Outline]) -> None:
    count = STRINGER.count("\n")
    assert {f"L{n}" for n in range(1, count + 1)} <= set(outlines["source/C-1.html"].ids)


def test_a_calc_named_as_a_page_keeps_its_own() -> None:
    whole = package(STRINGER)
    calc = whole.calcs[0].calc
    for number in ("index", "Search"):
        renamed = _numbered(whole, number)
        assert calc.title in pages(renamed)[f"{number}_.html"]
        assert "What to look at first" in pages(renamed)["index.html"]


def _numbered(whole: PackageInput, number: str) -> PackageInput:
    (calc,) = whole.calcs
    return replace(whole, calcs=(replace(calc, calc=replace(calc.calc, number=number)),), previous={})


def test_images_are_copied_under_the_digest_of_their_content() -> None:
    whole = package("# P\n\n![plan](plan.png)\n", images={"calcs/plan.png": b"PNG", "calcs/x.exe": b"no"})
    assets = [p for p in compose(whole) if isinstance(p, FilePage) and p.path.startswith("assets/images/")]
    assert [p.content for p in assets] == [b"PNG"]
    assert f'src="{assets[0].path}"' in pages(whole)["C-1.html"]
