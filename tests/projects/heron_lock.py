"""The values of `projects/heron-lock` worked by hand, in kN and m. Section figures: EN 10365, from memory."""

from __future__ import annotations

from math import cos, log, pi, radians, sin, sqrt

import numpy as np

from tests.projects.by_hand import (
    EXACT,
    FACETS,
    GRID,
    Angle,
    Overhang,
    ThreeSpans,
    Worked,
    corner_pressure,
    cracked,
    curved,
    highest,
    sag,
    two_span_point,
)

E = 210e6  # kN/m²
F_Y = 275e3  # kN/m²
G, Q = 1.35, 1.5  # factors


# W-07, IPE 220: A 33.4 cm², I_y 2772 cm⁴, W_pl,y 285.4 cm³, 220 x 110 x 5.9 x 9.2, r 12 mm
_g = 78.5 * 33.4e-4 + 0.38 * 0.9
_q = 5.0 * 0.9
_EI = E * 2772e-8
_U1 = Overhang(6.0, 1.2, G * _g + Q * _q, G * _g)
_U2 = Overhang(6.0, 1.2, G * _g + Q * _q, G * _g + Q * _q)
_EQU = Overhang(6.0, 1.2, 0.9 * _g, 0.9 * _g + Q * _q)
_S1, _S2 = Overhang(6.0, 1.2, _g + _q, _g), Overhang(6.0, 1.2, _g, _g + _q)
_GK, _QK = Overhang(6.0, 1.2, _g, _g), Overhang(6.0, 1.2, _q, _q)
_A_V = 33.4e-4 - 2 * 0.11 * 0.0092 + (0.0059 + 0.024) * 0.0092

W_07 = (
    Worked("W-07", "M_Ed", _U1.M_span, "kN·m", "R_1²/2w, most in the span with the overhang unloaded"),
    Worked("W-07", "M_c_Rd", 285.4e-6 * F_Y, "kN·m", "W_pl f_y"),
    Worked("W-07", "M_P", 1.5 * 4 * 6 / 4, "kN·m", "P L/4"),
    Worked("W-07", "V_Ed", -_U2.V_left, "kN", "left of the east trestle, all loaded"),
    Worked("W-07", "V_pl_Rd", _A_V * F_Y / sqrt(3), "kN", "EN 1993-1-1 6.2.6"),
    Worked("W-07", "w_span", _S1.w_span(_EI) * 1e3, "mm", "double integration", GRID),
    Worked("W-07", "tip_up", -_S1.w_tip(_EI) * 1e3, "mm", "slope at the trestle times a, less the sag of g"),
    Worked("W-07", "tip_down", _S2.w_tip(_EI) * 1e3, "mm", "the same, overhang loaded"),
)

# W-12, HEA 140: A 31.4 cm², I_y 1033 cm⁴, W_pl,y 173.5 cm³, 133 x 140 x 5.5 x 8.5, r 12 mm
_own = 78.5 * 31.4e-4
_mid = G * _GK.R_2 + Q * _QK.R_2
_out = G * _GK.R_2 + Q * _QK.R_2 / 2
_mid_k, _out_k = _GK.R_2 + _QK.R_2, _GK.R_2 + _QK.R_2 / 2
_A_V12 = 31.4e-4 - 2 * 0.14 * 0.0085 + (0.0055 + 0.024) * 0.0085
_h_w = 0.133 - 2 * 0.0085
_l_y = 0.080 + 2 * 0.0085 * (1 + sqrt(0.14 / 0.0055))
_F_cr = 0.9 * (6 + 2 * (_h_w / 2.4) ** 2) * E * 0.0055**3 / _h_w

