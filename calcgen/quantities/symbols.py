"""Names as symbols: one canonical spelling, a base and its subscripts."""

from __future__ import annotations

import unicodedata
from dataclasses import dataclass

GREEK = {
    "alpha": "α",
    "beta": "β",
    "gamma": "γ",
    "delta": "δ",
    "epsilon": "ε",
    "zeta": "ζ",
    "eta": "η",
    "theta": "θ",
    "iota": "ι",
    "kappa": "κ",
    "lambda": "λ",
    "mu": "μ",
    "nu": "ν",
    "xi": "ξ",
    "omicron": "ο",
    "pi": "π",
    "rho": "ρ",
    "sigma": "σ",
    "tau": "τ",
    "upsilon": "υ",
    "phi": "φ",
    "chi": "χ",
    "psi": "ψ",
    "omega": "ω",
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

    >>> canonical("sigma_max"), canonical("Phi'")
    ('σ_max', "Φ'")
    """
    return "_".join(_segment(s) for s in unicodedata.normalize("NFKC", name).split("_"))


def _segment(text: str) -> str:
    letters = text.rstrip("'")
    return GREEK.get(letters, letters) + text[len(letters) :]


def symbol(name: str) -> Symbol:
    """Return base and subscripts of a canonical name: the first '_' starts the subscript."""
    base, _, rest = name.partition("_")
    return Symbol(base, tuple(rest.split("_")) if rest else ())


def plain(name: str) -> str:
    """Return a name as text: 'M_c,Rd'."""
    s = symbol(name)
    return f"{s.base}_{s.subscript}" if s.subscripts else s.base
