"""The combination sets of a beam block: its cases and factors -> generated combinations."""

from __future__ import annotations

from collections.abc import Collection, Iterator, Mapping
from dataclasses import dataclass, replace
from typing import Literal, TypeAlias

from calcgen.evaluation.blocks.beam_lines import Lines
from calcgen.evaluation.combination_sets.generate import (
    LIMIT,
    ONE_AT_A_TIME,
    Case,
    TooMany,
    by_action,
    generate,
    load_of,
    needed,
)
from calcgen.evaluation.combination_sets.standard import (
    Psi,
    StandardSet,
    psi_factors,
    recommended,
    standard_sets,
)
from calcgen.evaluation.results.beam import FactorRow, SetCombination, SetResult
from calcgen.language.blocks.beam import (
    BeamSetting,
    CaseLine,
    CombinationLine,
    LoadLine,
    SetLine,
    SupportLine,
    TrainLine,
)
from calcgen.language.nodes import Expression
from calcgen.quantities.symbols import plain
from calcgen.text import Span, nearest

_OWN = frozenset({"γ_G", "γ_Q", "γ_SET"})  # what a partial factor of a case's own stands for
_WITHOUT_PSI = frozenset({"permanent", "settlement", "accidental", "seismic"})

Acts: TypeAlias = Literal["load", "train", "settlement"]
"""What acts in a case, as far as it tells the kind that is likely to be meant."""


@dataclass(frozen=True)
class _Factored:
    """A case with what its line gives for sets: a category of EN 1990, ψ or a partial factor of its own."""

    case: Case
    line: CaseLine | None
    row: Psi | None = None


@dataclass(frozen=True)
class BeamSets:
    """The sets of a beam by their lines, and the factors that they take."""

    by_line: Mapping[Span, SetResult]
    factors: tuple[FactorRow, ...]

    @property
    def results(self) -> tuple[SetResult, ...]:
        """The sets in the order written."""
        return tuple(self.by_line.values())


def sets_of(
    lines: Lines,
    kinds: Mapping[str, str],
    cases: Collection[str],
    varying: Collection[str],
    settings: Mapping[str, BeamSetting],
) -> BeamSets:
    """Return the generated sets of a block; report what they lack, and factors that none of them takes.

    `varying` are the cases that may act nowhere: in patterns, or of trains alone.
    """
    given = _given(lines, settings)
    partial = {key: given.get(key, row.value) for key, row in recommended().items()}
    declared = {line.target.name: line for line in lines.of(CaseLine)}
    named = [n for n in cases if n]  # a settlement without a case is told with the combinations
    factored = [_factored(lines, n, kinds.get(n, ""), declared.get(n), n in varying) for n in named]
    told: set[tuple[str, str]] = set()
    found: dict[Span, SetResult] = {}
    needs: dict[str, frozenset[str]] = {}
    for line in lines.of(SetLine):
        chosen = standard_sets().get(line.standard.name)
        if chosen is None:
            close = nearest(line.standard.name, standard_sets())
            lines.fault(
                "unknown-word",
                line.standard.span,
                f"there is no combination set '{line.standard.name}'",
                hint=(f"the nearest is '{close}'; " if close else "")
                + f"possible are {', '.join(standard_sets())}",
            )
            continue
        members, left_out = _members(lines, chosen, factored, told)
        for name, symbols in needed(chosen, members).items():
            needs[name] = needs.get(name, frozenset()) | symbols | {chosen.standard}
        result = None if lines.failed else _generated(lines, line, chosen, members, partial)
        if result is not None:
            found[line.span] = replace(result, remarks=(*result.remarks, *left_out))
    if not lines.failed:
        _warn_of_unused(lines, factored, needs, settings)
    return BeamSets(found, tuple(_in_force(lines, factored, needs, given, settings)))


def _given(lines: Lines, settings: Mapping[str, BeamSetting]) -> dict[str, float]:
    """Return the factors written as settings of the block."""
    found: dict[str, float] = {}
    for key in recommended():
        line = settings.get(key)
        if line is not None:
            found[key] = lines.number(line.value, "number")
            if found[key] <= 0.0:
                lines.fault("not-positive", line.value.span, f"'{key}' must be positive")
    for key, most, why in (
        ("ξ", 1.0, "ξ reduces an action, so it is 1 at most"),
        ("γ_G_inf", found.get("γ_G", recommended()["γ_G"].value), "γ_G_inf is γ_G at most"),
    ):
        if found.get(key, most) > most:
            lines.fault("combination-factor", settings[key].value.span, why)
    return found


