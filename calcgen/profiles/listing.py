"""The catalogue as text: its families, and a table of the sections that a pattern names."""

from __future__ import annotations

import re
from collections import Counter
from collections.abc import Callable, Iterator, Mapping, Sequence
from dataclasses import dataclass
from difflib import get_close_matches
from typing import TypeAlias

from calcgen.profiles.catalogue import Catalogue
from calcgen.profiles.columns import LENGTHS, POUND
from calcgen.profiles.profile import Axes, Profile, designation_key

# From a section to the properties of its outline by neutral name, SI.
OfOutline: TypeAlias = Callable[[Profile], Mapping[str, float]]

NOTE = "* not published: of the outline that the nominal sizes make"
_DIGITS, _OWN_DIGITS = 6, 4  # no figure is printed with more than six; of the outline four are shown
_INERTIA = "I_h"


@dataclass(frozen=True)
class _Shown:
    """A column: neutral name, and name, unit and factor to SI under each convention."""

    name: str
    heads: Mapping[Axes, tuple[str, str, float]]


def _shown(name: str, eurocode: str, american: str, power: int) -> _Shown:
    mark = ("", "", "²", "³", "⁴")[power]
    metric = "mm" if power == 1 else "cm"
    return _Shown(
        name,
        {
            "eurocode": (eurocode, metric + mark, LENGTHS[metric] ** power),
            "american": (american, "in" + mark, LENGTHS["in"] ** power),
        },
    )


COLUMNS = (
    _Shown("mass", {"eurocode": ("mass", "kg/m", 1.0), "american": ("mass", "lb/ft", POUND / LENGTHS["ft"])}),
    _shown("h", "h", "h", 1),
    _shown("b", "b", "b", 1),
    _shown("A", "A", "A", 2),
    _shown(_INERTIA, "I_y", "I_x", 4),
    _shown("W_el_h", "W_el_y", "S_x", 3),
    _shown("W_pl_h", "W_pl_y", "Z_x", 3),
)
ABOUT_HORIZONTAL: Mapping[Axes, str] = {
    "eurocode": "about the horizontal axis y-y",
    "american": "about the horizontal axis x-x",
}


def matching(catalogue: Catalogue, pattern: str) -> tuple[Profile, ...]:
    """Return the sections whose designation is as `pattern` says, by family and mass.

    `*` stands for any characters, none among them, and `?` for one; spelling matters as little as in `find`.
    The name of a family is all of it.
    """
    wanted = re.compile(_expression(designation_key(pattern)))
    family = {designation_key(name): name for name in catalogue.families}.get(designation_key(pattern))
    found = catalogue.where(lambda key: wanted.fullmatch(key) is not None)
    return found or (catalogue.family(family) if family else ())


def near(catalogue: Catalogue, pattern: str) -> tuple[str, ...]:
    """Return designations, or else families, that a pattern without a match may have meant."""
    plain = pattern.replace("*", "").replace("?", "")
    designations = catalogue.nearest(plain) if re.search(r"\d", plain) else ()
    keys = {designation_key(family): family for family in catalogue.families}
    letters = re.split(r"\d", designation_key(plain), maxsplit=1)[0]
    return designations or tuple(keys[key] for key in get_close_matches(letters, keys, n=3, cutoff=0.5))


def families(catalogue: Catalogue) -> str:
    """Return a table of the families: number of sections, axes, and the source of most rows."""
    rows = [("family", "sections", "axes", "source of most rows")]
    for name in catalogue.families:
        members = catalogue.family(name)
        (source, _), *_ = Counter(profile.source for profile in members).most_common(1)
        rows.append((name, str(len(members)), members[0].axes, source))
    return "\n".join(_aligned(rows, left=(0, 2, 3)))


def table(profiles: Sequence[Profile], of_outline: OfOutline) -> str:
    """Return a table for each family and its axes, with the units of these; sections keep their order."""
    parts: dict[tuple[str, Axes], list[Profile]] = {}
    for profile in profiles:
        parts.setdefault((profile.family, profile.axes), []).append(profile)
    text = "\n\n".join(
        "\n".join(_family(family, axes, members, of_outline)) for (family, axes), members in parts.items()
    )
    return f"{text}\n\n{NOTE}" if "*" in text else text


def _family(family: str, axes: Axes, members: Sequence[Profile], of_outline: OfOutline) -> Iterator[str]:
    heads = [column.heads[axes] for column in COLUMNS]
    rows = [(family, *(f"{name} " for name, _, _ in heads)), ("", *(f"{unit} " for _, unit, _ in heads))]
    rows += [(profile.designation, *_cells(profile, of_outline)) for profile in members]
    lines = _aligned(rows, left=(0,))
    inertia = next(column for column in COLUMNS if column.name == _INERTIA)
    yield " " * lines[0].rindex(inertia.heads[axes][0]) + ABOUT_HORIZONTAL[axes]
    yield from lines


def _cells(profile: Profile, of_outline: OfOutline) -> Iterator[str]:
    given = {**_extent(profile), **profile.published}
    own = {} if all(column.name in given for column in COLUMNS) else of_outline(profile)
    for column in COLUMNS:
        factor = column.heads[profile.axes][2]
        if column.name in given:
            yield f"{_plain(given[column.name] / factor, _DIGITS)} "
        elif column.name in own:
            yield f"{_plain(own[column.name] / factor, _OWN_DIGITS)}*"
        else:
            yield "- "


def _extent(profile: Profile) -> Mapping[str, float]:
    """Depth and width, m; a round section has its diameter for both."""
    sizes = profile.dimensions
    if "d" in sizes:
        return {"h": sizes["d"], "b": sizes["d"]}
    return {"h": sizes["h"], "b": sizes["b"] if "b" in sizes else max(sizes["b_t"], sizes["b_b"])}


def _plain(value: float, digits: int) -> str:
    """Write a number to so many significant figures, without an exponent and without zeros at the end."""
    text = f"{float(f'{value:.{digits}g}'):.{digits + 3}f}"
    return text.rstrip("0").rstrip(".")


def _aligned(rows: Sequence[Sequence[str]], left: Sequence[int]) -> list[str]:
    widths = [max(len(row[n]) for row in rows) for n in range(len(rows[0]))]
    return [
        "  ".join(
            cell.ljust(width) if n in left else cell.rjust(width)
            for n, (cell, width) in enumerate(zip(row, widths, strict=True))
        ).rstrip()
        for row in rows
    ]


def _expression(key: str) -> str:
    """Return the regular expression of a pattern."""
    return "".join({"*": ".*", "?": "."}.get(c, re.escape(c)) for c in key)
