"""The trail's page: every entry with its changes, newest first."""

from __future__ import annotations

from dataclasses import dataclass

from calcgen.site.cover import change_link, fed_changes
from calcgen.site.facts import PackageInput
from calcgen.site.views import Link


@dataclass(frozen=True)
class ChangeRow:
    """One change of an entry."""

    item: Link
    what: str
    before: str
    after: str


@dataclass(frozen=True)
class EntryView:
    """One entry; `anchor` counts from the oldest, so that it keeps its address.

    `downstream` are the calcs that changed because of what feeds them.
    """

    anchor: str
    heading: str
    when: str
    who: str
    why: str
    changes: tuple[ChangeRow, ...]
    downstream: tuple[Link, ...]


@dataclass(frozen=True)
class TrailView:
    """The trail; `pending` tells that its newest entry is not recorded yet."""

    entries: tuple[EntryView, ...]
    pending: bool


def trail_view(package: PackageInput) -> TrailView:
    """Return the trail's page."""
    count = len(package.history)
    return TrailView(
        tuple(
            EntryView(
                f"entry-{count - index}",
                entry.heading or f"entry {count - index}",
                entry.when,
                entry.who,
                entry.why,
                tuple(
                    ChangeRow(change_link(c.address, package, c.name), c.what, c.before, c.after)
                    for c in entry.changes
                ),
                tuple(
                    change_link(first.address, package, number)
                    for number, (first, *_) in fed_changes(entry.changes).items()
                ),
            )
            for index, entry in enumerate(package.history)
        ),
        package.pending,
    )
