"""The models of a stress block: the law of each part, and the field in equilibrium with the forces."""

from __future__ import annotations

import math
from collections.abc import Mapping, Sequence
from dataclasses import dataclass, replace
from typing import TypeVar

from calcgen.evaluation.blocks.section_composite import bars_of, elastic, pieces_of
from calcgen.evaluation.blocks.stress_request import Model, StressRequest
from calcgen.evaluation.formulas import shown
from calcgen.evaluation.results.section import BarsPart, SectionPart, SectionResult
from calcgen.evaluation.results.stress import PlasticResult
from calcgen.evaluation.scope import Scope
from calcgen.language.blocks.stress import StressBlock
from calcgen.mechanics.curved import CurvatureError, CurvedStress, curved_stress
from calcgen.mechanics.equilibrium import EquilibriumError, elastic_plane, solve, yield_factor
from calcgen.mechanics.field import Bars, Law, Piece, StressField
from calcgen.mechanics.stress import Forces, StressPlane, elastic_stress
from calcgen.mechanics.stress_blocks import interaction, plastic_bending
from calcgen.quantities.display import number_text
from calcgen.quantities.measure import from_si
from calcgen.quantities.symbols import plain
from calcgen.text import Span

_Part = TypeVar("_Part", Piece, Bars)

YIELDING: tuple[Model, ...] = ("plastic", "elastic_plastic")
"""Models whose materials have a strength."""

FLAT = 1e-9  # of I_h I_v: a smaller determinant, of a foil on a slant, leaves too few digits to the stress
SETTLED = 1e-10  # of the slope: a smaller part of it is what iteration leaves
ROUNDING = 1e-12  # of a plastic moment: an excess below it is rounding


@dataclass(frozen=True)
class Solved:
    """A stress field and what belongs to it.

    Attributes
    ----------
    field : stress over the section; for a curved bar that of the straight one, to set beside it.
    curved : the stress of a curved bar.
    unloaded : what an elastic unloading leaves, for the elastic-plastic model.
    plastic : what the section carries when it yields throughout, for the models that yield.
    """

    field: StressField
    curved: CurvedStress | None = None
    unloaded: StressField | None = None
    plastic: PlasticResult | None = None


def elastic_parts(section: SectionResult) -> tuple[tuple[Piece, ...], tuple[Bars, ...]]:
    """Return parts and bars of the elastic section."""
    return pieces_of(section.parts, elastic), bars_of(section.bars, section.parts, elastic)


def solved(request: StressRequest, block: StressBlock, scope: Scope) -> Solved | None:
    """Find the stress of a request; report forces that cannot be carried."""
    inertia = request.section.computed
    if inertia.I_h * inertia.I_v - inertia.I_hv**2 <= FLAT * inertia.I_h * inertia.I_v:
        _report(EquilibriumError("stiffness"), request, block, scope)
        return None
    match request.model:
        case "elastic":
            return Solved(_elastic_field(request))
        case "curved":
            return _curved(request, block, scope)
        case "no_tension" | "cracked" | "elastic_plastic":
            return _in_equilibrium(request, block, scope)
        case "plastic":
            return _plastic(request, block, scope)


def _elastic_field(request: StressRequest) -> StressField:
    plane = elastic_stress(request.section.computed, request.forces)
    return StressField(plane, *elastic_parts(request.section))


def _curved(request: StressRequest, block: StressBlock, scope: Scope) -> Solved | None:
    """Return the stress of a curved bar; one material alone."""
    section = request.section
    setting = block.setting("R_c")
    if request.radius is None or setting is None:  # reported when the block was read
        return None
    if section.composite or section.bars:
        scope.report.error(
            "not-in-model",
            _span(block, "section"),
            "the model 'curved' takes a section of one material",
        )
        return None
    try:
        curved = curved_stress(
            section.computed,
            request.forces.N,
            request.forces.M,
            request.radius,
            request.centre,
            *section.outlines,
        )
    except CurvatureError as fault:
        radius, least = (shown(from_si(v, "m").shown_in(None), scope).text for v in (fault.R_c, fault.least))
        scope.report.error(
            "radius-too-small",
            setting.value.span,
            f"the section reaches the centre of curvature: its edge is {least} from the centroid",
            label=f"R_c = {radius}",
            hint="R_c is the radius of the centroidal line, not that of the inner edge",
        )
        return None
    return Solved(_elastic_field(request), curved)


