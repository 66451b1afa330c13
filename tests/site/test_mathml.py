"""Formulas as MathML: a table of cases, from what is typed to what is set."""

from __future__ import annotations

import pytest
from markupsafe import Markup

from calcgen.language.blocks.working import Derivation, WorkingBlock
from calcgen.language.document import calc_from
from calcgen.language.nodes import Formula, Name
from calcgen.quantities.display import Shown
from calcgen.site.mathml import formula, quantity, symbol, terms
from calcgen.text import SourceFile

THIN = '<mspace width="0.17em"/>'
TIMES = f"<mo>&#x2062;</mo>{THIN}"
DOT = "<mo>·</mo>"
OPEN, CLOSE = "<mrow><mo>(</mo>", "<mo>)</mo></mrow>"


def infix(sign: str) -> str:
    return f'<mo form="infix">{sign}</mo>'


def text_of(mathml: str) -> str:
    return Markup(mathml).striptags().replace("\xa0", " ")  # noqa: S704 - what the program made


def parsed(text: str) -> Formula:
    calc = calc_from(SourceFile("calcs/C-1.md", f"# T\n\n```working\nx = {text}\n```\n"))
    assert calc.diagnostics == ()
    (block,) = calc.segments
    assert isinstance(block, WorkingBlock)
    (line,) = block.items
    assert isinstance(line, Derivation)
    return line.formula


@pytest.mark.parametrize(
    ("name", "expected"),
    [
        ("L", "<mi>L</mi>"),
        ("M_c_Rd", "<msub><mi>M</mi><mtext>c,Rd</mtext></msub>"),
        ("EI", "<mi>EI</mi>"),
        ("σ_max", "<msub><mi>σ</mi><mtext>max</mtext></msub>"),
        ("Φ'", "<msup><mi>Φ</mi><mo>′</mo></msup>"),
        (
            "span_1.C_b",
            '<mrow><mtext class="owner">span_1.</mtext><msub><mi>C</mi><mtext>b</mtext></msub></mrow>',
        ),
    ],
)
def test_symbols(name: str, expected: str) -> None:
    assert symbol(name) == expected


@pytest.mark.parametrize(
    ("text", "expected"),
    [
        # products: a thin space between letters, a dot where numbers or words meet
        ("w*s", f"<mi>w</mi>{TIMES}<mi>s</mi>"),
        ("2*L", f"<mn>2</mn>{TIMES}<mi>L</mi>"),
        ("L*2", f"<mi>L</mi>{DOT}<mn>2</mn>"),
        ("2*3", f"<mn>2</mn>{DOT}<mn>3</mn>"),
        ("EI*w", f"<mi>EI</mi>{DOT}<mi>w</mi>"),
        ("3 kN*L", f"<mrow><mn>3</mn>{THIN}<mtext>kN</mtext></mrow>{DOT}<mi>L</mi>"),
        ("w*(a + b)", f"<mi>w</mi>{DOT}{OPEN}<mi>a</mi>{infix('+')}<mi>b</mi>{CLOSE}"),
        # fractions need no parentheses of their own
        ("(a + b)/c", f"<mfrac><mrow><mi>a</mi>{infix('+')}<mi>b</mi></mrow><mrow><mi>c</mi></mrow></mfrac>"),
        ("a/(b*c)", f"<mfrac><mrow><mi>a</mi></mrow><mrow><mi>b</mi>{TIMES}<mi>c</mi></mrow></mfrac>"),
        # differences and signs
        ("a - (b - c)", f"<mi>a</mi>{infix('−')}{OPEN}<mi>b</mi>{infix('−')}<mi>c</mi>{CLOSE}"),
        ("a - b - c", f"<mi>a</mi>{infix('−')}<mi>b</mi>{infix('−')}<mi>c</mi>"),
        ("a + (b + c)", f"<mi>a</mi>{infix('+')}<mi>b</mi>{infix('+')}<mi>c</mi>"),
        ("a*(-b)", f'<mi>a</mi>{DOT}{OPEN}<mrow><mo form="prefix">−</mo><mi>b</mi></mrow>{CLOSE}'),
        ("-x^2", '<mrow><mo form="prefix">−</mo><msup><mi>x</mi><mrow><mn>2</mn></mrow></msup></mrow>'),
        # powers
        ("L^2", "<msup><mi>L</mi><mrow><mn>2</mn></mrow></msup>"),
        ("M_Ed^2", "<msubsup><mi>M</mi><mtext>Ed</mtext><mrow><mn>2</mn></mrow></msubsup>"),
        ("(a + b)^2", f"<msup>{OPEN}<mi>a</mi>{infix('+')}<mi>b</mi>{CLOSE}<mrow><mn>2</mn></mrow></msup>"),
        ("(a/b)^2", f"<msup>{OPEN}<mfrac><mrow><mi>a</mi></mrow><mrow><mi>b</mi></mrow></mfrac>{CLOSE}"
                    "<mrow><mn>2</mn></mrow></msup>"),
        ("x^(1/2)", "<msup><mi>x</mi><mrow><mn>1</mn><mo>/</mo><mn>2</mn></mrow></msup>"),
        # functions
        ("sqrt(x)", "<msqrt><mi>x</mi></msqrt>"),
        ("cbrt(x)", "<mroot><mrow><mi>x</mi></mrow><mn>3</mn></mroot>"),
        ("abs(x)", "<mrow><mo>|</mo><mi>x</mi><mo>|</mo></mrow>"),
        ("asin(x)", f"<mrow><mi>arcsin</mi><mo>&#x2061;</mo>{OPEN}<mi>x</mi>{CLOSE}</mrow>"),
        ("min(a, b)", f"<mrow><mi>min</mi><mo>&#x2061;</mo>{OPEN}<mi>a</mi><mo>,</mo>"
                      f"<mi>b</mi>{CLOSE}</mrow>"),
        # literals as typed
        ("1.5e6 mm^4", f"<mrow><mn>1.5</mn><mo>×</mo><msup><mn>10</mn><mn>6</mn></msup>{THIN}"
                       "<mtext>mm⁴</mtext></mrow>"),
        ("6 ft 3 in", "<mtext>6 ft 3 in</mtext>"),
        ("main.W_el_y", '<mrow><mtext class="owner">main.</mtext><msub><mi>W</mi><mtext>el,y</mtext></msub>'
                        "</mrow>"),
        ("k(\"a<b\")", f"<mrow><mi>k</mi>{OPEN}<mtext>“a&lt;b”</mtext>{CLOSE}</mrow>"),
    ],
)  # fmt: skip
def test_formulas(text: str, expected: str) -> None:
    assert formula(parsed(text)) == expected


