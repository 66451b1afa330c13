"""The values of `projects/mill-loft` worked by hand, in kip and in. Shapes: AISC Manual, from memory."""

from __future__ import annotations

from math import pi, radians, sqrt, tan

import numpy as np

from tests.projects.by_hand import FACETS, GRID, PRINTED, Array, Overhang, Worked, curved, sag

E = 29000.0  # ksi
FT = 12.0  # in
KLF = 1 / 12  # kip/in
STEEL = 490 / 1728e3  # kip/in³

# F-11, W16x26: A 7.68, I_x 301, Z_x 44.2, d 15.7, t_w 0.250
_l = 24.5 * FT
_D = 0.058 * 8 * KLF + STEEL * 7.68
_L = 0.065 * 8 * KLF
_u = 1.2 * _D + 1.6 * _L
F_11 = (
    Worked("F-11", "A_I", 392, "ft²", "2 · 24.5 · 8"),
    Worked("F-11", "M_u", _u * _l**2 / 8 / FT, "kip-ft", "w l²/8"),
    Worked("F-11", "φM_n", 0.9 * 50 * 44.2 / FT, "kip-ft", "φ F_y Z"),
    Worked("F-11", "φM_n", 166, "kip-ft", "AISC Manual 15th ed. Table 3-2, from memory", PRINTED),
    Worked("F-11", "φV_n", 106, "kip", "AISC Manual 15th ed. Table 3-2, from memory", PRINTED),
    Worked("F-11", "V_u", _u * _l / 2, "kip", "w l/2"),
    Worked("F-11", "Δ_L", 5 * _L * _l**4 / (384 * E * 301), "in", "5 w l⁴/384EI"),
    Worked("F-11", "Δ_DL", 5 * (_D + _L) * _l**4 / (384 * E * 301), "in", "5 w l⁴/384EI"),
)

# G-21, W18x40: A 11.8, I_x 612, Z_x 78.4, S_x 68.4, r_y 1.27, I_y 19.1, J 0.810, C_w 1440, d 17.9, t_f 0.525
_R_D, _R_L = _D * _l / 2, _L * _l / 2
_k = 0.25 + 15 / sqrt(2 * 24 * 24.5)
_P = 1.2 * 2 * _R_D + 1.6 * 2 * _k * _R_L
_own = STEEL * 11.8
_r_ts = sqrt(sqrt(19.1 * 1440) / 68.4)
_c = 0.810 / (68.4 * (17.9 - 0.525))
_L_r = 1.95 * _r_ts * E / 35 * sqrt(_c + sqrt(_c**2 + 6.76 * (35 / E) ** 2))
_L_p = 1.76 * 1.27 * sqrt(E / 50)
_M_n = 50 * 78.4 - (50 * 78.4 - 35 * 68.4) * (96 - _L_p) / (_L_r - _L_p)
G_21 = (
    Worked("G-21", "k_L", _k, "", "0.25 + 15/√1176"),
    Worked("G-21", "P_L", 2 * _k * _R_L, "kip", "two beams"),
    Worked("G-21", "M_u", (_P * 96 + 1.2 * _own * 288**2 / 8) / FT, "kip-ft", "P l/3 + w l²/8"),
    Worked("G-21", "L_p", 4.49, "ft", "AISC Manual 15th ed. Table 3-2, from memory", PRINTED),
    Worked("G-21", "L_r", 13.1, "ft", "AISC Manual 15th ed. Table 3-2, from memory", PRINTED),
    Worked("G-21", "L_r", _L_r / FT, "ft", "AISC 360-16 Eq. F2-6"),
    Worked("G-21", "M_n", _M_n / FT, "kip-ft", "AISC 360-16 Eq. F2-2, straight line from L_p to L_r"),
    Worked("G-21", "φV_n", 169, "kip", "AISC Manual 15th ed. Table 3-2, from memory", PRINTED),
)
_DEFLECTION_21 = (23 * 2 * _k * _R_L * 288**3 / 648) / (E * 612)
_TOTAL_21 = _DEFLECTION_21 + (23 * 2 * _R_D * 288**3 / 648 + 5 * _own * 288**4 / 384) / (E * 612)

# L-31, HSS8x4x3/8: A 7.58, I_x 58.7, Z_x 18.8, Z_y 11.5, t 0.349
_s, _a = 110.0, 25.0
_w = 0.120 * _s / FT / 2 * KLF  # peak of the triangle
_g = STEEL * 7.58


