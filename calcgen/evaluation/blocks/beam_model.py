"""The lines of a beam block -> the model and loads of mechanics."""

from __future__ import annotations

import math
from collections.abc import Mapping
from dataclasses import dataclass

from calcgen.evaluation.blocks.section import SectionThing, section_named
from calcgen.evaluation.formulas import Evaluator
from calcgen.evaluation.quantity import quantity_of, si
from calcgen.evaluation.results import LoadRow
from calcgen.evaluation.scope import Scope
from calcgen.language.blocks.beam import (
    BeamBlock,
    BeamSetting,
    CaseLine,
    CombinationLine,
    HingeLine,
    LoadLine,
    SpanLine,
    SupportLine,
)
from calcgen.language.nodes import Expression, Named
from calcgen.mechanics.beam import (
    FREE,
    RIGID,
    BeamModel,
    BendingStiffness,
    DistributedLoad,
    DistributedMoment,
    Load,
    Plane,
    PointLoad,
    PointMoment,
    Settlement,
    Stretch,
    Support,
)
from calcgen.quantities.display import Style, show
from calcgen.quantities.measure import Measure, from_si
from calcgen.text import Related, Span, nearest


@dataclass(frozen=True)
class Combination:
    """A combination's name, its group ('' where none is written) and the factor of each case."""

    name: str
    group: str
    factors: Mapping[str, float]
    span: Span


@dataclass(frozen=True)
class BeamData:
    """A beam block in SI: the model, the loads of each case, and what the page shows beside them.

    `sections` holds the section of each stretch that has one; `depth` the greatest of their depths, m.
    """

    model: BeamModel
    cases: Mapping[str, tuple[Load, ...]]
    case_kinds: Mapping[str, str]
    rows: tuple[LoadRow, ...]
    combinations: tuple[Combination, ...]
    sections: tuple[SectionThing, ...]
    E: Measure | None
    restrained: BeamSetting | None
    is_restrained: bool
    spans: tuple[float, ...]


@dataclass(frozen=True)
class _Property:
    """A stretch's stiffness: a section with E, or EI."""

    start: float
    end: float
    section: SectionThing | None
    EI: float | None


def read_beam(block: BeamBlock, scope: Scope) -> BeamData | None:
    """Return the beam of a block; report every fault of its lines."""
    return _Reader(block, scope).read()


