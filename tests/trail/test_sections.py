"""A section with parts in the state of the trail: what is found of a part stands under its name."""

from __future__ import annotations

from calcgen.quantities.display import Style
from calcgen.trail.state import state_of
from tests.evaluation.helpers import evaluated, fence


def results(width: str) -> dict[str, object]:
    lines = (
        "part web = rectangle(b = 10 mm, h = 200 mm)",
        f"part cap = rectangle(b = {width}, h = 10 mm) at (0 mm, 105 mm)",
    )
    calcs = evaluated("# T\n" + fence("section main", *lines))
    found = state_of(calcs, {}, {}, Style())["C-1#main"]["results"]
    assert isinstance(found, dict)
    return dict(found)


def test_properties_of_parts_are_in_the_state() -> None:
    found = results("100 mm")
    assert found["A"] == [30.0, "cm²"]
    assert found["cap.A"] == [10.0, "cm²"]


def test_a_wider_part_changes_its_own_results_and_the_whole() -> None:
    before, after = results("100 mm"), results("120 mm")
    changed = {name for name in before if before[name] != after[name]}
    assert {"A", "I_y", "cap.A", "cap.W_el_y", "web.W_el_y"} <= changed
    assert "web.A" not in changed
