"""The manual is complete: whatever the program knows by name, the manual explains, and nothing else."""

from __future__ import annotations

import re
from dataclasses import fields

import click
import pytest

from calcgen import cli
from calcgen.evaluation.blocks.beam import BeamThing
from calcgen.evaluation.blocks.beam_influence import readable
from calcgen.evaluation.blocks.beam_lines import is_result
from calcgen.evaluation.blocks.stress_results import RESULT_MEANINGS
from calcgen.evaluation.combination_sets.standard import standard_sets
from calcgen.evaluation.conventions import DIMENSIONS, PROPERTIES
from calcgen.evaluation.results.beam import BeamResult
from calcgen.evaluation.results.stress import StressResult
from calcgen.language.blocks import LATER as LATER_BLOCKS
from calcgen.language.blocks import NAMED, READERS, beam_cases, sheet, stress
from calcgen.language.blocks import beam_lines as beam
from calcgen.language.blocks.section import SHAPES
from calcgen.language.nodes import CONSTANTS, FUNCTIONS, WORDS
from calcgen.mechanics.second_route import beam as beam_route
from calcgen.mechanics.second_route import section as section_route
from calcgen.mechanics.second_route import stress as stress_route
from calcgen.profiles.catalogue import builtin_catalogue
from calcgen.profiles.columns import PUBLISHED, SIZES, UNITS
from calcgen.project import Project, Reference
from calcgen.quantities.display import KINDS, Style
from calcgen.quantities.measure import dimension_of, unit_size
from calcgen.quantities.units import SYMBOLS
from calcgen.text.codes import CODES
from calcgen.text.terminal import render
from tests.projects.evaluating import diagnosed, evaluated_manual
from tests.projects.manual import Message, chapters, everything, messages, rows, words

# --- commands ---------------------------------------------------------------------------------------------


def test_every_command_with_its_options() -> None:
    for name, command in cli.main.commands.items():
        assert any(word.startswith(f"calcgen {name}") for word in words()), name
        for option in (p for p in command.params if isinstance(p, click.Option)):
            long = next(o for o in option.opts if o.startswith("--"))
            assert any(word.split()[0] == long for word in words() if word), f"{name} {long}"


def test_no_command_that_does_not_exist() -> None:
    shown = {row[0] for row in rows("M-17-commands")}
    named = {name for cell in shown for name in re.findall(r"`calcgen ([a-z]+)", cell)}
    assert named == set(cli.main.commands)


def test_every_exit_code() -> None:
    assert {"0", "1", "2"} <= {row[0] for row in rows("M-17-commands")}


# --- language ---------------------------------------------------------------------------------------------


def test_every_block() -> None:
    heads = {head for row in rows("M-03-lines") for head in re.findall(r"`([a-z]+)", row[0])}
    assert {*READERS, *LATER_BLOCKS} <= heads
    for kind in NAMED:
        assert f"{kind} NAME" in words()


def test_every_function() -> None:
    shown = {name for row in rows("M-06-expressions") for name in re.findall(r"`([a-z0-9]+)\(", row[0])}
    assert shown == set(FUNCTIONS)


def test_every_reserved_word() -> None:
    assert words() >= (WORDS | CONSTANTS)


def test_every_unit_with_its_size() -> None:
    sizes = {row[1].strip("`"): row[2] for row in rows("M-05-units") if "`" in row[1]}
    assert sizes.keys() == SYMBOLS.keys()
    plain = {"base unit": 1.0, "π/180": 0.017453292519943295, "1/s": 1.0}
    for symbol, size in sizes.items():
        if symbol != "°C":
            number = plain.get(size) or float(size.split()[0].rstrip(",:"))
            unit = size.split()[1].rstrip(",:") if re.match(r"[\d.]+ \S", size) else ""
            in_si = number * (float(unit_size(unit).magnitude) if unit in SYMBOLS else 1.0)
            assert float(unit_size(symbol).magnitude) == pytest.approx(in_si, rel=1e-15), symbol


SHOWN_BY_DEFAULT = [row for row in rows("M-05-units") if row[0] in KINDS and "`" not in row[1]]


@pytest.mark.parametrize("row", SHOWN_BY_DEFAULT, ids=lambda row: row[0])
def test_every_unit_shown_by_default(row: tuple[str, str, str]) -> None:
    dimension = dimension_of(unit_size(KINDS[row[0]]))
    for style, cell in ((Style("SI"), row[1]), (Style("US"), row[2])):
        upper = 1e300
        for part in cell.split(", "):  # "m from 1 m, mm below"
            unit, _, limit = part.removesuffix(" below").partition(" from ")
            number, _, of = limit.partition(" ")
            least = float(number) * float(unit_size(of).magnitude) if limit else 0.0
            assert style.default_unit(dimension, 1.01 * least) == unit
            assert style.default_unit(dimension, 0.99 * upper) == unit
            upper = least


