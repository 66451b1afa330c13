"""One result of a beam asked for by its name, over the combinations that it hangs on."""

from __future__ import annotations

import re
from collections.abc import Callable
from dataclasses import dataclass

from calcgen.evaluation.blocks.beam_lines import CROSSING, EXTREME, REACTION, SHAPE, STATE, length_text
from calcgen.evaluation.blocks.beam_spans import chord_range, least_shape
from calcgen.evaluation.blocks.beam_states import States, Varying, names_of, single
from calcgen.evaluation.results.beam import BeamResult
from calcgen.evaluation.results.common import Plain
from calcgen.mechanics.beam import BeamModel, CaseSolution, Plane, Quantity, relative_to_chord
from calcgen.mechanics.combinations import ReactionPart
from calcgen.quantities.display import Style
from calcgen.quantities.measure import Measure, from_si
from calcgen.quantities.symbols import plain
from calcgen.text import Report, Span, nearest

_UNITS = {"M": "N·m", "V": "N", "w": "m", "slope": "1", "R": "N", "M_R": "N·m"}
_KNOWN = (
    "M_max",
    "M_min",
    "M_abs",
    "V_max",
    "V_min",
    "V_abs",
    "w_max",
    "w_min",
    "w_rel_max",
    "slope_max",
    "x_M_max",
    "x_M_0",
    "x_V_0",
    "R_1",
    "M_R_1",
    "θ_1",
    "C_b",
    "C_1",
)


