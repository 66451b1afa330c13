"""A browser for the tests, and packages to walk: built once."""

from __future__ import annotations

import os
import shutil
from collections.abc import Iterator
from dataclasses import dataclass
from datetime import UTC, datetime
from pathlib import Path

import pytest
from playwright.sync_api import Browser, sync_playwright

from calcgen.outcome import Request
from calcgen.pipeline import Workshop, build
from calcgen.publishing import publish
from calcgen.site.compose import compose
from calcgen.site.render import render
from tests.browser.extreme import extreme
from tests.browser.walk import Survey, survey

PROJECTS = Path(__file__).parents[2] / "projects"
_NAMES = ("chromium", "chromium-browser", "google-chrome")


def _chromium() -> str | None:
    return next((found for name in _NAMES if (found := shutil.which(name))), None)


@pytest.fixture(scope="session")
def browser() -> Iterator[Browser]:
    """Yield Chromium; where there is none the tests are skipped, but not in CI."""
    path = _chromium()
    if path is None and not os.environ.get("CI"):
        pytest.skip("no Chromium on this machine")
    assert path is not None, "CI has to have Chromium"
    with sync_playwright() as playwright:
        started = playwright.chromium.launch(executable_path=path, args=["--no-sandbox"])
        yield started
        started.close()


@dataclass(frozen=True)
class Walked:
    """A package on disk and what a walk over it found."""

    package: Path
    survey: Survey


MANUAL = pytest.param("manual", marks=pytest.mark.slow)  # as many pages as the others together


@pytest.fixture(scope="session", params=["heron-lock", "mill-loft", MANUAL, "extreme"])
def walked(
    request: pytest.FixtureRequest, browser: Browser, tmp_path_factory: pytest.TempPathFactory
) -> Walked:
    """Return a package: the two demo projects, the manual, and one with whatever could break a page."""
    name = str(request.param)
    out = tmp_path_factory.mktemp("package") / name
    if name == "extreme":
        publish(render(compose(extreme())), out, {"key": ""}, durable=False)
    else:
        when = datetime(2026, 12, 1, 9, 30, tzinfo=UTC)
        outcome = build(
            Request(PROJECTS / name, out, when, "A. Mason", records=False, durable=False), Workshop()
        )
        assert outcome.published
    return Walked(out, survey(browser, out))
