"""Legend of a figure: swatches with their words, side by side, in as many rows as they need."""

from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from typing import Literal

import numpy as np

from calcgen.figures.labels import Box, text_width
from calcgen.figures.outline import Part, Tone, draw_tone
from calcgen.figures.picture import CHAIN, DASH, LINE, SMALL, Label, Sketch, Stroke, wrap
from calcgen.figures.zones import Zone, ZoneKind, draw_zone_mark

Mark = Literal["bar", "pressed bar", "line", "dashes", "chain", "joint"]

BREADTH, HEIGHT = 16.0, 10.0  # pixels of a swatch
AFTER = 6.0  # from a swatch to its words
APART = 16.0  # from one entry to the next


@dataclass(frozen=True)
class Entry:
    """A swatch and its words: the tone of a part, the mark of a zone, a bar, or a line."""

    label: str
    swatch: Tone | ZoneKind | Mark


def entries_of(parts: Iterable[Part], zones: Iterable[Zone] = (), bars: str = "") -> list[Entry]:
    """Entries for the materials of parts, the zones and the bars, each once, in the order of drawing."""
    found = [Entry(part.label, part.tone) for part in parts if part.label]
    found += [Entry(bars, "bar")] if bars else []
    found += [Entry(zone.label, zone.kind) for zone in zones if zone.label]
    return list(dict.fromkeys(found))


def legend_width(entries: Sequence[Entry]) -> float:
    """Give the width of entries side by side."""
    words = [text_width(entry.label, SMALL) for entry in entries]
    return sum(words) + len(words) * (BREADTH + AFTER) + (len(words) - 1) * APART


def draw_legend(sketch: Sketch, entries: Sequence[Entry], left: float, top: float, right: float) -> float:
    """Draw entries from (left, top) in rows no longer than to `right`; give the bottom in pixels."""
    x, y = left, top
    for entry in entries:
        lines = wrap(entry.label, SMALL, right - left - BREADTH - AFTER)
        labels = [Label(0, n * LINE, line, SMALL, "left") for n, line in enumerate(lines)]
        breadth = BREADTH + AFTER + max(label.box.right for label in labels)
        if x > left and x + breadth > right:
            x, y = left, y + LINE + 2
        _draw_swatch(sketch, Box(x, y, x + BREADTH, y + HEIGHT), entry.swatch)
        for label in labels:
            sketch.label(label.moved(x + BREADTH + AFTER, y + HEIGHT - 1))
        y += LINE * (len(labels) - 1)
        x += breadth + APART
    return y + HEIGHT


def _draw_swatch(sketch: Sketch, box: Box, swatch: Tone | ZoneKind | Mark) -> None:
    middle = (box.left + box.right) / 2, (box.top + box.bottom) / 2
    ends = [(box.left, middle[1]), (box.right, middle[1])]
    ring = np.array(
        [(box.left, box.bottom), (box.right, box.bottom), (box.right, box.top), (box.left, box.top)]
    )
    match swatch:
        case "bar":
            sketch.dot(middle, 3.2, "ink")
        case "pressed bar":
            sketch.dot(middle, 3.2, "paper", Stroke("ink", 1.4))
        case "dashes":
            sketch.line(ends, Stroke("ink", 1.0, DASH))
        case "chain":
            sketch.line(ends, Stroke("ink", 1.0, CHAIN))
        case "line":
            sketch.line(ends, Stroke("ink", 1.5))
        case "joint":
            sketch.line(ends, Stroke("ink", 3.0))
        case "yielded" | "cracked" | "open":
            draw_tone(sketch, [ring], "plain")
            draw_zone_mark(sketch, [ring], box, swatch)
        case _:
            draw_tone(sketch, [ring], swatch)
