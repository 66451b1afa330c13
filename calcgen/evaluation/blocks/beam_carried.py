"""What a beam cannot carry, found at the line that asks for it."""

from __future__ import annotations

from calcgen.evaluation.blocks.beam_lines import Lines
from calcgen.language.blocks.beam import LoadLine, SupportLine
from calcgen.mechanics.beam import BeamModel, Plane

SIDEWAYS = "what acts sideways needs the bending stiffness about the vertical axis"


def require_carried(lines: Lines, model: BeamModel) -> None:
    """Report sideways loads without stiffness, couples at hinges, and settlements of what holds nothing."""
    for line in lines.of(LoadLine):
        if line.plane == "lateral" and "lateral" not in model.planes:
            lines.fault("beam", line.statement_span, SIDEWAYS, hint="give section and E instead of EI")
        if line.kind == "moment" and line.at is not None:
            x = lines.place(line.at)
            if any(model.same(x, hinge) for hinge in model.hinges):
                lines.fault(
                    "beam",
                    line.at.span,
                    "a couple at a hinge does not tell on which side of it it acts",
                    hint="write a place just left or right of the hinge",
                )
    for settling in (line for line in lines.of(SupportLine) if line.settles is not None):
        _require_held(lines, settling, model)


def _require_held(lines: Lines, line: SupportLine, model: BeamModel) -> None:
    plane: Plane = "lateral" if line.plane == "lateral" else "vertical"
    support = next(s for s in model.supports if model.same(s.x, lines.place(line.at)))
    if plane not in model.planes:
        lines.fault("beam", line.span, SIDEWAYS, hint="give section and E instead of EI")
    elif line.settles is not None and support.restraints(plane)[0] == 0.0:
        lines.fault("beam", line.settles.span, "a support that does not hold the beam cannot settle")
