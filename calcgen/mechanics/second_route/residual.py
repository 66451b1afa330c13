"""What the second route finds against the first, relative to a stated scale."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Final


@dataclass(frozen=True)
class Residual:
    """The difference of two routes to one result, divided by a scale that stays meaningful where it is zero.

    `what` names the result by its symbol, neutral of axis convention ('N', 'I_h'); `quantity` says in words
    what was compared, and by which scale it was divided. The residual's sign is of second route less first.
    """

    what: str
    residual: float
    tolerance: float
    quantity: str

    @property
    def holds(self) -> bool:
        """Whether the two routes agree; a residual that is not a number never does."""
        return abs(self.residual) <= self.tolerance


UNDERFLOW: Final = 1e-290
"""A difference, in SI units, that is left by numbers near the smallest there are: they hold few digits."""


def relative(difference: float, scale: float) -> float:
    """Return `difference / scale`, and zero where nothing differs, whatever the scale."""
    return 0.0 if abs(difference) <= UNDERFLOW else difference / scale if scale > 0.0 else float("inf")
