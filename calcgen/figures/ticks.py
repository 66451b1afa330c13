"""Round values along an axis."""

from math import ceil, floor, log10


def ticks(low: float, high: float) -> list[tuple[float, str]]:
    """Round values within a range, about five, with their text."""
    about = (high - low) / 6.5
    power = 10.0 ** floor(log10(about))
    step = next(m * power for m in (1, 2, 5, 10) if m * power >= about * (1 - 1e-9))
    digits = max(0, -floor(log10(step) + 1e-9))
    figures = max(0, floor(log10(max(abs(low), abs(high)))) - floor(log10(step) + 1e-9))
    form = f".{figures}e" if digits > 4 or step >= 1e6 else f".{digits}f"
    return [
        (n * step, f"{n * step:{form}}".replace("-", "−") if n else "0")
        for n in range(ceil(low / step - 1e-9), floor(high / step + 1e-9) + 1)
    ]
