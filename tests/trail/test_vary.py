"""A repeated calc in the trail: its text alone, since its values follow from the calc."""

from __future__ import annotations

from calcgen.quantities.display import Style
from calcgen.trail.changes import State, compare
from calcgen.trail.state import state_of
from tests.evaluation.helpers import evaluated, fence


def state(steps: int, width: str = "2 m") -> State:
    block = fence("vary", f"L = {steps} steps from 1 m to 2 m", "show A")
    inputs = fence("inputs", "L = 1 m", f"b = {width}")
    return state_of(evaluated(f"# T\n{inputs}{fence('working', 'A = b*L')}{block}"), {}, {}, Style())


def test_another_range_is_an_edit_of_the_block_alone() -> None:
    before = state(2)
    assert before["C-1#vary-L"]["kind"] == "vary"
    assert "L = 2 steps from 1 m to 2 m" in str(before["C-1#vary-L"]["text"])
    assert [(c.address, c.how) for c in compare(before, state(3))] == [("C-1#vary-L", "edited")]


def test_other_values_of_the_calc_change_nothing_of_the_block() -> None:
    changed = [c.address for c in compare(state(2), state(2, "3 m"))]
    assert changed == ["C-1#A", "C-1#b"]
