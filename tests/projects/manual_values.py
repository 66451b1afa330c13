"""The values of the manual's examples, worked by hand: closed forms, and what a standard prints."""

from __future__ import annotations

from math import atan, cosh, degrees, e, fsum, log, pi, sqrt, tanh
from typing import NamedTuple

EXACT = 1e-9  # closed form against closed form: rounding alone lies between
FACET = 2e-5  # corners of that polygon lie so far outside the circle
ELEMENTS = 1e-4  # by finite elements
FIGURES = 5e-3  # three figures of a book, whose intermediate results are rounded
ROUND = 1e-6  # second moment of a circle against that of its polygon of 512 edges and the same area


class Worked(NamedTuple):
    """One value: in `unit`, with the way it was found; `within` is a relative tolerance."""

    calc: str
    name: str
    value: float
    unit: str
    how: str
    within: float = EXACT


# IPE 200 W_pl,y, cm³; IPE 300 A, cm², I_y and I_z, cm⁴: EN 10365, from memory.
W_200 = 220.6
A_300, I_Y300, I_Z300 = 53.8, 8356, 603.8
W_JOIST = 78.5 * A_300 * 1e-4  # kN/m
U1, SLS = 1.35 * 4 + 1.5 * 8, 12  # kN/m, the combinations of M-13-results
D = 151.25 * 41.25 - 45.0**2  # cm⁸, I_y I_z - I_yz² of the cleat
RANGE = sqrt((151.25 - 41.25) ** 2 / 4 + 45.0**2)  # cm⁴, radius of its circle of second moments
# the beams of M-12e-shear, kN and m
EI_CORBEL, GA_CORBEL = 11e6 * 0.1 * 0.3**3 / 12, 0.69e6 * 0.1 * 0.3 * 5 / 6
EI_DECK, FREE = 30e6 * 0.3 * 0.2**3 / 12, 10e-6 * 12 / 0.2  # free curvature α ΔT/h
PHI = 0.5 * (1 + 0.34 * 0.7 + 0.81)


def first_moments(*parts: tuple[float, float]) -> float:
    """Return the centroid of areas A at y, given as (A, y)."""
    return sum(A * y for A, y in parts) / sum(A for A, _ in parts)


def stacked(*parts: tuple[float, float, float]) -> float:
    """Return I of rectangles b wide and h high with their middles at y, given as (b, h, y), about y = 0."""
    return sum(b * h * (h**2 / 12 + y**2) for b, h, y in parts)


def saint_venant(b: float, h: float) -> tuple[float, float]:
    """Return I_t of a rectangle, b ≤ h, and τ_max for T = 1.

    Source: Timoshenko and Goodier, Theory of elasticity, article 109, from memory.
    """
    odd = range(1, 201, 2)
    I_t = h * b**3 * (1 / 3 - 64 / pi**5 * b / h * fsum(tanh(n * pi * h / (2 * b)) / n**5 for n in odd))
    lacking = 8 / pi**2 * fsum(1 / (n**2 * cosh(n * pi * h / (2 * b))) for n in odd[:20])
    return I_t, b / I_t * (1 - lacking)


# IPE 300 as an outline: flanges, web and four fillets, cm²
A_IPE300 = 2 * 15 * 1.07 + (30 - 2 * 1.07) * 0.71 + (4 - pi) * 1.5**2
# the duct of M-09e-parts: a rectangle less a circle, cm
A_HOLE = pi * 6**2
Y_DUCT = -A_HOLE * 5 / (600 - A_HOLE)
# the slab of M-09f-materials, uncracked, mm: n - 1 times each bar's area beside the rectangle
N_SLAB = 200 / 12
BARS = ((N_SLAB - 1) * 4 * pi * 100, -200.0), ((N_SLAB - 1) * 402, 210.0)
A_SLAB = 300 * 500 + BARS[0][0] + BARS[1][0]
Y_SLAB = first_moments((150000, 0), *BARS)
I_SLAB = stacked((300, 500, -Y_SLAB)) + sum(A * (y - Y_SLAB) ** 2 for A, y in BARS)
# the flitch beam, transformed to timber, cm⁴; E_steel/E_timber = 12
I_FLITCH = 2 * 10 * 40**3 / 12 + 12 * 1.2 * 30**3 / 12
# the unequal girder, mm: middles of top flange, web and bottom flange above the centroid
GIRDER = (200.0, 20.0, 240.0), (10.0, 455.0, 2.5), (300.0, 25.0, -237.5)
Y_GIRDER = first_moments(*((b * h, y) for b, h, y in GIRDER))
CENTRED = tuple((b, h, y - Y_GIRDER) for b, h, y in GIRDER)
I_TOP, I_BOTTOM = 20 * 200**3 / 12, 25 * 300**3 / 12
H_O = 240 + 237.5  # between the flanges' mid-lines
YS_GIRDER = -237.5 + H_O * I_TOP / (I_TOP + I_BOTTOM)
BETA = sum(b * h * y * (b**2 / 12 + y**2 + h**2 / 4) for b, h, y in CENTRED) / stacked(*CENTRED)
# the web of M-14c-shear, mm: by the cut, and along the mid-line
I_CUT = (165 * 320**3 - 157.5 * 290**3) / 12
I_LINE = 2 * 165 * 15 * 152.5**2 + 7.5 * 305**3 / 12
S_FLANGE = 165 * 15 * 152.5
TAU_WEB = (S_FLANGE + 7.5 * 145**2 / 2) / I_CUT * 45e3 / 7.5  # a level cut passes the web alone
TAU_TOP = S_FLANGE / I_CUT * 45e3 / 7.5
SIGMA_TOP = -60e6 * 145 / I_CUT
SIGMA_FACE, TAU_FLANGE = 60e6 * 160 / I_CUT, 45e3 * 82.5 * 152.5 / I_LINE  # q/t of half the flange
# the box of M-14d-torsion, mm
I_BOX = (120 * 200**3 - 104 * 184**3) / 12
I_BOX_LINE = 2 * 112 * 8 * 96**2 + 2 * 8 * 192**3 / 12
TAU_BOX = (
    80e3 / 16 * max((120 * 100 * 50 - 104 * 92 * 46) / I_BOX, (112 * 8 * 96 + 2 * 8 * 96**2 / 2) / I_BOX_LINE)
)
# the I of M-14f-plastic, mm: flanges 100 × 20 and 60 × 20, web 20 × 80, middles above mid-depth
TEE_I = (100.0, 20.0, 50.0), (20.0, 80.0, 0.0), (60.0, 20.0, -50.0)
Y_BJ = first_moments(*((b * h, y) for b, h, y in TEE_I))
I_BJ, C_BJ = stacked(*((b, h, y - Y_BJ) for b, h, y in TEE_I)), 60 + Y_BJ
# the timber with a plate on top of M-14e-composite, transformed, mm, from the wood's middle; n = 16
WOOD, PLATE = (140.0, 400.0, 0.0), (16 * 200.0, 8.0, 204.0)
Y_WOOD = first_moments(*((b * h, y) for b, h, y in (WOOD, PLATE)))
I_WOOD = stacked(*((b, h, y - Y_WOOD) for b, h, y in (WOOD, PLATE)))
# the cracked strip, in: 6 x² + n A_s x - n A_s d = 0
N_AS = 29000 / 3600 * 2 * pi * 0.625**2 / 4
X_STRIP = (-N_AS + sqrt(N_AS**2 + 4 * 6 * N_AS * 4)) / 12
I_STRIP = 12 * X_STRIP**3 / 3 + N_AS * (4 - X_STRIP) ** 2
# the square link, mm
A_M = 50 * log(80 / 30)
R_N = 2500 / A_M


