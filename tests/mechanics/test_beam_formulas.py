"""The closed forms of `tests/exact/beam_formulas.py`: proven in symbols, and asked of the program.

The proof integrates each beam by singularity functions over rational functions of all its letters, so a
formula that memory has wrong fails there, whatever the program says. The program is asked twice: mechanics by
itself, and a calc that is typed.
"""

from __future__ import annotations

from decimal import Decimal, localcontext

import pytest
from sympy import QQ

from calcgen.mechanics.beam import CaseSolution, solve
from calcgen.quantities.measure import Measure
from tests.evaluation.helpers import evaluated, fence
from tests.exact.beam_formulas import FORMULAS, NAMES, PEAKS, Formulas, Peak, Read, Symbols
from tests.exact.chains import SECTION, lines_of, loads_of, model_of, supports_of
from tests.exact.singularity import Chain, Number, Solved, solved

EXACT = 1e-10

# L, a, EI, P, w, C, D, k, K, S, t
VALUES = (4, QQ(13, 10), 2_000_000, 7_000, 5_000, 3_000, QQ(1, 100), 300_000, 500_000, 900_000, QQ(3, 10_000))
NUMBERS = Symbols(*(float(value) for value in VALUES))
FIELD = QQ.frac_field(*NAMES)
LETTERS = Symbols(*FIELD.gens)


def size(element: Number) -> float:
    """Return the number that a rational function has at VALUES: places have an order there."""
    element = FIELD.convert(element)
    points = list(zip(FIELD.field.ring.gens, VALUES, strict=True))
    return float(element.numer.evaluate(points) / element.denom.evaluate(points))


def of_oracle(found: Solved, chain: Chain, read: Read) -> Number:
    match read.quantity:
        case "R":
            return found.reaction(read.where)
        case "MR":
            return found.restraint(read.where)
        case _:
            end = chain.pieces[-1].end == read.where  # beyond it there is nothing
            return found.at(read.quantity, read.where, side="left" if end else "right")


def of_program(solution: CaseSolution, chain: Chain, read: Read) -> float:
    if read.quantity in ("R", "MR"):
        reaction = solution.reactions[supports_of(chain)[1][read.where]]
        return reaction.force if read.quantity == "R" else reaction.moment
    x = min(float(read.where), solution.model.length)
    quantity = "rotation" if read.quantity == "θ" else read.quantity
    return solution.at(quantity, x, "right")  # type: ignore[arg-type]


def close(value: float, scale: float) -> object:
    """Return what a value must equal; zero is one beside the moment or length of the beam."""
    return pytest.approx(value, rel=EXACT, abs=EXACT * scale)


@pytest.mark.parametrize("case", FORMULAS, ids=lambda case: case.name)
def test_integration_in_symbols_gives_the_formula(case: Formulas) -> None:
    chain = case.chain(LETTERS)
    found = solved(chain, size, FIELD.one)
    for read, formula in case.results(LETTERS).items():
        assert of_oracle(found, chain, read) == formula, read


@pytest.mark.parametrize("case", FORMULAS, ids=lambda case: case.name)
def test_mechanics_gives_the_formula(case: Formulas) -> None:
    chain = case.chain(NUMBERS)
    model, loads = model_of(chain), loads_of(chain)
    solution = solve(model, {"case": loads})["case"]
    for read, value in case.results(NUMBERS).items():
        zero = 1e3 if value == 0.0 else 0.0
        assert of_program(solution, chain, read) == close(value, zero), read


def can_be_typed(chain: Chain) -> bool:
    """Whether the language has all of it: distributed moments are uniform there."""
    return not any(a.kind == "moments" and a.value_end is not None for a in chain.actions)


@pytest.mark.parametrize(
    "case", [c for c in FORMULAS if can_be_typed(c.chain(NUMBERS))], ids=lambda case: case.name
)
def test_a_typed_calc_gives_the_formula(case: Formulas) -> None:
    chain = case.chain(NUMBERS)
    asked = _asked(chain, case)
    names = [name for name, _ in asked]
    text = fence("section s", SECTION) + fence("beam b", *lines_of(chain))
    working = fence("working", *(f"asked_{i} = {name}" for i, name in enumerate(names)))
    (calc,) = evaluated(f"# T\n{text}{working}")
    assert [d.message for d in calc.diagnostics] == []
    assert [r for r in calc.second_route if not r.holds] == []
    for i, (_, value) in enumerate(asked):
        found = calc.values[f"asked_{i}"][0]
        assert isinstance(found, Measure)
        assert found.si == close(value, 1e3 if value == 0.0 else 0.0), names[i]


def _asked(chain: Chain, case: Formulas) -> list[tuple[str, float]]:
    """Return the results of a formula as they are typed; where M or V jumps, the right one is the
    larger or the smaller."""
    model, places = model_of(chain), [float(held.x) for held in chain.held]
    solution = solve(model, {"case": loads_of(chain)})["case"]
    asked: list[tuple[str, float]] = []
    for read, value in case.results(NUMBERS).items():
        if read.quantity in ("R", "MR"):
            name = f"{'R' if read.quantity == 'R' else 'M_R'}_{read.where + 1}"
        elif read.quantity == "θ":
            name = f"θ_{places.index(float(read.where)) + 1}" if float(read.where) in places else "slope({x})"
        elif read.quantity == "w":
            name = "w({x})"
        else:
            x = min(float(read.where), model.length)
            left = solution.at(read.quantity, x, "left")  # type: ignore[arg-type]
            name = f"{read.quantity}_{'max' if value >= left else 'min'}({{x}})"
        asked.append((f"b.{name.format(x=f'{float(read.where)!r} m')}", float(value)))
    return asked


@pytest.mark.parametrize("peak", PEAKS, ids=lambda peak: peak.name)
def test_the_largest_value_and_its_place(peak: Peak) -> None:
    """Proven with 40 digits: the value stands there, and what it is the integral of changes sign."""
    chain = peak.chain(NUMBERS)
    solution = solve(model_of(chain), {"case": loads_of(chain)})["case"]
    found = solution.extremes("M" if peak.quantity == "M" else "w")
    assert found.max == pytest.approx(float(peak.value(NUMBERS)), rel=EXACT)
    assert found.x_max == pytest.approx(float(peak.place(NUMBERS)), rel=1e-8)
    with localcontext(prec=40):
        precise = Symbols(*(Decimal(int(v.numerator)) / int(v.denominator) for v in map(QQ.convert, VALUES)))
        exact, x = solved(peak.chain(precise), one=Decimal(1)), peak.place(precise)
        value = peak.value(precise)
        assert abs(exact.at(peak.quantity, x) / value - 1) < Decimal("1e-30")
        rate = exact.at("V" if peak.quantity == "M" else "θ", x)
        assert abs(rate) * precise.L < Decimal("1e-27") * value
