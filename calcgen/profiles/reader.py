"""Reads one catalogue of sections from its CSV text.

Comment lines `# axes = eurocode` and `# shape = i_shape` stand above the header, whose cells give each
column's name and unit: `h [mm]`, `I_y [cm4]`. Every row is one section. An empty cell is a size or property
that the table does not give. `# family = IPE` names what they are listed under (else the file's stem) and
`# tolerance = 1 %` or `# tolerance I_z, W_el_z = 3 %` how far the table's figures may lie from the outline.
"""

from __future__ import annotations

import csv
import math
import re
from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass
from difflib import get_close_matches
from functools import cached_property
from pathlib import PurePosixPath
from typing import TypeVar

from calcgen.profiles.columns import (
    KINDS,
    OF_OUTLINE,
    PUBLISHED,
    SYNONYMS,
    TEXTS,
    UNITS,
    ZERO_ALLOWED,
    Column,
    column_meaning,
    sizes_missing,
    sizes_of,
    unit_factor,
)
from calcgen.profiles.columns import SIZES as SHAPES
from calcgen.profiles.profile import Axes, CatalogueFault, Profile, designation_key

Choice = TypeVar("Choice", bound=str)

AXES: tuple[Axes, ...] = ("eurocode", "american")
TOLERANCE = 0.005  # relative, where a catalogue states none
LARGEST_TOLERANCE = 0.10  # beyond it, a table and its outline are of two sections

_DIRECTIVE = re.compile(r"#\s*(axes|shape|family|tolerance(?:\s[^=]*?)?)\s*=\s*(.*?)\s*")
_HEADER_CELL = re.compile(r"(\S+?)\s*\[\s*(.*?)\s*\]")
_CELL = re.compile(r'\s*"(?:[^"]|"")*"[^,]*|[^,]*')


def read_catalogue(name: str, text: str) -> tuple[tuple[Profile, ...], tuple[CatalogueFault, ...]]:
    """Read the sections of a catalogue, and every fault in its text.

    A row with a fault gives no section; a fault above the rows leaves none at all.

    Parameters
    ----------
    name : the file's path as faults and sections are to show it.
    text : the file's contents.
    """
    reading = _Reading(name, text)
    profiles = tuple(reading.profiles())
    return profiles, tuple(sorted(reading.faults, key=lambda fault: (fault.line, fault.column)))


def index_catalogue(name: str, text: str) -> tuple[Row, ...]:
    """List the rows of a catalogue whose text is known to be sound; each is read when it is asked for.

    The designations stand in the first column, without quotes. Arguments as for `read_catalogue`; a fault is
    raised as ValueError, here where it stands above the rows, else by the row.
    """
    reading = _Reading(name, text)
    if reading.head is None:
        raise ValueError(f"{name} is damaged: {reading.faults}")
    return tuple(
        Row(reading.lines[line - 1].partition(",")[0], reading.family, name, line, reading)
        for line in reading.table[1:]
    )


class Row:
    """A row of a catalogue, found by its designation and not read yet."""

    def __init__(self, designation: str, family: str, file: str, line: int, reading: _Reading) -> None:
        self.designation = designation
        self.family = family
        self.file = file
        self.line = line
        self._reading = reading

    @cached_property
    def profile(self) -> Profile:
        """The section, read from its cells at the first use; ValueError where the row has a fault."""
        profile = self._reading.profile(self.line)
        if profile is None:
            raise ValueError(f"{self.file} is damaged: {self._reading.faults}")
        return profile


@dataclass(frozen=True)
class _Head:
    """What stands above the rows of a catalogue; `tolerances` are relative, by neutral name."""

    axes: Axes
    shape: str
    columns: tuple[Column, ...]
    tolerances: Mapping[str, float]


