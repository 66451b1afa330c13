"""`table`: heads and cells as nodes, with their places; the faults are in tests/invalid/table.md."""

from __future__ import annotations

from calcgen.language.blocks.table import TableBlock
from calcgen.language.document import calc_from
from calcgen.language.nodes import Number, Unary
from calcgen.text import SourceFile

TEXT = """\
# T

```table k_mod | EN 1995-1-1, [EC5 Table 3.1]
# from the national annex
          | permanent | "a | b" | 2x4

class  1  | 0.60      |         | -3 kN
"2"       | .5        | 1e3 N/mm^2 | 6 ft 3 in
```
"""


def read(text: str) -> tuple[TableBlock, SourceFile]:
    source = SourceFile("calcs/C-1.md", text)
    calc = calc_from(source)
    assert calc.diagnostics == ()
    (block,) = (s for s in calc.segments if isinstance(s, TableBlock))
    return block, source


def test_heads_are_texts_and_quotes_keep_a_bar_or_make_a_number_one() -> None:
    block, _ = read(TEXT)
    assert [h.text for h in block.columns] == ["permanent", "a | b", "2x4"]
    assert [row.head.text for row in block.rows] == ["class 1", "2"]
    assert all(h.value is None for h in (*block.columns, *(row.head for row in block.rows)))


def test_cells_are_numbers_with_units_or_empty() -> None:
    block, source = read(TEXT)
    values = [[cell.value for cell in row.cells] for row in block.rows]
    assert isinstance(values[0][0], Number)
    assert values[0][1] is None
    assert isinstance(values[0][2], Unary)
    assert [source.slice(cell.span) for cell in block.rows[1].cells] == [".5", "1e3 N/mm^2", "6 ft 3 in"]


def test_heads_that_are_numbers_or_quantities() -> None:
    block, _ = read("# T\n```table c\n | 0 | 1.5\n-10 °C | 1 | 2\n20 °C | 3 | 4\n```\n")
    assert all(isinstance(h.value, Number) for h in block.columns)
    assert [type(row.head.value) for row in block.rows] == [Unary, Number]


def test_the_reference_of_the_head_with_its_citations() -> None:
    block, source = read(TEXT)
    assert block.target.name == "k_mod"
    assert block.reference.text == "EN 1995-1-1, [EC5 Table 3.1]"
    (citation,) = block.reference.citations
    assert (citation.key, citation.place) == ("EC5", "Table 3.1")
    assert source.slice(citation.span) == "[EC5 Table 3.1]"
    assert read("# T\n```table c\n | a\nx | 1\n```\n")[0].reference.text == ""
