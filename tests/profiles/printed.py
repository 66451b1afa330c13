"""The figures of the catalogues as they are printed, read past the program's reader."""

from __future__ import annotations

import csv
import re
from collections.abc import Mapping
from dataclasses import dataclass
from functools import cache
from importlib.resources import files

FOLDER = files("calcgen.profiles")
IN, FT, LB = 0.0254, 0.3048, 0.45359237

# Units of the headers and names of their columns, written down a second time.
UNITS: Mapping[str, float] = {
    "mm": 1e-3, "cm": 1e-2, "cm2": 1e-4, "cm3": 1e-6, "cm4": 1e-8, "10^3 cm6": 1e-9, "kg/m": 1.0, "%": 1e-2,
    "in": IN, "in2": IN**2, "in3": IN**3, "in4": IN**4, "in6": IN**6, "lb/ft": LB / FT,
}  # fmt: skip
NAMES: Mapping[str, Mapping[str, str]] = {
    "eurocode": {
        "I_y": "I_h", "W_el_y": "W_el_h", "W_pl_y": "W_pl_h", "i_y": "i_h",
        "I_z": "I_v", "W_el_z": "W_el_v", "W_pl_z": "W_pl_v", "i_z": "i_v",
    },
    "american": {
        "d": "h", "b_f": "b", "J": "I_t", "C_w": "I_w", "r_z": "i_2",
        "I_x": "I_h", "S_x": "W_el_h", "Z_x": "W_pl_h", "r_x": "i_h",
        "I_y": "I_v", "S_y": "W_el_v", "Z_y": "W_pl_v", "r_y": "i_v",
    },
}  # fmt: skip

# Significant figures to which a table rounds large numbers; the others round to three.
SIGNIFICANT: Mapping[str, int] = {"IPE": 4, "HEA": 4, "HEB": 4, "HEM": 4}


@dataclass(frozen=True)
class Figure:
    """A printed figure in SI units, and half a unit of its last digit that counts."""

    value: float
    rounding: float


@cache
def printed(family: str) -> Mapping[str, Mapping[str, Figure]]:
    """Figures of a built-in catalogue by designation and neutral name."""
    lines = (FOLDER / f"{family.lower().replace(' ', '_')}.csv").read_text("utf-8").splitlines()
    names = NAMES["american" if "# axes = american" in lines else "eurocode"]
    if "# shape = tube" in lines:  # the size of a tube is its diameter d
        names = {name: neutral for name, neutral in names.items() if name != "d"}
    rows = csv.DictReader(line for line in lines if not line.startswith("#"))
    return {
        row["designation"]: {
            names.get(name, name): _figure(text, UNITS[unit], SIGNIFICANT.get(family, 3))
            for header, text in row.items()
            if text and header not in {"designation", "source"}
            for name, unit in re.findall(r"(\S+) \[(.+)\]", header)
        }
        for row in rows
    }


def _figure(text: str, unit: float, significant: int) -> Figure:
    """Zeros at the end of a whole number count up to the table's significant figures: 1170 may be 1174."""
    whole, point, decimals = text.partition(".")
    zeros = 0 if point else len(whole) - len(whole.rstrip("0"))
    exponent = -len(decimals) if point else max(0, min(len(whole) - significant, zeros))
    return Figure(float(text) * unit, 0.5 * 10.0**exponent * unit)
