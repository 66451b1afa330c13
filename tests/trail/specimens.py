"""Items, states and trails that the tests of this room share."""

from __future__ import annotations

from collections.abc import Iterable
from datetime import UTC, datetime, timedelta

from hypothesis import strategies as st

from calcgen.trail import Entry, Item, Json, State, Trail, read_trail, record
from calcgen.trail.entry import write_line

START = datetime(2026, 12, 1, 9, 30, tzinfo=UTC)

LOAD: Item = {
    "kind": "input",
    "text": "q_k = 4.0 kPa",
    "value": 4.0,
    "unit": "kPa",
    "note": "maintenance live load",
    "reference": "EN1991-1-1 Table 6.2",
}
HEAVIER: Item = {**LOAD, "text": "q_k = 5.0 kPa", "value": 5.0}
CHECK: Item = {"kind": "check", "text": "M_Ed <= M_c_Rd", "note": "bending at midspan", "utilisation": 0.25}

scalars = (
    st.none() | st.booleans() | st.integers() | st.floats(allow_nan=False, allow_infinity=False) | st.text()
)
items: st.SearchStrategy[Item] = st.dictionaries(
    st.sampled_from(["kind", "text", "value", "unit", "note", "reference", "utilisation"]),
    scalars,
    max_size=4,
)
states: st.SearchStrategy[State] = st.dictionaries(
    st.sampled_from(["W-2#L", "W-12#L", "W-12#M_Ed", "σ#τ", ""]), items, max_size=4
)


def build(trail: Trail, state: State, *, hour: int = 0, why: str | None = None) -> Entry | None:
    """Return the entry of a build so many hours after the start."""
    when = START + timedelta(hours=hour)
    return record(trail, state, when=when, who="A. Mason", why=why, program="calcgen 0.1.0")


def built(trail: Trail, state: State, *, hour: int = 0) -> Trail:
    """Return the trail after a build."""
    entry = build(trail, state, hour=hour)
    return trail if entry is None else Trail((*trail.entries, entry))


def chain(states_in_turn: Iterable[State]) -> Trail:
    """Return the trail of builds an hour apart."""
    trail = Trail()
    for hour, state in enumerate(states_in_turn):
        trail = built(trail, state, hour=hour)
    return trail


def text_of(trail: Trail) -> str:
    """Return the text of the trail's file."""
    return "".join(write_line(entry) + "\n" for entry in trail.entries)


def whole(text: str) -> Trail:
    """Read a trail that has no fault."""
    trail, faults = read_trail(text)
    assert faults == ()
    return trail


def as_json(state: State) -> Json:
    """Return the state as a value that `canonical` takes."""
    return dict(state)
