"""`stress NAME`: the stress of a section under given forces, its extremes, premises and second route."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, replace

from calcgen.evaluation.blocks.stress_models import Solved, solved
from calcgen.evaluation.blocks.stress_premises import stress_premises
from calcgen.evaluation.blocks.stress_request import StressRequest, read_request
from calcgen.evaluation.blocks.stress_results import (
    NEEDS_MODULUS,
    RESULT_MEANINGS,
    NamedResults,
    stress_results,
)
from calcgen.evaluation.blocks.stress_shear import shear_result
from calcgen.evaluation.checks import Labels, Statement, judge
from calcgen.evaluation.results.common import Plain, SecondRoute
from calcgen.evaluation.results.lines import CheckResult
from calcgen.evaluation.results.stress import StressResult
from calcgen.evaluation.scope import Scope
from calcgen.language.blocks.stress import StressBlock, StressSetting
from calcgen.language.calc import FailedBlock
from calcgen.language.nodes import Name
from calcgen.mechanics.saint_venant import MeshError
from calcgen.mechanics.second_route.curved import curved_residuals
from calcgen.mechanics.second_route.field import field_residuals
from calcgen.mechanics.second_route.residual import Residual
from calcgen.mechanics.second_route.stress import stress_residuals
from calcgen.mechanics.stress import Forces
from calcgen.quantities.display import show
from calcgen.quantities.measure import Measure, from_si
from calcgen.quantities.symbols import plain
from calcgen.text import Report, Span, nearest

_AXIS = ("na_depth", "na_angle", "R", "x_c")


@dataclass(frozen=True)
class StressThing:
    """A stress in the scope."""

    result: StressResult
    kind: str = "stress"

    def read(self, name: Name, arguments: tuple[Plain, ...] | None, report: Report) -> Measure | None:
        """Return a result, of the section or of a part; report one that does not exist."""
        wanted, span = name.parts[-1], name.spans[-1]
        if len(name.parts) == 2 and arguments is None:
            found = next((r for r in self.result.results if r.name == wanted), None)
            if found is not None:
                return found.value
            if wanted in self.result.parts:
                report.error(
                    "block-is-no-value",
                    span,
                    f"'{plain(wanted)}' is a part, not a value",
                    hint=f"name one of its stresses after a dot: {name.dotted}.σ_max",
                )
                return None
        if len(name.parts) == 3 and arguments is None:
            return self._of_part(name, report)
        self._missing(wanted, span, report)
        return None

    def _of_part(self, name: Name, report: Report) -> Measure | None:
        _, part, wanted = name.parts
        rows = self.result.parts.get(part)
        if rows is None:
            found = nearest(part, self.result.parts)
            known = ", ".join(self.result.parts) or "no parts, bars or points with names"
            report.error(
                "no-such-result",
                name.spans[1],
                f"the stress '{plain(self.result.name)}' has no part or point '{plain(part)}'",
                hint=f"the nearest is '{found}'" if found else f"it has {known}",
            )
            return None
        row = next((r for r in rows if r.name == wanted), None)
        if row is None:
            report.error(
                "no-such-result",
                name.spans[2],
                f"'{plain(part)}' has no result '{plain(wanted)}'",
                hint=f"it has {', '.join(r.name for r in rows)}",
            )
            return None
        return row.value

    def _missing(self, wanted: str, span: Span, report: Report) -> None:
        result = self.result
        known = [r.name for r in result.results]
        if wanted in NEEDS_MODULUS and result.modulus is None:
            report.error(
                "modulus-missing",
                span,
                f"'{wanted}' needs the modulus of elasticity",
                hint=f"add a line E = … to the stress '{result.name}'",
            )
        elif wanted in _AXIS and result.plane.uniform:
            report.error(
                "no-such-result",
                span,
                f"'{plain(wanted)}' does not exist here: the stress does not vary along the depth",
                hint="na_angle tells where it varies across the width alone; a uniform stress has no axis",
            )
        elif wanted == "na_depth":
            report.error(
                "no-such-result",
                span,
                "'na_depth' does not exist here: the stress does not vary along the depth",
                hint="na_angle tells where it varies across the width alone; a uniform stress has no axis",
            )
        elif wanted in RESULT_MEANINGS or wanted.startswith("q_"):
            report.error(
                "no-such-result",
                span,
                f"'{plain(wanted)}' does not exist with these forces in the model '{result.model}'",
                hint=f"it has {', '.join(known)}",
            )
        else:
            close = nearest(wanted, known)
            report.error(
                "no-such-result",
                span,
                f"a stress has no result '{plain(wanted)}'",
                hint=f"the nearest is '{close}'" if close else f"it has {', '.join(known)}",
            )


def evaluate_stress(block: StressBlock, scope: Scope, labels: Labels) -> StressResult | FailedBlock:
    """Solve for the stress, judge its limit, and define its name."""
    name = block.target.name
    free = scope.define(block.target)
    result = _stress(block, scope, labels)
    if result is None or not free:
        if free:
            scope.failed.add(name)
        return FailedBlock("stress", block.span)
    scope.things[name] = StressThing(result)
    return result


def _stress(block: StressBlock, scope: Scope, labels: Labels) -> StressResult | None:
    request = read_request(block, frozenset(RESULT_MEANINGS), scope)
    if request is None or not _points_are_free(block, request, scope):
        return None
    found = solved(request, block, scope)
    if found is None or not _points_inside(block, request, found, scope):
        return None
    shear, shear_residuals = None, tuple[Residual, ...]()
    if request.sheared:
        if request.T and (request.section.composite or request.section.bars):
            setting = block.setting("T")
            scope.report.error(
                "not-in-model",
                setting.span if setting is not None else block.head_span,
                "torsion is evaluated for a section of one material",
            )
            return None
        try:
            shear, shear_residuals = shear_result(request, found.field)
        except MeshError:
            setting = block.setting("T")
            scope.report.error(
                "not-meshed",
                setting.span if setting is not None else block.head_span,
                "the stress of the torque is not found: the outline of the section cannot be meshed",
                hint="is a size or a coordinate wrong? very thin spikes beside large faces ask too much",
            )
            return None
    results = stress_results(
        request, found.field, found.curved, found.unloaded, found.plastic, shear, scope.style
    )
    residuals = (*_residuals(request, found), *shear_residuals)
    return StressResult(
        name=request.name,
        section=request.section,
        model=request.model,
        forces=request.forces,
        V=request.V,
        V_lat=request.V_lat,
        T=request.T,
        forces_shown={key: show(value, scope.style) for key, value in request.forces_given.items()},
        field=found.field,
        curved=found.curved,
        unloaded=found.unloaded,
        plastic=found.plastic,
        shear=shear,
        modulus=request.E.si if request.E is not None else None,
        results=results.section,
        parts=results.parts,
        points=request.points,
        check=_limit(request, block, results, scope, labels),
        premises=stress_premises(request, found.field, found.curved, shear, scope),
        second_route=tuple(
            SecondRoute.found(request.name, r.what, r.residual, r.tolerance, r.quantity) for r in residuals
        ),
        line=scope.report.source.line_number(block.head_span),
        span=block.head_span,
    )


def _residuals(request: StressRequest, found: Solved) -> Sequence[Residual]:
    """Integrate the normal stress again: it returns the forces it was made from."""
    section, forces = request.section, request.forces
    if found.curved is not None:
        return curved_residuals(found.curved, *section.outlines)
    if request.model == "plastic" and found.plastic is not None:
        return field_residuals(found.field, found.plastic.forces)
    if request.model == "elastic" and not section.composite and not section.bars:
        return stress_residuals(found.field.plane, forces, *section.outlines)
    unloaded = () if found.unloaded is None else field_residuals(found.unloaded, Forces())
    after = (replace(r, quantity=f"residual stress: {r.quantity}") for r in unloaded)
    return (*field_residuals(found.field, forces), *after)


def _points_are_free(block: StressBlock, request: StressRequest, scope: Scope) -> bool:
    """Report a point that has the name of a part, of bars, or of their joints."""
    owners = {owner.name for owner in request.section.owners if owner.name}
    taken = owners | {f"q_{name}" for name in owners}
    clashes = [line for line in block.points if line.target.name in taken]
    for line in clashes:
        scope.report.error(
            "name-hides-result",
            line.target.span,
            f"'{plain(line.target.name)}' is the name of a part of the section",
        )
    return not clashes


def _points_inside(block: StressBlock, request: StressRequest, found: Solved, scope: Scope) -> bool:
    """Report points outside the section: an error where its stress is no single formula."""
    one = request.model == "elastic" and len(request.section.parts) == 1
    everywhere = one or found.curved is not None
    inside = True
    for line in block.points:
        if request.section.contains(request.points[line.target.name]):
            continue
        report = scope.report.warning if everywhere else scope.report.error
        inside = everywhere and inside
        report(
            "point-outside",
            line.point.span,
            f"the point '{plain(line.target.name)}' lies outside the section",
            hint="in the section's own coordinates its bounding box has its middle at (0, 0), or at 'at'",
        )
    return inside


def _limit(
    request: StressRequest, block: StressBlock, results: NamedResults, scope: Scope, labels: Labels
) -> CheckResult | None:
    """Judge the normal stress of largest magnitude against the limit."""
    setting, limit = block.setting("limit"), request.limit
    if limit is None or setting is None:
        return None
    label = setting.annotations.note.text or f"{plain(request.name)}: normal stress"
    address = labels.claim(label, setting.statement_span, scope)
    if address is None:
        return None
    by_name = {r.name: r.value for r in results.section}
    if request.section.composite:
        _warn_of_one_limit(block, request, scope)
    if request.sheared and not _judges_normal_stress(request, setting, by_name, scope):
        return None
    largest = max((by_name["σ_max"], by_name["σ_min"]), key=lambda m: abs(m.si))
    demand = from_si(abs(largest.si), "Pa").shown_in(largest.unit)
    return judge(
        Statement(demand, "<=", limit, against_zero=False),
        scope,
        label=label,
        note=setting.annotations.note,
        reference=setting.annotations.reference,
        origin=request.name,
        address=address,
        line=scope.report.source.line_number(setting.span),
    )


def _judges_normal_stress(
    request: StressRequest, setting: StressSetting, by_name: Mapping[str, Measure], scope: Scope
) -> bool:
    """Report a limit beside which shear stress acts that it does not judge; False where nothing is left."""
    forces = request.forces
    tau, combined = (show(by_name[name], scope.style).text for name in ("τ_max", "σ_vM_max"))
    label = f"τ_max = {tau}, σ_vM_max = {combined}"
    hint = f"write a check in working: {request.name}.σ_vM_max <= … or {request.name}.τ_max <= …"
    if not (forces.N or forces.M or forces.M_lat):
        scope.report.error(
            "limit-and-shear",
            setting.span,
            "a limit judges the normal stress, and no force makes one",
            label=label,
            hint=hint,
        )
        return False
    largest = max(abs(by_name["σ_max"].si), abs(by_name["σ_min"].si))
    if by_name["σ_vM_max"].si > largest * (1.0 + 1e-9):
        scope.report.warning(
            "limit-and-shear",
            setting.span,
            "the limit judges the normal stress alone; with the shear stress the von Mises stress is larger",
            label=label,
            hint=hint,
        )
    return True


def _warn_of_one_limit(block: StressBlock, request: StressRequest, scope: Scope) -> None:
    """Warn that one limit judges the largest stress of all materials, whichever has it."""
    setting = block.setting("limit")
    part = next((p.name for p in request.section.parts), "")
    scope.report.warning(
        "limit-of-composite",
        setting.span if setting is not None else block.head_span,
        "one limit judges the largest stress of all materials",
        hint=f"write a check for each part in working: {request.name}.{part}.σ_max <= …",
    )