W_12 = (
    Worked("W-12", "R_G", _GK.R_2, "kN", "g (L + a)²/2L"),
    Worked("W-12", "R_Q", 4.5 * 7.2**2 / 12, "kN", "q (L + a)²/2L"),
    Worked("W-12", "M_Ed", _mid * 0.6 + _out * 0.3 + G * _own * 0.72, "kN·m", "P L/4 + P_1 e + g L²/8"),
    Worked("W-12", "M_c_Rd", 173.5e-6 * F_Y, "kN·m", "W_pl f_y"),
    Worked("W-12", "V_Ed", _mid / 2 + _out + G * _own * 1.2, "kN", "half of all loads"),
    Worked("W-12", "V_pl_Rd", _A_V12 * F_Y / sqrt(3), "kN", "EN 1993-1-1 6.2.6"),
    Worked("W-12", "F_cr", _F_cr, "kN", "EN 1993-1-5 6.4"),
    Worked("W-12", "λ_F", sqrt(_l_y * 0.0055 * F_Y / _F_cr), "", "EN 1993-1-5 6.4"),
    Worked("W-12", "F_Rd", _l_y * 0.0055 * F_Y, "kN", "EN 1993-1-5 6.2, no reduction below 0.5"),
    Worked(
        "W-12",
        "w_max",
        (_mid_k * 2.4**3 / 48 + _out_k * 0.3 * (3 * 2.4**2 - 4 * 0.3**2) / 24 + 5 * _own * 2.4**4 / 384)
        / (E * 1033e-8)
        * 1e3,
        "mm",
        "P L³/48 + P_1 e (3L² - 4e²)/24 + 5 g L⁴/384, over EI",
    ),
)

# B-03, angle 150 x 90 x 12, r 12 and 6 mm, in m
_A, _x, _y, _I_h, _I_v, _I_hv = Angle(0.150, 0.090, 0.012, 0.012, 0.006).properties()
_gb = 78.5 * _A + 1.6 * 1.5
_M_y = -(G * _gb * 1.6**2 / 2 + Q * 1.5 * 1.6)
_M_z = -Q * 0.6 * 1.6
# σ = k_x x + k_y y with ∫σ x dA = M_lat and -∫σ y dA = M
_k_x, _k_y = np.linalg.solve([[_I_v, _I_hv], [-_I_hv, -_I_h]], [_M_z, _M_y])
_area = _gb * 1.6**4 / 8 + 1.5 * 1.6**3 / 3  # first moment of M about the tip
# E I u = ∫M x dx in matrix form: the tip moves by (1/E) [∫x² ∫xy; ∫xy ∫y²]⁻¹ (0, -area), x right and y up
_right, _up = np.linalg.solve([[_I_v, _I_hv], [_I_hv, _I_h]], [0.0, -_area]) / E
_W_TOP = _I_h / (0.150 - _y)

B_03 = (
    Worked("B-03", "M_y_Ed", _M_y, "kN·m", "-(g L²/2 + Q L)", FACETS),
    Worked("B-03", "M_z_Ed", _M_z, "kN·m", "-H L, tension on the left"),
    Worked("B-03", "σ_simple", -_M_y / _W_TOP / 1e3, "MPa", "M/W_el", FACETS),
    Worked("B-03", "τ_Ed", 1.5 * (G * _gb * 1.6 + Q * 1.5) / 1.8e-3 / 1e3, "MPa", "1.5 V/(h t)", FACETS),
    Worked("B-03", "w_tip", -_up * 1e3, "mm", "general formula", FACETS),
    Worked("B-03", "v_tip", _right * 1e3, "mm", "general formula, to the left", FACETS),
)
STRESSES = {
    "toe": (_k_x * (0.006 - _x) + _k_y * (0.150 - _y)) / 1e3,
    "heel": (_k_x * -_x + _k_y * -_y) / 1e3,
    "end": (_k_x * (0.090 - _x) + _k_y * (0.006 - _y)) / 1e3,
}
"""MPa at the points of the stress block, from the equilibrium of a plane stress."""

# D-04, board 195 x 50 mm on two spans of 0.8 m
_W_B, _EI_B = 0.195 * 0.05**2 / 6, 11e6 * 0.195 * 0.05**3 / 12
_g4, _q4, _P, _a = 5.0 * 0.195 * 0.05, 5.0 * 0.195, 4.0, 0.43 * 0.8
_M_B, _M_Bj = two_span_point(_P, _a, 0.8), two_span_point(_P, 0.7, 0.8)
_M_P = Q * (_P * _a * (0.8 - _a) / 0.8 + _M_B * _a / 0.8) + G * _g4 * (3 / 8 * 0.8 * _a - _a**2 / 2)
_V_P = Q * (_P * 0.7 / 0.8 - _M_Bj / 0.8) + G * _g4 * 5 / 8 * 0.8
_R_P = Q * (_P * 0.7 / 0.8 - 2 * _M_Bj / 0.8) + G * _g4 * 1.25 * 0.8
_s = 0.42 * 0.8
_w_G = _g4 * _s * (0.8**3 - 3 * 0.8 * _s**2 + 2 * _s**3) / 48 / _EI_B
_w_Q = (
    _q4 * _s * (0.8**3 - 2 * 0.8 * _s**2 + _s**3) / 24 - _q4 * 0.8**2 / 16 * _s * (0.8**2 - _s**2) / (6 * 0.8)
) / _EI_B

