"""The page of the map: figures, and every value with both its places; and what a calc's page says of it."""

import re
from dataclasses import replace

import pytest

from calcgen.site.facts import PackageInput, PreviousValue
from calcgen.site.map_page import MOST_NEIGHBOURS, map_view, neighbours
from calcgen.site.search import index_file
from tests.site.helpers import DRAWN, FED, STRINGER, Outline, package, pages

BASIS = "# Basis\n```inputs\nf_y = 275 MPa\nL = 6 m\n```\n"
TAKES = "# Takes\n```inputs\nf_y of C-1\nspan = L of C-1\n```\n"
BROKEN = "# Broken\n```inputs\nf = f_y of C-1\nx = nothing of C-1\n```\n"
ALONE = "# Alone\n"


def test_values_are_grouped_by_arrow_and_the_first_of_each_has_its_address() -> None:
    view = map_view(package(BASIS, TAKES, TAKES.replace("span", "L_0"), ALONE))
    assert [(f.anchor, f.giver.text, f.taker.text, f.value) for f in view.feeds] == [
        ("C-1.C-2", "C-1", "C-2", "275.0\u00a0MPa"),
        ("", "C-1", "C-2", "6.000\u00a0m"),
        ("C-1.C-3", "C-1", "C-3", "275.0\u00a0MPa"),
        ("", "C-1", "C-3", "6.000\u00a0m"),
    ]
    assert [(f.given_href, f.taken_href) for f in view.feeds][1] == ("C-1.html#L", "C-2.html#span")
    assert [link.text for link in view.alone] == ["C-4"]


def test_what_is_not_evaluated_leads_to_its_line() -> None:
    view = map_view(package(BASIS, BROKEN))
    assert [(f.value, f.taken_href) for f in view.feeds] == [
        ("275.0\u00a0MPa", "C-2.html#f"),
        ("—", "source/C-2.html#L4"),
    ]


def test_changed_values_say_what_they_were() -> None:
    whole = package(BASIS, TAKES, previous={"C-2#span": PreviousValue("5.500 m", "at P1")})
    page = pages(whole)["map.html"]
    assert page.count('class="changed"') == 1
    assert "was 5.500 m at P1" in page


@pytest.fixture(scope="module")
def drawn() -> PackageInput:
    sheets = (replace(DRAWN, title="the map, 1 of 2"), replace(DRAWN, title="the map, 2 of 2"))
    return package(STRINGER, FED, BASIS.replace("f_y", "zz"), map=sheets)


def test_the_figures_stand_above_the_table(drawn: PackageInput) -> None:
    page = pages(drawn)["map.html"]
    outline = Outline(page)
    assert {"map-figure-1", "map-figure-2", "C-1.C-2"} <= set(outline.ids)
    assert page.index("the map, 2 of 2") < page.index("<table")


def test_the_search_finds_them(drawn: PackageInput) -> None:
    assert b"map.html#map-figure-2" in index_file(drawn)


def test_without_feeds_the_page_says_so() -> None:
    page = pages(package(ALONE, ALONE))["map.html"]
    assert "No calc takes a value from another." in page
    assert "<figure" not in page


def test_a_calc_says_what_feeds_it_and_what_it_feeds() -> None:
    whole = package(BASIS, TAKES, "# Last\n```inputs\ns = span of C-2\n```\n")
    sides = {n: neighbours(calc, whole) for n, calc in whole.by_number.items()}
    told = {
        n: [(s.heading, [(c.calc.text, c.values.text, c.values.href) for c in s.calcs]) for s in found]
        for n, found in sides.items()
    }
    assert told == {
        "C-1": [("feeds", [("C-2", "2 values", "map.html#C-1.C-2")])],
        "C-2": [
            ("fed by", [("C-1", "2 values", "map.html#C-1.C-2")]),
            ("feeds", [("C-3", "1 value", "map.html#C-2.C-3")]),
        ],
        "C-3": [("fed by", [("C-2", "1 value", "map.html#C-2.C-3")])],
    }
    assert re.search(
        r'fed by</dt><dd><a href="C-1.html">C-1</a> \(<a href="map.html#C-1.C-2">', pages(whole)["C-2.html"]
    )


def test_a_calc_that_feeds_many_names_the_first_and_leads_to_the_map() -> None:
    whole = package(BASIS, *[TAKES] * (MOST_NEIGHBOURS + 3))
    (side,) = neighbours(whole.calcs[0], whole)
    assert len(side.calcs) == MOST_NEIGHBOURS
    assert side.more is not None
    assert (side.more.text, side.more.href) == ("and 3 more", "map.html")
