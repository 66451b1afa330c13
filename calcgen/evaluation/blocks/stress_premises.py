"""The premises of each model of stress, tested where the block says enough."""

from __future__ import annotations

from collections.abc import Iterable

from calcgen.evaluation.blocks.stress_request import StressRequest
from calcgen.evaluation.blocks.stress_results import compressed_depth, strain_extremes
from calcgen.evaluation.formulas import shown
from calcgen.evaluation.results.common import Premise, Verdict
from calcgen.evaluation.results.section import SectionResult
from calcgen.evaluation.results.stress import ShearResult
from calcgen.evaluation.scope import Scope
from calcgen.mechanics.curved import CurvedStress
from calcgen.mechanics.field import Bars, Piece, StressField
from calcgen.quantities.display import number_text
from calcgen.quantities.measure import from_si
from calcgen.quantities.symbols import plain

ROUNDING = 1e-12  # of a strength: an excess below it is rounding
STRAIGHT = 10.0  # R_c over depth: above it the straight-bar formula errs by some 3 % or less
"""Common practice: for a rectangle the error at the inner fibre is about h/(3 R_c), 3 % at R_c = 10 h."""


def stress_premises(
    request: StressRequest,
    field: StressField,
    curved: CurvedStress | None,
    shear: ShearResult | None,
    scope: Scope,
) -> tuple[Premise, ...]:
    """Return the premises of the model in the order in which a checker reads them."""
    found: list[tuple[str, Verdict, str]] = []
    match request.model:
        case "elastic":
            found += [_within_strength(request, field, shear, scope), _axes(request), _axial(request)]
        case "curved":
            found += [_below(request, curved, scope), *_of_curved(request, curved)] if curved else []
        case "no_tension":
            found += [_compressed(field, scope), _crushing(request, field, scope)]
        case "cracked":
            found += [*_cracked(request, field, scope)]
        case "plastic" | "elastic_plastic":
            found += [*_yielding(request)]
    if shear is not None and not shear.connected and (request.V or request.V_lat):
        found.append(
            (
                "parts hang together",
                "not met",
                "some parts touch no other one: what connects them must carry the flow, or they bend apart",
            )
        )
    if request.section.composite:
        found.append(
            (
                "no slip between the parts",
                "left to judgement",
                "plane sections hold over all parts: see the flow that the joints carry"
                if request.V or request.V_lat
                else "plane sections hold over all parts: their joints carry the shear flow",
            )
        )
    if request.sheared:
        found += [*_sheared(request, shear)]
    found.append(
        (
            "plane sections",
            "left to judgement",
            "slender member, away from supports, point loads and openings",
        )
    )
    if request.model not in ("curved", "no_tension"):
        found.append(
            ("straight member", "left to judgement", "radius of the member's axis large beside its depth")
        )
    if request.model != "no_tension":
        found.append(
            (
                "restraint against lateral buckling",
                "left to judgement",
                "stress alone does not show stability",
            )
        )
    return tuple(Premise(request.name, *each) for each in found)


def _within_strength(
    request: StressRequest, field: StressField, shear: ShearResult | None, scope: Scope
) -> tuple[str, Verdict, str]:
    """Test each part against its strength, f_y where its material has none.

    Of one material under shear the von Mises stress is tested.
    """
    one_material = not request.section.composite and not request.section.bars
    combined = shear.combined.von_mises_max.von_mises if shear is not None and one_material else None
    kind = "largest stress" if combined is None else "largest von Mises stress"
    strengths = strengths_of(request.section, request.f_y.si if request.f_y is not None else None)
    worst: tuple[float, float, str] | None = None
    largest = 0.0
    unknown = False
    parts: list[Piece | Bars] = [*field.pieces, *field.bars]
    for part in parts:
        peak = (
            max(abs(extreme.value) for extreme in field.extremes_of(part)) if combined is None else combined
        )
        largest = max(largest, peak)
        strength = strengths.get(part.name)
        if strength is None:
            unknown = True
        elif worst is None or peak / strength > worst[0] / worst[1]:
            worst = (peak, strength, part.name)
    if worst is None or (unknown and worst[0] <= worst[1]):
        of = "" if worst is None else " for every part"
        return (
            "linear elastic",
            "left to judgement",
            f"no f_y is given{of}; the {kind} is {_stress(largest, scope)}",
        )
    peak, strength, name = worst
    where = f" of {plain(name)}" if name and combined is None else ""
    text = f"the {kind}{where}, {_stress(peak, scope)}"
    limit = f"its strength {_stress(strength, scope)}" if where else f"f_y = {_stress(strength, scope)}"
    if peak <= strength * (1.0 + ROUNDING):
        return "linear elastic", "met", f"{text}, is below {limit}"
    return (
        "linear elastic",
        "not met",
        f"{text}, is above {limit}: the section yields, and these stresses do not occur",
    )


