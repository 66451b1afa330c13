"""Expressions: the tables of expressions.md, and places."""

from __future__ import annotations

from pathlib import Path

import pytest
from hypothesis import given
from hypothesis import strategies as st

from calcgen.language.expressions import condition, expression, formula
from calcgen.language.nodes import Binary, Name, Number
from tests.language.helpers import cursor, written


def _table() -> list[tuple[str, str, str]]:
    lines = Path(__file__).with_name("expressions.md").read_text(encoding="utf-8").splitlines()
    rows = [(number, *line.partition(" => ")) for number, line in enumerate(lines, start=1)]
    return [(f"expressions.md:{n}", typed, tree) for n, typed, arrow, tree in rows if arrow]


@pytest.mark.parametrize(("typed", "tree"), [(t, w) for _, t, w in _table()], ids=[i for i, _, _ in _table()])
def test_table(typed: str, tree: str) -> None:
    statement = cursor(typed)
    compares = tree[1:].split()[0] in ("<", "<=", ">", ">=", "==", "!=", "and", "or", "not")
    node = condition(statement) if compares else expression(statement)
    statement.finish()
    assert written(node) == tree


@pytest.mark.parametrize(
    ("typed", "tree"),
    [
        ("1 when a < 2 = 2 when a < 3 = 3 otherwise", "[1 if (< a 2); 2 if (< a 3); 3 if else]"),
        ("1 when a < 2", "[1 if (< a 2)]"),
        ("1 otherwise", "[1 if else]"),
        ("a + 1", "(+ a 1)"),
    ],
)
def test_cases(typed: str, tree: str) -> None:
    assert written(formula(cursor(typed))) == tree


def test_every_node_knows_its_place() -> None:
    node = expression(cursor("w_1 * (3.2 kN/m)"))
    assert isinstance(node, Binary)
    assert (node.span.start, node.span.end) == (0, 15)
    assert (node.operator_span.start, node.operator_span.end) == (4, 5)
    assert isinstance(node.right, Number)
    assert (node.right.span.start, node.right.span.end) == (7, 15)
    assert node.right.unit is not None
    assert (node.right.unit.span.start, node.right.unit.span.end) == (11, 15)
    assert [(s, (p.start, p.end)) for s, p in node.right.unit.joined] == [("m", (14, 15))]


def test_a_dotted_name_knows_the_place_of_each_part() -> None:
    node = expression(cursor("b.ULS.sigma_1"))
    assert isinstance(node, Name)
    assert node.parts == ("b", "ULS", "σ_1")
    assert [(s.start, s.end) for s in node.spans] == [(0, 1), (2, 5), (6, 13)]


@given(st.floats(min_value=0, max_value=1e300))
def test_a_number_is_read_as_python_reads_it(value: float) -> None:
    node = expression(cursor(repr(value)))
    assert isinstance(node, Number)
    assert node.value == value


_TREES = st.recursive(
    st.sampled_from(["x", "2", "3 kN"]),
    lambda inner: st.builds(lambda a, o, b: f"({a} {o} {b})", inner, st.sampled_from("+-*/^"), inner),
    max_leaves=20,
)


@given(_TREES)
def test_parentheses_say_the_tree(text: str) -> None:
    def prefix(typed: str) -> str:
        node = expression(cursor(typed))
        return written(node)

    def infix(node: object) -> str:
        if isinstance(node, Binary):
            return f"({infix(node.left)} {node.operator} {infix(node.right)})"
        assert isinstance(node, Number | Name)
        return node.text if isinstance(node, Number) else node.dotted

    assert infix(expression(cursor(text))) == text
    assert prefix(text) == prefix(f"({text})")