D_04 = (
    Worked("D-04", "k_h", 3**0.2, "", "(150/50)^0.2"),
    Worked("D-04", "f_m_d", 0.7 * 3**0.2 * 24 / 1.3, "MPa", "EN 1995-1-1 2.4.1"),
    Worked("D-04", "σ_m_d", _M_P / _W_B / 1e3, "MPa", "under the load: P a b/L + M_B a/L, and g"),
    Worked("D-04", "τ_d", 1.5 * _V_P / (0.67 * 0.195 * 0.05) / 1e3, "MPa", "P a/L - M_B/L, and 5/8 g L"),
    Worked("D-04", "σ_c90_d", _R_P / (0.195 * 0.135) / 1e3, "MPa", "P a/L - 2 M_B/L, and 5/4 g L"),
    Worked("D-04", "R_up", -Q * _M_B / 0.8 - _g4 * 3 / 8 * 0.8, "kN", "M_B/L less 3/8 g L, g at 1.0"),
    Worked("D-04", "w_fin", (3 * _w_G + 2.2 * _w_Q) * 1e3, "mm", "1 + k_def, and 1 + ψ_2 k_def"),
)

# P-05, IPE 180: A 23.9 cm², I_y 1317 cm⁴, W_el,y 146.3 cm³
_L, _EI5 = 5.6, E * 1317e-8
_g5, _q5 = 0.45 * 1.3 + 78.5 * 23.9e-4, 5.0 * 1.3
_w5 = G * _g5 + Q * _q5
_M_set = 1.2 * 3 * _EI5 * 0.008 / _L**2
_M_5 = _w5 * _L**2 / 8 + _M_set
_x5 = _L * (15 - sqrt(33)) / 16

P_05 = (
    Worked("P-05", "M_Ed", _M_5, "kN·m", "w L²/8 + 3EIδ/L²"),
    Worked("P-05", "M_set", _M_set, "kN·m", "1.2 times 3EIδ/L²"),
    Worked("P-05", "M_el_Rd", 146.3e-6 * F_Y, "kN·m", "W_el f_y"),
    Worked("P-05", "q_adm", 5 - (_M_5 - 146.3e-6 * F_Y) * 8 / (_L**2 * Q * 1.3), "kPa", "solved for q"),
    Worked("P-05", "q_post", 4.0, "kPa", "down to half a kPa"),
    Worked("P-05", "M_f_Ed", 9 / 128 * _w5 * _L**2, "kN·m", "9 w L²/128, prop as built"),
    Worked("P-05", "V_Ed", 5 / 8 * _w5 * _L + _M_set / _L, "kN", "5 w L/8 + 3EIδ/L³"),
    Worked(
        "P-05",
        "w_max",
        (_g5 + _q5) * _x5**2 * (_L - _x5) * (3 * _L - 2 * _x5) / (48 * _EI5) * 1e3,
        "mm",
        "w x² (L - x)(3L - 2x)/48EI at x = (15 - √33) L/16 from the wall",
    ),
)

# H-06, tube 60.3 x 5
_d, _i = 0.0603, 0.0503
H_06 = (
    Worked("H-06", "M_Ed", 1.5 * 1.5 * 1.1, "kN·m", "P h"),
    Worked("H-06", "M_c_Rd", (_d**3 - _i**3) / 6 * F_Y, "kN·m", "(d³ - d_i³)/6 · f_y", FACETS),
    Worked("H-06", "V_pl_Rd", 2 / pi * pi / 4 * (_d**2 - _i**2) * F_Y / sqrt(3), "kN", "2A/π", EXACT),
    Worked(
        "H-06",
        "w_r",
        1.5 * 1.1**3 / (3 * E * pi / 64 * (_d**4 - _i**4)) * 1e3,
        "mm",
        "P h³/3EI",
        FACETS,
    ),
)

