"""A line of working as an equation, in parts that may stand below each other."""

from __future__ import annotations

import math
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from typing import TypeAlias

from markupsafe import Markup

from calcgen.evaluation.results.common import Operand
from calcgen.evaluation.results.lines import CheckResult, CheckRow, DerivedRow
from calcgen.evaluation.results.table import Lookup
from calcgen.language.nodes import Cases, Expression, Formula, Name, Number, Text, Truth
from calcgen.quantities.display import Shown
from calcgen.site import mathml
from calcgen.site.extent import extent
from calcgen.site.mathml import PutIn, called, formula, quantity, relation, symbol, terms
from calcgen.text import SourceFile

_OPPOSITE = {"<": ">=", "<=": ">", ">": "<=", ">=": "<"}
_Step: TypeAlias = tuple[str, ...]

_EQUALS = '<mo form="infix">=</mo>'
_NOTHING = Markup("")
_NARROW = 33  # characters in the column of a printed sheet
_VERDICT = 14  # characters of the verdict and the utilisation beside a check
_WIDE = 66  # characters in the column of a wide screen


@dataclass(frozen=True)
class Equation:
    """An equation as MathML elements.

    Attributes
    ----------
    left : what stands before the first sign and keeps its place when the steps break; empty for a check.
    steps : as many stand on a line as fit; a step too long for a line breaks between its terms.
    aside : a remark below, such as which case was taken; empty where there is none.
    length : of the longest term, in characters.
    """

    left: Markup
    steps: tuple[tuple[Markup, ...], ...]
    aside: Markup = _NOTHING
    length: int = 0

    @property
    def room(self) -> str:
        """What it needs on a sheet: '' within the column of a printed page, 'broad' more, 'broadest' all."""
        return "" if self.length <= _NARROW else "broad" if self.length <= _WIDE else "broadest"


def derived(row: DerivedRow, source: SourceFile, remarks: Sequence[Markup] = ()) -> Equation:
    """Return a derived value; a step that would only repeat the next one is left out."""
    put_in = put_in_from(row.operands, source)
    node = row.node.formula
    steps: list[_Step] = []
    aside = ""
    taken: Formula = node
    if isinstance(node, Cases) and row.branch is not None:
        branch = node.branches[row.branch]
        taken = branch.value
        steps.append((formula(node),))
        if branch.condition is not None:
            aside = f"<mtext>as&#xA0;</mtext>{formula(branch.condition, put_in)}"
    elif not isinstance(node, Number):
        steps.append(terms(node))
    if not isinstance(taken, Number | Text | Truth):
        steps.append(terms(taken, put_in))
    steps.append((quantity(row.shown),))
    led = [(_EQUALS + step[0], *step[1:]) for step in _without_repeats(steps)]
    return _equation(symbol(row.name), led, aside, remarks)


def stated(name: str, shown: Shown) -> Equation:
    """Return a value that is given: symbol = value."""
    return _equation(symbol(name), [(_EQUALS + quantity(shown),)])


def named(name: str, text: str) -> Equation:
    """Return a block that is known by a name: girder, section IPE 240. It is no value, and has no sign."""
    return Equation(_element(symbol(name)), ((Markup('<span class="which">{}</span>').format(text),),))


def check(row: CheckRow, source: SourceFile, remarks: Sequence[Markup] = ()) -> Equation:
    """Return a check: its statement, its sides with numbers put in, and how they stand to each other."""
    node, result = row.node.comparison, row.result
    steps: list[_Step] = [(formula(node),)]
    if not (_plain(node.left) and _plain(node.right)):
        steps.append((formula(node, put_in_from(row.operands, source)),))
    sides = compared(result.left_shown, result.operator, result.right_shown, satisfied=result.satisfied)
    steps.append((sides,))
    return _equation("", _without_repeats(steps), "", remarks, beside=_VERDICT)


def limit(result: CheckResult) -> Equation:
    """Return the check that a stress makes by its limit: the largest stress against it."""
    sides = compared(result.left_shown, result.operator, result.right_shown, satisfied=result.satisfied)
    return _equation("", [(f"<mtext>largest |σ|:&#xA0;</mtext>{sides}",)], beside=_VERDICT)


def combination(name: str, terms: Sequence[str]) -> Equation:
    """Return a combination of load cases; each term but the first has its sign."""
    first, *others = terms
    return _equation(symbol(name), [(_EQUALS + first, *others)])


def set_expression(
    terms: Sequence[tuple[tuple[str, ...], Sequence[tuple[tuple[str, ...], str]]]],
) -> Equation:
    """Return an expression of a combination set: each term has its factors and one load or alternatives."""

    def product(factors: Sequence[str], last: str) -> str:
        written = (f"<mn>{f}</mn>" if f[0].isdigit() else symbol(f) for f in factors)
        return '<mspace width="0.17em"/>'.join([*written, last])

    shown: list[str] = []
    for factors, parts in terms:
        loads = [product(own, symbol(load)) for own, load in parts]
        either = "<mtext>&#xA0;or&#xA0;</mtext>".join(loads)
        last = f"<mo>(</mo>{either}<mo>)</mo>" if len(loads) > 1 else either
        sign = '<mo form="infix">+</mo>' if shown else ""
        shown.append(sign + product(factors, last))
    return _equation("", [tuple(shown)])


def set_factors(values: Sequence[tuple[str, float]]) -> Equation:
    """Return the factors of a combination set that belong together: ψ_0 = 0.7, ψ_1 = 0.5."""
    written = [f"{symbol(name)}{_EQUALS}<mn>{value:.12g}</mn>" for name, value in values]
    return _equation("", [(text + ("<mo>,</mo>" if text is not written[-1] else ""),) for text in written])


def looked_up(lookup: Lookup) -> Equation:
    """Return a value looked up in a table: k_mod(“class 1”, “medium”) = 0.80."""
    return _equation("", [(f"{called(lookup.table, lookup.arguments)}{_EQUALS}{quantity(lookup.value)}",)])


def _equation(
    left: str, steps: Sequence[_Step], aside: str = "", remarks: Sequence[Markup] = (), *, beside: int = 0
) -> Equation:
    """Return an equation that shares its line with `beside` other characters."""
    lengths = [extent(left), *(extent(term) for step in steps for term in step)]
    return Equation(
        _element(left),
        tuple(tuple(map(_element, step)) for step in steps),
        Markup("; ").join([*([_element(aside)] if aside else []), *remarks]),
        math.ceil(max(lengths)) + beside,
    )


def compared(left: Shown, operator: str, right: Shown, *, satisfied: bool) -> str:
    """Return the MathML of two sides with the relation in which they stand; one unit serves both."""
    sign = operator if satisfied else _OPPOSITE[operator]
    first = Shown(left.number) if left.unit == right.unit else left
    return f"{quantity(first)}{relation(sign)}{quantity(right)}"


def put_in_from(operands: Mapping[str, Operand], source: SourceFile) -> PutIn:
    """Return what stands for each name of a line: operands are kept by the name's text as typed."""

    def put_in(name: Name) -> Shown | None:
        operand = operands.get(source.slice(name.span).strip())
        return operand.shown if operand is not None else None

    return put_in


def _plain(node: Expression) -> bool:
    return isinstance(node, Name | Number)


def _without_repeats(steps: list[_Step]) -> list[_Step]:
    return [step for step, following in zip(steps, [*steps[1:], ()], strict=True) if step != following]


def _element(content: str) -> Markup:
    """Return MathML content as an element; nothing where there is none."""
    return Markup(mathml.math(content, display=True)) if content else _NOTHING  # noqa: S704 - escaped there
