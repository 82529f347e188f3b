"""The record of a place where the theory of elasticity gives no finite stress."""

from __future__ import annotations

from dataclasses import dataclass

from screenapp.model.part import Point


@dataclass(frozen=True)
class SingularSpot:
    """One such place.

    Attributes:
        at: [mm].
        ids: what meets there (corner, edges, zones, support, load).
        why: in words, e.g. "the stress at the sharp re-entrant corner c4 (270°) has no finite
            value".
        mend: what would settle it.
        rate: growth rate α = 1 - λ; 1 under a point force (stress as 1/r).
        place: where, in words, e.g. "corner c4".
        case: id of the only case it belongs to; empty for all cases.
    """

    at: Point
    ids: tuple[str, ...]
    why: str
    mend: str
    rate: float
    place: str
    case: str = ""