# L-16, HEA 120: 114 x 120 x 5 x 8, r 12 mm, plates 90 x 10, in m: rectangles, and two spandrels at each root
_spandrel, _arm = (1 - pi / 4) * 0.012**2, 0.012 * (10 - 3 * pi) / (12 - 3 * pi)  # area; from the corner
_own_I = 0.012**4 * (
    1 - 5 * pi / 16 - (1 - pi / 4) * ((10 - 3 * pi) / (12 - 3 * pi)) ** 2
)  # about its centroid
_A16 = 2 * 0.12 * 0.008 + 0.098 * 0.005 + 4 * _spandrel + 2 * 0.09 * 0.01
_I16 = (
    (0.12 * 0.114**3 - 0.115 * 0.098**3) / 12
    + 4 * (_own_I + _spandrel * (0.049 - _arm) ** 2)
    + 0.09 * (0.134**3 - 0.114**3) / 12
)
_S_cap = 0.09 * 0.01 * 0.062
_W_pl16 = 2 * (0.12 * 0.008 * 0.053 + 0.005 * 0.049**2 / 2 + 2 * _spandrel * (0.049 - _arm) + _S_cap)
_F_h = (G * 1.15 * 22 + Q * 8) / 2
_g16 = 78.5 * _A16
_M16, _V16 = _F_h * 2 + G * _g16 * 2, _F_h + G * _g16 * 2
_M_trip = 56 + _g16 * 2
_A_f, _I_f = 0.12 * 0.008 + 0.09 * 0.01 + 0.005 * 0.049 / 3, (0.008 * 0.12**3 + 0.01 * 0.09**3) / 12

L_16 = (
    Worked("L-16", "M_Ed", _M16, "kN·m", "F a + g a²/2", FACETS),
    Worked(
        "L-16", "λ_f", 0.752 * 2 / (sqrt(_I_f / _A_f) * 93.9 * sqrt(235 / 275)), "", "EN 1993-1-1 6.3.2.4"
    ),
    Worked("L-16", "M_c_Rd", _W_pl16 * F_Y, "kN·m", "first moments of half the area", FACETS),
    Worked("L-16", "M_pl_Rd", _W_pl16 * F_Y, "kN·m", "the same from the stress blocks", FACETS),
    Worked("L-16", "F_w_Ed", _V16 * _S_cap / _I16 * 0.16 / 2, "kN", "V S/I over a spacing, two rows", FACETS),
    Worked("L-16", "F_w_Rd", 430e3 / (sqrt(3) * 0.85 * 1.25) * 0.004 * 0.052, "kN", "EN 1993-1-8 4.5.3.3"),
    Worked("L-16", "u_trip", _M_trip / (_W_pl16 * F_Y), "", "M/M_pl", FACETS),
)

# L-15, trapezium 36 to 18 x 50 mm inside a radius of 32 mm
_A15 = (0.036 + 0.018) / 2 * 0.05
_y15 = 0.05 / 3 * (0.036 + 2 * 0.018) / (0.036 + 0.018)  # centroid from the inside
_int15 = (0.036 * 0.082 - 0.018 * 0.032) / 0.05 * log(0.082 / 0.032) - (0.036 - 0.018)
_I15 = 0.05**3 * (0.036**2 + 4 * 0.036 * 0.018 + 0.018**2) / (36 * (0.036 + 0.018))
_R15 = 0.032 + _y15
_P15 = max(_F_h, 28.0)

L_15 = (
    Worked("L-15", "F_Ed", _P15, "kN", "the crane's trip"),
    Worked("L-15", "R_c", _R15 * 1e3, "mm", "r_i + h (b_i + 2 b_o)/3(b_i + b_o)"),
    Worked("L-15", "M_Ed", _P15 * _R15, "kN·m", "F R"),
    Worked("L-15", "F_t_Rd", 0.9 * 360 * 561 / 1.25 / 1e3, "kN", "EN 1993-1-8 Table 3.4"),
)

# S-02, strip 1 m wide, 190 mm, 5 bars of 12 mm at 144 mm
_A_b, _d2 = 5 * pi / 4 * 0.012**2, 0.144
_g2 = 25 * 0.19 + 0.5
_M2, _M2_k, _M2_qp = ((f * _g2 + q * 5) * 3.6**2 / 8 for f, q in ((G, Q), (1, 1), (1, 0.6)))
_a2 = _A_b * (500 / 1.15) / 20
_n2 = 200 / 11
_x2, _I2 = cracked(1.0, _d2, _n2 * _A_b)

