"""Ticks: round values whose texts are those values."""

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from calcgen.figures.ticks import ticks


@pytest.mark.parametrize(
    ("low", "high", "texts"),
    [
        (3.6, 9.4, ["4", "5", "6", "7", "8", "9"]),
        (-0.1, 0.45, ["−0.1", "0", "0.1", "0.2", "0.3", "0.4"]),
        (0, 1.3e-5, ["0", "2.0e−06", "4.0e−06", "6.0e−06", "8.0e−06", "1.0e−05", "1.2e−05"]),
        (9e6, 21e6, ["1.0e+07", "1.2e+07", "1.4e+07", "1.6e+07", "1.8e+07", "2.0e+07"]),
    ],
)
def test_texts(low: float, high: float, texts: list[str]) -> None:
    assert [text for _, text in ticks(low, high)] == texts


@settings(max_examples=50)
@given(st.floats(-1e9, 1e9), st.floats(1e-6, 1.0), st.floats(1e-9, 1e9))
def test_a_text_is_its_value(start: float, share: float, size: float) -> None:
    width = max(share * size, 1e-7 * abs(start))
    found = ticks(start, start + width)
    assert 2 <= len(found) <= 8
    for value, text in found:
        assert start - 1e-6 * width <= value <= start + width * (1 + 1e-6)
        assert float(text.replace("−", "-")) == pytest.approx(value, abs=1e-6 * width)
