"""The order in which calcs are evaluated: a calc after those that feed it; cycles are reported whole."""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Mapping, Sequence
from dataclasses import dataclass
from heapq import heapify, heappop, heappush
from typing import TypeAlias

from calcgen.language.blocks.inputs import Feed, InputsBlock
from calcgen.language.calc import Calc
from calcgen.text import Diagnostic, Span, error

Feeds: TypeAlias = Mapping[str, Sequence[str]]
"""By the number of a calc, those of the calcs that feed it, sorted."""


@dataclass(frozen=True)
class Order:
    """Calcs in order of evaluation.

    `faulty` are those that have no place in it, each with the faults found and why it is not evaluated.
    """

    calcs: tuple[Calc, ...]
    faulty: tuple[tuple[Calc, tuple[Diagnostic, ...], str], ...]


def feeds_of(calc: Calc) -> tuple[Feed, ...]:
    """Return what a calc takes from others, in the order typed."""
    return tuple(
        item.value
        for block in calc.segments
        if isinstance(block, InputsBlock)
        for item in block.items
        if isinstance(item.value, Feed)
    )


def in_order(calcs: Sequence[Calc]) -> Order:
    """Sort calcs so that each comes after its feeds, by number where that is free."""
    by_number = {c.number: c for c in sorted(calcs, key=lambda c: c.number)}
    feeds = {n: sorted({f.calc for f in feeds_of(c) if f.calc in by_number}) for n, c in by_number.items()}
    loops = _loops(feeds)
    twins = _twins(by_number)
    faulty = []
    for number in sorted(loops.keys() | twins.keys()):
        calc = by_number[number]
        if number in twins:
            faulty.append((calc, (_twin(calc, twins[number]),), "another calc has the same number"))
        else:
            itself = len(loops[number]) == 2
            reason = "it feeds itself" if itself else "it is part of a loop of calcs that feed each other"
            faulty.append((calc, (_cycle(calc, loops[number]),), reason))
    return Order(tuple(by_number[n] for n in _sorted(feeds, loops.keys() | twins.keys())), tuple(faulty))


def _sorted(feeds: Feeds, left_out: Iterable[str]) -> Iterator[str]:
    """Yield the calcs that are not left out, each after its feeds; of several the first by number."""
    out = frozenset(left_out)
    waits = {n: sum(f not in out for f in own) for n, own in feeds.items() if n not in out}
    takers: dict[str, list[str]] = {}
    for number in waits:
        for feed in feeds[number]:
            takers.setdefault(feed, []).append(number)
    ready = [n for n, count in waits.items() if count == 0]
    heapify(ready)
    while ready:
        number = heappop(ready)
        yield number
        for taker in takers.get(number, ()):
            waits[taker] -= 1
            if waits[taker] == 0:
                heappush(ready, taker)


def _loops(feeds: Feeds) -> dict[str, tuple[str, ...]]:
    """Return for each calc on a loop one loop that it is on, from itself back to itself.

    All calcs of a loop that is found tell the same one, each from its own place.
    """
    found: dict[str, tuple[str, ...]] = {}
    for group in _knots(feeds):
        for number in sorted(group):
            if number not in found:
                loop = _shortest(number, feeds, group)
                for place, member in enumerate(loop):
                    found.setdefault(member, (*loop[place:], *loop[:place], member))
    return found


def _shortest(start: str, feeds: Feeds, among: frozenset[str]) -> tuple[str, ...]:
    """Return the calcs of the shortest loop through `start`, from there on."""
    taker: dict[str, str] = {}
    level = [start]
    while True:
        following: list[str] = []
        for number in level:
            for feed in feeds[number]:
                if feed == start:
                    way = [number]
                    while way[-1] != start:
                        way.append(taker[way[-1]])
                    return tuple(reversed(way))
                if feed in among and feed not in taker:
                    taker[feed] = number
                    following.append(feed)
        level = following


def _knots(feeds: Feeds) -> Iterator[frozenset[str]]:
    """Yield the largest groups of calcs in which each feeds each other, directly or not (Tarjan 1972).

    A calc alone is a group where it feeds itself.
    """
    index: dict[str, int] = {}
    low: dict[str, int] = {}
    path: list[str] = []
    on_path: set[str] = set()
    for root in feeds:
        if root in index:
            continue
        work = [(root, iter(feeds[root]))]
        while work:
            number, rest = work[-1]
            if number not in index:
                index[number] = low[number] = len(index)
                path.append(number)
                on_path.add(number)
            for feed in rest:
                if feed not in index:
                    work.append((feed, iter(feeds[feed])))
                    break
                if feed in on_path:
                    low[number] = min(low[number], index[feed])
            else:
                work.pop()
                if work:
                    low[work[-1][0]] = min(low[work[-1][0]], low[number])
                if low[number] == index[number]:
                    group = frozenset(_popped(path, number))
                    on_path -= group
                    if len(group) > 1 or number in feeds[number]:
                        yield group


def _popped(path: list[str], last: str) -> Iterator[str]:
    """Take calcs off the end of a path, up to and with `last`."""
    while True:
        number = path.pop()
        yield number
        if number == last:
            return


def _twins(numbers: Iterable[str]) -> dict[str, str]:
    """Return the calcs whose numbers differ from another's in capitals alone, each with that one."""
    alike: dict[str, list[str]] = {}
    for number in numbers:
        alike.setdefault(number.casefold(), []).append(number)
    return {n: next(m for m in group if m != n) for group in alike.values() if len(group) > 1 for n in group}


def _twin(calc: Calc, other: str) -> Diagnostic:
    return error(
        "bad-calc-number",
        calc.source,
        Span(0, 0),
        f"the number '{calc.number}' differs from '{other}' in capitals alone",
        hint="rename one of the two files: many systems take them for one",
    )


def _cycle(calc: Calc, loop: Sequence[str]) -> Diagnostic:
    feed = next(f for f in feeds_of(calc) if f.calc == loop[1])
    if len(loop) == 2:
        return error(
            "cycle",
            calc.source,
            feed.calc_span,
            f"a calc cannot feed itself: {' ← '.join(loop)}",
            hint="what this calc defines is used by its name alone, below the line that defines it",
        )
    return error(
        "cycle",
        calc.source,
        feed.calc_span,
        f"calcs feed each other in a loop: {' ← '.join(loop)}",
        hint="one of them must take its value as an input of its own",
    )