S_02 = (
    Worked("S-02", "M_Ed", _M2, "kN·m", "w L²/8"),
    Worked("S-02", "a_c", _a2 * 1e3, "mm", "A f_yd/(b f_cd)"),
    Worked(
        "S-02",
        "V_Rd_c",
        0.12 * 2 * (100 * _A_b / _d2 * 30) ** (1 / 3) * 144,
        "kN",
        "EN 1992-1-1 6.2.2, k = 2",
    ),
    Worked("S-02", "w_qp", 5 * _M2_qp * 3.6**2 / (48 * 11e6 * _I2) * 1e3, "mm", "5 M L²/48EI, cracked"),
)

# F-08, base 1.1 x 1.5 m
_G8 = 24 * 1.1 * 1.5 * 0.6
_N_min = 1.5 * _GK.R_2 + _own * 1.2 + _G8
_N_max = _mid_k / 2 + _out_k + _own * 1.2 + _G8
_M8 = 6 * 1.5
_skew = radians(40)

F_08 = (
    Worked("F-08", "N_min", _N_min, "kN", "half of three stringers and the crossbeam, and the pad"),
    Worked("F-08", "e_min", _M8 / _N_min * 1e3, "mm", "M/N"),
    Worked("F-08", "p_full", _N_max / 1.65 + _M8 * 6 / (1.1 * 1.5**2), "kPa", "N/A + M/W, all in contact"),
    Worked(
        "F-08",
        "p_skew",
        corner_pressure(1.1, 1.5, _N_min, _M8 * cos(_skew), _M8 * sin(_skew)),
        "kPa",
        "equilibrium of the pressed part by integration",
        GRID,
    ),
)

# R-18, HEB 160: A 54.3 cm², I_y 2492 cm⁴, W_pl,y 354.0 cm³, 160 x 160 x 8 x 13, r 15 mm
_own18, _wheel, _bay, _apart = 78.5 * 54.3e-4, 21.0, 4.0, 1.6
_g18, _d18 = G * (_own18 + 0.35), 1.35 * 1.12 * _wheel


def _standing(s: float, w: float, P: float) -> ThreeSpans:
    return ThreeSpans(_bay, w, P, _apart, s)


def _sagging(w: float, P: float) -> float:
    """Return the largest moment in the first span, which is at a wheel: V changes its sign there."""
    return highest(lambda s: float(_standing(s, w, P).M(0, np.array(s))), 1.2, 1.8)


def _moving(w: float, P: float, EI: float) -> float:
    """Return the largest deflection of the first span."""
    return highest(lambda s: sag(lambda x: _standing(s, w, P).M(0, x), _bay, EI), 1.0, 1.2)


_M18, _M18_lat = _sagging(_g18, _d18), _sagging(0.0, 0.1 * _d18)
_W_f, _I_c = 0.013 * 0.160**2 / 4, 0.013 * 0.160**3 / 12
_A_c = 0.160 * 0.013 + 0.104 * 0.008 / 5
_N_c = _M18 / 0.147
_λ_c = _bay / (sqrt(_I_c / _A_c) * 93.9 * sqrt(235 / 275))
_Φ_c = 0.5 * (1 + 0.49 * (_λ_c - 0.2) + _λ_c**2)
_χ_c = 1 / (_Φ_c + sqrt(_Φ_c**2 - _λ_c**2))
_u_b = _N_c / (_χ_c * _A_c * F_Y) + _M18_lat / (_W_f * F_Y) / (1 - _N_c * _λ_c**2 / (_A_c * F_Y))
_R18 = highest(lambda s: _standing(s, _g18, _d18).R_2(), 2.0, 3.9)
_H18 = highest(lambda s: _standing(s, 0.0, 0.1 * _d18).R_2(), 2.0, 3.9)

R_18 = (
    Worked("R-18", "M_Ed", _M18, "kN·m", "three-moment equation, wheels stepped and closed in on", GRID),
    Worked("R-18", "M_lat", _M18_lat, "kN·m", "the same, a tenth of each wheel and no weight", GRID),
    Worked(
        "R-18", "V_Ed", -_standing(2.4, _g18, _d18).V_left_of_2(), "kN", "a wheel at the bracket, one behind"
    ),
    Worked("R-18", "χ_c", _χ_c, "", "EN 1993-1-1 6.3.1.2, curve c"),
    Worked("R-18", "u_b", _u_b, "", "strut and sideways moment", GRID),
    Worked("R-18", "R_one", _R18 / _d18, "", "three-moment equation", GRID),
    Worked("R-18", "w_max", _moving(_g18 / G, _wheel, E * 2492e-8) * 1e3, "mm", "double integration", 1e-5),
    Worked(
        "R-18", "u_max", _moving(0.0, 0.1 * _wheel, E * _I_c) * 1e3, "mm", "the same, top flange alone", 1e-5
    ),
)

