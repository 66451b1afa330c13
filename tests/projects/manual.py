"""The manual as the tests read it: its chapters, its examples, and the diagnostics it explains."""

from __future__ import annotations

import re
from dataclasses import dataclass
from functools import cache
from pathlib import Path

MANUAL = Path(__file__).parents[2] / "projects" / "manual"

_FENCE = re.compile(r"^````(?P<info>[^\n`]*)\n(?P<text>.*?)^````$", re.MULTILINE | re.DOTALL)
_LIVE = re.compile(r"^```(\w+)[^\n]*\n.*?^```$", re.MULTILINE | re.DOTALL)
_MESSAGE = re.compile(
    r"^## (?P<code>[a-z0-9-]+)\n\n(?P<text>[^\n]+)\n\n"
    r"````bad(?P<kind>[^\n]*)\n(?P<bad>.*?)^````\n\n````good(?P=kind)\n(?P<good>.*?)^````$",
    re.MULTILINE | re.DOTALL,
)


@dataclass(frozen=True)
class Explained:
    """A diagnostic as the manual explains it; `kind` is '' for blocks of a calc, 'file' for a whole calc
    file, and otherwise the path of the file that the examples are.
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


def words() -> frozenset[str]:
    """Return every text that stands in `code` marks in the manual's prose, and each word of it."""
    prose = re.sub(r"^(`{3,})[^\n]*\n.*?^\1$", "", everything(), flags=re.MULTILINE | re.DOTALL)
    marked = re.findall(r"(?<!`)`([^`\n]+)`(?!`)", prose)
    return frozenset(marked) | {word for text in marked for word in re.findall(r"[\w'°%]+", text)}


def shown_and_live(chapter: str) -> list[tuple[str, str]]:
    """Return each source shown in a fence of four marks without info, with the text that follows it."""
    text = chapters()[chapter]
    found = []
    for match in _FENCE.finditer(text):
        if not match["info"]:
            below = text[match.end() :].lstrip("\n")
            found.append((match["text"], below[: len(match["text"])]))
    return found


def live_blocks(chapter: str) -> list[str]:
    """Return the kinds of the live blocks of a chapter, those that are shown as source left out."""
    from calcgen.language.blocks import LATER, READERS

    outside = _FENCE.sub("", chapters()[chapter])
    return [m[1] for m in _LIVE.finditer(outside) if m[1] in (*READERS, *LATER)]


@cache
def explained() -> tuple[Explained, ...]:
    """Return every diagnostic that the manual explains with examples."""
    return tuple(
        Explained(m["code"], m["text"], m["kind"].strip(), m["bad"], m["good"])
        for m in _MESSAGE.finditer(everything())
    )
