"""How the loads of an extreme are arranged, in words."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Literal

from calcgen.evaluation.blocks.beam_lines import length_text
from calcgen.mechanics.actions import Effect, Pattern, Placed
from calcgen.mechanics.envelope import Effects
from calcgen.quantities.display import Style
from calcgen.quantities.symbols import plain


def arrangement(
    effect: Effect, effects: Effects, spans: Sequence[tuple[float, float]], style: Style
) -> tuple[str, ...]:
    """Return on which lengths each case in patterns acts, and where each train stands.

    A length is named by its number among the `spans` written, else by its ends.
    """
    patterns = (pattern_text(p, effects, spans, style) for p in effect.patterns)
    trains = (_train(t, effects, style) for t in effect.trains)
    return (*patterns, *trains)


def pattern_text(
    pattern: Pattern, effects: Effects, spans: Sequence[tuple[float, float]], style: Style
) -> str:
    """Return the lengths on which a case acts: 'Q on spans 1 and 3', or 'without Q'."""
    case = plain(pattern.case)
    if not pattern.lengths:
        return f"without {case}"
    numbers: list[str] = []
    others: list[str] = []
    for index in pattern.lengths:
        start, end = effects.lengths[index]
        number = _number(start, end, effects, spans)
        if number is None:
            others.append(f"from {_place(start, style)} to {_place(end, style)}")
        else:
            numbers.append(str(number))
    named = [f"span{'s' if len(numbers) > 1 else ''} {_and(numbers)}"] if numbers else []
    return f"{case} on {_and([*named, *others])}" if named else f"{case} {_and(others)}"


def _number(start: float, end: float, effects: Effects, spans: Sequence[tuple[float, float]]) -> int | None:
    same = effects.model.same
    return next((i for i, (a, b) in enumerate(spans, start=1) if same(a, start) and same(b, end)), None)


def _train(placed: Placed, effects: Effects, style: Style) -> str:
    trains = effects.actions.trains[placed.case]
    train, position = trains[placed.train], placed.position
    name = plain(placed.case) if len(trains) == 1 else f"train {placed.train + 1} of {plain(placed.case)}"
    beside = f"just {position.beside} of" if position.beside is not None else "at"
    where = f"{beside} {_place(position.x, style)}"
    if len(train.axles) == 1:
        return f"{name} {where}"
    return f"{name} with its first axle {where}, running {position.direction}"


def _place(x: float, style: Style) -> str:
    unit: Literal["ft", "m"] = "ft" if style.system == "US" else "m"
    return length_text(x, style, unit)


def _and(words: Sequence[str]) -> str:
    *first, last = words
    return f"{', '.join(first)} and {last}" if first else last