class _Reading:
    """The text of a catalogue as it is read; collects its faults."""

    def __init__(self, name: str, text: str) -> None:
        self.name = name
        # only these end a line, as in every other text of a project
        self.lines = re.split(r"\r\n|\r|\n", text.removeprefix("\ufeff"))
        self.faults: list[CatalogueFault] = []
        self.directives: dict[str, tuple[str, int]] = {}
        self.table: list[int] = []  # the lines of the header and the rows
        for line, written in enumerate(self.lines, start=1):
            if written.lstrip().startswith("#"):
                self._directive(line, written.strip())
            elif written.strip(" \t,"):
                self.table.append(line)

    @cached_property
    def family(self) -> str:
        """What the file's sections are listed under."""
        stated, _ = self.directives.get("family", ("", 0))
        return stated or PurePosixPath(self.name).stem

    @cached_property
    def head(self) -> _Head | None:
        """What stands above the rows; None when it has a fault."""
        axes, shape = self._choice("axes", AXES), self._choice("shape", tuple(SHAPES))
        if not self.table:
            self._fault(1, "there is no header", "write one such as: designation,h [mm],b [mm],source")
        if axes is None or shape is None or not self.table:
            return None
        columns = self._header(self.table[0], shape, axes)
        tolerances = self._tolerances(axes)
        if columns is None or tolerances is None:
            return None
        return _Head(axes, shape, columns, tolerances)

    def profiles(self) -> Iterator[Profile]:
        """Yield the sections of the rows that have no fault."""
        if self.head is None:
            return
        lines: dict[str, int] = {}
        for line in self.table[1:]:
            profile = self.profile(line)
            if profile is None:
                continue
            first = lines.setdefault(designation_key(profile.designation), line)
            if first == line:
                yield profile
            else:
                self._fault(line, f"'{profile.designation}' is defined twice", f"first on line {first}")

    def _directive(self, line: int, written: str) -> None:
        match = _DIRECTIVE.fullmatch(written)
        if match is None:
            return
        directive = match[1].strip()
        if self.table:
            self._fault(line, f"'{directive}' stands below the header", "move it to the top of the file")
        elif directive in self.directives:
            self._fault(line, f"'{directive}' is set twice")
        else:
            self.directives[directive] = match[2], line

    def _choice(self, directive: str, known: Sequence[Choice]) -> Choice | None:
        if directive not in self.directives:
            hint = f"write '# {directive} = {known[0]}' above the header; known: {', '.join(known)}"
            self._fault(1, f"the file does not say its {directive}", hint)
            return None
        value, line = self.directives[directive]
        for choice in known:
            if choice == value:
                return choice
        self._fault(line, f"unknown {directive} '{value}'", f"known: {', '.join(known)}")
        return None

    def _tolerances(self, axes: Axes) -> Mapping[str, float] | None:
        """Relative tolerances by neutral name; None when one that the file states has a fault."""
        before = len(self.faults)
        stated: dict[str, float] = {}
        for directive, (value, line) in self.directives.items():
            word, *columns = re.split(r"[\s,]+", directive)
            if word != "tolerance":
                continue
            tolerance = _number(value.removesuffix("%")) / 100.0 if value.endswith("%") else math.nan
            if not 0.0 < tolerance <= LARGEST_TOLERANCE:
                hint = f"write a percentage up to {100.0 * LARGEST_TOLERANCE:g} %, such as 0.5 %"
                self._fault(line, f"'{value}' is not a tolerance", hint)
            for column in columns:
                if column not in PUBLISHED[axes]:
                    self._fault(line, f"'{column}' is no property", f"known: {', '.join(PUBLISHED[axes])}")
                else:
                    stated[PUBLISHED[axes][column][0]] = tolerance
            if not columns:
                stated["*"] = tolerance
        general = stated.get("*", TOLERANCE)
        return {n: stated.get(n, general) for n in OF_OUTLINE} if len(self.faults) == before else None

    def _header(self, line: int, shape: str, axes: Axes) -> tuple[Column, ...] | None:
        """Read the header; None when it has a fault."""
        before = len(self.faults)
        cells = self._cells(line)
        if len(cells) == 1 and re.search(r"[;\t]", cells[0]):
            self._fault(line, "the cells are not separated by commas", "write commas, and decimal points")
            return None
        columns: list[Column] = []
        for n, cell in enumerate(cells):
            column = self._column(line, n, cell, shape, axes)
            if column is None:
                continue
            if column.name in {other.name for other in columns}:
                self._fault(line, f"'{cell}' gives {column.name} a second time", cell=n)
            columns.append(column)
        if len(self.faults) > before:
            return None
        names = [column.name for column in columns]
        if "designation" not in names:
            self._fault(line, "there is no column 'designation'")
        if missing := sizes_missing(shape, names):
            self._fault(line, f"there is no column for {', '.join(missing)}", f"{shape} needs it")
        return tuple(columns) if len(self.faults) == before else None

    def _column(self, line: int, n: int, cell: str, shape: str, axes: Axes) -> Column | None:
        if cell in TEXTS:
            return Column("text", cell)
        match = _HEADER_CELL.fullmatch(cell)
        written = match[1] if match else cell
        meaning = column_meaning(written, shape, axes)
        if meaning is None:
            self._fault(line, f"unknown column '{written}'", _hint_for_column(written, shape, axes), cell=n)
            return None
        part, name, kind = meaning
        if match is None:
            self._fault(line, f"'{written}' has no unit", f"write it as {written} [...]", cell=n)
            return None
        unit = unit_factor(match[2])
        if unit is None:
            self._fault(line, f"unknown unit '{match[2]}'", f"known: {', '.join(UNITS)}", cell=n)
            return None
        if unit[0] != kind:
            self._fault(line, f"'{match[2]}' is not a unit of {KINDS[kind]}, which {written} is", cell=n)
            return None
        return Column(part, name, unit[1])

    def profile(self, line: int) -> Profile | None:
        """Read a row; None when it has a fault, or the head has one."""
        head = self.head
        if head is None:
            return None
        before = len(self.faults)
        cells = self._cells(line)
        wanted = len(head.columns)
        if len(self.faults) == before and len(cells) != wanted:
            hint = "quotes around a text with commas?" if len(cells) > wanted else "a quote left open?"
            self._fault(line, f"{len(cells)} cells stand under {wanted} columns", hint)
        if len(self.faults) > before:
            return None
        texts: dict[str, str] = {}
        values: dict[str, dict[str, float]] = {"dimensions": {}, "stated": {}, "published": {}}
        tolerances: dict[str, float] = {}
        for n, (column, cell) in enumerate(zip(head.columns, cells, strict=True)):
            if column.part == "text":
                texts[column.name] = cell
            elif cell:
                value = self._value(line, n, cell, zero_allowed=column.name in ZERO_ALLOWED)
                values[column.part][column.name] = value * column.factor
                if column.part == "published" and column.name in OF_OUTLINE and value > 0.0:
                    tolerances[column.name] = max(head.tolerances[column.name], _half_unit(cell) / value)
        if not texts["designation"]:
            self._fault(line, "the designation is missing")
        dimensions, k_des = values["dimensions"], values["stated"].get("k_des")
        if missing := sizes_missing(head.shape, list(dimensions)):
            self._fault(line, f"{', '.join(missing)} missing: {head.shape} needs it")
        elif k_des is not None and "t_f" in dimensions and "r" not in dimensions:
            dimensions["r"] = k_des - dimensions["t_f"]
            if dimensions["r"] < 0.0:
                self._fault(line, "k_des is less than t_f")
        if len(self.faults) > before:
            return None
        return Profile(
            designation=texts["designation"],
            family=self.family,
            shape=head.shape,
            axes=head.axes,
            dimensions=dimensions,
            stated=values["stated"],
            published=values["published"],
            tolerances=tolerances,
            source=texts.get("source") or self.name,
            file=self.name,
            line=line,
        )

    def _value(self, line: int, n: int, cell: str, *, zero_allowed: bool) -> float:
        """Value of a cell as written; a fault, with NaN perhaps, when it is no size or property."""
        value = _number(cell)
        if math.isnan(value):
            hint = "write a decimal point" if "," in cell else ""
            self._fault(line, f"'{cell}' is not a number", hint, cell=n)
        elif value < 0.0 or (value == 0.0 and not zero_allowed):
            self._fault(line, f"'{cell}' is not positive", cell=n)
        return value

    def _cells(self, line: int) -> list[str]:
        """Cells of a line; none, with a fault, where it is no CSV."""
        # a row never goes on in the next line, so that a quote left open spoils one row only
        try:
            row = next(csv.reader([self.lines[line - 1]], skipinitialspace=True))
        except csv.Error as error:
            self._fault(line, f"the line cannot be split into cells: {error}")
            return []
        return [cell.strip() for cell in row]

    def _fault(self, line: int, message: str, hint: str = "", *, cell: int = 0) -> None:
        column = 1
        if cell:
            written = self.lines[line - 1]
            start = 0
            for _ in range(cell):
                match = _CELL.match(written, start)
                start = (match.end() if match else start) + 1
            column = start + len(written[start:]) - len(written[start:].lstrip()) + 1
        self.faults.append(CatalogueFault(self.name, line, column, message, hint))


def _number(text: str) -> float:
    """Value of a decimal number, NaN when it is none (`1_000` and `inf` are none)."""
    try:
        value = float(text)
    except ValueError:
        return math.nan
    return value if math.isfinite(value) and "_" not in text else math.nan


def _half_unit(text: str) -> float:
    """Half a unit of the last digit of a decimal number."""
    digits, _, exponent = text.lower().partition("e")
    return 0.5 * 10.0 ** (int(exponent or 0) - len(digits.partition(".")[2]))


def _hint_for_column(written: str, shape: str, axes: Axes) -> str:
    for other in AXES:
        if other != axes and written in PUBLISHED[other]:
            return f"{written} is a name of the {other} axes, and the file's are {axes}"
    known = [*TEXTS, *sorted(sizes_of(shape)), *SYNONYMS, *PUBLISHED[axes]]
    near = get_close_matches(written, known, n=1)
    return f"did you mean {near[0]}?" if near else f"known: {', '.join(known)}"
