"""The array and point types that mechanics passes around."""

from __future__ import annotations

from typing import TypeAlias

import numpy as np
from numpy.typing import NDArray

FloatArray: TypeAlias = NDArray[np.float64]
Point: TypeAlias = tuple[float, float]
