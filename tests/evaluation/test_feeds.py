"""Calcs that feed calcs: order, loops, and what happens downstream of a fault."""

from __future__ import annotations

import pytest

from calcgen.evaluation.calc import Memory, Setting, evaluate_all
from calcgen.evaluation.results.beam import BeamResult
from calcgen.evaluation.results.calc import EvaluatedCalc
from calcgen.evaluation.results.common import FedBlock
from calcgen.evaluation.results.lines import InputRow, InputsResult
from calcgen.evaluation.results.stress import StressResult
from calcgen.evaluation.results.vary import VaryResult
from calcgen.language.document import calc_from
from calcgen.profiles.catalogue import builtin_catalogue
from calcgen.quantities.display import Style
from calcgen.text import SourceFile
from tests.evaluation.helpers import codes, evaluated, fence, shown

SETTING = Setting("eurocode", Style(), builtin_catalogue(), frozenset())
DWG = frozenset({"DWG"})
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
    assert "the nearest name there is 'f_y'" in calc.diagnostics[1].hint
    assert [d.line for d in calc.diagnostics] == [3, 4]


def test_a_calc_that_feeds_itself_says_so() -> None:
    (calc,) = evaluated("# A\n" + fence("inputs", "x = y of C-1"))
    assert (codes(calc), calc.reason) == (["cycle"], "it feeds itself")


def test_the_faults_of_other_feeds_are_told_while_one_calc_is_in_error() -> None:
    broken = "# Broken\n" + fence("working", "x = 1 m + 1 kN")
    user = "# User\n" + fence("inputs", "x of C-1", "a = f_y of C-9", "b = f_u of C-2", "c = f_y of C-2")
    calc = evaluated(broken, BASIS, user)[2]
    assert codes(calc) == ["unknown-calc", "unknown-name"]
    assert calc.standing == "in error"


def test_only_what_changed_and_what_depends_on_it_is_evaluated_again() -> None:
    memory = Memory()
    user, other = "# User\n" + fence("inputs", "f_y of C-1"), "# Other\n" + fence("inputs", "a = 1")

    def build(basis: str) -> tuple[object, ...]:
        texts = {"C-1": basis, "C-2": user, "C-3": other}
        calcs = [calc_from(SourceFile(f"calcs/{n}.md", t)) for n, t in texts.items()]
        return evaluate_all(calcs, SETTING, memory)

    first, again, changed = build(BASIS), build(BASIS), build(BASIS.replace("275", "355"))
    assert all(a is b for a, b in zip(first, again, strict=True))
    assert [a is b for a, b in zip(again, changed, strict=True)] == [False, False, True]


MEMBERS = (
    "# Members\n"
    + fence("section main", 'shape = rolled("IPE 240")')
    + fence(
        "section flitch",
        "part oak = rectangle(b = 75 mm, h = 250 mm) at (-41 mm, 0 mm) of oak",
        "part plate = rectangle(b = 7 mm, h = 220 mm) of steel",
        "part oak_r = rectangle(b = 75 mm, h = 250 mm) at (41 mm, 0 mm) of oak",
        "modulus oak = 11 GPa",
        "modulus steel = 210 GPa",
        "reference = oak",
    )
    + fence(
        "section slab",
        "part rib = rectangle(b = 300 mm, h = 500 mm) of concrete",
        "bars low = 4 of 20 mm from (-100 mm, -200 mm) to (100 mm, -200 mm) of steel",
        "modulus concrete = 12 GPa",
        "modulus steel = 200 GPa",
        "reference = concrete",
    )
    + fence(
        "beam stringer",
        "span = 6 m, 4 m",
        "section = main",
        "E = 210 GPa",
        "load G uniform 2 kN/m",
        "load Q uniform 5 kN/m",
        "combination U1 in ULS = 1.35*G + 1.5*Q",
        "combination U2 in ULS = 1.0*G + 1.5*Q",
    )
    + fence("stress midspan", "section = flitch", "M = 20 kN·m")
    + fence("table k | [DWG]", "      | 20 mm | 40 mm", "0 kN  | 1.0   | 2.0", "10 kN | 3.0   | 4.0")
)


