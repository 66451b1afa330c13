"""Names as symbols: one canonical spelling, a base and its subscripts."""

from __future__ import annotations

import unicodedata
from dataclasses import dataclass

GREEK = {
    name: chr(code)
    for name, code in zip(
        "alpha beta gamma delta epsilon zeta eta theta iota kappa lambda mu nu xi omicron pi rho".split()
        + "sigma tau upsilon phi chi psi omega".split(),
        [*range(0x3B1, 0x3C2), *range(0x3C3, 0x3CA)],
        strict=True,
    )
}
GREEK |= {name.capitalize(): letter.upper() for name, letter in GREEK.items()}


@dataclass(frozen=True)
class Symbol:
    """A name as it is set: M with the subscript c,Rd."""

    base: str
    subscripts: tuple[str, ...]

    @property
    def subscript(self) -> str:
        """The subscripts joined by commas."""
        return ",".join(self.subscripts)


def canonical(name: str) -> str:
    """Return the one spelling of a name: NFKC, segments that spell a Greek letter as that letter.

    >>> canonical("sigma_max")
    'σ_max'
    """
    segments = unicodedata.normalize("NFKC", name).split("_")
    return "_".join(
        GREEK.get(s.rstrip("'"), s.rstrip("'")) + "'" * (len(s) - len(s.rstrip("'"))) for s in segments
    )


def symbol(name: str) -> Symbol:
    """Return base and subscripts of a canonical name: the first '_' starts the subscript."""
    base, _, rest = name.partition("_")
    return Symbol(base, tuple(rest.split("_")) if rest else ())


def plain(name: str) -> str:
    """Return a name as text: 'M_c,Rd'."""
    s = symbol(name)
    return f"{s.base}_{s.subscript}" if s.subscripts else s.base
