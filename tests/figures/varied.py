"""Invented drawings of calcs repeated over one input."""

from dataclasses import replace

from calcgen.figures.vary import Panel, Trial, VaryDrawing

_SPANS = [4 + 0.5 * n for n in range(11)]

SPANS = VaryDrawing(
    ident="spans",
    title="this calc over L",
    axis="L, m",
    panels=(Panel("M_Ed/M_c_Rd", 1.0), Panel("stringer.SLS.w_max, mm")),
    trials=tuple(Trial(x, (x**2 / 60, 0.02 * x**4)) for x in _SPANS),
    present=6.0,
    present_label="L = 6.000 m in this calc",
)
GAPS = replace(
    SPANS,
    ident="gaps",
    trials=tuple(
        replace(t, values=(None if 5.2 < t.x < 6.8 or t.x == 8.0 else t.values[0], None))
        for t in SPANS.trials
    ),
    present=None,
)
SECTIONS_TRIED = VaryDrawing(
    ident="tried",
    title="this calc over IPE *",
    axis="mass, kg/m",
    panels=(Panel("M_Ed/M_c_Rd", 1.0),),
    trials=tuple(
        Trial(mass, (30 / mass,), fulfils=mass > 30, ringed=mass == 36.1)
        for mass in (12.9, 18.8, 26.2, 30.0, 36.1, 42.2, 57.1)
    ),
    joined=False,
    present=42.2,
    present_label="IPE 300 in this calc",
    note="ringed: IPE 270, 36.10 kg/m, the lightest that satisfies every check",
)
CONSTANT = replace(
    SPANS, ident="constant", trials=tuple(Trial(x, (0.0, -250.0)) for x in _SPANS), limit_label="the limit"
)
SMALL_AND_LARGE = replace(
    SPANS,
    ident="small-and-large",
    axis="a quantity whose name is as long as a line can be and longer than that, m",
    panels=(
        Panel("min(M_Ed/M_c_Rd, N_Ed/N_c_Rd)*(1 + a_very_long_name_of_a_factor)^2/sqrt(another_one)"),
        Panel("b, 1/m"),
    ),
    trials=tuple(Trial(1e-9 * x, (-1e-8 * x, 1e9 * x**3)) for x in _SPANS),
    present=6e-9,
)
VARIED = {
    "spans": SPANS,
    "gaps": GAPS,
    "sections": SECTIONS_TRIED,
    "constant": CONSTANT,
    "small and large": SMALL_AND_LARGE,
}
