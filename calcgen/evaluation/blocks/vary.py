"""`vary`: the calc again for each value of one input, with what is shown of each run."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Mapping, Sequence
from dataclasses import dataclass, replace
from typing import TypeAlias

from calcgen.evaluation.formulas import Evaluator, shown
from calcgen.evaluation.residuals import report_residuals
from calcgen.evaluation.results.calc import EvaluatedCalc
from calcgen.evaluation.results.common import Plain
from calcgen.evaluation.results.vary import VaryResult, VaryRun
from calcgen.evaluation.scope import Scope
from calcgen.language.blocks.inputs import InputsBlock
from calcgen.language.blocks.vary import Over, Show, Steps, Varied, VaryBlock
from calcgen.language.calc import Calc, FailedBlock
from calcgen.language.nodes import Expression
from calcgen.profiles.catalogue import Catalogue, Profile, designation_key
from calcgen.profiles.listing import matching, near
from calcgen.quantities.display import Style, describe, rounded, show
from calcgen.quantities.measure import Measure, from_si
from calcgen.quantities.symbols import plain
from calcgen.text import Report, Span, nearest

MOST = 200
"""Most values that a block goes through: more take long, and no curve shows them."""

Again: TypeAlias = Callable[[Mapping[str, Plain]], tuple[EvaluatedCalc, Scope]]
"""Evaluates the calc, without blocks of this kind, with other values of inputs."""


@dataclass(frozen=True)
class _Trial:
    """A value to try, and the mass of its section where it names one, kg/m."""

    value: Plain
    mass: float | None = None


@dataclass(frozen=True)
class _Found:
    """What a run gave: its calc, each expression's value, and what its first error says."""

    trial: _Trial
    calc: EvaluatedCalc
    values: tuple[Measure | None, ...]
    fault: str


def evaluate_vary(
    block: VaryBlock, calc: Calc, scope: Scope, catalogue: Catalogue, again: Again
) -> VaryResult | FailedBlock:
    """Repeat a calc that was evaluated into `scope`; faults of the block itself are reported."""
    failed = FailedBlock("vary", block.span)
    name = block.varied.target.name
    known = _is_input(block, calc, scope)
    present = [Evaluator(scope).measure(expression) for expression in block.expressions]
    if not known or name not in scope.values:
        return failed
    trials = _trials(block, scope, catalogue)
    in_error = scope.report.failed or any(d.severity == "error" for d in calc.diagnostics)
    if trials is None or in_error:
        return failed
    found = [_run(trial, block.expressions, name, again) for trial in trials]
    units = tuple(
        _unit(value, [run.values[index] for run in found], scope)
        for index, value in enumerate(present)
        if value is not None
    )
    over = block.varied.values
    unit = _unit_of_steps(trials, scope)
    digits = _telling_digits(trials, unit, scope.style)
    now = scope.values[name]
    runs = _marked([_shown_run(run, now, unit, digits, units, scope) for run in found])
    source = calc.source
    typed: list[Varied | Show] = [block.varied, *block.shows]
    return VaryResult(
        name=_address(block, calc),
        input=name,
        unit=unit,
        present=now.shown_in(unit) if isinstance(now, Measure) else now,
        pattern=over.pattern.value if isinstance(over, Over) else "",
        heads=tuple(" ".join(source.slice(e.span).split()) for e in block.expressions),
        units=units,
        runs=runs,
        lines=tuple(
            (
                " ".join(source.slice(line.statement_span).split()),
                line.annotations.note,
                line.annotations.reference,
                source.line_number(line.span),
            )
            for line in sorted(typed, key=lambda line: line.span)
        ),
        line=source.line_number(block.head_span),
        span=block.span,
    )


def _address(block: VaryBlock, calc: Calc) -> str:
    """Return the anchor of a block: `vary-L`, `vary-L-2` for the second one of the same input."""
    name = block.varied.target.name
    same = [b for b in calc.segments if isinstance(b, VaryBlock) and b.varied.target.name == name]
    number = same.index(block) + 1
    return f"vary-{name}" if number == 1 else f"vary-{name}-{number}"


