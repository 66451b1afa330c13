"""Calcs that feed calcs: order, loops, and what happens downstream of a fault."""

from __future__ import annotations

from calcgen.evaluation.calc import Memory, Setting, evaluate_all
from calcgen.language.document import calc_from
from calcgen.profiles.catalogue import builtin_catalogue
from calcgen.quantities.display import Style
from calcgen.text import SourceFile
from tests.evaluation.helpers import codes, evaluated, fence, shown

BASIS = "# Basis\n" + fence("inputs", "f_y = 275 MPa", "γ = 1.1")


def test_a_value_keeps_its_name_or_gets_another() -> None:
    user = "# User\n" + fence("inputs", "f_y of C-1", "f [ksi] = f_y of C-1 | strength")
    _, calc = evaluated(BASIS, user)
    assert codes(calc) == []
    assert shown(calc, "f_y") == "275.0 MPa"
    assert shown(calc, "f") == "39.89 ksi"
    assert [(o.calc, o.name) for o in calc.depends] == [("C-1", "f_y"), ("C-1", "f_y")]


def test_order_does_not_depend_on_numbers() -> None:
    user = "# User\n" + fence("inputs", "f_y of C-2")
    calc, _ = evaluated(user, BASIS)
    assert shown(calc, "f_y") == "275.0 MPa"


def test_a_result_of_a_block_can_be_fed() -> None:
    beam = "# Beam\n" + fence("beam b", "span = 4 m", "EI = 1000 kN·m^2", "load G uniform 5 kN/m")
    user = "# User\n" + fence("inputs", "R = b.R_2 of C-1", "M = b.M(1 m) of C-1")
    _, calc = evaluated(beam, user)
    assert codes(calc) == []
    assert shown(calc, "R") == "10.00 kN"  # w·L/2
    assert shown(calc, "M") == "7.500 kN·m"  # w·x·(L - x)/2


def test_a_loop_is_reported_whole_on_each_of_its_calcs() -> None:
    a = "# A\n" + fence("inputs", "x = y of C-2")
    b = "# B\n" + fence("inputs", "y = z of C-3")
    c = "# C\n" + fence("inputs", "z = x of C-1")
    calcs = evaluated(a, b, c)
    assert [codes(calc) for calc in calcs] == [["cycle"], ["cycle"], ["cycle"]]
    assert "C-1 ← C-2 ← C-3 ← C-1" in calcs[0].diagnostics[0].message
    assert {calc.standing for calc in calcs} == {"in error"}


def test_a_calc_that_a_broken_one_feeds_is_not_evaluated_and_says_why() -> None:
    broken = "# Broken\n" + fence("working", "x = 1 m + 1 kN", "ok = 2")
    user = "# User\n" + fence("inputs", "ok of C-1") + fence("working", "ok <= 3")
    last = "# Last\n" + fence("inputs", "ok of C-2")
    _, calc, further = evaluated(broken, user, last)
    assert (calc.standing, calc.reason) == ("not evaluated", "C-1, which feeds it, is in error")
    assert further.standing == "not evaluated"
    assert calc.checks == ()
    assert calc.values == {}


def test_unknown_calcs_and_names() -> None:
    user = "# User\n" + fence("inputs", "a = f_y of C-9", "b = f_u of C-1")
    _, calc = evaluated(BASIS, user)
    assert codes(calc) == ["unknown-calc", "unknown-name"]
    assert "C-1" in calc.diagnostics[0].hint
    assert [d.line for d in calc.diagnostics] == [3, 4]


def test_only_what_changed_and_what_depends_on_it_is_evaluated_again() -> None:
    setting = Setting("eurocode", Style(), builtin_catalogue(), frozenset())
    memory = Memory()
    user, other = "# User\n" + fence("inputs", "f_y of C-1"), "# Other\n" + fence("inputs", "a = 1")

    def build(basis: str) -> tuple[object, ...]:
        texts = {"C-1": basis, "C-2": user, "C-3": other}
        calcs = [calc_from(SourceFile(f"calcs/{n}.md", t)) for n, t in texts.items()]
        return evaluate_all(calcs, setting, memory)

    first, again, changed = build(BASIS), build(BASIS), build(BASIS.replace("275", "355"))
    assert all(a is b for a, b in zip(first, again, strict=True))
    assert [a is b for a, b in zip(again, changed, strict=True)] == [False, False, True]
