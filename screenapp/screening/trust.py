"""From the history of a number over the passes to its band and its trust.

The rule joins what the numbers do with what the geometry says.  The growth rate
α = -d ln(value) / d ln(size of the elements there) is fitted over the last passes:

* at a singular place (re-entrant corner, end of a support, point force) growth is what the theory
  expects; as soon as it is seen the number is *rising*;
* anywhere else α > 0.2, over at least four passes with elements eight times smaller, is *rising*;
* a number whose band is within the tolerance is *settled*: never before the third pass;
* else it is *unsettled*.

A displacement under a force or a support at a point creeps: it grows as the logarithm of the
elements' size there (Flamant's solution for a force on a half-plane), too slowly for that rule.  So
does the stress where a shear load stops (`mechanics/shear_ends.py`), whose growth is known.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from screenapp.model.findings import Estimate, Trust

LEAST_PASSES = 3
RISING_RATE = 0.2
STEADY_RATE = 0.05
RATE_PASSES = 4
RATE_SHRINKAGE = 8.0

RATE_SPAN = 4.0
"""At a singular place the fit goes back over passes until the elements were so many times larger:
there they stop shrinking one day, and passes of the same size say nothing about growth."""

BAND_OF_CHANGE = 1.0
"""Share of the last change between passes that goes into the half band."""
BAND_OF_EARLIER_CHANGE = 0.3
"""Share of the change before it: a small change after a large one may be chance."""
BAND_OF_DOUBT = 0.3
"""Share of the pointwise recovery difference, on the boundary as inside: the elements' own stress
is far worse than the recovered one, so that the difference overstates."""
BAND_FLOOR = 0.001
"""Least half band, relative to the scale.

These shares were fitted on the random parts of tests/evidence/band_parts.py (seeds 0 to 59); how
far they hold on parts that were not seen is measured by tests/evidence/calibration.py."""

CREEP_SPAN = 10.0
"""The band of a creeping number takes in what elements so many times smaller would add."""


@dataclass(frozen=True)
class Sample:
    """A number on one pass.

    Attributes:
        value: the number.
        size: size of the elements there [mm].
        doubt: the recovery's own difference there, in the number's unit (0 if not known).
    """

    value: float
    size: float
    doubt: float = 0.0


def growth(samples: Sequence[Sample], span: float = 1.0) -> float:
    """Growth rate α; 0 where it cannot be fitted.

    Args:
        samples: one for each pass, oldest first.
        span: the fit takes the last three, and earlier ones until the sizes differ by this factor.
    """
    last = [s for s in _window(samples, span) if s.value > 0.0 and s.size > 0.0]
    return -_slope([math.log(s.size) for s in last], [math.log(s.value) for s in last])


def _window(samples: Sequence[Sample], span: float) -> Sequence[Sample]:
    first = max(0, len(samples) - 3)
    while first > 0 and max(s.size for s in samples[first:]) < span * samples[-1].size:
        first -= 1
    return samples[first:]


def _slope(x: Sequence[float], y: Sequence[float]) -> float:
    """Slope of the straight line through points; 0 where they lie too near to each other."""
    if len(x) < 2 or float(np.ptp(x)) < 0.1:
        return 0.0
    return float(np.polyfit(x, y, 1)[0])


def half_band(samples: Sequence[Sample], scale: float) -> float:
    """Half the width of the band of the last sample; infinite before the second pass."""
    if len(samples) < 2:
        return math.inf
    changes = [abs(a.value - b.value) for a, b in zip(samples[1:], samples[:-1], strict=True)]
    change = changes[-1]
    if len(changes) > 1:
        change = max(change, BAND_OF_EARLIER_CHANGE * changes[-2])
    return BAND_OF_CHANGE * change + BAND_OF_DOUBT * samples[-1].doubt + BAND_FLOOR * abs(scale)


def judge(
    samples: Sequence[Sample],
    tolerance: float,
    scale: float,
    expected_rate: float = 0.0,
    creep: float = 0.0,
) -> Estimate:
    """Band and trust of the last of `samples`.

    Args:
        samples: one for each pass, oldest first; at least one.
        tolerance: relative half band at which a number counts as settled.
        scale: what the tolerance is relative to, in the number's unit.
        expected_rate: growth rate that the geometry predicts here; 0 where it predicts none.
        creep: what theory says the number gains as the elements shrink e times; 0 for nothing.
    """
    if creep > 0.0:
        return _judge_growing(samples, tolerance, scale, creep)
    value = samples[-1].value
    rate = growth(samples, RATE_SPAN if expected_rate > 0.0 else 1.0)
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


def judge_creeping(samples: Sequence[Sample], tolerance: float, scale: float) -> Estimate:
    """Band and trust of a displacement [mm] in a case with a force or a support at a point.

    It has no finite value where that point is truly a point.

    Args:
        samples: one for each pass, oldest first; their sizes are those at the point.
        tolerance, scale: as in `judge`.
    """
    last = _window(samples, RATE_SPAN)
    creep = -_slope([math.log(s.size) for s in last], [s.value for s in last])
    return _judge_growing(samples, tolerance, scale, creep)


def _judge_growing(
    samples: Sequence[Sample], tolerance: float, scale: float, creep: float
) -> Estimate:
    """Band and trust of a number that gains `creep` for ever as the elements shrink e times.

    If elements `CREEP_SPAN` times smaller would add less than the tolerance, the band takes that
    in; else it is *rising*.
    """
    more = abs(creep) * math.log(CREEP_SPAN)
    value = samples[-1].value
    if len(samples) >= LEAST_PASSES and more > tolerance * abs(scale):
        upward = creep > 0.0
        return Estimate(
            value, value if upward else -math.inf, math.inf if upward else value, "rising"
        )
    half = half_band(samples, scale) + more
    steady = half <= tolerance * abs(scale) and len(samples) >= LEAST_PASSES
    return Estimate(value, value - half, value + half, "settled" if steady else "unsettled")


def worst(trusts: Sequence[Trust]) -> Trust:
    """The least trusted of several."""
    order: list[Trust] = ["settled", "unsettled", "rising"]
    return max(trusts, key=order.index, default="settled")
