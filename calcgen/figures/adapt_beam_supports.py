"""Supports, lengths and stiffness of an evaluated beam, as its figures show them."""

from __future__ import annotations

from collections.abc import Iterable
from itertools import pairwise

from calcgen.evaluation.blocks.beam_lines import length_text
from calcgen.evaluation.results.beam import BeamResult
from calcgen.figures.beam import Part, Stretch
from calcgen.figures.beam_supports import Kind, Support
from calcgen.mechanics.beam import RIGID, Plane
from calcgen.mechanics.beam import Support as Restraints
from calcgen.quantities.display import Style, show
from calcgen.quantities.measure import from_si, magnitude_in
from calcgen.quantities.symbols import plain


def per_metre(style: Style) -> float:
    """Return how many of the unit of length shown make a metre."""
    return magnitude_in(from_si(1.0, "m"), _unit(style))


def place_text(x: float, style: Style) -> str:
    """Return a place or length, m, as read: '2.5 m', without trailing zeros."""
    return length_text(x, style, _unit(style))


def _unit(style: Style) -> str:
    return "ft" if style.system == "US" else "m"


def supports_of(beam: BeamResult, suffix: str, style: Style) -> tuple[Support, ...]:
    """Return the supports that act in a plane, each with its number, its springs and how it settles."""
    lateral = suffix != ""
    plane: Plane = "lateral" if lateral else "vertical"
    found = []
    row = zip(beam.model.supports, beam.support_kinds, beam.support_notes, strict=True)
    for number, (support, word, notes) in enumerate(row, start=1):
        force, rotation = support.restraints(plane)
        if not force and not rotation:
            continue
        lines = [str(number), *_springs(force, rotation, style), notes[lateral]]
        found.append(
            Support(
                support.x * per_metre(style),
                _kind(support, plane, word),
                "\n".join(line for line in lines if line),
                turning=0.0 < rotation < RIGID,
            )
        )
    return tuple(found)


def _kind(support: Restraints, plane: Plane, word: str) -> Kind:
    """Return the symbol of a support in a plane, where it may hold in another way than its word says."""
    force, rotation = support.restraints(plane)
    if rotation == RIGID:
        return "fixed"
    if not force:
        return "turning"
    if force < RIGID:
        return "spring"
    return "roller" if word == "roller" else "pin"


def _springs(force: float, rotation: float, style: Style) -> Iterable[str]:
    stiff = {"SI": (("kN/mm", 1e6), ("kN/m", 0.0)), "US": (("kip/in", 0.0),)}[style.system]
    if 0.0 < force < RIGID:
        unit = next(unit for unit, least in stiff if force >= least)
        yield show(from_si(force, "N/m").shown_in(unit), style).text
    if 0.0 < rotation < RIGID:
        moment = from_si(rotation, "N·m")
        yield f"{show(moment.shown_in(style.default_unit(moment.dimension)), style).text}/rad"


def stretches_of(beam: BeamResult, style: Style, suffix: str = "") -> tuple[Stretch, ...]:
    """Return the lengths between supports that hold the deflection in a plane, and to free ends."""
    model, factor = beam.model, per_metre(style)
    plane: Plane = "lateral" if suffix else "vertical"
    places = {0.0, *(s.x for s in model.supports if s.restraints(plane)[0]), model.length}
    return tuple(
        Stretch(a * factor, b * factor, place_text(b - a, style))
        for a, b in pairwise(sorted(places))
        if not model.same(a, b)
    )


def parts_of(beam: BeamResult, style: Style, suffix: str = "") -> tuple[Part, ...]:
    """Return the lengths of their own stiffness, none where it is the same all along."""
    stretches, factor = beam.model.stretches, per_metre(style)
    if len(stretches) < 2:
        return ()
    names = beam.section_names or ("",) * len(stretches)
    found = []
    for stretch, name in zip(stretches, names, strict=True):
        own = stretch.stiffness
        EI = from_si(own.vertical, "N·m²").shown_in(None)
        what = plain(name) if name else f"EI = {show(EI, style).text}"
        value = own.lateral if suffix and own.lateral is not None else own.vertical
        length = place_text(stretch.end - stretch.start, style)
        found.append(Part(stretch.start * factor, stretch.end * factor, f"{what}, {length}", value))
    return tuple(found)