class TestWholeBlocks:
    """A section, beam, stress or table of another calc serves as one of this calc."""

    USES = (
        fence("beam b", "span = 5 m", "section = NAME", "E = 210 GPa", "load G uniform 3 kN/m")
        + fence("stress s", "section = NAME", "M = b.M_max", "limit = 200 MPa | bending")
        + fence("working", "W = NAME.W_el_y", "h = NAME.h")
    )

    def test_a_section_gives_what_it_gives_where_it_is_defined(self) -> None:
        own = MEMBERS + self.USES.replace("NAME", "main")
        fed = "# U\n" + fence("inputs", "girder = main of C-1") + self.USES.replace("NAME", "girder")
        (first,) = evaluated(own, references=DWG)
        _, calc = evaluated(MEMBERS, fed, references=DWG)
        assert codes(calc) == []
        assert [c.utilisation for c in calc.checks] == [c.utilisation for c in first.checks]
        for name in ("W", "h"):
            assert shown(calc, name) == shown(first, name)
        beam = next(s for s in calc.segments if isinstance(s, BeamResult))
        stress = next(s for s in calc.segments if isinstance(s, StressResult))
        assert (beam.section, stress.section.name) == ("girder", "girder")

    def test_a_composite_section_keeps_its_parts_bars_and_modulus(self) -> None:
        user = (
            "# U\n"
            + fence("inputs", "flitch of C-1", "slab of C-1")
            + fence("beam b", "span = 5 m", "section = flitch", "load G uniform 1 kN/m")
            + fence("stress s", "section = slab", "M = 50 kN·m", "model = cracked")
            + fence(
                "working", "W = flitch.plate.W_el_y", "A_s = slab.low.A", "σ = s.low.σ_max", "w = b.w_max"
            )
        )
        _, calc = evaluated(MEMBERS, user, references=DWG)
        assert codes(calc) == []
        assert shown(calc, "A_s") == "12.57 cm²"  # 4 bars of π·20²/4 mm²
        # I = 2·75·250³/12 mm⁴ of oak + 210/11·7·220³/12 mm⁴ of steel; the plate's modulus I·11/(210·110 mm)
        inertia = 2 * 75 * 250**3 / 12 + 210 / 11 * 7 * 220**3 / 12
        assert shown(calc, "W") == f"{inertia * 11 / 210 / 110 / 1000:.1f} cm³"
        assert shown(calc, "w") == f"{5 * 1.0 * 5000**4 / (384 * 11000 * inertia):.3f} mm"

    def test_a_beam_and_a_stress_give_every_result_by_one_line(self) -> None:
        taken = ("U = stringer.ULS.M_max of C-1", "u = stringer.ULS.V_min(2.5 m) of C-1")
        user = (
            "# U\n"
            + fence("inputs", "stringer of C-1", "mid = midspan of C-1", *taken)
            + fence(
                "working",
                "M = stringer.ULS.M_max",
                "V = stringer.ULS.V_min(2.5 m)",
                "R = stringer.U1.R_2",
                "σ = mid.plate.σ_max",
            )
        )
        _, calc = evaluated(MEMBERS, user, references=DWG)
        assert codes(calc) == []
        assert shown(calc, "M") == shown(calc, "U")
        assert shown(calc, "V") == shown(calc, "u")
        # two spans l_1 = 6 m, l_2 = 4 m under q = 10.2 kN/m (theorem of three moments)
        m = 10.2 * (6**3 + 4**3) / (8 * (6 + 4))
        assert shown(calc, "R") == f"{10.2 * 10 / 2 + m / 6 + m / 4:.2f} kN"

    def test_a_table_is_looked_up_interpolated_and_its_lookups_are_known(self) -> None:
        user = (
            "# U\n"
            + fence("inputs", "k of C-1", "k_2 = k of C-1", "k_3 = k(10 kN, 40 mm) of C-1")
            + fence("working", "a = k(5 kN, 30 mm)", "b = k_2(10 kN, 20 mm)")
        )
        _, calc = evaluated(MEMBERS, user, references=DWG)
        assert codes(calc) == []
        assert [shown(calc, n) for n in ("a", "b", "k_3")] == ["2.500", "3", "4"]
        assert [(x.table, x.row_heads, x.column_heads) for x in calc.lookups] == [
            ("k", ("0\u00a0kN", "10\u00a0kN"), ("20\u00a0mm", "40\u00a0mm")),
            ("k_2", ("10\u00a0kN",), ("20\u00a0mm",)),
        ]

    def test_a_block_goes_on_to_a_third_calc_under_another_name(self) -> None:
        second = "# U\n" + fence("inputs", "girder = main of C-1")
        third = "# V\n" + fence("inputs", "g = girder of C-2") + fence("working", "W = g.W_el_y")
        calcs = evaluated(MEMBERS, second, third, references=DWG)
        assert shown(calcs[2], "W") == "324.3 cm³"
        assert [(o.text) for o in calcs[2].depends] == ["girder of C-2"]

    @pytest.mark.parametrize(
        ("line", "kind", "text"),
        [
            ("x = main of C-1", "section", "IPE 240"),
            ("x = flitch of C-1", "section", "oak, plate, oak_r, h = 250.0 mm, b = 157.0 mm"),
            ("x = stringer of C-1", "beam", "spans 6 m, 4 m"),
            ("x = midspan of C-1", "stress", "oak, plate, oak_r, elastic"),
            ("x = k of C-1", "table", "2 rows, 2 columns"),
        ],
    )
    def test_its_row_says_which_one_it_is(self, line: str, kind: str, text: str) -> None:
        _, calc = evaluated(MEMBERS, "# U\n" + fence("inputs", line), references=DWG)
        (row,) = next(s for s in calc.segments if isinstance(s, InputsResult)).rows
        assert isinstance(row, InputRow)
        assert isinstance(row.value, FedBlock)
        assert (row.value.kind, row.shown.text.replace("\u00a0", " ")) == (kind, text)
        assert row.value.results

    def test_it_stays_as_it_is_while_the_calc_is_varied(self) -> None:
        user = (
            "# U\n"
            + fence("inputs", "girder = main of C-1", "q = 3 kN/m")
            + fence("beam b", "span = 5 m", "section = girder", "E = 210 GPa", "load G uniform q")
            + fence("stress s", "section = girder", "M = b.M_max")
            + fence("vary", "q = 3 steps from 2 kN/m to 4 kN/m", "show s.σ_max")
        )
        _, calc = evaluated(MEMBERS, user, references=DWG)
        assert codes(calc) == []
        varied = next(s for s in calc.segments if isinstance(s, VaryResult))
        # σ = q·L²/8/W with W = 324.3 cm³ published; the outline's W differs in the third digit
        assert [float(r.texts[0]) for r in varied.runs] == [
            pytest.approx(q * 25 / 8 * 1e6 / 324.3e3, rel=0.01) for q in (2, 3, 4)
        ]

    @pytest.mark.parametrize(
        ("lines", "fault"),
        [
            (("x = mian of C-1",), ("unknown-name", "the nearest name there is 'main'")),
            (("x = pi of C-1",), ("unknown-name", "the calc C-1 has no 'π'")),
            (("main of C-11",), ("unknown-calc", "the nearest calc is 'C-1'")),
            (("x [mm] = main of C-1",), ("unit-mismatch", "a section has no unit")),
            (("x = main(3 m) of C-1",), ("block-is-no-value", "'main' is a section, not a value")),
            (("x = flitch.plate of C-1",), ("block-is-no-value", "'plate' is a part, not a value")),
            (("x = stringer.M_max of C-1",), ("no-such-result", "write stringer.ULS.M_max")),
            (("x = k(20 kN, 20 mm) of C-1",), ("table-range", "outside the rows")),
            (("x = 3 m", "x = main of C-1"), ("name-defined-twice", "already defined on line 3")),
        ],
    )
    def test_faults_at_the_feed(self, lines: tuple[str, ...], fault: tuple[str, str]) -> None:
        _, calc = evaluated(MEMBERS, "# U\n" + fence("inputs", *lines), references=DWG)
        (found,) = calc.diagnostics
        assert found.code == fault[0]
        assert fault[1] in f"{found.message} / {found.hint}"

    @pytest.mark.parametrize(
        ("line", "message"),
        [
            ("y = girder + 1", "'girder' is a section, not a value"),
            ("y = girder.W_el_q", "a section has no property 'W_el,q'"),
            ("y = stringer.ULS.M_mx", "a beam has no result 'M_mx'"),
            ("y = k", "'k' is a table, not a value"),
        ],
    )
    def test_faults_where_it_is_used(self, line: str, message: str) -> None:
        inputs = fence("inputs", "girder = main of C-1", "stringer of C-1", "k of C-1")
        _, calc = evaluated(MEMBERS, "# U\n" + inputs + fence("working", line), references=DWG)
        assert [d.message for d in calc.diagnostics] == [message]

    def test_a_beam_is_no_section_and_a_block_is_not_varied(self) -> None:
        user = (
            "# U\n"
            + fence("inputs", "stringer of C-1", "girder = main of C-1")
            + fence("stress s", "section = stringer", "M = 1 kN·m")
            + fence("vary", "girder = 3 steps from 1 m to 2 m", "show girder.A")
        )
        _, calc = evaluated(MEMBERS, user, references=DWG)
        section, varied = calc.diagnostics
        assert (section.code, section.hint) == ("not-a-section", "it is a beam")
        assert varied.message == "'girder' is a section of another calc, not a value"


