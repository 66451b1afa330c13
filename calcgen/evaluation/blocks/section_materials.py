"""`of`, `modulus`, `strength` and `reference` of a section block -> the material of each part and bars."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

from calcgen.evaluation.quantity import quantity_of
from calcgen.evaluation.scope import Scope
from calcgen.language.blocks.section import (
    BarsLine,
    MaterialLine,
    PartLine,
    ReferenceLine,
    SectionBlock,
    ShapeLine,
)
from calcgen.quantities.display import show
from calcgen.text import Span, nearest

APART = 1e9  # largest ratio of two moduli, or of two strengths
LEAST = 1e-3  # Pa: the smallest modulus or strength


@dataclass(frozen=True)
class Material:
    """A material: its name ('' where none is named), modulus and strength, Pa, where given."""

    name: str
    modulus: float | None
    strength: float | None


@dataclass(frozen=True)
class Materials:
    """The materials of a section.

    Attributes
    ----------
    of : the material of each part and of each line of bars, by name ('' is a section's one shape).
    reference : the one to which properties are transformed.
    """

    of: Mapping[str, Material]
    reference: Material

    @property
    def several(self) -> bool:
        """Whether the section has more than one material."""
        return len({m.name for m in self.of.values()}) > 1

    def factor(self, owner: str) -> float:
        """Return the modulus of a part or of bars over the reference modulus."""
        own, reference = self.of[owner].modulus, self.reference.modulus
        return own / reference if own is not None and reference is not None else 1.0

    def missing_strengths(self) -> tuple[str, ...]:
        """Return the materials without a strength."""
        return tuple(sorted({m.name for m in self.of.values() if m.strength is None}))


def materials_of(block: SectionBlock, scope: Scope) -> Materials | None:
    """Read the materials of a section; None where a line is at fault."""
    named = _named(block)
    wanted = _wanted(block, named, scope)
    moduli, strengths, complete = _values(block, named if wanted is not None else None, scope)
    if wanted is None or not complete:
        return None
    if len(named) > 1 and not _all_have_moduli(named, moduli, scope):
        return None
    reference = _reference(block, named, scope)
    if reference is None or not _comparable(block, scope):
        return None
    found = {
        name: Material(name, moduli.get(name), strengths.get(name)) for name in {*wanted.values(), reference}
    }
    return Materials({owner: found[name] for owner, name in wanted.items()}, found[reference])


def _named(block: SectionBlock) -> dict[str, Span]:
    """Return the materials of parts and bars in the order written, with the place of the first of each.

    Where none is named there, the materials that a modulus or strength is given for stand in.
    """
    named: dict[str, Span] = {}
    for line in block.items:
        if isinstance(line, PartLine | BarsLine) and line.material is not None:
            named.setdefault(line.material.name, line.material.span)
    if named:
        return named
    given = {i.material.name: i.material.span for i in block.items if isinstance(i, MaterialLine)}
    return given if len(given) == 1 else {}


def _wanted(block: SectionBlock, named: Mapping[str, Span], scope: Scope) -> dict[str, str] | None:
    """Return the material of each part and bars; report one that names none where there are several."""
    sole = next(iter(named), "") if len(named) < 2 else ""
    bars = any(isinstance(line, BarsLine) for line in block.items)
    wanted: dict[str, str] = {}
    complete = True
    for line in block.items:
        if isinstance(line, ShapeLine):
            owner, material = "", None
        elif isinstance(line, PartLine | BarsLine):
            owner, material = line.target.name, line.material
        else:
            continue
        if material is None and (bars or len(named) > 1):
            complete = False
            what = "the shape" if not owner else f"'{owner}'"
            write = "part NAME = … of MATERIAL" if not owner else "of and the material's name behind it"
            scope.report.error(
                "material-missing",
                line.target.span if isinstance(line, PartLine | BarsLine) else line.span,
                f"{what} does not say of which material it is",
                hint=f"write {write}" + (f"; here are {', '.join(named)}" if named else ""),
            )
        wanted[owner] = material.name if material is not None else sole
    return wanted if complete else None


def _values(
    block: SectionBlock, named: Mapping[str, Span] | None, scope: Scope
) -> tuple[dict[str, float], dict[str, float], bool]:
    """Return moduli and strengths by material, Pa, and whether all could be read.

    Where it is not known which materials there are (None), nothing is said of one without a part.
    """
    values: dict[str, dict[str, float]] = {"modulus": {}, "strength": {}}
    complete = True
    for line in block.items:
        if not isinstance(line, MaterialLine):
            continue
        name, key = line.material.name, line.key.name
        if named is not None and name not in named:
            found = nearest(name, named)
            scope.report.warning(
                "material-unused",
                line.material.span,
                f"no part is of '{name}'",
                hint=f"the nearest material is '{found}'" if found else "a part names it: part … of MATERIAL",
            )
        value = quantity_of(line.value, "stress", scope)
        if value is None:
            complete = False
        elif value.si <= 0.0:
            complete = False
            scope.report.error(
                "not-positive",
                line.value.span,
                f"the {key} of '{name}' must be positive",
                label=f"{key} {show(value, scope.style).text}",
            )
        else:
            values[key][name] = value.si
    return values["modulus"], values["strength"], complete


def _comparable(block: SectionBlock, scope: Scope) -> bool:
    """Report moduli, or strengths, beside which another has no digits left."""
    for key in ("modulus", "strength"):
        given = [
            (value, line)
            for line in block.items
            if isinstance(line, MaterialLine) and line.key.name == key
            for value in [quantity_of(line.value, "stress", scope)]
            if value is not None
        ]
        if not given:
            continue
        least, most = (pick(given, key=lambda each: each[0].si) for pick in (min, max))
        if most[0].si <= APART * least[0].si and least[0].si >= LEAST:
            continue
        scope.report.error(
            "too-far-apart",
            least[1].value.span,
            f"the {key} of '{least[1].material.name}' is too small to be computed with",
            label=show(least[0], scope.style).text,
            hint=f"beside {show(most[0], scope.style).text} it has no digits left"
            if len(given) > 1
            else "a unit or a power of ten may be wrong",
        )
        return False
    return True


def _all_have_moduli(named: Mapping[str, Span], moduli: Mapping[str, float], scope: Scope) -> bool:
    missing = [name for name in named if name not in moduli]
    for name in missing:
        scope.report.error(
            "modulus-missing",
            named[name],
            f"the material '{name}' has no modulus of elasticity",
            hint=f"a section of several materials needs the modulus of each: modulus {name} = …",
        )
    return not missing


def _reference(block: SectionBlock, named: Mapping[str, Span], scope: Scope) -> str | None:
    """Return the reference material; the only one where there is one, '' where none is named."""
    line = next((i for i in block.items if isinstance(i, ReferenceLine)), None)
    if line is None:
        if len(named) < 2:
            return next(iter(named), "")
        scope.report.error(
            "reference-missing",
            block.head_span,
            "a section of several moduli needs a reference material",
            hint=f"write {' or '.join(f'reference = {name}' for name in named)}",
        )
        return None
    name = line.material.name
    if name in named:
        return name
    found = nearest(name, named)
    hint = f"the nearest is '{found}'" if found else f"here are {', '.join(named) or 'no materials'}"
    scope.report.error(
        "unknown-material", line.material.span, f"'{name}' is no material of this section", hint=hint
    )
    return None
