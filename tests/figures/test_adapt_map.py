"""Evaluated calcs -> the map: standing, values with units, what changed, and where all leads."""

from calcgen.evaluation.calc import Setting, evaluate_all
from calcgen.figures.adapt_map import map_drawing
from calcgen.figures.map_drawing import MapArrow, MapCalc, MapDrawing, MapValue
from calcgen.language.document import calc_from
from calcgen.profiles.catalogue import builtin_catalogue
from calcgen.quantities.display import Style
from calcgen.text import SourceFile

BASIS = """\
# Basis
```section main
shape = rolled("IPE 240")
```
```inputs
f_y = 275 MPa
L = 6 m
```
"""
TAKER = """\
# Taker
```inputs
f_yd = f_y of A-1
L of A-1
main of A-1
```
```working
L <= 5 m
```
"""
BROKEN = """\
# Broken
```inputs
L of A-1
x = nothing of A-1
```
"""


def drawn(was: dict[str, str] | None = None) -> MapDrawing:
    texts = {"A-1": BASIS, "B-2": TAKER, "C-3": BROKEN}
    sources = [SourceFile(f"calcs/{number}.md", text) for number, text in texts.items()]
    calcs = evaluate_all([calc_from(s) for s in sources], Setting("eurocode", Style(), builtin_catalogue()))
    return map_drawing(calcs, was or {}, lambda n: f"{n}.html", lambda a, b: f"map.html#{a}.{b}")


def test_calcs_have_their_standing_and_utilisation() -> None:
    assert drawn().calcs == (
        MapCalc("A-1", "Basis", "no checks", "", "A-1.html"),
        MapCalc("B-2", "Taker", "exceeded", "1.200", "B-2.html"),
        MapCalc("C-3", "Broken", "in error", "", "C-3.html"),
    )


def test_an_arrow_carries_what_is_taken_under_the_names_of_the_taker() -> None:
    values = (
        MapValue("f_yd", "275.0\u00a0MPa"),
        MapValue("L", "6.000\u00a0m"),
        MapValue("main", "IPE 240", ": "),
    )
    assert drawn().arrows[0] == MapArrow("A-1", "B-2", values, "map.html#A-1.B-2")


def test_what_has_no_value_carries_none() -> None:
    assert drawn().arrows[1].values == (MapValue("L", "6.000\u00a0m"), MapValue("x", ""))


def test_a_changed_value_has_the_mark_of_the_input() -> None:
    values = drawn({"B-2#L": "was 5.500 m at P1", "A-1#L": "was 5.500 m at P1"}).arrows[0].values
    assert [value.was for value in values] == ["", "was 5.500 m at P1", ""]
