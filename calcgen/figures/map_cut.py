"""Where calcs in layers that are too many for a sheet are cut: into bands of a few layers, from the left."""

from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass

from calcgen.figures.map_layout import Arrow, joined

MOST_LAYERS = 5  # side by side without any words between them
LAYERS = 3  # with words


@dataclass(frozen=True)
class _Rest:
    """Calcs that arrows still join when the bands before have been cut off.

    `own` stand in this band, and what is left beyond it falls into the rests `beyond`; `last` is the last
    layer, `place` that of the first of all calcs.
    """

    band: int
    own: tuple[str, ...]
    beyond: tuple["_Rest", ...]
    last: int
    place: int

    @property
    def fits(self) -> bool:
        """Whether it is not cut any more."""
        return self.last - self.band * LAYERS < MOST_LAYERS

    def calcs(self) -> Iterator[str]:
        """Yield all calcs."""
        yield from self.own
        for rest in self.beyond:
            yield from rest.calcs()


def bands(
    layers: Sequence[Sequence[str]], arrows: Sequence[Arrow], place: Mapping[str, int]
) -> list[list[str]]:
    """Return the calcs of joined layers in parts of at most MOST_LAYERS, as they stand from left to right.

    It is as if the first LAYERS layers were cut off while more than MOST_LAYERS are left, and then those of
    each group that arrows still join. `place` gives the order of calcs.
    """
    parts: list[list[str]] = []
    waiting = _rests(layers, arrows, place)
    while waiting:
        rest = waiting.pop()
        parts.append(list(rest.calcs()) if rest.fits else list(rest.own))
        if not rest.fits:
            waiting += sorted(rest.beyond, key=lambda r: -r.place)
    return [part for part in parts if part]


def _rests(layers: Sequence[Sequence[str]], arrows: Sequence[Arrow], place: Mapping[str, int]) -> list[_Rest]:
    """Return what there is before the first cut.

    It is put together from the last band to the first, by which each arrow is looked at once.
    """
    band = _band_of(layers, arrows)
    count = 1 + max(band.values(), default=-1)
    own: list[list[str]] = [[] for _ in range(count)]
    layer = {calc: n for n, calcs in enumerate(layers) for calc in calcs}
    for calc in layer:
        own[band[calc]].append(calc)
    joins: list[list[Arrow]] = [[] for _ in range(count)]
    for giver, taker in arrows:
        joins[min(band[giver], band[taker])].append((giver, taker))
    rests: dict[str, _Rest] = {}  # by one of its calcs, which stands for it
    stands = {calc: calc for calc in layer}  # for a calc, or for one that does
    for number in reversed(range(count)):
        between = [(_standing(giver, stands), _standing(taker, stands)) for giver, taker in joins[number]]
        groups = joined([*own[number], *rests], between)
        before, rests = rests, {}
        for group in groups:
            here = tuple(calc for calc in group if calc not in before)
            beyond = tuple(before[calc] for calc in group if calc in before)
            last = max([*(layer[calc] for calc in here), *(rest.last for rest in beyond)])
            first = min([*(place[calc] for calc in here), *(rest.place for rest in beyond)])
            rests[group[0]] = _Rest(number, here, beyond, last, first)
            stands.update(dict.fromkeys(group, group[0]))
    return sorted(rests.values(), key=lambda r: -r.place)


def _band_of(layers: Sequence[Sequence[str]], arrows: Sequence[Arrow]) -> dict[str, int]:
    """Return the band of each calc.

    One that stands first in a band is fed by none in it, and moves right before the first that it feeds.
    """
    layer = {calc: n for n, calcs in enumerate(layers) for calc in calcs}
    nearest: dict[str, int] = {}
    for giver, taker in arrows:
        if layer[giver] < layer[taker]:
            nearest[giver] = min(layer[taker], nearest.get(giver, layer[taker]))
    return {
        calc: (nearest.get(calc, n + 1) - 1 if n % LAYERS == 0 else n) // LAYERS for calc, n in layer.items()
    }


def _standing(calc: str, stands: dict[str, str]) -> str:
    """Return what stands for a calc, and shorten the ways to it."""
    way = []
    while stands[calc] != calc:
        way.append(calc)
        calc = stands[calc]
    stands.update(dict.fromkeys(way, calc))
    return calc
