"""The record of a place where the theory of elasticity gives no finite stress, and its search."""

from __future__ import annotations

import math
from collections.abc import Iterable
from dataclasses import dataclass

from screenapp.model.part import Point

POINT_RATE = 1.0
"""Growth rate of the stress under a force at a point, where the displacement has no finite value
either."""


@dataclass(frozen=True)
class SingularSpot:
    """One such place.

    Attributes:
        at: [mm].
        ids: what meets there (corner, edges, zones, support, load).
        why: in words, e.g. "the stress at the sharp re-entrant corner c4 (270°) has no finite
            value".
        mend: what would settle it.
        rate: growth rate α = 1 - λ; 1 under a point force (stress as 1/r); 0 where it grows as
            ln(1/r) alone.
        place: where, in words, e.g. "corner c4".
        case: id of the only case it belongs to; empty for all cases.
        creep: growth of the stress over ln(1/r) [MPa] where that is all; else 0.
    """

    at: Point
    ids: tuple[str, ...]
    why: str
    mend: str
    rate: float
    place: str
    case: str = ""
    creep: float = 0.0


def spot_at(
    spots: Iterable[SingularSpot], at: Point, case: str, reach: float
) -> SingularSpot | None:
    """The nearest singular place of a case within `reach` [mm] of a point, or None."""
    near = [s for s in spots if s.case in ("", case) and math.dist(s.at, at) <= reach]
    return min(near, key=lambda s: (math.dist(s.at, at), -s.rate), default=None)
