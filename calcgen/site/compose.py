"""Everything evaluated -> the pages and files of the package, as pure data."""

from __future__ import annotations

import hashlib
from collections.abc import Callable, Iterable, Iterator
from dataclasses import dataclass
from functools import partial

from calcgen.evaluation.results.calc import EvaluatedCalc
from calcgen.site import addresses, registers
from calcgen.site.calc_page import calc_view
from calcgen.site.cover import cover_view
from calcgen.site.facts import PackageInput as PackageInput
from calcgen.site.facts import ProjectFacts
from calcgen.site.figure import FigureSvg
from calcgen.site.map_page import map_view
from calcgen.site.page import FilePage, Frame, HtmlPage, Page
from calcgen.site.prose import image_asset
from calcgen.site.results_json import PATH as RESULTS
from calcgen.site.results_json import results_file
from calcgen.site.search import INDEX, index_file
from calcgen.site.source_page import source_view
from calcgen.site.trail_page import trail_view

PAGES = (
    ("cover", addresses.COVER),
    ("checks", addresses.CHECKS),
    ("inputs", addresses.INPUTS),
    ("assumptions", addresses.ASSUMPTIONS),
    ("references", addresses.REFERENCES),
    ("map", addresses.MAP),
    ("trail", addresses.TRAIL),
    ("conventions", addresses.CONVENTIONS),
    ("cautions", addresses.CAUTIONS),
)
"""The pages that every page leads to."""


@dataclass(frozen=True)
class ConventionsView:
    """Axes and signs in force, drawn and in words."""

    project: ProjectFacts
    figures: tuple[FigureSvg, ...]


class Composed:
    """The pages of calcs by what they were composed from: one that nothing touched is the same object."""

    def __init__(self) -> None:
        self._kept: dict[str, tuple[object, HtmlPage]] = {}
        self._around: object = None

    def same(self, around: object) -> object:
        """Return what surrounds all pages, as the object that it was before where it is equal to that."""
        if self._around != around:
            self._around = around
        return self._around

    def page(self, path: str, made_from: object, make: Callable[[], HtmlPage]) -> HtmlPage:
        """Return the page made before from equal things, or make it."""
        kept = self._kept.get(path)
        if kept is None or kept[0] != made_from:
            kept = self._kept[path] = (made_from, make())
        return kept[1]


def compose(package: PackageInput, composed: Composed | None = None) -> tuple[Page, ...]:
    """Return all pages and files of a package, but those that every package has alike."""
    images = dict(_images(package))
    return (
        *_pages(package, {path: asset.path for path, asset in images.items()}, composed or Composed()),
        *{asset.path: asset for asset in images.values()}.values(),
        FilePage(INDEX, index_file(package)),
        FilePage(RESULTS, results_file(package)),
    )


def _pages(package: PackageInput, images: dict[str, str], composed: Composed) -> Iterator[HtmlPage]:
    project = package.project
    frame = Frame(project.title, project.number, PAGES, f"calcgen {package.version}", package.built)
    named = f"{project.number} {project.title}".strip()
    whole = _digest(package.calcs)

    def page(path: str, title: str, content: object) -> HtmlPage:
        template = f"pages/{path.removesuffix('.html')}.html"
        return HtmlPage(path, template, title, content, frame, whole, f"{named} · {title}")

    titles = tuple((c.number, c.calc.title) for c in package.calcs)
    around = composed.same((project, package.references, images, frame, titles))

    def of_calc(
        calc: EvaluatedCalc, path: str, template: str, title: str, view: Callable[[], object]
    ) -> HtmlPage:
        def make() -> HtmlPage:
            return HtmlPage(path, template, title, view(), frame, calc.calc.source.digest, head)

        head = f"{named} · {calc.number} {calc.calc.title}"
        return composed.page(path, (_behind(calc, package), around), make)

    yield page(addresses.COVER, "Cover", cover_view(package))
    for calc in package.calcs:
        path = addresses.calc_page(calc.number)
        title = f"{calc.number} {calc.calc.title}"
        yield of_calc(calc, path, "pages/calc.html", title, partial(calc_view, calc, package, images))
    yield page(addresses.CHECKS, "Checks", registers.check_entries(package))
    yield page(addresses.INPUTS, "Inputs", registers.input_entries(package))
    yield page(addresses.ASSUMPTIONS, "Assumptions", registers.assumption_entries(package))
    yield page(addresses.REFERENCES, "References", registers.reference_entries(package))
    yield page(addresses.MAP, "Which calc feeds which", map_view(package))
    yield page(addresses.TRAIL, "Trail", trail_view(package))
    yield page(addresses.CONVENTIONS, "Axes and signs", ConventionsView(project, package.conventions))
    yield page(addresses.CAUTIONS, "Cautions", None)
    yield page(addresses.SEARCH, "Search", None)
    for calc in package.calcs:
        path = addresses.source_page(calc.number)
        yield of_calc(calc, path, "pages/source.html", f"Source of {calc.number}", partial(source_view, calc))


def _behind(calc: EvaluatedCalc, package: PackageInput) -> tuple[object, ...]:
    """Return what of a package the page of a calc shows: the calc, its neighbours, its figures, its marks."""
    feeders = tuple(package.by_number.get(n) for n in sorted({origin.calc for origin in calc.depends}))
    number = calc.number
    beside = (package.neighbours.get(number), package.drawn.get(number), package.marks.get(number))
    return (calc, feeders, beside)


def _images(package: PackageInput) -> Iterator[tuple[str, FilePage]]:
    """Yield the images of the project by their path in it."""
    for path, data in sorted(package.images.items()):
        asset = image_asset(path, data)
        if asset is not None:
            yield path, FilePage(asset, data)


def _digest(calcs: Iterable[EvaluatedCalc]) -> str:
    """Return one digest of the sources of all calcs."""
    lines = sorted(f"{calc.calc.source.path} {calc.calc.source.digest}" for calc in calcs)
    return hashlib.sha256("\n".join(lines).encode()).hexdigest()
