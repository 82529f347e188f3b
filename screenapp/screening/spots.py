"""Which singular place, if any, a peak or a probe belongs to, and what lets a part creep."""

from __future__ import annotations

import math
from collections.abc import Iterable, Sequence

import numpy as np

from screenapp.mechanics.singular_spots import SingularSpot
from screenapp.model.part import Point
from screenapp.screening.passes import Pass

POINT_RATE = 1.0
"""Growth rate of the stress under a force at a point, where the displacement has no finite value
either."""


def spot_at(
    spots: Iterable[SingularSpot], at: Point, case: str, reach: float
) -> SingularSpot | None:
    """The nearest singular place of a case within `reach` [mm] of a point, or None."""
    near = [s for s in spots if s.case in ("", case) and math.dist(s.at, at) <= reach]
    return min(near, key=lambda s: (math.dist(s.at, at), -s.rate), default=None)


def sizes_at_points(
    spots: Iterable[SingularSpot], case: str, passes: Sequence[Pass]
) -> list[float] | None:
    """Element size [mm] on each pass where a case has a force or a support at a point.

    The smallest where there are several; None where there is none.
    """
    places = [s.at for s in spots if s.rate >= POINT_RATE and s.case in ("", case)]
    if not places:
        return None
    return [float(p.read(np.array(places)).size.min()) for p in passes]
