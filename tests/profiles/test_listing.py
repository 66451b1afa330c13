"""Tables of catalogued sections: what a pattern names, their columns, and what is not published."""

from __future__ import annotations

from collections.abc import Mapping

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from calcgen.catalogues import of_outline
from calcgen.profiles import Catalogue, Profile, builtin_catalogue, read_catalogue
from calcgen.profiles.listing import NOTE, families, matching, near, table

BUILTIN = builtin_catalogue()


def named(pattern: str) -> list[str]:
    return [profile.designation for profile in matching(BUILTIN, pattern)]


@pytest.mark.parametrize(
    ("pattern", "designations"),
    [
        ("IPE 200", ["IPE 200"]),
        ("ipe200", ["IPE 200"]),
        ("ipe 2?0", ["IPE 200", "IPE 220", "IPE 240", "IPE 270"]),
        ("IPE ??", ["IPE 80"]),
        ("HE 3?0 A", ["HEA 300", "HEA 320", "HEA 340", "HEA 360"]),
        ("he*00b", [f"HEB {h}" for h in (*range(100, 1001, 100),)]),
        ("W 18 × 7*", ["W18x71", "W18x76"]),
        ("L3 1/2 x 3 1/2 x *", [f"L3-1/2x3-1/2x{t}" for t in ("1/4", "5/16", "3/8", "7/16", "1/2")]),
        ("IPE 245", []),
        ("IPE [12]*", []),  # brackets are no wildcards
        (".*", []),
    ],
)
def test_a_pattern_names_designations_in_any_spelling(pattern: str, designations: list[str]) -> None:
    assert named(pattern) == designations


def test_a_family_by_its_name() -> None:
    assert matching(BUILTIN, "hss round") == BUILTIN.family("HSS round")
    assert matching(BUILTIN, "IPE") == matching(BUILTIN, "IPE *") == BUILTIN.family("IPE")


def test_everything_comes_by_family_and_mass() -> None:
    assert matching(BUILTIN, "*") == tuple(BUILTIN)


@pytest.mark.parametrize(
    ("pattern", "nearest"),
    [
        ("IPE 24?5", ("IPE 240", "IPE 220", "IPE 270")),
        ("upm 210", ("UPN 200", "UPN 220", "UPN 180")),
        ("oak joist", ()),
        ("*", ()),
        ("", ()),
    ],
)
def test_what_a_pattern_without_a_match_may_have_meant(pattern: str, nearest: tuple[str, ...]) -> None:
    assert near(BUILTIN, pattern) == nearest


def test_a_pattern_without_figures_may_have_meant_a_family() -> None:
    assert near(BUILTIN, "IPF *")[0] == "IPE"


@settings(max_examples=50)
@given(st.text(alphabet="IPEWx*?.[]()\\+ 0123-/é", max_size=20))
def test_any_pattern_can_be_asked_for(pattern: str) -> None:
    assert all(BUILTIN.find(p.designation) is p for p in matching(BUILTIN, pattern))
    assert len(near(BUILTIN, pattern)) <= 3


def unneeded(profile: Profile) -> Mapping[str, float]:
    raise AssertionError(profile.designation)


def test_published_figures_stand_as_printed_under_the_names_of_eurocode_axes() -> None:
    assert table(matching(BUILTIN, "ipe 2?0")[:2], unneeded) == (
        "                                    about the horizontal axis y-y\n"
        "IPE      mass     h     b      A    I_y   W_el_y   W_pl_y\n"
        "         kg/m    mm    mm    cm²    cm⁴      cm³      cm³\n"
        "IPE 200  22.4   200   100   28.5   1943    194.3    220.6\n"
        "IPE 220  26.2   220   110   33.4   2772      252    285.4"
    )


def test_american_sections_keep_their_names_and_units() -> None:
    assert table(matching(BUILTIN, "W18x50"), unneeded) == (
        "                                  about the horizontal axis x-x\n"
        "W        mass    h     b      A   I_x    S_x   Z_x\n"
        "        lb/ft   in    in    in²   in⁴    in³   in³\n"
        "W18x50     50   18   7.5   14.7   800   88.9   101"
    )


OFFICE = """\
# axes = eurocode
# shape = {}
# family = own
designation,{},I_y [cm4]
first,{},
"""


@pytest.mark.parametrize(
    ("shape", "sizes", "cells", "row"),
    [
        # b h, b h³/12, b h²/6, b h²/4; the mass is nowhere
        ("rectangle", "b [mm],h [mm]", "60,100", ["-", "100", "60", "60*", "500*", "100*", "150*"]),
        # π d²/4, π d⁴/64, π d³/32, d³/6
        ("circle", "d [mm]", "100", ["-", "100", "100", "78.54*", "490.9*", "98.17*", "166.7*"]),
    ],
)
def test_what_is_not_published_is_of_the_outline_and_marked(
    shape: str, sizes: str, cells: str, row: list[str]
) -> None:
    office, faults = read_catalogue("profiles/own.csv", OFFICE.format(shape, sizes, cells))
    assert faults == ()
    lines = table(office, of_outline).splitlines()
    assert lines[3].split() == ["first", *row]
    assert lines[-1] == NOTE


def test_sizes_that_make_no_outline_leave_the_value_open() -> None:
    text = OFFICE.format("tube", "d [mm],t [mm]", "100,60")
    (profile,), _ = read_catalogue("profiles/own.csv", text)
    assert of_outline(profile) == {}
    assert table([profile], of_outline).splitlines()[3].split() == ["first", "-", "100", "100", *"----"]


def test_each_family_has_its_table() -> None:
    found = matching(BUILTIN, "*200")
    parts = table(found, of_outline).removesuffix(f"\n\n{NOTE}").split("\n\n")
    assert [part.splitlines()[1].split("  ")[0] for part in parts] == sorted({p.family for p in found})
    assert all("about the horizontal axis" in part.splitlines()[0] for part in parts)
    assert len(parts) >= 5
    assert table((), of_outline) == ""


def test_tables_are_narrow_enough_for_a_terminal() -> None:
    text = f"{families(BUILTIN)}\n{table(matching(BUILTIN, '*'), of_outline)}"
    assert max(len(line) for line in text.splitlines()) <= 100


def test_families_with_their_counts_and_sources() -> None:
    lines = families(BUILTIN).splitlines()
    assert lines[0].split() == ["family", "sections", "axes", "source", "of", "most", "rows"]
    shown = {line[: lines[0].index("sections")].strip(): line.split() for line in lines[1:]}
    assert tuple(shown) == BUILTIN.families
    assert shown["IPE"][1:] == ["18", "eurocode", "EN", "10365:2017,", "from", "memory"]
    assert families(Catalogue()).count("\n") == 0
