"""Random beams as an engineer types them: up to twelve spans, six cases and thirty loads."""

from __future__ import annotations

from hypothesis import strategies as st

from calcgen.evaluation.results.beam import BeamResult
from calcgen.figures.adapt_beam import beam_drawings
from calcgen.figures.beam import BeamDrawing
from calcgen.quantities.display import Style
from tests.evaluation.helpers import evaluated, fence

SI, US = Style("SI"), Style("US")
MAIN = fence("section main", "shape = i_shape(h = 300 mm, b = 150 mm, t_w = 7 mm, t_f = 11 mm)")
ANGLE = fence("section main", "shape = angle(h = 150 mm, b = 100 mm, t = 12 mm)")


def drawings_of(*lines: str, before: str = "", style: Style = SI) -> tuple[BeamDrawing, ...]:
    """Evaluate one beam, which must be free of errors, and give its drawings."""
    axes = "american" if style.system == "US" else "eurocode"
    (calc,) = evaluated("# T\n" + before + fence("beam b", *lines), axes=axes, style=style)  # type: ignore[arg-type]
    beams = [segment for segment in calc.segments if isinstance(segment, BeamResult)]
    assert beams, calc.diagnostics
    return beam_drawings(beams[0], "b", style)


@st.composite
def random_beams(draw: st.DrawFn) -> tuple[tuple[str, ...], str, Style]:
    """Lines of a beam, the section before it, and the style; trains on short beams alone, which are fast."""
    spans = draw(st.lists(st.sampled_from(("0.4 m", "3 m", "5 m", "5 m", "12.5 m")), min_size=1, max_size=12))
    length = sum(float(span.split()[0]) for span in spans)
    place = st.integers(0, 1000).map(lambda part: f"{length * part / 1000:.4g} m")
    size = st.sampled_from(("0", "1", "-1", "12.34", "-305.6", "0.0125"))
    cases = ("G", "Q", "S", "W", "Snow_drift", "T")[: draw(st.integers(1, 6))]
    lines = [f"span = {', '.join(spans)}", "section = main", "E = 210 GPa", "expansion = 12e-6 1/K"]
    lines.append(f"restrained = {draw(st.sampled_from(('yes', 'no')))}")
    x = [0.0]
    for span in spans:
        x.append(x[-1] + float(span.split()[0]))
    for number, at in enumerate(x):
        kinds = ("pin", "roller", "fixed", "spring 12 kN/mm", "spring 900 kN/m rotation 500 kN·m")
        kind = "pin" if number == 0 else "roller" if number == 1 else draw(st.sampled_from(kinds))
        settles = (
            f" settles {draw(st.integers(1, 30))} mm in S" if "S" in cases and draw(st.booleans()) else ""
        )
        lines.append(f"support {kind} at {at:.12g} m{settles}")
    lines += [f"case {case}" for case in cases]
    for _ in range(draw(st.integers(1, 30))):
        case, plane = draw(st.sampled_from(cases)), draw(st.sampled_from(("", "", "", "lateral ")))
        kind = draw(st.sampled_from(("uniform", "linear", "point", "moment", "spread", "gradient", "weight")))
        a, b = sorted((draw(place), draw(place)), key=lambda text: float(text.split()[0]))
        along = "" if float(b.split()[0]) - float(a.split()[0]) < 0.01 else f" from {a} to {b}"
        one, two = draw(size), draw(size)
        lines.append(
            f"load {case} "
            + {
                "uniform": f"{plane}uniform {one} kN/m{along}",
                "linear": f"{plane}linear {one} kN/m to {two} kN/m{along}",
                "point": f"{plane}point {one} kN at {a}",
                "moment": f"{plane}moment {one} kN·m at {a}",
                "spread": f"{plane}moment {one} kN from 0 m to {length / 2:.6g} m",
                "gradient": f"gradient {one} K{along}",
                "weight": f"self_weight 78.5 kN/m³{along}",
            }[kind]
        )
    loaded = sorted({line.split()[1] for line in lines if line.startswith("load ")})
    if "Q" in loaded and draw(st.booleans()):
        lines.append("pattern Q")
    if len(spans) <= 3 and draw(st.booleans()):
        lines.append("load T2 train 80 kN, 80 kN spaced 1.2 m")
        loaded.append("T2")
    for number in range(draw(st.integers(0, 3 if "T2" in loaded else 8))):
        terms = " + ".join(f"{draw(st.sampled_from((1.0, 1.35, 1.5)))}*{case}" for case in loaded)
        lines.append(f"combination U{number} in ULS = {terms}")
    style = draw(st.sampled_from((SI, US)))
    return tuple(lines), ANGLE if draw(st.booleans()) else MAIN, style