def _pocket(P: float, w: float, g: float) -> float:
    """Return the moment under P at 25 in, with a triangle of peak w and a uniform g."""
    triangle = w * _s / 4 * _a - w * _a**3 / (3 * _s)
    return P * (_s - _a) / _s * _a + triangle + g * _a * (_s - _a) / 2


_M_2 = _pocket(1.2 * _R_D + 1.6 * _R_L, 1.2 * _w, 1.2 * _g)
_M_4 = _pocket(1.2 * _R_D + _R_L, 1.2 * _w, 1.2 * _g)
_M_lat = 0.024 * 5.5 * KLF * _s**2 / 8
_R_1 = (_R_D + _R_L) * (_s - _a) / _s + _w * _s / 4 + _g * _s / 2


def _service(x: Array) -> Array:
    """Return the service moment; right of the middle the symmetric loads are mirrored."""
    P, z = _R_D + _R_L, np.minimum(x, _s - x)
    symmetric = _w * _s / 4 * z - _w * z**3 / (3 * _s) + _g * z * (_s - z) / 2
    return P * (_s - _a) / _s * x - P * np.maximum(x - _a, 0) + symmetric


L_31 = (
    Worked("L-31", "w_D", 550, "plf", "120 · 9.1667/2"),
    Worked("L-31", "M_ux", _M_4 / FT, "kip-ft", "at the beam's pocket"),
    Worked("L-31", "M_uy", _M_lat / FT, "kip-ft", "w l²/8"),
    Worked("L-31", "φM_nx", 0.9 * 50 * 18.8 / FT, "kip-ft", "φ F_y Z"),
    Worked("L-31", "φM_nx", 70.5, "kip-ft", "AISC Manual 15th ed. Table 3-12, from memory", PRINTED),
    Worked("L-31", "φM_ny", 0.9 * 50 * 11.5 / FT, "kip-ft", "φ F_y Z"),
    Worked("L-31", "φV_n", 0.9 * 0.6 * 50 * 2 * (8 - 3 * 0.349) * 0.349, "kip", "AISC 360-16 Eq. G4-1"),
    Worked("L-31", "Δ_s", sag(_service, _s, E * 58.7), "in", "double integration", GRID),
    Worked("L-31", "l_req", _R_1 / (0.150 * 11.75), "in", "R/(f b)"),
    Worked("L-31", "l_s", 6.5, "in", "up to half an inch"),
)

# C-41, C10x20: A 5.87, I_x 78.9, Z_x 19.4, r_y 0.690, d 10, t_w 0.379
_d, _q = 0.035 * 5 * KLF + STEEL * 5.87, 0.100 * 5 * KLF
_C2 = Overhang(183, 33, 1.2 * _d + 1.6 * _q, 1.2 * _d)
_C3 = Overhang(183, 33, 1.2 * _d, 1.2 * _d + 1.6 * _q)
_C4 = Overhang(183, 33, 1.2 * _d + 1.6 * _q, 1.2 * _d + 1.6 * _q)
_UP = Overhang(183, 33, 0.9 * _d, 0.9 * _d + 1.6 * _q)
C_41 = (
    Worked("C-41", "M_u", _C2.M_span / FT, "kip-ft", "R_1²/2w"),
    Worked("C-41", "φM_n", 0.9 * 36 * 19.4 / FT, "kip-ft", "φ F_y Z"),
    Worked("C-41", "M_h", -_C3.M_support / FT, "kip-ft", "w l_2²/2"),
    Worked("C-41", "L_p", 1.76 * 0.690 * sqrt(E / 36) / FT, "ft", "AISC 360-16 Eq. F2-5"),
    Worked("C-41", "V_u", -_C4.V_left, "kip", "left of the post, all loaded"),
    Worked("C-41", "φV_n", 0.9 * 0.6 * 36 * 10 * 0.379, "kip", "0.6 F_y A_w"),
    Worked("C-41", "R_least", _UP.R_1, "kip", "statics, 0.9 of the dead load"),
    Worked("C-41", "Δ_tip", -Overhang(183, 33, _q, 0).w_tip(E * 78.9), "in", "slope at the post times l_2"),
)

