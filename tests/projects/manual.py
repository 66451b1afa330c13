"""The manual as the tests read it: its chapters, its examples, and the messages it explains."""

from __future__ import annotations

import re
from dataclasses import dataclass
from functools import cache
from pathlib import Path

from calcgen.language.blocks import LATER, READERS

MANUAL = Path(__file__).parents[2] / "projects" / "manual"

_SHOWN = re.compile(r"^````(?P<info>[^\n`]*)\n(?P<text>.*?)^````$", re.MULTILINE | re.DOTALL)
_FENCE = re.compile(r"^```(?P<kind>\w+)[^\n]*\n.*?^```$", re.MULTILINE | re.DOTALL)
_CODE = re.compile(r"^(`{3,})[^\n]*\n.*?^\1$", re.MULTILINE | re.DOTALL)
_MESSAGE = re.compile(
    r"^## (?P<code>[a-z0-9-]+)\n\n(?P<text>(?:[^\n]+\n)+)\n"
    r"Wrong:\n\n````bad(?P<kind>[^\n]*)\n(?P<bad>.*?)^````\n\nRight:\n\n````good(?P=kind)\n(?P<good>.*?)^````$",
    re.MULTILINE | re.DOTALL,
)


@dataclass(frozen=True)
class Message:
    """A diagnostic as the manual explains it, with a text that gives it and one that does not.

    `kind` is '' where the texts are blocks of a calc, 'file' for a whole calc file, and otherwise the path of
    the project's file that they are.
    """

    code: str
    text: str
    kind: str
    bad: str
    good: str


@cache
def chapters() -> dict[str, str]:
    """Return the text of each chapter by its number."""
    return {p.stem: p.read_text(encoding="utf-8") for p in sorted((MANUAL / "calcs").glob("*.md"))}


@cache
def everything() -> str:
    """Return the text of the whole manual."""
    return "\n".join(chapters().values())


@cache
def prose() -> str:
    """Return the manual without what stands in fences."""
    return _CODE.sub("", everything())


@cache
def words() -> frozenset[str]:
    """Return each text that stands in code marks in the manual's prose, and each word of it."""
    marked = re.findall(r"(?<!`)`([^`\n]+)`(?!`)", prose())
    return frozenset(marked) | {word for text in marked for word in re.findall(r"[\w'°%.-]+", text)}


def rows(chapter: str) -> list[tuple[str, ...]]:
    """Return the rows of all tables of a chapter, each as the text of its cells."""
    lines = (line for line in _CODE.sub("", chapters()[chapter]).splitlines() if line.startswith("|"))
    return [tuple(cell.strip() for cell in line.strip("|").split("|")) for line in lines]


def shown_and_live(chapter: str) -> list[tuple[str, str]]:
    """Return each source that is shown as such, and as much of the text that follows it."""
    text = chapters()[chapter]
    return [
        (m["text"], text[m.end() :].lstrip("\n")[: len(m["text"])])
        for m in _SHOWN.finditer(text)
        if not m["info"]
    ]


def live_kinds(text: str) -> list[str]:
    """Return the kinds of the live blocks of a text, those in fences of four marks left out."""
    return [m["kind"] for m in _FENCE.finditer(_SHOWN.sub("", text)) if m["kind"] in (*READERS, *LATER)]


@cache
def messages() -> tuple[Message, ...]:
    """Return every message that the manual explains with examples."""
    return tuple(
        Message(m["code"], m["text"], m["kind"].strip(), m["bad"], m["good"])
        for m in _MESSAGE.finditer(everything())
    )
