"""All sections at hand, found by designation however it is spelt."""

from __future__ import annotations

import math
import re
from collections.abc import Iterable, Iterator
from dataclasses import dataclass
from difflib import get_close_matches
from functools import cache, cached_property
from importlib.resources import files
from itertools import zip_longest

from calcgen.profiles.profile import CatalogueFault, Profile, designation_key
from calcgen.profiles.reader import read_catalogue

__all__ = ["Catalogue", "CatalogueFault", "Profile", "builtin_catalogue", "designation_key", "read_catalogue"]


@dataclass(frozen=True)
class Catalogue:
    """Sections of distinct designations; iteration goes by family and mass. Made with `joined`."""

    profiles: tuple[Profile, ...] = ()

    def __iter__(self) -> Iterator[Profile]:
        return iter(self.profiles)

    def __len__(self) -> int:
        return len(self.profiles)

    def find(self, designation: str) -> Profile | None:
        """Return the section of that designation, in any of its spellings, or None."""
        return self._by_key.get(designation_key(designation))

    def nearest(self, designation: str, count: int = 3) -> tuple[str, ...]:
        """Return designations close to the one given, the closest first; none when nothing is close.

        Where the letters are right the figures decide, each in its turn; otherwise the spelling does.
        """
        key = designation_key(designation)
        numbers = _numbers(key)
        alike = [known for known in self._by_key if _letters(known) == _letters(key) != ""]
        keys = sorted(alike, key=lambda known: _distance(numbers, _numbers(known)))[:count]
        keys = keys or get_close_matches(key, self._by_key, n=count)
        return tuple(self._by_key[key].designation for key in keys)

    @property
    def families(self) -> tuple[str, ...]:
        """Families in their order."""
        return tuple(dict.fromkeys(profile.family for profile in self.profiles))

    def family(self, name: str) -> tuple[Profile, ...]:
        """Sections of a family, the lightest first; none when there is no such family."""
        return tuple(profile for profile in self.profiles if profile.family == name)

    def joined(self, profiles: Iterable[Profile]) -> tuple[Catalogue, tuple[CatalogueFault, ...]]:
        """Join further sections; one whose designation is there already is a fault and stays out."""
        by_key = dict(self._by_key)
        faults = []
        for profile in profiles:
            first = by_key.setdefault(designation_key(profile.designation), profile)
            if first is not profile:
                message = f"'{profile.designation}' is defined twice"
                hint = f"first in {first.file}, line {first.line}"
                faults.append(CatalogueFault(profile.file, profile.line, 1, message, hint))
        return Catalogue(tuple(sorted(by_key.values(), key=_family_and_mass))), tuple(faults)

    @cached_property
    def _by_key(self) -> dict[str, Profile]:
        return {designation_key(profile.designation): profile for profile in self.profiles}


def _letters(key: str) -> str:
    return re.split(r"\d", key, maxsplit=1)[0]


def _numbers(key: str) -> tuple[float, ...]:
    """Numbers of a designation in turn; 3-1/2 is one."""
    found = re.findall(r"(?:(\d+)-)?(\d+(?:\.\d+)?)(?:/(\d+))?", key)
    return tuple(float(whole or 0) + float(top) / (float(bottom or 1) or 1.0) for whole, top, bottom in found)


def _distance(these: tuple[float, ...], those: tuple[float, ...]) -> tuple[float, ...]:
    return tuple(abs(a - b) for a, b in zip_longest(these, those, fillvalue=0.0))


def _family_and_mass(profile: Profile) -> tuple[str, float, str]:
    return profile.family, profile.published.get("mass", math.inf), profile.designation


@cache
def builtin_catalogue() -> Catalogue:
    """Return the catalogues that come with the program, read once."""
    profiles: list[Profile] = []
    faults: list[CatalogueFault] = []
    for entry in sorted(files("calcgen.profiles").iterdir(), key=lambda entry: entry.name):
        if entry.name.endswith(".csv"):
            read = read_catalogue(f"calcgen/profiles/{entry.name}", entry.read_text(encoding="utf-8"))
            profiles.extend(read[0])
            faults.extend(read[1])
    catalogue, twice = Catalogue().joined(profiles)
    if faults or twice:
        raise ValueError(f"the catalogues of the program are damaged: {(*faults, *twice)}")
    return catalogue