# J-51, joists 2 of 1.5 x 11.25 in and a plate 0.375 x 11 in, a hole of 9/16 in at 2.5 in below the middle
_wj = (1.2 * 24 + 1.6 * 65) * 4 / 1000 * KLF
_M_j = _wj * 216**2 / 8
_n = 29000 / 1600
_I_g = 2 * 1.5 * 11.25**3 / 12 + _n * 0.375 * 11**3 / 12
_A_g, _A_o = 2 * 1.5 * 11.25 + _n * 0.375 * 11, (3 + _n * 0.375) * 0.5625
_y_n = 2.5 * _A_o / (_A_g - _A_o)
_I_n = _I_g - (3 + _n * 0.375) * 0.5625**3 / 12 - 2.5**2 * _A_o - (_A_g - _A_o) * _y_n**2
_share = _n * 0.375 * 11**3 / 12 / _I_g
_F_e = 6100 * 0.5**1.45 / sqrt(0.5)
_R_e = 87000 / _F_e
_k_3 = -1 + sqrt(2 * (1 + _R_e) / _R_e + 2 * 45000 * (2 + _R_e) * 0.5**2 / (3 * 87000 * 1.5**2))
_yields = (
    2 * 0.5 * 1.5 * _F_e / 5,
    2 * _k_3 * 0.5 * 1.5 * 87000 / ((2 + _R_e) * 4),
    2 * 0.5**2 / 4 * sqrt(2 * 87000 * 45000 / (3 * (1 + _R_e))),
)
_sag_j = 5 * 216**4 / (384 * 1600 * _I_g) * KLF / 1000
J_51 = (
    Worked("J-51", "M_u", _M_j / FT, "kip-ft", "w l²/8"),
    Worked("J-51", "σ_w", _M_j * (5.625 + _y_n) / _I_n, "ksi", "transformed to wood, hole taken off"),
    Worked("J-51", "σ_p", _n * _M_j * (5.5 + _y_n) / _I_n, "ksi", "n times the strain of the wood"),
    Worked("J-51", "F_b'", 0.9 * 2.54 * 0.85 * 0.8, "ksi", "NDS Table 4.3.1"),
    Worked("J-51", "σ_0", _M_j / (2 * 1.5 * 11.25**2 / 6), "ksi", "M/S of the joists"),
    Worked("J-51", "Z_u", _share * _wj * 24 * 1000, "lbf", "the plate's share of the load over a spacing"),
    Worked("J-51", "Z'", min(_yields) * 3.32 * 0.65 * 0.8, "lbf", "NDS yield limit equations"),
    Worked("J-51", "f_v", 1.5 * (1 - _share) * _wj * 108 / 33.75 * 1000, "psi", "1.5 V/A, the joists' share"),
    Worked("J-51", "Δ_L", 260 * _sag_j, "in", "5 w l⁴/384EI"),
    Worked("J-51", "Δ_LT", (1.5 * 96 + 260) * _sag_j, "in", "5 (1.5 D + L) l⁴/384EI"),
)

# J-52, beam 9.5 x 11.5 in, a plate 5 x 0.375 in below, less two holes of 7/16 in
_w52 = (1.2 * 24 + 1.6 * 65) * 7 / 1000 * KLF
_M_52, _V_52 = _w52 * 240**2 / 8, _w52 * 120


def _strapped(width: float) -> tuple[float, float, float]:
    """Return I, the axis above the middle of the plate, and the plate's first moment, transformed to wood."""
    A_w, A_p, arm = 9.5 * 11.5, _n * width * 0.375, 5.9375
    up = A_w * arm / (A_w + A_p)
    own = (9.5 * 11.5**3 + _n * width * 0.375**3) / 12
    return own + A_w * (arm - up) ** 2 + A_p * up**2, up, A_p * up


_I_52, _, _S_52 = _strapped(5)
_I_net, _up_net, _ = _strapped(5 - 2 * 0.4375)
_NA_52 = 5.75 + 5.9375 - _strapped(5)[1]  # from the top
J_52 = (
    Worked("J-52", "M_u", _M_52 / FT, "kip-ft", "w l²/8"),
    Worked("J-52", "σ_w", _M_52 * (5.75 + 5.9375 - _up_net) / _I_net, "ksi", "M y/I at the top, holes off"),
    Worked("J-52", "Z_u", _V_52 * _S_52 / _I_52 * 4.5 * 1000, "lbf", "V S/I over a spacing"),
    Worked("J-52", "Z_pair", 2 * 1000 * 3.32 * 0.65 * 0.8, "lbf", "NDS Table 11.3.1"),
    Worked("J-52", "Δ_L", 5 * 0.455 * KLF * 240**4 / (384 * 1600 * _I_52), "in", "5 w l⁴/384EI"),
)

