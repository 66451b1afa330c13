"""A composite section on its page and in results.json."""

from __future__ import annotations

import json

from calcgen.site.results_json import results_file
from tests.site.helpers import Outline, package, pages

SLAB = """\
# Slab

```section slab
part rib  = rectangle(b = 300 mm, h = 500 mm) of concrete | the rib | [DWG p. 2]
bars low  = 4 of 20 mm from (-100 mm, -200 mm) to (100 mm, -200 mm) of steel
hole duct = circle(d = 80 mm) at (0 mm, 100 mm)
modulus concrete = 12 GPa
modulus steel = 200 GPa
reference = concrete
```
```working
W = slab.rib.W_el_y_b | bottom of the rib
```
"""
WHOLE = package(SLAB)
PAGE = Outline(pages(WHOLE)["C-1.html"])


def test_every_line_is_shown_with_its_columns() -> None:
    said = " ".join(" ".join(PAGE.words).split())
    assert "part rib = rectangle(b = 300 mm, h = 500 mm) of concrete" in said
    assert "bars low = 4 of 20 mm" in said
    assert "the rib" in said
    assert "HL/201 p. 2" in said


def test_parts_and_bars_stand_side_by_side() -> None:
    said = " ".join(" ".join(PAGE.words).split())
    assert "rib rectangle of concrete low 4 bars of steel" in said
    assert "properties, transformed to concrete" in said
    assert {"slab", "slab.A", "slab.rib.A", "slab.rib.W_el_y_b", "slab.low.n"} <= set(PAGE.ids)


def test_results_of_parts_are_under_their_names() -> None:
    sections = json.loads(results_file(WHOLE))["calcs"]["C-1"]["sections"]["slab"]
    assert sections["low"]["A"]["unit"] == "cm²"
    assert sections["low"]["A"]["value"] == 12.5663706144
    assert sections["rib"]["n"]["value"] == 1.0
