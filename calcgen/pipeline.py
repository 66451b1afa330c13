"""The only module that knows the order of the stages: project folder in, package and trail out."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass, field
from datetime import datetime
from pathlib import Path

from calcgen import __version__
from calcgen.evaluation.calc import Memory, Setting, evaluate_all
from calcgen.evaluation.results import EvaluatedCalc, Standing
from calcgen.figures.illustrate import Drawn, Studio, conventions, illustrate
from calcgen.language.document import calc_from
from calcgen.profiles.catalogue import Catalogue
from calcgen.project import Project, ProjectFiles, load_project
from calcgen.publishing import build_key, is_current, publish, read_manifest, recover
from calcgen.quantities.display import Style
from calcgen.site.compose import PackageInput, compose
from calcgen.site.render import render
from calcgen.text import Diagnostic
from calcgen.trail import TRAIL, Changes, State, Trail, append, history, load, previous_values, record, replay
from calcgen.trail.changes import compare
from calcgen.trail.state import state_of

PROGRAM = f"calcgen {__version__}"


@dataclass(frozen=True)
class Request:
    """What is asked of a build.

    Attributes
    ----------
    root : the project's folder; out : where the package goes.
    when : the time recorded in the trail, with its zone; who and why : as recorded there.
    records : whether the trail gets an entry (`watch` only shows what is pending).
    durable : whether to wait until the disk has it all.
    """

    root: Path
    out: Path
    when: datetime
    who: str
    why: str | None = None
    records: bool = True
    durable: bool = True


@dataclass(frozen=True)
class Summary:
    """A calc as the command line lists it."""

    number: str
    title: str
    standing: Standing
    governing: str
    utilisation: float | None


@dataclass(frozen=True)
class Outcome:
    """What came of a build.

    Attributes
    ----------
    published : whether the package was written; False where the project itself is at fault.
    current : whether the package already stood as it would be built.
    notes : what else to tell: a torn line of the trail set aside, changes recorded.
    """

    calcs: tuple[Summary, ...]
    diagnostics: tuple[Diagnostic, ...]
    published: bool
    current: bool = False
    notes: tuple[str, ...] = ()

    @property
    def failed(self) -> bool:
        """Whether there is an error."""
        return not (self.published or self.current) or any(d.severity == "error" for d in self.diagnostics)

    @property
    def exceeded(self) -> bool:
        """Whether a check is exceeded."""
        return any(c.standing == "exceeded" for c in self.calcs)


@dataclass
class Workshop:
    """What one process remembers between builds, so that a rebuild does only what a change touches."""

    memory: Memory = field(default_factory=Memory)
    studio: Studio = field(default_factory=Studio)
    calcs: dict[str, tuple[SourceFile, Calc]] = field(default_factory=dict)
    catalogues: dict[tuple[SourceFile, ...], tuple[Catalogue, tuple[Diagnostic, ...]]] = field(
        default_factory=dict
    )


def build(
    request: Request, workshop: Workshop, step: Callable[[str], None] = lambda _: None
) -> Outcome:
    """Build the package of a project, and record what changed in its trail.

    A project at fault (no project.toml, say) leaves the package that stands as it was. A calc in error still
    gets its page. Faults of the system (a full disk) come out as notes of a build that failed.
    """
    step("reading")
    files, found = load_project(request.root)
    if files.project is None or not files.calcs:
        return Outcome((), found, published=False)
    try:
        recover(request.out)
        return _build(request, workshop, step, files, files.project, found)
    except (PublishError, TrailError) as fault:
        hint = f"\n      hint: {fault.hint}" if fault.hint else ""
        return Outcome((), found, published=False, notes=(f"error: {fault}{hint}",))


def _build(
    request: Request,
    workshop: Workshop,
    step: Callable[[str], None],
    files: ProjectFiles,
    project: Project,
    found: tuple[Diagnostic, ...],
) -> Outcome:
    calcs = tuple(_calc(source, workshop) for source in files.calcs)
    assets = read_assets(request.root, calcs)
    trail_bytes = _bytes(request.root / TRAIL)
    key = build_key({**_inputs(files), **assets, TRAIL: trail_bytes}, {"records": str(request.records)})
    if request.records and is_current(request.out, key):
        kept = read_manifest(request.out)
        if kept is not None and kept.data.get("clean") is True:
            return Outcome(_summaries_kept(kept.data), found, published=False, current=True)
    step("evaluating")
    style = Style(project.units, project.digits, project.depth, project.preferred_units)
    catalogue, faults = _catalogue(files.profiles, workshop)
    setting = Setting(project.axes, style, catalogue, frozenset(files.references))
    evaluated = evaluate_all(calcs, setting, workshop.memory)
    step("comparing with the trail")
    moved = _trail(request, evaluated, files, style)
    step("drawing")
    figures = {
        (calc.number, name): row
        for calc in evaluated
        for name, row in workshop.studio.draw(illustrate(calc, project.axes, style)).items()
    }
    conventions_drawn = workshop.studio.draw_one(conventions(project.axes, project.depth))
    step("writing")
    ...
