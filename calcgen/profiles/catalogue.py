"""All sections at hand, found by designation however it is spelt."""

from __future__ import annotations

import math
import re
from collections.abc import Callable, Iterable, Iterator, Mapping
from dataclasses import dataclass, field
from difflib import get_close_matches
from functools import cache
from importlib.resources import files
from itertools import zip_longest

from calcgen.profiles.profile import CatalogueFault, Profile, designation_key
from calcgen.profiles.reader import Row, index_catalogue, read_catalogue

__all__ = ["Catalogue", "CatalogueFault", "Profile", "builtin_catalogue", "designation_key", "read_catalogue"]


@dataclass(frozen=True)
class Catalogue:
    """Sections of distinct designations; iteration goes by family and mass. Made with `joined`.

    A row of the program's own files is read when its section is asked for: there are many, and a calc names
    a few.
    """

    entries: Mapping[str, Profile | Row] = field(default_factory=dict)

    def __iter__(self) -> Iterator[Profile]:
        return iter(self.where(lambda _: True))

    def __len__(self) -> int:
        return len(self.entries)

    def find(self, designation: str) -> Profile | None:
        """Return the section of that designation, in any of its spellings, or None."""
        entry = self.entries.get(designation_key(designation))
        return None if entry is None else _read(entry)

    def where(self, of_key: Callable[[str], bool]) -> tuple[Profile, ...]:
        """Return the sections whose `designation_key` is as wanted, by family and mass."""
        found = (_read(entry) for key, entry in self.entries.items() if of_key(key))
        return tuple(sorted(found, key=_family_and_mass))

    def nearest(self, designation: str, count: int = 3) -> tuple[str, ...]:
        """Return designations close to the one given, the closest first; none when nothing is close.

        Where the letters are right, or nearly, the figures decide, each in its turn; otherwise the spelling.
        """
        key = designation_key(designation)
        numbers = _numbers(key)
        letters = get_close_matches(_letters(key), sorted({_letters(known) for known in self.entries}), n=1)
        alike = [known for known in self.entries if _letters(known) in letters]
        keys = sorted(alike, key=lambda known: (_distance(numbers, _numbers(known)), known))[:count]
        keys = keys or get_close_matches(key, sorted(self.entries), n=count)
        return tuple(self.entries[key].designation for key in keys)

    @property
    def families(self) -> tuple[str, ...]:
        """Families in their order."""
        return tuple(sorted({entry.family for entry in self.entries.values()}))

    def family(self, name: str) -> tuple[Profile, ...]:
        """Sections of a family, the lightest first; none when there is no such family."""
        return self.where(lambda key: self.entries[key].family == name)

    def joined(self, entries: Iterable[Profile | Row]) -> tuple[Catalogue, tuple[CatalogueFault, ...]]:
        """Join further sections; one whose designation is there already is a fault and stays out."""
        by_key = dict(self.entries)
        faults = []
        for entry in entries:
            first = by_key.setdefault(designation_key(entry.designation), entry)
            if first is not entry:
                message = f"'{entry.designation}' is defined twice"
                hint = f"first in {first.file}, line {first.line}"
                faults.append(CatalogueFault(entry.file, entry.line, 1, message, hint))
        return Catalogue(by_key), tuple(faults)


def _read(entry: Profile | Row) -> Profile:
    return entry.profile if isinstance(entry, Row) else entry


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
    """Return the catalogues that come with the program, indexed once."""
    rows: list[Row] = []
    for name, text in builtin_texts():
        rows.extend(index_catalogue(name, text))
    catalogue, twice = Catalogue().joined(rows)
    if twice:
        raise ValueError(f"the catalogues of the program are damaged: {twice}")
    return catalogue


def builtin_texts() -> Iterator[tuple[str, str]]:
    """Yield the files that come with the program, by name: the path as it is shown, and the contents."""
    for entry in sorted(files("calcgen.profiles").iterdir(), key=lambda entry: entry.name):
        if entry.name.endswith(".csv"):
            yield f"calcgen/profiles/{entry.name}", entry.read_text(encoding="utf-8")
