"""Formulas, symbols and quantities -> MathML.

Single letters are italic, longer words and subscripts upright. A product of single letters is set with thin
spaces, one with numbers or words with a dot.
"""

from __future__ import annotations

import re
from collections.abc import Callable, Sequence
from dataclasses import dataclass
from enum import IntEnum
from html import escape
from typing import Literal, TypeAlias

from calcgen.language.nodes import (
    Binary,
    Call,
    Cases,
    Comparison,
    Condition,
    Expression,
    Formula,
    Logic,
    Name,
    Number,
    Text,
    Truth,
    Unary,
)
from calcgen.quantities.display import Shown
from calcgen.quantities.measure import pretty
from calcgen.quantities.symbols import symbol as symbol_of

PutIn: TypeAlias = Callable[[Name], Shown | None]
"""What stands for a name where numbers are put in; None leaves its symbol."""

RELATIONS = {"<": "&lt;", "<=": "≤", ">": "&gt;", ">=": "≥", "==": "=", "!=": "≠"}

_THIN = '<mspace width="0.17em"/>'
_TIMES = f"<mo>&#x2062;</mo>{_THIN}"  # invisible times, read aloud as a product
_DOT = "<mo>·</mo>"
_FUNCTIONS = {"asin": "arcsin", "acos": "arccos", "atan": "arctan", "atan2": "arctan2", "log10": "log"}
_SCIENTIFIC = re.compile(r"([0-9.]+) × 10([⁰¹²³⁴⁵⁶⁷⁸⁹⁻]+)")
_DIGITS = re.compile(r"[0-9][0-9.]*")
_TYPED_POWER = re.compile(r"([0-9.]+)[eE]([-+]?)0*([0-9]+)")
_RAISED = str.maketrans("⁰¹²³⁴⁵⁶⁷⁸⁹⁻", "0123456789−")

Edge: TypeAlias = Literal["letter", "word", "number", "quantity", "fence", "fraction"]


class Level(IntEnum):
    """How tightly a piece holds together; a looser one is put in parentheses where that matters."""

    SUM = 1
    SIGN = 2
    PRODUCT = 3
    QUANTITY = 4
    ATOM = 5


@dataclass(frozen=True)
class Piece:
    """A piece of a formula: its MathML, how tightly it holds, and what stands at its two ends.

    `scripts` is base and subscript of a symbol, so that a power can be set above the subscript.
    """

    mathml: str
    level: Level = Level.ATOM
    first: Edge = "letter"
    last: Edge = "letter"
    scripts: tuple[str, str] | None = None


def symbol(name: str) -> str:
    """Return the MathML of a name: `M_c_Rd` is M with the subscript c,Rd, `span_1.C_b` C_b of span_1."""
    return _dotted(tuple(name.split("."))).mathml


def quantity(shown: Shown) -> str:
    """Return the MathML of a value with its unit; a text is set in quotes."""
    return _quantity(shown).mathml


def formula(node: Formula | Condition, put_in: PutIn | None = None) -> str:
    """Return the MathML of a formula, in symbols or with numbers and units put in."""
    return _Setter(put_in).set(node).mathml


def terms(node: Formula, put_in: PutIn | None = None) -> tuple[str, ...]:
    """Return the MathML of a sum term by term, each but the first with its sign; of all else in one piece."""
    if not (isinstance(node, Binary) and node.operator in ("+", "-")):
        return (formula(node, put_in),)
    setter = _Setter(put_in)
    return (*terms(node.left, put_in), setter.signed(node))


def math(content: str, *, display: bool = False) -> str:
    """Return MathML content as an element of a page."""
    style = ' displaystyle="true"' if display else ""
    return f"<math{style}>{content}</math>"


def relation(operator: str) -> str:
    """Return the MathML of a relation: `<=` is ≤."""
    return f'<mo form="infix">{RELATIONS[operator]}</mo>'


def called(name: str, arguments: Sequence[Shown]) -> str:
    """Return the MathML of a table looked up with values: k_mod(“class 1”, “medium”)."""
    inside = "<mo>,</mo>".join(_quantity(a).mathml for a in arguments)
    return _dotted((name,), f"<mrow><mo>(</mo>{inside}<mo>)</mo></mrow>").mathml


def _symbol(name: str) -> Piece:
    parts = symbol_of(name)
    letters = parts.base.rstrip("'")
    primes = "′" * (len(parts.base) - len(letters))
    single = len(letters) == 1
    edge: Edge = "letter" if single else "word"
    base = f"<mi>{escape(letters)}</mi>"
    if primes and not parts.subscripts:
        return Piece(f"<msup>{base}<mo>{primes}</mo></msup>", Level.QUANTITY, edge, edge)
    if not parts.subscripts:
        return Piece(base, first=edge, last=edge)
    below = f"<mtext>{escape(parts.subscript)}</mtext>"
    if primes:
        raised = f"<msubsup>{base}{below}<mo>{primes}</mo></msubsup>"
        return Piece(raised, Level.QUANTITY, edge, edge)
    return Piece(f"<msub>{base}{below}</msub>", first=edge, last=edge, scripts=(base, below))


