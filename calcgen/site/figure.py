"""A figure as pages take it: SVG text for a wide and for a narrow place."""

from __future__ import annotations

import re
from dataclasses import dataclass
from html import unescape

_LABEL = re.compile(r"<text\b[^>]*>(.*?)</text>", re.DOTALL)
_TAG = re.compile(r"<[^>]*>")


@dataclass(frozen=True)
class FigureSvg:
    """A figure drawn twice; the ids in its texts are unique in the package.

    `listed` is what belongs to it and has no room in one of the two.
    """

    title: str
    description: str
    wide: str
    narrow: str
    listed: tuple[str, ...] = ()

    @property
    def labels(self) -> str:
        """The words and numbers that stand in the figure, for the search."""
        return " ".join(unescape(_TAG.sub("", text)).strip() for text in _LABEL.findall(self.wide))
