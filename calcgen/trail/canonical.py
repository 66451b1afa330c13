"""Canonical JSON: one text for one value, so that its digest means the same on every machine."""

from __future__ import annotations

import hashlib
import json
from collections.abc import Mapping, Sequence
from typing import TypeAlias

Json: TypeAlias = "bool | int | float | str | Sequence[Json] | Mapping[str, Json] | None"

DIGITS = 12  # significant digits of a float; hides last-bit differences between machines


def normalised(value: Json) -> Json:
    """Return `value` with its floats rounded to 12 significant digits, and -0.0 as 0.0."""
    if value is None or isinstance(value, str | int):
        return value
    if isinstance(value, float):
        return float(f"{value:.{DIGITS}g}") + 0.0
    if isinstance(value, Mapping):
        return {key: normalised(item) for key, item in value.items()}
    return [normalised(item) for item in value]


def canonical(value: Json) -> str:
    """Return the canonical JSON of `value`: keys sorted, no spaces, Unicode as it is, floats as `normalised`.

    Raises
    ------
    ValueError
        When a float is not finite.
    """
    return json.dumps(
        normalised(value), ensure_ascii=False, sort_keys=True, separators=(",", ":"), allow_nan=False
    )


def digest_of(value: Json) -> str:
    """Return the sha256, in hexadecimal, of the canonical JSON of `value` in UTF-8."""
    return hashlib.sha256(canonical(value).encode()).hexdigest()
