"""Finding sections by their designations, and joining an office's own."""

from __future__ import annotations

import re

import pytest
from hypothesis import given
from hypothesis import strategies as st

from calcgen.mechanics.shapes import SHAPES
from calcgen.profiles import Catalogue, Profile, builtin_catalogue, read_catalogue
from calcgen.profiles.catalogue import builtin_texts
from calcgen.profiles.columns import SIZES
from calcgen.profiles.reader import index_catalogue
from tests.profiles.printed import FOLDER, printed

OFFICE = """\
# axes = eurocode
# shape = i_shape
# family = office
designation,h [mm],b [mm],t_w [mm],t_f [mm],mass [kg/m],source
WB 500,500,250,10,20,117,drawing 7
WB 400,400,250,10,16,92,drawing 7
"""


@pytest.mark.parametrize(
    ("spelling", "designation"),
    [
        ("IPE 240", "IPE 240"),
        ("ipe240", "IPE 240"),
        (" Ipe  240 ", "IPE 240"),
        ("HEA 200", "HEA 200"),
        ("HE 200 A", "HEA 200"),
        ("he200a", "HEA 200"),
        ("HE 1000 B", "HEB 1000"),
        ("UPN200", "UPN 200"),
        ("W18x50", "W18x50"),
        ("W18X50", "W18x50"),
        ("W 18 × 50", "W18x50"),
        ("HSS8x4x1/4", "HSS8x4x1/4"),
        ("hss 8×4×1⁄4", "HSS8x4x1/4"),
        ("L6x4x1/2", "L6x4x1/2"),
        ("L3-1/2x3-1/2x3/8", "L3-1/2x3-1/2x3/8"),
        ("L3 1/2 x 3 1/2 x 3/8", "L3-1/2x3-1/2x3/8"),
        ("C10x20", "C10x20"),
        ("hss 6.625 x 0.280", "HSS6.625x0.280"),
        ("PIPE 1 1/4 STD.", "Pipe 1-1/4 Std."),
        ("pipe 6 xx-strong", "Pipe 6 xx-Strong"),
        ("WT5X22.5", "WT5x22.5"),
    ],
)
def test_spellings_of_a_designation(spelling: str, designation: str) -> None:
    profile = builtin_catalogue().find(spelling)
    assert profile is not None
    assert profile.designation == designation


@pytest.mark.parametrize("name", ["", "IPE", "IPE 245", "W18x5", "L31/2x3-1/2x3/8", "240"])
def test_what_is_not_there_is_not_found(name: str) -> None:
    assert builtin_catalogue().find(name) is None


@pytest.mark.parametrize(
    ("wanted", "first"),
    [
        ("IPE 245", "IPE 240"),
        ("IPE 1000", "IPE 600"),
        ("W18x51", "W18x50"),
        ("HSS8x4x0.24", "HSS8x4x1/4"),
        ("L3.5x3.5x0.37", "L3-1/2x3-1/2x3/8"),
        ("UPM 200", "UPN 200"),
    ],
)
def test_nearest(wanted: str, first: str) -> None:
    assert builtin_catalogue().nearest(wanted)[0] == first


def test_nothing_is_near_to_nonsense() -> None:
    assert builtin_catalogue().nearest("oak joist") == ()


@given(st.text(max_size=30))
def test_any_text_can_be_asked_for(text: str) -> None:
    catalogue = builtin_catalogue()
    found = catalogue.find(text)
    assert found is None or catalogue.find(found.designation) is found
    assert len(catalogue.nearest(text)) <= 3


def test_sections_come_by_family_and_mass() -> None:
    catalogue = builtin_catalogue()
    heads = [re.search(r"^# family = (.+)$", text, re.MULTILINE) for _, text in builtin_texts()]
    assert catalogue.families == tuple(sorted(head[1] for head in heads if head))
    assert {"IPE", "HEA", "HEB", "HEM", "UPN", "UPE", "W", "HSS"} <= set(catalogue.families)
    assert [p.designation for p in catalogue.family("IPE")][:3] == ["IPE 80", "IPE 100", "IPE 120"]
    masses = [profile.published["mass"] for profile in catalogue.family("W")]
    assert masses == sorted(masses)
    assert sum(len(catalogue.family(name)) for name in catalogue.families) == len(catalogue)


