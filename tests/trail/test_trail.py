"""Recording, reading back, replaying; branches and their merge; damage and how it shows."""

from __future__ import annotations

from datetime import datetime, timedelta, timezone

import pytest
from hypothesis import assume, given
from hypothesis import strategies as st

from calcgen.trail import (
    Entry,
    State,
    Trail,
    canonical,
    compare,
    digest_of,
    history,
    last_issue,
    previous_values,
    read_trail,
    record,
    replay,
    sealed,
)
from calcgen.trail.entry import write_line
from tests.trail.specimens import (
    CHECK,
    HEAVIER,
    LOAD,
    START,
    as_json,
    build,
    built,
    chain,
    states,
    text_of,
    whole,
)

THREE: list[State] = [{"W-12#q_k": LOAD}, {"W-12#q_k": HEAVIER}, {"W-12#q_k": HEAVIER, "W-12#bending": CHECK}]


# Recording


def test_a_line_holds_the_entry_with_its_digest() -> None:
    entry = build(Trail(), {"W-12#q_k": {"kind": "input", "value": 4.0}}, why="first issue")
    assert entry is not None
    body = (
        '"kind":"build","parents":[],"program":"calcgen 0.1.0",'
        '"when":"2026-12-01T09:30:00Z","who":"A. Mason","why":"first issue"}'
    )
    changes = '"changes":[{"address":"W-12#q_k","after":{"kind":"input","value":4.0},"before":null}]'
    # SHA-256 of the line without its digest, from coreutils' sha256sum
    digest = "c1ccd5111e6d1beea7fe9f19c0665de3903c45e37a1f5600117e863bc938bb72"
    assert write_line(entry) == "{" + changes + f',"digest":"{digest}",' + body


def test_nothing_changed_nothing_recorded() -> None:
    trail = chain(THREE)
    assert build(trail, THREE[-1]) is None
    assert build(Trail(), {}) is None


def test_each_entry_follows_the_one_before() -> None:
    first, second, third = chain(THREE).entries
    assert (first.parents, second.parents, third.parents) == ((), (first.digest,), (second.digest,))


def test_times_are_recorded_in_utc() -> None:
    summer = timezone(timedelta(hours=2))
    when = datetime(2026, 7, 1, 1, 0, 0, 999, tzinfo=summer)
    entry = record(Trail(), THREE[0], when=when, who="A", why=None, program="p")
    assert entry is not None
    assert entry.when == "2026-06-30T23:00:00Z"
    with pytest.raises(ValueError, match="time zone"):
        record(Trail(), THREE[0], when=START.replace(tzinfo=None), who="A", why=None, program="p")


def issue(trail: Trail, revision: str) -> Entry:
    return sealed(
        "issue",
        when="2026-12-02T00:00:00Z",
        who="A. Mason",
        why=None,
        program="calcgen 0.1.0",
        parents=trail.heads,
        changes=(),
        more={"revision": revision, "sources": {"calcs/W-12.md": "ab" * 32}},
    )


def test_entries_of_other_kinds_are_carried_with_their_own_fields() -> None:
    trail = chain(THREE)
    entry = issue(trail, "P1")
    read = whole(text_of(trail) + write_line(entry) + "\n")
    assert read.entries[-1] == entry
    assert read.entries[-1].more["revision"] == "P1"
    assert replay(read) == THREE[-1]


def test_a_field_that_every_entry_has_is_not_taken_twice() -> None:
    with pytest.raises(ValueError, match="digest"):
        sealed(
            "issue", when="", who="", why=None, program="", parents=(), changes=(), more={"digest": "forged"}
        )


# Replay


@given(st.lists(states, max_size=6))
def test_replay_of_each_entry_is_the_state_that_was_recorded(states_in_turn: list[State]) -> None:
    trail = Trail()
    for state in states_in_turn:
        trail = built(trail, state)
        assert canonical(as_json(replay(trail))) == canonical(as_json(state))
    read = whole(text_of(trail))
    assert read == trail
    so_far: State = {}
    recorded = [so_far := state for state in states_in_turn if compare(so_far, state)]
    for entry, state in zip(read.entries, recorded, strict=True):
        assert canonical(as_json(replay(read, entry.digest))) == canonical(as_json(state))


def test_replay_of_an_unknown_entry() -> None:
    with pytest.raises(KeyError):
        replay(chain(THREE), "0" * 64)


