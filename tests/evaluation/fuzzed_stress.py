"""Stress blocks of random models, sections, parts, bars and forces, of all sizes: text for the fuzz tests."""

from __future__ import annotations

import random

from tests.evaluation.helpers import fence

MODELS = ("elastic", "plastic", "elastic_plastic", "no_tension", "cracked", "curved")
SHAPES = (
    "rectangle(b = {} mm, h = {} mm)",
    "circle(d = {} mm)",
    "tube(d = {} mm, t = {} mm)",
    "box(h = {} mm, b = {} mm, t = {} mm)",
    "i_shape(h = {} mm, b = {} mm, t_w = {} mm, t_f = {} mm)",
    "channel(h = {} mm, b = {} mm, t_w = {} mm, t_f = {} mm)",
    "tee(h = {} mm, b = {} mm, t_w = {} mm, t_f = {} mm)",
    "angle(h = {} mm, b = {} mm, t = {} mm)",
    "zed(h = {} mm, b = {} mm, t = {} mm)",
    "ellipse(b = {} mm, h = {} mm)",
    "trapezium(b_t = {} mm, b_b = {} mm, h = {} mm)",
    "polygon((0 mm, 0 mm), ({} mm, 0 mm), ({} mm, {} mm))",
    "strip(t = 2 mm, r = 2 mm, ({} mm, 0 mm), (0 mm, 0 mm), (0 mm, {} mm), (-{} mm, 50 mm))",
)
SIZES = (1, 2.5, 5, 8, 12, 20, 50, 80, 100, 150, 200, 300, 1000)
FORCES = ("N", "M", "M_lat", "V", "V_lat", "T")


def _shape(rng: random.Random) -> str:
    form = rng.choice(SHAPES)
    sizes = sorted(rng.choices(SIZES, k=form.count("{}")), reverse=True)
    turned = rng.choice(("", "", " turned 30 deg", " turned 90 deg", " mirrored"))
    return form.format(*sizes) + turned


def _number(rng: random.Random) -> str:
    size = rng.choice((1.0, 1.0, 1.0, 1e-3, 1e3, 1e-12, 1e12, 1e-150, 1e150, 0.0))
    return f"{rng.choice((-1, 1)) * rng.uniform(0.5, 9.5) * size:.3g}"


def _parts(rng: random.Random) -> list[str]:
    count, lines, y = rng.randint(1, 3), [], 0.0
    several = rng.random() < 0.6
    for index in range(count):
        h = rng.choice(SIZES[4:])
        b = rng.choice(SIZES[4:])
        gap = rng.choice((0, 0, 0, 10))
        at = f"({rng.choice((0, 0, 7))} mm, {y + h / 2 + gap} mm)"
        y += h + gap
        material = f" of m_{index % 2}" if several else ""
        lines.append(f"part p_{index} = rectangle(b = {b} mm, h = {h} mm) at {at}{material}")
    if rng.random() < 0.3:
        lines.append(f"hole o = circle(d = 4 mm) at (0 mm, {y / 2} mm)")
    if several and rng.random() < 0.5:
        lines.append("bars low = 3 of 4 mm from (-5 mm, 4 mm) to (5 mm, 4 mm) of m_9")
        lines.append("modulus m_9 = 200 GPa")
        lines += rng.choice(([], ["strength m_9 = 500 MPa"]))
    if several:
        for index in range(min(count, 2)):
            lines.append(f"modulus m_{index} = {rng.choice((0.5, 10, 70, 210, 1e6))} GPa")
            lines += rng.choice(([], [f"strength m_{index} = {rng.choice((1, 30, 300))} MPa"]))
        lines.append("reference = m_0")
    return lines


def _stress(rng: random.Random, index: int) -> str:
    model = rng.choice((*MODELS, "elastic"))
    lines = ["section = main", f"model = {model}"]
    units = {"N": "kN", "V": "kN", "V_lat": "kN", "M": "kN·m", "M_lat": "kN·m", "T": "kN·m"}
    taken = FORCES if model == "elastic" or rng.random() < 0.1 else FORCES[:3]
    lines += [f"{key} = {_number(rng)} {units[key]}" for key in taken if rng.random() < 0.5]
    if model == "curved":
        lines += [f"R_c = {rng.choice((50, 200, 1000, 1e7))} mm", f"centre = {rng.choice(('top', 'bottom'))}"]
    for key, value in (("f_y", "235 MPa"), ("E", "210 GPa"), ("limit", "100 MPa")):
        lines += [f"{key} = {value}"] if rng.random() < 0.4 else []
    for name in ("a", "p", "σ"):
        if rng.random() < 0.3:
            lines.append(f"point {name} = ({rng.choice((0, 3, -5))} mm, {rng.choice((0, 12, 50, -20))} mm)")
    return fence(f"stress s_{index}", *lines)


def stress_text(rng: random.Random) -> str:
    """Return a calc of one section and a few stresses of it, most of them possible."""
    section = [f"shape = {_shape(rng)}"] if rng.random() < 0.5 else _parts(rng)
    return "# T\n" + fence("section main", *section) + "".join(_stress(rng, i) for i in range(3))