def _in_equilibrium(request: StressRequest, block: StressBlock, scope: Scope) -> Solved | None:
    """Return the field of a model with limits; report where there is none."""
    laws = _laws(request, block, scope)
    if laws is None:
        return None
    section, forces, (pieces, bars) = request.section, request.forces, laws
    about = (section.computed.x_bar, section.computed.y_bar)
    try:
        field = solve(pieces, bars, forces, about).field
    except EquilibriumError as fault:
        _report(fault, request, block, scope)
        return None
    field = replace(field, plane=_settled(field.plane))
    if request.model != "elastic_plastic":
        return Solved(field)
    try:
        plastic = _capacity(request, pieces, bars)
    except EquilibriumError:  # the axial force takes all that the section can carry
        plastic = None
    if section.bars:  # concrete that has cracked does not unload elastically
        return Solved(field, plastic=plastic)
    unloaded = field.after_unloading(elastic_stress(section.computed, forces))
    return Solved(field, unloaded=unloaded, plastic=plastic)


def _settled(plane: StressPlane) -> StressPlane:
    """Return a plane without the slope that iteration leaves across an axis of symmetry."""
    least = SETTLED * math.hypot(plane.g_x, plane.g_y)
    return replace(
        plane,
        g_x=plane.g_x if abs(plane.g_x) > least else 0.0,
        g_y=plane.g_y if abs(plane.g_y) > least else 0.0,
    )


def _plastic(request: StressRequest, block: StressBlock, scope: Scope) -> Solved | None:
    """Return the stress blocks of the plastic moment; report a moment beyond it."""
    laws = _laws(request, block, scope)
    if laws is None:
        return None
    try:
        capacity = _capacity(request, *laws)
    except EquilibriumError as fault:
        _report(fault, request, block, scope)
        return None
    if capacity.utilisation > 1.0 + ROUNDING:
        _report(EquilibriumError("limit", 1.0 / capacity.utilisation), request, block, scope)
        return None
    return Solved(capacity.field, plastic=capacity)


def _capacity(request: StressRequest, pieces: tuple[Piece, ...], bars: tuple[Bars, ...]) -> PlasticResult:
    """Find what the section carries when it yields throughout, beside N; sagging where no moment is given."""
    forces, section = request.forces, request.section
    M, M_lat = (forces.M, forces.M_lat) if forces.M or forces.M_lat else (1.0, 0.0)
    about = (section.computed.x_bar, section.computed.y_bar)
    state = plastic_bending(pieces, bars, M=M, M_lat=M_lat, N=forces.N, about=about)
    alone = state if forces.N == 0.0 else plastic_bending(pieces, bars, M=M, M_lat=M_lat, about=about)
    unlimited = elastic_parts(section)
    plane = elastic_plane(*unlimited, Forces(0.0, M, M_lat), about)
    first = yield_factor(StressField(plane, _limited(pieces, unlimited[0]), _limited(bars, unlimited[1])))
    size = math.hypot(M, M_lat)
    most = math.hypot(state.forces.M, state.forces.M_lat)
    uniaxial = M == 0.0 or M_lat == 0.0
    sense = math.copysign(1.0, M or M_lat) if uniaxial else 1.0
    return PlasticResult(
        M=state.forces.M if M else 0.0,
        M_lat=state.forces.M_lat if M_lat else 0.0,
        M_el=sense * first * size if first > 0.0 else None,
        M_0=math.hypot(alone.forces.M, alone.forces.M_lat),
        utilisation=math.hypot(forces.M, forces.M_lat) / most,
        field=state.field,
        forces=state.forces,
        interaction=interaction(pieces, bars, axis="h" if M else "v", about=about) if uniaxial else None,
    )


def _laws(
    request: StressRequest, block: StressBlock, scope: Scope
) -> tuple[tuple[Piece, ...], tuple[Bars, ...]] | None:
    """Return parts and bars with the laws of the model; the material that bars lie in carries no tension."""
    section, model = request.section, request.model
    hosts = {host for bars in section.bars for host in bars.hosts}
    reinforced = {part.material for part in section.parts if part.name in hosts}
    if model == "cracked" and not section.bars:
        scope.report.error(
            "bars-missing",
            _span(block, "section"),
            f"the section '{plain(section.name)}' has no bars",
            hint="lay them in the section: bars NAME = 4 of 20 mm from … to … of steel; without bars, "
            "the model is no_tension",
        )
        return None
    strengths: Mapping[str, float] = {}
    if model in YIELDING:
        found = _strengths(request, block, scope)
        if found is None:
            return None
        strengths = found

    def law(part: SectionPart | BarsPart) -> Law:
        factor = math.inf if model == "plastic" else part.factor
        strength = strengths.get(part.name, math.inf)
        bare = isinstance(part, SectionPart) and (part.material in reinforced or model == "no_tension")
        return Law(factor, 0.0 if bare else strength, strength)

    return pieces_of(section.parts, law), bars_of(section.bars, section.parts, law)