def _dotted(parts: tuple[str, ...], arguments: str = "") -> Piece:
    """Return a dotted name; its owners stand small before the symbol."""
    own = _symbol(parts[-1])
    if len(parts) == 1 and not arguments:
        return own
    owner = "".join(f"{escape(p)}." for p in parts[:-1])
    owned = f'<mtext class="owner">{owner}</mtext>' if owner else ""
    return Piece(f"<mrow>{owned}{own.mathml}{arguments}</mrow>", first="word", last="word")


def _quantity(shown: Shown) -> Piece:
    """Return a value: number, thin space, unit; a number of a million or more with its power of ten."""
    number = shown.number.removeprefix("−")
    scientific = _SCIENTIFIC.fullmatch(number)
    if scientific:
        setting = _power_of_ten(scientific[1], scientific[2].translate(_RAISED))
    elif _DIGITS.fullmatch(number) or number == "not finite":
        setting = f"<mn>{number}</mn>"
    elif shown.number in ("yes", "no"):
        return Piece(f"<mtext>{shown.number}</mtext>", first="word", last="word")
    else:
        return Piece(f"<mtext>“{escape(shown.number)}”</mtext>", first="word", last="word")
    return _with_unit(setting, shown.unit, negative=number != shown.number, several=scientific is not None)


def _with_unit(number: str, unit: str, *, negative: bool = False, several: bool = False) -> Piece:
    gap = "" if unit == "°" else _THIN
    setting = f"{number}{gap}<mtext>{escape(unit)}</mtext>" if unit else number
    if negative:
        return Piece(f'<mrow><mo form="prefix">−</mo>{setting}</mrow>', Level.SIGN, "number", "quantity")
    if unit or several:
        return Piece(f"<mrow>{setting}</mrow>", Level.QUANTITY, "number", "quantity")
    return Piece(number, Level.ATOM, "number", "number")


def _power_of_ten(digits: str, power: str) -> str:
    return f"<mn>{digits}</mn><mo>×</mo><msup><mn>10</mn><mn>{power}</mn></msup>"


def _literal(node: Number) -> Piece:
    """Return a literal as typed, its unit in the program's own form."""
    unit = node.unit.text if node.unit is not None else ""
    typed = node.text.removesuffix(unit).rstrip() if unit else node.text
    power = _TYPED_POWER.fullmatch(typed)
    if power:
        sign = "−" if power[2] == "-" else ""
        return _with_unit(_power_of_ten(power[1], sign + power[3]), pretty(unit), several=True)
    if not typed.replace(".", "").isdigit():  # 6 ft 3 in, 3/8 in
        return Piece(f"<mtext>{escape(node.text)}</mtext>", Level.QUANTITY, "number", "quantity")
    return _with_unit(f"<mn>{typed}</mn>", pretty(unit))


def _fenced(piece: Piece, opening: str = "(", closing: str = ")") -> Piece:
    inside = f"<mrow><mo>{opening}</mo>{piece.mathml}<mo>{closing}</mo></mrow>"
    return Piece(inside, first="fence", last="fence")


def _glue(left: Piece, right: Piece) -> str:
    """Return what stands between two factors: a thin space where each is plain to see, a dot elsewhere."""
    dot = (
        right.first in ("number", "word", "quantity")
        or left.last in ("word", "quantity")
        or (right.first == "fence" and left.last == "letter")
    )
    return _DOT if dot else _TIMES