def _is_input(block: VaryBlock, calc: Calc, scope: Scope) -> bool:
    """Report a name that is no input of the calc."""
    target = block.varied.target
    inputs = {i.target.name for b in calc.segments if isinstance(b, InputsBlock) for i in b.items}
    if target.name in inputs and target.name not in scope.things:
        return True
    if target.name in scope.failed:
        return False
    found = nearest(target.name, inputs)
    hint = f"the nearest input is '{found}'" if found else "vary an input of this calc"
    if target.name in scope.values or target.name in scope.things:
        what = scope.things[target.name].kind if target.name in scope.things else "derived value"
        message = f"'{plain(target.name)}' is a {what}, not an input"
        if target.name in inputs:
            message = f"'{plain(target.name)}' is a {what} of another calc, not a value"
            hint = "vary an input of this calc that is a quantity, or a designation"
        scope.report.error("not-an-input", target.span, message, hint=hint)
    else:
        scope.report.error("unknown-name", target.span, f"'{plain(target.name)}' is not defined", hint=hint)
    return False


def _trials(block: VaryBlock, scope: Scope, catalogue: Catalogue) -> tuple[_Trial, ...] | None:
    """Return the values to go through; report a range that cannot be taken."""
    values = block.varied.values
    now = scope.values[block.varied.target.name]
    if isinstance(values, Over):
        return _sections(values, now, block.varied.target.span, scope, catalogue)
    if not isinstance(now, Measure):
        hint = 'write NAME over "IPE *"' if isinstance(now, str) else ""
        scope.report.error(
            "not-a-number",
            block.varied.target.span,
            "steps need an input that is a quantity, this is " + ("text" if hint else "yes or no"),
            hint=hint,
        )
        return None
    return _steps(values, now, scope)


def _steps(steps: Steps, now: Measure, scope: Scope) -> tuple[_Trial, ...] | None:
    evaluator = Evaluator(scope)
    count, start, end = (evaluator.measure(e) for e in (steps.count, steps.start, steps.end))
    if count is None or start is None or end is None:
        return None
    for limit, node in ((start, steps.start), (end, steps.end)):
        if limit.dimension != now.dimension:
            scope.report.error(
                "wrong-dimension",
                node.span,
                f"the input is {describe(now.dimension)}, this is {describe(limit.dimension)}",
                hint="a unit may be missing",
            )
            return None
    number = rounded(count.si)
    if count.dimension or not number.is_integer() or not 2 <= number <= MOST:
        scope.report.error(
            "vary-steps",
            steps.count.span,
            f"the number of steps is a whole number from 2 to {MOST}",
            hint="the ends count among them",
        )
        return None
    if start.si == end.si:
        scope.report.error(
            "vary-steps", steps.end.span, "the range ends where it starts", hint="give two different ends"
        )
        return None
    unit = start.unit or end.unit or scope.style.unit_of(now)
    last = int(number) - 1
    # each end times its share, so that a range wider than a number can be does not overflow
    values = (start.si * (1 - step / last) + end.si * (step / last) for step in range(last + 1))
    return tuple(_Trial(from_si(rounded(value), unit)) for value in values)


def _sections(
    over: Over, now: Plain, target: Span, scope: Scope, catalogue: Catalogue
) -> tuple[_Trial, ...] | None:
    """Return the designations that match, the lightest first; those of unknown mass last."""
    if not isinstance(now, str):
        scope.report.error(
            "not-a-text",
            target,
            "'over' goes through designations, and needs an input that is a text",
            hint='write L = 26 steps from 4 m to 9 m for a quantity; profile = "IPE 300" is a text',
        )
        return None
    pattern = over.pattern
    found = matching(catalogue, pattern.value)
    if not found:
        close = ", ".join(near(catalogue, pattern.value))
        scope.report.error(
            "unknown-profile",
            pattern.span,
            f"no designation of the catalogues is like '{pattern.value}'",
            hint=f"the nearest are {close}" if close else "* stands for any text: IPE *, W18x*",
        )
        return None
    if len(found) > MOST:
        scope.report.error(
            "vary-steps",
            pattern.span,
            f"{len(found)} sections match, {MOST} can be gone through",
            hint="narrow the pattern",
        )
        return None
    return tuple(_Trial(p.designation, p.published.get("mass")) for p in sorted(found, key=_by_mass))


