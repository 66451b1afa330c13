"""A TOML file with the place of each key, which TOML's own reader does not keep."""

from __future__ import annotations

import re
import tomllib
from collections.abc import Mapping
from dataclasses import dataclass

from calcgen.text import Report, SourceFile, Span, nearest

_FAULT_PLACE = re.compile(r"\s*\(at (?:line (\d+), column (\d+)|end of document)\)$")
_HEAD = re.compile(r"[ \t]*\[+([^\]]*)\]")
_KEY = re.compile(
    r"""[ \t]*((?:"[^"]*"|'[^']*'|[\w-]+)(?:[ \t]*\.[ \t]*(?:"[^"]*"|'[^']*'|[\w-]+))?)[ \t]*="""
)
_PART = re.compile(r"""[^\s."']+|"[^"]*"|'[^']*'""")


@dataclass(frozen=True)
class TomlText:
    """The values of a TOML file and where its keys stand: under (table, key), a table under ("", table)."""

    values: Mapping[str, object]
    places: Mapping[tuple[str, str], Span]

    def span(self, key: str, table: str = "") -> Span:
        """Return the place of a key; the start of the file for one written in an unusual way."""
        return self.places.get((table, key), Span(0, 0))


def read_toml(source: SourceFile, report: Report) -> TomlText | None:
    """Parse a file; report a fault of its syntax and return None."""
    try:
        return TomlText(tomllib.loads(source.text), _places(source))
    except RecursionError:
        report.error("toml-syntax", Span(0, 0), "the values of this file are nested too deep")
    except ValueError as fault:  # a TOMLDecodeError, or a number with too many digits
        place = _FAULT_PLACE.search(str(fault))
        message = _FAULT_PLACE.sub("", str(fault))
        offset = len(source.text)
        if place and place[1]:
            offset = min(offset, source.line_starts[int(place[1]) - 1] + int(place[2]) - 1)
        report.error(
            "toml-syntax", Span(offset, offset), f"not valid TOML: {message[:1].lower()}{message[1:]}"
        )
    return None


def check_keys(
    toml: TomlText, found: Mapping[str, object], known: tuple[str, ...], report: Report, table: str
) -> None:
    """Report each key of a table that is not one of those known; the nearest is named."""
    for key in found:
        if key not in known:
            near = nearest(key, known)
            hint = f"the nearest is '{near}'" if near else f"possible are {', '.join(known)}"
            report.error("unknown-key", toml.span(key, table), f"there is no key '{key}' here", hint=hint)


def _places(source: SourceFile) -> dict[tuple[str, str], Span]:
    places: dict[tuple[str, str], Span] = {}
    table = ""
    for number, start in enumerate(source.line_starts, start=1):
        line = source.line(number)
        if head := _HEAD.match(line):
            table = ".".join(_parts(head[1]))
            places.setdefault(("", table), Span(start + head.start(1), start + head.end(1)))
        elif match := _KEY.match(line):
            *outer, key = _parts(match[1])
            span = Span(start + match.start(1), start + match.end(1))
            places.setdefault((".".join([table, *outer]) if table else ".".join(outer), key), span)
            if outer and not table:
                places.setdefault(("", outer[0]), span)
    return places


def _parts(dotted: str) -> list[str]:
    return [part.strip("\"'") for part in _PART.findall(dotted)]
