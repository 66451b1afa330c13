"""Packages as a checker opens them: from disk, on a phone, on a desk and on paper."""

from __future__ import annotations

from pathlib import Path

import pytest
from playwright.sync_api import Browser

from tests.browser import walk
from tests.browser.walk import DESKTOP, SURFACES, Surface, address, opened

pytestmark = pytest.mark.browser


def test_nothing_is_said_on_the_console(browser: Browser, built: Path) -> None:
    assert walk.console_errors(browser, built) == []


def test_every_link_leads_somewhere(browser: Browser, built: Path) -> None:
    assert walk.broken_links(browser, built) == []


@pytest.mark.parametrize("surface", SURFACES, ids=lambda s: s.name)
def test_nothing_is_wider_than_its_place(browser: Browser, built: Path, surface: Surface) -> None:
    assert walk.overflows(browser, built, surface) == []


def test_text_in_figures_is_found(browser: Browser, built: Path) -> None:
    path = "conventions.html"
    for anchor, text in walk.figure_texts(browser, built, path):
        assert f"{path}#{anchor}" in walk.search(browser, built, text)


def test_a_table_sorts_and_filters(browser: Browser, built: Path) -> None:
    column = "() => [...document.querySelectorAll('.sortable tbody tr')].filter((r) => r.checkVisibility())"
    with opened(browser, DESKTOP) as page:
        page.goto(address(built, "inputs.html"))
        values = f"{column}.map((r) => r.cells[2].textContent)"
        page.get_by_role("button", name="value").click()
        rising = page.evaluate(f"{values}")
        page.get_by_role("button", name="value").click()
        assert page.evaluate(f"{values}") == rising[::-1]
        page.get_by_label("Filter").fill("span")
        shown = page.evaluate(f"{column}.map((r) => r.textContent.toLowerCase())")
        assert shown
        assert len(shown) < len(rising)
        assert all("span" in text for text in shown)


def test_the_ground_is_chosen_and_remembered(browser: Browser, built: Path) -> None:
    ground = "() => getComputedStyle(document.querySelector('main')).backgroundColor"
    with opened(browser, DESKTOP) as page:
        page.goto(address(built, "index.html"))
        dark = page.evaluate(ground)
        page.get_by_role("button", name="light ground").click()
        light = page.evaluate(ground)
        assert light != dark
        page.reload()
        assert page.evaluate(ground) == light


def test_everything_can_be_read_without_scripts(browser: Browser, built: Path) -> None:
    context = browser.new_context(java_script_enabled=False)
    page = context.new_page()
    page.goto(address(built, "checks.html"))
    assert page.get_by_role("heading", name="Checks").is_visible()
    assert page.get_by_role("table").is_visible()
    context.close()
