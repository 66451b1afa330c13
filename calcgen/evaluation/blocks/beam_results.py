"""What a beam's page shows: results by group, premises, and permanent loads that relieve."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Mapping, Sequence
from dataclasses import dataclass, replace
from typing import Literal

from calcgen.evaluation.blocks.beam_lines import length_text
from calcgen.evaluation.blocks.beam_model import BeamData
from calcgen.evaluation.results import GroupResult, Premise, Result, Verdict
from calcgen.mechanics.beam import BeamModel, CaseSolution, Quantity
from calcgen.mechanics.combinations import Envelope, Governing, ReactionPart
from calcgen.quantities.display import Style, number_text, show
from calcgen.quantities.measure import Measure

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
SLENDER = 10.0  # span to depth from which shear deflection is commonly left out (common practice)
SMALL = 1 / 50  # deflection to span up to which the undeformed shape serves (common practice)


@dataclass(frozen=True)
class _Rows:
    """Makes the results of one group, or of one combination alone."""

    envelope: Envelope
    several: bool
    style: Style
    measured: Measured

    def row(
        self, name: str, kind: str, governing: Governing, meaning: str, *, placed: bool = False
    ) -> Result:
        """Return a result with its place and, where there are several, its combination."""
        value = self.measured(kind, governing.value, self.style)
        says = []
        if placed and governing.value != 0:
            says.append(f"at {show(self.measured('x', governing.x, self.style), self.style).text}")
        if self.several:
            says.append(governing.combination)
        return Result(name, meaning, value, show(value, self.style), ", ".join(says))

    def extremes(self, symbol: str, suffix: str) -> Iterator[Result]:
        """Give the largest and the smallest of M, V or w, and the places of those of M."""
        word, sense = (_SENSE_LAT if suffix else _SENSE)[symbol]
        found = self.envelope.extremes(f"{symbol}{suffix}")  # type: ignore[arg-type]
        for which, adjective, governing in (("max", "largest", found.max), ("min", "smallest", found.min)):
            name = f"{symbol}_{which}{suffix}"
            yield self.row(name, symbol, governing, f"{adjective} {word}, {sense}", placed=True)
            if symbol == "M":
                place = self.measured("x", governing.x, self.style)
                yield Result(f"x_{name}", f"place of the {adjective} {word}", place, show(place, self.style))

    def magnitude(self, symbol: str, suffix: str) -> Result:
        """Give the largest magnitude of M, V or w."""
        word, _ = (_SENSE_LAT if suffix else _SENSE)[symbol]
        found = self.envelope.extremes(f"{symbol}{suffix}").abs  # type: ignore[arg-type]
        found = replace(found, value=abs(found.value))
        return self.row(f"{symbol}_abs{suffix}", symbol, found, f"largest magnitude of {word}", placed=True)

    def reaction(self, number: int, symbol: str, suffix: str, *, by_extremes: bool) -> Iterator[Result]:
        """Give the reaction force R or moment M_R of a support, as one value or as largest and smallest."""
        part: ReactionPart = _PARTS[symbol, suffix]
        found = self.envelope.reaction(number - 1, part)
        meaning = f"{_REACTIONS[part]} of support {number}"
        stem = f"{symbol}_{number}"
        if by_extremes:
            yield self.row(f"{stem}_max{suffix}", symbol, found.max, f"largest {meaning}")
            yield self.row(f"{stem}_min{suffix}", symbol, found.min, f"smallest {meaning}")
        else:
            yield self.row(f"{stem}{suffix}", symbol, found.max, meaning)


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
    solutions: Mapping[str, CaseSolution], model: BeamModel, style: Style, measured: Measured
) -> tuple[tuple[Result, ...], tuple[Result, ...]]:
    """Return the results of a group of combinations: those its table shows, and further names for them.

    Shown are extremes with place and combination, and reactions; the further ones are magnitudes, and
    reactions by the names that the table does not use.
    """
    rows = _Rows(Envelope(solutions), len(solutions) > 1, style, measured)
    shown: list[Result] = []
    further: list[Result] = []
    planes = ("", "_lat") if any(moves_sideways(s) for s in solutions.values()) else ("",)
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
    return tuple(shown), tuple(further)


def moves_sideways(solution: CaseSolution) -> bool:
    """Whether anything happens in the lateral plane."""
    return "lateral" in solution.model.planes and any(solution.extremes(q).abs > 0 for q in _SIDEWAYS)


def relieving_cases(
    group: GroupResult, solutions: Mapping[str, CaseSolution], kinds: Mapping[str, str]
) -> tuple[str, ...]:
    """Return the permanent cases that act against a governing moment or reaction, never taken at 1.0.

    A share below a hundredth of the governing value does not count.
    """
    envelope = Envelope({c.name: c.solution for c in group.combinations})
    found: list[str] = []
    for case in solutions:
        factors = [c.factors[case] for c in group.combinations if case in c.factors]
        if kinds.get(case) != "permanent" or not factors or any(abs(f - 1.0) < 1e-12 for f in factors):
            continue
        moments = envelope.extremes("M")
        shares = [(m.value, solutions[case].at("M", m.x)) for m in (moments.max, moments.min)]
        for index in range(len(solutions[case].model.supports)):
            reaction = envelope.reaction(index)
            own = solutions[case].reactions[index].force
            shares += [(reaction.max.value, own), (reaction.min.value, own)]
        if any(total * own < 0 and abs(own) > 0.01 * abs(total) for total, own in shares):
            found.append(case)
    return tuple(found)


def premises(name: str, data: BeamData, groups: Sequence[GroupResult], style: Style) -> tuple[Premise, ...]:
    """Return the premises of beam theory, tested where the block says enough."""
    found: list[Premise] = []

    def add(premise: str, verdict: Verdict, detail: str) -> None:
        found.append(Premise(name, premise, verdict, detail))

    lengths = [b - a for a, b in data.model.spans] or [data.model.length]
    unit: Literal["in", "mm"] = "in" if style.system == "US" else "mm"
    if data.sections:
        depth = max(s.result.bounds.height for s in data.sections)
        ratio = min(lengths) / depth
        text = f"span to depth {number_text(ratio, 3)}"
        if ratio >= SLENDER:
            add("plane sections, shear deflection negligible", "met", f"{text}, at least {SLENDER:g}")
        else:
            add(
                "plane sections, shear deflection negligible",
                "not met",
                f"{text}, below {SLENDER:g}: deflections are larger than shown; add the shear part by hand",
            )
    else:
        add(
            "plane sections, shear deflection negligible",
            "left to judgement",
            "EI is given without a section",
        )
    deflections = [c.solution.extremes("w").abs for g in groups for c in g.combinations]
    share = max(deflections) / max(lengths)
    shown = length_text(max(deflections), style, unit)
    if share <= SMALL:
        add("small deflections", "met", f"the largest, {shown}, is at most 1/{1 / SMALL:.0f} of the span")
    else:
        add(
            "small deflections",
            "not met",
            f"the largest, {shown}, is more than 1/{1 / SMALL:.0f} of the span: "
            "equilibrium on the undeformed shape no longer holds",
        )
    _bending_plane(data, add)
    if data.is_restrained and data.restrained is not None:
        reason = data.restrained.annotations.note.text
        add("restraint against lateral buckling", "met", reason or "restrained, as stated without a reason")
    else:
        add(
            "restraint against lateral buckling",
            "left to judgement",
            "not stated: lateral-torsional buckling is not checked by the beam",
        )
    add("linear elastic", "left to judgement", "compare the largest stress with the yield strength")
    return tuple(found)


def _bending_plane(data: BeamData, add: Callable[[str, Verdict, str], None]) -> None:
    skew = any(s.result.computed.I_hv != 0.0 for s in data.sections)
    if not skew:
        add("bending about principal axes", "met", "the horizontal and vertical axes are principal axes")
    elif data.is_restrained:
        add(
            "bending about principal axes",
            "met",
            "they are not principal axes; restrained, the beam is forced to bend about the horizontal axis",
        )
    else:
        add(
            "bending about principal axes",
            "met",
            "they are not principal axes: both planes are solved together, the beam deflects sideways too",
        )