def test_cases_stand_behind_a_brace() -> None:
    text = "1.0 when λ <= 0.2 and not λ < 0\n  = 0 otherwise"
    found = formula(parsed(text))
    rows = [text_of(row) for row in found.split("</mtr>")]
    assert rows[:2] == ["{1.0when λ≤0.2 and not (λ<0)", "0otherwise"]


@pytest.mark.parametrize(
    ("shown", "expected"),
    [
        (Shown("33.93", "kN·m"), f"<mrow><mn>33.93</mn>{THIN}<mtext>kN·m</mtext></mrow>"),
        (Shown("1.350"), "<mn>1.350</mn>"),
        (Shown("−0.5"), '<mrow><mo form="prefix">−</mo><mn>0.5</mn></mrow>'),
        (
            Shown("2.100 × 10⁻⁵", "1/K"),
            f"<mrow><mn>2.100</mn><mo>×</mo><msup><mn>10</mn><mn>−5</mn></msup>{THIN}<mtext>1/K</mtext></mrow>",
        ),
        (Shown("S275"), "<mtext>“S275”</mtext>"),
        (Shown("yes"), "<mtext>yes</mtext>"),
        (Shown("<b>"), "<mtext>“&lt;b&gt;”</mtext>"),
    ],
)
def test_quantities(shown: Shown, expected: str) -> None:
    assert quantity(shown) == expected


def test_numbers_put_in_are_multiplied_by_dots_and_powers_of_quantities_in_parentheses() -> None:
    values = {"w": Shown("8.378", "kPa"), "L": Shown("6.000", "m"), "n": Shown("−2")}

    def put_in(name: Name) -> Shown | None:
        return values.get(name.dotted)

    assert formula(parsed("w*L^2"), put_in) == (
        f"<mrow><mn>8.378</mn>{THIN}<mtext>kPa</mtext></mrow>{DOT}<msup>{OPEN}<mrow><mn>6.000</mn>{THIN}"
        f"<mtext>m</mtext></mrow>{CLOSE}<mrow><mn>2</mn></mrow></msup>"
    )
    assert formula(parsed("w - n"), put_in).endswith(
        f'{infix("−")}{OPEN}<mrow><mo form="prefix">−</mo><mn>2</mn></mrow>{CLOSE}'
    )


def test_a_sum_breaks_before_its_signs() -> None:
    assert terms(parsed("a + b - c*d")) == (
        "<mi>a</mi>",
        f"{infix('+')}<mi>b</mi>",
        f"{infix('−')}<mi>c</mi>{TIMES}<mi>d</mi>",
    )
    assert terms(parsed("a*(b + c)")) == (formula(parsed("a*(b + c)")),)
