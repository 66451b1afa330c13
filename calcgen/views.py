"""The trail in the words of pages: what each item was, and the entries one by one."""

from __future__ import annotations

from collections.abc import Iterable

from calcgen.quantities.display import Style, number_text
from calcgen.site.facts import ChangeView, HistoryView, PreviousValue
from calcgen.trail import Change, Changes, Entry, Item, Previous, Trail, history, previous_values

_WORDS = {"added": "added", "removed": "removed", "edited": "edited", "moved": "follows"}


def previous_views(trail: Trail, changes: Changes, style: Style) -> dict[str, PreviousValue]:
    """Return, by address, what each changed item was and when it last stood.

    Items of an entry that only added things have no previous value.
    """
    found = previous_values(trail, changes)
    return {address: _previous(p, style) for address, p in found.items()}


def _previous(p: Previous, style: Style) -> PreviousValue:
    when = f"at {p.issue.more['revision']}" if p.issue is not None else f"on {p.entry.when[:10]}"
    return PreviousValue(item_text(p.item, style), when)


def history_views(trail: Trail, style: Style) -> tuple[HistoryView, ...]:
    """Return the entries of the trail, newest first, edits before what follows from them."""
    return tuple(
        HistoryView(
            when=h.entry.when,
            who=h.entry.who,
            why=h.entry.why or "",
            changes=tuple(_change(c, style) for c in _edits_first(h.changes)),
            heading=_heading(h.number, h.entry),
        )
        for h in history(trail)
    )


def _edits_first(changes: Changes) -> Iterable[Change]:
    return (*changes.by_hand, *changes.downstream)


def _heading(number: int, entry: Entry) -> str:
    if entry.kind == "issue":
        return f"Issue {entry.more.get('revision', '')}"
    return f"Entry {number}"


def _change(change: Change, style: Style) -> ChangeView:
    return ChangeView(
        address=change.address,
        what=f"{change.kind} {_WORDS[change.how]}",
        before=item_text(change.before, style) if change.before is not None else "",
        after=item_text(change.after, style) if change.after is not None else "",
    )


def item_text(item: Item, style: Style) -> str:
    """Return an item as read: its value with unit, its utilisation, or its text."""
    if item.get("kind") == "check":
        ratio = item.get("utilisation")
        standing = "satisfied" if item.get("satisfied") else "exceeded"
        return f"{number_text(ratio, 3)} {standing}" if isinstance(ratio, int | float) else standing
    value = item.get("value")
    if isinstance(value, bool):
        return "yes" if value else "no"
    if isinstance(value, int | float):
        unit = str(item.get("unit") or "")
        return f"{number_text(float(value), style.digits)}\u00a0{unit}".rstrip("\u00a0")
    if isinstance(value, str):
        return value
    if item.get("kind") == "assumption":
        basis = f" ({item['reference']})" if item.get("reference") else ""
        return f"{item.get('text', '')}{basis}"
    return str(item.get("text", ""))
