"""A section that cannot be meshed keeps what needs no finite elements, and says what is missing."""

import pytest

from calcgen.evaluation.blocks import section_torsion
from calcgen.evaluation.blocks.section_torsion import NOT_MESHED
from calcgen.evaluation.results.section import SectionResult
from calcgen.mechanics.outline import Outline
from calcgen.mechanics.saint_venant import MeshError
from calcgen.mechanics.torsion import rectangle_torsion
from tests.evaluation.helpers import evaluated, fence

BY_ELEMENTS = {"I_t", "I_w", "A_s_z", "A_s_y", "x_s", "y_s", "β"}
SHAPES = {
    "polygon((0 mm, 0 mm), (90 mm, 10 mm), (70 mm, 60 mm))": BY_ELEMENTS,
    "rectangle(b = 100 mm, h = 240 mm)": BY_ELEMENTS - {"I_t"},
    "tube(d = 100 mm, t = 5 mm)": BY_ELEMENTS - {"I_t", "I_w"},
    "i_shape(h = 300 mm, b = 150 mm, t_w = 8 mm, t_f = 12 mm)": {"A_s_z", "A_s_y"},  # the mid-line serves
    'rolled("IPE 240")': {"A_s_y"},  # the catalogue gives the other one
}


@pytest.mark.parametrize(("shape", "missing"), SHAPES.items(), ids=[s.split("(")[0] for s in SHAPES])
def test_properties_without_finite_elements(
    monkeypatch: pytest.MonkeyPatch, shape: str, missing: set[str]
) -> None:
    def fails(*_: Outline) -> None:
        raise MeshError("the edges of the outline cannot be made sides of triangles")

    monkeypatch.setattr(section_torsion, "saint_venant", fails)
    (calc,) = evaluated("# Section\n\n" + fence("section s", f"shape = {shape}"))
    (warning,) = calc.diagnostics
    assert (warning.severity, warning.code) == ("warning", "not-meshed")
    assert warning.source.line_number(warning.span) == 3
    (section,) = (s for s in calc.segments if isinstance(s, SectionResult))
    assert set(section.absent) >= missing
    assert {why for name, why in section.absent.items() if name in missing} == {NOT_MESHED}
    known = {result.name for result in section.results}
    assert known >= {"A", "I_y", "W_el_y", "k_t"}
    assert not known & set(section.absent)
    if shape.startswith("rectangle"):
        (I_t,) = (r for r in section.results if r.name == "I_t")
        assert I_t.value.quantity.magnitude == pytest.approx(rectangle_torsion(0.1, 0.24).value, rel=1e-9)
