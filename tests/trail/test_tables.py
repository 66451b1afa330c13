"""A table in the trail: its text, so that a value edited by hand is an entry of its own."""

from __future__ import annotations

from calcgen.quantities.display import Style
from calcgen.trail.changes import State, compare
from calcgen.trail.state import state_of
from tests.evaluation.helpers import evaluated, fence


def state(value: str) -> State:
    table = fence("table k | BS 1", "    | a", f"1 m | {value}", "2 m | 3")
    calcs = evaluated("# T\n" + table + fence("working", "x = k(1.5 m)"))
    return state_of(calcs, {}, {}, Style())


def test_an_edited_value_is_told_from_what_follows() -> None:
    before, after = state("1"), state("2")
    assert before["C-1#k"]["kind"] == "table"
    assert "table k | BS 1" in str(before["C-1#k"]["text"])
    assert [(c.address, c.how) for c in compare(before, after)] == [
        ("C-1#k", "edited"),
        ("C-1#x", "moved"),
    ]