def _factored(lines: Lines, name: str, kind: str, line: CaseLine | None, varies: bool) -> _Factored:  # noqa: FBT001
    """Return a case as sets see it; an imposed load of category H is one on a roof."""
    row = _row(lines, kind, line)
    action = "roof" if row is not None and row.category == "H" else kind
    psi = row.values if row is not None else None
    own = None
    if line is not None and line.psi:
        psi = _psi(lines, kind, line)
    if line is not None and line.gamma is not None:
        own = lines.number(line.gamma, "number")
        if kind in ("accidental", "seismic"):
            lines.fault(
                "combination-factor",
                line.gamma.span,
                f"an action of the kind {kind} has its design value",
                hint="leave γ out",
            )
        elif own <= 0.0:
            lines.fault("not-positive", line.gamma.span, "γ must be positive")
    return _Factored(Case(name, action, kind in ONE_AT_A_TIME, varies, psi, own), line, row)


def _row(lines: Lines, kind: str, line: CaseLine | None) -> Psi | None:
    """Return the row of ψ factors of a case, None where there is none without more being written.

    A category that the kind does not have is reported, and None returned.
    """
    rows = {row.category: row for row in psi_factors() if row.kind == kind}
    if line is None or line.category is None:
        return rows.get("") if line is None or not line.psi else None
    category, span = line.category.name, line.category.span
    known = [c for c in rows if c]
    if category in known:
        return rows[category]
    if not known:
        needs_psi = kind and not rows and kind not in _WITHOUT_PSI
        hint = f"write case {line.target.name} {kind} ψ ..., ..., ..." if needs_psi else "leave it out"
        lines.fault("combination-factor", span, f"the kind '{kind}' has no categories", hint=hint)
        return None
    close = nearest(category, known)
    lines.fault(
        "unknown-word",
        span,
        f"'{category}' is no category of the kind {kind}",
        hint=(f"the nearest is '{close}'; " if close else "") + f"possible are {', '.join(known)}",
    )
    return None


def _psi(lines: Lines, kind: str, line: CaseLine) -> tuple[float, float, float]:
    """Return ψ_0, ψ_1 and ψ_2 as written: 1 at most each, and ψ_2 at most ψ_1 (EN 1990 1.5.3.16 to 18)."""
    psi = [lines.number(node, "number") for node in line.psi]
    if kind in _WITHOUT_PSI:
        span = line.psi[0].span
        lines.fault("combination-factor", span, f"ψ is for variable actions, not for the kind {kind}")
    for node, value in zip(line.psi, psi, strict=True):
        if not 0.0 <= value <= 1.0 and not lines.failed:
            lines.fault("combination-factor", node.span, "ψ lies between 0 and 1")
    first, second, third = psi
    if third > second:
        lines.fault(
            "combination-factor",
            line.psi[2].span,
            "ψ_2 is larger than ψ_1",
            hint="the order is ψ_0, ψ_1, ψ_2",
        )
    return first, second, third


def _members(
    lines: Lines, chosen: StandardSet, factored: list[_Factored], told: set[tuple[str, str]]
) -> tuple[tuple[Case, ...], tuple[str, ...]]:
    """Return the cases that a set can take, and remarks on those that written combinations take instead.

    `told` are the cases with what they lack that another set has reported: one mistake is told once.
    """
    written = {term.case.name for line in lines.of(CombinationLine) for term in line.terms}
    trains = {line.case.name for line in lines.of(TrainLine)}
    settling = {line.settles_case.name for line in lines.of(SupportLine) if line.settles_case is not None}

    def fault(case: str, what: str, message: str, hint: str) -> None:
        lines.failed = True
        if (case, what) not in told:
            told.add((case, what))
            lines.fault("set-incomplete", _span(lines, case), message, hint=hint)

    members: list[Case] = []
    left_out: list[str] = []
    for each in factored:
        case = each.case
        acts: Acts = "train" if case.name in trains else "settlement" if case.name in settling else "load"
        lack, hint = _lack(chosen, each, acts)
        if not lack:
            members.append(case)
        elif case.name in written:
            left_out.append(f"{plain(case.name)} is left out: {lack}; written combinations take it")
        else:
            fault(case.name, lack, f"'{chosen.name}': {lack}", hint)
    misnamed = {e.case.name for e in factored if e.line and e.line.category and e.row is None}  # reported
    needs = needed(chosen, members)
    for case in members:
        psi = sorted(symbol for symbol in needs.get(case.name, ()) if symbol.startswith("ψ"))
        if psi and case.psi is None and case.name not in misnamed:
            message = f"'{chosen.name}' needs {' and '.join(psi)} of the case '{case.name}'"
            fault(case.name, "ψ", message, _category_hint(case))
    return tuple(members), tuple(left_out)


