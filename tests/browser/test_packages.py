"""Packages as a checker opens them: from disk, on a phone, on a desk and on paper."""

from __future__ import annotations

import pytest
from playwright.sync_api import Browser

from tests.browser.conftest import Walked
from tests.browser.walk import SURFACES, address, opened, search

pytestmark = pytest.mark.browser


def test_nothing_is_said_on_the_console(walked: Walked) -> None:
    assert walked.survey.console == ()


def test_every_link_leads_somewhere(walked: Walked) -> None:
    assert walked.survey.links == ()


@pytest.mark.parametrize("surface", [s.name for s in SURFACES])
def test_nothing_is_wider_than_its_place(walked: Walked, surface: str) -> None:
    assert walked.survey.overflows[surface] == ()


def test_text_in_figures_is_found(browser: Browser, walked: Walked) -> None:
    first = {href.partition("#")[0]: (href, text) for href, text in reversed(walked.survey.figures)}
    assert first
    for href, text in first.values():
        assert href in search(browser, walked.package, text)


def test_a_table_sorts_and_filters(browser: Browser, walked: Walked) -> None:
    rows = "[...document.querySelectorAll('.sortable tbody tr')].filter((r) => r.checkVisibility())"
    with opened(browser) as page:
        page.goto(address(walked.package, "inputs.html"))
        values = f"() => {rows}.map((r) => r.cells[2].textContent)"
        page.get_by_role("button", name="value").click()
        rising = page.evaluate(values)
        page.get_by_role("button", name="value").click()
        assert page.evaluate(values) == rising[::-1]
        page.get_by_label("Filter").fill("span")
        shown = page.evaluate(f"() => {rows}.map((r) => r.textContent.toLowerCase())")
        assert 0 < len(shown) < len(rising)
        assert all("span" in text for text in shown)


def test_the_ground_is_chosen_and_remembered(browser: Browser, walked: Walked) -> None:
    ground = "() => getComputedStyle(document.querySelector('main')).backgroundColor"
    with opened(browser, dark=True) as page:
        page.goto(address(walked.package, "index.html"))
        dark = page.evaluate(ground)
        page.get_by_role("button", name="light ground").click()
        light = page.evaluate(ground)
        assert light != dark
        page.reload()
        assert page.evaluate(ground) == light


def test_a_register_can_be_read_without_scripts(browser: Browser, walked: Walked) -> None:
    with opened(browser, scripts=False) as page:
        page.goto(address(walked.package, "checks.html"))
        assert page.get_by_role("heading", name="Checks").is_visible()
        assert page.get_by_role("table").is_visible()
