"""The manual is built, and each value of its examples is held against one worked by hand."""

from __future__ import annotations

import json
from collections.abc import Mapping
from datetime import UTC, datetime
from math import atan, cbrt, degrees, e, log, pi, radians, sin, sqrt
from pathlib import Path

import pytest

from calcgen.evaluation.calc import Setting, evaluate_all
from calcgen.evaluation.results import DerivedRow, EvaluatedCalc, WorkingResult
from calcgen.language.document import calc_from
from calcgen.pipeline import Outcome, Request, Workshop, build
from calcgen.profiles.catalogue import builtin_catalogue, read_catalogue
from calcgen.project import load_project
from calcgen.quantities.display import Style
from calcgen.quantities.measure import Measure, dimension_of, magnitude_in, unit_size
from tests.projects.manual import MANUAL, chapters, live_kinds, shown_and_live

EXACT = 1e-9  # closed form against closed form: rounding alone lies between
ROUND = 1e-6  # second moment of a circle against that of its polygon of 512 edges and the same area

# IPE 200: W_pl,y; IPE 240: W_pl,y, I_t, I_w; IPE 300: A, I_y, I_z; HEB 160: I_y; UPN 200: e, the centroid from the
# back of the web, printed to 0.1 mm. All EN 10365, from memory.
W_200 = 220.6
A_300, I_Y300, I_Z300 = 53.81, 8356, 603.8
W_JOIST = 78.5 * A_300 * 1e-4  # kN/m
U1, SLS = 1.35 * 4 + 1.5 * 8, 12  # kN/m, the combinations of M-13-results
D = 151.25 * 41.25 - 45.0**2  # cm⁸, I_y I_z - I_yz² of the cleat
RANGE = sqrt((151.25 - 41.25) ** 2 / 4 + 45.0**2)  # cm⁴, radius of its circle of second moments
PHI = 0.5 * (1 + 0.34 * 0.7 + 0.81)

