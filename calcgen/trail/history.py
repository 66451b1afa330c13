"""What the trail's page and the change marks show."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

from calcgen.trail.canonical import canonical
from calcgen.trail.changes import Changes, Item
from calcgen.trail.entry import Entry
from calcgen.trail.trail import Trail


@dataclass(frozen=True)
class HistoryEntry:
    """An entry with its number, counted from 1 at the oldest, and its changes."""

    number: int
    entry: Entry
    changes: Changes


@dataclass(frozen=True)
class Previous:
    """The item that an address had before a change.

    Attributes
    ----------
    entry : the last entry at which it stood ('was 4.000 kPa on 2026-12-01').
    issue : the last issue at which it stood ('was 4.000 kPa at P1'); None when it was never issued.
    """

    item: Item
    entry: Entry
    issue: Entry | None


def history(trail: Trail) -> tuple[HistoryEntry, ...]:
    """Return all entries, newest first."""
    numbered = enumerate(trail.order, 1)
    return tuple(HistoryEntry(n, entry, Changes(entry.changes)) for n, entry in numbered)[::-1]


def last_issue(trail: Trail) -> Entry | None:
    """Return the newest issue entry, if the package was ever issued."""
    return next((entry for entry in reversed(trail.order) if entry.kind == "issue"), None)


def previous_values(trail: Trail, changes: Changes) -> Mapping[str, Previous]:
    """Return, by address, what each changed item was and when it last stood.

    `changes` may be pending ones or those of an entry. Addresses that were added have no previous value.
    """
    sought = {change.address: change.before for change in changes if change.before is not None}
    texts = {address: canonical(item) for address, item in sought.items()}
    standing: set[str] = set()
    last: dict[str, Entry] = {}
    issued: dict[str, Entry] = {}
    for entry in trail.order:
        for change in entry.changes:
            if change.after is not None and canonical(change.after) == texts.get(change.address):
                standing.add(change.address)
            else:
                standing.discard(change.address)
        last.update(dict.fromkeys(standing, entry))
        if entry.kind == "issue":
            issued.update(dict.fromkeys(standing, entry))
    return {
        address: Previous(sought[address], last[address], issued.get(address)) for address in sorted(last)
    }
