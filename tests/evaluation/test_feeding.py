"""What calcs take from each other is told, evaluated or not."""

from calcgen.evaluation.calc import Setting, evaluate_all
from calcgen.evaluation.feeding import Fed, fed_inputs
from calcgen.evaluation.results.common import Origin
from calcgen.language.document import calc_from
from calcgen.profiles.catalogue import builtin_catalogue
from calcgen.quantities.display import Style
from calcgen.text import SourceFile


def fed(**texts: str) -> tuple[Fed, ...]:
    """Return what calcs take from each other; '_' in their names is a hyphen in their numbers."""
    sources = (
        SourceFile(f"calcs/{name.replace('_', '-')}.md", f"# Calc\n\n{t}") for name, t in texts.items()
    )
    setting = Setting("eurocode", Style(), builtin_catalogue())
    return fed_inputs(evaluate_all([calc_from(source) for source in sources], setting))


BEAM = "```beam b\nspan = 6 m\nEI = 1e4 kN·m²\nload G uniform 2 kN/m\n```\n```inputs\nL = 3 m\n```"


def test_values_are_told_with_their_names_on_both_sides_and_their_arguments() -> None:
    first, second = fed(A_1=BEAM, B_2="```inputs\nL of A-1\nM = b.M_max(2.5 m) of A-1\n```")
    assert (first.origin, first.taker, first.name, first.line) == (Origin("A-1", "L"), "B-2", "L", 4)
    assert second.origin == Origin("A-1", "b.M_max", "(2.5 m)")
    assert first.row is not None
    assert first.row.shown.text == "3.000\u00a0m"


def test_a_calc_that_is_not_evaluated_still_depends() -> None:
    (found,) = fed(A_1="```working\na = nothing\n```", B_2="```inputs\na of A-1\n```")
    assert (found.origin.calc, found.taker, found.row) == ("A-1", "B-2", None)


def test_a_line_in_error_still_depends() -> None:
    (found,) = fed(A_1=BEAM, B_2="```inputs\nx = no_such_name of A-1\n```")
    assert (found.origin, found.row) == (Origin("A-1", "no_such_name"), None)


def test_a_value_is_told_that_the_calc_it_feeds_could_not_take() -> None:
    looped = "```inputs\nL of A-1\nM = b.M_max of A-1\nx of B-2\n```"
    length, moment, own = fed(A_1=BEAM, B_2=looped)
    assert (length.row, length.text) == (None, "3.000\u00a0m")
    assert moment.text == "9.000\u00a0kN·m"  # 2 kN/m (6 m)²/8
    assert own.text == ""


def test_what_a_calc_in_error_has_is_not_given() -> None:
    (found,) = fed(A_1="```working\na = 2 m\nb = nothing\n```", B_2="```inputs\na of A-1\n```")
    assert found.text == ""


def test_loops_are_told() -> None:
    pair = fed(A_1="```inputs\nb of B-2\n```", B_2="```inputs\nb = a of A-1\n```")
    assert [(f.origin.calc, f.taker) for f in pair] == [("B-2", "A-1"), ("A-1", "B-2")]


def test_a_calc_that_does_not_exist_is_left_out() -> None:
    assert fed(A_1="```inputs\nb of B-2\n```") == ()
