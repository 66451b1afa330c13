"""project.toml and references.toml -> Project; finds and reads the files of a project."""

from __future__ import annotations

import re
from collections.abc import Mapping
from dataclasses import dataclass
from pathlib import Path
from typing import Literal, TypeAlias

from calcgen.language.document import read_source
from calcgen.language.toml_text import TomlText, check_keys, read_toml
from calcgen.language.units_text import unit_at
from calcgen.quantities.display import KINDS
from calcgen.quantities.measure import dimension_of, pretty, unit_size
from calcgen.text import Diagnostic, Report, SourceFile, Span

Axes: TypeAlias = Literal["eurocode", "american"]
Units: TypeAlias = Literal["SI", "US"]
Depth: TypeAlias = Literal["down", "up"]

_AXES: dict[str, Axes] = {"eurocode": "eurocode", "american": "american"}
_UNITS: dict[str, Units] = {"SI": "SI", "US": "US"}
_DEPTHS: dict[str, Depth] = {"down": "down", "up": "up"}
_DIGITS, _LEAST_DIGITS, _MOST_DIGITS = 4, 2, 12


@dataclass(frozen=True)
class Project:
    """What project.toml says.

    Attributes
    ----------
    axes : 'eurocode' (y-y horizontal, z-z vertical) or 'american' (x-x horizontal, y-y vertical).
    depth : sense in which a coordinate from the neutral axis is shown, 'down' or 'up'.
    digits : significant figures shown.
    preferred_units : (kind of quantity, unit), sorted by kind.
    """

    title: str
    axes: Axes
    number: str = ""
    client: str = ""
    originator: str = ""
    checker: str = ""
    units: Units = "SI"
    depth: Depth = "down"
    digits: int = _DIGITS
    preferred_units: tuple[tuple[str, str], ...] = ()


@dataclass(frozen=True)
class Reference:
    """A document that calcs cite as `[KEY page]`; `span` is its head in references.toml."""

    key: str
    title: str
    span: Span
    number: str = ""
    edition: str = ""
    author: str = ""
    publisher: str = ""
    year: str = ""
    note: str = ""


@dataclass(frozen=True)
class ProjectFiles:
    """A project as read from its folder. Sources are sorted by path.

    `project` is None while project.toml is missing or in error: nothing can be evaluated without its axes.
    """

    root: Path
    project: Project | None
    references: Mapping[str, Reference]
    calcs: tuple[SourceFile, ...]
    profiles: tuple[SourceFile, ...]
    methods: tuple[SourceFile, ...]
    reviews: tuple[SourceFile, ...]
    settings: SourceFile
    references_source: SourceFile | None


_TEXTS = ("title", "number", "client", "originator", "checker")
_CHOICES: dict[str, tuple[str, ...]] = {"axes": (*_AXES,), "units": (*_UNITS,), "depth": (*_DEPTHS,)}
_KEYS = (*_TEXTS, *_CHOICES, "digits", "preferred_units")
_REFERENCE_KEYS = ("title", "number", "edition", "author", "publisher", "year", "note")
_CITABLE = re.compile(r"[^\s\[\]|]+")


def load_project(root: Path) -> tuple[ProjectFiles, tuple[Diagnostic, ...]]:
    """Read the files of a project; nothing is raised for what a user can get wrong."""
    found: list[Diagnostic] = []
    settings = SourceFile("project.toml", "")
    project: Project | None = None
    if (root / "project.toml").is_file():
        source = _read(root, root / "project.toml", found)
        if source is not None:
            settings = source
            project, diagnostics = project_from(source)
            found += diagnostics
    else:
        report = Report(settings)
        report.error(
            "no-project",
            Span(0, 0),
            "this folder has no project.toml",
            hint='write one with title = "..." and axes = "eurocode" or "american"',
        )
        found += report.diagnostics
    references: Mapping[str, Reference] = {}
    references_source: SourceFile | None = None
    if (root / "references.toml").is_file():
        references_source = _read(root, root / "references.toml", found)
        if references_source is not None:
            references, diagnostics = references_from(references_source)
            found += diagnostics
    calcs = _read_all(root, "calcs", ".md", found)
    if not calcs:
        report = Report(settings)
        report.error("no-calcs", Span(0, 0), "this project has no calcs", hint="write one as calcs/NUMBER.md")
        found += report.diagnostics
    files = ProjectFiles(
        root,
        project,
        references,
        calcs,
        _read_all(root, "profiles", ".csv", found),
        _read_all(root, "methods", ".md", found),
        _read_all(root, "reviews", ".toml", found),
        settings,
        references_source,
    )
    return files, tuple(found)


def project_from(source: SourceFile) -> tuple[Project | None, tuple[Diagnostic, ...]]:
    """Read project.toml; the project is None where it has an error."""
    report = Report(source)
    toml = read_toml(source, report)
    if toml is None:
        return None, report.diagnostics
    check_keys(toml, toml.values, _KEYS, report, table="")
    for key, example in (("title", "..."), ("axes", 'eurocode" or "american')):
        if key not in toml.values:
            hint = f'write {key} = "{example}"'
            report.error("key-missing", Span(0, 0), f"the key '{key}' is missing", hint=hint)
    texts = {key: _text(toml, key, report) for key in (*_TEXTS, *_CHOICES) if key in toml.values}
    if texts.get("title") == "":
        report.error("wrong-value", toml.span("title"), "the title is empty")
    for key, words in _CHOICES.items():
        word = texts.get(key)
        if word is not None and word not in words:
            hint = "possible are " + " and ".join(f'"{w}"' for w in words)
            report.error("wrong-value", toml.span(key), f"'{word}' is no value of '{key}'", hint=hint)
    digits = _digits(toml, report)
    preferred = _preferred(toml, report)
    if report.failed:
        return None, report.diagnostics
    project = Project(
        **{key: text for key, text in texts.items() if key in _TEXTS and text is not None},
        axes=_AXES[texts["axes"] or ""],
        units=_UNITS[texts.get("units") or "SI"],
        depth=_DEPTHS[texts.get("depth") or "down"],
        digits=digits,
        preferred_units=preferred,
    )
    return project, report.diagnostics


