"""Shared by the tests of reading: a statement's text to nodes, nodes to one line of text."""

from __future__ import annotations

from calcgen.language.calc import Calc
from calcgen.language.cursor import Cursor
from calcgen.language.document import calc_from
from calcgen.language.nodes import (
    Binary,
    Call,
    Cases,
    Comparison,
    Condition,
    Formula,
    Logic,
    Name,
    Number,
    Text,
    Truth,
    Unary,
)
from calcgen.language.pieced import Pieced
from calcgen.text import SourceFile, Span

VALID = """\
# Walkway stringer, bay 3

The moment is {M_Ed}, **not {sigma_max}**; `{code}`, $\\{x}$ and \\{ stay.

> a quotation with {stringer.ULS.M_max(2.5 m)}
> over two lines, {L}

| a    | b     |
|------|-------|
| {L}  | {q_k} |

```sheet
originator = A. Mason
purpose    = Confirm the stringer for {q_k}
   on the whole length
```
```assumptions
A1 | Grating gives no lateral restraint | agreed at design review 2
A2 | Trestle settlement is below 5 mm   | to be confirmed: survey S-7
```
```inputs
# comments are not shown
L      = 6.0 m          | span between trestle bearings | [DWG-201 p. 12]
q_k    = 5.0 kPa        | maintenance live load         | [EN1991-1-1 Table 6.2]
grade  = "S275 | J0"    | steel grade
clip   = yes
N [kN] = -40 kN
P      = stringer.ULS.R_1 of W-07 | reaction of the stringer
f_y of DB-01
```
```working
w = 1.35*g_k + 1.5*q_k | design load
M_Ed [kN·m] = w*s
   *L^2/8              | midspan moment | statics
                       | of a simple beam
M_Ed <= M_c_Rd         | bending at midspan | EN 1993-1-1 6.2.5
χ = 1.0                       when λ <= 0.2
  = 1/(Φ + sqrt(Φ^2 - λ^2))   when λ <= 3 and not λ > 4
  = 0                         otherwise
```
```section main
shape = i_shape(h = 240 mm, b = 120 mm, t_w = 6.2 mm, t_f = 9.8 mm) mirrored turned 90 deg at (0 mm, 2 mm)
```
```section lozenge
shape = polygon((0 mm, 0 mm), (50 mm, 80 mm), (0 mm, 160 mm), (-50 mm, 80 mm))
```
```beam stringer
span = 6 m, 8 m, 6 m
section = main
EI = 2*E*I from 2 m to 4 m
support pin at 0 m
support spring 12 kN/mm rotation 5 kN·m lateral at 14 m settles 5 mm in S
hinge at 9 m
case G permanent
load G self_weight 78.5 kN/m³
load G uniform 1.35*g_k*s from 6 m to 14 m
load Q lateral linear 0 kN/m to 4 kN/m from 0 m to 3 m
load Q point 9 kN at 2.5 m | trolley wheel | [LOADS 2.1]
load W moment 4 kN·m at 20 m
combination U1 in ULS = 1.35*G + 1.5*ψ_0*Q - W
combination SLS = G + Q
restrained = yes | grating clipped to the top flange
```
```stress midspan
section = main
M = stringer.ULS.M_max
model = elastic
limit = f_y/γ_M0 | normal stress | EN 1993-1-1 6.2.1
point weld = (0 mm, 120 mm)
```
"""


def read(text: str, path: str = "calcs/W-12.md") -> Calc:
    """Read a calc from its bytes, so that line ends are those of every machine."""
    return calc_from(SourceFile.from_bytes(path, text.encode()))


def found(calc: Calc) -> list[str]:
    """Return the diagnostics of a calc as `line:column code`."""
    return [f"{d.line}:{d.column} {d.code}" for d in calc.diagnostics]


def pieced(text: str) -> Pieced:
    """Return a text as one piece of a file that holds nothing else."""
    return Pieced.join(SourceFile("a.md", text), [Span(0, len(text))])


def cursor(text: str) -> Cursor:
    """Return a cursor over a statement."""
    return Cursor(pieced(text))


def written(node: Formula | Condition) -> str:
    """Return a formula in prefix form: `(+ 1 (* 2 x))`."""
    match node:
        case Number(value=value, unit=unit):
            return f"{value:g}" + (f"[{unit.text}]" if unit else "")
        case Text(value=text):
            return f'"{text}"'
        case Truth(value=truth):
            return "yes" if truth else "no"
        case Name(dotted=dotted, arguments=None):
            return dotted
        case Name(dotted=dotted, arguments=arguments) if arguments is not None:
            return f"{dotted}({' '.join(map(written, arguments))})"
        case Call(function=function, arguments=arguments):
            return f"({function} {' '.join(map(written, arguments))})"
        case Unary(operator=operator, operand=operand):
            return f"({operator} {written(operand)})"
        case Binary() | Comparison():
            return f"({node.operator} {written(node.left)} {written(node.right)})"
        case Logic(operator=operator, operands=operands):
            return f"({operator} {' '.join(map(written, operands))})"
        case Cases(branches=branches):
            shown = (
                f"{written(b.value)} if {written(b.condition) if b.condition else 'else'}" for b in branches
            )
            return f"[{'; '.join(shown)}]"
    raise AssertionError(node)
