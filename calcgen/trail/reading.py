"""Text of a trail file → entries, with every fault found; a damaged line hides no other."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from functools import lru_cache
from typing import Literal

from calcgen.trail.entry import Entry, read_line
from calcgen.trail.trail import Trail

_MARKERS = ("<<<<<<<", "|||||||", "=======", ">>>>>>>")


@dataclass(frozen=True)
class Fault:
    """One fault of the trail file; `line` counts from 1."""

    code: str
    severity: Literal["error", "warning"]
    message: str
    line: int
    hint: str = ""


@lru_cache(maxsize=1)  # `watch` reads the same trail at every save
def read_trail(text: str) -> tuple[Trail, tuple[Fault, ...]]:
    """Return the trail and its faults, in the order of the lines.

    Entries that were altered stay in the trail with `intact` false; lines that are no entries are left out.
    A last line without line feed that is no intact entry is torn. Text may hold lone surrogates where the
    file was not UTF-8.
    """
    *lines, last = text.split("\n")  # not splitlines: JSON text may hold other line separators
    entries: list[tuple[int, Entry]] = []
    faults: list[Fault] = []
    for number, line in enumerate(lines, 1):
        content = line.removesuffix("\r")  # a checkout on Windows may have put it there
        if content.strip():
            read = _read(content, number)
            if isinstance(read, Fault):
                faults.append(read)
            else:
                entries.append((number, read))
    torn = ""
    if last:
        read = _read(last, len(lines) + 1)
        if isinstance(read, Entry) and read.intact:
            entries.append((len(lines) + 1, read))
        else:
            torn = last
            faults.append(_torn(len(lines) + 1))
    faults.extend(_chain_faults(entries))
    unique = {(entry.digest, entry.intact): entry for _, entry in entries}
    trail = Trail(tuple(unique.values()), torn)
    return trail, tuple(sorted(faults, key=lambda fault: (fault.line, fault.code)))


def _read(line: str, number: int) -> Entry | Fault:
    if line.startswith(_MARKERS):
        return Fault(
            "trail-conflict",
            "error",
            "a merge left its conflict marker in the trail",
            number,
            "keep the lines of both sides and delete the marker lines; "
            "'trail.jsonl merge=union' in .gitattributes does so by itself",
        )
    try:
        return read_line(line)
    except ValueError:
        return Fault(
            "trail-unreadable",
            "error",
            "this line is not an entry of the trail",
            number,
            "restore the line from version control or a backup",
        )


def _torn(number: int) -> Fault:
    return Fault(
        "trail-torn",
        "warning",
        "the last line is torn: its writing was cut short",
        number,
        "the next entry sets it aside in a file of its own",
    )


def _chain_faults(entries: Sequence[tuple[int, Entry]]) -> Iterator[Fault]:
    known = {entry.digest for _, entry in entries}
    seen: set[str] = set()
    for number, entry in entries:
        if not entry.intact:
            yield Fault(
                "trail-altered",
                "error",
                "this entry was altered after it was written: its digest does not agree",
                number,
                "restore the line from version control or a backup",
            )
        elif entry.digest in seen:
            yield Fault(
                "trail-repeated",
                "warning",
                "this entry stands in the trail twice",
                number,
                "delete one of them",
            )
        else:
            seen.add(entry.digest)
        for parent in entry.parents:
            if parent not in known:
                yield Fault(
                    "trail-gap",
                    "error",
                    f"the entry before this one, {parent[:12]}, is missing",
                    number,
                    "restore the missing line from version control or a backup",
                )
