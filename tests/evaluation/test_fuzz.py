"""Whatever is done to a calc, evaluation and the pages answer with diagnostics, never with an exception."""

from __future__ import annotations

import random
from pathlib import Path

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from calcgen.figures.illustrate import illustrate
from calcgen.quantities.display import Style
from calcgen.site.compose import compose
from calcgen.site.render import render
from tests.evaluation.fuzzed_stress import stress_text
from tests.evaluation.helpers import evaluated
from tests.site.helpers import package

PROJECTS = Path(__file__).parents[2] / "projects"
CALCS = [
    path.read_text(encoding="utf-8")
    for path in sorted(PROJECTS.glob("*/calcs/*.md"))
    if path.stat().st_size < 9000
]
PIECES = (
    *(
        "0",
        "-1",
        "1e308",
        "1e-308",
        "0 m",
        "-5 kN",
        "yes",
        '"IPE 240"',
        "°C",
        "%",
        "π",
        "(",
        ")",
        "^",
        "*",
        "/",
    ),
    *(
        "when",
        "otherwise",
        "at",
        "from",
        "to",
        "of",
        "in",
        "lateral",
        "mirrored",
        "turned 45 deg",
        "M",
        "I_y",
        "main",
    ),
    *(
        "sqrt(-1)",
        "x.y.z(1 m)",
        "|",
        "[KEY]",
        "\n",
        "  ",
        "```\n",
        "```beam b\n",
        "{M_Ed}",
        "$x$",
        "🙂",
        "\0",
    ),
)


def mutated(text: str, rng: random.Random) -> str:
    """Return a text with a few lines and tokens dropped, doubled, exchanged or replaced."""
    lines = text.split("\n")
    for _ in range(rng.randint(1, 4)):
        index = rng.randrange(len(lines))
        match rng.randrange(5):
            case 0:
                del lines[index]
            case 1:
                lines.insert(index, lines[rng.randrange(len(lines))])
            case 2:
                words = lines[index].split(" ")
                words[rng.randrange(len(words))] = rng.choice(PIECES)
                lines[index] = " ".join(words)
            case 3:
                at = rng.randint(0, len(lines[index]))
                lines[index] = lines[index][:at] + rng.choice(PIECES) + lines[index][at:]
            case _:
                lines[index] = lines[index][: rng.randint(0, len(lines[index]))]
        if not lines:
            lines = [""]
    return "\n".join(lines)


def check(seed: int) -> None:
    rng = random.Random(seed)  # noqa: S311  no secret
    text = mutated(rng.choice(CALCS), rng)
    axes = rng.choice(("eurocode", "american"))
    (calc,) = evaluated(text, axes=axes)  # type: ignore[arg-type]
    assert all(0 <= d.span.start <= d.span.end <= len(d.source.text) for d in calc.diagnostics)
    illustrate(calc, axes, Style(system="US" if axes == "american" else "SI"))  # type: ignore[arg-type]


@given(st.integers(min_value=0, max_value=10**9))
def test_a_mutated_calc_is_answered(seed: int) -> None:
    check(seed)


@pytest.mark.slow
@pytest.mark.parametrize("start", range(0, 400, 100))
def test_many_mutated_calcs_are_answered(start: int) -> None:
    for seed in range(start, start + 100):
        check(seed)


def check_stress(seed: int) -> None:
    rng = random.Random(seed)  # noqa: S311  no secret
    axes = rng.choice(("eurocode", "american"))
    text = stress_text(rng)
    (calc,) = evaluated(text, axes=axes)  # type: ignore[arg-type]
    assert all(0 <= d.span.start <= d.span.end <= len(d.source.text) for d in calc.diagnostics)
    illustrate(calc, axes, Style(system="US" if axes == "american" else "SI"))  # type: ignore[arg-type]
    render(compose(package(text, calcs=(calc,), figures={}, previous={}, history=())))


@pytest.mark.filterwarnings("error")
@settings(max_examples=12)
@given(st.integers(min_value=0, max_value=10**9))
def test_stresses_of_any_model_section_and_size_are_answered(seed: int) -> None:
    check_stress(seed)


@pytest.mark.slow
@pytest.mark.filterwarnings("error")
@pytest.mark.parametrize("start", range(0, 200, 50))
def test_many_stresses_are_answered(start: int) -> None:
    for seed in range(start, start + 50):
        check_stress(seed)
