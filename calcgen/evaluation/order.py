"""The order in which calcs are evaluated: a calc after those that feed it; cycles are reported whole."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from calcgen.language.blocks.inputs import Feed, InputsBlock
from calcgen.language.calc import Calc
from calcgen.text import Diagnostic, error


@dataclass(frozen=True)
class Order:
    """Calcs in order of evaluation; those on a cycle are left out and have a diagnostic each."""

    calcs: tuple[Calc, ...]
    cyclic: tuple[Calc, ...]
    diagnostics: tuple[Diagnostic, ...]


def feeds_of(calc: Calc) -> tuple[Feed, ...]:
    """Return the values a calc takes from others, in the order typed."""
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
    waiting = dict(by_number)
    done: dict[str, Calc] = {}
    while ready := [n for n in waiting if all(f in done for f in feeds[n])]:
        for number in ready:
            done[number] = waiting.pop(number)
    diagnostics: list[Diagnostic] = []
    cyclic: list[Calc] = []
    for number in waiting:
        loop = _loop(number, feeds, set(waiting))
        if loop is None:
            continue
        cyclic.append(by_number[number])
        feed = next(f for f in feeds_of(by_number[number]) if f.calc == loop[1])
        diagnostics.append(
            error(
                "cycle",
                by_number[number].source,
                feed.calc_span,
                f"calcs feed each other in a loop: {' ← '.join(loop)}",
                hint="one of them must take its value as an input of its own",
            )
        )
    for number in [n for n in waiting if by_number[n] not in cyclic]:
        done[number] = by_number[number]
    return Order(tuple(done.values()), tuple(cyclic), tuple(diagnostics))


def _loop(start: str, feeds: dict[str, list[str]], among: set[str]) -> list[str] | None:
    """Return the shortest way from `start` back to itself, or None."""
    paths = [[start]]
    seen: set[str] = set()
    while paths:
        longer: list[list[str]] = []
        for path in paths:
            for feed in feeds[path[-1]]:
                if feed == start:
                    return [*path, start]
                if feed in among and feed not in seen:
                    seen.add(feed)
                    longer.append([*path, feed])
        paths = longer
    return None