def _lack(chosen: StandardSet, each: _Factored, acts: Acts) -> tuple[str, str]:
    """Return why a set cannot take a case, and what to write instead; '' where it can."""
    case = each.case
    own = f"write its combinations yourself: combination U1 = ... + 1.0*{case.name}"
    if not case.action:
        kind = {"train": "traffic ψ ..., ..., ...", "settlement": "settlement"}.get(acts, "permanent")
        meant = f"write case {case.name} {kind}{', or another kind' if acts == 'load' else ''}; or {own}"
        known_here = load_of(kind.split()[0], chosen.standard) is not None
        return f"the case '{case.name}' has no kind", meant if known_here else own
    if load_of(case.action, chosen.standard) is None:
        return f"it has no factor for the kind {case.action}", own
    known = {row.kind for row in psi_factors()} | _WITHOUT_PSI
    misnamed = each.line is not None and each.line.category is not None  # reported with the category
    if chosen.standard == "EN" and case.psi is None and case.action not in known and not misnamed:
        return (
            f"EN 1990 has no ψ for the kind {case.action} in buildings",
            f"write case {case.name} {case.action} ψ ..., ..., ...; or {own}",
        )
    return "", ""


def _category_hint(case: Case) -> str:
    head = f"write case {case.name} {case.action}"
    if case.action == "snow":
        return f"{head} category low (up to 1000 m) or high; or {head} ψ 0.5, 0.2, 0"
    return f"{head} category B, of A to H in EN 1990 Table A1.1; or {head} ψ 0.7, 0.5, 0.3"


def _generated(
    lines: Lines, line: SetLine, chosen: StandardSet, members: tuple[Case, ...], partial: Mapping[str, float]
) -> SetResult | None:
    try:
        found = generate(chosen, members, partial)
    except TooMany:
        lines.fault(
            "set-too-large",
            line.standard.span,
            f"'{chosen.name}' has more than {LIMIT} combinations here",
            hint="join imposed cases that always act together, put them in a pattern, or write combinations",
        )
        return None
    if not found:
        lacking = [kind for kind in ("accidental", "seismic") if chosen.name.endswith(kind)]
        lines.fault(
            "set-incomplete",
            line.standard.span,
            f"'{chosen.name}' needs a case of the kind {lacking[0]}"
            if lacking
            else f"no load case makes a combination of '{chosen.name}'",
            hint=f"write case A {lacking[0]}" if lacking else "declare load cases with their kinds",
        )
        return None
    group = line.target.name
    symbols: dict[str, tuple[str, ...]] = {}
    for action, cases in by_action(members, chosen.standard).items():
        symbol = load_of(action, chosen.standard) or ""
        symbols[symbol] = (*symbols.get(symbol, ()), *(case.name for case in cases))
    return SetResult(
        group,
        chosen.name,
        symbols,
        chosen.expressions,
        tuple(
            SetCombination(f"{group}_{n}", each.factors, each.expression, each.leading)
            for n, each in enumerate(found, start=1)
        ),
        tuple(_remarks(chosen, members)),
        lines.report.source.line_number(line.span),
    )


def _remarks(chosen: StandardSet, members: tuple[Case, ...]) -> Iterator[str]:
    """Say how the cases of a set act together, as far as the factors do not show it."""
    for action, cases in by_action(members, chosen.standard).items():
        names = [plain(case.name) for case in cases]
        alternatives = [plain(case.name) for case in cases if case.alternative]
        if action == "permanent" and len(cases) > 1:
            yield f"{_listed(names, 'and')} act together, with one sense"
        if len(alternatives) > 1:
            yield f"{_listed(alternatives, 'or')}: never two at a time"
    actions = {case.action for case in members}
    if chosen.standard == "EN" and "roof" in actions and actions & {"snow", "wind"}:
        yield "imposed loads of roofs do not act with snow or wind (EN 1991-1-1 3.3.2(1))"
    varying = [plain(case.name) for case in members if case.varies]
    if varying:
        verb = "acts" if len(varying) == 1 else "act"
        yield f"{_listed(varying, 'and')} {verb} where adverse, so no combination without is needed"


