"""One entry of the trail, and its line in the file."""

from __future__ import annotations

import json
from collections.abc import Mapping
from dataclasses import dataclass
from typing import Any

from calcgen.trail.canonical import Json, canonical, digest_of
from calcgen.trail.changes import Change

_FIELDS = ("kind", "when", "who", "why", "program", "parents", "changes", "digest")


@dataclass(frozen=True)
class Entry:
    """One entry, of any kind: 'build', 'issue', ...

    Attributes
    ----------
    when : ISO 8601 in UTC, such as '2026-12-01T09:30:00Z'.
    why : the reason given; None when none was.
    program : name and version.
    parents : digests of the entries it follows: none for the first, two after a merge of branches.
    changes : what differs from the state that the parents leave.
    more : fields that only some kinds have, such as an issue's `revision`.
    digest : sha256 of the canonical JSON of all the rest.
    intact : whether the line read is exactly as the program wrote it; an entry just made is.
    """

    kind: str
    when: str
    who: str
    why: str | None
    program: str
    parents: tuple[str, ...]
    changes: tuple[Change, ...]
    more: Mapping[str, Json]
    digest: str
    intact: bool = True


def sealed(
    kind: str,
    *,
    when: str,
    who: str,
    why: str | None,
    program: str,
    parents: tuple[str, ...],
    changes: tuple[Change, ...],
    more: Mapping[str, Json] | None = None,
) -> Entry:
    """Return the entry of these fields with its digest.

    Raises
    ------
    ValueError
        When `more` holds a field that every entry has, or a number is not finite.
    """
    more = dict(more or {})
    if clash := sorted(more.keys() & set(_FIELDS)):
        msg = f"every entry has these already: {', '.join(clash)}"
        raise ValueError(msg)
    draft = Entry(kind, when, who, why, program, parents, changes, more, digest="")
    # Read back from its own line, so that an entry just made and one read later are equal.
    return read_line(canonical({**_body(draft), "digest": digest_of(_body(draft))}))


def write_line(entry: Entry) -> str:
    """Return the entry's line, without line feed."""
    return canonical({**_body(entry), "digest": entry.digest})


def read_line(line: str) -> Entry:
    """Return the entry on a line; it is intact when the line is, to the letter, what `write_line` gives.

    Raises
    ------
    ValueError
        When the line is not an entry.
    """
    data = _object(line)
    try:
        kind, when, who, why, program, parents, changes, digest = (data[field] for field in _FIELDS)
        entry = Entry(
            kind=_typed(kind, str),
            when=_typed(when, str),
            who=_typed(who, str),
            why=None if why is None else _typed(why, str),
            program=_typed(program, str),
            parents=tuple(_typed(parent, str) for parent in _typed(parents, list)),
            changes=tuple(_change(_typed(change, dict)) for change in _typed(changes, list)),
            more={key: value for key, value in data.items() if key not in _FIELDS},
            digest=_typed(digest, str),
            intact=_is_as_written(line, data),
        )
    except (LookupError, TypeError) as error:
        msg = "not an entry of the trail"
        raise ValueError(msg) from error
    return entry


def _body(entry: Entry) -> dict[str, Json]:
    return {
        **entry.more,
        "kind": entry.kind,
        "when": entry.when,
        "who": entry.who,
        "why": entry.why,
        "program": entry.program,
        "parents": entry.parents,
        "changes": [{"address": c.address, "before": c.before, "after": c.after} for c in entry.changes],
    }


def _is_as_written(line: str, data: Mapping[str, Json]) -> bool:
    body = {key: value for key, value in data.items() if key != "digest"}
    try:
        return line == canonical({**body, "digest": digest_of(body)})
    except ValueError:  # not finite, or no Unicode
        return False


def _object(line: str) -> dict[str, Any]:
    try:
        data = json.loads(line)
    except RecursionError as error:
        msg = "nested too deep"
        raise ValueError(msg) from error
    if not isinstance(data, dict):
        msg = "not a JSON object"
        raise ValueError(msg)
    return data


def _change(data: Mapping[str, Any]) -> Change:
    before, after = (None if data[side] is None else _typed(data[side], dict) for side in ("before", "after"))
    return Change(_typed(data["address"], str), before, after)


def _typed(value: Any, kind: type[Any]) -> Any:
    if not isinstance(value, kind):
        raise TypeError
    return value
