"""The properties of a section, in SI by their keys, as named results in the units shown."""

from __future__ import annotations

import math
from collections.abc import Mapping, Sequence

from calcgen.evaluation.blocks.section_findings import Findings
from calcgen.evaluation.conventions import DIMENSIONS, HORIZONTAL, PROPERTIES, VERTICAL, Axes, PropertyName
from calcgen.evaluation.results.common import Result
from calcgen.evaluation.results.section import Published
from calcgen.mechanics.composite import PartModuli
from calcgen.mechanics.outline import Outline
from calcgen.mechanics.section import Inertia
from calcgen.quantities.display import KINDS, Style, show
from calcgen.quantities.measure import Measure, from_si, measure

_PART_MEANINGS = {
    "A": "area of the part alone",
    "I_h": f"second moment of the part alone, {HORIZONTAL} through its own centroid",
    "I_v": f"second moment of the part alone, {VERTICAL} through its own centroid",
    "W_el_h": f"modulus {HORIZONTAL} of the whole section for this part, the smaller",
    "W_el_h_top": f"modulus {HORIZONTAL} of the whole section for the top fibre of this part",
    "W_el_h_bottom": f"modulus {HORIZONTAL} of the whole section for the bottom fibre of this part",
    "W_el_v": f"modulus {VERTICAL} of the whole section for this part, the smaller",
}
"""Properties of a part by their keys: a bending moment over its modulus is the stress in the part."""


def property_results(found: Findings, style: Style, axes: Axes) -> tuple[Result, ...]:
    """Return the properties that have a value, in the order of `PROPERTIES`."""
    return tuple(
        Result(p.name(axes), p.meaning, value, show(value, style), provenance=_route(p, found, style))
        for p in PROPERTIES
        if p.key in found.values and p.name(axes)
        for value in [_measure(p, found.values[p.key], style)]
    )


def _route(p: PropertyName, found: Findings, style: Style) -> str:
    """Return where a value comes from, and what another route gives."""
    text = found.provenance.get(p.key, "")
    if p.key not in found.beside:
        return text
    label, value = found.beside[p.key]
    return f"{text}; {label} {show(_measure(p, value, style), style).number}"


def part_results(
    own: Inertia, moduli: PartModuli, material: tuple[Result, ...], style: Style, axes: Axes
) -> tuple[Result, ...]:
    """Return the properties of one part of a section; a fibre level with the centroid has no modulus."""
    values = {key: float(getattr(own if hasattr(own, key) else moduli, key)) for key in _PART_MEANINGS}
    return material + tuple(
        Result(p.name(axes), _PART_MEANINGS[p.key], value, show(value, style))
        for p in PROPERTIES
        if math.isfinite(values.get(p.key, math.inf))
        for value in [_measure(p, values[p.key], style)]
    )


def bars_results(area: float, material: tuple[Result, ...], style: Style, axes: Axes) -> tuple[Result, ...]:
    """Return what can be read of bars: their material, and their area, m², together."""
    p = next(p for p in PROPERTIES if p.key == "A")
    value = _measure(p, area, style)
    return (*material, Result(p.name(axes), "area of these bars together", value, show(value, style)))


def material_results(
    factor: float | None, modulus: float | None, strength: float | None, style: Style
) -> tuple[Result, ...]:
    """Return what is given of a material, Pa; `factor` is None in a section of one material."""
    found = []
    if modulus is not None:
        found.append(("E", "modulus of elasticity", from_si(modulus, "Pa").shown_in(None)))
    if factor is not None:
        found.append(("n", "modulus over that of the reference material", measure(factor, None)))
    if strength is not None:
        found.append(("f", "strength", from_si(strength, "Pa").shown_in(None)))
    return tuple(Result(name, meaning, value, show(value, style)) for name, meaning, value in found)


def dimension_results(dimensions: Mapping[str, float], shape: str, style: Style) -> tuple[Result, ...]:
    """Return a shape's dimensions by symbol, with `d` beside `h` and `b_f` beside `b`."""
    known = {k: v for k, v in dimensions.items() if k in DIMENSIONS}
    if "h" in known:
        known.setdefault("d", known["h"])
    if "b" in known and shape in ("i_shape", "channel", "tee"):
        known.setdefault("b_f", known["b"])
    unit = "in" if style.system == "US" else "mm"
    values = {k: from_si(v, "m").shown_in(unit) for k, v in known.items()}
    return tuple(Result(k, DIMENSIONS[k], v, show(v, style)) for k, v in values.items())


def overall_results(outlines: Sequence[Outline], style: Style) -> tuple[Result, ...]:
    """Return depth and width of the box around a section of several parts."""
    boxes = [outline.bounds for outline in outlines]
    height = max(box.top for box in boxes) - min(box.bottom for box in boxes)
    width = max(box.right for box in boxes) - min(box.left for box in boxes)
    return dimension_results({"h": height, "b": width}, "", style)


def published_rows(found: Findings, style: Style, axes: Axes) -> tuple[Published, ...]:
    """Return each value of a catalogue beside the outline's own, where there is one."""
    published, own = found.published, found.own
    return tuple(
        Published(
            p.name(axes),
            show(_measure(p, published[p.key], style), style),
            show(_measure(p, own[p.key], style), style),
            (own[p.key] - published[p.key]) / abs(published[p.key]),
            found.tolerances.get(p.key, math.inf),
        )
        for p in PROPERTIES
        if p.key in published and p.key in own and published[p.key] != 0.0 and p.name(axes)
    )


def _measure(p: PropertyName, value: float, style: Style) -> Measure:
    """Return a property's value, given in SI, in the unit it is shown in."""
    unit = p.units[1 if style.system == "US" else 0]
    si_unit = KINDS.get(p.kind)
    return from_si(value, si_unit).shown_in(unit) if si_unit else measure(value, unit)
