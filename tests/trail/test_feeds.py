"""Inputs that are fed: a change upstream marks each calc downstream at the input that it comes in by."""

from __future__ import annotations

import pytest

from calcgen.quantities.display import Style
from calcgen.trail.changes import Changes, State, compare
from calcgen.trail.state import state_of
from tests.evaluation.helpers import evaluated, fence

USER = (
    "# U\n"
    + fence("inputs", "girder = main of C-1", "b of C-1", "k of C-1")
    + fence("working", "W = girder.W_el_y")
)
LAST = "# V\n" + fence("inputs", "g = girder of C-2", "W of C-2") + fence("working", "d = 2*W", "h = g.h")


def state(shape: str = 'rolled("IPE 240")', load: str = "3", cell: str = "1", digits: int = 4) -> State:
    first = (
        "# T\n"
        + fence("section main", f"shape = {shape}")
        + fence("beam b", "span = 4 m", "EI = 10 MN·m^2", f"load G uniform {load} kN/m")
        + fence("table k", "    | a", f"row | {cell}")
    )
    return state_of(evaluated(first, USER, LAST, style=Style(digits=digits)), {}, {}, Style(digits=digits))


def addresses(changes: Changes, how: str) -> list[str]:
    return [c.address for c in changes if c.how == how]


def test_another_section_is_followed_two_steps_down() -> None:
    changes = compare(state(), state('rolled("IPE 270")'))
    assert addresses(changes, "edited") == ["C-1#main"]
    assert addresses(changes, "moved") == [
        "C-2#W",
        "C-2#girder",
        "C-3#W",
        "C-3#d",
        "C-3#g",
        "C-3#h",
    ]


@pytest.mark.parametrize(
    ("after", "moved"),
    [
        (("rectangle(b = 100 mm, h = 201 mm)", "3", "1"), "C-2#girder"),  # the same shape of another size
        (("rectangle(b = 100 mm, h = 200 mm)", "3.1", "1"), "C-2#b"),
        (("rectangle(b = 100 mm, h = 200 mm)", "3", "1.1"), "C-2#k"),
    ],
)
def test_what_a_block_gives_counts(after: tuple[str, str, str], moved: str) -> None:
    changes = compare(state("rectangle(b = 100 mm, h = 200 mm)"), state(*after))
    assert moved in addresses(changes, "moved")


def test_figures_shown_are_no_change() -> None:
    assert (
        compare(state("rectangle(b = 1 in, h = 2 in)"), state("rectangle(b = 1 in, h = 2 in)", digits=6)).all
        == ()
    )


def test_a_calc_whose_file_cannot_be_read_keeps_its_items() -> None:
    before = state()
    after = state_of((), {}, before, Style(), unread={"C-2"})
    assert set(after) == {a for a in before if a.startswith("C-2#")}
