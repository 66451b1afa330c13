"""`stress NAME`: elastic normal stress under N, M and M_lat, its extremes, neutral axis and curvature."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

from calcgen.evaluation.blocks.section import section_named
from calcgen.evaluation.blocks.stress_results import RESULT_MEANINGS, stress_premises, stress_results
from calcgen.evaluation.checks import Labels, Statement, judge
from calcgen.evaluation.quantity import quantity_of, si
from calcgen.evaluation.results import CheckResult, Plain, Result, SecondRoute, StressResult
from calcgen.evaluation.scope import Scope
from calcgen.language.blocks.stress import StressBlock
from calcgen.language.calc import FailedBlock
from calcgen.language.nodes import Name
from calcgen.mechanics.arrays import Point
from calcgen.mechanics.outline import Outline
from calcgen.mechanics.second_route.stress import stress_residuals
from calcgen.mechanics.stress import Forces, elastic_stress
from calcgen.quantities.display import show
from calcgen.quantities.measure import Measure, from_si
from calcgen.quantities.symbols import plain
from calcgen.text import Report, nearest

_FORCES = {"N": "force", "M": "moment", "M_lat": "moment"}
_LATER = {
    "V": "shear stress",
    "V_lat": "shear stress",
    "T": "torsion",
    "R_c": "curved beams",
    "centre": "curved beams",
}
_LATER_MODELS = ("plastic", "elastic_plastic", "no_tension", "cracked", "curved")
_LATER_RESULTS = ("τ_max", "σ_vM_max", "core")
_NEEDS_E = ("κ", "R", "ε_max", "ε_min")


@dataclass(frozen=True)
class StressThing:
    """A stress in the scope."""

    result: StressResult
    kind: str = "stress"

    def read(self, name: Name, arguments: tuple[Plain, ...] | None, report: Report) -> Measure | None:
        """Return a result; report one that does not exist."""
        wanted, span = name.parts[1], name.spans[1]
        if len(name.parts) == 2 and arguments is None:
            found = next((r for r in self.result.results if r.name == wanted), None)
            if found is not None:
                return found.value
        known = [r.name for r in self.result.results]
        if wanted in _LATER_RESULTS:
            report.error("not-available-yet", span, f"the result '{plain(wanted)}' is not available yet")
        elif wanted in _NEEDS_E and self.result.modulus is None:
            report.error(
                "modulus-missing",
                span,
                f"'{wanted}' needs the modulus of elasticity",
                hint=f"add a line E = … to the stress '{self.result.name}'",
            )
        elif wanted in ("na_depth", "na_angle", "R"):
            report.error(
                "no-such-result",
                span,
                f"'{plain(wanted)}' does not exist here: the stress does not vary along the depth",
                hint="na_angle tells where it varies across the width alone; a uniform stress has no axis",
            )
        else:
            close = nearest(wanted, known)
            report.error(
                "no-such-result",
                span,
                f"a stress has no result '{plain(wanted)}'",
                hint=f"the nearest is '{close}'" if close else f"it has {', '.join(known)}",
            )
        return None


def evaluate_stress(block: StressBlock, scope: Scope, labels: Labels) -> StressResult | FailedBlock:
    """Solve for the stress, judge its limit, and define its name."""
    name = block.target.name
    free = scope.define(block.target)
    result = None if block.later else _stress(name, block, scope, labels)
    if result is None or not free:
        if free:
            scope.failed.add(name)
        return FailedBlock("stress", block.span)
    scope.things[name] = StressThing(result)
    return result


def _stress(name: str, block: StressBlock, scope: Scope, labels: Labels) -> StressResult | None:
    available = _only_available(block, scope)
    setting = block.setting("section")
    if setting is None:
        scope.report.error(
            "section-missing",
            block.head_span,
            f"the stress '{plain(name)}' needs a section",
            hint="section = …",
        )
        return None
    section = section_named(setting.value, scope)
    forces = _forces(block, scope)
    strength = _optional(block, "f_y", "stress", scope)
    modulus = _optional(block, "E", "stress", scope)
    limit = _optional(block, "limit", "stress", scope)
    points = _points(block, scope)
    if section is None or forces is None or points is None or not available:
        return None
    if any(
        block.setting(k) is not None and v is None
        for k, v in (("f_y", strength), ("E", modulus), ("limit", limit))
    ):
        return None
    for key, value in (("f_y", strength), ("E", modulus), ("limit", limit)):
        setting = block.setting(key)
        if value is not None and setting is not None and value.si <= 0:
            scope.report.error("not-positive", setting.value.span, f"'{key}' must be positive")
            return None
    plane = elastic_stress(section.result.computed, forces)
    outline = section.result.outline
    _warn_of_points_outside(block, points, outline, scope)
    E = modulus.si if modulus is not None else None
    results = stress_results(plane, outline, E, points, scope.style)
    return StressResult(
        name=name,
        section=section.result,
        forces=forces,
        forces_shown={
            key: show(_with_unit_of(block, key, kind, float(getattr(forces, key)), scope), scope.style)
            for key, kind in _FORCES.items()
        },
        plane=plane,
        modulus=E,
        results=results,
        points=points,
        check=_limit(name, block, limit, results, scope, labels),
        premises=stress_premises(name, section, plane, forces, strength, outline, scope),
        second_route=tuple(
            SecondRoute.found(name, r.what, r.residual, r.tolerance, r.quantity)
            for r in stress_residuals(plane, forces, outline)
        ),
        line=scope.report.source.line_number(block.head_span),
        span=block.head_span,
    )


def _only_available(block: StressBlock, scope: Scope) -> bool:
    """Report what this release does not evaluate; a shear force or torque of zero is none."""
    available = True
    for setting in block.settings:
        key = setting.key.name
        if key in ("V", "V_lat", "T"):
            value = quantity_of(setting.value, "moment" if key == "T" else "force", scope)
            if value is None or value.si != 0:
                available = False
            if value is not None and value.si != 0:
                scope.report.error(
                    "not-available-yet",
                    setting.span,
                    f"{_LATER[key]} of a section under {key} is not available yet",
                )
        elif key in _LATER:
            available = False
            scope.report.error(
                "not-available-yet", setting.span, f"'{key}' ({_LATER[key]}) is not available yet"
            )
        elif key == "model":
            available = _elastic(setting.value, scope) and available
    return available


def _elastic(node: object, scope: Scope) -> bool:
    if not isinstance(node, Name):
        return False
    if node.dotted == "elastic":
        return True
    if node.dotted in _LATER_MODELS:
        scope.report.error("not-available-yet", node.span, f"the model '{node.dotted}' is not available yet")
        return False
    found = nearest(node.dotted, ("elastic", *_LATER_MODELS))
    scope.report.error(
        "unknown-word",
        node.span,
        f"there is no model '{node.dotted}'",
        hint=f"the nearest is '{found}'" if found else f"models are elastic, {', '.join(_LATER_MODELS)}",
    )
    return False


def _forces(block: StressBlock, scope: Scope) -> Forces | None:
    values: dict[str, float] = {}
    for key, kind in _FORCES.items():
        setting = block.setting(key)
        if setting is not None:
            value = si(setting.value, kind, scope)
            if value is None:
                return None
            values[key] = value
    if not values:
        scope.report.error(
            "force-missing",
            block.head_span,
            f"the stress '{plain(block.target.name)}' has no force",
            hint="give at least one of N, M and M_lat",
        )
        return None
    return Forces(**values)


def _optional(block: StressBlock, key: str, kind: str, scope: Scope) -> Measure | None:
    setting = block.setting(key)
    return None if setting is None else quantity_of(setting.value, kind, scope)


def _warn_of_points_outside(
    block: StressBlock, points: Mapping[str, Point], outline: Outline, scope: Scope
) -> None:
    for line in block.points:
        if not outline.contains(points[line.target.name]):
            scope.report.warning(
                "point-outside",
                line.point.span,
                f"the point '{plain(line.target.name)}' lies outside the section",
                hint="in the section's own coordinates its bounding box has its middle at (0, 0), or at 'at'",
            )


def _points(block: StressBlock, scope: Scope) -> dict[str, Point] | None:
    points: dict[str, Point] = {}
    complete = True
    for line in block.points:
        x, y = si(line.point.x, "length", scope), si(line.point.y, "length", scope)
        name = line.target.name
        taken = [*points, *RESULT_MEANINGS, *_LATER_RESULTS]
        if name in taken:
            complete = False
            scope.report.error(
                "name-hides-result",
                line.target.span,
                f"'{plain(name)}' is the name of a result of this block",
            )
        elif x is None or y is None:
            complete = False
        else:
            points[name] = (x, y)
    return points if complete else None


def _with_unit_of(block: StressBlock, key: str, kind: str, value: float, scope: Scope) -> Measure:
    """Return a force shown in the unit it was given in."""
    setting = block.setting(key)
    given = quantity_of(setting.value, kind, scope) if setting is not None else None
    return from_si(value, "N" if kind == "force" else "N·m").shown_in(
        given.unit if given is not None else None
    )


def _limit(
    name: str,
    block: StressBlock,
    limit: Measure | None,
    results: tuple[Result, ...],
    scope: Scope,
    labels: Labels,
) -> CheckResult | None:
    """Judge the stress of largest magnitude against the limit."""
    setting = block.setting("limit")
    if limit is None or setting is None:
        return None
    label = setting.annotations.note.text or f"{plain(name)}: normal stress"
    address = labels.claim(label, setting.statement_span, scope)
    if address is None:
        return None
    by_name = {r.name: r.value for r in results}
    largest = max((by_name["σ_max"], by_name["σ_min"]), key=lambda m: abs(m.si))
    demand = from_si(abs(largest.si), "Pa").shown_in(largest.unit)
    return judge(
        Statement(demand, "<=", limit, against_zero=False),
        scope,
        label=label,
        note=setting.annotations.note,
        reference=setting.annotations.reference,
        origin=name,
        address=address,
        line=scope.report.source.line_number(setting.span),
    )
