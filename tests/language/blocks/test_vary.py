"""`vary`: the input, its values and what is shown as nodes; the faults are in tests/invalid/vary.md."""

from __future__ import annotations

from calcgen.language.blocks.vary import Over, Steps, VaryBlock
from calcgen.language.document import calc_from
from calcgen.language.nodes import Binary, Name, Number
from calcgen.text import SourceFile


def read(*lines: str) -> tuple[VaryBlock, SourceFile]:
    text = "\n".join(["# T", "```vary", *lines, "```", ""])
    source = SourceFile("calcs/C-1.md", text)
    calc = calc_from(source)
    assert calc.diagnostics == ()
    assert calc.failed_names == frozenset()
    (block,) = (s for s in calc.segments if isinstance(s, VaryBlock))
    return block, source


def test_steps() -> None:
    block, source = read(
        "# the spans of the hall",
        "sigma_1 = 26 steps from 4 m to 2*L_0 | why | [DWG p. 1]",
        "show M_Ed/M_c_Rd,",
        "  b.SLS.w_max",
        "show f(1 m, 2 m)",
    )
    assert block.varied.target.name == "σ_1"
    assert isinstance(block.varied.values, Steps)
    count, start, end = block.varied.values.count, block.varied.values.start, block.varied.values.end
    assert isinstance(count, Number)
    assert isinstance(start, Number)
    assert (count.value, count.unit) == (26, None)
    assert source.slice(start.span) == "4 m"
    assert isinstance(end, Binary)
    assert [source.slice(e.span) for e in block.expressions] == [
        "M_Ed/M_c_Rd",
        "b.SLS.w_max",
        "f(1 m, 2 m)",
    ]
    assert len(block.shows) == 2
    assert block.varied.annotations.note.text == "why"
    assert [c.key for c in block.varied.annotations.reference.citations] == ["DWG"]


def test_a_pattern() -> None:
    block, source = read('profile over "IPE *"', "show main.A")
    assert isinstance(block.varied.values, Over)
    assert block.varied.values.pattern.value == "IPE *"
    assert source.slice(block.varied.values.pattern.span) == '"IPE *"'
    (shown,) = block.expressions
    assert isinstance(shown, Name)
    assert shown.dotted == "main.A"


def test_an_input_may_be_called_show() -> None:
    block, _ = read("show = 2 steps from 1 to 2", "show show")
    assert block.varied.target.name == "show"
    assert len(block.expressions) == 1
