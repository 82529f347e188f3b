"""How a number and its band are written, everywhere in the window and the record.

"143.2 ± 0.6 MPa" where it is settled: the band decides the digits.  "≥ 310 MPa, rising" where no
finite value exists.  "143 MPa, not settled" where the band is not known.
"""

from __future__ import annotations

import math
from typing import Literal

from screenapp.model.findings import Estimate
from screenapp.model.kinds import KINDS, KindName
from screenapp.model.part import DisplayUnits

EstimateKind = Literal["stress", "displacement", "factor", "force", "moment", "line load"]

_KINDS: dict[EstimateKind, KindName] = {
    "stress": "stress",
    "displacement": "length",
    "factor": "number",
    "line load": "line_load",
    "force": "force",
    "moment": "moment",
}
_NAUGHT: dict[EstimateKind, float] = {
    "stress": 1e-6,
    "displacement": 1e-7,
    "factor": 1e-6,
    "line load": 1e-9,
    "force": 1e-6,
    "moment": 1e-3,
}
"""Below this a stored value is nothing but rounding [MPa, mm, 1, N, N·mm]: it is written as 0."""

MINUS = "−"
_MOST_DIGITS = 5  # significant digits, however narrow the band


def unit_of(kind: EstimateKind, display_units: DisplayUnits) -> tuple[float, str]:
    """What a stored value is multiplied by to be shown, and the unit's name ("" if none)."""
    label, stored = KINDS[_KINDS[kind]].shown(display_units)
    return float(1 / stored), label


def estimate_text(
    estimate: Estimate, kind: EstimateKind, display_units: DisplayUnits, unit: bool = True
) -> str:
    """The number with its band and, unless it is settled, the word for its trust.

    Example:
        >>> estimate_text(Estimate(143.21, 142.66, 143.7, "settled"), "stress", "mm-N-MPa")
        '143.2 ± 0.6 MPa'
        >>> estimate_text(Estimate(310.4, 310.4, math.inf, "rising"), "stress", "mm-N-MPa")
        '≥ 310 MPa, rising'
        >>> estimate_text(Estimate(143.21, 100.0, 190.0, "unsettled"), "stress", "mm-N-MPa")
        '143 MPa, not settled'
    """
    word = {"settled": "", "rising": ", rising", "unsettled": ", not settled"}[estimate.trust]
    return value_text(estimate, kind, display_units, unit) + word


def value_text(
    estimate: Estimate, kind: EstimateKind, display_units: DisplayUnits, unit: bool = True
) -> str:
    """The number with its band but without the word for its trust (where a pill says it)."""
    factor, name = unit_of(kind, display_units)
    if not math.isfinite(estimate.value):
        return "no value"
    value, low, high = (
        0.0 if abs(v) < _NAUGHT[kind] else factor * v
        for v in (estimate.value, estimate.low, estimate.high)
    )
    if estimate.trust == "settled":
        text = _with_band(value, max(high - value, value - low))
    elif estimate.trust == "rising":
        text = _bound(value, low, high)
    else:
        text = significant(value)
    return f"{text} {name}".rstrip() if unit else text


def plain(value: float, decimals: int) -> str:
    """A number with some decimals (tens, hundreds ... for negative ones) and a true minus sign."""
    text = f"{round(value, decimals):.{max(decimals, 0)}f}"
    if text.startswith("-"):
        text = MINUS + text[1:] if any(c in "123456789" for c in text) else text[1:]
    return text


def significant(value: float, digits: int = 3) -> str:
    """A number with so many significant digits."""
    return plain(value, _decimals_of(value, digits))


def _with_band(value: float, half: float) -> str:
    """Value and half width, the band with one figure, or two while it begins with 1.

    The band is rounded up, never down, and covers the rounding of the value: what is written holds
    what was found.
    """
    if not math.isfinite(half):
        return significant(value)
    finest = _decimals_of(value if value != 0.0 else half, _MOST_DIGITS)
    if half <= 0.0:
        return plain(value, finest - 1)
    decimals = min(_decimals_of(half / 2.0, 1), finest)  # at least two steps wide
    while True:
        step = 10.0**-decimals
        spare = abs(round(value, decimals) - value)
        band = math.ceil((half + spare) / step - 1e-3)
        if band < 20:
            return f"{plain(value, decimals)} ± {plain(band * step, decimals)}"
        decimals -= 1


def _bound(value: float, low: float, high: float) -> str:
    """A one-sided bound for a number that keeps growing in size, rounded towards zero."""
    down = low == -math.inf or (high != math.inf and value < 0.0)
    bound = high if down else low
    decimals = _decimals_of(bound, 3)
    scaled = bound * 10.0**decimals
    # towards the safe side: "at least" is rounded down, "at most" up
    rounded = math.ceil(scaled - 1e-9) if down else math.floor(scaled + 1e-9)
    return f"{'≤' if down else '≥'} {plain(rounded / 10.0**decimals, decimals)}"


def _decimals_of(value: float, digits: int) -> int:
    """Decimals that show `digits` significant digits of a value."""
    if value == 0.0 or not math.isfinite(value):
        return 0
    return digits - 1 - math.floor(math.log10(abs(value)) + 1e-12)
