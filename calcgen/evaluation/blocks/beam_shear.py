"""`G`, `GA_s` and `shear_deformation` of a beam block -> whether shear deforms the beam, and how much.

With `shear_deformation` not written, shear is taken into account where GA_s is written, and where it is known
from G and the sections and the beam is too deep to leave it out.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, replace
from itertools import pairwise
from typing import Literal, TypeAlias

from calcgen.evaluation.blocks.beam_lines import Lines
from calcgen.evaluation.blocks.beam_stiffness import Property
from calcgen.evaluation.blocks.section import SectionThing
from calcgen.evaluation.conventions import PROPERTIES
from calcgen.language.blocks.beam import BeamSetting
from calcgen.mechanics.beam import NO_SHEAR, BeamModel, ShearStiffness
from calcgen.quantities.measure import Measure

SLENDER = 10.0  # span to depth from which shear deflection is commonly left out (common practice)

Asked: TypeAlias = Literal["yes", "no", "GA_s", "deep", "not"]
"""Why shear deforms the beam or not: written, GA_s given, the beam too deep, none of these."""


@dataclass(frozen=True)
class Lack:
    """Why the shear stiffness of a stretch is not known, with what would help."""

    code: str
    reason: str
    hint: str


@dataclass(frozen=True)
class ShearDeformation:
    """Whether shear deformation is taken into account.

    Attributes
    ----------
    other : the beam with the other choice, where its shear stiffness is known.
    lack : why the shear stiffness is not known, '' where it is.
    sideways : whether sideways shear deformation is known as well.
    """

    asked: Asked
    other: BeamModel | None
    lack: str
    sideways: bool
    included: bool


@dataclass(frozen=True)
class _Given:
    """A line `GA_s = …`, N, and where it holds, m."""

    start: float
    end: float
    value: float
    line: BeamSetting


def shear_stiffnesses(
    lines: Lines, properties: Sequence[Property], G: Measure | None
) -> tuple[list[Property], list[ShearStiffness | Lack]]:
    """Return the stretches, cut where a GA_s begins or ends, and the shear stiffness of each."""
    base, own = _given(lines)
    places = sorted({x for each in own for x in (each.start, each.end)})
    cut = [piece for p in properties for piece in _cut(p, places, 1e-9 * lines.length)]
    found: list[ShearStiffness | Lack] = []
    for p in cut:
        middle = (p.start + p.end) / 2
        given = next((each for each in (*own, *base) if each.start < middle < each.end), None)
        found.append(_of(p, given.value if given is not None else None, G, lines))
    return cut, found


def choose(
    lines: Lines,
    model: BeamModel,
    sections: Sequence[SectionThing],
    found: Sequence[ShearStiffness | Lack],
    written: BeamSetting | None,
    *,
    wanted: bool,
) -> tuple[BeamModel, ShearDeformation]:
    """Decide whether shear deforms the beam; report what is missing where it was asked for.

    `model` is the beam without; `wanted` is what `written` says.
    """
    known = [each for each in found if isinstance(each, ShearStiffness)]
    lacks = [each for each in found if isinstance(each, Lack)]
    ratio = slenderness(model, sections)
    asked: Asked = "not"
    if written is not None:
        asked = "yes" if wanted else "no"
    elif given := [line for line in lines.of(BeamSetting) if line.key.name == "GA_s"]:
        asked, written = "GA_s", given[0]
    elif ratio is not None and ratio < SLENDER:
        asked = "deep"
    sideways = all(each.lateral < NO_SHEAR.lateral for each in known)
    if written is not None and asked != "no":
        for lack in dict.fromkeys(lacks):
            lines.fault(
                lack.code, written.span, f"shear deformation is asked for, but {lack.reason}", hint=lack.hint
            )
    if lacks:
        return model, ShearDeformation(asked, None, lacks[0].reason, sideways, included=False)
    stretches = tuple(replace(s, shear=k) for s, k in zip(model.stretches, known, strict=True))
    shearing = replace(model, stretches=stretches)
    if asked in ("yes", "GA_s", "deep"):
        return shearing, ShearDeformation(asked, model, "", sideways, included=True)
    return model, ShearDeformation(asked, shearing, "", sideways, included=False)


def slenderness(model: BeamModel, sections: Sequence[SectionThing]) -> float | None:
    """Return the ratio of the shortest span to the greatest depth; None without a section."""
    if not sections:
        return None
    lengths = [b - a for a, b in model.spans] or [model.length]
    return min(lengths) / max(s.result.bounds.height for s in sections)


def shear_modulus_of(lines: Lines, settings: Mapping[str, BeamSetting]) -> Measure | None:
    """Return the shear modulus, None where it is not given or wrong."""
    line = settings.get("G")
    return lines.positive(line, "stress", "the shear modulus") if line is not None else None


def _given(lines: Lines) -> tuple[list[_Given], list[_Given]]:
    """Return the GA_s of the whole beam, at most one, and those of stretches from left to right."""
    base: list[_Given] = []
    own: list[_Given] = []
    for line in lines.of(BeamSetting):
        if line.key.name != "GA_s":
            continue
        value = lines.positive(line, "force", "the shear stiffness")
        start = lines.place(line.start) if line.start is not None else 0.0
        end = lines.place(line.end) if line.end is not None else lines.length
        if line.start is not None and end - start <= 1e-9 * lines.length:
            lines.fault("no-length", line.span, "the stretch has no length")
        if value is not None:
            (base if line.start is None else own).append(_Given(start, end, value.si, line))
    own.sort(key=lambda each: each.start)
    for before, after in pairwise(own):
        if after.start < before.end - 1e-9 * lines.length:
            lines.fault("stretches-overlap", after.line.span, "this stretch overlaps the one before it")
    return base, own


def _cut(p: Property, places: Sequence[float], least: float) -> list[Property]:
    inner = [x for x in places if p.start + least < x < p.end - least]
    ends = [p.start, *inner, p.end]
    return [replace(p, start=a, end=b) for a, b in pairwise(ends)]


def _of(p: Property, given: float | None, G: Measure | None, lines: Lines) -> ShearStiffness | Lack:
    """Return the shear stiffness of a stretch: GA_s as given, else G times the section's areas."""
    if p.section is None:
        if given is not None:
            return ShearStiffness(given)
        where = f"from {lines.text(p.start)} to {lines.text(p.end)}"
        return Lack(
            "stiffness-missing", f"the beam has no shear stiffness {where}", "add a line such as GA_s = 50 MN"
        )
    values = p.section.result.values
    lateral = values["A_s_h"] * G.si if G is not None and "A_s_h" in values else NO_SHEAR.lateral
    if given is not None:
        return ShearStiffness(given, lateral)
    if "A_s_v" not in values:
        return Lack("stiffness-missing", _no_area(p.section), "give the shear stiffness itself: GA_s = …")
    if G is None:
        return Lack("setting-missing", "the shear modulus G is not given", "add a line such as G = 81 GPa")
    return ShearStiffness(values["A_s_v"] * G.si, lateral)


def _no_area(section: SectionThing) -> str:
    name = next(p.name(section.axes) for p in PROPERTIES if p.key == "A_s_v")
    why = section.result.absent.get(name, "")
    return f"the section '{section.result.name}' has no area of shear deformation{f': {why}' if why else ''}"
