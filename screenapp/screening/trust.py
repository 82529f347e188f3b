"""From the history of a number over the passes to its band and its trust.

The rule joins what the numbers do with what the geometry says.  The growth rate
α = -d ln(value) / d ln(size of the elements there) is fitted over the last three passes:

* at a singular place (re-entrant corner, end of a support, point force) growth is what the theory
  expects; as soon as it is seen the number is *rising*;
* anywhere else α > 0.2, over at least four passes with elements eight times smaller, is *rising*;
* a number whose band is within the tolerance is *settled*: never before the third pass;
* else it is *unsettled*.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass
from typing import Literal

import numpy as np

from screenapp.model.findings import Estimate, Trust

LEAST_PASSES = 3
RISING_RATE = 0.2
STEADY_RATE = 0.05
RATE_PASSES = 4
RATE_SHRINKAGE = 8.0

BAND_OF_CHANGE = 1.0
"""Share of the last change between passes that goes into the half band."""
BAND_OF_EARLIER_CHANGE = 0.3
"""Share of the change before it: a small change after a large one may be chance."""
BAND_OF_DOUBT = {"edge": 0.2, "inside": 1.6}
"""Share of the pointwise recovery difference.  On the boundary the elements' own stress is far
worse than the recovered one, so the difference overstates; inside it understates."""
BAND_FLOOR = {"edge": 0.001, "inside": 0.004}
"""Least half band, relative to the scale.

These shares were fitted on the random parts of tests/evidence/band_parts.py (seeds 0 to 59) so that
at least 95 % of the settled numbers held the value of a far finer mesh."""


@dataclass(frozen=True)
class Sample:
    """A number on one pass.

    Attributes:
        value: the number.
        size: size of the elements there [mm].
        doubt: the recovery's own difference there, in the number's unit (0 if not known).
        place: on the boundary, where stress is recovered along the edge, or inside.
    """

    value: float
    size: float
    doubt: float = 0.0
    place: Literal["edge", "inside"] = "edge"


def growth(samples: Sequence[Sample]) -> float:
    """Growth rate α fitted over the last three passes; 0 where it cannot be fitted."""
    last = [s for s in samples[-3:] if s.value > 0.0 and s.size > 0.0]
    if len(last) < 2:
        return 0.0
    x, y = np.log([s.size for s in last]), np.log([s.value for s in last])
    if float(np.ptp(x)) < 0.1:
        return 0.0
    return -float(np.polyfit(x, y, 1)[0])


def half_band(samples: Sequence[Sample], scale: float) -> float:
    """Half the width of the band of the last sample; infinite before the second pass."""
    if len(samples) < 2:
        return math.inf
    changes = [abs(a.value - b.value) for a, b in zip(samples[1:], samples[:-1], strict=True)]
    change = changes[-1]
    if len(changes) > 1:
        change = max(change, BAND_OF_EARLIER_CHANGE * changes[-2])
    last = samples[-1]
    return (
        BAND_OF_CHANGE * change
        + BAND_OF_DOUBT[last.place] * last.doubt
        + BAND_FLOOR[last.place] * abs(scale)
    )


def judge(
    samples: Sequence[Sample], tolerance: float, scale: float, expected_rate: float = 0.0
) -> Estimate:
    """Band and trust of the last of `samples`.

    Args:
        samples: one for each pass, oldest first; at least one.
        tolerance: relative half band at which a number counts as settled.
        scale: what the tolerance is relative to, in the number's unit.
        expected_rate: growth rate that the geometry predicts here; 0 where it predicts none.
    """
    value = samples[-1].value
    rate = growth(samples)
    shrinkage = max(s.size for s in samples) / max(samples[-1].size, 1e-300)
    long_run = len(samples) >= RATE_PASSES and shrinkage >= RATE_SHRINKAGE
    if expected_rate > 0.0 and len(samples) >= 2 and rate > max(0.02, 0.3 * expected_rate):
        return Estimate(value, value, math.inf, "rising")
    if long_run and rate > RISING_RATE:
        return Estimate(value, value, math.inf, "rising")
    half = half_band(samples, scale)
    steady = half <= tolerance * abs(scale) and len(samples) >= LEAST_PASSES
    if expected_rate > 0.0:  # theory warns of growth: only a long steady run overrules it
        steady = steady and long_run and rate < STEADY_RATE
    trust: Trust = "settled" if steady else "unsettled"
    return Estimate(value, value - half, value + half, trust)


def worst(trusts: Sequence[Trust]) -> Trust:
    """The least trusted of several."""
    order: list[Trust] = ["settled", "unsettled", "rising"]
    return max(trusts, key=order.index, default="settled")
