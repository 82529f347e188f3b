"""An estimate in words: value and band with as many digits as the band allows."""

from __future__ import annotations

import math

from screenapp.model.findings import Estimate


def decimals_for(half: float, value: float) -> int:
    """Decimal places that show a half band with one or two digits (at most 4 digits of value)."""
    if half <= 0.0 or not math.isfinite(half):
        half = max(abs(value), 1e-12) * 1e-3
    return max(0, -math.floor(math.log10(half))) if half < 10.0 else 0


def estimate_words(estimate: Estimate, unit: str, factor: float = 1.0) -> str:
    """E.g. "143.2 ± 0.6 MPa", "≥ 310 MPa, rising", "143 MPa, not settled".

    `factor` turns the stored unit into the shown one.

    Example:
        >>> estimate_words(Estimate(143.21, 142.6, 143.82, "settled"), "MPa")
        '143.2 ± 0.6 MPa'
    """
    value = estimate.value * factor
    half = 0.5 * (estimate.high - estimate.low) * factor
    tail = f" {unit}" if unit else ""
    if estimate.trust == "rising":
        return f"≥ {value:.3g}{tail}, rising"
    places = decimals_for(half, value)
    if estimate.trust == "unsettled":
        return f"{value:.{places}f}{tail}, not settled"
    return f"{value:.{places}f} ± {half:.{places}f}{tail}"
