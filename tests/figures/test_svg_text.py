"""Text stands in the SVG where the picture places it."""

from __future__ import annotations

from xml.etree import ElementTree as ET

import pytest

from calcgen.figures.labels import Box
from calcgen.figures.picture import Anchor, Label, Picture
from calcgen.figures.svg import render

SVG = "{http://www.w3.org/2000/svg}"
FRAME = Box(0.0, 0.0, 200.0, 100.0)


@pytest.mark.parametrize("turned", [False, True])
@pytest.mark.parametrize("anchor", ["left", "center", "right"])
def test_a_label_keeps_its_place_and_anchor(anchor: Anchor, turned: bool) -> None:
    label = Label(60.0, 25.0, "45.0 kN·m at 3 m", anchor=anchor, turned=turned)
    svg = ET.fromstring(render(Picture("p", "t", "d", FRAME, (label,))))  # noqa: S314  our own text
    (text,) = svg.iter(f"{SVG}text")
    assert text.text == label.text
    place = [float(text.get(axis, "nan")) for axis in "xy"]
    assert place == pytest.approx([60.0, 25.0], abs=0.01)
    word = {"left": "start", "center": "middle", "right": "end"}[anchor]
    style = text.get("style", "")
    assert f"text-anchor: {word}" in style or word == "start"
    turn = text.get("transform", "")
    if turned:
        angle, x, y = (
            float(v) for v in turn.removeprefix("rotate(").removesuffix(")").replace(",", " ").split()
        )
        assert (angle, x, y) == pytest.approx((-90.0, 60.0, 25.0), abs=0.01)
    else:
        assert turn == ""
