"""`beam NAME`: spans, supports, loads, cases and combinations."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal, TypeAlias

from calcgen.language.nodes import Annotations, Expression, Named
from calcgen.text import Span

Plane: TypeAlias = Literal["both", "vertical", "lateral"]
InfluenceSymbol: TypeAlias = Literal["M", "V", "w", "slope", "R", "M_R", "θ"]


@dataclass(frozen=True)
class SpanLine:
    """`span = 6 m, 8 m, 6 m`."""

    lengths: tuple[Expression, ...]
    annotations: Annotations
    span: Span


@dataclass(frozen=True)
class BeamSetting:
    """`E = 210 GPa`, `section = main`, `EI = ...`; a stretch of it with `start` and `end`.

    Keys: section, E, G, EI, GA_s, restrained, shear_deformation, expansion, and the factors
    of combination sets: γ_G, γ_G_inf, γ_Q, ξ.
    """

    key: Named
    value: Expression
    start: Expression | None
    end: Expression | None
    annotations: Annotations
    span: Span
    statement_span: Span


@dataclass(frozen=True)
class SupportLine:
    """`support spring 12 kN/mm rotation 5 kN·m lateral at 14 m settles 5 mm in S`.

    `rotation` is the stiffness of a rotational spring, at any support but a fixed one. `plane` is 'both', or
    'lateral' where that word is written. Supports are numbered from the left, from 1.
    """

    kind: Literal["pin", "roller", "fixed", "spring"]
    stiffness: Expression | None
    rotation: Expression | None
    plane: Plane
    at: Expression
    settles: Expression | None
    settles_case: Named | None
    annotations: Annotations
    span: Span


@dataclass(frozen=True)
class HingeLine:
    """`hinge at 9 m`."""

    at: Expression
    annotations: Annotations
    span: Span


@dataclass(frozen=True)
class CaseLine:
    """`case G permanent`; the kind is a word: permanent, imposed, snow, wind, ...

    For combination sets it may have more: `case Q imposed category B`, or ψ_0, ψ_1 and ψ_2 and a partial
    factor of its own, `case T traffic ψ 1.0, 0.9, 0.5 γ 1.35`. `psi` has three values or none.
    """

    target: Named
    kind: Named | None
    annotations: Annotations
    span: Span
    category: Named | None = None
    psi: tuple[Expression, ...] = ()
    gamma: Expression | None = None


@dataclass(frozen=True)
class LoadLine:
    """`load Q lateral linear 0 kN/m to 4 kN/m from 0 m to 3 m`.

    kind 'uniform': values has one; 'linear': two; 'point' and 'moment': one, with `at`, or with
    `start` and `end` for a distributed moment; 'self_weight': one value (weight by volume); 'gradient': one,
    the temperature at the top less that at the bottom.
    """

    case: Named
    kind: Literal["uniform", "linear", "point", "moment", "self_weight", "gradient"]
    plane: Plane
    values: tuple[Expression, ...]
    at: Expression | None
    start: Expression | None
    end: Expression | None
    annotations: Annotations
    span: Span
    statement_span: Span


@dataclass(frozen=True)
class TrainLine:
    """`load T train 80 kN, 80 kN, 40 kN spaced 1.2 m, 3.6 m lateral 0.1`.

    The axle loads from the first axle to the last, the distances between them, one less, and the part of each
    axle load that acts sideways; None where none is written.
    """

    case: Named
    axles: tuple[Expression, ...]
    spacings: tuple[Expression, ...]
    lateral: Expression | None
    annotations: Annotations
    span: Span
    statement_span: Span


@dataclass(frozen=True)
class PatternLine:
    """`pattern Q`: the case acts on those spans alone where it is adverse."""

    case: Named
    annotations: Annotations
    span: Span


@dataclass(frozen=True)
class Term:
    """One term of a combination: `1.35*G`; `factor` is None for 1. `sign` is +1 or -1."""

    sign: int
    factor: Expression | None
    case: Named
    span: Span


@dataclass(frozen=True)
class CombinationLine:
    """`combination U1 in ULS = 1.35*G + 1.5*Q`; `group` is None where none is written."""

    target: Named
    group: Named | None
    terms: tuple[Term, ...]
    annotations: Annotations
    span: Span


@dataclass(frozen=True)
class InfluenceLine:
    """`influence η_1 = M at 7 m`, `= V left of 6 m`, `= R_2_lat`, `= w_lat at 3 m under vertical`.

    `symbol` is M, V, w or slope, with a place, or R, M_R or θ, with the `number` of a support. `side` is
    written where a quantity has two values at its place. `under` is the plane of the unit load, None where it
    is that of the result.
    """

    target: Named
    symbol: InfluenceSymbol
    number: int | None
    lateral: bool
    result_span: Span
    at: Expression | None
    side: Literal["left", "right"] | None
    under: Literal["vertical", "lateral"] | None
    annotations: Annotations
    span: Span


@dataclass(frozen=True)
class SetLine:
    """`combinations ULS = "EN 1990 6.10"`: the group and the standard set that fills it."""

    target: Named
    standard: Named
    annotations: Annotations
    span: Span


BeamLine: TypeAlias = (
    SpanLine
    | BeamSetting
    | SupportLine
    | HingeLine
    | CaseLine
    | LoadLine
    | TrainLine
    | PatternLine
    | CombinationLine
    | SetLine
    | InfluenceLine
)


@dataclass(frozen=True)
class BeamBlock:
    """A beam: its lines in the order typed."""

    target: Named
    lines: tuple[BeamLine, ...]
    span: Span
    head_span: Span
