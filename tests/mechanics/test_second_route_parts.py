"""The second routes to composite properties and to the kern: they agree, and notice a wrong number."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest

from calcgen.mechanics.composite import transformed_properties
from calcgen.mechanics.field import Bars, Law, Piece
from calcgen.mechanics.kern import kern
from calcgen.mechanics.second_route.composite import composite_residuals
from calcgen.mechanics.second_route.kern import kern_residuals
from calcgen.mechanics.section import section_properties
from calcgen.mechanics.shapes import angle, channel, rectangle

PIECES = (
    Piece("rib", (rectangle(b=0.3, h=0.5).outline,)),
    Piece("leg", (angle(h=0.1, b=0.08, t=0.01).placed(0.19, 0.1).outline,), Law(16.0)),
)
BARS = (
    Bars("low", np.array([[-0.1, -0.2], [0.1, -0.2]]), 3e-4, Law(16.0), Law(1.0)),
    Bars("free", np.array([[0.3, 0.3]]), 3e-4, Law(16.0)),
)


@pytest.mark.parametrize("bars", [(), BARS])
def test_composite(bars: tuple[Bars, ...]) -> None:
    found = transformed_properties(PIECES, bars)
    assert all(r.holds for r in composite_residuals(found, PIECES, bars))


@pytest.mark.parametrize("symbol", ["area", "x_bar", "y_bar", "I_h", "I_v", "I_hv"])
def test_composite_notices_a_wrong_number(symbol: str) -> None:
    found = transformed_properties(PIECES, BARS)
    wrong = replace(found, **{symbol: getattr(found, symbol) * (1 + 1e-6)})
    failed = [r.what for r in composite_residuals(wrong, PIECES, BARS) if not r.holds]
    assert ("A" if symbol == "area" else symbol) in failed


@pytest.mark.parametrize("shape", [rectangle(b=0.1, h=0.2), angle(h=0.1, b=0.06, t=0.01)])
def test_kern_notices_a_wrong_number(shape: object) -> None:
    outline = shape.outline  # type: ignore[attr-defined]
    section = section_properties(outline)
    found = kern(section, outline)
    assert all(r.holds for r in kern_residuals(section, found, outline))
    wrong = replace(found, k_top=found.k_top * 1.001)
    assert [r.what for r in kern_residuals(section, wrong, outline) if not r.holds] == ["k_t"]


def test_kern_of_a_channel() -> None:
    """It is W/A of the fibre on the other side: I_v/(A c)."""
    outline = channel(h=0.2, b=0.075, t_w=0.0085, t_f=0.0115).outline
    section = section_properties(outline)
    found = kern(section, outline)
    assert found.k_right == pytest.approx(section.I_v / (section.area * section.c_left), rel=1e-9)
    assert found.k_left == pytest.approx(section.I_v / (section.area * section.c_right), rel=1e-9)