# calc, name, value, unit, worked how; a tolerance where it is not EXACT
CASES: tuple[tuple[str, str, float, str, str] | tuple[str, str, float, str, str, float], ...] = (
    ("M-01-first", "w", (1.35 * 1.2 + 1.5 * 5) * 0.8, "kN/m", "(1.35 g + 1.5 q) s"),
    ("M-01-first", "M_Ed", 7.296 * 25 / 8, "kN·m", "w L²/8"),
    ("M-01-first", "M_c_Rd", W_200 * 0.275, "kN·m", "W_pl f_y"),
    ("M-01-first", "u", 100 * 22.8 / (W_200 * 0.275), "%", "M_Ed/M_c,Rd"),
    ("M-03-lines", "w_d", 1.35 * 4 + 1.5 * 6, "kN/m", "sum of two products"),
    ("M-04-names", "N_s", 160 * 300 / 1000, "kN", "stress times area"),
    ("M-04-names", "A_d", pi * 100, "mm^2", "π d²/4"),
    ("M-04-names", "G", 120 * 9.80665, "N", "m g_n, 3rd CGPM (1901)"),
    ("M-05-units", "I_1", 150, "cm^4", "10⁴ mm⁴ = 1 cm⁴"),
    ("M-05-units", "q_1", 3500, "Pa", "1 kN/m² = 1000 Pa"),
    (
        "M-05-units",
        "M_1",
        12.5 * 4.4482216152605 * 0.3048,
        "kN·m",
        "1 lbf = 4.4482216152605 N, 1 ft = 0.3048 m",
    ),
    ("M-05-units", "p_1", 0.045, "", "per cent"),
    ("M-05-units", "θ_1", pi / 6, "", "radians"),
    ("M-05-units", "t_1", 9.525, "mm", "3/8 of 25.4 mm"),
    ("M-05-units", "b_1", 5.375 * 25.4, "mm", "25.4 mm an inch"),
    ("M-05-units", "h_1", 75 * 25.4, "mm", "6·12 + 3 inches"),
    ("M-05-units", "T_1", 293.15, "K", "0 °C = 273.15 K"),
    ("M-05-units", "ΔT", 25, "K", "45 - 20"),
    ("M-05-units", "ε_T", 3e-4, "", "α ΔT"),
    ("M-05-units", "F_1", 18, "kN", "3·6"),
    ("M-05-units", "F_2", 18000, "N", "3·6"),
    ("M-05-units", "s_1", 0.5, "", "sin 30°"),
    ("M-06-expressions", "p_1", 2.0**9, "", "^ groups to the right"),
    ("M-06-expressions", "p_2", -9, "", "^ binds tighter than the sign"),
    ("M-06-expressions", "p_3", 2 / 3, "", ""),
    ("M-06-expressions", "p_4", 1, "", "/ groups to the left"),
    ("M-06-expressions", "f_1", 12, "cm", "12² = 144"),
    ("M-06-expressions", "f_2", 3, "m", "3³ = 27"),
    ("M-06-expressions", "f_3", 4, "kN", ""),
    ("M-06-expressions", "f_4", 2.5, "m", ""),
    ("M-06-expressions", "f_5", 5, "kN", ""),
    ("M-06-expressions", "f_6", 0.5, "", ""),
    ("M-06-expressions", "f_7", 0.5, "", ""),
    ("M-06-expressions", "f_8", 1, "", ""),
    ("M-06-expressions", "f_9", 30, "deg", ""),
    ("M-06-expressions", "f_10", 60, "deg", ""),
    ("M-06-expressions", "f_11", 45, "deg", ""),
    ("M-06-expressions", "f_12", 135, "deg", "second quadrant"),
    ("M-06-expressions", "f_13", e, "", ""),
    ("M-06-expressions", "f_14", log(10), "", ""),
    ("M-06-expressions", "f_15", 3, "", ""),
    ("M-06-expressions", "f_16", 245, "mm", "243 is nearer to 245 than to 240"),
    ("M-06-expressions", "f_17", 245, "mm", ""),
    ("M-06-expressions", "f_18", 240, "mm", ""),
    ("M-06-expressions", "f_19", 20, "kN", "half-way"),
    ("M-06-expressions", "Φ", 1.024, "", "EN 1993-1-1 6.3.1.2"),
    (
        "M-06-expressions",
        "χ",
        1 / (PHI + sqrt(PHI**2 - 0.81)),
        "",
        "EN 1993-1-1 (6.49); 0.661 in design tables",
    ),
    ("M-06-expressions", "f_y", 275, "MPa", "first case"),
    ("M-07-inputs", "P", (1.35 * 2 + 1.5 * 3) * 2, "kN", "w L/2 of the deck"),
    ("M-07-inputs", "g_k", 2, "kN/m", "as in M-07-feed"),
    ("M-07-inputs", "M", 14.4 * 6 / 4, "kN·m", "P L/4"),
    ("M-09-shapes", "A_plate", 240, "cm^2", "b h"),
    ("M-09-shapes", "A_bar", pi * 9, "cm^2", "π d²/4"),
    ("M-09-shapes", "A_pipe", pi * (16.8**2 - 15.2**2) / 4, "cm^2", "π (d² - d_i²)/4"),
    ("M-09-shapes", "A_hollow", 12 * 20 - 10.4 * 18.4, "cm^2", "outer less inner"),
    (
        "M-09-shapes",
        "A_round",
        12 * 20 - 10.4 * 18.4 - (4 - pi) * (1.6**2 - 0.8**2),
        "cm^2",
        "less (4 - π)(r_o² - r_i²)",
    ),
    ("M-09-shapes", "A_welded", 2 * 15 * 1.2 + 27.6 * 0.8, "cm^2", "flanges and web"),
    ("M-09-shapes", "A_fillet", 58.08 + (4 - pi) * 1.5**2, "cm^2", "and (4 - π) r²"),
    (
        "M-09-shapes",
        "A_taper",
        20 * 0.75 + 4 * 4.125 * (1.13 + 0.14 * (1.875 - 2.25) / 2),
        "cm^2",
        "web, and 4 outstands of mean thickness, t_f standing b/4 = 22.5 mm from the tip",
    ),
    ("M-09-shapes", "A_girder", 20 * 2 + 30 * 2.5 + 45.5, "cm^2", "flanges and web"),
    ("M-09-shapes", "A_purlin", 20 * 0.8 + 2 * 6.7 * 1.2, "cm^2", "web and flanges"),
    ("M-09-shapes", "A_hanger", 15 * 1.5 + 13.5, "cm^2", "flange and web"),
    ("M-09-shapes", "A_cleat", 10 + 5, "cm^2", "two legs"),
    ("M-09-shapes", "A_wedge", 9 * 12 / 2, "cm^2", "b h/2"),
    ("M-09-shapes", "A_lying", 15, "cm^2", "a turn changes no area"),
    ("M-09-shapes", "y_lying", 65, "mm", "(-15, -15) mirrored (15, -15), turned (15, 15), at y = 50"),
    ("M-09-shapes", "I_plate", 10 * 24**3 / 12, "cm^4", "b h³/12"),
    ("M-09-shapes", "I_bar", pi * 6**4 / 64, "cm^4", "π d⁴/64", ROUND),
    ("M-09-shapes", "I_pipe", pi * (16.8**4 - 15.2**4) / 64, "cm^4", "π (d⁴ - d_i⁴)/64", ROUND),
    ("M-09-shapes", "I_hollow", (12 * 20**3 - 10.4 * 18.4**3) / 12, "cm^4", "outer less inner"),
    ("M-09-shapes", "I_welded", (15 * 30**3 - 14.2 * 27.6**3) / 12, "cm^4", "outer less inner"),
    (
        "M-09-shapes",
        "y_girder",
        (4000 * 240 - 7500 * 237.5 + 4550 * 2.5) / 16050,
        "mm",
        "first moments about mid-depth",
    ),
    ("M-09-shapes", "I_wedge", -(9**2) * 12**2 / 72, "cm^4", "-b² h²/72, right angle bottom left"),
    ("M-09-shapes", "b_welded", 150, "mm", "as given"),
    ("M-10-rolled", "W", 366.6, "cm^3", "EN 10365, from memory"),
    ("M-10-rolled", "I", 2492, "cm^4", "EN 10365, from memory"),
    ("M-10-rolled", "x", 37.5 - 20.1, "mm", "b/2 - e, e printed to 0.1 mm", 6e-3),
    ("M-10-rolled", "I_w300", 8870.9, "cm^4", "as in profiles/office.csv"),
    ("M-10-rolled", "A_w300", 58.08, "cm^2", "as in profiles/office.csv"),
    # the cleat: leg 10 × 100 about (-25, 0) and leg 50 × 10 about (5, -45), in mm
    ("M-11-properties", "A_1", 15, "cm^2", "10 + 5"),
    ("M-11-properties", "x_1", (-25 * 1000 + 5 * 500) / 1500, "mm", "first moments"),
    ("M-11-properties", "y_1", -45 * 500 / 1500, "mm", "first moments"),
    ("M-11-properties", "I_y1", 1000 / 12 + 10 * 1.5**2 + 5 / 12 + 5 * 3**2, "cm^4", "parallel axes"),
    ("M-11-properties", "I_z1", 10 / 12 + 10 * 1**2 + 125 / 12 + 5 * 2**2, "cm^4", "parallel axes"),
    ("M-11-properties", "I_yz1", -10 * 1 * 1.5 - 5 * 2 * 3, "cm^4", "Σ A x y"),
    ("M-11-properties", "I_max", 96.25 + RANGE, "cm^4", "circle of second moments"),
    ("M-11-properties", "I_min", 96.25 - RANGE, "cm^4", "circle of second moments"),
    ("M-11-properties", "α_1", degrees(atan(90 / 110)) / 2, "deg", "tan 2α = -2 I_yz/(I_y - I_z)"),
    ("M-11-properties", "W_top", 151.25 / 6.5, "cm^3", "I_y/65 mm"),
    ("M-11-properties", "W_bot", 151.25 / 3.5, "cm^3", "I_y/35 mm"),
    ("M-11-properties", "W_y1", 151.25 / 6.5, "cm^3", "the smaller"),
    ("M-11-properties", "W_z1", 41.25 / 4.5, "cm^3", "I_z/45 mm"),
    ("M-11-properties", "Z_y1", 7.5 * 3.75 + 1.5 * 0.75 + 6 * 2, "cm^3", "halves meet 25 mm above the heel"),
    (
        "M-11-properties",
        "Z_z1",
        7.5 * 0.375 + 2.5 * 0.125 + 5 * 2.75,
        "cm^3",
        "halves meet 7.5 mm from the back",
    ),
    ("M-11-properties", "Q_1", 6.5 * 3.25, "cm^3", "65 mm of the leg stand above the centroid"),
    ("M-11-properties", "i_y1", sqrt(15125 / 15), "mm", "√(I/A)"),
    ("M-11-properties", "i_z1", sqrt(4125 / 15), "mm", "√(I/A)"),
    ("M-11-properties", "i_max", sqrt((96.25 + RANGE) / 15) * 10, "mm", "√(I/A)"),
    ("M-11-properties", "i_min", sqrt((96.25 - RANGE) / 15) * 10, "mm", "√(I/A)"),
    ("M-11-properties", "I_t1", 12.88, "cm^4", "EN 10365, from memory", 2e-3),
    ("M-11-properties", "I_w1", 37390, "cm^6", "EN 10365, from memory", 2e-3),
    ("M-11-properties", "t_1", 10, "mm", "as given"),
    ("M-12-beam", "M_uls", (1.35 * (2.5 + W_JOIST) + 9) * 36 / 8, "kN·m", "w L²/8", 2e-4),
    ("M-12-beam", "M_u2", (2.5 + W_JOIST + 9) * 36 / 8, "kN·m", "w L²/8", 2e-4),
    (
        "M-12-beam",
        "w_sls",
        5 * (8.5 + W_JOIST) * 6**4 / (384 * 2.1 * I_Y300) * 1e3,
        "mm",
        "5 w L⁴/(384 EI)",
        2e-4,
    ),
    ("M-12-beam", "R_ramp", 6 * 6 / 3, "kN", "q L/3"),
    ("M-12-beam", "M_ramp", 6 * 36 / (9 * sqrt(3)), "kN·m", "q L²/(9√3)"),
    ("M-12-beam", "R_crank", -12 / 6 - 3 * 2 / 6, "kN", "moments about the right end"),
    ("M-12-beam", "R_twist", -2 * 3 / 6, "kN", "whole couple over L"),
    ("M-12-beam", "M_bracket", -5 * 2, "kN·m", "-P L"),
    ("M-12-beam", "w_bracket", 5 * 8 / (3 * 8000) * 1e3, "mm", "P L³/(3 EI)"),
    ("M-12-beam", "M_fix", 10, "kN·m", "anticlockwise against P L"),
    ("M-12-beam", "M_hinge", 0, "kN·m", "a hinge"),
    ("M-12-beam", "R_gerber", 4 * 4 / 2, "kN", "the part beyond the hinge is a simple beam of 4 m"),
    (
        "M-12-beam",
        "R_spring",
        0.04 / (512 / (48 * 8000) + 1 / 2000),
        "kN",
        "5 w L⁴/(384 EI) = R (L³/(48 EI) + 1/k)",
    ),
    ("M-12-beam", "w_spring", 0.02 / (512 / (48 * 8000) + 1 / 2000), "mm", "R/k"),
    ("M-12-beam", "M_settled", 3 * 8000 * 0.006 / 16, "kN·m", "3 EI δ/L²"),
    ("M-12-beam", "R_settled", -6 * 8000 * 0.006 / 64, "kN", "-6 EI δ/L³"),
    ("M-12-beam", "w_stepped", 3 * ((64 - 8) / 3 / 16 + 8 / 3 / 8), "mm", "∫ P (L - x)²/EI dx"),
    (
        "M-12-beam",
        "w_free",
        5 * 16 / (384 * 2.1) * 41.25 / D * 1e3,
        "mm",
        "5 w L⁴/384E · I_z/(I_y I_z - I_yz²)",
    ),
    ("M-12-beam", "w_free_lat", -5 * 16 / (384 * 2.1) * 45 / D * 1e3, "mm", "· I_yz/(I_y I_z - I_yz²)"),
    ("M-12-beam", "w_held", 5 * 16 / (384 * 2.1 * 151.25) * 1e3, "mm", "5 w L⁴/(384 E I_y)"),
    ("M-12-beam", "M_wind", 0.4 * 36 / 8, "kN·m", "w L²/8"),
    ("M-12-beam", "w_wind", 5 * 0.4 * 6**4 / (384 * 2.1 * I_Z300) * 1e3, "mm", "5 w L⁴/(384 E I_z)", 2e-4),
    # two equal spans under a uniform load: M = -w L²/8 at the middle, R = 3/8, 5/4 and 3/8 of w L
    ("M-13-results", "M_hog", -U1 * 25 / 8, "kN·m", "-w L²/8"),
    ("M-13-results", "M_sag", 9 * U1 * 25 / 128, "kN·m", "9 w L²/128"),
    ("M-13-results", "x_sag", 3 * 5 / 8, "m", "3 L/8"),
    ("M-13-results", "M_2", U1 * 25 / 8, "kN·m", "hogging governs"),
    ("M-13-results", "V_1", 5 * U1 * 5 / 8, "kN", "5 w L/8"),
    ("M-13-results", "R_mid", 5 * U1 * 5 / 4, "kN", "5 w L/4"),
    ("M-13-results", "R_least", 5 * 4 * 5 / 4, "kN", "under G alone"),
    ("M-13-results", "R_u1", 3 * U1 * 5 / 8, "kN", "3 w L/8"),
    ("M-13-results", "M_at", U1 * 25 / 16, "kN·m", "3/8·1/2 - 1/8"),
    ("M-13-results", "M_least", -4 * 25 / 8, "kN·m", "the least hogging, under G alone"),
    (
        "M-13-results",
        "w_sls",
        SLS * 5**4 / 12000 * (39 + 55 * sqrt(33)) / 65536 * 1e3,
        "mm",
        "propped span: x = (1 + √33)/16 L solves 8 x³ - 9 x² + 1 = 0",
    ),
    ("M-13-results", "φ_1", SLS * 125 / (48 * 12000), "", "w L³/(48 EI)"),
    ("M-13-results", "M_root", -20, "kN·m", "-P L"),
    ("M-13-results", "M_R", 20, "kN·m", "anticlockwise"),
    ("M-13-results", "V_root", 10, "kN", "P"),
    ("M-13-results", "w_tip", 10 * 8 / (3 * 4), "mm", "P L³/(3 EI)"),
    ("M-13-results", "φ_tip", 10 * 4 / (2 * 4000), "", "P L²/(2 EI)"),
    ("M-13-results", "x_w", 2, "m", "at the tip"),
    ("M-13-results", "V_min", 10, "kN", "constant"),
    ("M-14-stress", "σ_1", 48 / 0.96, "MPa", "M/W, W = b h²/6 = 960 cm³"),
    ("M-14-stress", "σ_2", -50, "MPa", "compression at the top"),
    ("M-14-stress", "σ_3", 25, "MPa", "half-way to the bottom"),
    ("M-14-stress", "κ_1", 50e-3 / 210 / 0.12, "1/m", "σ/(E h/2)"),
    ("M-14-stress", "R_1", 0.12 * 210 / 50e-3, "m", "1/κ"),
    ("M-14-stress", "ε_1", 50e-3 / 210, "", "σ/E"),
    ("M-14-stress", "d_1", 0, "mm", "N = 0"),
    ("M-14-stress", "σ_4", 10 + 25, "MPa", "N/A + M/W"),
    ("M-14-stress", "σ_5", 10 - 25, "MPa", "N/A - M/W"),
    ("M-14-stress", "d_2", -120 * 10 / 25, "mm", "above the centroid, depth down"),
    ("M-14-stress", "σ_6", 25 + 4 / 0.4, "MPa", "M/W_y + M_lat/W_z, W_z = 400 cm³"),
    ("M-14-stress", "θ_6", degrees(atan(4 / 24 * 2.4**2)), "deg", "tan θ = M_lat I_y/(M I_z)"),
    (
        "M-14-stress",
        "σ_7",
        1500 * (0.45 * 15 + 0.4125 * 35) / D * 10,
        "MPa",
        "general formula, 15 left and 35 below",
    ),
    (
        "M-14-stress",
        "σ_8",
        1500 * (0.45 * 15 - 0.4125 * 65) / D * 10,
        "MPa",
        "general formula, 15 left and 65 above",
    ),
    ("M-14-stress", "θ_7", -degrees(atan(45 / 41.25)), "deg", "tan θ = I_yz/I_z under M alone"),
    # simple beam, a = 1 m, b = 3 m, EI = 11 GPa · 100 · 200³/12 mm⁴ = 2200/3 kN·m²
    ("M-15-signs", "M_s", 8 * 1 * 3 / 4, "kN·m", "P a b/L"),
    ("M-15-signs", "V_s", 8 * 3 / 4, "kN", "P b/L"),
    ("M-15-signs", "V_e", -8 * 1 / 4, "kN", "-P a/L"),
    ("M-15-signs", "R_s", 6, "kN", "P b/L"),
    ("M-15-signs", "w_s", 8 * 9 / (3 * 2200 / 3 * 4) * 1e3, "mm", "P a² b²/(3 EI L)"),
    ("M-15-signs", "φ_s", 8 * 3 * (16 - 9) / (6 * 2200 / 3 * 4), "", "P b (L² - b²)/(6 EI L)"),
    ("M-15-signs", "M_l", 4 * 1 * 3 / 4, "kN·m", "P a b/L"),
    ("M-15-signs", "R_l", 3, "kN", "P b/L"),
    ("M-15-signs", "σ_s", 10 / 20 + 6 * 6 / 4 + 3 * 6 / 2, "MPa", "N/A + M/W_y + M_lat/W_z"),
    ("M-16-second-route", "R_sum", 4 * 6 + 6, "kN", "the loads"),
)

