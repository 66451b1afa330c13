"""The names of a formula and what was put in for them."""

from __future__ import annotations

from dataclasses import replace

from calcgen.evaluation.formulas import Evaluator, shown
from calcgen.evaluation.results.common import Operand
from calcgen.evaluation.scope import Scope
from calcgen.language.nodes import Binary, Call, Cases, Comparison, Condition, Formula, Logic, Name, Unary
from calcgen.text import Report


def names_in(node: Formula | Condition) -> tuple[Name, ...]:
    """Return the names of a formula in the order written, those in arguments after their owner."""
    match node:
        case Name():
            inner = (n for a in node.arguments or () for n in names_in(a))
            return (node, *inner)
        case Unary():
            return names_in(node.operand)
        case Binary() | Comparison():
            return names_in(node.left) + names_in(node.right)
        case Call():
            return tuple(n for a in node.arguments for n in names_in(a))
        case Logic():
            return tuple(n for o in node.operands for n in names_in(o))
        case Cases():
            found: tuple[Name, ...] = ()
            for branch in node.branches:
                found += names_in(branch.value)
                found += names_in(branch.condition) if branch.condition is not None else ()
            return found
        case _:
            return ()


def operands_of(node: Formula | Condition, scope: Scope) -> dict[str, Operand]:
    """Return what stands for each name of a formula, by the name's text as typed.

    Read after the formula was evaluated without a fault; names without a value are left out.
    """
    silent = Report(scope.report.source)
    reader = Evaluator(replace(scope, report=silent), quiet=True)
    operands: dict[str, Operand] = {}
    for name in names_in(node):
        value = reader.value(name)
        if value is not None:
            text = scope.report.source.slice(name.span).strip()
            operands[text] = Operand(name.dotted, shown(value, scope))
    return operands
