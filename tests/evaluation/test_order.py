"""The order of calcs: each after its feeds, loops told whole, long ones too."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from itertools import pairwise

import numpy as np
from hypothesis import given
from hypothesis import strategies as st
from scipy.sparse import csr_array
from scipy.sparse.csgraph import connected_components

from calcgen.evaluation.order import Order, in_order
from calcgen.language.calc import Calc
from calcgen.language.document import calc_from
from calcgen.text import SourceFile
from tests.evaluation.helpers import fence


def calc(number: str, *feeds: str) -> Calc:
    """Return a calc that takes a value from each of these."""
    lines = (f"x_{n} = y of {feed}" for n, feed in enumerate(feeds, start=1))
    return calc_from(SourceFile(f"calcs/{number}.md", "# T\n" + fence("inputs", *lines)))


def ordered(feeds: Mapping[str, Sequence[str]]) -> Order:
    return in_order([calc(number, *own) for number, own in feeds.items()])


def loops(order: Order) -> dict[str, list[str]]:
    """Return the loop that is told on each calc."""
    told = {c.number: found[0].message for c, found, _ in order.faulty}
    return {number: message.partition(": ")[2].split(" ← ") for number, message in told.items()}


def test_each_comes_after_its_feeds_and_by_number_where_that_is_free() -> None:
    order = ordered({"A": ["C"], "B": [], "C": ["D", "B"], "D": [], "E": []})
    assert [c.number for c in order.calcs] == ["B", "D", "C", "A", "E"]
    assert order.faulty == ()


def test_two_loops_that_share_a_calc() -> None:
    feeds = {"A": ["B", "C"], "B": ["A"], "C": ["D"], "D": ["A"], "E": ["D"]}
    order = ordered(feeds)
    assert loops(order) == {
        "A": ["A", "B", "A"],
        "B": ["B", "A", "B"],
        "C": ["C", "D", "A", "C"],
        "D": ["D", "A", "C", "D"],
    }
    assert [c.number for c in order.calcs] == ["E"]


def test_the_caret_is_at_the_feed_that_the_loop_goes_through() -> None:
    order = ordered({"A": ["X", "B"], "B": ["A"], "X": []})
    ((first, (fault,), _), _) = order.faulty
    assert first.number == "A"
    assert (fault.line, fault.column) == (4, 12)


def test_a_calc_on_no_loop_between_two_of_them_waits_below() -> None:
    order = ordered({"A": ["B"], "B": ["A"], "M": ["A"], "X": ["Y", "M"], "Y": ["X"]})
    assert sorted(loops(order)) == ["A", "B", "X", "Y"]
    assert [c.number for c in order.calcs] == ["M"]


def test_a_long_loop_is_told_whole_on_each_of_its_calcs() -> None:
    count = 200
    order = ordered({f"L-{n}": [f"L-{(n + 1) % count}"] for n in range(count)})
    found = loops(order)
    assert len(found) == count
    assert found["L-7"] == [f"L-{(7 + n) % count}" for n in range(count + 1)]


def test_a_long_chain_needs_no_deep_stack() -> None:
    count = 5000
    order = ordered({f"K-{n:05}": [f"K-{n + 1:05}"] for n in range(count)} | {f"K-{count:05}": []})
    assert [c.number for c in order.calcs] == [f"K-{n:05}" for n in reversed(range(count + 1))]


def test_numbers_that_differ_in_capitals_alone() -> None:
    order = ordered({"W-1": [], "w-1": [], "X": ["W-1"]})
    assert [(c.number, found[0].code) for c, found, _ in order.faulty] == [
        ("W-1", "bad-calc-number"),
        ("w-1", "bad-calc-number"),
    ]
    assert [c.number for c in order.calcs] == ["X"]


@given(st.lists(st.tuples(st.integers(0, 8), st.integers(0, 8)), max_size=25))
def test_any_feeds(pairs: list[tuple[int, int]]) -> None:
    """Calcs on loops are those of scipy's strongly connected components; every loop told is one."""
    feeds: dict[str, list[str]] = {f"C-{n}": [] for n in range(9)}
    matrix = np.zeros((9, 9))
    for taker, giver in pairs:
        feeds[f"C-{taker}"].append(f"C-{giver}")
        matrix[taker, giver] = 1
    _, group = connected_components(csr_array(matrix), connection="strong")
    on_loop = {f"C-{n}" for n in range(9) if (group == group[n]).sum() > 1 or matrix[n, n]}
    order = ordered(feeds)
    found = loops(order)
    assert set(found) == on_loop
    for number, loop in found.items():
        assert loop[0] == loop[-1] == number
        assert len(set(loop)) == len(loop) - 1
        assert all(giver in feeds[taker] for taker, giver in pairwise(loop))
    numbers = [c.number for c in order.calcs]
    assert sorted(numbers) == sorted(set(feeds) - on_loop)
    for place, number in enumerate(numbers):
        assert set(feeds[number]) <= {*numbers[:place], *on_loop}
