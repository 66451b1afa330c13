"""Commands and exit codes; nothing else."""

from __future__ import annotations

import gc
import os
import subprocess
import sys
import threading
import time
import webbrowser
from collections.abc import Iterator, Sequence
from contextlib import contextmanager
from datetime import UTC, datetime
from pathlib import Path
from typing import TYPE_CHECKING

import click

from calcgen import __version__

if TYPE_CHECKING:
    from calcgen.outcome import Outcome, Request
    from calcgen.text import Diagnostic
    from calcgen.watch import Change

FAILED = 1
_WORDS = {"satisfied": "green", "exceeded": "red", "in error": "red", "not evaluated": "yellow"}


class Commands(click.Group):
    """The commands; a mistyped one is answered with the nearest."""

    def resolve_command(
        self, ctx: click.Context, args: list[str]
    ) -> tuple[str | None, click.Command | None, list[str]]:
        """Find a command, or fail with the nearest name."""
        try:
            return super().resolve_command(ctx, args)
        except click.UsageError as fault:
            from calcgen.text import nearest

            found = nearest(args[0], self.list_commands(ctx)) if args else None
            hint = f" Did you mean '{found}'?" if found else ""
            raise click.UsageError(f"{fault.message}{hint}", ctx) from None


@click.group(cls=Commands, context_settings={"help_option_names": ["-h", "--help"]})
@click.version_option(__version__, prog_name="calcgen")
def main() -> None:
    """Build checked HTML calc packages from plain-text calc files."""


@main.command()
@click.argument("folder", metavar="DIR", type=click.Path(path_type=Path, file_okay=False))
def start(folder: Path) -> None:
    """Make a small project that builds."""
    from calcgen.start import FolderNotEmptyError, start

    try:
        written = start(folder)
    except FolderNotEmptyError:
        raise click.UsageError(f"{folder} is not empty; choose a new folder") from None
    except OSError as fault:
        raise click.ClickException(f"{folder} cannot be written: {fault.strerror}") from None
    for path in written:
        click.echo(f"  {folder / path}")
    click.echo(f"Next: calcgen build {folder} --open")


@main.command()
@click.argument("folder", metavar="[DIR]", default=".", type=click.Path(path_type=Path))
@click.option("--out", type=click.Path(path_type=Path), help="Where the package goes (default DIR/package).")
@click.option("--strict", is_flag=True, help="Exit 1 when a check is exceeded.")
@click.option("--because", metavar="TEXT", help="Why something changed, for the trail.")
@click.option("--open", "opens", is_flag=True, help="Open the package in a browser.")
def build(folder: Path, out: Path | None, because: str | None, *, strict: bool, opens: bool) -> None:
    """Build the package of the project in DIR."""
    from calcgen.current import standing_package

    request = _request(_project(folder), out, because)
    began = time.perf_counter()
    outcome = standing_package(request) or _built(request)
    _tell(outcome)
    if outcome.published or outcome.current:
        state = "is up to date" if outcome.current else "built"
        click.echo(f"{request.out / 'index.html'} {state} in {time.perf_counter() - began:.2f} s")
        if opens:
            webbrowser.open((request.out / "index.html").resolve().as_uri())
    if outcome.failed or (strict and outcome.exceeded):
        sys.exit(FAILED)


def _built(request: Request) -> Outcome:
    """Build; the stages are loaded here, so that a package that is current does not wait for them."""
    with _progress() as step, _no_collection():
        from calcgen.pipeline import Workshop, build

        return build(request, Workshop(), step)


@main.command()
@click.argument("folder", metavar="[DIR]", default=".", type=click.Path(path_type=Path))
@click.option("--port", type=click.IntRange(0, 65535), default=8600, show_default=True)
@click.option("--out", type=click.Path(path_type=Path), help="Where the package goes (default DIR/package).")
def watch(folder: Path, port: int, out: Path | None) -> None:
    """Rebuild at every save, and serve the package to this machine."""
    from calcgen.pipeline import Workshop
    from calcgen.pipeline import build as run
    from calcgen.preview import Preview
    from calcgen.watch import watch as follow

    root = _project(folder)
    workshop = Workshop()
    destination = out or root / "package"
    with Preview(destination, port, say=click.echo) as preview:
        click.echo(f"{preview.url}  (Ctrl-C ends)")
        fault, stood = "", ""  # why there is no new package; when there was one last

        def rebuild(changes: frozenset[Change]) -> None:
            nonlocal fault, stood
            began = time.perf_counter()
            request = _request(root, out, None, records=False)
            with _no_collection():
                outcome = run(request, workshop)
                before, fault = fault, _fault(outcome, stood)
                if outcome.published or before != fault:
                    preview.announce(fault)
                stood = stood if fault else f"{datetime.now().astimezone():%H:%M:%S}"
            _tell(outcome, brief=True)
            what = ", ".join(sorted(c.path for c in changes if c.path != "."))
            click.echo(
                f"{datetime.now().astimezone():%H:%M:%S}  {1000 * (time.perf_counter() - began):.0f} ms  "
                f"{_standings(outcome)}{f'  ({what})' if what else ''}"
            )

        follow(root, [destination], rebuild, threading.Event(), say=click.echo)
    click.echo("ended")


