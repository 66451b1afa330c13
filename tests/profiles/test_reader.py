"""What a catalogue's text may say, and each fault in it with its place."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from calcgen.profiles import Profile, read_catalogue

GOOD = """\
# axes = eurocode
# shape = i_shape
# Girders of the yard.
designation,h [mm],b [mm],t_w [mm],t_f [mm],A [cm2],source
WB 500,500,250,10,20,146,"drawing 7, sheet 2"

WB 400,400,250,10,16,,drawing 7
"""


def read(text: str) -> tuple[Profile, ...]:
    profiles, faults = read_catalogue("profiles/office.csv", text)
    assert faults == ()
    return profiles


def test_a_row_becomes_a_profile() -> None:
    first, second = read(GOOD)
    assert first == Profile(
        designation="WB 500",
        family="office",
        shape="i_shape",
        axes="eurocode",
        dimensions={"h": 0.5, "b": 0.25, "t_w": 0.01, "t_f": 0.02},
        stated={},
        published={"A": 146 * 0.01**2},
        tolerances={"A": 0.005},
        source="drawing 7, sheet 2",
        file="profiles/office.csv",
        line=5,
    )
    assert (second.line, second.published) == (7, {})


@pytest.mark.parametrize(
    ("old", "new"),
    [
        ("\n", "\r\n"),
        ("# axes", "\ufeff# axes"),
        (",250,", " , 250 ,"),
        ("500,500", "500,50e1"),
        ("[cm2]", "[cm²]"),
        ("[cm2]", "[cm^2]"),
        ("h [mm]", "d[ mm ]"),
        ("b [mm]", "b_f [mm]"),
    ],
)
def test_spellings_that_mean_the_same(old: str, new: str) -> None:
    assert read(GOOD.replace(old, new)) == read(GOOD)


@pytest.mark.parametrize(
    ("axes", "column", "name", "value"),
    [
        ("eurocode", "I_y [cm4]", "I_h", 2e-8),
        ("eurocode", "I_y [10^4 mm4]", "I_h", 2e-8),
        ("eurocode", "I_z [mm⁴]", "I_v", 2e-12),
        ("eurocode", "I_w [10³ cm⁶]", "I_w", 2e-9),
        ("american", "I_x [in4]", "I_h", 2 * 0.0254**4),
        ("american", "I_y [in4]", "I_v", 2 * 0.0254**4),
        ("american", "S_x [in3]", "W_el_h", 2 * 0.0254**3),
        ("american", "mass [lb/ft]", "mass", 2 * 0.45359237 / 0.3048),
    ],
)
def test_names_follow_the_axes_and_become_neutral(axes: str, column: str, name: str, value: float) -> None:
    text = f"# axes = {axes}\n# shape = rectangle\ndesignation,h [mm],b [mm],{column}\nP1,200,50,2\n"
    (profile,) = read(text)
    assert profile.published == {name: pytest.approx(value, rel=1e-12)}
    assert profile.source == "profiles/office.csv"


def test_unequal_flanges_are_another_way_to_write_an_i_shape() -> None:
    header = "designation,h [mm],b_t [mm],t_t [mm],b_b [mm],t_b [mm],t_w [mm]"
    (profile,) = read(f"# axes = eurocode\n# shape = i_shape\n{header}\nG1,600,300,20,200,16,10\n")
    assert profile.dimensions["b_t"] == 0.3


def test_radii_of_american_angles_are_their_fillets() -> None:
    header = "designation,h [in],b [in],t [in],r_1 [in],r_z [in]"
    (profile,) = read(f"# axes = american\n# shape = angle\n{header}\nL9x4x1/2,9,4,0.5,0.4,0.85\n")
    assert profile.dimensions["r_1"] == pytest.approx(0.4 * 0.0254)
    assert profile.published == {"i_2": pytest.approx(0.85 * 0.0254)}


@pytest.mark.parametrize(
    ("stated", "tolerance"),
    [
        ("", 0.005),
        ("# tolerance = 2 %\n", 0.02),
        ("# tolerance A = 1.5 %\n# tolerance = 2 %\n", 0.015),
        ("# tolerance I_y, I_z = 3 %\n", 0.005),
        ("# tolerance = 0.1%\n", 0.5 / 146),  # the printed figure is no better
    ],
)
def test_tolerance_is_what_the_file_states_or_the_rounding(stated: str, tolerance: float) -> None:
    (profile, _) = read(stated + GOOD)
    assert profile.tolerances == {"A": pytest.approx(tolerance)}


# (what is replaced, by what, line, column, the fault, its hint or a part of it)
FAULTS = [
    ("# axes = eurocode\n", "", 1, 1, "the file does not say its axes", "# axes = eurocode"),
    ("= eurocode", "= metric", 1, 1, "unknown axes 'metric'", "known: eurocode, american"),
    ("= i_shape", "= girder", 2, 1, "unknown shape 'girder'", "channel"),
    ("# Girders", "# axes = american\n# Girders", 3, 1, "'axes' is set twice", ""),
    ("WB 400,", "# axes = american\nWB 400,", 7, 1, "'axes' stands below the header", "top of the file"),
    ("# Girders", "# tolerance = 12 %\n#", 3, 1, "'12 %' is not a tolerance", "a percentage up to 10 %"),
    ("# Girders", "# tolerance = 0.01\n#", 3, 1, "'0.01' is not a tolerance", ""),
    ("# Girders", "# tolerance S_x = 1 %\n#", 3, 1, "'S_x' is no property", "known: A, I_1"),
    ("designation", "name", 4, 1, "unknown column 'name'", "known: designation"),
    ("t_w [mm]", "tw [mm]", 4, 27, "unknown column 'tw'", "did you mean t_w?"),
    ("A [cm2]", "S_x [cm3]", 4, 45, "unknown column 'S_x'", "american axes, and the file's are eurocode"),
    ("b [mm]", "b", 4, 20, "'b' has no unit", "write it as b [...]"),
    ("b [mm]", "b [furlong]", 4, 20, "unknown unit 'furlong'", "known: mm, cm"),
    ("b [mm]", "b [cm2]", 4, 20, "'cm2' is not a unit of a length, which b is", ""),
    ("b [mm]", "d [mm]", 4, 20, "'d [mm]' gives h a second time", ""),
    (",t_w [mm]", ",A [cm2]", 4, 44, "'A [cm2]' gives A a second time", ""),
    (",t_f [mm]", "", 4, 1, "there is no column for t_f", "i_shape needs it"),
    ("500,500", "500,5oo", 5, 8, "'5oo' is not a number", ""),
    ("500,500", '500,"50,5"', 5, 8, "'50,5' is not a number", "write a decimal point"),
    ("500,500", "500,1_000", 5, 8, "'1_000' is not a number", ""),
    ("500,500", "500,inf", 5, 8, "'inf' is not a number", ""),
    ("500,500", "500,-500", 5, 8, "'-500' is not positive", ""),
    (",146,", ",  0,", 5, 24, "'0' is not positive", ""),
    ("500,500", "500,", 5, 1, "h missing: i_shape needs it", ""),
    ("WB 500", "", 5, 1, "the designation is missing", ""),
    ("drawing 7\n", "drawing 7, 8\n", 7, 1, "8 cells stand under 7 columns", "quotes around a text"),
    ("400,400", "400", 7, 1, "6 cells stand under 7 columns", ""),
    ("500,500", '500,"500', 5, 1, "3 cells stand under 7 columns", "a quote left open?"),
    ("WB 400", "wb500", 7, 1, "'wb500' is defined twice", "first on line 5"),
]


@pytest.mark.parametrize(("old", "new", "line", "column", "message", "hint"), FAULTS)
def test_faults(old: str, new: str, line: int, column: int, message: str, hint: str) -> None:
    text = GOOD.replace(old, new, 1)
    assert text != GOOD
    fault = read_catalogue("profiles/office.csv", text)[1][0]
    assert (fault.file, fault.line, fault.column) == ("profiles/office.csv", line, column)
    assert fault.message == message
    assert hint in fault.hint


def test_faults_of_all_rows_are_found_and_good_rows_stay() -> None:
    text = GOOD.replace("500,500", "500,x").replace("\n\n", "\nWB 450,450,250,y,20,,\n\n")
    profiles, faults = read_catalogue("office.csv", text)
    assert [profile.designation for profile in profiles] == ["WB 400"]
    assert [(fault.line, fault.message) for fault in faults] == [
        (5, "'x' is not a number"),
        (6, "'y' is not a number"),
    ]


@pytest.mark.parametrize("text", ["", "\n\n", "# axes = eurocode\n# shape = box\n", "a;b\n1;2\n", "\0"])
def test_text_without_a_table_is_a_fault(text: str) -> None:
    profiles, faults = read_catalogue("office.csv", text)
    assert profiles == ()
    assert faults != ()


def test_semicolons_get_a_hint() -> None:
    text = "# axes = eurocode\n# shape = rectangle\ndesignation;h [mm];b [mm]\nP1;200;50\n"
    (fault,) = read_catalogue("office.csv", text)[1]
    assert fault.message == "the cells are not separated by commas"


def test_k_des_less_than_the_flange_is_a_fault() -> None:
    header = "designation,d [in],b_f [in],t_w [in],t_f [in],k_des [in]"
    text = f"# axes = american\n# shape = i_shape\n{header}\nW18x50,18,7.5,0.355,0.57,0.5\n"
    (fault,) = read_catalogue("office.csv", text)[1]
    assert (fault.line, fault.message) == (4, "k_des is less than t_f")


def test_a_cell_beyond_all_measure_is_a_fault() -> None:
    (fault,) = read_catalogue("office.csv", GOOD.replace("drawing 7\n", "x" * 200_000 + "\n"))[1]
    assert fault.line == 7


@given(st.text(alphabet=st.sampled_from('#=,"\n\r[] ;mhbA0123.-xe\0\u2028'), max_size=80))
def test_no_text_breaks_the_reader(text: str) -> None:
    above = "# axes = eurocode\n# shape = rectangle\ndesignation,h [mm],b [mm],A [cm2]\n"
    for whole in (text, above + text):
        profiles, faults = read_catalogue("office.csv", whole)
        assert list(faults) == sorted(faults, key=lambda fault: (fault.line, fault.column))
        assert all(fault.line >= 1 and fault.column >= 1 for fault in faults)
        assert all(profile.dimensions.keys() == {"h", "b"} for profile in profiles)
