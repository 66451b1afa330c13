"""What counts as a change, and whether someone made it or it only followed."""

from __future__ import annotations

import pytest

from calcgen.trail import Item, State, compare
from tests.trail.specimens import CHECK, HEAVIER, LOAD


@pytest.mark.parametrize(
    ("before", "after", "how"),
    [
        (None, LOAD, "added"),
        (LOAD, None, "removed"),
        (LOAD, HEAVIER, "edited"),
        (LOAD, {**LOAD, "reference": "EN1991-1-1 Table 6.1"}, "edited"),
        (LOAD, {**LOAD, "note": "crowd"}, "edited"),
        (LOAD, {**LOAD, "value": 4.5}, "moved"),
        (LOAD, {**LOAD, "unit": "kN/m²"}, "moved"),
        (CHECK, {**CHECK, "utilisation": 0.3}, "moved"),
        (CHECK, {**CHECK, "utilisation": None}, "moved"),
    ],
)
def test_how_an_item_changed(before: Item | None, after: Item | None, how: str) -> None:
    state = [{} if item is None else {"W-12#q_k": item} for item in (before, after)]
    (change,) = compare(*state)
    assert change.how == how
    assert (change.before, change.after) == (before, after)


@pytest.mark.parametrize(
    "same",
    [
        LOAD,
        dict(sorted(LOAD.items(), reverse=True)),
        {**LOAD, "value": 4.0 + 1e-15},
    ],
    ids=["equal", "other order of fields", "last bit of a float"],
)
def test_no_change(same: Item) -> None:
    assert not compare({"W-12#q_k": LOAD}, {"W-12#q_k": same})


def test_changes_are_sorted_by_address_with_numbers_as_numbers() -> None:
    addresses = ["W-12#L", "W-2#L", "A-1#x_10", "A-1#x_9", "W-2#", "W-12#a", "2#a"]
    changes = compare({}, dict.fromkeys(addresses, LOAD))
    expected = ["2#a", "A-1#x_9", "A-1#x_10", "W-2#", "W-2#L", "W-12#L", "W-12#a"]
    assert [change.address for change in changes] == expected
    assert changes.calcs == ("2", "A-1", "W-2", "W-12")


def test_one_edit_and_what_it_moved() -> None:
    before: State = {
        "W-7#q_k": LOAD,
        "W-7#M_Ed": {"text": "M_Ed = q_k*s*L^2/8", "value": 20.0},
        "W-12#bending": CHECK,
    }
    after: State = {
        "W-7#q_k": HEAVIER,
        "W-7#M_Ed": {"text": "M_Ed = q_k*s*L^2/8", "value": 25.0},
        "W-12#bending": {**CHECK, "utilisation": 0.3125},
    }
    changes = compare(before, after)
    assert [change.address for change in changes.by_hand] == ["W-7#q_k"]
    assert [change.address for change in changes.downstream] == ["W-7#M_Ed", "W-12#bending"]
    assert [(change.address, change.utilisation) for change in changes.checks] == [
        ("W-12#bending", (0.25, 0.3125))
    ]
    assert changes.calcs == ("W-7", "W-12")
    assert len(changes) == 3


def test_a_new_check_had_no_utilisation_before() -> None:
    (change,) = compare({}, {"W-12#bending": CHECK})
    assert change.utilisation == (None, 0.25)