UTILISATIONS: dict[tuple[str, str], float | None] = {
    ("M-01-first", "bending at midspan"): 22.8 / (W_200 * 0.275),
    ("M-08-checks", "sagging"): 42 / 60,
    ("M-08-checks", "hogging, by magnitude"): 51 / 60,
    ("M-08-checks", "uplift: both sides negative"): 3 / 5,
    ("M-08-checks", "no uplift at the other end"): None,
    ("M-08-checks", "rounding"): 1.0,
    ("M-14-stress", "normal stress at midspan"): 50 / 235,
    ("M-16-second-route", "the loads are not exceeded"): 30 / 30.001,
    ("M-16-second-route", "and nothing is lost"): 29.999 / 30,
}


@pytest.fixture(scope="module")
def calcs() -> Mapping[str, EvaluatedCalc]:
    files, found = load_project(MANUAL)
    assert found == ()
    assert files.project is not None
    catalogue = builtin_catalogue()
    for source in files.profiles:
        profiles, faults = read_catalogue(source.path, source.text)
        catalogue, twice = catalogue.joined(profiles)
        assert (*faults, *twice) == ()
    p = files.project
    style = Style(p.units, p.digits, p.depth, p.preferred_units)
    setting = Setting(p.axes, style, catalogue, frozenset(files.references))
    return {c.number: c for c in evaluate_all([calc_from(s) for s in files.calcs], setting)}