@main.command()
@click.argument("words", metavar="[PATTERN]", nargs=-1)
@click.option(
    "--project",
    "folder",
    metavar="DIR",
    type=click.Path(path_type=Path),
    help="Also list the office's profiles/*.csv of this project (default: the working folder, if it is one).",
)
def profiles(words: tuple[str, ...], folder: Path | None) -> None:
    """List catalogued sections: the families, or the sections that PATTERN names.

    In PATTERN * stands for any characters and ? for one: "IPE *", "W18x*", "ipe 2?0".
    """
    from calcgen.catalogues import joined_catalogue, of_outline
    from calcgen.profiles import listing
    from calcgen.project import load_project

    here = Path() if Path("project.toml").is_file() else None
    root = _project(folder) if folder else here
    files, reading = load_project(root) if root else (None, ())
    catalogue, joining = joined_catalogue(files.profiles if files else ())
    faults = (*(d for d in reading if d.source.path.startswith("profiles/")), *joining)
    _tell_diagnostics(faults)
    pattern = " ".join(words)
    found = listing.matching(catalogue, pattern) if words else ()
    if found:
        click.echo(listing.table(found, of_outline))
    elif not words:
        click.echo(listing.families(catalogue))
    else:
        near = ", ".join(listing.near(catalogue, pattern))
        hint = f"the nearest are {near}" if near else f"families are {', '.join(catalogue.families)}"
        raise click.ClickException(f"no section matches '{pattern}'; {hint}")
    if faults:
        sys.exit(FAILED)


def _project(folder: Path) -> Path:
    """Return the folder of a project, or fail as wrong usage."""
    if folder.is_file() and folder.name == "project.toml":
        folder = folder.parent
    if not folder.is_dir():
        raise click.UsageError(f"there is no folder {folder}{_neighbour(folder)}")
    if not (folder / "project.toml").is_file():
        raise click.UsageError(f"{folder} has no project.toml; 'calcgen start DIR' makes a project")
    return folder


def _neighbour(folder: Path) -> str:
    from calcgen.text import nearest

    try:
        found = nearest(folder.name, [p.name for p in folder.parent.iterdir() if p.is_dir()])
    except OSError:
        return ""
    return f"; did you mean {folder.parent / found}?" if found else ""


def _request(root: Path, out: Path | None, why: str | None, *, records: bool = True) -> Request:
    from calcgen.outcome import Request

    return Request(
        root=root,
        out=out or root / "package",
        when=datetime.now(UTC),
        who=_who(root),
        why=why,
        records=records,
        durable=records,
    )


def _who(root: Path) -> str:
    """Return who builds: CALCGEN_AUTHOR, the name in git's settings, or the login name."""
    named = os.environ.get("CALCGEN_AUTHOR")
    if named:
        return named
    try:
        command = ["git", "-C", str(root), "config", "user.name"]
        found = subprocess.run(command, capture_output=True, text=True, timeout=5, check=False)  # noqa: S603
        if found.stdout.strip():
            return found.stdout.strip()
    except (OSError, subprocess.SubprocessError):
        pass
    return os.environ.get("USER") or os.environ.get("USERNAME") or "unknown"


@contextmanager
def _no_collection() -> Iterator[None]:
    """Put off the collection of garbage: a build and its imports make a million objects and few cycles."""
    gc.disable()
    try:
        yield
    finally:
        gc.enable()


class _progress:  # noqa: N801  a function to its callers
    """Names the stage on a terminal when a build takes long; silent in a pipe."""

    def __init__(self) -> None:
        self._began = time.perf_counter()
        self._shown = False

    def __enter__(self) -> _progress:
        return self

    def __exit__(self, *_: object) -> None:
        if self._shown:
            click.echo("\r\033[K", nl=False, err=True)

    def __call__(self, stage: str) -> None:
        if sys.stderr.isatty() and time.perf_counter() - self._began > 0.5:
            self._shown = True
            click.echo(f"\r\033[K{stage} …", nl=False, err=True)


def _tell(outcome: Outcome, *, brief: bool = False) -> None:
    """Print diagnostics on the error stream, then the standing of each calc."""
    _tell_diagnostics(outcome.diagnostics)
    for note in outcome.notes:
        click.echo(note, err=True)
    if brief:
        return
    width = max((len(c.number) for c in outcome.calcs), default=0)
    for calc in outcome.calcs:
        standing = click.style(f"{calc.standing:13}", fg=_WORDS.get(calc.standing))
        ratio = f"{calc.utilisation:6.3f}" if calc.utilisation is not None else " " * 6
        click.echo(f"{calc.number:{width}}  {standing} {ratio}  {calc.title}{_governing(calc.governing)}")


def _fault(outcome: Outcome, stood: str) -> str:
    """Say why the package is not that of the project as it is now, '' where it is; `stood`: when it was."""
    if outcome.published or outcome.current:
        return ""
    from calcgen.text.terminal import render

    said = [render(d).partition("\n")[0] for d in outcome.diagnostics if d.severity == "error"][:1]
    since = f" since {stood}" if stood else ", and from an earlier run"
    return f"Not rebuilt{since}: {'; '.join(said or outcome.notes) or 'the project cannot be built'}"


def _tell_diagnostics(diagnostics: Sequence[Diagnostic]) -> None:
    from calcgen.text.terminal import render

    for diagnostic in diagnostics:
        colour = "red" if diagnostic.severity == "error" else "yellow"
        head, _, rest = render(diagnostic).partition("\n")
        click.secho(head, fg=colour, err=True)
        click.echo(rest, err=True)


def _governing(label: str) -> str:
    return f" ({label})" if label else ""


def _standings(outcome: Outcome) -> str:
    """Return how many calcs stand how: '4 satisfied, 1 exceeded'."""
    if not outcome.published:
        return "not built"
    words: Sequence[str] = [c.standing for c in outcome.calcs]
    return ", ".join(f"{words.count(w)} {w}" for w in dict.fromkeys(sorted(words)))