def strengths_of(section: SectionResult, f_y: float | None) -> dict[str, float | None]:
    """Return the strength of each part and bar group, Pa: its material's own, else f_y."""
    return {o.name: o.strength if o.strength is not None else f_y for o in section.owners}


def _axes(request: StressRequest) -> tuple[str, Verdict, str]:
    premise = "bending about principal axes"
    if request.section.computed.I_hv == 0.0:
        return premise, "met", "the horizontal and vertical axes are principal axes"
    return (
        premise,
        "met",
        "they are not principal axes: the general formula with the product moment is used",
    )


def _axial(request: StressRequest) -> tuple[str, Verdict, str]:
    if request.forces.N == 0.0:
        return "no net axial force", "met", "N = 0: the neutral axis passes through the centroid"
    return "no net axial force", "met", "N acts at the centroid and shifts the neutral axis, as shown"


def _below(request: StressRequest, curved: CurvedStress, scope: Scope) -> tuple[str, Verdict, str]:
    peak = max(abs(extreme.value) for extreme in curved.extremes)
    strength = strengths_of(request.section, request.f_y.si if request.f_y is not None else None)
    f_y = next(iter(strength.values()))
    if f_y is None:
        return (
            "linear elastic",
            "left to judgement",
            f"no f_y is given; the largest stress is {_stress(peak, scope)}",
        )
    if peak <= f_y * (1.0 + ROUNDING):
        return (
            "linear elastic",
            "met",
            f"the largest stress, {_stress(peak, scope)}, is below f_y = {_stress(f_y, scope)}",
        )
    return (
        "linear elastic",
        "not met",
        f"the largest stress, {_stress(peak, scope)}, is above f_y = {_stress(f_y, scope)}: "
        "the section yields, and these stresses do not occur",
    )


def _of_curved(request: StressRequest, curved: CurvedStress) -> Iterable[tuple[str, Verdict, str]]:
    yield (
        ("symmetry about the plane of curvature", "met", "the bar bends in the plane of its curvature")
        if curved.in_plane
        else (
            "symmetry about the plane of curvature",
            "not met",
            "the section is not symmetric: these stresses hold where it is kept from bending sideways",
        )
    )
    slenderness = curved.R_c / request.section.bounds.height
    ratio = number_text(slenderness, 3)
    if slenderness > STRAIGHT:
        detail = f"R_c is {ratio} times the depth: the straight-bar formula would do as well"
    else:
        detail = f"R_c is {ratio} times the depth: the straight-bar formula errs as shown"
    yield "curvature counts", "met", detail
    yield (
        "thick section",
        "left to judgement",
        "radial stress is left out: thin flanges and webs of a curved bar need a check of their own",
    )


def _compressed(field: StressField, scope: Scope) -> tuple[str, Verdict, str]:
    depth = compressed_depth(field)
    if depth is None or strain_extremes(field)[0] <= 0.0:
        return "resultant within the section", "met", "the whole section is compressed"
    unit = "in" if scope.style.system == "US" else "mm"
    text = shown(from_si(depth, "m").shown_in(unit), scope).text
    return "resultant within the section", "met", f"a zone {text} deep is compressed, the rest is open"


