"""A catalogued section, the spellings of its name, and a fault in the text it was read from."""

from __future__ import annotations

import re
import unicodedata
from collections.abc import Mapping
from dataclasses import dataclass
from typing import Literal, TypeAlias

Axes: TypeAlias = Literal["eurocode", "american"]

_MIXED_NUMBER = re.compile(r"(\d)[ -](\d+/\d)")
_WIDE_FLANGE = re.compile(r"he([\d*?]+)([abm])")  # the figures perhaps a pattern


@dataclass(frozen=True)
class Profile:
    """A section as its catalogue gives it, in SI units (m, kg).

    Attributes
    ----------
    designation : the name as the catalogue writes it.
    family : what it is listed under: IPE, W, ...
    shape : the shape of the language that builds its outline.
    axes : the convention of the catalogue's own column names.
    dimensions : arguments of that shape by name, m (`slope` a plain number).
    stated : further sizes that the table prints, m: `k_des`, the nominal wall `t_nom`, `y_top` of tees, from
        the outer face of the flange down to the centroid.
    published : printed properties; one that the table or the row lacks is not there. h is about the
        horizontal axis and v about the vertical one, as the profile normally stands: A, m²; I_h I_v I_1 I_2
        I_t, m⁴; W_el_h W_el_v W_pl_h W_pl_v, m³; I_w, m⁶; i_h i_v i_1 i_2, m; the centroid x_bar from the
        back of the web or the heel and y_bar from the bottom, m; mass, kg/m.
    tolerances : how far the outline's own A, I, W, i and centroid may lie from the published ones, relative
        to those: what the catalogue states for its approximations, or half a unit of the last printed digit.
    source : where the row's figures come from.
    file, line : where it stands; lines count from 1.
    """

    designation: str
    family: str
    shape: str
    axes: Axes
    dimensions: Mapping[str, float]
    stated: Mapping[str, float]
    published: Mapping[str, float]
    tolerances: Mapping[str, float]
    source: str
    file: str
    line: int


@dataclass(frozen=True)
class CatalogueFault:
    """A fault in the text of a catalogue; lines and columns (of characters) count from 1."""

    file: str
    line: int
    column: int
    message: str
    hint: str = ""


def designation_key(designation: str) -> str:
    """Reduce the spellings of one designation to one text.

    Case and spaces don't matter, × is x, a hyphen or a space may join 3-1/2, and HE 200 A is HEA 200.
    """
    text = unicodedata.normalize("NFKC", designation).casefold().replace("×", "x").replace("⁄", "/")
    key = "".join(_MIXED_NUMBER.sub(r"\1-\2", " ".join(text.split())).split())
    return _WIDE_FLANGE.sub(r"he\2\1", key) if _WIDE_FLANGE.fullmatch(key) else key