def test_every_kind_of_quantity() -> None:
    assert set(KINDS) <= words()


def test_every_key_of_a_sheet() -> None:
    assert set(sheet.KEYS) <= words()


@pytest.mark.parametrize(("file", "kind"), [("project.toml", Project), ("references.toml", Reference)])
def test_every_key_of_the_project(file: str, kind: type[Project | Reference]) -> None:
    known = {field.name for field in fields(kind)} - {"key", "span"}
    assert known <= words(), file


# --- sections ---------------------------------------------------------------------------------------------


def test_every_shape_with_its_arguments() -> None:
    shown: dict[str, set[str]] = {}
    for row in rows("M-09-shapes"):
        name = row[0].strip("`")
        if name in SHAPES:
            shown.setdefault(name, set()).update(re.findall(r"`(\w+)`", row[1]))
    assert shown == {name: set(arguments) for name, arguments in SHAPES.items()}


def test_every_property_with_its_meaning() -> None:
    shown = [tuple(cell.strip("`") for cell in row) for row in rows("M-11-properties")]
    for p in PROPERTIES:
        assert (p.eurocode, p.american, p.meaning) in shown


def test_every_dimension() -> None:
    for name, meaning in DIMENSIONS.items():
        assert f"`{name}` ({meaning})" in " ".join(chapters()["M-11-properties"].split())


def test_every_family_of_the_catalogue() -> None:
    catalogue = builtin_catalogue()
    shown = {row[0].strip("`"): row for row in rows("M-10-rolled")}
    for family in catalogue.families:
        members = catalogue.family(family)
        assert shown[family][1] == str(len(members))
        assert shown[family][3] == members[0].axes
        for end in shown[family][2].split(" to "):
            assert catalogue.find(end) in members


def test_every_column_of_a_catalogue() -> None:
    sizes = {s for forms in SIZES.values() for needed, optional in forms for s in (*needed, *optional)}
    assert sizes <= words()
    published = set(PUBLISHED["eurocode"]) | (set(PUBLISHED["american"]) - {"r_z"})
    assert published <= words() | {"r_z"}
    lengths = {re.sub(r"[2346]$", "", unit) for unit in UNITS}
    assert lengths <= words()


# --- beams ------------------------------------------------------------------------------------------------


def test_every_line_of_a_beam() -> None:
    first = {row[0].strip("`") for row in rows("M-12-beam")}
    for word in (*beam.READERS, *beam.SETTINGS):
        assert any(re.search(rf"(^|`){word} ", cell) for cell in first), word
    for kind in beam.SUPPORTS:
        assert any(f"support {kind} " in cell for cell in first), kind
    for load in beam.KINDS:
        assert any(re.search(rf"load \w+ (lateral )?{load} ", cell) for cell in first), load


def test_every_kind_of_case() -> None:
    assert set(beam_cases.CASE_KINDS) <= words()


def test_every_combination_set_and_its_factors() -> None:
    assert {row[0].strip("`") for row in rows("M-12g-combinations")} >= set(standard_sets())
    assert set(beam.FACTORS) <= words()


def test_every_result_of_a_beam() -> None:
    quantities, extremes = ("M", "V", "w", "w_rel", "slope"), ("max", "min", "abs")
    for name in (f"{q}_{e}" for q in quantities for e in extremes):
        assert is_result(name)
        assert name in words()
    shown = [
        result.name
        for calc in evaluated_manual().values()
        for block in calc.segments
        if isinstance(block, BeamResult)
        for group in block.groups
        for result in (*group.results, *group.further)
    ]
    assert shown
    for name in shown:
        of_beam = re.sub(r"^span_\d+\.", "", name.removesuffix("_lat"))
        general = re.sub(r"^(R|M_R|θ|x_M_0|x_V_0)_\d+", r"\1_1", of_beam)
        assert general in words(), name


def test_every_result_of_an_influence_line() -> None:
    shown = {word.replace("η_2_", "η_1_") for word in words()}
    assert set(readable("η_1")) <= shown
    named = {symbol for row in rows("M-12h-influence") for symbol in row[0].split(", ")}
    assert {*beam.OF_PLACES, *beam.OF_SUPPORTS} <= named


