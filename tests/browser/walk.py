"""Walks a package in a browser: each function returns what is wrong, in words."""

from __future__ import annotations

from collections.abc import Iterator
from contextlib import contextmanager
from dataclasses import dataclass
from pathlib import Path
from typing import Literal, TypeAlias
from urllib.parse import quote, unquote, urlsplit

from playwright.sync_api import Browser, Page

Medium: TypeAlias = Literal["screen", "print"]


@dataclass(frozen=True)
class Surface:
    """What a page is laid out on; the width of a printed sheet is that between its margins."""

    name: str
    width: int
    medium: Medium
    dark: bool = False


PHONE = Surface("phone", 390, "screen")
TABLET = Surface("tablet", 820, "screen")
DESKTOP = Surface("desktop", 1280, "screen", dark=True)
A4 = Surface("A4", 695, "print")  # 184 mm
LETTER = Surface("Letter", 717, "print")  # 190 mm
SURFACES = (PHONE, TABLET, DESKTOP, A4, LETTER)

# Text beyond the edge of the cell, the block or the picture that holds it, and mathematics that would have to
# be scrolled on paper. What scrolls on a screen may be longer than its place.
_OVERFLOWS = """
(printed) => {
  const name = (element) => `${element.tagName.toLowerCase()}${element.id ? "#" + element.id : ""}.${element.className.baseVal ?? element.className}`;
  const scrolls = (element) => {
    for (let e = element; e && e !== document.body; e = e.parentElement) {
      if (["auto", "scroll", "hidden"].includes(getComputedStyle(e).overflowX)) return true;
    }
    return false;
  };
  const found = [];
  const page = document.documentElement;
  if (page.scrollWidth > page.clientWidth) found.push(`the page is ${page.scrollWidth} wide`);
  const walker = document.createTreeWalker(document.querySelector("main"), NodeFilter.SHOW_TEXT);
  const range = document.createRange();
  while (walker.nextNode()) {
    const node = walker.currentNode;
    const parent = node.parentElement;
    if (!node.data.trim() || parent.closest("thead, noscript, style, script, title, desc") || !parent.checkVisibility()) continue;
    const holder = parent.closest("td, th, dd, dt, li, figure, .prose, p, pre, main");
    range.selectNodeContents(node);
    const text = range.getBoundingClientRect();
    const edge = holder.getBoundingClientRect();
    if (!text.width || (!printed && scrolls(parent))) continue;
    if (text.right > edge.right + 1 || text.left < edge.left - 1) {
      found.push(`"${node.data.trim().slice(0, 40)}" leaves ${name(holder)} by ${Math.round(Math.max(text.right - edge.right, edge.left - text.left))}`);
    }
  }
  if (printed) {
    for (const part of document.querySelectorAll(".part, .left, .scrolls, pre")) {
      if (part.checkVisibility() && part.scrollWidth > part.clientWidth + 1) {
        found.push(`${name(part)} "${part.textContent.slice(0, 30)}" is cut: ${part.scrollWidth} in ${part.clientWidth}`);
      }
    }
  }
  return found;
}
"""

# Rows and figures that a page break would split.
_SPLITS = """
() => [...document.querySelectorAll("main tr, main figure")]
  .filter((e) => e.checkVisibility() && getComputedStyle(e).breakInside !== "avoid" && !e.closest("thead"))
  .map((e) => `${e.tagName} ${e.id} may be split`)
"""


def pages_of(package: Path) -> tuple[str, ...]:
    """Return the paths of all pages of a package."""
    return tuple(sorted(p.relative_to(package).as_posix() for p in package.rglob("*.html")))


@contextmanager
def opened(browser: Browser, surface: Surface) -> Iterator[Page]:
    """Yield a blank page of a surface."""
    context = browser.new_context(
        viewport={"width": surface.width, "height": 900}, color_scheme="dark" if surface.dark else "light"
    )
    try:
        page = context.new_page()
        page.emulate_media(media=surface.medium)
        yield page
    finally:
        context.close()


def address(package: Path, path: str, query: str = "") -> str:
    """Return the address of a page on disk."""
    return (package / path).resolve().as_uri() + (f"?q={quote(query)}" if query else "")


def console_errors(browser: Browser, package: Path) -> list[str]:
    """Return what any page writes to the console or fails to load."""
    found: list[str] = []
    with opened(browser, DESKTOP) as page:
        page.on("console", lambda m: found.append(m.text) if m.type in ("error", "warning") else None)
        page.on("pageerror", lambda fault: found.append(str(fault)))
        page.on("requestfailed", lambda request: found.append(f"{request.url} cannot be loaded"))
        for path in pages_of(package):
            before = len(found)
            page.goto(address(package, path))
            found[before:] = [f"{path}: {text}" for text in found[before:]]
    return found


def broken_links(browser: Browser, package: Path) -> list[str]:
    """Return the links and images that lead to no file, and the anchors that are on no page."""
    links: dict[str, list[str]] = {}
    ids: dict[str, set[str]] = {}
    with opened(browser, DESKTOP) as page:
        for path in pages_of(package):
            page.goto(address(package, path))
            links[path] = page.evaluate(
                "() => [...document.querySelectorAll('a[href], img[src], link[href], script[src]')]"
                ".map((e) => e.href || e.src)"
            )
            ids[path] = set(page.evaluate("() => [...document.querySelectorAll('[id]')].map((e) => e.id)"))
    root = package.resolve()
    found: list[str] = []
    for path, targets in links.items():
        for target in dict.fromkeys(targets):
            parts = urlsplit(target)
            if parts.scheme != "file":
                continue
            file = Path(unquote(parts.path))
            if not file.is_file() or not file.is_relative_to(root):
                found.append(f"{path}: {target} is not in the package")
            elif parts.fragment and unquote(parts.fragment) not in ids[file.relative_to(root).as_posix()]:
                found.append(f"{path}: {unquote(target)} has no such anchor")
    return found


def overflows(browser: Browser, package: Path, surface: Surface) -> list[str]:
    """Return what is wider than its place on a surface."""
    found: list[str] = []
    with opened(browser, surface) as page:
        for path in pages_of(package):
            page.goto(address(package, path))
            page.evaluate("() => document.fonts.ready.then(() => true)")
            found += [f"{path}: {text}" for text in page.evaluate(_OVERFLOWS, surface.medium == "print")]
            if surface.medium == "print":
                found += [f"{path}: {text}" for text in page.evaluate(_SPLITS)]
    return found


def figure_texts(browser: Browser, package: Path, path: str) -> list[tuple[str, str]]:
    """Return (anchor, longest label) of each figure on a page."""
    with opened(browser, DESKTOP) as page:
        page.goto(address(package, path))
        found = page.evaluate(
            "() => [...document.querySelectorAll('figure[id]')].map((f) => [f.id,"
            " [...f.querySelectorAll('.wide text')].map((t) => t.textContent.trim())"
            ".sort((a, b) => b.length - a.length)[0] ?? ''])"
        )
    return [(str(anchor), str(text)) for anchor, text in found if text]


def search(browser: Browser, package: Path, words: str) -> list[str]:
    """Return the addresses that the search page finds for some words, relative to the package."""
    with opened(browser, DESKTOP) as page:
        page.goto(address(package, "search.html", words))
        page.wait_for_function("() => document.getElementById('search-count').textContent")
        return [
            unquote(str(href))
            for href in page.evaluate(
                "() => [...document.querySelectorAll('#search-results a')].map((a) => a.getAttribute('href'))"
            )
        ]