@dataclass(frozen=True)
class _Setter:
    """Sets a formula; `put_in` gives the numbers, None keeps the symbols."""

    put_in: PutIn | None

    def set(self, node: Formula | Condition) -> Piece:
        match node:
            case Number():
                return _literal(node)
            case Text(value=text):
                return Piece(f"<mtext>“{escape(text)}”</mtext>", first="word", last="word")
            case Truth(value=truth):
                return Piece(f"<mtext>{'yes' if truth else 'no'}</mtext>", first="word", last="word")
            case Name():
                return self._name(node)
            case Unary():
                return self._unary(node)
            case Binary():
                return self._binary(node)
            case Call():
                return self._call(node)
            case Comparison():
                left, right = self.set(node.left), self.set(node.right)
                return Piece(f"{left.mathml}{relation(node.operator)}{right.mathml}", Level.SUM)
            case Logic():
                return self._logic(node)
            case Cases():
                return self._cases(node)

    def _name(self, node: Name) -> Piece:
        shown = self.put_in(node) if self.put_in is not None else None
        if shown is not None:
            return _quantity(shown)
        return _dotted(node.parts, "" if node.arguments is None else self._arguments(node.arguments))

    def _arguments(self, nodes: tuple[Expression, ...]) -> str:
        inside = "<mo>,</mo>".join(self.set(n).mathml for n in nodes)
        return f"<mrow><mo>(</mo>{inside}<mo>)</mo></mrow>"

    def _unary(self, node: Unary) -> Piece:
        operand = self.set(node.operand)
        if operand.level <= Level.SIGN:
            operand = _fenced(operand)
        sign = "−" if node.operator == "-" else "+"
        return Piece(
            f'<mrow><mo form="prefix">{sign}</mo>{operand.mathml}</mrow>', Level.SIGN, "number", operand.last
        )

    def _binary(self, node: Binary) -> Piece:
        match node.operator:
            case "+" | "-":
                return self._sum(node)
            case "*":
                return self._product(node)
            case "/":
                above, below = self.set(node.left).mathml, self.set(node.right).mathml
                fraction = f"<mfrac><mrow>{above}</mrow><mrow>{below}</mrow></mfrac>"
                return Piece(fraction, Level.QUANTITY, "fraction", "fraction")
            case _:
                return self._power(node)

    def _sum(self, node: Binary) -> Piece:
        left, right = self.set(node.left), self.signed(node)
        return Piece(f"{left.mathml}{right}", Level.SUM, left.first)

    def signed(self, node: Binary) -> str:
        """Return the second operand of a sum or difference, with its sign before it."""
        right = self.set(node.right)
        if right.level == Level.SIGN or (right.level == Level.SUM and node.operator == "-"):
            right = _fenced(right)
        sign = "−" if node.operator == "-" else "+"
        return f'<mo form="infix">{sign}</mo>{right.mathml}'

    def _product(self, node: Binary) -> Piece:
        left, right = self.set(node.left), self.set(node.right)
        if left.level == Level.SUM:
            left = _fenced(left)
        if right.level <= Level.SIGN:
            right = _fenced(right)
        glue = _DOT if self.put_in is not None else _glue(left, right)
        return Piece(f"{left.mathml}{glue}{right.mathml}", Level.PRODUCT, left.first, right.last)

    def _power(self, node: Binary) -> Piece:
        base = self.set(node.left)
        exponent = self._exponent(node.right)
        if base.scripts is not None:
            letter, below = base.scripts
            setting = f"<msubsup>{letter}{below}{exponent}</msubsup>"
        else:
            base = base if base.level == Level.ATOM else _fenced(base)
            setting = f"<msup>{base.mathml}{exponent}</msup>"
        return Piece(setting, Level.QUANTITY, base.first, base.last)

    def _exponent(self, node: Expression) -> str:
        """Return an exponent; a fraction in it lies on its side, so that it stays legible."""
        if isinstance(node, Binary) and node.operator == "/":
            sides = [self.set(node.left), self.set(node.right)]
            above, below = (s if s.level >= Level.QUANTITY else _fenced(s) for s in sides)
            return f"<mrow>{above.mathml}<mo>/</mo>{below.mathml}</mrow>"
        return f"<mrow>{self.set(node).mathml}</mrow>"

    def _call(self, node: Call) -> Piece:
        inner = self.set(node.arguments[0])
        match node.function:
            case "sqrt":
                return Piece(f"<msqrt>{inner.mathml}</msqrt>")
            case "cbrt":
                return Piece(f"<mroot><mrow>{inner.mathml}</mrow><mn>3</mn></mroot>")
            case "abs":
                return _fenced(inner, "|", "|")
            case word:
                name = f"<mi>{_FUNCTIONS.get(word, word)}</mi>"
                if word == "log10":
                    name = f"<msub>{name}<mn>10</mn></msub>"
                applied = f"<mrow>{name}<mo>&#x2061;</mo>{self._arguments(node.arguments)}</mrow>"
                return Piece(applied, Level.QUANTITY, "word", "fence")

    def _logic(self, node: Logic) -> Piece:
        if node.operator == "not":
            inside = _fenced(self.set(node.operands[0])).mathml
            return Piece(f"<mtext>not&#xA0;</mtext>{inside}", Level.SUM)
        pieces = (self.set(operand) for operand in node.operands)
        joined = [
            _fenced(piece).mathml if isinstance(o, Logic) and o.operator != "not" else piece.mathml
            for o, piece in zip(node.operands, pieces, strict=True)
        ]
        return Piece(f"<mtext>&#xA0;{node.operator}&#xA0;</mtext>".join(joined), Level.SUM)

    def _cases(self, node: Cases) -> Piece:
        rows = []
        for branch in node.branches:
            when = "<mtext>otherwise</mtext>"
            if branch.condition is not None:
                when = f"<mtext>when&#xA0;</mtext>{self.set(branch.condition).mathml}"
            rows.append(f"<mtr><mtd>{self.set(branch.value).mathml}</mtd><mtd>{when}</mtd></mtr>")
        table = f'<mtable class="cases">{"".join(rows)}</mtable>'
        return Piece(f'<mrow><mo fence="true" form="prefix">{{</mo>{table}</mrow>', Level.SUM)