# H-61, bar of 1.5 in, inner radius 1.25 in
_P_u = 1.2 * 0.06 + 1.6 * 1.25
_A_h = pi / 4 * 1.5**2
_int_h = 2 * pi * (2 - sqrt(2**2 - 0.75**2))  # ∫dA/r of a circle: Timoshenko, Strength of Materials II
H_61 = (
    Worked("H-61", "P_u", _P_u, "kip", "1.2 D + 1.6 I L"),
    Worked("H-61", "M_u", 2 * _P_u, "kip-in", "P R"),
    Worked("H-61", "φT_n", 0.75 * 0.75 * 58 * _A_h, "kip", "AISC 360-16 Table J3.2", FACETS),
)

# K-71, HSS6x4x1/4: A 4.30, I_x 20.9, Z_x 8.53, J 23.6, t 0.233
_D_b, _S_b = STEEL * 4.30 + 0.012 * 6 * KLF, 0.030 * 6 * KLF
_w_k = 1.2 * _D_b + 1.6 * _S_b
_t_k = (1.2 * 0.012 + 1.6 * 0.030) * 6**2 / 2  # kip-in/in, or kip-ft/ft
_M_k, _V_k, _T_k = _w_k * 144**2 / 8, _w_k * 72, _t_k * 72
_C = 2 * (4 - 0.233) * (6 - 0.233) * 0.233 - 4.5 * (4 - pi) * 0.233**3
_θ = 0.042 * 18 * 144**2 / (8 * 11200 * 23.6)
K_71 = (
    Worked("K-71", "M_u", _M_k, "kip-in", "w l²/8"),
    Worked("K-71", "V_u", _V_k, "kip", "w l/2"),
    Worked("K-71", "T_u", _T_k, "kip-in", "t l/2"),
    Worked("K-71", "C_t", _C, "in³", "AISC 360-16 H3.1"),
    Worked("K-71", "C_t", 10.1, "in³", "AISC Manual 15th ed. Table 1-11, from memory", 1e-2),
    Worked("K-71", "θ_m", _θ / radians(1), "deg", "∫T dx/GJ over half of the span"),
    Worked("K-71", "Δ_e", 72 * tan(_θ), "in", "turned about the beam"),
    Worked("K-71", "Δ_S", 5 * _S_b * 144**4 / (384 * E * 20.9), "in", "5 w l⁴/384EI"),
)

# R-81, W8x15: A 4.44, I_x 48.0, Z_x 13.6, S_x 11.8, I_y 3.41, J 0.137, C_w 51.8, d 8.11, t_f 0.315
_bay, _tip = 22 * FT, 7 * FT
_loads = {  # by case: on the bay, on the canopy
    "D": (0.016 * 8 * KLF + STEEL * 4.44,) * 2,
    "L": (0.020 * 8 * KLF,) * 2,
    "S": (0.025 * 8 * KLF,) * 2,
    "S_2": (0.025 * 8 * KLF, 0.046 * 8 * KLF),
    "S_3": (0.025 * 8 * KLF, 0.0125 * 8 * KLF),
    "S_4": (0.0125 * 8 * KLF, 0.025 * 8 * KLF),
    "up": (-0.030 * 8 * KLF, -0.044 * 8 * KLF),
    "down": (0.016 * 8 * KLF,) * 2,
}


def _roof(**factors: float) -> Overhang:
    bay, canopy = (sum(f * _loads[case][part] for case, f in factors.items()) for part in (0, 1))
    return Overhang(_bay, _tip, bay, canopy)


def _C_b(beam: Overhang) -> float:
    """Return C_b between the middle of the bay and the post: AISC 360-16 F1-1."""
    x = np.linspace(_bay / 2, _bay, 20_001)
    M = np.abs(beam.R_1 * x - beam.w * x**2 / 2)
    return float(12.5 * M.max() / (2.5 * M.max() + 3 * M[5000] + 4 * M[10_000] + 3 * M[15_000]))


