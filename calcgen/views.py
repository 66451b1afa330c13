"""The trail in the words of pages: what each item was, and the entries one by one."""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterable, Mapping, Sequence

from calcgen.quantities.display import Style, number_text
from calcgen.quantities.symbols import plain
from calcgen.site.facts import ChangeView, HistoryView, PreviousValue
from calcgen.trail import (
    Change,
    Changes,
    Entry,
    HistoryEntry,
    Item,
    Previous,
    Trail,
    history,
    previous_values,
)

_WORDS = {"added": "added", "removed": "removed", "edited": "edited", "moved": "follows"}


def previous_views(trail: Trail, changes: Changes, style: Style) -> dict[str, PreviousValue]:
    """Return, by address, what each changed item was and when it last stood.

    Items of an entry that only added things have no previous value.
    """
    found = previous_values(trail, changes)
    texts = {change.address: _change(change, style).before for change in changes}
    return {address: PreviousValue(texts[address], _when(p)) for address, p in found.items()}


def unrecorded_views(trail: Trail, pending: Changes, style: Style) -> tuple[ChangeView, ...]:
    """Return the changes that a trail does not record yet; none where it has no entry, and all is new."""
    return tuple(_changes(pending, style)) if trail.order else ()


def _when(p: Previous) -> str:
    return f"at {p.issue.more['revision']}" if p.issue is not None else f"on {p.entry.when[:10]}"


def history_views(trail: Trail, style: Style) -> tuple[HistoryView, ...]:
    """Return the entries of the trail, newest first, edits before what follows from them."""
    return tuple(
        HistoryView(
            when=h.entry.when,
            who=h.entry.who,
            why=h.entry.why or "",
            changes=tuple(_first_record(h) if not h.entry.parents else _changes(h.changes, style)),
            heading=_heading(h.number, h.entry),
        )
        for h in history(trail)
    )


def _changes(changes: Changes, style: Style) -> Iterable[ChangeView]:
    """Yield what was edited by hand, then the checks that moved, then all else that follows."""
    rank = {"check": 0}
    downstream = sorted(changes.downstream, key=lambda c: rank.get(c.kind, 1))
    return (_change(c, style) for c in (*changes.by_hand, *downstream))


def _first_record(entry: HistoryEntry) -> Iterable[ChangeView]:
    """Yield one line for each calc of the entry that starts a trail: everything in it is new."""
    by_calc: dict[str, Counter[str]] = {calc: Counter() for calc in entry.changes.calcs}
    for c in entry.changes:
        by_calc[c.calc]["variation" if c.kind == "vary" else c.kind] += 1
    for calc, kinds in by_calc.items():
        counted = ", ".join(f"{n} {kind}{'s' if n > 1 else ''}" for kind, n in sorted(kinds.items()))
        yield ChangeView(calc, calc, "first recorded", "", counted.replace("stresss", "stresses"))


def _heading(number: int, entry: Entry) -> str:
    if entry.kind == "issue":
        return f"Issue {entry.more.get('revision', '')}"
    return f"Entry {number}"


def _change(change: Change, style: Style) -> ChangeView:
    before, after = change.before, change.after
    was, now = ("" if item is None else item_text(item, style) for item in (before, after))
    if before is not None and after is not None and "results" in after:
        results = _block_texts(before, after, style)
        if before.get("value") == after.get("value") and any(results):
            was, now = results
    what = f"{change.kind} {_WORDS[change.how]}"
    fed = change.kind == "input" and change.how == "moved"
    return ChangeView(change.address, _name(change), what, was, now, fed)


def _name(change: Change) -> str:
    """Return an item as it is called: 'W-12 bending at midspan', 'W-12 M_c,Rd'."""
    item = change.after or change.before or {}
    calc, _, anchor = change.address.partition("#")
    return f"{calc} {item.get('label') or plain(anchor)}"


def _block_texts(before: Item, after: Item, style: Style) -> tuple[str, str]:
    """Return how a section, beam or stress differs: its lines where they were edited, else its results."""
    old, new = _lines(before), _lines(after)
    if old != new:
        removed = [line for line in old if line not in new]
        added = [line for line in new if line not in old]
        return _few(removed), _few(added)
    was, now = _results(before, style), _results(after, style)
    names = [name for name in now if now[name] != was.get(name)]
    names.sort(key=lambda name: name.startswith("x_") or ".x_" in name)
    return _few([f"{n} = {was.get(n, '—')}" for n in names]), _few([f"{n} = {now[n]}" for n in names])


def _lines(item: Item) -> list[str]:
    return [" ".join(line.split()) for line in str(item.get("text", "")).splitlines()]


def _results(item: Item, style: Style) -> dict[str, str]:
    results = item.get("results")
    found: dict[str, str] = {}
    for name, pair in results.items() if isinstance(results, Mapping) else ():
        if isinstance(pair, Sequence) and len(pair) == 2:
            found[plain(name)] = item_text({"value": pair[0], "unit": pair[1]}, style)
    return found


def _few(texts: list[str], most: int = 3) -> str:
    more = f"; and {len(texts) - most} more" if len(texts) > most else ""
    return "; ".join(texts[:most]) + more


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