def _listed(names: list[str], word: str) -> str:
    return f"{', '.join(names[:-1])} {word} {names[-1]}" if len(names) > 1 else names[0]


def _span(lines: Lines, case: str) -> Span:
    """Return the place where a case is first named."""
    named = [line.target for line in lines.of(CaseLine)]
    named += [line.case for line in lines.of(LoadLine)] + [line.case for line in lines.of(TrainLine)]
    named += [s.settles_case for s in lines.of(SupportLine) if s.settles_case is not None]
    return next((n.span for n in named if n.name == case), lines.block.head_span)


def _taken(each: _Factored, needs: Mapping[str, frozenset[str]]) -> frozenset[str]:
    """Return the symbols that sets take for a case, without those that its own factor stands for."""
    symbols = needs.get(each.case.name, frozenset())
    return symbols - _OWN if each.case.own is not None else symbols


def _warn_of_unused(
    lines: Lines,
    factored: list[_Factored],
    needs: Mapping[str, frozenset[str]],
    settings: Mapping[str, BeamSetting],
) -> None:
    taken = frozenset[str]().union(*(_taken(each, needs) for each in factored))

    def warn(what: str, node: Expression | Span) -> None:
        span = node if isinstance(node, Span) else node.span
        lines.report.warning(
            "factor-unused",
            span,
            f"no combination set of the beam takes {what}",
            hint="combinations that are written have their own factors",
        )

    for key in recommended():
        if key in settings and key not in taken:
            warn(f"'{key}'", settings[key].key.span)
    for each in factored:
        symbols = needs.get(each.case.name, frozenset())
        if each.line is None:
            continue
        if each.line.gamma is not None and not symbols & _OWN:
            warn(f"γ of '{each.case.name}'", each.line.gamma)
        if each.line.psi and "EN" not in symbols:
            warn(f"ψ of '{each.case.name}'", each.line.psi[0])
        if each.line.category is not None and not symbols:
            warn(f"the category of '{each.case.name}'", each.line.category.span)


def _written(lines: Lines, line: BeamSetting | CaseLine | None) -> str:
    """Return where a written factor comes from: the line's reference, or the line."""
    if line is None:
        raise TypeError("a written factor has its line")
    typed = f"line {lines.report.source.line_number(line.span)}"
    reference = line.annotations.reference.text
    return f"{reference}, {typed}" if reference else f"as written, {typed}"


def _in_force(
    lines: Lines,
    factored: list[_Factored],
    needs: Mapping[str, frozenset[str]],
    given: Mapping[str, float],
    settings: Mapping[str, BeamSetting],
) -> Iterator[FactorRow]:
    """Give the factors that sets take, each with its source."""
    taken = frozenset[str]().union(*(_taken(each, needs) for each in factored))
    for key, row in recommended().items():
        if key in taken:
            source = f"{row.source}, recommended value"
            if key in given:
                source = _written(lines, settings[key])
            yield FactorRow(((key, given.get(key, row.value)),), row.meaning, source)
    for each in factored:
        symbols = needs.get(each.case.name, frozenset())
        name = plain(each.case.name)
        if each.case.own is not None and symbols & _OWN:
            yield FactorRow((("γ", each.case.own),), f"partial factor of {name}", _written(lines, each.line))
        psi = sorted(symbol for symbol in symbols if symbol.startswith("ψ"))
        if psi and each.case.psi is not None:
            values = tuple((symbol, each.case.psi[int(symbol[2:])]) for symbol in psi)
            row_found = each.row if each.line is None or not each.line.psi else None
            meaning = f"of {name}: {row_found.meaning}" if row_found is not None else f"of {name}"
            category = f", category {row_found.category}" if row_found and row_found.category else ""
            source = f"{row_found.source}{category}" if row_found is not None else _written(lines, each.line)
            yield FactorRow(values, meaning, source)
