"""Where forces and supports act at a point, which lets a part creep."""

from __future__ import annotations

from collections.abc import Iterable, Sequence

import numpy as np

from screenapp.mechanics.singular_spot import POINT_RATE, SingularSpot
from screenapp.screening.passes import Pass


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
