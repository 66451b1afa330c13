"""How far a catalogue's published values may lie from the outline of the nominal dimensions."""

from __future__ import annotations

from collections.abc import Mapping

from calcgen.profiles.catalogue import Profile

TEMPORARY = 0.03


def tolerances(profile: Profile) -> Mapping[str, float]:
    """Return the tolerance of each published property, relative to it."""
    return dict.fromkeys((k for k in profile.published if k not in ("I_t", "I_w", "mass")), TEMPORARY)
