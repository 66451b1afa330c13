"""Evaluated beams -> drawings in the units shown: one with the loads, one for each group of combinations."""

from __future__ import annotations

from calcgen.evaluation.results.beam import BeamResult, GroupResult
from calcgen.figures.adapt_beam_diagrams import diagram_of
from calcgen.figures.adapt_beam_loads import cases_of
from calcgen.figures.adapt_beam_supports import parts_of, per_metre, stretches_of, supports_of
from calcgen.figures.beam import BeamDrawing
from calcgen.mechanics.beam import PLANES, Plane
from calcgen.quantities.display import Style
from calcgen.quantities.symbols import plain


def beam_drawings(beam: BeamResult, ident: str, style: Style) -> tuple[BeamDrawing, ...]:
    """Return the drawings of a beam: loading with the first group, then each further group."""
    drawings = []
    for number, group in enumerate(beam.groups):
        for plane in PLANES:
            suffix = "_lat" if plane == "lateral" else ""
            if suffix and not _active(group):
                continue
            cases = cases_of(beam, plane, style) if number == 0 else ()
            drawings.append(
                BeamDrawing(
                    ident=f"{ident}-{group.name}{suffix}",
                    title=_title(beam, group, plane),
                    start=0.0,
                    end=beam.model.length * per_metre(style),
                    supports=supports_of(beam, suffix, style),
                    cases=cases,
                    diagrams=tuple(diagram_of(beam, group, q, suffix, style) for q in ("V", "M", "w")),
                    stretches=stretches_of(beam, style, suffix),
                    hinges=tuple(x * per_metre(style) for x in beam.model.hinges),
                    note=_note(beam, group),
                    caption=_caption(beam, plane),
                    parts=parts_of(beam, style, suffix),
                )
            )
    return tuple(drawings)


def _title(beam: BeamResult, group: GroupResult, plane: Plane) -> str:
    title = f"beam {plain(beam.name)}"
    if group.name:
        title += f", {plain(group.name)}"
    return title if plane == "vertical" else f"{title}: sideways"


def _caption(beam: BeamResult, plane: Plane) -> str:
    """Say of which section the beam is, from where it is seen, and that its principal axes are inclined."""
    names = set(beam.section_names)
    said = [f"section {plain(next(iter(names)))}"] if len(names) == 1 and "" not in names else []
    if plane == "lateral":
        said.append("seen from above: to the right is drawn downwards")
    if beam.model.coupled:
        said.append("bends about its inclined principal axes, sideways under vertical load too")
    return "; ".join(said)


def _note(beam: BeamResult, group: GroupResult) -> str:
    """Return the combinations of the group with their factors; of a standard set how many there are."""
    if not group.name:
        return "all cases act together"
    sets = [each for each in beam.sets if each.group == group.name]
    texts = [
        f"{plain(s.combinations[0].name)} to {plain(s.combinations[-1].name)}: {s.name}"
        if len(s.combinations) > 1
        else f"{plain(s.combinations[0].name)}: {s.name}"
        for s in sets
    ]
    generated = {c.name for s in sets for c in s.combinations}
    for c in group.combinations:
        if c.name in generated:
            continue
        terms = " + ".join(f"{factor:g}·{plain(case)}" for case, factor in c.factors.items())
        texts.append(f"{plain(c.name)} = {terms.replace('+ -', '− ')}")
    return "; ".join(texts)


def _active(group: GroupResult) -> bool:
    return any(r.name == "M_max_lat" for r in group.results)
