"""The only module that knows the order of the stages: project folder in, package and trail out."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import asdict, dataclass, field
from pathlib import Path, PurePosixPath
from posixpath import normpath
from urllib.parse import unquote

from calcgen import __version__
from calcgen.catalogues import joined_catalogue
from calcgen.current import key_of
from calcgen.evaluation.calc import Memory, Setting, evaluate_all
from calcgen.evaluation.results.calc import EvaluatedCalc
from calcgen.figures.adapt_map import map_drawing
from calcgen.figures.illustrate import Drawn, Studio, conventions
from calcgen.language.calc import Calc, Prose
from calcgen.language.document import calc_from
from calcgen.outcome import Outcome, Request, Summary
from calcgen.profiles import Catalogue
from calcgen.project import Project, ProjectFiles, Reference, load_project
from calcgen.publishing import PublishError, publish, recover
from calcgen.quantities.display import Style
from calcgen.site import addresses
from calcgen.site.compose import Composed, compose
from calcgen.site.facts import PackageInput, ProjectFacts, ReferenceFacts
from calcgen.site.figure import FigureSvg
from calcgen.site.render import Rendered, render
from calcgen.text import Diagnostic, SourceFile, error
from calcgen.trail import (
    TRAIL,
    Changes,
    Fault,
    State,
    Trail,
    TrailError,
    append,
    compare,
    history,
    load,
    record,
    replay,
)
from calcgen.trail.state import state_of
from calcgen.views import history_views, previous_views, unrecorded_views

PROGRAM = f"calcgen {__version__}"


@dataclass
class Workshop:
    """What one process remembers between builds, so that a rebuild does only what a change touches."""

    memory: Memory = field(default_factory=Memory)
    studio: Studio = field(default_factory=Studio)
    composed: Composed = field(default_factory=Composed)
    rendered: Rendered = field(default_factory=Rendered)
    calcs: dict[str, tuple[SourceFile, Calc]] = field(default_factory=dict)
    catalogues: dict[tuple[SourceFile, ...], tuple[Catalogue, tuple[Diagnostic, ...]]] = field(
        default_factory=dict
    )


def build(request: Request, workshop: Workshop, step: Callable[[str], None] = lambda _: None) -> Outcome:
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
    images, missing = read_images(request.root, calcs)
    step("evaluating")
    style = Style(project.units, project.digits, project.depth, project.preferred_units)
    catalogue, faults = _catalogue(files.profiles, workshop)
    setting = Setting(project.axes, style, catalogue, frozenset(files.references))
    unread = _unread(found)
    evaluated = evaluate_all(calcs, setting, workshop.memory, unread)
    diagnostics = (*found, *faults, *missing, *(d for calc in evaluated for d in calc.diagnostics))
    step("comparing with the trail")
    trail = _record(request, evaluated, unread, files, style)
    step("drawing")
    figures = {
        (calc.number, name): row
        for calc in evaluated
        for name, row in workshop.studio.draw(calc, project.axes, style).items()
    }
    signs = workshop.studio.draw_one(conventions(project.axes, project.depth))
    previous = previous_views(trail.trail, trail.changes, style)
    was = {address: value.was for address, value in previous.items()}
    sheets = workshop.studio.draw_map(map_drawing(evaluated, was, addresses.calc_link, addresses.feeds_link))
    step("writing")
    package = PackageInput(
        project=_facts(project),
        calcs=evaluated,
        references={key: _reference(r) for key, r in files.references.items()},
        figures={address: tuple(_figure(d) for d in row) for address, row in figures.items()},
        conventions=(_figure(signs),),
        map=tuple(_figure(sheet) for sheet in sheets),
        previous=previous,
        history=history_views(trail.trail, style),
        pending=trail.pending,
        unrecorded=unrecorded_views(trail.trail, trail.changes, style) if trail.pending else (),
        version=__version__,
        diagnostics=(*found, *faults, *missing),
        built=trail.trail.order[-1].when if trail.trail.order else "",
        images=images,
    )
    summaries = tuple(_summary(calc) for calc in evaluated)
    publish(
        render(compose(package, workshop.composed), workshop.rendered),
        request.out,
        {
            "key": key_of(request.root, images, records=request.records),
            "images": sorted(images),
            "clean": not diagnostics and trail.whole,
            "sources": {source.path: source.digest for source in _sources(files)},
            "trail_head": trail.trail.order[-1].digest if trail.trail.order else "",
            "calcs": [asdict(summary) for summary in summaries],
        },
        durable=request.durable,
    )
    return Outcome(summaries, diagnostics, published=True, notes=trail.notes, trail_at_fault=trail.at_fault)


def _unread(found: tuple[Diagnostic, ...]) -> frozenset[str]:
    """Return the numbers of calcs whose files cannot be read, from the faults of the project's files."""
    paths = (PurePosixPath(d.source.path) for d in found)
    return frozenset(path.stem for path in paths if path.parent.name == "calcs")


def _facts(project: Project) -> ProjectFacts:
    return ProjectFacts(
        title=project.title,
        axes=project.axes,
        number=project.number,
        client=project.client,
        originator=project.originator,
        checker=project.checker,
        depth=project.depth,
        units=project.units,
        digits=project.digits,
    )


