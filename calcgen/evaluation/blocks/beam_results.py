"""What a beam's page shows: results by group, and permanent loads that relieve."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Mapping, Sequence
from dataclasses import dataclass, replace

from calcgen.evaluation.blocks.beam_arrangement import arrangement
from calcgen.evaluation.blocks.beam_spans import chord_range, least_shape
from calcgen.evaluation.blocks.beam_states import Found, States, Varying, names_of, single
from calcgen.evaluation.results.beam import Along, GroupResult
from calcgen.evaluation.results.common import Result
from calcgen.mechanics.actions import Actions, Effect
from calcgen.mechanics.beam import BeamModel, CaseSolution, Quantity
from calcgen.mechanics.combinations import ReactionPart
from calcgen.quantities.display import Style, show
from calcgen.quantities.measure import Measure, from_si

Measured = Callable[[str, float, Style], Measure]

_SENSE = {
    "M": ("moment", "sagging positive, tension at the bottom"),
    "V": ("shear force", "positive where the left part is pushed up"),
    "w": ("deflection", "positive down"),
}
_SENSE_LAT = {
    "M": ("moment about the vertical axis", "positive with tension on the right"),
    "V": ("sideways shear force", "positive where the left part is pushed to the left"),
    "w": ("sideways deflection", "positive to the right"),
}
_SIDEWAYS: tuple[Quantity, ...] = ("w_lat", "M_lat")
SAME = 1e-9  # part of the largest deflection below which two are the same
LISTED_SPANS = 12  # up to so many spans are listed one by one; those of a longer beam are read by name


@dataclass(frozen=True)
class _Rows:
    """Makes the results of one group, or of one combination alone."""

    states: States
    spans: Sequence[tuple[float, float]]
    style: Style
    measured: Measured

    @property
    def several(self) -> bool:
        """Whether there are several states, so that a result is the largest or the smallest of them."""
        return single(self.states) is None

    def row(self, name: str, kind: str, governing: Found, meaning: str, *, placed: bool = False) -> Result:
        """Return a result with its place and, where there are several states, what causes it."""
        value = self.measured(kind, governing.value, self.style)
        says = []
        if placed and governing.value != 0:
            says.append(f"at {show(self.measured('x', governing.x, self.style), self.style).text}")
        if len(names_of(self.states)) > 1:
            says.append(governing.combination)
        if isinstance(governing, Effect) and isinstance(self.states, Varying):
            says += arrangement(governing, self.states.effects, self.spans, self.style)
        return Result(name, meaning, value, show(value, self.style), ", ".join(says))

    def extremes(self, symbol: str, suffix: str) -> Iterator[Result]:
        """Give the largest and the smallest of M, V or w, and the places of those of M."""
        word, sense = (_SENSE_LAT if suffix else _SENSE)[symbol]
        found = self.states.extremes(f"{symbol}{suffix}")  # type: ignore[arg-type]
        for which, adjective, governing in (("max", "largest", found.max), ("min", "smallest", found.min)):
            name = f"{symbol}_{which}{suffix}"
            yield self.row(name, symbol, governing, f"{adjective} {word}, {sense}", placed=True)
            if symbol == "M":
                place = self.measured("x", governing.x, self.style)
                yield Result(f"x_{name}", f"place of the {adjective} {word}", place, show(place, self.style))

    def magnitude(self, symbol: str, suffix: str) -> Result:
        """Give the largest magnitude of M, V or w."""
        word, _ = (_SENSE_LAT if suffix else _SENSE)[symbol]
        found = self.states.extremes(f"{symbol}{suffix}").abs  # type: ignore[arg-type]
        found = replace(found, value=abs(found.value))
        return self.row(f"{symbol}_abs{suffix}", symbol, found, f"largest magnitude of {word}", placed=True)

    def reaction(self, number: int, symbol: str, suffix: str, *, by_extremes: bool) -> Iterator[Result]:
        """Give the reaction force R or moment M_R of a support, as one value or as largest and smallest."""
        part: ReactionPart = _PARTS[symbol, suffix]
        found = self.states.reaction(number - 1, part)
        meaning = f"{_REACTIONS[part]} of support {number}"
        stem = f"{symbol}_{number}"
        if by_extremes:
            yield self.row(f"{stem}_max{suffix}", symbol, found.max, f"largest {meaning}")
            yield self.row(f"{stem}_min{suffix}", symbol, found.min, f"smallest {meaning}")
        else:
            yield self.row(f"{stem}{suffix}", symbol, found.max, meaning)

    def turning(self, model: BeamModel, suffix: str) -> Iterator[Result]:
        """Give the rotation of the section at each support, as one value or as largest and smallest."""
        for number, support in enumerate(model.supports, start=1):
            found = self.states.at(f"rotation{suffix}", support.x)  # type: ignore[arg-type]
            meaning = f"rotation at support {number} (positive clockwise{_FROM_ABOVE[suffix]})"
            if self.several:
                yield self.row(f"θ_{number}_max{suffix}", "slope", found.max, f"largest {meaning}")
                yield self.row(f"θ_{number}_min{suffix}", "slope", found.min, f"smallest {meaning}")
            else:
                yield self.row(f"θ_{number}{suffix}", "slope", found.abs, meaning)

    def from_chords(
        self, suffix: str, span: tuple[float, float] | None = None, stem: str = ""
    ) -> Iterator[Result]:
        """Give the largest and smallest deflection from the chord of its span, where w itself is another."""
        start, end = span if span is not None else (None, None)
        found = chord_range(self.states, "lateral" if suffix else "vertical", start, end)
        quantity: Quantity = f"w{suffix}"  # type: ignore[assignment]
        if found is None:
            return
        own = self.states.extremes(quantity, start, end)
        if max(abs(found.max.value - own.max.value), abs(found.min.value - own.min.value)) <= (
            SAME * abs(own.abs.value)
        ):
            return
        for which, adjective, governing in (("max", "largest", found.max), ("min", "smallest", found.min)):
            meaning = (
                f"{adjective} {_SENSE_LAT['w'][0] if suffix else 'deflection'} from the chord of its span"
            )
            yield self.row(f"{stem}w_rel_{which}{suffix}", "w", governing, meaning, placed=True)

    def crossings(self, suffix: str) -> Iterator[Result]:
        """Give the points of contraflexure and of zero shear, where there is one state."""
        solution = single(self.states)
        if solution is None:
            return
        for symbol, meaning in (("M", "point of contraflexure"), ("V", "point of zero shear")):
            places = solution.crossings(f"{symbol}{suffix}")  # type: ignore[arg-type]
            for number, x in enumerate(places, start=1):
                place = self.measured("x", x, self.style)
                name = f"x_{symbol}_0_{number}{suffix}"
                yield Result(name, f"{meaning} {number}", place, show(place, self.style))

    def shapes(self, number: int, span: tuple[float, float], model: BeamModel, stem: str) -> Iterator[Result]:
        """Give the moment shape factors of a span from support to support, the smallest over combinations."""
        supported = any(all(map(model.same, span, other)) for other in model.spans)
        if isinstance(self.states, Varying) or not supported:
            return
        least = "smallest " if self.several else ""
        for factor, value in least_shape(self.states.solutions, *span).items():
            meaning = f"{least}moment shape factor of span {number} between its supports, {_SHAPES[factor]}"
            measure = from_si(value, "")
            yield Result(f"{stem}{factor}", meaning, measure, show(measure, self.style))

    def of_span(self, number: int, span: tuple[float, float], suffix: str) -> Iterator[Result]:
        """Give the extremes of one span."""
        stem = f"span_{number}."
        for symbol, (word, _) in (_SENSE_LAT if suffix else _SENSE).items():
            found = self.states.extremes(f"{symbol}{suffix}", *span)  # type: ignore[arg-type]
            for which, adjective, governing in (
                ("max", "largest", found.max),
                ("min", "smallest", found.min),
            ):
                meaning = f"{adjective} {word} in span {number}"
                yield self.row(f"{stem}{symbol}_{which}{suffix}", symbol, governing, meaning, placed=True)
        yield from self.from_chords(suffix, span, stem)


_SHAPES = {"C_b": "AISC 360-16 equation F1-1", "C_1": "for ends free to warp and to turn sideways"}
_FROM_ABOVE = {"": "", "_lat": " seen from above"}
_PARTS: dict[tuple[str, str], ReactionPart] = {
    ("R", ""): "force",
    ("M_R", ""): "moment",
    ("R", "_lat"): "force_lat",
    ("M_R", "_lat"): "moment_lat",
}
_REACTIONS: dict[ReactionPart, str] = {
    "force": "reaction (positive up)",
    "moment": "restraining moment (positive anticlockwise)",
    "force_lat": "sideways reaction (positive to the left)",
    "moment_lat": "sideways restraining moment (positive anticlockwise seen from above)",
}


def group_results(
    states: States,
    model: BeamModel,
    spans: Sequence[tuple[float, float]],
    style: Style,
    measured: Measured,
) -> tuple[tuple[Result, ...], tuple[Result, ...]]:
    """Return the results of a group of combinations: those its table shows, and further names for them.

    Shown are extremes with place, combination and arrangement of loads, and reactions; the further ones are
    magnitudes, reactions by the names that the table does not use, rotations at supports, deflections from
    the chords, the places where M and V change sign, and the extremes and shape factors of each of `spans`.
    """
    rows = _Rows(states, spans, style, measured)
    shown: list[Result] = []
    further: list[Result] = []
    planes = ("", "_lat") if moves_sideways(states, model) else ("",)
    for suffix in planes:
        for symbol in _SENSE:
            shown += rows.extremes(symbol, suffix)
            further.append(rows.magnitude(symbol, suffix))
    for number, support in enumerate(model.supports, start=1):
        for suffix in planes:
            held, turned = (
                (support.lateral, support.lateral_rotation) if suffix else (support.w, support.rotation)
            )
            for symbol, restraint in (("R", held), ("M_R", turned)):
                if restraint:
                    shown += rows.reaction(number, symbol, suffix, by_extremes=rows.several)
                    if not rows.several:
                        further += rows.reaction(number, symbol, suffix, by_extremes=True)
    for suffix in planes:
        further += rows.turning(model, suffix)
        further += rows.from_chords(suffix)
        further += rows.crossings(suffix)
        if 1 < len(spans) <= LISTED_SPANS:
            for number, span in enumerate(spans, start=1):
                further += rows.of_span(number, span, suffix)
    for number, span in enumerate(spans[:LISTED_SPANS], start=1):
        further += rows.shapes(number, span, model, f"span_{number}." if len(spans) > 1 else "")
    return tuple(shown), tuple(further)


def places_of_results(model: BeamModel, spans: Sequence[tuple[float, float]]) -> tuple[float, ...]:
    """Return the places between which `group_results` asks for extremes, m."""
    if not 1 < len(spans) <= LISTED_SPANS:
        return ()
    held = (*model.spans_in("vertical"), *model.spans_in("lateral"))
    return tuple(x for ends in (*spans, *held) for x in ends)


TENTHS = 10  # parts of a span between which moments are listed along the beam


def moments_along(
    states: States, spans: Sequence[tuple[float, float]], style: Style, measured: Measured
) -> tuple[Along, ...]:
    """Return the extreme moments at tenths of the spans, where a train crosses the beam and spans are few."""
    if not isinstance(states, Varying) or len(spans) > LISTED_SPANS:
        return ()
    trains = states.effects.actions.trains
    if not any(c.factors.get(case, 0.0) != 0.0 for c in states.effects.combinations for case in trains):
        return ()
    rows = _Rows(states, spans, style, measured)
    places = dict.fromkeys(a + (b - a) * i / TENTHS for a, b in spans for i in range(TENTHS + 1))
    found: list[Along] = []
    for x in places:
        there = states.at("M", x)
        at = show(measured("x", x, style), style).text
        high, low = (rows.row(f"M_{which}", "M", getattr(there, which), "") for which in ("max", "min"))
        found.append(Along(at, high, low))
    return tuple(found)


def moves_sideways(states: States | CaseSolution, model: BeamModel) -> bool:
    """Whether anything happens in the lateral plane."""
    if "lateral" not in model.planes:
        return False
    if isinstance(states, CaseSolution):
        return any(states.extremes(q).abs > 0 for q in _SIDEWAYS)
    if isinstance(states, Varying):
        if not model.coupled and not _act_sideways(states.effects.actions):
            return False
        return any(abs(states.extremes(q).abs.value) > 0 for q in _SIDEWAYS)
    return any(moves_sideways(solution, model) for solution in states.solutions.values())


def _act_sideways(actions: Actions) -> bool:
    loads = (load for case in actions.cases.values() for load in case)
    trains = (train for crossing in actions.trains.values() for train in crossing)
    return any(load.plane == "lateral" for load in loads) or any(train.lateral != 0.0 for train in trains)


def relieving_cases(
    group: GroupResult, solutions: Mapping[str, CaseSolution], kinds: Mapping[str, str]
) -> dict[tuple[str, str], list[str]]:
    """Return the permanent cases that act against a governing moment or reaction and stand above 1.0 there.

    Each with the combination that governs, and the names of the results. A share below a hundredth of the
    governing value does not count.
    """
    factors = {c.name: c.factors for c in group.combinations}
    found: dict[tuple[str, str], list[str]] = {}
    for case in solutions:
        if kinds.get(case) != "permanent":
            continue
        moments = group.states.extremes("M")
        shares: list[tuple[str, int, Found, float]] = [
            (name, sense, m, solutions[case].at("M", m.x))
            for name, sense, m in (("M_max", 1, moments.max), ("M_min", -1, moments.min))
        ]
        for index in range(len(solutions[case].model.supports)):
            reaction = group.states.reaction(index)
            own = solutions[case].reactions[index].force
            name = f"R_{index + 1}"
            shares += [(f"{name}_max", 1, reaction.max, own), (f"{name}_min", -1, reaction.min, own)]
        for name, sense, governing, own in shares:
            factor = factors[governing.combination].get(case, 0.0)
            against = sense * governing.value > 0.0 > sense * own
            if against and factor > 1.0 + 1e-12 and abs(own) > 0.01 * abs(governing.value):
                found.setdefault((case, governing.combination), []).append(name)
    return found