def references_from(source: SourceFile) -> tuple[Mapping[str, Reference], tuple[Diagnostic, ...]]:
    """Read references.toml: one table a document, under the key that calcs cite."""
    report = Report(source)
    toml = read_toml(source, report)
    if toml is None:
        return {}, report.diagnostics
    found: dict[str, Reference] = {}
    for key, table in toml.values.items():
        span = toml.span(key)
        if not isinstance(table, dict):
            hint = "each document is a table: [KEY] and below it title = ..."
            report.error("wrong-value", span, f"'{key}' is no table", hint=hint)
            continue
        if not _CITABLE.fullmatch(key):
            hint = "a key has no spaces, brackets or |"
            report.error("bad-reference-key", span, f"'{key}' cannot be cited", hint=hint)
        check_keys(toml, table, _REFERENCE_KEYS, report, table=key)
        texts = {name: _reference_text(toml, key, name, table, report) for name in _REFERENCE_KEYS}
        if not texts["title"]:
            report.error("key-missing", span, f"the title of '{key}' is missing", hint='write title = "..."')
        found[key] = Reference(key=key, span=span, **texts)
    return found, report.diagnostics


def _text(toml: TomlText, key: str, report: Report) -> str | None:
    value = toml.values[key]
    if isinstance(value, str):
        return value.strip()
    hint = f'write {key} = "..." in quotes'
    report.error("wrong-value", toml.span(key), f"'{key}' is a text", hint=hint)
    return None


def _reference_text(toml: TomlText, key: str, name: str, table: Mapping[str, object], report: Report) -> str:
    value = table.get(name, "")
    if isinstance(value, str):
        return value.strip()
    if isinstance(value, int) and not isinstance(value, bool) and name in ("year", "edition", "number"):
        return str(value)
    hint = f'write {name} = "..." in quotes'
    report.error("wrong-value", toml.span(name, key), f"'{name}' is a text", hint=hint)
    return ""


def _digits(toml: TomlText, report: Report) -> int:
    value = toml.values.get("digits", _DIGITS)
    if isinstance(value, int) and not isinstance(value, bool) and _LEAST_DIGITS <= value <= _MOST_DIGITS:
        return value
    report.error(
        "wrong-value",
        toml.span("digits"),
        f"'digits' is a whole number from {_LEAST_DIGITS} to {_MOST_DIGITS}",
        hint=f"it is the number of significant figures shown, usually {_DIGITS}",
    )
    return _DIGITS


def _preferred(toml: TomlText, report: Report) -> tuple[tuple[str, str], ...]:
    """Read `[preferred_units]`: kind of quantity (`section_modulus` or "section modulus") = unit."""
    table = "preferred_units"
    units = toml.values.get(table, {})
    if not isinstance(units, dict):
        hint = f'write [{table}] and below it moment = "kN·m"'
        report.error("wrong-value", toml.span(table), f"'{table}' is a table", hint=hint)
        return ()
    spelled = {key: key if key in KINDS else key.replace("_", " ") for key in units}
    kinds = tuple(k.replace(" ", "_") for k in KINDS)
    check_keys(toml, {k: 0 for k in units if spelled[k] not in KINDS}, kinds, report, table=table)
    found: dict[str, str] = {}
    for key, kind in spelled.items():
        if kind in KINDS and (unit := _unit_of(toml, key, kind, units[key], report)):
            found[kind] = unit
    return tuple(sorted(found.items()))


def _unit_of(toml: TomlText, key: str, kind: str, unit: object, report: Report) -> str | None:
    span = toml.span(key, "preferred_units")
    match = unit_at(unit, 0) if isinstance(unit, str) else None
    if match is None or match.end != len(str(unit)):
        report.error("unknown-unit", span, f"'{unit}' is no unit", hint=f"one for a {kind} is {KINDS[kind]}")
        return None
    text = pretty(match.text)
    if dimension_of(unit_size(text)) != dimension_of(unit_size(KINDS[kind])):
        hint = f"one for a {kind} is {KINDS[kind]}"
        report.error("wrong-value", span, f"'{unit}' is no unit of this kind", hint=hint)
        return None
    return text


def _read_all(root: Path, folder: str, suffix: str, found: list[Diagnostic]) -> tuple[SourceFile, ...]:
    """Read the files of a folder, hidden ones left out."""
    paths = sorted(p for p in (root / folder).glob(f"*{suffix}") if p.is_file() and p.name[0] not in ".~")
    sources = (_read(root, path, found) for path in paths)
    return tuple(s for s in sources if s is not None)


def _read(root: Path, path: Path, found: list[Diagnostic]) -> SourceFile | None:
    name = path.relative_to(root).as_posix()
    try:
        source = read_source(name, path.read_bytes())
    except OSError as fault:
        report = Report(SourceFile(name, ""))
        report.error("unreadable-file", Span(0, 0), f"this file cannot be read: {fault.strerror or fault}")
        found += report.diagnostics
        return None
    if isinstance(source, Diagnostic):
        found.append(source)
        return None
    return source
