"""The trail as a graph of entries by their parents, and the state that it leaves at any of them."""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from dataclasses import dataclass
from functools import cached_property

from calcgen.trail.changes import Item, State
from calcgen.trail.entry import Entry


@dataclass(frozen=True)
class Trail:
    """The entries in the order of the file, and the torn rest of a last line whose writing was cut short."""

    entries: tuple[Entry, ...] = ()
    torn: str = ""

    @cached_property
    def by_digest(self) -> Mapping[str, Entry]:
        """Entries by digest; of two that claim the same, the intact one."""
        ranked = sorted(self.entries, key=lambda entry: entry.intact)
        return {entry.digest: entry for entry in ranked}

    @cached_property
    def heads(self) -> tuple[str, ...]:
        """Digests of the intact entries that no intact entry follows, oldest first; parents of the next one.

        An altered entry is never a head: the next entry follows what can be trusted.
        """
        intact = [entry for entry in self.entries if entry.intact]
        followed = {e.digest for e in self.ancestry(parent for entry in intact for parent in entry.parents)}
        heads = {entry.digest: entry for entry in intact if entry.digest not in followed}
        return tuple(sorted(heads, key=lambda digest: (heads[digest].when, digest)))

    @cached_property
    def order(self) -> tuple[Entry, ...]:
        """All entries, parents before children; if all are intact, whatever their order in the file."""
        return self.ancestry([*self.heads, *(entry.digest for entry in self.entries)])

    def ancestry(self, digests: Iterable[str]) -> tuple[Entry, ...]:
        """Return the entries of these digests and all they follow, each once, parents before children."""
        done: set[str] = set()
        found: list[Entry] = []
        stack = [(digest, False) for digest in reversed(tuple(digests))]
        while stack:  # depth first without recursion: a trail is thousands deep
            digest, parents_done = stack.pop()
            if parents_done:
                found.append(self.by_digest[digest])
            elif digest not in done and digest in self.by_digest:
                done.add(digest)
                stack.append((digest, True))
                stack.extend((parent, False) for parent in reversed(self.by_digest[digest].parents))
        return tuple(found)


def replay(trail: Trail, entry: str | None = None) -> State:
    """Return the state at the entry of digest `entry`, or at the heads: what the changes up to there leave.

    Where branches met that changed the same address, the later head's change stands, until the next
    entry, which records what differs from that.

    Raises
    ------
    KeyError
        When the trail has no such entry.
    """
    if entry is not None and entry not in trail.by_digest:
        raise KeyError(entry)
    state: dict[str, Item] = {}
    for past in trail.ancestry(trail.heads if entry is None else (entry,)):
        for change in past.changes:
            if change.after is None:
                state.pop(change.address, None)
            else:
                state[change.address] = change.after
    return state
