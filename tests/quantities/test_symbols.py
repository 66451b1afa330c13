"""Names as symbols."""

from __future__ import annotations

import pytest

from calcgen.quantities.symbols import canonical, plain, symbol


@pytest.mark.parametrize(
    ("typed", "name", "base", "subscript"),
    [
        ("M_Ed", "M_Ed", "M", "Ed"),
        ("M_c_Rd", "M_c_Rd", "M", "c,Rd"),
        ("sigma_max", "σ_max", "σ", "max"),
        ("σ_max", "σ_max", "σ", "max"),
        ("lambda_LT", "λ_LT", "λ", "LT"),
        ("Phi_LT", "Φ_LT", "Φ", "LT"),
        ("gamma_M0", "γ_M0", "γ", "M0"),
        ("k_sigma", "k_σ", "k", "σ"),
        ("gammas", "gammas", "gammas", ""),
        ("x'", "x'", "x'", ""),
        ("phi'", "φ'", "φ'", ""),
        ("ϕ", "φ", "φ", ""),  # NFKC: one letter, two code points
        ("µ", "μ", "μ", ""),
    ],
)
def test_one_spelling(typed: str, name: str, base: str, subscript: str) -> None:
    assert canonical(typed) == name
    assert (symbol(name).base, symbol(name).subscript) == (base, subscript)
    assert canonical(canonical(typed)) == name


def test_plain_text() -> None:
    assert plain("M_c_Rd") == "M_c,Rd"
    assert plain("L") == "L"
