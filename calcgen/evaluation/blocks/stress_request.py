"""`stress NAME` as written -> what is asked of mechanics, checked against what its model takes."""

from __future__ import annotations

import math
from collections.abc import Mapping
from dataclasses import dataclass
from typing import Literal, TypeAlias, cast

from calcgen.evaluation.blocks.section import section_named
from calcgen.evaluation.formulas import shown
from calcgen.evaluation.quantity import quantity_of, si
from calcgen.evaluation.results.section import SectionResult
from calcgen.evaluation.scope import Scope
from calcgen.language.blocks.stress import StressBlock, StressSetting
from calcgen.language.nodes import Name
from calcgen.mechanics.arrays import Point
from calcgen.mechanics.stress import Forces
from calcgen.quantities.measure import Measure, from_si
from calcgen.quantities.symbols import plain

Model: TypeAlias = Literal["elastic", "plastic", "elastic_plastic", "no_tension", "cracked", "curved"]
Side: TypeAlias = Literal["bottom", "top"]

FORCES: Mapping[str, str] = {
    "N": "force",
    "M": "moment",
    "M_lat": "moment",
    "V": "force",
    "V_lat": "force",
    "T": "moment",
}
_SHEARS = ("V", "V_lat", "T")
_ONE_PLANE = "a curved bar is bent in the plane of its curvature"
_NO_SHEAR = "shear and torsion are evaluated with the elastic model"
_NOT_TAKEN: Mapping[str, Mapping[str, str]] = {
    "elastic": {},
    "plastic": dict.fromkeys(_SHEARS, _NO_SHEAR) | {"limit": "its stresses are the strengths"},
    "elastic_plastic": dict.fromkeys(_SHEARS, _NO_SHEAR),
    "no_tension": dict.fromkeys(_SHEARS, _NO_SHEAR),
    "cracked": dict.fromkeys(_SHEARS, _NO_SHEAR),
    "curved": dict.fromkeys(_SHEARS, _NO_SHEAR) | {"M_lat": _ONE_PLANE},
}
"""By model, the settings that it does not take, and why."""


@dataclass(frozen=True)
class StressRequest:
    """What a stress block asks for, in SI units.

    Attributes
    ----------
    forces : at the centroid; V, V_lat, T : shear forces through the shear centre and the torque.
    forces_given : each force that is written, in the unit it was given in.
    strengths : yield strength by the name of each part and bar group, None where none is known.
    radius, centre : of a curved bar: radius of the centroidal line, m, and the side of its centre.
    """

    name: str
    section: SectionResult
    model: Model
    forces: Forces
    V: float
    V_lat: float
    T: float
    forces_given: Mapping[str, Measure]
    f_y: Measure | None
    E: Measure | None
    limit: Measure | None
    radius: float | None
    centre: Side
    points: Mapping[str, Point]

    @property
    def sheared(self) -> bool:
        """Whether a shear force or a torque acts."""
        return bool(self.V or self.V_lat or self.T)


def read_request(block: StressBlock, taken: frozenset[str], scope: Scope) -> StressRequest | None:
    """Read the settings of a block; report each fault; `taken` are names that its points may not have."""
    before = len(scope.report.diagnostics)
    model = _model(block)
    setting = block.setting("section")
    thing = None
    if setting is None:
        scope.report.error(
            "section-missing",
            block.head_span,
            f"the stress '{plain(block.target.name)}' needs a section",
            hint="section = …",
        )
    else:
        thing = section_named(setting.value, scope)
    given = _forces(block, model, scope)
    values = {key: _positive(block, key, "stress", scope) for key in ("f_y", "E", "limit")}
    limit = block.setting("limit")
    if limit is not None and "limit" in _NOT_TAKEN[model]:
        scope.report.error(
            "not-in-model",
            limit.span,
            f"'limit' is not taken by the model '{model}'",
            hint=f"{_NOT_TAKEN[model]['limit']}: write a check against M_pl in working",
        )
    radius = _radius(block, model, scope)
    points = _points(block, taken, scope)
    if thing is None or given is None or points is None:
        return None
    E = _modulus(block, values["E"], thing.result, scope)
    if any(d.severity == "error" for d in scope.report.diagnostics[before:]):
        return None
    size = {key: given[key].si if key in given else 0.0 for key in FORCES}
    return StressRequest(
        name=block.target.name,
        section=thing.result,
        model=model,
        forces=Forces(size["N"], size["M"], size["M_lat"]),
        V=size["V"],
        V_lat=size["V_lat"],
        T=size["T"],
        forces_given=given,
        f_y=values["f_y"],
        E=E,
        limit=values["limit"],
        radius=radius,
        centre=_centre(block),
        points=points,
    )


