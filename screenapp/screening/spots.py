"""Which singular place, if any, a peak or a probe belongs to."""

from __future__ import annotations

import math
from collections.abc import Iterable

from screenapp.mechanics.singular_spots import SingularSpot
from screenapp.model.part import Point


def spot_at(
    spots: Iterable[SingularSpot], at: Point, case: str, reach: float
) -> SingularSpot | None:
    """The nearest singular place of a case within `reach` [mm] of a point, or None."""
    near = [s for s in spots if s.case in ("", case) and math.dist(s.at, at) <= reach]
    return min(near, key=lambda s: (math.dist(s.at, at), -s.rate), default=None)