def _by_mass(profile: Profile) -> tuple[float, str]:
    return profile.published.get("mass", float("inf")), profile.designation


def _run(trial: _Trial, expressions: Iterable[Expression], name: str, again: Again) -> _Found:
    """Evaluate the calc with a value; a run with an error shows no value at all.

    The second route is asked when everything of the run is read. Of beams under patterns or trains it finds
    again what was read; of all else, what it finds in the calc itself.
    """
    calc, scope = again({name: trial.value})
    report = Report(calc.calc.source)
    reader = Evaluator(replace(scope, report=report))
    values = tuple(reader.measure(e) for e in expressions)
    report_residuals(calc.segments, report)
    errors = [d for d in (*calc.diagnostics, *report.diagnostics) if d.severity == "error"]
    if errors:
        return _Found(trial, calc, (None,) * len(values), errors[0].message)
    return _Found(trial, calc, values, "")


def _unit(present: Measure, values: Sequence[Measure | None], scope: Scope) -> str:
    """Return the unit of a column: the one chosen in the calc, or that of its largest value."""
    largest = max((v for v in values if v is not None), key=lambda v: abs(v.si), default=present)
    return present.unit if present.unit is not None else scope.style.unit_of(largest)


def _unit_of_steps(trials: Sequence[_Trial], scope: Scope) -> str:
    first = trials[0].value
    return scope.style.unit_of(first) if isinstance(first, Measure) else ""


def _telling_digits(trials: Sequence[_Trial], unit: str, style: Style) -> int:
    """Return the least number of figures, not below the style's, that tells the steps from each other."""
    values = [t.value.shown_in(unit) for t in trials if isinstance(t.value, Measure)]
    enough = (n for n in range(style.digits, 12) if len({show(v, style, n) for v in values}) == len(values))
    return next(enough, 12)


def _shown_run(
    found: _Found, now: Plain, unit: str, digits: int, units: Sequence[str], scope: Scope
) -> VaryRun:
    value = found.trial.value
    mass = None if found.trial.mass is None else _mass(found.trial.mass, scope)
    calc, governing = found.calc, found.calc.governing
    values = tuple(None if v is None else v.shown_in(u) for v, u in zip(found.values, units, strict=True))
    checked = not found.fault and bool(calc.checks)
    return VaryRun(
        value=value,
        shown=show(value.shown_in(unit), scope.style, digits)
        if isinstance(value, Measure)
        else shown(value, scope),
        mass=mass,
        mass_shown=None if mass is None else show(mass, scope.style),
        values=values,
        texts=tuple("—" if v is None else show(v, scope.style).number for v in values),
        fault=found.fault,
        checked=checked,
        satisfied=checked and all(check.satisfied for check in calc.checks),
        governing=(governing.label, governing.utilisation) if checked and governing is not None else None,
        present=_same(value, now),
    )


def _mass(mass: float, scope: Scope) -> Measure:
    found = from_si(mass, "kg/m")
    return found.shown_in(scope.style.default_unit(found.dimension))


def _same(value: Plain, now: Plain) -> bool:
    if isinstance(value, Measure) and isinstance(now, Measure):
        return rounded(value.si) == rounded(now.si)
    if isinstance(value, str) and isinstance(now, str):
        return designation_key(value) == designation_key(now)
    return False


def _marked(runs: Sequence[VaryRun]) -> tuple[VaryRun, ...]:
    """Mark the lightest section that satisfies every check, or those of that mass."""
    masses = [run.mass.si for run in runs if run.satisfied and run.mass is not None]
    least = min(masses, default=None)
    return tuple(
        replace(run, lightest=run.satisfied and run.mass is not None and run.mass.si == least) for run in runs
    )