def test_each_row_tells_its_source_and_place() -> None:
    for profile in builtin_catalogue():
        assert profile.source.endswith("from memory")
        name = profile.file.removeprefix("calcgen/profiles/")
        row = (FOLDER / name).read_text("utf-8").splitlines()[profile.line - 1]
        assert row.startswith(f"{profile.designation},")


def test_the_files_of_the_program_are_sound() -> None:
    """Their rows are read when asked for, so that this is where a fault in them shows."""
    read: list[Profile] = []
    for name, text in builtin_texts():
        profiles, faults = read_catalogue(name, text)
        assert faults == ()
        assert [profile.designation for profile in profiles] == [
            row.designation for row in index_catalogue(name, text)
        ]
        read.extend(profiles)
    assert sorted(read, key=lambda p: (p.file, p.line)) == sorted(
        builtin_catalogue(), key=lambda p: (p.file, p.line)
    )


@pytest.mark.parametrize("damage", [("# axes = eurocode", "# axes = martian"), ("500,500", "500,x")])
def test_damage_to_a_file_of_the_program_is_raised(damage: tuple[str, str]) -> None:
    with pytest.raises(ValueError, match=r"ours\.csv is damaged"):
        [row.profile for row in index_catalogue("ours.csv", OFFICE.replace(*damage))]


def test_a_row_is_not_read_before_it_is_asked_for() -> None:
    """A build that names three sections does not pay for a thousand."""
    rows = index_catalogue("ours.csv", OFFICE.replace("500,500", "500,x"))
    catalogue, faults = Catalogue().joined(rows)
    assert faults == ()
    assert len(catalogue) == 2
    assert catalogue.families == ("office",)
    assert catalogue.nearest("WB 501") == ("WB 500", "WB 400")
    found = catalogue.find("wb400")
    assert found is not None
    assert found is catalogue.find("WB 400")


def test_values_are_in_si_units() -> None:
    """The reader against a second reading of the same cells, with units written down a second time."""
    for profile in builtin_catalogue():
        read = dict(profile.dimensions) | dict(profile.stated) | dict(profile.published)
        figures = printed(profile.family)[profile.designation]
        assert read.keys() - figures.keys() <= {"r"}  # of W, where the table prints k_des
        for name, figure in figures.items():
            assert read[name] == pytest.approx(figure.value, rel=1e-12)


def test_root_radius_of_wide_flange_shapes_is_k_des_less_the_flange() -> None:
    profile = builtin_catalogue().find("W18x50")
    assert profile is not None
    assert profile.dimensions["r"] == pytest.approx((0.972 - 0.570) * 0.0254, rel=1e-12)


