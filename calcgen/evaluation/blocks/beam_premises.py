"""The premises of beam theory, tested where a beam block says enough."""

from __future__ import annotations

from collections.abc import Callable, Sequence

from calcgen.evaluation.blocks.beam_lines import length_text
from calcgen.evaluation.blocks.beam_model import BeamData
from calcgen.evaluation.blocks.beam_shear import SLENDER, slenderness
from calcgen.evaluation.results.beam import GroupResult
from calcgen.evaluation.results.common import Premise, Verdict
from calcgen.mechanics.beam import Quantity
from calcgen.quantities.display import Style, number_text

NEGLIGIBLE = 0.05  # part of the deflection up to which that from shear is left out (common practice)
SMALL = 1 / 50  # deflection to span up to which the undeformed shape serves (common practice)


def premises(
    name: str, data: BeamData, groups: Sequence[GroupResult], other_w: float | None, style: Style
) -> tuple[Premise, ...]:
    """Return the premises of beam theory, tested where the block says enough.

    `other_w` is the largest deflection by the other choice about shear deformation, None where it is not
    known.
    """
    found: list[Premise] = []

    def add(premise: str, verdict: Verdict, detail: str) -> None:
        found.append(Premise(name, premise, verdict, detail))

    w = _largest(groups, "w")
    _shear(data, w, other_w, add)
    _small(data, groups, style, add)
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


def _largest(groups: Sequence[GroupResult], quantity: Quantity) -> float:
    return max((abs(g.states.extremes(quantity).abs.value) for g in groups), default=0.0)


def _small(
    data: BeamData, groups: Sequence[GroupResult], style: Style, add: Callable[[str, Verdict, str], None]
) -> None:
    """Add the premise that deflections are small, down and sideways, each to the spans of its plane."""
    premise = "small deflections"
    if not groups:
        add(premise, "left to judgement", "no load is written; influence lines hold for small deflections")
        return
    shares: list[tuple[float, str]] = []
    for plane in data.model.planes:
        w = _largest(groups, "w" if plane == "vertical" else "w_lat")
        longest = max((b - a for a, b in data.model.spans_in(plane)), default=data.model.length)
        shown = length_text(w, style, "in" if style.system == "US" else "mm")
        shares.append((w / longest, f"{shown} sideways" if plane == "lateral" else shown))
    share, shown = max(shares)
    if share <= SMALL:
        add(premise, "met", f"the largest, {shown}, is at most 1/{1 / SMALL:.0f} of the span")
    else:
        add(
            premise,
            "not met",
            f"the largest, {shown}, is more than 1/{1 / SMALL:.0f} of the span: "
            "equilibrium on the undeformed shape no longer holds",
        )


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


def _shear(data: BeamData, w: float, other_w: float | None, add: Callable[[str, Verdict, str], None]) -> None:
    """Add the premise on shear: by the ratio of span to depth, and by comparison where that is known."""
    ratio = slenderness(data.model, data.sections)
    deep = ratio is not None and ratio < SLENDER
    says = []
    if ratio is not None:
        text = f"{'below' if deep else 'at least'} {SLENDER:g}"
        says.append(f"span to depth {number_text(ratio, 3)}, {text}")
    if data.shear.included:
        reason = {"deep": "included without being asked for", "GA_s": "included, as GA_s is given"}
        says.append(f"shear deformation is {reason.get(data.shear.asked, 'included')}")
        if other_w is not None:
            says.append(f"the largest deflection without it would be {_change(other_w, w)}")
        if not data.shear.sideways and "lateral" in data.model.planes:
            says.append("not so sideways, where the shear stiffness is not known")
        elif data.model.coupled:
            says.append("each plane by itself: how shear couples the planes of a skew section is left out")
        add("plane sections, shear deformation included", "met", "; ".join(says))
        return
    share = None
    if other_w is not None:
        share = abs(other_w - w) / w if w > 0.0 else 0.0
        says.append(f"with shear the largest deflection would be {_change(other_w, w)}")
    if data.shear.asked == "no":
        says.append("left out, as written")
    elif deep and data.shear.lack:
        says.append(f"deflections are larger than shown, and {data.shear.lack}")
    verdict: Verdict = "met"
    if ratio is None and share is None:
        verdict, says = "left to judgement", ["EI is given without a section"]
    elif deep or (share is not None and share > NEGLIGIBLE):
        verdict = "not met"
    add("plane sections, shear deflection negligible", verdict, "; ".join(says))


def _change(value: float, against: float) -> str:
    """Return how much larger or smaller a value is, in words."""
    if against == 0.0:
        return "as large" if value == 0.0 else "larger"
    percent = 100.0 * (value / against - 1.0)
    word = "larger" if percent >= 0.0 else "smaller"
    return f"{number_text(abs(percent), 2)}\u00a0% {word}"
