"""Each kind of block from a calc that has them all (`VALID`), and how kinds answer faults."""

from __future__ import annotations

from typing import TypeVar

import pytest

from calcgen.language.blocks import LATER, READERS
from calcgen.language.blocks.assumptions import AssumptionsBlock
from calcgen.language.blocks.beam import (
    BeamBlock,
    BeamSetting,
    CaseLine,
    CombinationLine,
    HingeLine,
    LoadLine,
    SpanLine,
    SupportLine,
)
from calcgen.language.blocks.inputs import Feed, InputsBlock
from calcgen.language.blocks.section import (
    BarsLine,
    HoleLine,
    MaterialLine,
    PartLine,
    ReferenceLine,
    SectionBlock,
    ShapeLine,
)
from calcgen.language.blocks.sheet import SheetBlock
from calcgen.language.blocks.stress import StressBlock
from calcgen.language.blocks.working import Check, Derivation, WorkingBlock
from calcgen.language.calc import Calc, FailedBlock
from calcgen.language.nodes import Expression, Number, Place, Text, Truth
from tests.language.helpers import VALID, found, read, written

BlockT = TypeVar("BlockT")


def block(calc: Calc, kind: type[BlockT], index: int = 0) -> BlockT:
    return [s for s in calc.segments if isinstance(s, kind)][index]


@pytest.fixture(scope="module")
def calc() -> Calc:
    read_calc = read(VALID)
    assert not read_calc.diagnostics
    assert not read_calc.failed_names
    return read_calc


def shown(node: Expression | None) -> str | None:
    return None if node is None else written(node)


def test_sheet(calc: Calc) -> None:
    sheet = block(calc, SheetBlock)
    assert sheet.get("originator") == "A. Mason"
    assert sheet.get("purpose") == "Confirm the stringer for {q_k} on the whole length"
    assert sheet.get("checker") == ""
    purpose = sheet.entries[1]
    before, place, after = purpose.pieces
    assert (before, after) == ("Confirm the stringer for ", " on the whole length")
    assert isinstance(place, Place)
    assert (place.name.dotted, calc.source.slice(place.span)) == ("q_k", "{q_k}")


def test_assumptions(calc: Calc) -> None:
    first, second = block(calc, AssumptionsBlock).items
    assert (first.number, first.text.text, first.open) == ("A1", "Grating gives no lateral restraint", False)
    assert (second.number, second.basis.text, second.open) == ("A2", "to be confirmed: survey S-7", True)


def test_inputs(calc: Calc) -> None:
    length, load, grade, clip, axial, reaction, strength = block(calc, InputsBlock).items
    assert isinstance(length.value, Number)
    assert (length.target.name, length.value.value) == ("L", 6.0)
    assert [(c.key, c.place) for c in load.annotations.reference.citations] == [("EN1991-1-1", "Table 6.2")]
    assert isinstance(grade.value, Text)
    assert grade.value.value == "S275 | J0"
    assert isinstance(clip.value, Truth)
    assert axial.unit is not None
    assert (axial.unit.text, calc.source.slice(axial.statement_span)) == ("kN", "N [kN] = -40 kN")
    assert isinstance(reaction.value, Feed)
    assert (reaction.value.name.dotted, reaction.value.calc) == ("stringer.ULS.R_1", "W-07")
    assert calc.source.slice(reaction.value.calc_span) == "W-07"
    assert isinstance(strength.value, Feed)
    assert (strength.target.name, strength.value.name.dotted, strength.value.calc) == ("f_y", "f_y", "DB-01")


def test_working(calc: Calc) -> None:
    load, moment, check, factor = block(calc, WorkingBlock).items
    assert isinstance(load, Derivation)
    assert written(load.formula) == "(+ (* 1.35 g_k) (* 1.5 q_k))"
    assert isinstance(moment, Derivation)
    assert moment.unit is not None
    assert written(moment.formula) == "(/ (* (* w s) (^ L 2)) 8)"
    assert moment.annotations.note.text == "midspan moment of a simple beam"
    assert moment.annotations.reference.text == "statics"
    assert isinstance(check, Check)
    assert (check.statement, check.annotations.note.text) == ("M_Ed <= M_c_Rd", "bending at midspan")
    assert isinstance(factor, Derivation)
    assert written(factor.formula).startswith("[1 if (<= λ 0.2); (/ 1 (+ Φ")
    assert written(factor.formula).endswith("if (and (<= λ 3) (not (> λ 4))); 0 if else]")