def _crushing(request: StressRequest, field: StressField, scope: Scope) -> tuple[str, Verdict, str]:
    peak = -field.extremes()[1].value
    if request.f_y is None:
        return (
            "linear in compression",
            "left to judgement",
            f"no strength is given; the largest compression is {_stress(peak, scope)}",
        )
    verdict: Verdict = "met" if peak <= request.f_y.si * (1.0 + ROUNDING) else "not met"
    way = "below" if verdict == "met" else "above"
    return (
        "linear in compression",
        verdict,
        f"the largest compression, {_stress(peak, scope)}, is {way} {_stress(request.f_y.si, scope)}",
    )


def _cracked(request: StressRequest, field: StressField, scope: Scope) -> Iterable[tuple[str, Verdict, str]]:
    yield (
        "no tension where the bars lie",
        "met",
        "the material that holds the bars carries none; bond is perfect, tension between cracks is left out",
    )
    strengths = strengths_of(request.section, request.f_y.si if request.f_y is not None else None)
    bars = {b.name: max(abs(e.value) for e in field.extremes_of(b)) for b in field.bars}
    known = {name: f for name in bars if (f := strengths[name]) is not None}
    peak = _stress(max(bars.values()), scope)
    over = [name for name, f in known.items() if bars[name] > f]
    if len(known) < len(bars):
        yield (
            "bars elastic",
            "left to judgement",
            f"no strength is given for all bars; the largest stress is {peak}",
        )
    elif over:
        yield (
            "bars elastic",
            "not met",
            f"{', '.join(plain(n) for n in over)} yield: these stresses do not occur",
        )
    else:
        yield "bars elastic", "met", f"the largest stress of the bars is {peak}, below their strength"
    compression = -min(field.extremes_of(p)[1].value for p in field.pieces)
    yield (
        "linear in compression",
        "left to judgement",
        f"the largest compression is {_stress(max(compression, 0.0), scope)}: small beside the strength, "
        "with the modulus of the loading's duration",
    )


def _yielding(request: StressRequest) -> Iterable[tuple[str, Verdict, str]]:
    yield (
        "ductile, without strain hardening",
        "left to judgement",
        "the stress stays at the strength however large the strain",
    )
    yield (
        "no local buckling",
        "left to judgement",
        "compressed plates stocky enough to yield and turn (class 1 or 2, compact)",
    )
    if request.section.bars:
        yield (
            "no tension where the bars lie",
            "met",
            "the material that holds the bars carries no tension",
        )
    elif request.section.composite:
        yield (
            "the same strength in tension and in compression",
            "left to judgement",
            "each material counts so: concrete or masonry does not, unless bars are laid in it",
        )
    yield "no shear", "left to judgement", "shear small enough to leave the moment alone"


def _sheared(request: StressRequest, shear: ShearResult | None) -> Iterable[tuple[str, Verdict, str]]:
    if request.V or request.V_lat:
        yield (
            "shear through the shear centre",
            "left to judgement",
            "V and V_lat act through the shear centre; a load beside it is a torque T as well",
        )
        yield (
            "shear stress even across the cut",
            "left to judgement",
            "V·S/(I·b) is the mean over the width: fair for webs and thin walls, less so for wide parts",
        )
        if shear is not None and shear.walls is not None:
            own = request.section.computed
            more = number_text(100.0 * (shear.walls.inertia.I_h / own.I_h - 1.0), 2)
            yield (
                "thin walls",
                "left to judgement",
                f"flow along walls is that of the mid-line, whose second moment differs by {more} % "
                "from the outline's about the horizontal axis",
            )
    if request.T:
        yield (
            "free warping",
            "left to judgement",
            "uniform torsion alone: where warping is held, normal stresses of warping come on top",
        )


def _stress(value: float, scope: Scope) -> str:
    return shown(from_si(value, "Pa").shown_in(None), scope).text
