"""The entry that a build adds to the trail."""

from __future__ import annotations

from datetime import UTC, datetime

from calcgen.trail.changes import State, compare
from calcgen.trail.entry import Entry, sealed
from calcgen.trail.trail import Trail, replay


def record(
    trail: Trail, state: State, *, when: datetime, who: str, why: str | None, program: str
) -> Entry | None:
    """Return the build entry that takes the trail to `state`, or None when nothing changed.

    Heads left by a merge of branches stay as they are until something changes; then both are parents.

    Raises
    ------
    ValueError
        When `when` has no time zone, or a number is not finite.
    """
    changes = compare(replay(trail), state)
    if not changes:
        return None
    return sealed(
        "build",
        when=stamp(when),
        who=who,
        why=why,
        program=program,
        parents=trail.heads,
        changes=changes.all,
    )


def stamp(when: datetime) -> str:
    """Return the time in UTC to the second, such as '2026-12-01T09:30:00Z'.

    Raises
    ------
    ValueError
        When `when` has no time zone.
    """
    if when.tzinfo is None:
        msg = "a time in the trail needs its time zone"
        raise ValueError(msg)
    return when.astimezone(UTC).replace(tzinfo=None).isoformat(timespec="seconds") + "Z"