@dataclass(frozen=True)
class Reading:
    """One result asked for by name."""

    beam: BeamResult
    states: States
    style: Style
    report: Report
    span: Span

    def read(
        self, word: str, stretch: tuple[float, float] | None, arguments: tuple[Plain, ...] | None
    ) -> Measure | None:
        """Return the result of that name, in `stretch` where one is named; report what is not there."""
        if shape := SHAPE.match(word):
            return self._shape(shape[1], stretch, arguments)
        place = self._place(arguments)
        if arguments is not None and place is None:
            return None
        extreme, reaction, state = EXTREME.match(word), REACTION.match(word), STATE.match(word)
        if (word.endswith("_lat")) and "lateral" not in self.beam.model.planes:
            return self._fault(
                "the stiffness about the vertical axis is not known, so there are no lateral results",
                "give section and E instead of EI",
            )
        if extreme and place is None:
            return self._extreme(extreme, stretch)
        if extreme and extreme[2] == "w_rel" and place is not None:
            return self._fault(
                f"'{word}' is a result of a span, not of a place",
                f"write {word}, or w_rel{extreme[4] or ''}(…) for one place",
            )
        if extreme and place is not None and not extreme[1]:
            there = self.states.at(_quantity(extreme[2], extreme[4]), place)
            value = getattr(there, extreme[3]).value
            return self._measure(extreme[2], abs(value) if extreme[3] == "abs" else value)
        if state and state[1] == "w_rel" and place is not None:
            return self._from_chord(word, "lateral" if state[2] else "vertical", place)
        if state and place is not None:
            solution = self._one_state(word, f"{word}_max(…)")
            if solution is None:
                return None
            return self._measure(state[1], solution.at(_quantity(state[1], state[2]), place))
        if state and place is None:
            return self._fault(
                f"'{word}' is a result at a place", f"write {word}(2.5 m), or {word}_max for the largest"
            )
        if reaction and stretch is not None:
            return self._fault(
                "a support belongs to the beam, not to a span", f"write {word} without the span"
            )
        if reaction and place is None:
            return self._turning(reaction) if reaction[1] == "θ" else self._reaction(reaction)
        if (crossing := CROSSING.match(word)) and place is None:
            return self._crossing(crossing, stretch)
        close = nearest(word, (*_KNOWN, *(line.name for line in self.beam.influences)))
        return self._fault(
            f"a beam has no result '{plain(word)}'",
            f"the nearest is '{close}'" if close else ", ".join(_KNOWN),
        )

    @property
    def _unit(self) -> str:
        return "ft" if self.style.system == "US" else "m"

    def _fault(self, message: str, hint: str) -> Measure | None:
        self.report.error("no-such-result", self.span, message, hint=hint)
        return None

    def _place(self, arguments: tuple[Plain, ...] | None) -> float | None:
        if arguments is None:
            return None
        return place_of(self.beam.model, arguments, self.style, self._fault)

    def _one_state(self, word: str, instead: str) -> CaseSolution | None:
        solution = single(self.states)
        if solution is None and isinstance(self.states, Varying):
            self._fault(
                f"'{word}' has several states here: patterns and trains make many of one combination",
                f"write {instead}",
            )
        elif solution is None:
            self._fault(
                f"'{word}' has several states here: {', '.join(names_of(self.states))}",
                f"name one combination, or write {instead}",
            )
        return solution

    def _extreme(self, match: re.Match[str], stretch: tuple[float, float] | None) -> Measure | None:
        start, end = stretch if stretch is not None else (None, None)
        if match[2] == "w_rel":
            plane: Plane = "lateral" if match[4] else "vertical"
            chords = chord_range(self.states, plane, start, end)
            if chords is None and isinstance(self.states, Varying):
                return self._fault(
                    "supports give way, or none hold the deflection here: with patterns or trains there is "
                    "no one chord",
                    "w_max is counted from the undeflected axis",
                )
            if chords is None:
                return self._fault(
                    "no two supports hold the deflection here, so it has no chord to be counted from",
                    "w_max is counted from the undeflected axis",
                )
            found = chords
        else:
            found = self.states.extremes(_quantity(match[2], match[4]), start, end)
        governing = getattr(found, match[3])
        if match[1]:
            return self._measure("x", governing.x)
        return self._measure(match[2], abs(governing.value) if match[3] == "abs" else governing.value)

    def _from_chord(self, word: str, plane: Plane, place: float) -> Measure | None:
        """Return the deflection at a place from the chord of its span; beyond the supports there is none."""
        solution = self._one_state(word, f"{word}_max")
        if solution is None:
            return None
        model, least = self.beam.model, self.beam.model.tolerance
        span = next(((a, b) for a, b in model.spans_in(plane) if a - least <= place <= b + least), None)
        if span is None:
            return self._fault(
                "the place lies in no span between two supports that hold the deflection",
                "w is counted from the undeflected axis",
            )
        quantity: Quantity = "w" if plane == "vertical" else "w_lat"
        return self._measure("w", relative_to_chord(solution, *span, plane).at(quantity, place))

    def _reaction(self, match: re.Match[str]) -> Measure | None:
        number, which = int(match[2]), match[3]
        if not self._is_support(number):
            return None
        part: ReactionPart
        if match[1] == "R":
            part = "force_lat" if match[4] else "force"
        else:
            part = "moment_lat" if match[4] else "moment"
        if which is None and self._one_state(match[0], f"{match[0]}_max") is None:
            return None
        found = self.states.reaction(number - 1, part)
        return self._measure(match[1], getattr(found, which or "max").value)

    def _turning(self, match: re.Match[str]) -> Measure | None:
        """Return the rotation of the section at a support; at a hinge the one of larger magnitude."""
        number, which = int(match[2]), match[3]
        if not self._is_support(number):
            return None
        if which is None and self._one_state(match[0], f"{match[0]}_max") is None:
            return None
        x = self.beam.model.supports[number - 1].x
        found = self.states.at(_quantity("rotation", match[4]), x)
        governing = found.abs if which is None else getattr(found, which)
        return self._measure("slope", governing.value)

    def _is_support(self, number: int) -> bool:
        count = len(self.beam.model.supports)
        if number <= count:
            return True
        self._fault(f"the beam has {count} supports", "supports are numbered from the left, from 1")
        return False

    def _crossing(self, match: re.Match[str], stretch: tuple[float, float] | None) -> Measure | None:
        """Return the place of the contraflexure point, or of zero shear, by its number from the left."""
        symbol, number = match[1], match[2]
        stem = f"x_{symbol}_0"
        solution = self._one_state(match[0], f"{symbol}_max(…) for a place")
        if solution is None:
            return None
        places = solution.crossings(_quantity(symbol, match[3]), *(stretch or (None, None)))
        texts = ", ".join(length_text(x, self.style, self._unit) for x in places)
        if not places:
            return self._fault(f"{symbol} does not change sign here", f"see {symbol}_max and {symbol}_min")
        found = f"{symbol} changes sign at {len(places)} places: {texts}"
        if len(places) == 1:
            found = f"{symbol} changes sign at one place: {texts}"
        if number is None and len(places) > 1:
            return self._fault(found, f"write {stem}_1 for the first from the left, or name a span")
        if int(number or 1) > len(places):
            return self._fault(found, f"write {stem}_1 for the first from the left")
        return self._measure("x", places[int(number or 1) - 1])

    def _shape(
        self, factor: str, stretch: tuple[float, float] | None, arguments: tuple[Plain, ...] | None
    ) -> Measure | None:
        """Return the moment shape factor of a span, or of the stretch between two places."""
        if isinstance(self.states, Varying):
            return self._fault(
                f"{factor} belongs to one state, and patterns and trains make many",
                f"write a combination without them for {factor}",
            )
        if arguments is not None and len(arguments) == 2 and stretch is None:
            start, end = (self._place((each,)) for each in arguments)
            if start is None or end is None:
                return None
            stretch = (min(start, end), max(start, end))
            if stretch[1] - stretch[0] <= self.beam.model.tolerance:
                return self._fault("the stretch has no length", f"such as {factor}(0 m, 2.5 m)")
        elif arguments is not None:
            return self._fault(
                f"{factor} belongs to the stretch between two restraints", f"such as {factor}(0 m, 2.5 m)"
            )
        if stretch is None and len(self.beam.spans) == 1:
            stretch = self.beam.spans[0]
        if stretch is None:
            return self._fault(
                f"{factor} belongs to the stretch between two restraints",
                f"write span_1.{factor}, or {factor}(0 m, 2.5 m)",
            )
        return from_si(least_shape(self.states.solutions, *stretch)[factor], "")

    def _measure(self, quantity: str, value: float) -> Measure:
        return beam_measure(quantity, value, self.style)


