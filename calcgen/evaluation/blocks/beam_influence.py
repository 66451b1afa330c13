"""The influence lines that a beam block asks for: what they are of, and under which names they are read."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass

from calcgen.evaluation.blocks.beam_lines import Lines, is_result
from calcgen.language.blocks.beam import InfluenceLine
from calcgen.mechanics.beam import FREE, RIGID, BeamModel, Plane, Quantity
from calcgen.mechanics.beam.results import Side
from calcgen.mechanics.combinations import ReactionPart
from calcgen.mechanics.sought import AtPlace, OfSupport, Sought
from calcgen.quantities.symbols import plain
from calcgen.text import Related, Span


@dataclass(frozen=True)
class Wanted:
    """An influence line as asked for: `of` is what it is of, as read; `load` the plane of the unit load."""

    typed: InfluenceLine
    sought: Sought
    load: Plane
    of: str

    @property
    def name(self) -> str:
        """The author's name of it."""
        return self.typed.target.name


def influences_of(lines: Lines, model: BeamModel, groups: Mapping[str, Span]) -> tuple[Wanted, ...]:
    """Return the influence lines of the block; report names that are taken, and what the beam lacks.

    `groups` has the names of combinations and of their groups, with the lines that define them.
    """
    typed = lines.of(InfluenceLine)
    _keep_names_apart(lines, typed, groups)
    found: list[Wanted] = []
    for line in typed:
        own: Plane = "lateral" if line.lateral else "vertical"
        load: Plane = line.under or own
        if "lateral" in (own, load) and "lateral" not in model.planes:
            lines.fault(
                "beam",
                line.result_span,
                "what acts sideways needs the bending stiffness about the vertical axis",
                hint="give section and E instead of EI",
            )
            continue
        if own != load and not model.coupled:
            loaded, moved = ("a vertical", "sideways") if own == "lateral" else ("a sideways", "vertical")
            lines.fault(
                "beam",
                line.result_span,
                f"{loaded} load has no {moved} effect on this beam",
                hint="only a section bent about axes that are not principal ones couples the planes",
            )
            continue
        text = _name(line)
        if line.at is None:
            what = _of_support(lines, line, model)
        else:
            x, where = lines.place(line.at), f"{line.side} of" if line.side is not None else "at"
            place = lines.text(x, lines.unit_of(line.at))
            what = _at_place(lines, line, model, load, x, place)
            text += f" {where} {place}"
        if what is not None:
            text += "" if own == load else f" under a {load} load"
            found.append(Wanted(line, what, load, text))
    return tuple(found)


def _name(line: InfluenceLine) -> str:
    number = "" if line.number is None else f"_{line.number}"
    return plain(f"{line.symbol}{number}{'_lat' if line.lateral else ''}")


def readable(name: str) -> tuple[str, ...]:
    """Return the names under which an influence line is read."""
    extremes = (f"{name}_max", f"{name}_min", f"x_{name}_max", f"x_{name}_min")
    areas = (f"{name}_area", f"{name}_area_max", f"{name}_area_min")
    return (name, f"{name}_left", f"{name}_right", *extremes, *areas)


def _keep_names_apart(lines: Lines, typed: Sequence[InfluenceLine], groups: Mapping[str, Span]) -> None:
    """Report an influence line one of whose names is read as something else."""
    taken: dict[str, tuple[Span, tuple[str, ...]]] = {n: (span, (n,)) for n, span in groups.items()}
    for line in typed:
        target, own = line.target, readable(line.target.name)
        hidden = next((name for name in own if is_result(name)), None)
        if hidden is not None:
            hides = "is" if hidden == target.name else f"is read as '{hidden}' too, which is"
            lines.fault(
                "name-hides-result",
                target.span,
                f"'{target.name}' {hides} the name of a result of this block",
                hint="choose another name, such as η_1",
            )
        for other, (span, names) in taken.items():
            shared = next((name for name in own if name in names), None)
            if shared is not None:
                lines.fault(
                    "written-twice",
                    target.span,
                    f"'{shared}' would be read as a result of '{target.name}' and of '{other}'",
                    related=(Related(span, "here"),),
                    hint="choose another name for one of them",
                )
                break
        taken[target.name] = (target.span, own)


def _at_place(
    lines: Lines, line: InfluenceLine, model: BeamModel, load: Plane, x: float, text: str
) -> AtPlace | None:
    first, last = model.same(x, 0.0), model.same(x, model.length)
    if line.at is not None and ((first and line.side == "left") or (last and line.side == "right")):
        lines.fault(
            "outside-beam",
            line.at.span,
            f"nothing of the beam lies {line.side} of {text}",
            hint=f"write {line.symbol} at {text}",
        )
        return None
    sheared = line.symbol == "V" or (line.symbol == "slope" and model.shears)
    if line.at is not None and sheared and (first or last) and not _is_held(model, x, load):
        lines.fault(
            "beam",
            line.at.span,
            f"{line.symbol} at an end that is not held differs by whether the load stands on the very end",
            hint="write a place inside the beam",
        )
        return None
    side: Side = line.side or ("left" if last else "right")
    quantity: Quantity = f"{line.symbol}{'_lat' if line.lateral else ''}"  # type: ignore[assignment]
    return AtPlace(quantity, x, side)


def _is_held(model: BeamModel, x: float, plane: Plane) -> bool:
    """Tell whether a support that does not give way holds the beam at `x`."""
    return any(model.same(s.x, x) and s.restraints(plane)[0] == RIGID for s in model.supports)


def _of_support(lines: Lines, line: InfluenceLine, model: BeamModel) -> Sought | None:
    number, count = line.number or 0, len(model.supports)
    if number > count:
        lines.fault(
            "no-such-result",
            line.result_span,
            f"the beam has {count} support{'s' if count > 1 else ''}",
            hint="supports are numbered from the left, from 1",
        )
        return None
    support = model.supports[number - 1]
    held, turned = support.restraints("lateral" if line.lateral else "vertical")
    if line.symbol == "θ":
        last = model.same(support.x, model.length)
        quantity: Quantity = "rotation_lat" if line.lateral else "rotation"
        return AtPlace(quantity, support.x, "left" if last else "right")
    if (held if line.symbol == "R" else turned) == FREE:
        lacks = "does not hold the deflection" if line.symbol == "R" else "does not hold the rotation"
        sideways = " sideways" if line.lateral else ""
        lines.fault(
            "no-such-result",
            line.result_span,
            f"support {number} {lacks}{sideways}: it has no {'reaction' if line.symbol == 'R' else 'moment'}",
        )
        return None
    part: ReactionPart = "force" if line.symbol == "R" else "moment"
    if line.lateral:
        part = "force_lat" if line.symbol == "R" else "moment_lat"
    return OfSupport(number - 1, part)
