"""What the header of a catalogue may say: sizes of each shape, names of each convention, units."""

from __future__ import annotations

import re
import unicodedata
from collections.abc import Collection, Mapping
from dataclasses import dataclass
from typing import Literal, TypeAlias

from calcgen.profiles.profile import Axes

# A kind is a power of length, mass along a length, or a plain number.
Kind: TypeAlias = Literal[1, 2, 3, 4, 6, "mass", "number"]
Part: TypeAlias = Literal["dimensions", "stated", "published", "text"]

KINDS: Mapping[Kind, str] = {
    1: "a length",
    2: "an area",
    3: "a section modulus",
    4: "a second moment of area",
    6: "a warping constant",
    "mass": "a mass along the length",
    "number": "a plain number",
}

# Sizes of each shape of the language, for each way to write it: those it needs, those it can do without.
Sizes: TypeAlias = tuple[tuple[str, ...], tuple[str, ...]]
SIZES: Mapping[str, tuple[Sizes, ...]] = {
    "i_shape": (
        (("h", "b", "t_w", "t_f"), ("r", "slope", "r_toe")),
        (("h", "b_t", "t_t", "b_b", "t_b", "t_w"), ("r",)),
    ),
    "channel": ((("h", "b", "t_w", "t_f"), ("r", "slope", "r_toe")),),
    "tee": ((("h", "b", "t_w", "t_f"), ("r",)),),
    "angle": ((("h", "b", "t"), ("r_1", "r_2")),),
    "zed": ((("h", "b", "t"), ()),),
    "box": ((("h", "b", "t"), ("r_o", "r_i")),),
    "rectangle": ((("h", "b"), ()),),
    "circle": ((("d",), ()),),
    "tube": ((("d", "t"), ()),),
}
SYNONYMS: Mapping[str, str] = {"d": "h", "b_f": "b"}
TEXTS = ("designation", "source")
STATED = frozenset({"k_des", "t_nom", "y_top"})
ZERO_ALLOWED = frozenset({"r", "r_toe", "r_1", "r_2", "r_o", "r_i", "slope"})

COMMON: Mapping[str, tuple[str, Kind]] = {
    "A": ("A", 2),
    "I_1": ("I_1", 4),
    "I_2": ("I_2", 4),
    "x_bar": ("x_bar", 1),
    "y_bar": ("y_bar", 1),
    "mass": ("mass", "mass"),
}

# Column of the convention -> neutral name and kind.
PUBLISHED: Mapping[Axes, Mapping[str, tuple[str, Kind]]] = {
    "eurocode": {
        **COMMON,
        "I_y": ("I_h", 4),
        "I_z": ("I_v", 4),
        "W_el_y": ("W_el_h", 3),
        "W_el_z": ("W_el_v", 3),
        "W_pl_y": ("W_pl_h", 3),
        "W_pl_z": ("W_pl_v", 3),
        "i_y": ("i_h", 1),
        "i_z": ("i_v", 1),
        "i_1": ("i_1", 1),
        "i_2": ("i_2", 1),
        "I_t": ("I_t", 4),
        "I_w": ("I_w", 6),
    },
    "american": {
        **COMMON,
        "I_x": ("I_h", 4),
        "I_y": ("I_v", 4),
        "S_x": ("W_el_h", 3),
        "S_y": ("W_el_v", 3),
        "Z_x": ("W_pl_h", 3),
        "Z_y": ("W_pl_v", 3),
        "r_x": ("i_h", 1),
        "r_y": ("i_v", 1),
        "r_z": ("i_2", 1),  # the least radius of single angles; r_1 and r_2 are their fillets
        "J": ("I_t", 4),
        "C_w": ("I_w", 6),
    },
}

# Published properties that integrals over the outline give.
OF_OUTLINE = frozenset(name for columns in PUBLISHED.values() for name, _ in columns.values()) - {
    "I_t",
    "I_w",
    "mass",
}

LENGTHS: Mapping[str, float] = {"mm": 1e-3, "cm": 1e-2, "m": 1.0, "in": 0.0254, "ft": 0.3048}
POUND = 0.45359237  # kg, exact

# Unit -> kind and factor to SI.
UNITS: Mapping[str, tuple[Kind, float]] = {
    **{name: (1, factor) for name, factor in LENGTHS.items()},
    **{f"{name}2": (2, factor**2) for name, factor in LENGTHS.items()},
    **{f"{name}3": (3, factor**3) for name, factor in LENGTHS.items()},
    **{f"{name}4": (4, factor**4) for name, factor in LENGTHS.items()},
    **{f"{name}6": (6, factor**6) for name, factor in LENGTHS.items()},
    "kg/m": ("mass", 1.0),
    "lb/ft": ("mass", POUND / 0.3048),
    "%": ("number", 0.01),
    "-": ("number", 1.0),
}

_SCALED = re.compile(r"(?:10\^?(\d) )?(\S+)")


@dataclass(frozen=True)
class Column:
    """What the cells of a column become: `name` in `part` of a profile, times `factor`."""

    part: Part
    name: str
    factor: float = 1.0


def sizes_of(shape: str) -> frozenset[str]:
    """All sizes that a shape may have."""
    return frozenset(size for needed, optional in SIZES[shape] for size in needed + optional)


def sizes_missing(shape: str, given: Collection[str]) -> tuple[str, ...]:
    """Sizes that the shape needs beside those given, for the way to write it that they fit best."""
    missing = [tuple(size for size in needed if size not in given) for needed, _ in SIZES[shape]]
    return min(missing, key=len)


def column_meaning(written: str, shape: str, axes: Axes) -> tuple[Part, str, Kind] | None:
    """Tell what a column of this name holds in a catalogue of `shape`; None when nothing is known by it."""
    sizes = sizes_of(shape)
    size = written if written in sizes else SYNONYMS.get(written, written)
    if size in sizes:
        return "dimensions", size, "number" if size == "slope" else 1
    if written in STATED:
        return "stated", written, 1
    if written in PUBLISHED[axes]:
        name, kind = PUBLISHED[axes][written]
        return "published", name, kind
    return None


def unit_factor(written: str) -> tuple[Kind, float] | None:
    """Kind and factor to SI of a unit such as mm, cm4, cm⁴, cm^4, 10^3 cm6, lb/ft or %; None when unknown."""
    match = _SCALED.fullmatch(unicodedata.normalize("NFKC", written).strip())
    if match is None:
        return None
    known = UNITS.get(match[2].replace("^", ""))
    return known and (known[0], known[1] * 10.0 ** int(match[1] or 0))
