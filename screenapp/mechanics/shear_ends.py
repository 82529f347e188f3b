"""Where a shear along the boundary stops at a smooth place: the stress there grows without end.

At the end of an even shear on a straight edge the stress along the edge grows as the logarithm of
the distance (the half-plane under a tangential load; Johnson, Contact Mechanics, art. 2.5, from
memory).  At a real corner the stress stays finite, though it is not single-valued.
"""

from __future__ import annotations

import math

import numpy as np
from numpy.typing import NDArray

from screenapp.mechanics.singular_spot import SingularSpot
from screenapp.model.edge_parts import pieces_under
from screenapp.model.part import Case, ForceLoad, LineLoad, Part, ShearLoad
from screenapp.model.shape import Shape

RATE = 0.05
"""A logarithm has no growth rate of its own; over the sizes of seven passes it looks like this."""

LEAST = 1e-6
"""Jumps of less than this share of the case's largest force per length do not count."""

Shears = NDArray[np.float64]


def shear_ends(part: Part, shape: Shape, case: Case, free: list[bool]) -> list[SingularSpot]:
    """The smooth places within the free boundary where the case's shear jumps.

    Args:
        free: for each piece of the boundary, whether nothing holds it.
    """
    shear, most = _shears(part, shape, case)
    spots: list[SingularSpot] = []
    if most == 0.0:
        return spots
    for first, last in shape.loops:
        for i in range(first, last):
            j = i + 1 if i + 1 < last else first
            if not (free[i] and free[j]) or abs(shear[i, 1] - shear[j, 0]) <= LEAST * most:
                continue
            before, after = shape.curves[i], shape.curves[j]
            if float(before.curve.tangent(1.0) @ after.curve.tangent(0.0)) < 1.0 - 1e-9:
                continue
            x, y = after.curve.start
            ids = tuple(dict.fromkeys((before.feature, after.feature)))
            place = f"within {ids[0]}" if len(ids) == 1 else "between " + " and ".join(ids)
            spots.append(
                SingularSpot(
                    (float(x), float(y)),
                    ids,
                    f"a load along the boundary stops {place}, where the stress grows slowly "
                    "without end",
                    "let the load end at a corner, or judge it by a reading at a stated distance",
                    RATE,
                    f"the end of a load {place}",
                    case.id,
                )
            )
    return spots


def _shears(part: Part, shape: Shape, case: Case) -> tuple[Shears, float]:
    """Shear per length at both ends of each piece, material on its left, (n_pieces, 2) [N/mm], and
    the largest force per length of any of these loads."""
    most = 0.0
    out = np.zeros((len(shape.curves), 2))
    for load in case.loads:
        if not isinstance(load, ShearLoad | LineLoad | ForceLoad):
            continue
        pieces = pieces_under(part, shape, load)
        if isinstance(load, ShearLoad):
            out[list(pieces)] += load.per_length
            most = max(most, abs(load.per_length))
            continue
        if isinstance(load, LineLoad) and (load.end_x is not None or load.end_y is not None):
            continue  # what it comes to at its ends is no jump of its own in general
        whole = sum(shape.curves[k].curve.length for k in pieces)
        size = 1.0 if isinstance(load, LineLoad) else 1.0 / max(whole, 1e-300)
        most = max(most, size * math.hypot(load.x, load.y))
        for k in pieces:
            curve = shape.curves[k].curve
            for end, t in enumerate((0.0, 1.0)):
                out[k, end] += size * float(np.dot(curve.tangent(t), (load.x, load.y)))
    return out, most