def _model(block: StressBlock) -> Model:
    """Return the model; the language has read its word already."""
    setting = block.setting("model")
    word = setting.value.dotted if setting is not None and isinstance(setting.value, Name) else "elastic"
    return cast("Model", word)


def _centre(block: StressBlock) -> Side:
    setting = block.setting("centre")
    top = setting is not None and isinstance(setting.value, Name) and setting.value.dotted == "top"
    return "top" if top else "bottom"


def _forces(block: StressBlock, model: Model, scope: Scope) -> dict[str, Measure] | None:
    """Return the forces written; report those that the model does not take, unless they are zero."""
    found: dict[str, Measure] = {}
    complete = True
    for key, kind in FORCES.items():
        setting = block.setting(key)
        if setting is None:
            continue
        value = quantity_of(setting.value, kind, scope)
        why = _NOT_TAKEN[model].get(key)
        if value is None:
            complete = False
        elif why is not None and value.si != 0.0:
            complete = False
            scope.report.error(
                "not-in-model",
                setting.span,
                f"'{plain(key)}' is not taken by the model '{model}'",
                label=shown(value, scope).text,
                hint=f"{why}: use a second stress block for it",
            )
        elif why is None:
            found[key] = value
    if complete and not found:
        scope.report.error(
            "force-missing",
            block.head_span,
            f"the stress '{plain(block.target.name)}' has no force",
            hint=f"give at least one of {', '.join(k for k in FORCES if k not in _NOT_TAKEN[model])}",
        )
        return None
    return found if complete else None


def _positive(block: StressBlock, key: str, kind: str, scope: Scope) -> Measure | None:
    """Return an optional setting that must be positive."""
    setting = block.setting(key)
    if setting is None:
        return None
    value = quantity_of(setting.value, kind, scope)
    if value is not None and value.si <= 0.0:
        scope.report.error(
            "not-positive",
            setting.value.span,
            f"'{key}' must be positive",
            label=shown(value, scope).text,
        )
        return None
    return value


def _modulus(
    block: StressBlock, given: Measure | None, section: SectionResult, scope: Scope
) -> Measure | None:
    """Return the modulus of the reference stress; a section that has one takes no other."""
    if section.modulus is None:
        return given
    own = from_si(section.modulus, "Pa").shown_in(None)
    setting = block.setting("E")
    if given is not None and setting is not None and not math.isclose(given.si, own.si, rel_tol=1e-9):
        scope.report.error(
            "modulus-differs",
            setting.value.span,
            f"the section '{plain(section.name)}' has the modulus {shown(own, scope).text}",
            label=shown(given, scope).text,
            hint="leave E out: the section says it already",
        )
    return own


def _radius(block: StressBlock, model: Model, scope: Scope) -> float | None:
    """Return the radius of a curved bar; `R_c` and `centre` belong to that model alone."""
    written = [s for key in ("R_c", "centre") if (s := block.setting(key)) is not None]
    if model != "curved":
        for setting in written:
            _not_in_model(setting, model, scope)
        return None
    missing = [key for key in ("R_c", "centre") if block.setting(key) is None]
    if missing:
        scope.report.error(
            "setting-missing",
            block.head_span,
            f"the model 'curved' needs {' and '.join(missing)}",
            hint="R_c is the radius of the centroidal line, centre (bottom or top) the side on which "
            "the centre of curvature lies",
        )
    value = _positive(block, "R_c", "length", scope)
    return None if value is None else value.si


def _not_in_model(setting: StressSetting, model: Model, scope: Scope) -> None:
    scope.report.error(
        "not-in-model",
        setting.span,
        f"'{plain(setting.key.name)}' is not taken by the model '{model}'",
        hint="write model = curved for a bar with a curved axis",
    )


def _points(block: StressBlock, taken: frozenset[str], scope: Scope) -> dict[str, Point] | None:
    """Return the named points; a name may not be that of a result."""
    points: dict[str, Point] = {}
    complete = True
    for line in block.points:
        x, y = si(line.point.x, "length", scope), si(line.point.y, "length", scope)
        name = line.target.name
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