def test_section(calc: Calc) -> None:
    (line,) = block(calc, SectionBlock).items
    assert isinstance(line, ShapeLine)
    shape = line.shape
    assert shape.shape.name == "i_shape"
    assert {a.name.name: written(a.value) for a in shape.arguments} == {
        "h": "240[mm]",
        "b": "120[mm]",
        "t_w": "6.2[mm]",
        "t_f": "9.8[mm]",
    }
    assert (shape.mirrored, shown(shape.turned)) == (True, "90[deg]")
    assert shape.at is not None
    assert (written(shape.at.x), written(shape.at.y)) == ("0[mm]", "2[mm]")
    (line,) = block(calc, SectionBlock, 1).items
    assert isinstance(line, ShapeLine)
    assert [(written(p.x), written(p.y)) for p in line.shape.points][1:3] == [
        ("50[mm]", "80[mm]"),
        ("0[mm]", "160[mm]"),
    ]


def test_a_rolled_section_takes_a_designation_or_a_name() -> None:
    calc = read(
        '# T\n```section a\nshape = rolled("IPE 240")\n```\n```section b\nshape = rolled(profile)\n```\n'
    )
    assert not calc.diagnostics
    lines = [i for s in calc.segments if isinstance(s, SectionBlock) for i in s.items]
    assert [written(i.shape.positional[0]) for i in lines if isinstance(i, ShapeLine)] == [
        '"IPE 240"',
        "profile",
    ]


def test_parts_holes_bars_and_materials() -> None:
    calc = read(
        "# T\n```section slab\n"
        "part rib = rectangle(b = 3 mm, h = 5 mm) at (1 mm, 2 mm) of concrete | the rib | [DWG]\n"
        "part gutter = strip(t = 2 mm, r = 3 mm, (0 mm, 0 mm), (0 mm, 9 mm), (9 mm, 9 mm)) of steel\n"
        "hole duct = ellipse(b = 3 mm, h = 4 mm) turned 90 deg\n"
        "bars low = n of 20 mm from (-1 mm, 0 mm) to (1 mm, 0 mm) of steel\n"
        "bars top = 402 mm² at (0 mm, 4 mm) of steel\n"
        "modulus steel = 200 GPa\n"
        "strength steel = f_y/γ_M0\n"
        "reference = steel\n```\n"
    )
    assert not calc.diagnostics
    rib, gutter, hole, low, top, modulus, strength, reference = block(calc, SectionBlock).items
    assert isinstance(rib, PartLine)
    assert rib.material is not None
    assert (rib.target.name, rib.material.name, rib.annotations.note.text) == ("rib", "concrete", "the rib")
    assert isinstance(gutter, PartLine)
    assert [a.name.name for a in gutter.shape.arguments] == ["t", "r"]
    assert len(gutter.shape.points) == 3
    assert isinstance(hole, HoleLine)
    assert shown(hole.shape.turned) == "90[deg]"
    assert isinstance(low, BarsLine)
    assert (shown(low.count), written(low.size)) == ("n", "20[mm]")
    assert low.end is not None
    assert (written(low.start.x), written(low.end.x)) == ("(- 1[mm])", "1[mm]")
    assert isinstance(top, BarsLine)
    assert (top.count, written(top.size), top.end) == (None, "402[mm²]", None)
    assert isinstance(modulus, MaterialLine)
    assert (modulus.key.name, modulus.material.name) == ("modulus", "steel")
    assert isinstance(strength, MaterialLine)
    assert written(strength.value) == "(/ f_y γ_M0)"
    assert isinstance(reference, ReferenceLine)
    assert reference.material.name == "steel"