@pytest.mark.parametrize("case", CASES, ids=lambda case: f"{case[0]} {case[1]}")
def test_values_are_those_worked_by_hand(
    calcs: Mapping[str, EvaluatedCalc],
    case: tuple[str, str, float, str, str] | tuple[str, str, float, str, str, float],
) -> None:
    calc, name, value, unit = case[:4]
    found = calcs[calc].values[name][0]
    assert isinstance(found, Measure)
    assert found.dimension == dimension_of(unit_size(unit_text(unit)))
    tolerance = case[5] if len(case) == 6 else EXACT
    assert magnitude_in(found, unit_text(unit)) == pytest.approx(value, rel=tolerance, abs=1e-12)


def unit_text(unit: str) -> str:
    """Return a unit in the program's own form."""
    return unit.replace("^2", "²").replace("^3", "³").replace("^4", "⁴").replace("^6", "⁶")


def test_every_derived_value_is_worked_by_hand(calcs: Mapping[str, EvaluatedCalc]) -> None:
    derived = {
        (number, row.name)
        for number, calc in calcs.items()
        for block in calc.segments
        if isinstance(block, WorkingResult)
        for row in block.rows
        if isinstance(row, DerivedRow)
    }
    assert derived <= {(calc, name) for calc, name, *_ in CASES}