class TestFaultsUpstream:
    BROKEN = "# Broken\n" + fence("working", "x = 1 m + 1 kN", "ok = 2")

    def test_the_reason_names_the_calc_in_error_however_far_up(self) -> None:
        taker = "# T\n" + fence("inputs", "ok of C-{}")
        calcs = evaluated(self.BROKEN, *(taker.format(n) for n in (1, 2, 3)))
        assert [c.reason for c in calcs] == [
            "",
            "C-1, which feeds it, is in error",
            "C-2, which feeds it, is not evaluated because C-1 is in error",
            "C-3, which feeds it, is not evaluated because C-1 is in error",
        ]

    def test_every_feeder_at_fault_is_named(self) -> None:
        user = "# U\n" + fence("inputs", "ok of C-1", "a = x of C-2", "f_y of C-3")
        self_fed = "# S\n" + fence("inputs", "x of C-2")
        calcs = evaluated(self.BROKEN, self_fed, BASIS, user)
        assert calcs[3].reason == "C-1, which feeds it, is in error; C-2, which feeds it, is in error"
        assert [h.calc for h in calcs[3].hindrances] == ["C-1", "C-2"]

    def test_below_a_feed_that_does_not_exist(self) -> None:
        first, second = evaluated(
            "# A\n" + fence("inputs", "x of C-7"), "# B\n" + fence("inputs", "x of C-1")
        )
        assert (codes(first), first.standing) == (["unknown-calc"], "in error")
        assert (codes(second), second.standing) == ([], "not evaluated")

    def test_a_file_that_cannot_be_read_is_not_said_to_be_missing(self) -> None:
        calc = calc_from(SourceFile("calcs/C-1.md", "# A\n" + fence("inputs", "x of C-2")))
        (found,) = evaluate_all([calc], SETTING, unread=frozenset({"C-2"}))
        assert found.diagnostics[0].message == "the file of the calc 'C-2' cannot be read"

    def test_what_hangs_below_a_loop_is_not_evaluated(self) -> None:
        texts = ("a = b of C-2", "b = a of C-1", "a of C-1", "a of C-3")
        calcs = evaluated(*("# T\n" + fence("inputs", text) for text in texts))
        assert [c.standing for c in calcs] == ["in error", "in error", "not evaluated", "not evaluated"]
        assert calcs[3].reason == "C-3, which feeds it, is not evaluated because C-1 is in error"

    def test_a_calc_that_feeds_itself(self) -> None:
        (calc,) = evaluated("# S\n" + fence("inputs", "y = 3 m", "x = y of C-1"))
        (found,) = calc.diagnostics
        assert (found.code, found.line, found.column) == ("cycle", 4, 10)
        assert "a calc cannot feed itself" in found.message