# Values read outside the project: [1] Structural Design Essentials, TU Delft open textbook, steel section
# tables; [2] its worked example of a cantilevered beam; [3] Steel Buildings in Europe, Multi-storey Part 4,
# worked example A.1; [4] AISC Design Examples V15.1, F.1-1.
@pytest.mark.parametrize(
    ("designation", "name", "value", "unit", "rounding", "source"),
    [
        ("IPE 200", "A", 28.5, 1e-4, 0.05, "[1]"),
        ("IPE 200", "I_h", 1943, 1e-8, 0.5, "[1]"),
        ("IPE 200", "W_el_h", 194, 1e-6, 0.5, "[1]"),
        ("IPE 200", "I_v", 142, 1e-8, 0.5, "[1]"),
        ("IPE 200", "W_el_v", 28.5, 1e-6, 0.05, "[1]"),
        ("IPE 300", "A", 53.8, 1e-4, 0.05, "[1]"),
        ("IPE 300", "I_h", 8356, 1e-8, 0.5, "[1]"),
        ("IPE 300", "I_v", 604, 1e-8, 0.5, "[1]"),
        ("IPE 500", "A", 116, 1e-4, 0.5, "[1]"),
        ("IPE 500", "I_h", 48200, 1e-8, 50, "[1]"),
        ("IPE 500", "W_el_h", 1928, 1e-6, 0.5, "[1]"),
        ("UPN 80", "A", 11.0, 1e-4, 0.05, "[1]"),
        ("UPN 80", "I_h", 105.9, 1e-8, 0.15, "[1]"),  # printed here as 106
        ("UPN 80", "W_el_h", 26.5, 1e-6, 0.05, "[1]"),
        ("UPN 80", "I_v", 19.36, 1e-8, 0.05, "[1]"),  # printed here as 19.4
        ("UPN 80", "W_el_v", 6.36, 1e-6, 0.005, "[1]"),
        ("HEA 320", "I_h", 22930, 1e-8, 5, "[2]"),
        ("HEA 320", "W_el_h", 1479, 1e-6, 0.5, "[2]"),
        ("IPE 330", "A", 62.6, 1e-4, 0.05, "[3]"),
        ("IPE 330", "I_v", 788.1, 1e-8, 0.05, "[3]"),
        ("IPE 330", "W_pl_h", 804.3, 1e-6, 0.05, "[3]"),
        ("IPE 330", "I_t", 28.15, 1e-8, 0.005, "[3]"),
        ("IPE 330", "I_w", 199100, 1e-12, 50, "[3]"),
        ("W18x50", "W_pl_h", 101, 0.0254**3, 0.5, "[4]"),
        ("W18x50", "W_el_h", 88.9, 0.0254**3, 0.05, "[4]"),
        ("W18x50", "i_v", 1.65, 0.0254, 0.005, "[4]"),
        ("W18x50", "I_t", 1.24, 0.0254**4, 0.005, "[4]"),
    ],
)
def test_rows_agree_with_tables_read_elsewhere(
    designation: str, name: str, value: float, unit: float, rounding: float, source: str
) -> None:
    profile = builtin_catalogue().find(designation)
    assert profile is not None
    assert profile.published[name] / unit == pytest.approx(value, rel=0.0, abs=rounding), source


def test_office_catalogue_joins() -> None:
    office, faults = read_catalogue("profiles/office.csv", OFFICE)
    assert faults == ()
    catalogue, faults = builtin_catalogue().joined(office)
    assert faults == ()
    assert [p.designation for p in catalogue.family("office")] == ["WB 400", "WB 500"]
    assert catalogue.find("wb500") in office
    assert builtin_catalogue().find("wb500") is None


def test_designation_defined_twice_is_a_fault_and_the_first_one_stays() -> None:
    own, faults = read_catalogue("profiles/office.csv", OFFICE.replace("WB 500", "ipe240"))
    assert faults == ()
    catalogue, (fault,) = builtin_catalogue().joined(own)
    first = catalogue.find("IPE 240")
    assert first is not None
    assert first.family == "IPE"
    assert (fault.file, fault.line) == ("profiles/office.csv", 5)
    assert fault.message == "'ipe240' is defined twice"
    assert fault.hint == f"first in calcgen/profiles/ipe.csv, line {first.line}"


def test_empty_catalogue_finds_nothing() -> None:
    assert Catalogue().find("IPE 240") is None
    assert Catalogue().nearest("IPE 240") == ()


def test_sizes_are_those_of_the_shapes() -> None:
    """The reader knows what each shape needs without importing mechanics; both must say the same."""
    for shape, ways in SIZES.items():
        forms = [
            (
                {p.name for p in form.parameters if not p.optional},
                {p.name for p in form.parameters if p.optional},
            )
            for form in SHAPES[shape]
        ]
        assert forms == [(set(needed), set(optional)) for needed, optional in ways]
