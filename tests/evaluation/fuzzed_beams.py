"""Texts of beams whose numbers go to extremes: 1e-300 m, 1e308 N/mm, -0 kN."""

from __future__ import annotations

from hypothesis import strategies as st

from tests.evaluation.helpers import fence

ORDINARY = st.floats(min_value=0.1, max_value=20.0).map(lambda x: f"{x:.3g}")
EXTREME = st.one_of(
    st.sampled_from(("0", "-1", "1e-308", "1e-300", "1e-12", "1e-9", "1e9", "1e300", "1e308")),
    st.integers(min_value=-18, max_value=18).map(lambda n: f"3e{n}"),
)
NUMBERS = st.integers(0, 7).flatmap(lambda n: EXTREME if n == 0 else ORDINARY)
PLACES = ("0 m", "1 m", "1.5 m", "2 m", "3 m", "6 m", "1e-9 m", "1e-300 m", "1 mm")
FORCES = st.sampled_from(("N", "kN"))
PLANES = st.sampled_from(("", "", "lateral "))
CASES = st.sampled_from("GQ")


@st.composite
def places(draw: st.DrawFn) -> str:
    return draw(st.sampled_from(PLACES)) if draw(st.integers(0, 15)) else f"{draw(EXTREME)} m"


@st.composite
def stretches(draw: st.DrawFn) -> str:
    return f"from {draw(places())} to 6 m" if draw(st.booleans()) else "from 0 m to 6 m"


@st.composite
def loads(draw: st.DrawFn) -> str:
    start = f"load {draw(CASES)} {draw(PLANES)}"
    number, force = draw(NUMBERS), draw(FORCES)
    match draw(st.integers(0, 6)):
        case 0:
            return f"{start}uniform {number} {force}/m {draw(stretches())}"
        case 1:
            return f"{start}linear 0 {force}/m to {number} {force}/m {draw(stretches())}"
        case 2:
            return f"{start}point {number} {force} at {draw(places())}"
        case 3:
            return f"{start}moment {number} {force}·m at {draw(places())}"
        case 4:
            return f"{start}moment {number} {force} {draw(stretches())}"
        case 5:
            return f"load T train {number} {force}, {draw(NUMBERS)} {force} spaced {draw(places())}"
        case _:
            return f"load {draw(CASES)} gradient {number} K"


@st.composite
def supports(draw: st.DrawFn) -> str:
    kind = draw(st.sampled_from(("pin", "roller", "fixed", "spring")))
    if kind == "spring":
        kind = f"spring {draw(NUMBERS)} kN/mm"
        if draw(st.booleans()):
            kind += f" rotation {draw(NUMBERS)} kN·m"
    settles = f" settles {draw(NUMBERS)} mm in S" if draw(st.integers(0, 3)) == 0 else ""
    return f"support {draw(PLANES)}{kind} at {draw(places())}{settles}"


@st.composite
def beam_texts(draw: st.DrawFn) -> str:
    """Give a calc with a section and a beam on it, most numbers likely and some not."""
    spans = ["6 m", *draw(st.lists(places(), max_size=2))]
    stiffness = draw(
        st.sampled_from(
            (
                "section = s\nE = 210 GPa\nG = 81 GPa",
                f"EI = {draw(NUMBERS)} kN·m²",
                f"section = s\nE = {draw(NUMBERS)} GPa",
            )
        )
    )
    lines = [f"span = {', '.join(spans)}", *stiffness.split("\n")]
    lines += draw(st.sampled_from(([], ["shear_deformation = yes"], [f"GA_s = {draw(NUMBERS)} kN"])))
    lines += [f"expansion = {draw(NUMBERS)} 1/K"]
    lines += draw(
        st.sampled_from(
            ([], ["support pin at 0 m"], ["support fixed at 0 m", "support spring 1 kN/mm at 6 m"])
        )
    )
    lines += draw(st.lists(supports(), max_size=2))
    lines += ["hinge at 1.5 m"] * (draw(st.integers(0, 4)) == 0)
    lines += [f"load {case} uniform {draw(NUMBERS)} kN/m" for case in "GQ"]
    lines += draw(st.lists(loads(), max_size=2))
    lines += ["pattern Q"] * draw(st.integers(0, 1))
    if draw(st.booleans()):
        lines += [f"combination U{i} in ULS = {draw(NUMBERS)}*G - {draw(NUMBERS)}*Q" for i in (1, 2)]
    section = fence(
        "section s",
        draw(
            st.sampled_from(
                ('shape = rolled("IPE 240")', f"shape = rectangle(b = {draw(NUMBERS)} m, h = 0.2 m)")
            )
        ),
    )
    return f"# T\n\n{section}\n{fence('beam b', *lines)}"
