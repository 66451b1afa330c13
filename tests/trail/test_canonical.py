"""One text for one value."""

from __future__ import annotations

import hashlib
import json

import pytest
from hypothesis import given

from calcgen.trail import Json, canonical, digest_of
from tests.trail.specimens import states


@pytest.mark.parametrize(
    ("value", "text"),
    [
        ({"b": 1, "a": [True, None]}, '{"a":[true,null],"b":1}'),
        ({"σ": "kN·m"}, '{"σ":"kN·m"}'),
        (0.1 + 0.2, "0.3"),
        (1 / 3, "0.333333333333"),
        (33.93 * (1 + 1e-15), "33.93"),
        (6.0, "6.0"),
        (6, "6"),
        (-0.0, "0.0"),
        (1e22, "1e+22"),
        (210e9, "210000000000.0"),
        ((1, (2,)), "[1,[2]]"),
        ('a "b"\n', '"a \\"b\\"\\n"'),
    ],
)
def test_canonical_text(value: Json, text: str) -> None:
    assert canonical(value) == text


@pytest.mark.parametrize("value", [float("nan"), float("inf"), [-float("inf")]])
def test_what_is_not_finite_has_no_text(value: Json) -> None:
    with pytest.raises(ValueError, match="JSON"):
        canonical(value)


@given(states)
def test_canonical_text_reads_back_to_itself(state: Json) -> None:
    text = canonical(state)
    assert canonical(json.loads(text)) == text
    assert digest_of(state) == hashlib.sha256(text.encode()).hexdigest()
