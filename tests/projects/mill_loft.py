"""The values of `projects/mill-loft` worked by hand, in kip and in. Shapes: AISC Manual, from memory."""

from __future__ import annotations

from math import sqrt

import numpy as np

from tests.projects.by_hand import GRID, PRINTED, Array, Overhang, Worked, sag

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

CASES = (*F_11, *G_21, *L_31, *C_41)

UTILISATIONS = {
    ("G-21", "deflection, live"): _DEFLECTION_21 / (288 / 360),
    ("G-21", "deflection, dead and live"): _TOTAL_21 / (288 / 240),
    ("L-31", "bending, both axes"): (_M_4 / (45 * 18.8) + _M_lat / (45 * 11.5)),
    ("L-31", "bending, dead and live"): _M_2 / (45 * 18.8),
}
