"""How a calc stands: a word, the governing check, its utilisation as a bar."""

from __future__ import annotations

from dataclasses import dataclass

from calcgen.evaluation.results.calc import EvaluatedCalc
from calcgen.site import addresses
from calcgen.site.views import BarView, Link, bar, utilisation_text


@dataclass(frozen=True)
class StandingView:
    """The standing of a calc.

    Attributes
    ----------
    word : satisfied, exceeded, no checks, not evaluated, in error.
    kind : the word as a class of the style sheet.
    governing : the governing check, None where there is none.
    detail : utilisation in words: '0.336 of 1'.
    """

    word: str
    kind: str
    governing: Link | None
    detail: str
    bar: BarView | None


def standing_view(calc: EvaluatedCalc) -> StandingView:
    """Return the standing; a calc that is in error or not evaluated has no governing check."""
    kind = calc.standing.replace(" ", "-")
    check = calc.governing
    if check is None or calc.standing in ("in error", "not evaluated"):
        return StandingView(calc.standing, kind, None, "", None)
    href = addresses.link(addresses.calc_page(calc.number), check.address)
    detail = f"{utilisation_text(check.utilisation)} of 1" if check.utilisation is not None else ""
    return StandingView(calc.standing, kind, Link(check.label, href), detail, bar(check))
