"""Where forces and supports act at a point, which lets a part creep."""

from __future__ import annotations

from collections.abc import Sequence

from screenapp.mechanics.singular_spot import POINT_RATE
from screenapp.screening.passes import Pass


def sizes_at_points(case: str, passes: Sequence[Pass]) -> list[float] | None:
    """Element size [mm] on each pass where a case has a force or a support at a point.

    The smallest where there are several; None where there is none.
    """
    at_point = [s.rate >= POINT_RATE and s.case in ("", case) for s in passes[-1].spots]
    if not any(at_point):
        return None
    return [float(p.spot_sizes[at_point].min()) for p in passes]
