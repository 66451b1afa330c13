"""Rings for specimens: rectangles and circles, counter-clockwise unless they are holes."""

import numpy as np
from numpy.typing import NDArray

Ring = NDArray[np.float64]


def rectangle(b: float, h: float, x: float = 0.0, y: float = 0.0) -> Ring:
    left, right, bottom, top = x - b / 2, x + b / 2, y - h / 2, y + h / 2
    return np.array([(left, bottom), (right, bottom), (right, top), (left, top)])


def circle(d: float, x: float = 0.0, y: float = 0.0, *, hole: bool = False) -> Ring:
    turns = np.linspace(0, 2 * np.pi, 48, endpoint=False)[:: -1 if hole else 1]
    return np.column_stack([x + d / 2 * np.cos(turns), y + d / 2 * np.sin(turns)])