def test_beam(calc: Calc) -> None:
    beam = block(calc, BeamBlock)
    span, section, stiffness, pin, spring, hinge, case, *loads, first, second, restrained = beam.lines
    assert isinstance(span, SpanLine)
    assert [written(n) for n in span.lengths] == ["6[m]", "8[m]", "6[m]"]
    assert isinstance(section, BeamSetting)
    assert (section.key.name, written(section.value), section.start) == ("section", "main", None)
    assert isinstance(stiffness, BeamSetting)
    assert (written(stiffness.value), shown(stiffness.start), shown(stiffness.end)) == (
        "(* (* 2 E) I)",
        "2[m]",
        "4[m]",
    )
    assert isinstance(pin, SupportLine)
    assert (pin.kind, pin.plane, shown(pin.stiffness)) == ("pin", "both", None)
    assert isinstance(spring, SupportLine)
    assert (
        spring.kind,
        spring.plane,
        shown(spring.stiffness),
        shown(spring.rotation),
        shown(spring.settles),
    ) == (
        "spring",
        "lateral",
        "12[kN/mm]",
        "5[kN·m]",
        "5[mm]",
    )
    assert spring.settles_case is not None
    assert spring.settles_case.name == "S"
    assert isinstance(hinge, HingeLine)
    assert isinstance(case, CaseLine)
    assert case.kind is not None
    assert (case.target.name, case.kind.name) == ("G", "permanent")
    assert [
        (n.case.name, n.kind, n.plane, [*map(written, n.values)], shown(n.at), shown(n.start), shown(n.end))
        for n in loads
        if isinstance(n, LoadLine)
    ] == [
        ("G", "self_weight", "vertical", ["78.5[kN/m³]"], None, None, None),
        ("G", "uniform", "vertical", ["(* (* 1.35 g_k) s)"], None, "6[m]", "14[m]"),
        ("Q", "linear", "lateral", ["0[kN/m]", "4[kN/m]"], None, "0[m]", "3[m]"),
        ("Q", "point", "vertical", ["9[kN]"], "2.5[m]", None, None),
        ("W", "moment", "vertical", ["4[kN·m]"], "20[m]", None, None),
    ]
    assert isinstance(first, CombinationLine)
    assert first.group is not None
    assert [(t.sign, shown(t.factor), t.case.name) for t in first.terms] == [
        (1, "1.35", "G"),
        (1, "(* 1.5 ψ_0)", "Q"),
        (-1, None, "W"),
    ]
    assert isinstance(second, CombinationLine)
    assert (second.target.name, second.group) == ("SLS", None)
    assert isinstance(restrained, BeamSetting)
    assert restrained.annotations.note.text == "grating clipped to the top flange"


def test_units_and_words_of_beams_do_not_meet() -> None:
    calc = read(
        "# T\n```beam b\nsupport pin at 24 in settles 1/4 in in S\n"
        "load Q uniform 2 klf from 0 in to 9 ft\n```\n"
    )
    assert not calc.diagnostics
    support, load = block(calc, BeamBlock).lines
    assert isinstance(support, SupportLine)
    assert (shown(support.at), shown(support.settles)) == ("24[in]", "0.25[in]")
    assert isinstance(load, LoadLine)
    assert (shown(load.start), shown(load.end)) == ("0[in]", "9[ft]")


def test_stress(calc: Calc) -> None:
    stress = block(calc, StressBlock)
    assert [s.key.name for s in stress.settings] == ["section", "M", "model", "limit"]
    model = stress.setting("model")
    assert model is not None
    assert written(model.value) == "elastic"
    assert [(p.target.name, written(p.point.y)) for p in stress.points] == [("weld", "120[mm]")]


@pytest.mark.parametrize(
    ("text", "names"),
    [
        ("```inputs\na = 5 KN\nb [kN] = = 3\nc of 07\nd = 3 m\n```", {"a", "b", "c"}),
        ("```working\na = 2 L\nsigma_1 = (\nb <= 2 L\n```", {"a", "σ_1"}),
        ("```section a\nshape = sphere(d = 3 mm)\n```", {"a"}),
        ("```section a\nhole b = circle(d = 3 mm)\n```", {"a"}),
        ("```section a\npart b = circle(d = 3 mm)\nmodulus = 3 GPa\n```", {"a"}),
        ("```beam b\npattern\n```", {"b"}),
        ("```stress c\nM = 2 L\n```", {"c"}),
        ("```table k | source\n```", {"k"}),
        ("```method en1993/buckling as ltb\nL_cr = 3 m\n```", {"ltb"}),
        ("```vary\nL = 26 steps from 4 m to 9 m\n```", set()),
        ("- ```inputs\n  a = 3 m\n  ```", {"a"}),
        ("```inputs\na = 3 m\n\n```section b\n", {"a", "b"}),
        ("```inptus\na = 3 m\n```", {"a"}),
    ],
)
def test_names_that_lines_in_error_would_define(text: str, names: set[str]) -> None:
    assert read(f"# T\n{text}\n").failed_names == names


def test_a_block_that_lost_a_line_is_not_used() -> None:
    """A beam without one of its loads would give wrong figures, so nothing of it is kept."""
    calc = read("# T\n```beam b\nspan = 6 m\nload Q train 80 kN spaced 1.2 m\n```\n")
    assert [type(s) for s in calc.segments] == [FailedBlock]
    assert found(calc) == ["4:20 unexpected"]


def test_every_kind_of_the_language_is_in_the_table() -> None:
    words = "sheet, assumptions, inputs, working, section, beam, stress, table, vary, method, takes, proof"
    assert ", ".join((*READERS, *LATER)) == words