def place_of(
    model: BeamModel, arguments: tuple[Plain, ...], style: Style, fault: Callable[[str, str], object]
) -> float | None:
    """Return the one place on the beam that is asked for, m; call `fault` where it is none."""
    length = from_si(1.0, "m").dimension
    if len(arguments) != 1 or not isinstance(arguments[0], Measure) or arguments[0].dimension != length:
        fault("a place on the beam is a length from its start", "such as M(2.5 m)")
        return None
    x = arguments[0].si
    if not -1e-9 <= x / model.length <= 1 + 1e-9:
        end = length_text(model.length, style, "ft" if style.system == "US" else "m")
        fault("the place lies outside the beam", f"the beam runs from 0 to {end}")
        return None
    return min(max(x, 0.0), model.length)


def beam_measure(quantity: str, value: float, style: Style) -> Measure:
    """Return a result of a beam in the unit it is shown in: M, V, w, w_rel, slope, x, R or M_R."""
    us = style.system == "US"
    if quantity == "x":
        return from_si(value, "m").shown_in("ft" if us else "m")
    if quantity in ("w", "w_rel"):
        return from_si(value, "m").shown_in("in" if us else "mm")
    if quantity == "slope":
        return from_si(value, "")
    return from_si(value, _UNITS[quantity]).shown_in(
        style.default_unit(from_si(1.0, _UNITS[quantity]).dimension)
    )


def _quantity(word: str, lateral: str | None) -> Quantity:
    return f"{word}{lateral or ''}"  # type: ignore[return-value]
