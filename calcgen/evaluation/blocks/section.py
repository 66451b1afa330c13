"""`section NAME`: one shape or several parts, holes and bars; its properties, and both routes to them."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass

from calcgen.evaluation.blocks.section_materials import materials_of
from calcgen.evaluation.blocks.section_parts import layout_of
from calcgen.evaluation.blocks.section_properties import section_result
from calcgen.evaluation.conventions import DIMENSIONS, Axes, names, other, translation
from calcgen.evaluation.results.common import Plain, Result
from calcgen.evaluation.results.section import SectionResult
from calcgen.evaluation.scope import Scope
from calcgen.language.blocks.section import BarsLine, HoleLine, PartLine, SectionBlock
from calcgen.language.calc import FailedBlock
from calcgen.language.nodes import Expression, Name
from calcgen.profiles.catalogue import Catalogue
from calcgen.quantities.measure import Measure
from calcgen.quantities.symbols import plain
from calcgen.text import Report, Span, nearest


@dataclass(frozen=True)
class SectionThing:
    """A section in the scope: its properties by the names of the project's axes."""

    result: SectionResult
    axes: Axes
    kind: str = "section"

    def read(self, name: Name, arguments: tuple[Plain, ...] | None, report: Report) -> Measure | None:
        """Return a property, of the section or of a part; report an unknown one.

        One of the other convention is answered with the name to use here.
        """
        wanted, span = name.parts[1], name.spans[1]
        if len(name.parts) == 3 and arguments is None:
            return self._of_part(name, report)
        known = (*self.result.results, *self.result.further)
        found = next((r for r in known if r.name == wanted), None)
        if found is not None and arguments is None and len(name.parts) == 2:
            return found.value
        if wanted in self._owners and len(name.parts) == 2:
            report.error(
                "block-is-no-value",
                span,
                f"'{plain(wanted)}' is a part, not a value",
                hint=f"name one of its properties after a dot: {name.dotted}.…",
            )
            return None
        self._missing(wanted, span, known, report)
        return None

    @property
    def _owners(self) -> dict[str, tuple[Result, ...]]:
        """The results of each part and of each line of bars, by name."""
        return {owner.name: owner.results for owner in self.result.owners if owner.name}

    def _of_part(self, name: Name, report: Report) -> Measure | None:
        _, owner, wanted = name.parts
        if owner not in self._owners:
            found = nearest(owner, self._owners)
            parts = ", ".join(self._owners)
            hint = f"parts are {parts}" if parts else "it has no parts with names"
            report.error(
                "no-such-result",
                name.spans[1],
                f"the section '{plain(self.result.name)}' has no part '{plain(owner)}'",
                hint=f"the nearest is '{found}'" if found else hint,
            )
            return None
        results = self._owners[owner]
        found_result = next((r for r in results if r.name == wanted), None)
        if found_result is None:
            self._missing(wanted, name.spans[2], results, report, of=f"the part '{plain(owner)}'")
            return None
        return found_result.value

    def _missing(
        self, wanted: str, span: Span, known: Iterable[Result], report: Report, of: str = "a section"
    ) -> None:
        foreign = translation(wanted, self.axes)
        if foreign is not None:
            report.error(
                "other-convention",
                span,
                f"'{plain(wanted)}' is a name of the {other(self.axes)} axes, here they are {self.axes}",
                hint=f"write {foreign.name(self.axes)}: {foreign.meaning}",
            )
            return
        if wanted in self.result.absent and of == "a section":
            report.error(
                "no-such-result", span, f"'{plain(wanted)}' of this section: {self.result.absent[wanted]}"
            )
            return
        possible = [r.name for r in known]
        found = nearest(wanted, possible)
        hint = f"the nearest property is '{found}'" if found else f"properties are {', '.join(possible)}"
        report.error("no-such-result", span, f"{of} has no property '{plain(wanted)}'", hint=hint)


def evaluate_section(
    block: SectionBlock, scope: Scope, axes: Axes, catalogue: Catalogue
) -> SectionResult | FailedBlock:
    """Build the section, its properties and their second route, and define its name."""
    name = block.target.name
    free = scope.define(block.target)
    named = _names_are_free(block, scope, axes)
    layout = layout_of(block, scope, catalogue)
    materials = materials_of(block, scope)
    if layout is None or materials is None or not named or not free:
        if free:
            scope.failed.add(name)
        return FailedBlock("section", block.span)
    result = section_result(block, layout, materials, scope, axes)
    scope.things[name] = SectionThing(result, axes)
    return result


def _names_are_free(block: SectionBlock, scope: Scope, axes: Axes) -> bool:
    """Report names in the block that hide a property of the section."""
    free = True
    for line in block.items:
        if isinstance(line, PartLine | HoleLine | BarsLine):
            name = line.target.name
            found = names(axes).get(name)
            meaning = found.meaning if found is not None else DIMENSIONS.get(name)
            if meaning is not None:
                free = False
                section = block.target.name
                scope.report.error(
                    "name-hides-result",
                    line.target.span,
                    f"'{plain(name)}' is the name of a property of sections",
                    hint=f"{section}.{name} reads the {meaning} of the section; "
                    f"choose another name, such as {name}_1",
                )
    return free


def section_named(node: Expression, scope: Scope) -> SectionThing | None:
    """Return the section that an expression names; report anything else."""
    if not isinstance(node, Name) or len(node.parts) > 1 or node.arguments is not None:
        scope.report.error("not-a-section", node.span, "the name of a section is needed here")
        return None
    head = node.parts[0]
    if head in scope.failed:
        return None
    thing = scope.things.get(head)
    if isinstance(thing, SectionThing):
        return thing
    sections = [n for n, t in scope.things.items() if isinstance(t, SectionThing)]
    found = nearest(head, sections)
    if thing is not None:
        hint = f"it is a {thing.kind}"
    elif head in scope.later:
        hint = "a section is defined above the block that uses it"
    elif found:
        hint = f"the nearest section is '{found}'"
    else:
        hint = f"sections defined above: {', '.join(sections)}" if sections else "no section is defined above"
    scope.report.error(
        "not-a-section", node.span, f"'{plain(head)}' is not a section defined above", hint=hint
    )
    return None