# R-19, rail 40 x 25 mm
_I_rf = 40 * 25**3 / 12 + 78 * 13**3 / 12
_l_eff = 3.25 * (_I_rf / 8) ** (1 / 3)
_σ_z, _σ_x = _d18 * 1e3 / (_l_eff * 8), _M18 * 0.067 / 2492e-8 / 1e3
_A_v19 = (
    0.134 * 0.008 + (4 - pi) * 0.015**2 + (0.008 + 2 * 0.015) * 0.013
)  # web, fillets, and the flange above them
_τ_w = R_18[2].value / _A_v19 / 1e3

R_19 = (
    Worked("R-19", "l_eff", _l_eff, "mm", "EN 1993-6 Table 5.1(b)"),
    Worked("R-19", "σ_z", _σ_z, "MPa", "F/(l t)"),
    Worked("R-19", "σ_v", sqrt(_σ_x**2 + _σ_z**2 + _σ_x * _σ_z + 3 * _τ_w**2), "MPa", "von Mises", GRID),
    Worked("R-19", "M_b", -(_R18 * 0.22 + _H18 * 0.25), "kN·m", "R e and H e", GRID),
)

CASES = (*W_07, *W_12, *B_03, *D_04, *P_05, *H_06, *L_16, *L_15, *S_02, *F_08, *R_18, *R_19)

_contact = 3 * (0.75 - _M8 / _N_min)
_stress = _M16 * 0.067 / _I16 / 1e3
_root = _M16 * 0.037 / _I16 / 1e3
_S_root = 0.12 * 0.008 * 0.053 + 2 * _spandrel * (0.049 - _arm) + 0.005 * 0.012 * 0.043 + _S_cap

BLOCKS = (
    Worked("L-16", "lift.σ_max", _stress, "MPa", "M y/I", FACETS),
    Worked("L-16", "lift.q_cap", _V16 * _S_cap / _I16, "N/mm", "V S/I", FACETS),
    Worked("L-16", "lift.root.σ", _root, "MPa", "M y/I", FACETS),
    Worked("L-16", "lift.root.τ", _V16 * _S_root / (_I16 * 0.005) / 1e3, "MPa", "V S/(I t)", FACETS),
    Worked("L-16", "trip.M_el", -F_Y * _I16 / 0.067, "kN·m", "f_y W, hogging", FACETS),
    Worked(
        "L-15",
        "bowl.σ_max",
        curved(_A15, _int15, _R15, _P15, _P15 * _R15, 0.032) / 1e3,
        "MPa",
        "Winkler and Bach, inside",
    ),
    Worked(
        "L-15",
        "bowl.σ_min",
        curved(_A15, _int15, _R15, _P15, _P15 * _R15, 0.082) / 1e3,
        "MPa",
        "Winkler and Bach, outside",
    ),
    Worked("L-15", "bowl.σ_straight", (_P15 / _A15 + _P15 * _R15 * _y15 / _I15) / 1e3, "MPa", "N/A + M y/I"),
    Worked("S-02", "ult.M_pl", _A_b * 500e3 / 1.15 * (_d2 - _a2 / 2), "kN·m", "A f_yd (d - a/2)"),
    Worked("S-02", "char.x_c", _x2 * 1e3, "mm", "b x²/2 = n A (d - x)"),
    Worked("S-02", "char.tension", _n2 * _M2_k * (_d2 - _x2) / _I2 / 1e3, "MPa", "n M (d - x)/I"),
    Worked("S-02", "quasi.tension", _M2_qp / (_A_b * (_d2 - _x2 / 3)) / 1e3, "MPa", "M/(A (d - x/3))"),
    Worked("S-02", "quasi.slab.σ_min", -_M2_qp * _x2 / _I2 / 1e3, "MPa", "M x/I"),
    Worked("F-08", "rope.x_c", _contact * 1e3, "mm", "3 (B/2 - e)"),
    Worked("F-08", "rope.σ_min", -2 * _N_min / (1.1 * _contact), "kPa", "2 N/3 b (B/2 - e)"),
)
"""Results of stress blocks, by their dotted names."""

EXCEEDED = {("P-05", "bending at the wall"): _M_5 / (146.3e-6 * F_Y)}
UPLIFT = {("W-07", "no uplift at the west trestle"): _EQU.R_1}