def _limited(rigid: Sequence[_Part], unlimited: Sequence[_Part]) -> tuple[_Part, ...]:
    """Return parts with their strengths and their elastic moduli; the laws of the plastic model have none."""
    pairs = zip(rigid, unlimited, strict=True)
    return tuple(replace(part, law=replace(part.law, factor=own.law.factor)) for part, own in pairs)


def _strengths(request: StressRequest, block: StressBlock, scope: Scope) -> dict[str, float] | None:
    """Return the strength of each part and of bars: its material's own, else f_y; report a missing one."""
    owners = request.section.owners
    f_y = request.f_y.si if request.f_y is not None else None
    missing = sorted({plain(o.material) for o in owners if o.strength is None and f_y is None})
    if missing:
        of = " and ".join(name for name in missing if name)
        scope.report.error(
            "strength-missing",
            block.head_span,
            f"the model '{request.model}' needs the strength" + (f" of {of}" if of else ""),
            hint="write f_y = … here" + (f", or strength {missing[0]} = … in the section" if of else ""),
        )
        return None
    return {o.name: o.strength if o.strength is not None else f_y or 0.0 for o in owners}


def _report(fault: EquilibriumError, request: StressRequest, block: StressBlock, scope: Scope) -> None:
    """Report forces that no stress of the section balances."""
    key = next((k for k in ("M", "M_lat", "N") if k in request.forces_given), "N")
    given = ", ".join(f"{plain(k)} = {shown(v, scope).text}" for k, v in request.forces_given.items())
    section = plain(request.section.name)
    if fault.reason == "limit":
        part = number_text(fault.limit, scope.style.digits)
        hint = f"it yields throughout at {part} of these forces"
        if fault.limit == 0.0:
            hint = "N takes all that the section can carry: no moment is left beside it"
        elif set(request.forces_given) == {key}:
            most = from_si(fault.limit * request.forces_given[key].si, "N" if key == "N" else "N·m")
            of = {"M": "M_pl", "M_lat": "M_pl_lat", "N": "N_pl"}[key]
            text = shown(most.shown_in(request.forces_given[key].unit), scope).text
            hint = f"it yields throughout at {plain(of)} = {text}"
        scope.report.error(
            "beyond-plastic", _span(block, key), f"'{section}' cannot carry {given}", label=given, hint=hint
        )
    elif fault.reason == "resultant":
        scope.report.error(
            "no-equilibrium",
            _span(block, key),
            f"no stress of '{section}' balances {given}",
            label=_eccentricity(request, scope),
            hint="the resultant lies outside what can carry it: without tension, outside the outline",
        )
    else:
        scope.report.error(
            "no-stiffness",
            _span(block, "section"),
            f"'{section}' has no stiffness against these forces",
            label=_least_gyration(request, scope),
            hint="it is a foil on a slant: is a size or a coordinate wrong?",
        )


def _least_gyration(request: StressRequest, scope: Scope) -> str:
    """Return the least radius of gyration, about the axis along which a section is flat."""
    i = request.section.computed
    flat = max(i.I_h * i.I_v - i.I_hv**2, 0.0) / (i.I_h + i.I_v) / i.area
    unit = "in" if scope.style.system == "US" else "mm"
    return f"i_2 = {shown(from_si(math.sqrt(flat), 'm').shown_in(unit), scope).text}"


def _eccentricity(request: StressRequest, scope: Scope) -> str:
    """Return how far from the centroid the resultant acts."""
    forces = request.forces
    if not forces.N:
        return "there is no axial force"
    e = from_si(math.hypot(forces.M, forces.M_lat) / abs(forces.N), "m")
    unit = "in" if scope.style.system == "US" else "mm"
    return f"M/N = {shown(e.shown_in(unit), scope).text} from the centroid"


def _span(block: StressBlock, key: str) -> Span:
    setting = block.setting(key)
    return setting.value.span if setting is not None else block.head_span