def test_every_check_is_worked_by_hand(calcs: Mapping[str, EvaluatedCalc]) -> None:
    found = {(n, check.label): check.utilisation for n, calc in calcs.items() for check in calc.checks}
    assert found == pytest.approx(UTILISATIONS, rel=EXACT)
    assert all(check.satisfied for calc in calcs.values() for check in calc.checks)


def test_the_manual_has_no_diagnostics(calcs: Mapping[str, EvaluatedCalc]) -> None:
    assert [(d.source.path, d.line, d.message) for c in calcs.values() for d in c.diagnostics] == []


@pytest.mark.parametrize("chapter", chapters())
def test_the_source_shown_is_that_of_the_live_blocks(chapter: str) -> None:
    pairs = shown_and_live(chapter)
    for shown, live in pairs:
        assert shown == live
    shown_blocks = [kind for shown, _ in pairs for kind in live_kinds(shown)]
    assert live_kinds(chapters()[chapter]) == shown_blocks


def test_other_files_of_the_project_are_shown_as_they_are() -> None:
    for path, chapter in (("project.toml", "M-02-project"), ("profiles/office.csv", "M-10-rolled")):
        assert f"\n{(MANUAL / path).read_text(encoding='utf-8')}```\n" in chapters()[chapter]


@pytest.fixture(scope="module")
def package(tmp_path_factory: pytest.TempPathFactory) -> tuple[Outcome, Path]:
    out = tmp_path_factory.mktemp("manual") / "package"
    request = Request(MANUAL, out, datetime(2026, 12, 1, tzinfo=UTC), "A. Reed", records=False, durable=False)
    return build(request, Workshop()), out


def test_the_manual_builds(package: tuple[Outcome, Path]) -> None:
    outcome, out = package
    assert outcome.published
    assert outcome.diagnostics == ()
    assert all((out / f"{chapter}.html").is_file() for chapter in chapters())


def test_the_package_gives_the_same_values(
    package: tuple[Outcome, Path], calcs: Mapping[str, EvaluatedCalc]
) -> None:
    written = json.loads((package[1] / "results.json").read_text(encoding="utf-8"))["calcs"]
    for calc, name, *_ in CASES:
        value = calcs[calc].values[name][0]
        assert isinstance(value, Measure)
        row = written[calc]["values"].get(name) or written[calc]["inputs"][name]
        assert magnitude_in(value, row["unit"]) == pytest.approx(row["value"], rel=1e-11, abs=1e-15)
