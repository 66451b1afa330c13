"""A browser for the tests, and packages to walk: built once."""

from __future__ import annotations

import os
import shutil
from collections.abc import Iterator
from datetime import UTC, datetime
from pathlib import Path

import pytest
from playwright.sync_api import Browser, sync_playwright

from calcgen.pipeline import Request, Workshop, build
from calcgen.publishing import publish
from calcgen.site.compose import compose
from calcgen.site.render import render
from tests.browser.extreme import extreme

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


@pytest.fixture(scope="session", params=["heron-lock", "mill-loft", "manual", "extreme"])
def built(request: pytest.FixtureRequest, tmp_path_factory: pytest.TempPathFactory) -> Path:
    """Return the folder of a package."""
    name = str(request.param)
    out = tmp_path_factory.mktemp("package") / name
    if name == "extreme":
        publish(render(compose(extreme())), out, {"key": ""}, durable=False)
        return out
    when = datetime(2026, 12, 1, 9, 30, tzinfo=UTC)
    request_ = Request(PROJECTS / name, out, when, "A. Mason", records=False, durable=False)
    outcome = build(request_, Workshop())
    assert outcome.published
    return out