def test_each_documented_result_of_a_beam_can_be_read() -> None:
    assert BeamThing.__doc__
    of_places = ["x_V_max", "x_w_min", "x_w_rel_max", "x_slope_abs", "x_M_0", "x_M_0_1", "x_V_0", "x_V_0_1"]
    of_spans = [
        "w_rel_abs",
        "C_b",
        "C_1",
        "C_1(0 m, 1 m)",
        "span_1.M_max",
        "span_1.w_rel_max",
        "span_1.x_M_0",
    ]
    names = [*of_places, *of_spans, "R_1", "M_R_1", "θ_1", "theta_2_max", "M(1 m)", "slope_min(1 m)"]
    text = (
        "```beam b\nspan = 2 m\nEI = 1 kN·m²\nsupport fixed at 0 m\nsupport pin at 2 m\n"
        "load Q uniform 1 kN/m\n```\n```working\n"
    )
    text += "".join(f"a_{n} = b.{name}\n" for n, name in enumerate(names)) + "```\n"
    assert diagnosed(f"# Example\n\n{text}") == []


# --- stresses ---------------------------------------------------------------------------------------------


def test_every_line_of_a_stress() -> None:
    assert {*stress.KEYS, "point"} <= words()


def test_every_result_of_a_stress_with_no_other() -> None:
    shown = {name for row in rows("M-14-stress") for name in re.findall(r"`([^`]+)`", row[0])}
    assert set(RESULT_MEANINGS) <= shown


def test_every_premise() -> None:
    stated = {p.premise for calc in evaluated_manual().values() for p in calc.premises}
    first = {row[0] for chapter in ("M-13-results", "M-14-stress") for row in rows(chapter)}
    assert stated <= first


def test_beams_and_stresses_are_among_the_examples() -> None:
    kinds = {type(block) for calc in evaluated_manual().values() for block in calc.segments}
    assert {BeamResult, StressResult} <= kinds


# --- second route -----------------------------------------------------------------------------------------


def test_every_tolerance_of_the_second_route() -> None:
    shown = {row[0]: row[3] for row in rows("M-16-second-route") if len(row) == 4}
    for of, tolerance in (
        ("section", section_route.TOLERANCE),
        ("beam", beam_route.TOLERANCE),
        ("stress", stress_route.TOLERANCE),
    ):
        assert float(shown[of]) == tolerance


def test_everything_that_is_found_again() -> None:
    shown = " ".join(row[1] for row in rows("M-16-second-route") if len(row) == 4)
    found = {
        r.what for c in evaluated_manual().values() for r in c.second_route if r.of in ("purlin", "support")
    }
    assert found
    for what in found:
        assert what.removesuffix("_lat") in shown


# --- not available yet ------------------------------------------------------------------------------------

NOT_YET = tuple((word, f"```{word} x\n```\n") for word in LATER_BLOCKS)


@pytest.mark.parametrize(("word", "text"), NOT_YET, ids=[word for word, _ in NOT_YET])
def test_what_is_not_available_yet_says_so_and_is_listed(word: str, text: str) -> None:
    assert "not-available-yet" in {d.code for d in diagnosed(f"# Example\n\n{text}")}
    listed = " ".join(row[1] for row in rows("M-23-limits") if len(row) == 2)
    assert f"`{word}`" in listed


def test_nothing_else_is_listed_as_not_available_yet() -> None:
    listed = {
        word
        for row in rows("M-23-limits")
        if row[0] in ("blocks", "section", "section properties", "beam", "stress")
        for word in re.findall(r"`([^`]+)`", row[1])
    }
    assert listed == {word for word, _ in NOT_YET}


# --- messages ---------------------------------------------------------------------------------------------

WITHOUT_EXAMPLE = {
    "no-project",
    "no-calcs",
    "not-utf-8",
    "not-meshed",
    "unreadable-file",
}


def test_every_message_is_explained_and_no_other() -> None:
    explained = [m.code for m in messages()]
    assert sorted([*explained, *WITHOUT_EXAMPLE]) == sorted(CODES)
    assert set(words()) >= WITHOUT_EXAMPLE
    assert len(explained) == everything().count("\n````bad")


def test_the_form_of_a_message() -> None:
    (found,) = diagnosed("# Example\n\n```working\na = 2*L\n```\n")
    assert f"\n```\n{render(found)}\n```\n" in chapters()["M-18-reading"]


OF_CALCS = [m for m in messages() if m.kind in ("", "file")]


@pytest.mark.parametrize("message", OF_CALCS, ids=lambda m: m.code)
def test_the_bad_example_gives_the_message_and_the_good_one_gives_none(message: Message) -> None:
    head = "" if message.kind == "file" else "# Example\n\n"
    assert message.code in {d.code for d in diagnosed(head + message.bad)}
    assert [d.code for d in diagnosed(head + message.good)] == []


def test_every_chapter_that_is_named_exists() -> None:
    assert set(re.findall(r"\bM-\d\d[a-z]?-[a-z-]+[a-z]", everything())) <= set(chapters())