_roofs: tuple[dict[str, float], ...] = ({}, *({case: 1.0} for case in ("L", "S", "S_2", "S_3", "S_4")))
_winds: tuple[dict[str, float], ...] = ({}, {"up": 1.0}, {"down": 1.0})
_combined = [{"D": 1.4}]  # ASCE 7-16 2.3.1, without live load
_combined += [{"D": 1.2} | dict.fromkeys(r, 0.5) for r in _roofs]
_combined += [{"D": 1.2} | dict.fromkeys(r, 1.6) | dict.fromkeys(w, 0.5) for r in _roofs for w in _winds]
_combined += [{"D": 1.2} | dict.fromkeys(r, 0.5) | w for r in _roofs for w in _winds if w]
_combined += [{"D": 0.9} | w for w in _winds if w]
_beams = [_roof(**factors) for factors in _combined]
_C_b81 = min(_C_b(beam) for beam in _beams)
_r_ts81 = sqrt(sqrt(3.41 * 51.8) / 11.8)
_c81 = 0.137 / (11.8 * (8.11 - 0.315))
_s81 = _bay / 2 / _r_ts81
_F_cr81 = _C_b81 * pi**2 * E / _s81**2 * sqrt(1 + 0.078 * _c81 * _s81**2)
R_81 = (
    Worked(
        "R-81",
        "M_u",
        max(b.M_span for b in _beams if b.w > 0) / FT,
        "kip-ft",
        "R²/2w, 1.2 D + 1.6 S_3 + 0.5 W",
    ),
    Worked(
        "R-81", "M_uh", -min(b.M_support for b in _beams) / FT, "kip-ft", "v a²/2, 1.2 D + 1.6 S_2 + 0.5 W"
    ),
    Worked("R-81", "U", -min(b.R_1 for b in _beams), "kip", "statics, 0.9 D + W upwards"),
    Worked("R-81", "C_b", _C_b81, "", "AISC 360-16 F1-1, least of all combinations", GRID),
    Worked("R-81", "φM_nh", 0.9 * _F_cr81 * 11.8 / FT, "kip-ft", "AISC 360-16 F2-3, F2-4", GRID),
    Worked(
        "R-81",
        "Δ_tip",
        -_roof(S_3=1.0).w_tip(E * 48.0),
        "in",
        "slope at the post, half the snow on the canopy",
    ),
)

CASES = (*F_11, *G_21, *L_31, *C_41, *J_51, *J_52, *H_61, *K_71, *R_81)


def _in_a_box(h: float, b: float, t: float, r_o: float, *, V: float, T: float) -> float:
    """Return the shear stress at mid-height of a thin box with round corners: V S/(I t) and Bredt.

    Source: rounded rectangles along the mid-line, Timoshenko; r is the mid-line radius of the corners.
    """
    r = r_o - t / 2
    half, flat_h, flat_b = (h - t) / 2, h - 2 * r_o, b - 2 * r_o
    y_arc, arc = flat_h / 2 + 2 * r / pi, pi / 2 * r  # centroid and length of a corner
    S = t * (flat_b / 2 * half + arc * y_arc + (flat_h / 2) ** 2 / 2)  # a quarter of the section
    square_arc = arc * (flat_h / 2) ** 2 + 2 * (flat_h / 2) * r**2 + pi / 4 * r**3  # ∫y² ds of a corner
    second = 4 * t * (flat_b / 2 * half**2 + square_arc + (flat_h / 2) ** 3 / 3)
    enclosed = (h - t) * (b - t) - (4 - pi) * r**2
    return V * S / (second * t) + T / (2 * enclosed * t)


BLOCKS = (
    Worked("J-51", "middle.left.σ_min", -_M_j * (5.625 - _y_n) / _I_n, "ksi", "top of the wood"),
    Worked("J-52", "middle.plate.σ_max", _n * _M_52 * (_up_net + 0.1875) / _I_net, "ksi", "n M y/I"),
    Worked("J-52", "ends.q_plate", _V_52 * _S_52 / _I_52 * 1000, "lbf/in", "V S/I"),
    Worked("J-52", "ends.axis.τ", _V_52 * _NA_52**2 / (2 * _I_52), "ksi", "V S/(I b) at the neutral axis"),
    Worked("H-61", "bend.σ_max", curved(_A_h, _int_h, 2, _P_u, 2 * _P_u, 1.25), "ksi", "inside", FACETS),
    Worked("H-61", "bend.σ_min", curved(_A_h, _int_h, 2, _P_u, 2 * _P_u, 2.75), "ksi", "outside", FACETS),
    Worked(
        "H-61",
        "bend.σ_straight",
        _P_u / _A_h + 2 * _P_u * 0.75 / (pi / 64 * 1.5**4),
        "ksi",
        "N/A + M c/I",
        FACETS,
    ),
    Worked(
        "K-71",
        "column.τ_max",
        _in_a_box(6, 4, 0.233, 0.466, V=_V_k, T=_T_k),
        "ksi",
        "V S/(I t) + T/2A_m t on the mid-line",
        FACETS,
    ),
)
"""Results of stress blocks, by their dotted names."""

UTILISATIONS = {
    ("G-21", "deflection, live"): _DEFLECTION_21 / (288 / 360),
    ("G-21", "deflection, dead and live"): _TOTAL_21 / (288 / 240),
    ("L-31", "bending, both axes"): (_M_4 / (45 * 18.8) + _M_lat / (45 * 11.5)),
    ("L-31", "bending, dead and live"): _M_2 / (45 * 18.8),
}