class _Reader:
    """Reads the lines of one block; faults are reported, and `failed` remembers that there was one."""

    def __init__(self, block: BeamBlock, scope: Scope) -> None:
        self.block, self.scope, self.report = block, scope, scope.report
        self.failed = False
        self.length = 0.0

    def fault(
        self, code: str, span: Span, message: str, hint: str = "", related: tuple[Related, ...] = ()
    ) -> None:
        self.failed = True
        self.report.error(code, span, message, hint=hint, related=related)

    def of(self, kind: type) -> list:  # type: ignore[type-arg]
        return [line for line in self.block.lines if isinstance(line, kind)]

    def number(self, node: Expression, kind: str) -> float:
        """Return a value in SI, or nan after a fault."""
        value = si(node, kind, self.scope)
        if value is None:
            self.failed = True
            return math.nan
        return value

    def place(self, node: Expression) -> float:
        """Return a place on the beam, m."""
        x = self.number(node, "length")
        if not math.isnan(x) and not -1e-9 * self.length <= x <= self.length * (1 + 1e-9):
            self.fault(
                "outside-beam",
                node.span,
                f"{self.text(x)} lies outside the beam, which runs from 0 to {self.text(self.length)}",
            )
        return min(max(x, 0.0), self.length)

    def text(self, x: float, unit: str | None = None) -> str:
        default = "ft" if self.scope.style.system == "US" else "m"
        return length_text(x, self.scope.style, unit or default)

    def read(self) -> BeamData | None:
        spans = self._spans()
        if spans is None:
            return None
        self.length = sum(spans)
        settings = self._settings()
        is_restrained = self._truth(settings.get("restrained"))
        E = self._modulus(settings.get("E"))
        properties = self._properties(E)
        supports, settling = self._supports(spans)
        hinges = self._hinges(supports)
        kinds = self._case_kinds()
        cases, rows = self._loads(properties)
        for case, load in settling:
            cases.setdefault(case, []).append(load)
        combinations = self._combinations(kinds, cases)
        if self.failed:
            return None
        stretches = tuple(Stretch(p.start, p.end, self._stiffness(p, E, is_restrained)) for p in properties)
        try:
            model = BeamModel(self.length, stretches, supports, hinges)
        except ValueError as fault:
            self.fault("beam", self.block.head_span, str(fault))
            return None
        return BeamData(
            model=model,
            cases={name: tuple(loads) for name, loads in cases.items()},
            case_kinds=kinds,
            rows=tuple(rows),
            combinations=combinations,
            sections=tuple(p.section for p in properties if p.section is not None),
            E=E,
            restrained=settings.get("restrained"),
            is_restrained=is_restrained,
            spans=spans,
        )

    def _spans(self) -> tuple[float, ...] | None:
        lines: list[SpanLine] = self.of(SpanLine)
        if not lines:
            self.fault("span-missing", self.block.head_span, "the beam has no span", hint="write span = 6 m")
            return None
        if len(lines) > 1:
            self.fault("given-twice", lines[1].span, "the spans are given twice")
        lengths = []
        for node in lines[0].lengths:
            length = self.number(node, "length")
            if length <= 0:
                self.fault("not-positive", node.span, "a span must be longer than zero")
            lengths.append(length)
        return None if self.failed else tuple(lengths)

    def _settings(self) -> dict[str, BeamSetting]:
        """Return the settings of the whole beam by key."""
        found: dict[str, BeamSetting] = {}
        for line in self.of(BeamSetting):
            if line.start is not None:
                continue
            if line.key.name in found:
                first = found[line.key.name]
                self.fault(
                    "given-twice",
                    line.key.span,
                    f"'{line.key.name}' is given twice",
                    related=(Related(first.key.span, "first here"),),
                )
            found.setdefault(line.key.name, line)
        return found

    def _truth(self, line: BeamSetting | None) -> bool:
        if line is None:
            return False
        value = Evaluator(self.scope).value(line.value)
        if isinstance(value, bool):
            return value
        if value is not None:
            self.fault("not-yes-or-no", line.value.span, f"'{line.key.name}' is yes or no")
        self.failed = True
        return False

    def _modulus(self, line: BeamSetting | None) -> Measure | None:
        if line is None:
            return None
        E = quantity_of(line.value, "stress", self.scope)
        if E is None:
            self.failed = True
        elif E.si <= 0:
            self.fault("not-positive", line.value.span, "the modulus of elasticity must be positive")
        return E

    def _properties(self, E: Measure | None) -> list[_Property]:
        """Return the stretches from left to right; a line with 'from … to …' stands before one without."""
        base: _Property | None = None
        own: list[tuple[_Property, BeamSetting]] = []
        for line in self.of(BeamSetting):
            if line.key.name not in ("section", "EI"):
                continue
            start = self.place(line.start) if line.start is not None else 0.0
            end = self.place(line.end) if line.end is not None else self.length
            section = section_named(line.value, self.scope) if line.key.name == "section" else None
            EI = None
            if line.key.name == "EI":
                EI = self.number(line.value, "bending stiffness")
                if EI <= 0:
                    self.fault("not-positive", line.value.span, "the bending stiffness must be positive")
            elif section is None:
                self.failed = True
            elif E is None and not any(s.key.name == "E" for s in self.of(BeamSetting)):
                self.fault(
                    "modulus-missing",
                    line.span,
                    "a beam with a section needs the modulus of elasticity",
                    hint="add a line such as E = 210 GPa",
                )
            found = _Property(start, end, section, EI)
            if line.start is None:
                if base is not None and (base.EI is not None) != (EI is not None):
                    self.fault(
                        "given-twice", line.span, "'EI' stands for 'section' and 'E': give one of the two"
                    )
                base = found
            elif end - start <= 1e-9 * self.length:
                self.fault("no-length", line.span, "the stretch has no length")
            else:
                own.append((found, line))
        return self._cover(base, own)

    def _cover(self, base: _Property | None, own: list[tuple[_Property, BeamSetting]]) -> list[_Property]:
        own.sort(key=lambda item: item[0].start)
        row: list[_Property] = []
        x, least = 0.0, 1e-9 * self.length
        for stretch, line in own:
            if stretch.start < x - least:
                self.fault("stretches-overlap", line.span, "this stretch overlaps the one before it")
            if stretch.start > x + least and base is not None:
                row.append(_Property(x, stretch.start, base.section, base.EI))
            elif stretch.start > x + least:
                self._uncovered(x, stretch.start)
            row.append(stretch)
            x = stretch.end
        if x < self.length - least and base is not None:
            row.append(_Property(x, self.length, base.section, base.EI))
        elif x < self.length - least:
            self._uncovered(x, self.length)
        return row

    def _uncovered(self, start: float, end: float) -> None:
        if not self.failed:
            self.fault(
                "stiffness-missing",
                self.block.head_span,
                f"the beam has no stiffness from {self.text(start)} to {self.text(end)}",
                hint="add section = … and E = …, or EI = …",
            )

    def _stiffness(self, p: _Property, E: Measure | None, restrained: bool) -> BendingStiffness:  # noqa: FBT001
        if p.section is None or E is None:
            return BendingStiffness(p.EI or 0.0)
        values = p.section.result.values
        return BendingStiffness.of_section(
            E.si, values["I_h"], values["I_v"], values["I_hv"], restrained=restrained
        )

    def _supports(self, spans: tuple[float, ...]) -> tuple[tuple[Support, ...], list[tuple[str, Settlement]]]:
        lines: list[SupportLine] = self.of(SupportLine)
        if not lines:
            ends = [math.fsum(spans[:i]) for i in range(len(spans) + 1)]
            return tuple(Support(x) for x in ends), []
        placed: list[tuple[float, SupportLine]] = sorted(
            ((self.place(line.at), line) for line in lines), key=lambda item: item[0]
        )
        for (x_1, first), (x_2, second) in zip(placed, placed[1:], strict=False):
            if x_2 - x_1 <= 1e-9 * self.length:
                self.fault(
                    "two-supports",
                    second.span,
                    f"there is a support at {self.text(x_2)} already",
                    related=(Related(first.span, "here"),),
                )
        supports = tuple(self._support(x, line) for x, line in placed)
        settling: list[tuple[str, Settlement]] = []
        for index, (_, line) in enumerate(placed):
            if line.settles is not None:
                value = self.number(line.settles, "length")
                case = line.settles_case.name if line.settles_case is not None else ""
                plane: Plane = "lateral" if line.plane == "lateral" else "vertical"
                settling.append((case, Settlement(index, value, plane)))
        return supports, settling

    def _support(self, x: float, line: SupportLine) -> Support:
        force, rotation = RIGID, FREE
        if line.kind == "fixed":
            rotation = RIGID
        if line.kind == "spring":
            force = self._spring(line.stiffness, "line load")
            rotation = self._spring(line.rotation, "moment")
        if line.plane == "lateral":
            return Support(x, FREE, FREE, force, rotation)
        return Support(x, force, rotation, force, rotation)

    def _spring(self, node: Expression | None, kind: str) -> float:
        if node is None:
            return FREE
        value = self.number(node, kind)
        if value < 0:
            self.fault("not-positive", node.span, "the stiffness of a spring must not be negative")
            return FREE
        return value

    def _hinges(self, supports: tuple[Support, ...]) -> tuple[float, ...]:
        found: list[float] = []
        least = 1e-9 * self.length
        for line in self.of(HingeLine):
            x = self.place(line.at)
            if x <= least or x >= self.length - least:
                self.fault(
                    "hinge-at-end",
                    line.span,
                    "a hinge at the end of a beam releases nothing",
                    hint="remove it",
                )
            elif any(abs(x - other) <= least for other in found):
                self.fault("given-twice", line.span, f"there is a hinge at {self.text(x)} already")
            elif any(abs(x - s.x) <= least and (s.rotation or s.lateral_rotation) for s in supports):
                self.fault(
                    "hinge-at-fixed", line.span, "a hinge cannot stand at a support that holds the rotation"
                )
            else:
                found.append(x)
        return tuple(sorted(found))

    def _case_kinds(self) -> dict[str, str]:
        kinds: dict[str, str] = {}
        for line in self.of(CaseLine):
            if line.target.name in kinds:
                self.fault("given-twice", line.span, f"the case '{line.target.name}' is declared twice")
            kinds[line.target.name] = line.kind.name if line.kind is not None else ""
        return kinds

    def _loads(self, properties: list[_Property]) -> tuple[dict[str, list[Load]], list[LoadRow]]:
        cases: dict[str, list[Load]] = {line.target.name: [] for line in self.of(CaseLine)}
        rows: list[LoadRow] = []
        for line in self.of(LoadLine):
            loads, row = self._load(line, properties)
            cases.setdefault(line.case.name, []).extend(loads)
            rows.append(row)
        return cases, rows

    def _load(self, line: LoadLine, properties: list[_Property]) -> tuple[list[Load], LoadRow]:
        plane: Plane = "lateral" if line.plane == "lateral" else "vertical"
        start = self.place(line.start) if line.start is not None else 0.0
        end = self.place(line.end) if line.end is not None else self.length
        if line.at is not None:
            start = end = self.place(line.at)
        elif end - start <= 1e-9 * self.length and not self.failed:
            self.fault("no-length", line.statement_span, "the load has no length: 'from' must be before 'to'")
        distributed = line.at is None
        kind = {
            "uniform": "line load",
            "linear": "line load",
            "point": "force",
            "moment": "force" if distributed else "moment",
            "self_weight": "weight by volume",
        }[line.kind]
        measures = [quantity_of(node, kind, self.scope) for node in line.values]
        if any(m is None for m in measures):
            self.failed = True
        values = tuple(m.si if m is not None else math.nan for m in measures)
        loads: list[Load] = []
        if not self.failed:
            loads = self._of_kind(line, plane, values, start, end, properties)
        shown = " to ".join(show(m, self.scope.style).text for m in measures if m is not None)
        whole = distributed and line.start is None
        unit = self._unit_of(line.at or line.start)
        where = (
            "over the whole beam"
            if whole
            else f"from {self.text(start, unit)} to {self.text(end, unit)}"
            if distributed
            else f"at {self.text(start, unit)}"
        )
        return loads, LoadRow(
            line.case.name,
            line.kind,
            plane,
            f"{shown} {where}",
            values,
            start,
            end,
            line.annotations.note,
            line.annotations.reference,
            self.report.source.line_number(line.span),
        )

    def _unit_of(self, node: Expression | None) -> str | None:
        value = quantity_of(node, "length", self.scope) if node is not None else None
        return value.unit if value is not None else None

    def _of_kind(
        self,
        line: LoadLine,
        plane: Plane,
        values: tuple[float, ...],
        start: float,
        end: float,
        properties: list[_Property],
    ) -> list[Load]:
        match line.kind:
            case "point":
                return [PointLoad(start, values[0], plane)]
            case "moment" if line.at is not None:
                return [PointMoment(start, values[0], plane)]
            case "moment":
                return [DistributedMoment.uniform(start, end, values[0], plane)]
            case "self_weight":
                return self._self_weight(line, values[0], start, end, plane, properties)
            case _:
                return [DistributedLoad(start, end, values[0], values[-1], plane)]

    def _self_weight(
        self,
        line: LoadLine,
        weight: float,
        start: float,
        end: float,
        plane: Plane,
        properties: list[_Property],
    ) -> list[Load]:
        loads: list[Load] = []
        for p in properties:
            a, b = max(start, p.start), min(end, p.end)
            if b - a <= 1e-9 * self.length:
                continue
            if p.section is None:
                self.fault(
                    "section-missing",
                    line.span,
                    "self-weight needs the section's area, and this beam has EI alone",
                    hint="write the weight as a uniform load",
                )
                return []
            loads.append(DistributedLoad.uniform(a, b, weight * p.section.result.values["A"], plane))
        return loads

    def _combinations(
        self, kinds: Mapping[str, str], cases: Mapping[str, list[Load]]
    ) -> tuple[Combination, ...]:
        lines: list[CombinationLine] = self.of(CombinationLine)
        groups = {line.group.name for line in lines if line.group is not None}
        found: list[Combination] = []
        for line in lines:
            name = line.target.name
            if any(c.name == name for c in found):
                self.fault("given-twice", line.target.span, f"the combination '{name}' is given twice")
            if name in groups:
                self.fault("given-twice", line.target.span, f"'{name}' is the name of a group, too")
            for label in (line.target, line.group):
                if label is not None:
                    self._free_of_results(label)
            factors: dict[str, float] = {}
            for term in line.terms:
                case = term.case.name
                if case not in cases and case not in kinds:
                    close = nearest(case, cases)
                    self.fault(
                        "unknown-case",
                        term.case.span,
                        f"there is no load case '{case}'",
                        hint=f"the nearest is '{close}'" if close else f"cases are {', '.join(cases)}",
                    )
                factor = 1.0 if term.factor is None else self.number(term.factor, "number")
                factors[case] = factors.get(case, 0.0) + term.sign * factor
            group = line.group.name if line.group is not None else ""
            found.append(Combination(name, group, factors, line.span))
        used = {case for c in found for case in c.factors}
        for line in self.of(CaseLine) + self.of(LoadLine) if found else []:
            target: Named = line.target if isinstance(line, CaseLine) else line.case
            if target.name not in used:
                used.add(target.name)
                self.report.warning(
                    "case-unused",
                    target.span,
                    f"no combination uses the load case '{target.name}'",
                    hint="its loads have no effect on any result",
                )
        return tuple(found)

    def _free_of_results(self, label: Named) -> None:
        stem = label.name.removesuffix("_lat")
        if stem.rsplit("_", 1)[0] in ("M", "V", "w", "R", "M_R", "x_M", "x_V", "x_w", "span") or stem in (
            "M",
            "V",
            "w",
            "slope",
        ):
            self.fault(
                "name-hides-result", label.span, f"'{label.name}' is the name of a result of this block"
            )


def length_text(x: float, style: Style, unit: str) -> str:
    """Return a place or length as read: '6 m', '2.5 m', without trailing zeros."""
    shown = show(from_si(x, "m").shown_in(unit), style)
    number = (
        shown.number.rstrip("0").rstrip(".")
        if "." in shown.number and "×" not in shown.number
        else shown.number
    )
    return f"{number or '0'}\u00a0{shown.unit}"
