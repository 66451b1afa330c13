"""Generated combinations against tables worked by hand, and against every admissible vector of factors."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from dataclasses import replace
from itertools import product
from typing import TypeAlias

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from calcgen.evaluation.combination_sets.generate import (
    LIMIT,
    Case,
    TooMany,
    choices,
    generate,
    needed,
)
from calcgen.evaluation.combination_sets.standard import (
    LOADS,
    parsed,
    psi_factors,
    recommended,
    standard_sets,
)

PARTIAL = {key: row.value for key, row in recommended().items()}
PSI = {(row.kind, row.category): row.values for row in psi_factors()}

G = Case("G", "permanent")
G_2 = Case("G_2", "permanent")
Q = Case("Q", "imposed", psi=PSI["imposed", "B"])
Q_E = Case("Q_E", "imposed", psi=PSI["imposed", "E"])
S = Case("S", "snow", alternative=True, psi=PSI["snow", "low"])
W = Case("W", "wind", alternative=True, psi=PSI["wind", ""])
W_2 = Case("W_2", "wind", alternative=True, psi=PSI["wind", ""])
T = Case("T", "temperature", alternative=True, psi=PSI["temperature", ""])
R = Case("R", "roof", alternative=True, psi=PSI["roof", ""])
TRAFFIC = Case("K", "traffic", psi=(0.75, 0.75, 0.0), own=1.35)
SET = Case("U", "settlement")
A = Case("A", "accidental", alternative=True)
E = Case("E", "seismic", alternative=True)
RAIN = Case("P", "rain", alternative=True)
PATTERNED = Case("Q", "imposed", varies=True, psi=PSI["imposed", "B"])


def made(name: str, *cases: Case, **partial: float) -> list[str]:
    """Return the combinations of a set as '1.35 G + 1.5 Q', in order."""
    found = generate(standard_sets()[name], cases, PARTIAL | partial)
    order = [case.name for case in cases]
    return [_text(c.factors, order) for c in found]


def _text(factors: Mapping[str, float], order: list[str]) -> str:
    return " + ".join(f"{factors[name]:.12g} {name}" for name in order if name in factors)


# Expected lists follow from the expressions of EN 1990:2002 6.4.3 and 6.5.3 with Tables A1.1 and A1.2(B), and
# of ASCE 7 2.3 and 2.4, all from memory; they are worked by hand.
@pytest.mark.parametrize(
    ("name", "cases", "expected"),
    [
        (
            "EN 1990 6.10",  # γ_G = 1.35 or 1.00, γ_Q = 1.5
            (G, Q),
            ["1.35 G + 1.5 Q", "1.35 G", "1 G + 1.5 Q", "1 G"],
        ),
        (
            "EN 1990 6.10",  # ψ_0: 0.7, 0.6; each leads in turn
            (G, Q, W),
            [
                *("1.35 G + 1.5 Q + 0.9 W", "1.35 G + 1.5 Q"),
                *("1.35 G + 1.05 Q + 1.5 W", "1.35 G + 1.5 W", "1.35 G"),
                *("1 G + 1.5 Q + 0.9 W", "1 G + 1.5 Q"),
                *("1 G + 1.05 Q + 1.5 W", "1 G + 1.5 W", "1 G"),
            ],
        ),
        (
            "EN 1990 6.10",  # two permanent cases have one sense; a settlement is there or not, 1.20
            (G, G_2, SET),
            [
                *("1.35 G + 1.35 G_2 + 1.2 U", "1.35 G + 1.35 G_2"),
                *("1 G + 1 G_2 + 1.2 U", "1 G + 1 G_2"),
            ],
        ),
        (
            "EN 1990 6.10",  # imposed loads are one action, and any of them may be absent
            (G, Q, Q_E),
            [
                *("1.35 G + 1.5 Q + 1.5 Q_E", "1.35 G + 1.5 Q", "1.35 G + 1.5 Q_E", "1.35 G"),
                *("1 G + 1.5 Q + 1.5 Q_E", "1 G + 1.5 Q", "1 G + 1.5 Q_E", "1 G"),
            ],
        ),
        (
            "EN 1990 6.10",  # two directions of wind never act together
            (G, W, W_2),
            ["1.35 G + 1.5 W", "1.35 G + 1.5 W_2", "1.35 G", "1 G + 1.5 W", "1 G + 1.5 W_2", "1 G"],
        ),
        (
            "EN 1990 6.10",  # EN 1991-1-1 3.3.2(1): no imposed load of a roof with snow or wind
            (G, R, S),
            ["1.35 G + 1.5 R", "1.35 G + 1.5 S", "1.35 G", "1 G + 1.5 R", "1 G + 1.5 S", "1 G"],
        ),
        (
            "EN 1990 6.10",  # a factor of its own, γ 1.35, when it leads and with ψ_0 = 0.75
            (G, TRAFFIC, T),
            [
                *("1.35 G + 1.35 K + 0.9 T", "1.35 G + 1.35 K"),
                *("1.35 G + 1.0125 K + 1.5 T", "1.35 G + 1.5 T", "1.35 G"),
                *("1 G + 1.35 K + 0.9 T", "1 G + 1.35 K"),
                *("1 G + 1.0125 K + 1.5 T", "1 G + 1.5 T", "1 G"),
            ],
        ),
        (
            "EN 1990 6.10",  # a case in a pattern holds its absence, and a smaller factor of itself
            (G, PATTERNED, W),
            [
                *("1.35 G + 1.5 Q + 0.9 W", "1.35 G + 1.5 Q", "1.35 G + 1.05 Q + 1.5 W"),
                *("1 G + 1.5 Q + 0.9 W", "1 G + 1.5 Q", "1 G + 1.05 Q + 1.5 W"),
            ],
        ),
        (
            "EN 1990 6.10",  # without permanent cases
            (Q,),
            ["1.5 Q"],
        ),
        (
            "EN 1990 6.10",  # actions of other situations do not act
            (G, A, E),
            ["1.35 G", "1 G"],
        ),
        (
            "EN 1990 6.10a/b",  # (6.10a): all variable ones with ψ_0; (6.10b): ξ·γ_G = 0.85·1.35 = 1.1475
            (G, Q),
            ["1.35 G + 1.05 Q", "1.35 G", "1.1475 G + 1.5 Q", "1.1475 G", "1 G + 1.5 Q", "1 G"],
        ),
        (
            "EN 1990 characteristic",
            (G, Q, S),  # ψ_0: 0.7, 0.5
            ["1 G + 1 Q + 0.5 S", "1 G + 1 Q", "1 G + 0.7 Q + 1 S", "1 G + 1 S", "1 G"],
        ),
        (
            "EN 1990 frequent",  # ψ_1: 0.5, 0.2; ψ_2: 0.3, 0
            (G, Q, W),
            ["1 G + 0.5 Q", "1 G + 0.3 Q + 0.2 W", "1 G + 0.2 W", "1 G"],
        ),
        (
            "EN 1990 quasi-permanent",  # ψ_2: 0.3, 0.8; imposed loads may be absent
            (G, Q, Q_E, W),
            ["1 G + 0.3 Q + 0.8 Q_E", "1 G + 0.3 Q", "1 G + 0.8 Q_E", "1 G"],
        ),
        (
            "EN 1990 accidental",  # (6.11b) with ψ_1 of what leads; A_d in each
            (G, Q, W, A),
            ["1 G + 0.5 Q + 1 A", "1 G + 0.3 Q + 0.2 W + 1 A", "1 G + 0.2 W + 1 A", "1 G + 1 A"],
        ),
        (
            "EN 1990 seismic",
            (G, Q, W, E),
            ["1 G + 0.3 Q + 1 E", "1 G + 1 E"],
        ),
        (
            "ASCE 7-16 LRFD",
            (G, Q),
            ["1.4 G", "1.2 G + 1.6 Q", "1.2 G", "1.2 G + 1 Q"],
        ),
        (
            "ASCE 7-16 LRFD",  # 1; 2; 3 with L or 0.5W; 4; 5
            (G, Q, W),
            [
                *("1.4 G", "1.2 G + 1.6 Q", "1.2 G"),
                *("1.2 G + 1 Q", "1.2 G + 0.5 W"),
                *("1.2 G + 1 Q + 1 W", "1.2 G + 1 W"),
                *("0.9 G + 1 W", "0.9 G"),
            ],
        ),
        (
            "ASCE 7-16 LRFD",  # roof, snow and rain are alternatives: 2 and 3
            (G, R, S, RAIN),
            [
                *("1.4 G", "1.2 G + 0.5 R", "1.2 G + 0.5 S", "1.2 G + 0.5 P", "1.2 G"),
                *("1.2 G + 1.6 R", "1.2 G + 1.6 S", "1.2 G + 1.6 P"),
            ],
        ),
        (
            "ASCE 7-16 LRFD",  # 6 with 0.2S, 7
            (G, Q, S, E),
            [
                *("1.4 G", "1.2 G + 1.6 Q + 0.5 S", "1.2 G + 1.6 Q", "1.2 G + 0.5 S", "1.2 G"),
                *("1.2 G + 1 Q + 1.6 S", "1.2 G + 1.6 S", "1.2 G + 1 Q"),
                *("1.2 G + 1 Q + 0.2 S + 1 E", "1.2 G + 1 Q + 1 E", "1.2 G + 0.2 S + 1 E", "1.2 G + 1 E"),
                "0.9 G + 1 E",
            ],
        ),
        (
            "ASCE 7-22 LRFD",  # snow 0.3 beside, 1.0 when it counts most
            (G, S),
            ["1.4 G", "1.2 G + 0.3 S", "1.2 G", "1.2 G + 1 S"],
        ),
        (
            "ASCE 7-16 ASD",
            (G, Q, S),
            ["1 G", "1 G + 1 Q", "1 G + 1 S", "1 G + 0.75 Q + 0.75 S", "1 G + 0.75 Q", "1 G + 0.75 S"],
        ),
        (
            "ASCE 7-22 ASD",  # 0.75·0.7 = 0.525
            (G, Q, S),
            ["1 G", "1 G + 1 Q", "1 G + 0.7 S", "1 G + 0.75 Q + 0.525 S", "1 G + 0.75 Q", "1 G + 0.525 S"],
        ),
        (
            "ASCE 7-16 ASD",  # 0.75·0.6W = 0.45W in 6; 7; 8 to 10
            (G, W, E),
            [
                *("1 G", "1 G + 0.6 W", "1 G + 0.45 W", "0.6 G + 0.6 W", "0.6 G"),
                *("1 G + 0.7 E", "1 G + 0.525 E", "0.6 G + 0.7 E"),
            ],
        ),
    ],
)  # fmt: skip
def test_combinations(name: str, cases: tuple[Case, ...], expected: list[str]) -> None:
    assert made(name, *cases) == expected


def test_factors_of_ones_own() -> None:
    assert made("EN 1990 6.10", G, Q, γ_G=1.2, γ_G_inf=0.9, γ_Q=1.4) == [
        *("1.2 G + 1.4 Q", "1.2 G", "0.9 G + 1.4 Q", "0.9 G"),
    ]
    assert made("EN 1990 6.10a/b", G, Q, ξ=0.925)[2] == "1.24875 G + 1.5 Q"


def test_what_leads_is_told() -> None:
    found = generate(standard_sets()["EN 1990 6.10"], (G, Q, Q_E, W), PARTIAL)
    leading = {c.leading for c in found}
    assert leading == {("Q", "Q_E"), ("Q",), ("Q_E",), ("W",), ()}
    assert all(c.factors[name] == 1.5 for c in found for name in c.leading)


def test_a_roof_in_a_pattern_is_absent_under_snow() -> None:
    roof = Case("R", "roof", alternative=True, varies=True, psi=PSI["roof", ""])
    found = made("EN 1990 6.10", G, roof, S)
    assert found == ["1.35 G + 1.5 R", "1.35 G + 1.5 S", "1 G + 1.5 R", "1 G + 1.5 S"]


# --- the data -----------------------------------------------------------------------------------------------


def test_every_expression_is_of_loads_and_factors_that_are_known() -> None:
    for each in standard_sets().values():
        known = {*LOADS[each.standard].values(), *({"Q_1", "Q_i"} if each.standard == "EN" else ())}
        for expression in each.expressions:
            assert expression.source.startswith(each.standard)
            for term in expression.terms:
                for part in term.parts:
                    assert part.load in known
                    for factor in (*term.factors, *part.factors):
                        assert factor in PARTIAL or factor in ("ψ_0", "ψ_1", "ψ_2") or float(factor) > 0.0


def test_every_psi_lies_between_0_and_1_and_has_its_source() -> None:
    for row in psi_factors():
        assert all(0.0 <= value <= 1.0 for value in row.values)
        assert row.values[2] <= row.values[1]
        assert row.source
        assert row.meaning


@pytest.mark.parametrize("text", ["(", "1.2 D + 1.6 (S or R", "0.5 (S or )"])
def test_a_text_that_is_no_expression(text: str) -> None:
    with pytest.raises(ValueError, match=r"missing|closed"):
        parsed(text)


def test_needed_factors() -> None:
    alone = needed(standard_sets()["EN 1990 6.10"], (G, Q))
    assert alone == {"G": frozenset({"γ_G", "γ_G_inf"}), "Q": frozenset({"γ_Q"})}
    beside = needed(standard_sets()["EN 1990 6.10"], (G, Q, W))
    assert beside["Q"] == frozenset({"γ_Q", "ψ_0"})
    assert needed(standard_sets()["EN 1990 quasi-permanent"], (G, Q))["Q"] == frozenset({"ψ_2"})
    assert needed(standard_sets()["ASCE 7-16 LRFD"], (TRAFFIC,)) == {}


# --- limits -------------------------------------------------------------------------------------------------


def imposed(count: int) -> tuple[Case, ...]:
    return tuple(Case(f"Q_{i}", "imposed", psi=(0.7, 0.5, 0.3)) for i in range(count))


def test_imposed_cases_up_to_the_limit() -> None:
    assert len(generate(standard_sets()["EN 1990 characteristic"], (G, *imposed(8)), PARTIAL)) == 2**8
    with pytest.raises(TooMany):
        generate(standard_sets()["EN 1990 6.10"], (G, *imposed(8)), PARTIAL)
    with pytest.raises(TooMany):
        choices(imposed(40))


def test_many_kinds_end_soon() -> None:
    kinds = tuple(Case(f"K_{i}", f"kind_{i}", psi=(0.5, 0.5, 0.0)) for i in range(40))
    with pytest.raises(TooMany):
        generate(standard_sets()["EN 1990 6.10"], (G, *kinds), PARTIAL)
    assert made("EN 1990 quasi-permanent", G, *kinds) == ["1 G"]


# --- against every admissible vector ------------------------------------------------------------------------
#
# The envelope of a set is the largest Σ f_i e_i over its combinations, for effects e_i of any sign. It is
# found again by going through all vectors that the rules admit, for each leading action and each way of being
# present: first every subset of cases, of which the rules then take out some.

_EFFECT = st.floats(-10.0, 10.0, allow_nan=False)


Vectors: TypeAlias = Iterator[dict[str, float]]


def admissible(cases: tuple[Case, ...], name: str) -> Vectors:
    """Give every vector of factors that (6.10), (6.10a), (6.10b), or (6.14b) admits."""
    strength = name != "EN 1990 characteristic"
    γ_Q, γ_SET = (1.5, 1.2) if strength else (1.0, 1.0)
    both = name == "EN 1990 6.10a/b"
    variable = [c for c in cases if c.psi is not None]
    for present in product((False, True), repeat=len(cases)):
        there = {c.name for c, acts in zip(cases, present, strict=True) if acts}
        acting = [c for c in variable if c.name in there]
        kinds = [c.action for c in acting if c.alternative]
        if len(kinds) != len(set(kinds)) or ("roof" in kinds and {"snow", "wind"} & {*kinds}):
            continue
        leads = {c.action for c in acting} | ({None} if both or not acting else set())
        for lead in leads:
            vector = {c.name: γ_SET for c in cases if c.action == "settlement" and c.name in there}
            for c in acting:
                assert c.psi is not None
                γ = c.own if c.own is not None and strength else γ_Q
                vector[c.name] = γ if c.action == lead else γ * c.psi[0]
            sup = 1.0 if not strength else 1.35 if lead is None or not both else 0.85 * 1.35
            for g in (sup, 1.0):
                yield vector | {c.name: g for c in cases if c.action == "permanent"}


@pytest.mark.parametrize("name", ["EN 1990 6.10", "EN 1990 6.10a/b", "EN 1990 characteristic"])
@settings(max_examples=40, deadline=None)
@given(
    st.sets(st.sampled_from((G, G_2, Q, Q_E, S, W, W_2, T, R, TRAFFIC, SET)), min_size=1, max_size=6),
    st.data(),
)
def test_envelope_is_that_of_all_admissible_vectors(
    name: str, chosen: set[Case], data: st.DataObject
) -> None:
    cases = tuple(sorted(chosen, key=lambda c: c.name))
    effects = {c.name: data.draw(_EFFECT) for c in cases}
    every = [_sum(vector, effects) for vector in admissible(cases, name)]
    found = [_sum(c.factors, effects) for c in generate(standard_sets()[name], cases, PARTIAL)]
    if not any(c.action == "permanent" for c in cases):
        found.append(0.0)  # nothing acts: no combination of the set, but a vector
    assert max(found) == pytest.approx(max(every), abs=1e-9)
    assert min(found) == pytest.approx(min(every), abs=1e-9)


def _sum(factors: Mapping[str, float], effects: Mapping[str, float]) -> float:
    return sum(factor * effects[name] for name, factor in factors.items())


@pytest.mark.parametrize("name", [n for n in standard_sets() if not n.endswith(("accidental", "seismic"))])
@settings(max_examples=30, deadline=None)
@given(st.lists(st.booleans(), min_size=5, max_size=5), st.lists(_EFFECT, min_size=5, max_size=5))
def test_a_case_that_varies_needs_no_combination_without_it(
    name: str, varies: list[bool], sizes: list[float]
) -> None:
    """Taken between none and its factor, it has the envelope that it has in combinations with and without."""
    plain = (G, Q, Q_E, S, W)
    effects = {c.name: e for c, e in zip(plain, sizes, strict=True)}
    cases = [replace(c, varies=v and c is not G) for c, v in zip(plain, varies, strict=True)]
    varying = {c.name for c in cases if c.varies}

    def largest(factors: Mapping[str, float]) -> float:
        shares = {n: f * effects[n] for n, f in factors.items()}
        return sum(max(share, 0.0) if n in varying else share for n, share in shares.items())

    found = generate(standard_sets()[name], cases, PARTIAL)
    every = generate(standard_sets()[name], plain, PARTIAL)
    assert len(found) <= len(every)
    assert max(largest(c.factors) for c in found) == pytest.approx(
        max(_sum(c.factors, effects) for c in every), abs=1e-9
    )


@settings(max_examples=40, deadline=None)
@given(st.sets(st.sampled_from((G, Q, Q_E, S, W, W_2, T, E, A, SET)), min_size=1, max_size=7))
def test_no_combination_stands_twice_and_none_is_empty(chosen: set[Case]) -> None:
    cases = tuple(sorted(chosen, key=lambda c: c.name))
    for each in standard_sets().values():
        vectors = [tuple(sorted(c.factors.items())) for c in generate(each, cases, PARTIAL)]
        assert len(vectors) == len(set(vectors)) <= LIMIT
        assert all(vector and all(factor > 0.0 for _, factor in vector) for vector in vectors)