def winkler(r: float) -> float:
    """Return the stress of the link, MPa, at the radius r, mm, under 9.5 kN and 9.5 kN · 155 mm."""
    return 9500 / 2500 + 9500 * 155 * (2500 - r * A_M) / (2500 * r * (55 * A_M - 2500))


CASES: tuple[Worked, ...] = (
    Worked("M-01-first", "w", (1.35 * 1.2 + 1.5 * 5) * 0.8, "kN/m", "(1.35 g + 1.5 q) s"),
    Worked("M-01-first", "M_Ed", 7.296 * 25 / 8, "kN·m", "w L²/8"),
    Worked("M-01-first", "M_c_Rd", W_200 * 0.275, "kN·m", "W_pl f_y"),
    Worked("M-01-first", "u", 100 * 22.8 / (W_200 * 0.275), "%", "M_Ed/M_c,Rd"),
    Worked("M-03-lines", "w_d", 1.35 * 4 + 1.5 * 6, "kN/m", "sum of two products"),
    Worked("M-04-names", "N_s", 160 * 300 / 1000, "kN", "stress times area"),
    Worked("M-04-names", "A_d", pi * 100, "mm²", "π d²/4"),
    Worked("M-04-names", "G", 120 * 9.80665, "N", "m g_n, 3rd CGPM (1901)"),
    Worked("M-05-units", "I_1", 150, "cm⁴", "10⁴ mm⁴ = 1 cm⁴"),
    Worked("M-05-units", "q_1", 3500, "Pa", "1 kN/m² = 1000 Pa"),
    Worked(
        "M-05-units",
        "M_1",
        12.5 * 4.4482216152605 * 0.3048,
        "kN·m",
        "1 lbf = 4.4482216152605 N, 1 ft = 0.3048 m",
    ),
    Worked("M-05-units", "p_1", 0.045, "", "per cent"),
    Worked("M-05-units", "θ_1", pi / 6, "", "radians"),
    Worked("M-05-units", "t_1", 9.525, "mm", "3/8 of 25.4 mm"),
    Worked("M-05-units", "b_1", 5.375 * 25.4, "mm", "25.4 mm an inch"),
    Worked("M-05-units", "h_1", 75 * 25.4, "mm", "6·12 + 3 inches"),
    Worked("M-05-units", "T_1", 293.15, "K", "0 °C = 273.15 K"),
    Worked("M-05-units", "ΔT", 25, "K", "45 - 20"),
    Worked("M-05-units", "ε_T", 3e-4, "", "α ΔT"),
    Worked("M-05-units", "F_1", 18, "kN", "3·6"),
    Worked("M-05-units", "F_2", 18000, "N", "3·6"),
    Worked("M-05-units", "s_1", 0.5, "", "sin 30°"),
    Worked("M-06-expressions", "p_1", 2.0**9, "", "^ groups to the right"),
    Worked("M-06-expressions", "p_2", -9, "", "^ binds tighter than the sign"),
    Worked("M-06-expressions", "p_3", 2 / 3, "", ""),
    Worked("M-06-expressions", "p_4", 1, "", "/ groups to the left"),
    Worked("M-06-expressions", "f_1", 12, "cm", "12² = 144"),
    Worked("M-06-expressions", "f_2", 3, "m", "3³ = 27"),
    Worked("M-06-expressions", "f_3", 4, "kN", ""),
    Worked("M-06-expressions", "f_4", 2.5, "m", ""),
    Worked("M-06-expressions", "f_5", 5, "kN", ""),
    Worked("M-06-expressions", "f_6", 0.5, "", ""),
    Worked("M-06-expressions", "f_7", 0.5, "", ""),
    Worked("M-06-expressions", "f_8", 1, "", ""),
    Worked("M-06-expressions", "f_9", 30, "deg", ""),
    Worked("M-06-expressions", "f_10", 60, "deg", ""),
    Worked("M-06-expressions", "f_11", 45, "deg", ""),
    Worked("M-06-expressions", "f_12", 135, "deg", "second quadrant"),
    Worked("M-06-expressions", "f_13", e, "", ""),
    Worked("M-06-expressions", "f_14", log(10), "", ""),
    Worked("M-06-expressions", "f_15", 3, "", ""),
    Worked("M-06-expressions", "f_16", 245, "mm", "243 is nearer to 245 than to 240"),
    Worked("M-06-expressions", "f_17", 245, "mm", ""),
    Worked("M-06-expressions", "f_18", 240, "mm", ""),
    Worked("M-06-expressions", "f_19", 20, "kN", "half-way"),
    Worked("M-06-expressions", "Φ", 1.024, "", "EN 1993-1-1 6.3.1.2"),
    Worked(
        "M-06-expressions",
        "χ",
        1 / (PHI + sqrt(PHI**2 - 0.81)),
        "",
        "EN 1993-1-1 (6.49); 0.661 in design tables",
    ),
    Worked("M-06-expressions", "f_y", 275, "MPa", "first case"),
    Worked("M-07-inputs", "P", (1.35 * 2 + 1.5 * 3) * 2, "kN", "w L/2 of the deck"),
    Worked("M-07-inputs", "g_k", 2, "kN/m", "as in M-07b-feed"),
    Worked("M-07-inputs", "M", 14.4 * 6 / 4, "kN·m", "P L/4"),
    Worked("M-07-inputs", "σ_1", 7.2 * 1 * 3 / 2 * 6e6 / (80 * 240**2), "MPa", "w x (L - x)/2 over b h²/6"),
    Worked("M-07-inputs", "k", 0.9, "", "EN 1995-1-1 Table 3.1"),
    Worked("M-09-shapes", "A_plate", 240, "cm²", "b h"),
    Worked("M-09-shapes", "A_bar", pi * 9, "cm²", "π d²/4"),
    Worked("M-09-shapes", "A_pipe", pi * (16.8**2 - 15.2**2) / 4, "cm²", "π (d² - d_i²)/4"),
    Worked("M-09-shapes", "A_hollow", 12 * 20 - 10.4 * 18.4, "cm²", "outer less inner"),
    Worked(
        "M-09-shapes",
        "A_round",
        12 * 20 - 10.4 * 18.4 - (4 - pi) * (1.6**2 - 0.8**2),
        "cm²",
        "less (4 - π)(r_o² - r_i²)",
    ),
    Worked("M-09b-open", "A_welded", 2 * 15 * 1.2 + 27.6 * 0.8, "cm²", "flanges and web"),
    Worked("M-09b-open", "A_fillet", 58.08 + (4 - pi) * 1.5**2, "cm²", "and (4 - π) r²"),
    Worked(
        "M-09b-open",
        "A_taper",
        20 * 0.75 + 4 * 4.125 * (1.13 + 0.14 * (1.875 - 2.25) / 2),
        "cm²",
        "web, and 4 outstands of mean thickness, t_f standing b/4 = 22.5 mm from the tip",
    ),
    Worked("M-09b-open", "A_girder", 20 * 2 + 30 * 2.5 + 45.5, "cm²", "flanges and web"),
    Worked("M-09b-open", "A_purlin", 20 * 0.8 + 2 * 6.7 * 1.2, "cm²", "web and flanges"),
    Worked("M-09b-open", "A_hanger", 15 * 1.5 + 13.5, "cm²", "flange and web"),
    Worked("M-09b-open", "A_cleat", 10 + 5, "cm²", "two legs"),
    Worked("M-09b-open", "A_wedge", 9 * 12 / 2, "cm²", "b h/2"),
    Worked("M-09c-placing", "A_lying", 15, "cm²", "a turn changes no area"),
    Worked("M-09c-placing", "y_lying", 65, "mm", "(-15, -15) mirrored (15, -15), turned (15, 15), at y = 50"),
    Worked("M-09-shapes", "I_plate", 10 * 24**3 / 12, "cm⁴", "b h³/12"),
    Worked("M-09-shapes", "I_bar", pi * 6**4 / 64, "cm⁴", "π d⁴/64", ROUND),
    Worked("M-09-shapes", "I_pipe", pi * (16.8**4 - 15.2**4) / 64, "cm⁴", "π (d⁴ - d_i⁴)/64", ROUND),
    Worked("M-09-shapes", "I_hollow", (12 * 20**3 - 10.4 * 18.4**3) / 12, "cm⁴", "outer less inner"),
    Worked("M-09b-open", "I_welded", (15 * 30**3 - 14.2 * 27.6**3) / 12, "cm⁴", "outer less inner"),
    Worked(
        "M-09b-open",
        "y_girder",
        (4000 * 240 - 7500 * 237.5 + 4550 * 2.5) / 16050,
        "mm",
        "first moments about mid-depth",
    ),
    Worked("M-09b-open", "I_wedge", -(9**2) * 12**2 / 72, "cm⁴", "-b² h²/72, right angle bottom left"),
    Worked("M-09b-open", "b_welded", 150, "mm", "as given"),
    Worked("M-10-rolled", "W", 366.6, "cm³", "EN 10365, from memory"),
    Worked("M-10-rolled", "I", 2492, "cm⁴", "EN 10365, from memory"),
    Worked("M-10-rolled", "x", 37.5 - 20.1, "mm", "b/2 - e, e printed to 0.1 mm", 6e-3),
    Worked("M-10b-office", "I_w300", 8870.9, "cm⁴", "as in profiles/office.csv"),
    Worked("M-10b-office", "A_w300", 58.08, "cm²", "as in profiles/office.csv"),
    # the cleat: leg 10 × 100 about (-25, 0) and leg 50 × 10 about (5, -45), in mm
    Worked("M-11-properties", "A_1", 15, "cm²", "10 + 5"),
    Worked("M-11-properties", "x_1", (-25 * 1000 + 5 * 500) / 1500, "mm", "first moments"),
    Worked("M-11-properties", "y_1", -45 * 500 / 1500, "mm", "first moments"),
    Worked("M-11-properties", "I_y1", 1000 / 12 + 10 * 1.5**2 + 5 / 12 + 5 * 3**2, "cm⁴", "parallel axes"),
    Worked("M-11-properties", "I_z1", 10 / 12 + 10 * 1**2 + 125 / 12 + 5 * 2**2, "cm⁴", "parallel axes"),
    Worked("M-11-properties", "I_yz1", -10 * 1 * 1.5 - 5 * 2 * 3, "cm⁴", "Σ A x y"),
    Worked("M-11-properties", "I_max", 96.25 + RANGE, "cm⁴", "circle of second moments"),
    Worked("M-11-properties", "I_min", 96.25 - RANGE, "cm⁴", "circle of second moments"),
    Worked("M-11-properties", "α_1", degrees(atan(90 / 110)) / 2, "deg", "tan 2α = -2 I_yz/(I_y - I_z)"),
    Worked("M-11-properties", "W_top", 151.25 / 6.5, "cm³", "I_y/65 mm"),
    Worked("M-11-properties", "W_bot", 151.25 / 3.5, "cm³", "I_y/35 mm"),
    Worked("M-11-properties", "W_y1", 151.25 / 6.5, "cm³", "the smaller"),
    Worked("M-11-properties", "W_z1", 41.25 / 4.5, "cm³", "I_z/45 mm"),
    Worked(
        "M-11-properties", "Z_y1", 7.5 * 3.75 + 1.5 * 0.75 + 6 * 2, "cm³", "halves meet 25 mm above the heel"
    ),
    Worked(
        "M-11-properties",
        "Z_z1",
        7.5 * 0.375 + 2.5 * 0.125 + 5 * 2.75,
        "cm³",
        "halves meet 7.5 mm from the back",
    ),
    Worked("M-11-properties", "Q_1", 6.5 * 3.25, "cm³", "65 mm of the leg stand above the centroid"),
    Worked("M-11-properties", "i_y1", sqrt(15125 / 15), "mm", "√(I/A)"),
    Worked("M-11-properties", "i_z1", sqrt(4125 / 15), "mm", "√(I/A)"),
    Worked("M-11-properties", "i_max", sqrt((96.25 + RANGE) / 15) * 10, "mm", "√(I/A)"),
    Worked("M-11-properties", "i_min", sqrt((96.25 - RANGE) / 15) * 10, "mm", "√(I/A)"),
    Worked("M-11-properties", "t_1", 10, "mm", "as given"),
    Worked("M-12-beam", "M_uls", (1.35 * (2.5 + W_JOIST) + 9) * 36 / 8, "kN·m", "w L²/8"),
    Worked("M-12-beam", "M_u2", (2.5 + W_JOIST + 9) * 36 / 8, "kN·m", "w L²/8"),
    Worked(
        "M-12-beam",
        "w_sls",
        5 * (8.5 + W_JOIST) * 6**4 / (384 * 2.1 * I_Y300) * 1e3,
        "mm",
        "5 w L⁴/(384 EI)",
    ),
    Worked("M-12b-loads", "R_ramp", 6 * 6 / 3, "kN", "q L/3"),
    Worked("M-12b-loads", "M_ramp", 6 * 36 / (9 * sqrt(3)), "kN·m", "q L²/(9√3)"),
    Worked("M-12b-loads", "R_crank", -12 / 6 - 3 * 2 / 6, "kN", "moments about the right end"),
    Worked("M-12b-loads", "R_twist", -2 * 3 / 6, "kN", "whole couple over L"),
    Worked("M-12c-supports", "M_bracket", -5 * 2, "kN·m", "-P L"),
    Worked("M-12c-supports", "w_bracket", 5 * 8 / (3 * 8000) * 1e3, "mm", "P L³/(3 EI)"),
    Worked("M-12c-supports", "M_fix", 10, "kN·m", "anticlockwise against P L"),
    Worked("M-12c-supports", "M_hinge", 0, "kN·m", "a hinge"),
    Worked(
        "M-12c-supports", "R_gerber", 4 * 4 / 2, "kN", "the part beyond the hinge is a simple beam of 4 m"
    ),
    Worked(
        "M-12c-supports",
        "R_spring",
        0.04 / (512 / (48 * 8000) + 1 / 2000),
        "kN",
        "5 w L⁴/(384 EI) = R (L³/(48 EI) + 1/k)",
    ),
    Worked("M-12c-supports", "w_spring", 0.02 / (512 / (48 * 8000) + 1 / 2000), "mm", "R/k"),
    Worked("M-12c-supports", "M_settled", 3 * 8000 * 0.006 / 16, "kN·m", "3 EI δ/L²"),
    Worked("M-12c-supports", "R_settled", -6 * 8000 * 0.006 / 64, "kN", "-6 EI δ/L³"),
    Worked(
        "M-12c-supports", "w_chord", 6 / (3 * sqrt(3)), "mm", "M L²/(9√3 EI) under an end couple 3 EI δ/L²"
    ),
    Worked("M-12c-supports", "θ_settled", 0.006 / 4 + 3 * 0.006 / (6 * 4), "", "δ/L + M L/(6 EI)"),
    Worked("M-12d-planes", "w_stepped", 3 * ((64 - 8) / 3 / 16 + 8 / 3 / 8), "mm", "∫ P (L - x)²/EI dx"),
    Worked(
        "M-12d-planes",
        "w_free",
        5 * 16 / (384 * 2.1) * 41.25 / D * 1e3,
        "mm",
        "5 w L⁴/384E · I_z/(I_y I_z - I_yz²)",
    ),
    Worked(
        "M-12d-planes", "w_free_lat", -5 * 16 / (384 * 2.1) * 45 / D * 1e3, "mm", "· I_yz/(I_y I_z - I_yz²)"
    ),
    Worked("M-12d-planes", "w_held", 5 * 16 / (384 * 2.1 * 151.25) * 1e3, "mm", "5 w L⁴/(384 E I_y)"),
    Worked("M-12d-planes", "M_wind", 0.4 * 36 / 8, "kN·m", "w L²/8"),
    Worked("M-12d-planes", "w_wind", 5 * 0.4 * 6**4 / (384 * 2.1 * I_Z300) * 1e3, "mm", "5 w L⁴/(384 E I_z)"),
    # two equal spans under a uniform load: M = -w L²/8 at the middle, R = 3/8, 5/4 and 3/8 of w L
    Worked(
        "M-12e-shear",
        "w_tip",
        (12 * 1.5**3 / (3 * EI_CORBEL) + 12 * 1.5 / GA_CORBEL) * 1e3,
        "mm",
        "P L³/(3 EI) + P L/(G A_s), A_s = 5/6 b h",
        ELEMENTS,
    ),
    Worked("M-12e-shear", "φ_root", 12 / GA_CORBEL, "", "P/(G A_s)", ELEMENTS),
    Worked(
        "M-12e-shear",
        "φ_tip",
        12 * 1.5**2 / (2 * EI_CORBEL) + 12 / GA_CORBEL,
        "",
        "P L²/(2 EI) + P/(G A_s)",
        ELEMENTS,
    ),
    Worked("M-12e-shear", "θ_wall", 0, "", "held"),
    Worked(
        "M-12e-shear",
        "w_mid",
        (5 * 5 * 4**4 / (384 * 1500) + (10 - 2.5) / 3000 + 2.5 / 1000) * 1e3,
        "mm",
        "5 q L⁴/(384 EI) and, of half the beam, ∫V/(G A_s) dx",
    ),
    Worked("M-12e-shear", "θ_end", 5 * 4**3 / (24 * 1500), "", "q L³/(24 EI): of bending alone"),
    Worked("M-12e-shear", "w_up", -FREE * 36 / 8 * 1e3, "mm", "-α ΔT L²/(8 h)"),
    Worked("M-12e-shear", "M_s", 0, "kN·m", "a simple beam"),
    Worked("M-12e-shear", "M_c", EI_DECK * FREE, "kN·m", "EI α ΔT/h"),
    Worked("M-12e-shear", "w_c", 0, "mm", "no curvature is left"),
    Worked("M-12e-shear", "M_mid", 1.5 * EI_DECK * FREE, "kN·m", "R L/2"),
    Worked("M-12e-shear", "R_mid", -3 * EI_DECK * FREE / 6, "kN", "R (2 L)³/(48 EI) = α ΔT (2 L)²/(8 h)"),
    Worked("M-12h-influence", "M_P", 20 * 3 * (8 - 5) / 8, "kN·m", "P a(L - x)/L"),
    Worked("M-12h-influence", "M_q", 4 * 3 * 5 / 2, "kN·m", "w ab/2"),
    Worked("M-12h-influence", "V_q", 4 * 5**2 / (2 * 8), "kN", "w b²/(2L)"),
    Worked("M-12h-influence", "V_l", -20 * 3 / 8, "kN", "-P a/L"),
    Worked("M-12h-influence", "w_P", 20 * 8**3 / (48 * 40000) * 1e3, "mm", "P L³/(48 EI)"),
    Worked("M-12h-influence", "M_B", -100 * 10 / (6 * sqrt(3)), "kN·m", "-P L/(6√3)"),
    Worked("M-12h-influence", "x_B", 10 / sqrt(3), "m", "L/√3"),
    Worked("M-12h-influence", "M_1", 6 * 0.095 * 10**2, "kN·m", "0.4·0.6/2 - 0.4/16 of w L²"),
    Worked("M-12h-influence", "M_1a", 6 * 0.07 * 10**2, "kN·m", "0.4·0.6/2 - 0.4/8 of w L²"),
    Worked("M-12h-influence", "M_1b", 6 * 0.07 * 10**2, "kN·m", "0.4·0.6/2 - 0.4/8 of w L²"),
    Worked("M-12h-influence", "R_2", 6 * 1.25 * 10, "kN", "5 w L/4"),
    Worked("M-12h-influence", "M_S", -50 * 3 / 12 * 6, "kN·m", "-P c/L at midspan, for P above the hinge"),
    Worked("M-12h-influence", "R_m", 50 * (12 + 3) / 12, "kN", "P (L + c)/L"),
    Worked("M-12g-combinations", "M_1", (1.35 * 3 + 1.5 * 4) * 8**2 / 8, "kN·m", "(6.10), snow leads"),
    Worked("M-12g-combinations", "M_2", (3 - 1.5 * 5) * 8**2 / 8, "kN·m", "(6.10), G at γ_G,inf, wind leads"),
    Worked("M-12g-combinations", "M_3", (0.85 * 1.35 * 3 + 6) * 8**2 / 8, "kN·m", "(6.10b), snow leads"),
    Worked("M-12g-combinations", "M_4", (3 + 4) * 8**2 / 8, "kN·m", "(6.14b), snow leads"),
    Worked("M-12g-combinations", "M_5", 3 * 8**2 / 8, "kN·m", "(6.16b), ψ_2 of snow and wind is 0"),
    Worked("M-12g-combinations", "M_6", (1.35 * 3 + 1.5 * 4) * 8**2 / 8, "kN·m", "snow alone"),
    Worked(
        *("M-12g-combinations", "R_f", 1.35 * 0.375 * 4 * 6 + 1.6 * 7 / 16 * 10 * 6 + 1.35 * 30 * 13 / 32),
        *("kN", "two equal spans: 3/8 gL, 7/16 qL of the own span, 13/32 P at its middle; ψ_0 of E is 1.0"),
    ),
    Worked(
        *("M-12g-combinations", "R_a", 0.375 * 4 * 6 + 50 * 13 / 32 + 0.9 * 7 / 16 * 10 * 6),
        *("kN", "(6.11b): G + A_d + ψ_1 Q in the outer span; T would relieve"),
    ),
    Worked("M-12g-combinations", "M_l", (1.2 * 3 + 1.6 * 4 + 5) * 6**2 / 8, "kN·m", "ASCE 7-16 2.3.1, 3"),
    Worked("M-12g-combinations", "M_n", (1.2 * 3 + 1.6 * 5 + 0.3 * 4) * 6**2 / 8, "kN·m", "ASCE 7-22, 2a"),
    Worked("M-12g-combinations", "M_u", (0.9 * 3 - 6) * 6**2 / 8, "kN·m", "ASCE 7-22 2.3.1, 5a"),
    Worked("M-12g-combinations", "M_s", (3 + 0.75 * (5 + 0.7 * 4)) * 6**2 / 8, "kN·m", "ASCE 7-22 2.4.1, 4a"),
    Worked("M-13-results", "M_hog", -U1 * 25 / 8, "kN·m", "-w L²/8"),
    Worked("M-13-results", "M_sag", 9 * U1 * 25 / 128, "kN·m", "9 w L²/128"),
    Worked("M-13-results", "x_sag", 3 * 5 / 8, "m", "3 L/8"),
    Worked("M-13-results", "M_2", U1 * 25 / 8, "kN·m", "hogging governs"),
    Worked("M-13-results", "V_1", 5 * U1 * 5 / 8, "kN", "5 w L/8"),
    Worked("M-13-results", "R_mid", 5 * U1 * 5 / 4, "kN", "5 w L/4"),
    Worked("M-13-results", "R_least", 5 * 4 * 5 / 4, "kN", "under G alone"),
    Worked("M-13-results", "R_u1", 3 * U1 * 5 / 8, "kN", "3 w L/8"),
    Worked("M-13-results", "M_at", U1 * 25 / 16, "kN·m", "3/8·1/2 - 1/8"),
    Worked("M-13-results", "M_least", -4 * 25 / 8, "kN·m", "the least hogging, under G alone"),
    Worked(
        "M-13-results",
        "w_sls",
        SLS * 5**4 / 12000 * (39 + 55 * sqrt(33)) / 65536 * 1e3,
        "mm",
        "propped span: x = (1 + √33)/16 L solves 8 x³ - 9 x² + 1 = 0",
    ),
    Worked("M-13-results", "φ_1", SLS * 125 / (48 * 12000), "", "w L³/(48 EI)"),
    Worked("M-13-results", "θ_s", SLS * 125 / (48 * 12000), "", "w L³/(48 EI)"),
    Worked("M-13-results", "x_0", 3 * 5 / 4, "m", "3 L/4"),
    Worked("M-13-results", "x_V", 3 * 5 / 8, "m", "3 L/8"),
    Worked("M-13-results", "C_b2", 12.5 / (2.5 + 3 / 2 + 4 / 2), "", "M/(w L²) = 1/16, 1/16, 0 and 1/8"),
    Worked("M-13-results", "C_12", sqrt(35 / (1 + 9 / 4 + 16 / 4)), "", "the same moments"),
    Worked(
        "M-13-results",
        "C_b3",
        12.5 * 9 / (2.5 * 9 + 3 * 5 + 4 * 8 + 3 * 9),
        "",
        "128 M/(w L²) = 5, 8, 9 and 9",
    ),
    Worked("M-13-results", "M_root", -20, "kN·m", "-P L"),
    Worked("M-13-results", "M_R", 20, "kN·m", "anticlockwise"),
    Worked("M-13-results", "V_root", 10, "kN", "P"),
    Worked("M-13-results", "w_tip", 10 * 8 / (3 * 4), "mm", "P L³/(3 EI)"),
    Worked("M-13-results", "φ_tip", 10 * 4 / (2 * 4000), "", "P L²/(2 EI)"),
    Worked("M-13-results", "x_w", 2, "m", "at the tip"),
    Worked("M-13-results", "V_min", 10, "kN", "constant"),
    Worked("M-14b-elastic", "σ_1", 48 / 0.96, "MPa", "M/W, W = b h²/6 = 960 cm³"),
    Worked("M-14b-elastic", "σ_2", -50, "MPa", "compression at the top"),
    Worked("M-14b-elastic", "σ_3", 25, "MPa", "half-way to the bottom"),
    Worked("M-14b-elastic", "κ_1", 50e-3 / 210 / 0.12, "1/m", "σ/(E h/2)"),
    Worked("M-14b-elastic", "R_1", 0.12 * 210 / 50e-3, "m", "1/κ"),
    Worked("M-14b-elastic", "ε_1", 50e-3 / 210, "", "σ/E"),
    Worked("M-14b-elastic", "d_1", 0, "mm", "N = 0"),
    Worked("M-14b-elastic", "σ_4", 10 + 25, "MPa", "N/A + M/W"),
    Worked("M-14b-elastic", "σ_5", 10 - 25, "MPa", "N/A - M/W"),
    Worked("M-14b-elastic", "d_2", -120 * 10 / 25, "mm", "above the centroid, depth down"),
    Worked("M-14b-elastic", "σ_6", 25 + 4 / 0.4, "MPa", "M/W_y + M_lat/W_z, W_z = 400 cm³"),
    Worked("M-14b-elastic", "θ_6", degrees(atan(4 / 24 * 2.4**2)), "deg", "tan θ = M_lat I_y/(M I_z)"),
    Worked(
        "M-14b-elastic",
        "σ_7",
        1500 * (0.45 * 15 + 0.4125 * 35) / D * 10,
        "MPa",
        "general formula, 15 left and 35 below",
    ),
    Worked(
        "M-14b-elastic",
        "σ_8",
        1500 * (0.45 * 15 - 0.4125 * 65) / D * 10,
        "MPa",
        "general formula, 15 left and 65 above",
    ),
    Worked("M-14b-elastic", "θ_7", -degrees(atan(45 / 41.25)), "deg", "tan θ = I_yz/I_z under M alone"),
    Worked("M-09-shapes", "A_strut", pi * 4 * 6, "cm²", "π b h/4"),
    Worked("M-09-shapes", "I_strut", pi * 8 * 12**3 / 64, "cm⁴", "π b h³/64", ROUND),
    Worked("M-09-shapes", "A_sill", (12 + 8) / 2 * 10, "cm²", "mean width times h"),
    Worked(
        "M-09-shapes", "y_sill", 100 * (80 + 2 * 120) / (3 * 200) - 50, "mm", "h (b_b + 2 b_t)/3(b_b + b_t)"
    ),
    Worked(
        "M-09-shapes",
        "I_sill",
        10**3 * (12**2 + 4 * 12 * 8 + 8**2) / (36 * 20),
        "cm⁴",
        "h³ (b_t² + 4 b_t b_b + b_b²)/36(b_t + b_b)",
    ),
    Worked("M-09d-strips", "A_rail", (20 + 2 * 6.7) * 0.8, "cm²", "web and flanges"),
    Worked("M-09d-strips", "I_rail", -2 * 6.7 * 0.8 * 3.75 * 9.6, "cm⁴", "flanges beyond the web, Σ A x y"),
    Worked(
        "M-09d-strips",
        "A_purlin",
        2 * (310 - 4 * (2 - pi / 2) * 4),
        "mm²",
        "t times the centreline, less (2 - π/2)(r + t/2) at each bend",
    ),
    Worked("M-09d-strips", "h_purlin", 152, "mm", "150 and a thickness"),
    Worked(
        "M-09d-strips", "A_rib", 4 * (120 + 40 + 2 * sqrt(40**2 + 60**2)), "mm²", "t times the centreline"
    ),
    Worked("M-09e-parts", "I_planks", (10 * 14**3 - 8 * 10**3) / 12, "cm⁴", "outer less inner; 16.2·10⁶ mm⁴"),
    Worked("M-09e-parts", "h_planks", 140, "mm", "20 + 100 + 20"),
    Worked("M-09e-parts", "A_top", 20, "cm²", "b h"),
    Worked("M-09e-parts", "I_top", 10 * 2**3 / 12, "cm⁴", "b h³/12"),
    Worked("M-09e-parts", "W_web", 1620 / 5, "cm³", "I/50 mm"),
    Worked("M-09e-parts", "A_net", 12 * 1.6 + 1.2 * 18.4 - 2 * 1.4 * 1.6, "cm²", "less two holes"),
    Worked("M-09e-parts", "A_fl", 12 * 1.6 - 2 * 1.4 * 1.6, "cm²", "less two holes"),
    Worked("M-09e-parts", "A_duct", 600 - A_HOLE, "cm²", "less the circle"),
    Worked("M-09e-parts", "y_duct", 10 * Y_DUCT, "mm", "first moments"),
    Worked(
        "M-09e-parts",
        "I_duct",
        20 * 30**3 / 12 + 600 * Y_DUCT**2 - pi * 6**4 / 4 - A_HOLE * (5 - Y_DUCT) ** 2,
        "cm⁴",
        "parallel axes",
        ROUND,
    ),
    Worked("M-09e-parts", "A_beam", A_IPE300, "cm²", "rectangles and (4 - π) r²"),
    Worked("M-09e-parts", "A_strong", A_IPE300 + 18 * 1.2, "cm²", "and the plate"),
    Worked("M-09f-materials", "I_f", I_FLITCH, "cm⁴", "Σ n I"),
    Worked("M-09f-materials", "n_p", 12, "", "210/17.5"),
    Worked("M-09f-materials", "W_t", I_FLITCH / 20, "cm³", "I/200 mm"),
    Worked("M-09f-materials", "W_s", I_FLITCH / (12 * 15), "cm³", "I/(n 150 mm)"),
    Worked(
        "M-09f-materials", "σ_t", 7.2, "MPa", "Megson, Structural and stress analysis, from memory", FIGURES
    ),
    Worked("M-09f-materials", "σ_s", 64.7, "MPa", "Megson, example 12.1, from memory", FIGURES),
    Worked(
        "M-09f-materials",
        "M_pl",
        (24 * 20 * 40**2 + 275 * 1.2 * 30**2) / 4e3,
        "kN·m",
        "Σ f b h²/4, one axis halves all",
    ),
    Worked("M-09f-materials", "A_slab", A_SLAB / 100, "cm²", "b h + (n - 1) A_s"),
    Worked("M-09f-materials", "I_slab", I_SLAB / 1e4, "cm⁴", "parallel axes"),
    Worked("M-09f-materials", "y_slab", Y_SLAB, "mm", "first moments"),
    Worked("M-09f-materials", "A_bars", 4 * pi, "cm²", "4 π d²/4"),
    Worked("M-09f-materials", "n_bars", N_SLAB, "", "200/12"),
    Worked("M-10-rolled", "W_us", 101, "in³", "AISC Manual Table 1-1, from memory"),
    Worked("M-11b-torsion", "I_t1", saint_venant(10, 20)[0], "cm⁴", "Saint-Venant's series"),
    Worked(
        "M-11b-torsion", "A_s1", 5 / 6 * 200, "cm²", "5/6 b h for ν = 0: Timoshenko and Goodier", ELEMENTS
    ),
    Worked("M-11b-torsion", "k_1", 200 / 6, "mm", "h/6"),
    Worked("M-11b-torsion", "k_2", 100 / 6, "mm", "b/6"),
    Worked("M-11b-torsion", "I_t2", pi * 4**3 * 6**3 / (4**2 + 6**2), "cm⁴", "π a³ c³/(a² + c²)"),
    Worked("M-11b-torsion", "I_t3", pi * (40**4 - 30**4) / 32, "cm⁴", "π (d⁴ - d_i⁴)/32"),
    Worked("M-11b-torsion", "k_3", (200**2 + 150**2) / (4 * 200), "mm", "(R² + r²)/(4 R)", ROUND),
    Worked(
        "M-11b-torsion", "x_sc", -2.0375 + 0.075 - 1.6, "in", "3 b²/(h + 6 b) = 1.6 in behind the mid-line"
    ),
    Worked("M-11b-torsion", "x_web", -2.0375 + 0.075, "in", "middle of the web"),
    Worked("M-11b-torsion", "e_sc", 1.6, "in", "Beer and Johnston, example 6.06, from memory"),
    Worked(
        "M-11b-torsion",
        "I_w1",
        0.15 * 4**3 * 6**2 / 12 * (3 * 4 + 2 * 6) / (6 * 4 + 6),
        "in^6",
        "t b³ h²/12 (3 b + 2 h)/(6 b + h): Vlasov, from memory",
    ),
    Worked("M-11b-torsion", "y_sg", YS_GIRDER, "mm", "flanges share V_lat as their second moments"),
    Worked(
        "M-11b-torsion",
        "I_w2",
        H_O**2 * I_TOP * I_BOTTOM / (I_TOP + I_BOTTOM) / 1e6,
        "cm^6",
        "h_o² I_t I_b/(I_t + I_b)",
    ),
    Worked(
        "M-11b-torsion", "β_g", BETA - 2 * (YS_GIRDER - Y_GIRDER), "mm", "∫y (x² + y²) dA of three rectangles"
    ),
    Worked("M-11b-torsion", "I_t4", 20.12, "cm⁴", "EN 10365, from memory"),
    Worked("M-11b-torsion", "I_w3", 125900, "cm⁶", "EN 10365, from memory"),
    Worked(
        "M-11b-torsion",
        "A_v1",
        A_IPE300 - 2 * 15 * 1.07 + (0.71 + 3) * 1.07,
        "cm²",
        "A - 2 b t_f + (t_w + 2 r) t_f",
    ),
    Worked("M-14c-shear", "τ_w", TAU_WEB, "MPa", "V S/(I b); 21.0 in Gere, example 5-14, from memory"),
    Worked("M-14c-shear", "τ_t", TAU_TOP, "MPa", "V S/(I b); 17.4 in Gere"),
    Worked("M-14c-shear", "σ_t", SIGMA_TOP, "MPa", "M y/I"),
    Worked("M-14c-shear", "σ_v", sqrt(SIGMA_TOP**2 + 3 * TAU_TOP**2), "MPa", "√(σ² + 3 τ²)"),
    Worked("M-14c-shear", "σ_vm", sqrt(SIGMA_FACE**2 + 3 * TAU_FLANGE**2), "MPa", "√(σ² + 3 τ²)"),
    Worked(
        "M-14c-shear",
        "σ_p",
        SIGMA_FACE / 2 + sqrt(SIGMA_FACE**2 / 4 + TAU_FLANGE**2),
        "MPa",
        "σ/2 + √(σ²/4 + τ²)",
    ),
    Worked(
        "M-14c-shear", "q_n", 500 * 100 * 20 * 60 / 16.2e6, "kN/m", "V S/I; 3704 N/m in Beer and Johnston"
    ),
    Worked("M-14c-shear", "F_n", 500 * 100 * 20 * 60 / 16.2e6 * 25, "N", "q s; 92.6 N in Beer and Johnston"),
    Worked("M-14d-torsion", "τ_r", 10e6 * 84 * 32 / (pi * (168**4 - 152**4)), "MPa", "T (d/2)/I_t", FACET),
    Worked("M-14d-torsion", "τ_b", 10e6 / (2 * 112 * 192 * 8) + TAU_BOX, "MPa", "T/(2 A_m t) + q/t"),
    Worked("M-14d-torsion", "τ_k", 1e6 * saint_venant(50, 100)[1], "MPa", "series; T/(0.246 h b²)"),
    Worked("M-14e-composite", "y_n", Y_WOOD, "mm", "first moments; 264 mm above the bottom"),
    Worked("M-14e-composite", "σ_w", 30e6 * (200 + Y_WOOD) / I_WOOD, "MPa", "M y/I; 5.36 in the exercise"),
    Worked("M-14e-composite", "σ_c", -30e6 * (200 - Y_WOOD) / I_WOOD, "MPa", "M y/I; -2.76 in the exercise"),
    Worked(
        "M-14e-composite",
        "σ_s",
        -16 * 30e6 * (208 - Y_WOOD) / I_WOOD,
        "MPa",
        "n M y/I; -46.8 in the exercise",
    ),
    Worked("M-14e-composite", "q_p", 20e3 * 16 * 1600 * (204 - Y_WOOD) / I_WOOD, "kN/m", "V n S/I"),
    Worked("M-14e-composite", "ε_s", -30e6 * (208 - Y_WOOD) / I_WOOD / 12500, "", "M y/(E I)"),
    Worked("M-14e-composite", "f_t", 24, "MPa", "as given"),
    Worked("M-14e-composite", "f_s", 235, "MPa", "as given"),
    Worked(
        "M-14f-plastic",
        "M_p",
        240e-6 * (2000 * 30 + 400 * 10 + 1200 * 30 + 1200 * 70),
        "kN·m",
        "halves meet 40 mm below the top; 44.2 in Beer and Johnston, problem 4.6, from memory",
    ),
    Worked("M-14f-plastic", "x_p", 40, "mm", "2000 + 20·20 = 2400 mm², half of the area"),
    Worked("M-14f-plastic", "u_p", 30 / 44.16, "", "M/M_pl"),
    Worked("M-14f-plastic", "φ_p", 184000 / (I_BJ / C_BJ), "", "W_pl/W_el"),
    Worked("M-14f-plastic", "M_n", 43.2 * (1 - 0.4**2), "kN·m", "M_pl (1 - n²)"),
    Worked("M-14f-plastic", "M_n0", 240e-6 * 50 * 120**2 / 4, "kN·m", "f b h²/4"),
    Worked(
        "M-14f-plastic", "c_e", 2 * 60 * sqrt(3 * (1 - 36.8 / 43.2)), "mm", "2 y_e; 80 in Beer and Johnston"
    ),
    Worked(
        "M-14f-plastic", "R_e", 0.04 * 200e3 / 240, "m", "y_e E/f; 33.3 in Beer and Johnston, from memory"
    ),
    Worked("M-14f-plastic", "M_e", 240e-6 * 50 * 120**2 / 6, "kN·m", "f b h²/6"),
    Worked("M-14f-plastic", "M_f", 43.2, "kN·m", "3/2 M_el"),
    Worked(
        "M-14f-plastic", "σ_r", 36.8 / 0.12 - 240, "MPa", "M/W - f; 66.7 in Beer and Johnston, example 4.06"
    ),
    Worked("M-14f-plastic", "σ_q", 240 - 36.8 / 0.12, "MPa", "f - M/W"),
    Worked("M-14g-cracked", "x_g", 3 * (1000 - 2000 / 3), "mm", "3 (h/2 - e)"),
    Worked("M-14g-cracked", "σ_g", -2 * 0.3 / (1.2 * 1.0), "MPa", "2 N/(b x_c)"),
    Worked("M-14g-cracked", "σ_h", -0.3 / 2.4 - 0.09 / 0.8, "MPa", "N/A - M/W"),
    Worked("M-14g-cracked", "σ_i", -0.3 / 2.4 - 0.09 / 0.8, "MPa", "N/A - M/W"),
    Worked("M-14g-cracked", "x", X_STRIP, "in", "b x²/2 = n A_s (d - x); 1.45 in Beer and Johnston"),
    Worked("M-14g-cracked", "I_c", I_STRIP, "in^4", "b x³/3 + n A_s (d - x)²; 44.4 in Beer and Johnston"),
    Worked("M-14g-cracked", "σ_c", -40 * X_STRIP / I_STRIP, "ksi", "M x/I; 1.306 in Beer and Johnston"),
    Worked(
        "M-14g-cracked",
        "σ_s",
        29 / 3.6 * 40 * (4 - X_STRIP) / I_STRIP,
        "ksi",
        "n M (d - x)/I; 18.52 in the book",
    ),
    Worked("M-14h-curved", "σ_i", winkler(30), "MPa", "Winkler; 106.2 in Boresi and Schmidt, example 9.1"),
    Worked("M-14h-curved", "σ_o", winkler(80), "MPa", "Winkler; -49.3 in Boresi and Schmidt, from memory"),
    Worked("M-14h-curved", "r_n", R_N, "mm", "A/A_m"),
    Worked("M-14h-curved", "e_n", 55 - R_N, "mm", "R_c - r_n"),
    Worked("M-14h-curved", "σ_n", 3.8 + 9500 * 155 * 6 / 50**3, "MPa", "N/A + M/W"),
    Worked(
        "M-14h-curved",
        "Δ",
        100 * ((3.8 + 9500 * 155 * 6 / 50**3) / winkler(30) - 1),
        "%",
        "over that of Winkler",
    ),
    # simple beam, a = 1 m, b = 3 m, EI = 11 GPa · 100 · 200³/12 mm⁴ = 2200/3 kN·m²
    Worked("M-15-signs", "M_s", 8 * 1 * 3 / 4, "kN·m", "P a b/L"),
    Worked("M-15-signs", "V_s", 8 * 3 / 4, "kN", "P b/L"),
    Worked("M-15-signs", "V_e", -8 * 1 / 4, "kN", "-P a/L"),
    Worked("M-15-signs", "R_s", 6, "kN", "P b/L"),
    Worked("M-15-signs", "w_s", 8 * 9 / (3 * 2200 / 3 * 4) * 1e3, "mm", "P a² b²/(3 EI L)"),
    Worked("M-15-signs", "φ_s", 8 * 3 * (16 - 9) / (6 * 2200 / 3 * 4), "", "P b (L² - b²)/(6 EI L)"),
    Worked("M-15-signs", "M_l", 4 * 1 * 3 / 4, "kN·m", "P a b/L"),
    Worked("M-15-signs", "R_l", 3, "kN", "P b/L"),
    Worked("M-15-signs", "σ_s", 10 / 20 + 6 * 6 / 4 + 3 * 6 / 2, "MPa", "N/A + M/W_y + M_lat/W_z"),
    Worked("M-16-second-route", "R_sum", 4 * 6 + 6, "kN", "the loads"),
    # values of EN 1995-1-1 Table 3.1 and EN 1991-1-3 Table 5.2 from memory
    Worked("M-24-tables", "k_1", 0.8, "", "as printed"),
    Worked("M-24-tables", "f_m_d", 0.7 * 24 / 1.3, "MPa", "k_mod f_m,k/γ_M"),
    Worked("M-24-tables", "s", 0.8 * (60 - 42) / 30 * 1.2, "kPa", "μ_1 = 0.8 (60° - α)/30° above 30°"),
    Worked("M-24-tables", "p", (12 + 9 + 5.4 + 4) / 4, "kPa", "half-way in both directions"),
    Worked("M-25-vary", "M_Ed", 8 * 6**2 / 8, "kN·m", "w L²/8"),
    Worked("M-25-vary", "M_c_Rd", 366.6 * 235 / 1000, "kN·m", "W_pl f_y; EN 10365, from memory"),
)

UTILISATIONS: dict[tuple[str, str], float | None] = {
    ("M-01-first", "bending at midspan"): 22.8 / (W_200 * 0.275),
    ("M-08-checks", "sagging"): 42 / 60,
    ("M-08-checks", "hogging, by magnitude"): 51 / 60,
    ("M-08-checks", "uplift: both sides negative"): 3 / 5,
    ("M-08-checks", "no uplift at the other end"): None,
    ("M-08-checks", "rounding"): 1.0,
    ("M-14b-elastic", "normal stress at midspan"): 50 / 235,
    ("M-14e-composite", "plate"): 16 * 30e6 * (208 - Y_WOOD) / I_WOOD / 235,
    ("M-14e-composite", "wood"): 30e6 * (200 + Y_WOOD) / I_WOOD / 24,
    ("M-24-tables", "boards"): 0.8 * 18 / 30 * 1.2 / 7.6,
    ("M-25-vary", "bending"): 36 / (366.6 * 0.235),
}
