"""What a beam's page shows: results by group, premises, and permanent loads that relieve."""

from __future__ import annotations

from collections.abc import Callable, Mapping, Sequence
from typing import Literal

from calcgen.evaluation.blocks.beam_lines import length_text
from calcgen.evaluation.blocks.beam_model import BeamData
from calcgen.evaluation.results import CombinationResult, GroupResult, Premise, Result, Verdict
from calcgen.mechanics.beam import BeamModel, CaseSolution, Quantity
from calcgen.mechanics.combinations import Envelope, Governing
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


def group_results(
    members: Sequence[CombinationResult], model: BeamModel, style: Style, measured: Measured
) -> tuple[Result, ...]:
    """Return the extremes and reactions of a group of combinations, each with its place and combination."""
    envelope = Envelope({c.name: c.solution for c in members})
    several = len(members) > 1
    results: list[Result] = []

    def add(name: str, kind: str, governing: Governing, meaning: str, where: str = "") -> None:
        value = measured(kind, governing.value, style)
        by = (
            f"{where}, {governing.combination}"
            if several and where
            else governing.combination
            if several
            else where
        )
        results.append(Result(name, meaning, value, show(value, style), by))

    active = _lateral(members)
    for suffix, senses in (("", _SENSE), ("_lat", _SENSE_LAT)) if active else (("", _SENSE),):
        for quantity, (word, sense) in senses.items():
            found = envelope.extremes(f"{quantity}{suffix}")  # type: ignore[arg-type]
            for which, governing in (("max", found.max), ("min", found.min)):
                name = f"{quantity}_{which}{suffix}"
                adjective = "largest" if which == "max" else "smallest"
                place = measured("x", governing.x, style)
                where = "" if governing.value == 0 else f"at {show(place, style).text}"
                add(name, quantity, governing, f"{adjective} {word}, {sense}", where)
                if quantity == "M" and not suffix:
                    results.append(
                        Result(f"x_M_{which}", f"place of the {adjective} moment", place, show(place, style))
                    )
    for number, support in enumerate(model.supports, start=1):
        for suffix in ("", "_lat") if active else ("",):
            force = support.lateral if suffix else support.w
            rotation = support.lateral_rotation if suffix else support.rotation
            sense = "to the left" if suffix else "up"
            if force:
                found = envelope.reaction(number - 1, "force_lat" if suffix else "force")
                meaning = f"reaction of support {number}, positive {sense}"
                if several:
                    add(f"R_{number}_max{suffix}", "R", found.max, f"largest {meaning}")
                    add(f"R_{number}_min{suffix}", "R", found.min, f"smallest {meaning}")
                else:
                    add(f"R_{number}{suffix}", "R", found.max, meaning)
            if rotation:
                found = envelope.reaction(number - 1, "moment_lat" if suffix else "moment")
                meaning = f"moment of support {number}, positive anticlockwise"
                if several:
                    add(f"M_R_{number}_max{suffix}", "M_R", found.max, f"largest {meaning}")
                    add(f"M_R_{number}_min{suffix}", "M_R", found.min, f"smallest {meaning}")
                else:
                    add(f"M_R_{number}{suffix}", "M_R", found.max, meaning)
    return tuple(results)


def _lateral(members: Sequence[CombinationResult]) -> bool:
    """Whether anything happens in the lateral plane."""
    if "lateral" not in members[0].solution.model.planes:
        return False
    return any(c.solution.extremes(q).abs > 0 for c in members for q in _SIDEWAYS)


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
        depth = max(s.result.outline.bounds.height for s in data.sections)
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