def _reference(r: Reference) -> ReferenceFacts:
    return ReferenceFacts(
        title=r.title,
        number=r.number,
        edition=r.edition,
        author=r.author,
        publisher=r.publisher,
        year=r.year,
        note=r.note,
    )


def _figure(drawn: Drawn) -> FigureSvg:
    return FigureSvg(drawn.title, drawn.description, drawn.wide, drawn.narrow, drawn.listed)


def _calc(source: SourceFile, workshop: Workshop) -> Calc:
    """Read a calc, unless its text is the one read before."""
    kept = workshop.calcs.get(source.path)
    if kept is None or kept[0] != source:
        kept = (source, calc_from(source))
        workshop.calcs[source.path] = kept
    return kept[1]


def _sources(files: ProjectFiles) -> tuple[SourceFile, ...]:
    """Return all files of the project that a build reads."""
    references = (files.references_source,) if files.references_source is not None else ()
    return (files.settings, *references, *files.calcs, *files.profiles)


def _catalogue(
    sources: tuple[SourceFile, ...], workshop: Workshop
) -> tuple[Catalogue, tuple[Diagnostic, ...]]:
    """Return the program's catalogue joined by the office's own, and the faults of the latter."""
    if sources not in workshop.catalogues:
        workshop.catalogues.clear()
        workshop.catalogues[sources] = joined_catalogue(sources)
    return workshop.catalogues[sources]


@dataclass(frozen=True)
class _Recorded:
    """The trail as it stands, the changes that the package marks, and what to tell.

    `changes` are pending ones where the build does not record, else those of the last entry; `whole` says
    that nothing was wrong with the file.
    """

    trail: Trail
    changes: Changes
    pending: bool
    notes: tuple[str, ...]
    at_fault: bool
    whole: bool


def _record(
    request: Request,
    calcs: tuple[EvaluatedCalc, ...],
    unread: frozenset[str],
    files: ProjectFiles,
    style: Style,
) -> _Recorded:
    """Append what changed to the trail, or only compare with it."""
    references = {key: f"{r.title} {r.edition}".strip() for key, r in files.references.items()}
    path = request.root / TRAIL

    def state(trail: Trail) -> State:
        return state_of(calcs, references, replay(trail), style, unread)

    if not request.records:
        trail, faults = load(path)
        pending = compare(replay(trail), state(trail))
        changes = pending or (history(trail)[0].changes if trail.order else pending)
        notes = [_told(f) for f in faults]
        return _Recorded(trail, changes, bool(pending), tuple(notes), _at_fault(faults), whole=not faults)
    appended = append(
        path,
        lambda trail: record(
            trail, state(trail), when=request.when, who=request.who, why=request.why, program=PROGRAM
        ),
    )
    notes = [_told(f) for f in appended.faults]
    if appended.set_aside is not None:
        notes.append(f"warning: a torn last line of {TRAIL} was set aside in {appended.set_aside.name}")
    if appended.entry is not None:
        count = len(appended.entry.changes)
        notes.append(f"{TRAIL}: {count} change{'s' if count > 1 else ''} recorded")
    entries = history(appended.trail)
    return _Recorded(
        appended.trail,
        entries[0].changes if entries else Changes(()),
        pending=False,
        notes=tuple(notes),
        at_fault=_at_fault(appended.faults),
        whole=not appended.faults and appended.set_aside is None,
    )


def _at_fault(faults: tuple[Fault, ...]) -> bool:
    return any(fault.severity == "error" for fault in faults)


def _told(fault: Fault) -> str:
    hint = f"\n      hint: {fault.hint}" if fault.hint else ""
    return f"{TRAIL}:{fault.line}: {fault.severity}: {fault.message}{hint}"


def _summary(calc: EvaluatedCalc) -> Summary:
    governing = calc.governing
    return Summary(
        calc.number,
        calc.calc.title,
        calc.standing,
        governing.label if governing is not None else calc.reason,
        governing.utilisation if governing is not None else None,
    )


def image_path(calc: Calc, address: str) -> str | None:
    """Return the path in the project of an image that a calc shows; None where it leaves the project."""
    path = normpath(f"{calc.source.path.rpartition('/')[0]}/{unquote(address)}")
    outside = path.startswith(("..", "/")) or "://" in address or "\\" in path
    return None if outside else path


def read_images(root: Path, calcs: tuple[Calc, ...]) -> tuple[dict[str, bytes], tuple[Diagnostic, ...]]:
    """Return the images that prose shows, by path in the project, and a fault for each that is missing.

    An image's address is relative to its calc, as CommonMark has it, and stays inside the project.
    """
    images: dict[str, bytes] = {}
    faults: list[Diagnostic] = []
    for calc in calcs:
        for address, span in (i for s in calc.segments if isinstance(s, Prose) for i in s.images):
            path = image_path(calc, address)
            target = root / path if path is not None else None
            if target is None or not target.is_file():
                message = f"there is no image '{address}' in this project"
                hint = "the address is relative to the calc's file"
                faults.append(error("image-missing", calc.source, span, message, hint=hint))
            elif path is not None:
                images[path] = target.read_bytes()
    return images, tuple(faults)
