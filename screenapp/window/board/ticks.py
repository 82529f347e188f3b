"""Round numbers along a range, for scales."""

from __future__ import annotations

import math

from screenapp.model.estimate_text import plain


def round_step(span: float, most: int) -> float:
    """The smallest of 1, 2, 5 times a power of ten that parts `span` at most `most` times."""
    rough = span / max(most, 1)
    power = 10.0 ** math.floor(math.log10(rough))
    return next(s for s in (power, 2 * power, 5 * power, 10 * power) if s >= rough * (1 - 1e-9))


def ticks(low: float, high: float, most: int) -> list[tuple[float, str]]:
    """Round values from `low` to `high` with their texts; none for an empty range."""
    if not (math.isfinite(low) and math.isfinite(high) and high > low):
        return []
    step = round_step(high - low, most)
    decimals = max(0, -math.floor(math.log10(step) + 1e-9))
    first, last = math.ceil(low / step - 1e-9), math.floor(high / step + 1e-9)
    return [(i * step, plain(i * step, decimals)) for i in range(first, last + 1)]


def end_text(value: float, low: float, high: float) -> str:
    """An end of the range, with digits by the range."""
    span = max(abs(low), abs(high))
    if not span > 0.0 or value == 0.0:
        return "0"
    decimals = 2 - math.floor(math.log10(span) + 1e-9)
    return plain(value, max(0, decimals))