def test_a_long_trail_is_replayed_without_recursion() -> None:
    trail = Trail()
    entries: list[Entry] = []
    for number in range(3000):
        (entry,) = [build(trail, {"a#x": {"value": number}})]
        assert entry is not None
        entries.append(entry)
        trail = Trail((entry,))  # what the next needs: its parent and the state there
    assert len(whole(text_of(Trail(tuple(entries)))).order) == 3000
    assert replay(Trail(tuple(entries))) == {"a#x": {"value": 2999}}


# Branches


@pytest.fixture
def branches() -> tuple[Trail, Trail]:
    """One edits the load, the other adds a check, both from the same first entry."""
    base = chain(THREE[:1])
    ours = built(base, {"W-12#q_k": HEAVIER}, hour=1)
    theirs = built(base, {"W-12#q_k": LOAD, "W-12#bending": CHECK}, hour=2)
    return ours, theirs


def union(*trails: Trail) -> str:
    """Merge as version control does with 'merge=union': the lines of all, common ones once."""
    return "".join(
        dict.fromkeys(line for trail in trails for line in text_of(trail).splitlines(keepends=True))
    )


def test_a_merge_has_both_heads_and_both_changes(branches: tuple[Trail, Trail]) -> None:
    merged = whole(union(*branches))
    assert merged.heads == tuple(branch.heads[0] for branch in branches)
    assert replay(merged) == {"W-12#q_k": HEAVIER, "W-12#bending": CHECK}
    assert build(merged, replay(merged)) is None


def test_the_entry_after_a_merge_has_both_as_parents(branches: tuple[Trail, Trail]) -> None:
    merged = whole(union(*branches))
    state = {**replay(merged), "W-12#L": LOAD}
    after = whole(text_of(built(merged, state, hour=3)))
    assert after.entries[-1].parents == merged.heads
    assert after.heads == (after.entries[-1].digest,)
    assert replay(after) == state


def test_the_merge_does_not_depend_on_the_order_of_the_lines(branches: tuple[Trail, Trail]) -> None:
    one, other = whole(union(*branches)), whole(union(*reversed(branches)))
    assert one.heads == other.heads
    assert one.order == other.order
    assert replay(one) == replay(other)


def test_where_branches_disagree_the_later_head_stands_until_the_next_entry(
    branches: tuple[Trail, Trail],
) -> None:
    ours = branches[0]
    third = {**LOAD, "text": "q_k = 3.0 kPa", "value": 3.0}
    later = built(chain(THREE[:1]), {"W-12#q_k": third}, hour=5)
    merged = whole(union(later, ours))
    assert replay(merged) == {"W-12#q_k": third}
    settled = built(merged, {"W-12#q_k": HEAVIER}, hour=6)
    assert replay(settled) == {"W-12#q_k": HEAVIER}


# Damage


def codes(text: str) -> list[tuple[str, int]]:
    return [(fault.code, fault.line) for fault in read_trail(text)[1]]


LINES = text_of(chain(THREE)).splitlines(keepends=True)
A, B, C = LINES

FAULTY = {
    "altered value": (A + B.replace("5.0", "4.5", 1) + C, [("trail-altered", 2)]),
    "altered reason": (A + B.replace('"why":null', '"why":"agreed"') + C, [("trail-altered", 2)]),
    "blank put in": (A.replace(",", ", ", 1) + B + C, [("trail-altered", 1)]),
    "field said twice": (A + B.replace('"who"', '"who":"X","who"') + C, [("trail-altered", 2)]),
    "altered last line": (A + B + C.replace("0.25", "0.20"), [("trail-altered", 3)]),
    "not finite": (A + B.replace("5.0", "NaN", 1) + C, [("trail-altered", 2)]),
    "line removed": (A + C, [("trail-gap", 2)]),
    "first line removed": (B + C, [("trail-gap", 1)]),
    "line twice": (A + B + B + C, [("trail-repeated", 3)]),
    "no JSON": (A + "hello\n" + B + C, [("trail-unreadable", 2)]),
    "no entry": (A + '{"kind":"build"}\n' + B + C, [("trail-unreadable", 2)]),
    "no object": (A + "[]\n" + B + C, [("trail-unreadable", 2)]),
    "wrong type": (
        A + B.replace('"parents":[', '"parents":[1,') + C,
        [("trail-unreadable", 2), ("trail-gap", 3)],
    ),
    "nested deep": (A + "[" * 100_000 + "\n" + B + C, [("trail-unreadable", 2)]),
    "conflict": (
        A + "<<<<<<< HEAD\n" + B + "=======\n" + C + ">>>>>>> other\n",
        [("trail-conflict", 2), ("trail-conflict", 4), ("trail-conflict", 6)],
    ),
    "torn": (A + B + C[:-30], [("trail-torn", 3)]),
    "torn to zeros": (A + B + C + "\0" * 40, [("trail-torn", 4)]),
}


