"""Numbers and units as they are read on a page."""

from __future__ import annotations

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st

from calcgen.quantities.display import KINDS, Shown, Style, describe, number_text, rounded, show
from calcgen.quantities.measure import (
    Measure,
    dimension_of,
    from_si,
    magnitude_in,
    measure,
    pretty,
    unit_factors,
    unit_size,
)
from calcgen.quantities.units import SYMBOLS


@pytest.mark.parametrize(
    ("number", "digits", "text"),
    [
        (33.931, 4, "33.93"),
        (6.0, 4, "6.000"),
        (-0.336049, 4, "−0.3360"),
        (0.0, 4, "0"),
        (-0.0, 4, "0"),
        (24170.2, 4, "24170"),  # never fewer figures than the integer part has
        (9999.96, 4, "10000"),
        (999999.0, 4, "1.000 × 10⁶"),
        (1234567.0, 4, "1.235 × 10⁶"),
        (0.000123, 3, "0.000123"),
        (0.0000123, 3, "1.23 × 10⁻⁵"),
        (2.1e11, 4, "2.100 × 10¹¹"),
        (math.nan, 4, "not finite"),
        (math.inf, 4, "not finite"),
    ],
)
def test_number(number: float, digits: int, text: str) -> None:
    assert number_text(number, digits) == text


@given(st.floats(min_value=-1e12, max_value=1e12), st.integers(min_value=2, max_value=8))
def test_a_number_reads_back_within_its_figures(number: float, digits: int) -> None:
    superscripts = str.maketrans("⁰¹²³⁴⁵⁶⁷⁸⁹⁻−", "0123456789--")
    text = number_text(number, digits).replace(" × 10", "e").translate(superscripts)
    assert float(text) == pytest.approx(number, rel=0.51 * 10.0 ** (1 - digits), abs=1e-300)


@pytest.mark.parametrize(
    ("value", "system", "shown"),
    [
        (measure(6, "m", (("m", 1),)), "SI", Shown("6.000", "m")),
        (from_si(33.93e3, "N·m").shown_in(None), "SI", Shown("33.93", "kN·m")),
        (from_si(0.012, "m").shown_in(None), "SI", Shown("12.00", "mm")),
        (from_si(8.356e-5, "m⁴").shown_in(None), "SI", Shown("8356", "cm⁴")),
        (from_si(2.5e3, "Pa").shown_in(None), "SI", Shown("2.500", "kPa")),
        (from_si(104.6e6, "Pa").shown_in(None), "SI", Shown("104.6", "MPa")),
        (from_si(210e9, "Pa").shown_in(None), "SI", Shown("210.0", "GPa")),
        (measure(266, None, (("kip", 1), ("ft", 1))), "US", Shown("266.0", "kip-ft")),
        (measure(0.45, None, (("kip", 1), ("ft", -1))), "US", Shown("450.0", "plf")),
        (measure(2, None, (("kip", 1), ("ft", -1))), "US", Shown("2.000", "klf")),
        (measure(50, None, (("psf", 1),)), "US", Shown("50.00", "psf")),
        (measure(50, None, (("ksi", 1),)), "US", Shown("50.00", "ksi")),
        (measure(0.5, None), "SI", Shown("0.5000", "")),
        (measure(4.5, "%", (("%", 1),)), "SI", Shown("4.500", "%")),
        (measure(20, "°C", (("°C", 1),)), "SI", Shown("20.00", "°C")),
    ],
)
def test_default_units(value: Measure, system: str, shown: Shown) -> None:
    assert show(value, Style(system=system)) == shown  # type: ignore[arg-type]


def test_a_project_prefers_its_units() -> None:
    style = Style(preferred=(("stress", "N/mm²"),))
    assert show(from_si(275e6, "Pa").shown_in(None), style) == Shown("275.0", "N/mm²")
    assert show(measure(275, "MPa", (("MPa", 1),)), style) == Shown("275.0", "MPa")  # as it was typed


@pytest.mark.parametrize("kind", sorted(KINDS))
def test_every_kind_has_a_default_unit_of_its_dimension(kind: str) -> None:
    dimension = dimension_of(unit_size(KINDS[kind]))
    assert describe(dimension) == kind
    for style in (Style(), Style(system="US")):
        assert dimension_of(unit_size(style.default_unit(dimension))) == dimension


def test_a_dimension_without_a_word_is_shown_in_base_units() -> None:
    moment_squared = Measure(from_si(2e3, "N·m").quantity ** 2)
    assert show(moment_squared, Style()) == Shown("4.000 × 10⁶", "m⁴·kg²·s⁻⁴")


@pytest.mark.parametrize(
    ("unit", "si"),
    [  # exact by definition: inch 25.4 mm, pound 0.45359237 kg, standard gravity 9.80665 m/s² (NIST SP 811)
        ("in", 0.0254),
        ("ft", 0.3048),
        ("lbf", 0.45359237 * 9.80665),
        ("kip", 453.59237 * 9.80665),
        ("psi", 0.45359237 * 9.80665 / 0.0254**2),
        ("ksi", 453.59237 * 9.80665 / 0.0254**2),
        ("psf", 0.45359237 * 9.80665 / 0.3048**2),
        ("ksf", 453.59237 * 9.80665 / 0.3048**2),
        ("plf", 0.45359237 * 9.80665 / 0.3048),
        ("klf", 453.59237 * 9.80665 / 0.3048),
        ("pcf", 0.45359237 * 9.80665 / 0.3048**3),
        ("t", 1000.0),
        ("deg", math.pi / 180),
        ("%", 0.01),
        ("kN·m", 1000.0),
        ("kip-ft", 453.59237 * 9.80665 * 0.3048),
        ("N/mm²", 1e6),
        ("kN·m/m", 1000.0),
        ("1/m", 1.0),
        ("cm⁶", 1e-12),
    ],
)
def test_unit_sizes(unit: str, si: float) -> None:
    assert float(unit_size(unit).magnitude) == pytest.approx(si, rel=1e-12)
    assert magnitude_in(from_si(si, unit), unit) == pytest.approx(1.0, rel=1e-12)


@pytest.mark.parametrize("symbol", sorted(SYMBOLS))
def test_every_symbol_of_the_list_is_a_unit(symbol: str) -> None:
    assert float(unit_size(symbol).magnitude) > 0


def test_unit_texts() -> None:
    assert pretty("mm^4") == "mm⁴"
    assert pretty("kN/m^2") == "kN/m²"
    assert unit_factors("kg^0.5·m^-0.5·s⁻¹") == (("kg", 0.5), ("m", -0.5), ("s", -1))
    assert unit_factors("kip-ft") == (("kip", 1), ("ft", 1))
    with pytest.raises(ValueError, match="furlong"):
        unit_factors("furlong")


@given(st.floats(allow_nan=False, allow_infinity=False))
def test_rounding_is_stable(number: float) -> None:
    assert rounded(rounded(number)) == rounded(number)
    assert math.copysign(1.0, rounded(-0.0)) == 1.0