class TestMemory:
    """What is remembered between builds is used only while everything upstream is what it was."""

    USER, LAST = "# User\n" + fence("inputs", "f_y of C-1"), "# Last\n" + fence("inputs", "f_y of C-2")

    @staticmethod
    def build(memory: Memory, **texts: str) -> list[EvaluatedCalc]:
        numbered = {f"C-{n.removeprefix('c')}": text for n, text in texts.items()}
        calcs = [calc_from(SourceFile(f"calcs/{n}.md", t)) for n, t in numbered.items()]
        return list(evaluate_all(calcs, SETTING, memory))

    def test_a_change_goes_down_two_steps(self) -> None:
        memory = Memory()
        self.build(memory, c1=BASIS, c2=self.USER, c3=self.LAST)
        calcs = self.build(memory, c1=BASIS.replace("275", "355"), c2=self.USER, c3=self.LAST)
        assert [shown(c, "f_y") for c in calcs] == ["355.0 MPa"] * 3

    def test_a_feeder_that_is_gone_leaves_no_value_behind(self) -> None:
        memory = Memory()
        self.build(memory, c1=BASIS, c2=self.USER, c3=self.LAST)
        user, last = self.build(memory, c2=self.USER, c3=self.LAST)
        assert (codes(user), user.values) == (["unknown-calc"], {})
        assert last.standing == "not evaluated"
        again = self.build(memory, c1=BASIS, c2=self.USER, c3=self.LAST)
        assert [shown(c, "f_y") for c in again] == ["275.0 MPa"] * 3

    def test_a_fault_upstream_and_its_repair(self) -> None:
        memory = Memory()
        self.build(memory, c1=BASIS, c2=self.USER, c3=self.LAST)
        broken = self.build(memory, c1=BASIS.replace("275", "-"), c2=self.USER, c3=self.LAST)
        assert [c.standing for c in broken] == ["in error", "not evaluated", "not evaluated"]
        mended = self.build(memory, c1=BASIS.replace("275", "460"), c2=self.USER, c3=self.LAST)
        assert [shown(c, "f_y") for c in mended] == ["460.0 MPa"] * 3

    def test_a_long_chain_is_remembered_link_by_link(self) -> None:
        texts = {"c1": "# T\n" + fence("inputs", "x = 1 m")}
        texts |= {f"c{n}": "# T\n" + fence("inputs", f"x of C-{n - 1}") for n in range(2, 2001)}
        memory = Memory()
        first, again = self.build(memory, **texts), self.build(memory, **texts)
        assert all(a is b for a, b in zip(first, again, strict=True))
        texts["c1"] = texts["c1"].replace("1 m", "2 m")
        assert shown(next(c for c in self.build(memory, **texts) if c.number == "C-2000"), "x") == "2.000 m"