@pytest.mark.parametrize(("text", "expected"), FAULTY.values(), ids=FAULTY.keys())
def test_damage_is_reported_by_line(text: str, expected: list[tuple[str, int]]) -> None:
    assert codes(text) == expected


@pytest.mark.parametrize(
    "text",
    ["", A + B + C[:-1], (A + B + C).replace("\n", "\r\n"), A + "\n" + B + C, B + A + C],
    ids=["empty", "no line feed at the end", "Windows line ends", "blank line", "other order"],
)
def test_what_is_no_damage(text: str) -> None:
    assert codes(text) == []


@given(
    st.lists(states, min_size=2, max_size=4),
    st.data(),
)
def test_any_edit_of_a_line_is_found(states_in_turn: list[State], data: st.DataObject) -> None:
    text = text_of(chain(states_in_turn))
    assume(text)
    place = data.draw(st.integers(0, len(text) - 2), label="place")
    assume(text[place] != "\n")
    put = data.draw(st.sampled_from(["", *'0 19{}[]",:aeſ\\']), label="put")
    removed = data.draw(st.integers(0, 1), label="removed")
    edited = text[:place] + put + text[place + removed :]
    assume(edited != text)
    assert any(fault.severity == "error" for fault in read_trail(edited)[1])


def test_an_altered_entry_is_kept_and_marked_and_the_chain_goes_on() -> None:
    trail, _ = read_trail(A + B.replace('"why":null', '"why":"agreed"') + C)
    assert [entry.intact for entry in trail.entries] == [True, False, True]
    assert trail.heads == (chain(THREE).heads)
    assert replay(trail) == THREE[-1]
    assert [entry.entry.intact for entry in history(trail)] == [True, False, True]


def test_the_next_entry_does_not_follow_an_altered_last_one() -> None:
    trail, _ = read_trail(A + B + C.replace("0.25", "0.20"))
    assert trail.heads == (trail.entries[1].digest,)
    assert replay(trail) == THREE[1]


def test_a_restored_line_heals_the_trail() -> None:
    """Entries written while a line was damaged still fit once it is restored."""
    damaged, _ = read_trail(A + B + C.replace("0.25", "0.20"))
    after = build(damaged, THREE[-1], hour=9)
    assert after is not None
    assert codes(A + B + C + write_line(after) + "\n") == []


# History


def test_history_is_newest_first_and_numbered_from_the_oldest() -> None:
    shown = history(chain(THREE))
    assert [entry.number for entry in shown] == [3, 2, 1]
    assert [change.how for change in shown[1].changes] == ["edited"]


def test_previous_value_of_a_pending_change() -> None:
    trail = chain(THREE)
    pending = compare(replay(trail), {"W-12#q_k": LOAD, "W-12#L": LOAD})
    previous = previous_values(trail, pending)
    assert previous.keys() == {"W-12#q_k", "W-12#bending"}  # W-12#L was added
    assert previous["W-12#q_k"].item["value"] == 5.0
    assert previous["W-12#q_k"].entry == trail.entries[-1]
    assert previous["W-12#q_k"].issue is None


def test_previous_value_of_a_recorded_change_names_the_last_entry_and_issue_where_it_stood() -> None:
    first = chain(THREE[:1])
    issued = Trail((*first.entries, issue(first, "P1")))
    more = built(issued, {**THREE[0], "W-12#bending": CHECK}, hour=30)
    trail = built(more, THREE[2], hour=40)
    (previous,) = previous_values(trail, history(trail)[0].changes).values()
    assert previous.item["value"] == 4.0
    assert previous.issue == issued.entries[-1]
    assert previous.entry == more.entries[-1]
    assert last_issue(trail) == issued.entries[-1]
    assert last_issue(first) is None


def test_digest_is_over_all_the_rest() -> None:
    entry = chain(THREE).entries[-1]
    rest = {
        "kind": "build",
        "when": "2026-12-01T11:30:00Z",
        "who": "A. Mason",
        "why": None,
        "program": "calcgen 0.1.0",
        "parents": list(entry.parents),
        "changes": [{"address": "W-12#bending", "before": None, "after": CHECK}],
    }
    assert entry.digest == digest_of(rest)
