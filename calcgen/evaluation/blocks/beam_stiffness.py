"""`section`, `E` and `EI` of a beam block -> the stiffness of each stretch."""

from __future__ import annotations

from dataclasses import dataclass, replace

from calcgen.evaluation.blocks.beam_lines import Lines
from calcgen.evaluation.blocks.section import SectionThing, section_named
from calcgen.language.blocks.beam import (
    BeamSetting,
)
from calcgen.mechanics.beam import (
    BendingStiffness,
)
from calcgen.quantities.display import show
from calcgen.quantities.measure import Measure, from_si


@dataclass(frozen=True)
class Property:
    """A stretch's stiffness: a section with its modulus, Pa, or EI."""

    start: float
    end: float
    section: SectionThing | None
    E: float | None
    EI: float | None


def modulus_of(lines: Lines, line: BeamSetting | None) -> Measure | None:
    """Return the modulus of elasticity, None where it is not given or wrong."""
    return lines.positive(line, "stress", "the modulus of elasticity") if line is not None else None


def properties_of(lines: Lines, E: Measure | None) -> list[Property]:
    """Return the stretches from left to right; a line with 'from … to …' stands before one without."""
    base: Property | None = None
    own: list[tuple[Property, BeamSetting]] = []
    for line in lines.of(BeamSetting):
        if line.key.name not in ("section", "EI"):
            continue
        start = lines.place(line.start) if line.start is not None else 0.0
        end = lines.place(line.end) if line.end is not None else lines.length
        section = section_named(line.value, lines.scope) if line.key.name == "section" else None
        EI = None
        if line.key.name == "EI":
            EI = lines.number(line.value, "bending stiffness")
            lines.is_positive(EI, line.value, "the bending stiffness")
        found = Property(start, end, section, _modulus(lines, line, section, E), EI)
        if line.start is None:
            if base is not None and (base.EI is not None) != (EI is not None):
                lines.fault(
                    "written-twice", line.span, "'EI' stands for 'section' and 'E': give one of the two"
                )
            base = found
        elif end - start <= 1e-9 * lines.length:
            lines.fault("no-length", line.span, "the stretch has no length")
        else:
            own.append((found, line))
    return _cover(lines, base, own)


def _modulus(
    lines: Lines, line: BeamSetting, section: SectionThing | None, E: Measure | None
) -> float | None:
    """Return the modulus of a stretch: the section's reference modulus, or the beam's E, which must agree."""
    if line.key.name == "EI":
        return None
    if section is None:
        lines.failed = True
        return None
    given = next((s for s in lines.of(BeamSetting) if s.key.name == "E"), None)
    own = section.result.modulus
    if own is None and given is None:
        lines.fault(
            "modulus-missing",
            line.span,
            "a beam with a section needs the modulus of elasticity",
            hint="add a line such as E = 210 GPa",
        )
    if own is not None and E is not None and given is not None and abs(E.si - own) > 1e-9 * own:
        shown = show(from_si(own, "Pa").shown_in(None), lines.scope.style).text
        lines.fault(
            "modulus-differs",
            given.value.span,
            f"the modulus of the section '{section.result.name}' is {shown}",
            hint="leave this line out: E is by default the section's reference modulus",
        )
    return own if own is not None else E.si if E is not None else None


def common_modulus(properties: list[Property], E: Measure | None) -> Measure | None:
    """Return the modulus of the beam: E where it is given, else that of its sections where they agree."""
    moduli = {p.E for p in properties if p.E is not None}
    return from_si(moduli.pop(), "Pa").shown_in(None) if E is None and len(moduli) == 1 else E


def _cover(lines: Lines, base: Property | None, own: list[tuple[Property, BeamSetting]]) -> list[Property]:
    own.sort(key=lambda item: item[0].start)
    row: list[Property] = []
    x, least = 0.0, 1e-9 * lines.length
    for stretch, line in own:
        if stretch.start < x - least:
            lines.fault("stretches-overlap", line.span, "this stretch overlaps the one before it")
        if stretch.start > x + least and base is not None:
            row.append(replace(base, start=x, end=stretch.start))
        elif stretch.start > x + least:
            _uncovered(lines, x, stretch.start)
        row.append(stretch)
        x = stretch.end
    if x < lines.length - least and base is not None:
        row.append(replace(base, start=x, end=lines.length))
    elif x < lines.length - least:
        _uncovered(lines, x, lines.length)
    return row


def _uncovered(lines: Lines, start: float, end: float) -> None:
    if not lines.failed:
        lines.fault(
            "stiffness-missing",
            lines.block.head_span,
            f"the beam has no stiffness from {lines.text(start)} to {lines.text(end)}",
            hint="add section = … and E = …, or EI = …",
        )


def stiffness_of(p: Property, *, restrained: bool) -> BendingStiffness:
    """Return the bending stiffness of a stretch, with the section's values in force.

    A section off its principal axes that is free to bend about them takes all three second moments from the
    outline: a catalogue publishes no product moment, and values of two origins make no consistent set.
    """
    if p.section is None or p.E is None:
        return BendingStiffness(p.EI or 0.0)
    own, values = p.section.result.computed, p.section.result.values
    if own.I_hv != 0.0 and not restrained:
        return BendingStiffness.of_section(p.E, own.I_h, own.I_v, own.I_hv)
    return BendingStiffness.of_section(p.E, values["I_h"], values["I_v"], own.I_hv, restrained=restrained)
