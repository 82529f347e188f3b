"""The level of a case: the stress that thresholds and tolerances are measured against.

The largest value of all will not do where it belongs to a singular place: it grows with every
refinement, so that beside it all other peaks would fall under any share of it and any number would
pass for closely known.  So what lies round the singular places is left out.
"""

from __future__ import annotations

import math
from collections.abc import Sequence

import numpy as np
from numpy.typing import NDArray

from screenapp.mechanics.singular_spot import POINT_RATE, SingularSpot
from screenapp.model.mesh import Mesh
from screenapp.model.shape import Shape

Floats = NDArray[np.float64]
Bools = NDArray[np.bool_]

REACH_SHARE = 0.02
"""What lies within this share of the part's size of a singular place is left out ..."""
REACH_SHARE_OF_POINT = 0.08
"""... and within this one of a force or a support at a point: a quarter of the part away from it
the stress is a third of what it is there, as it is at 2 % of a corner's r^-0.45 ..."""
REACH_OF_WALL = 0.5
"""... but no more than this share of the way to the boundary opposite, so that a narrow wall is
not lost as a whole ..."""
REACH_ELEMENTS = 3.0
"""... and no less than so many of the elements that stand there: their stress is that of the
singular place itself."""

MOST_LEFT_OUT = 0.5
"""Where more than this share of the area would be left out, the reach is halved, again and again:
on a coarse first mesh everything is within a few elements of some corner."""
_HALVINGS = 6

LEAST_LEVEL = 1e-6
"""The level is at least this share of the largest value of all, or rounding would count."""


def round_spots(
    spots: Sequence[SingularSpot],
    shape: Shape,
    mesh: Mesh,
    node_sizes: Floats,
    element_sizes: Floats,
) -> Bools:
    """Which nodes lie so near to a singular place that their stress does not count, (n_nodes,).

    Args:
        spots: those of one case.
        node_sizes: size of the smallest element at each node [mm], (n_nodes,).
        element_sizes: [mm], (n_elements,).
    """
    none = np.zeros(mesh.n_nodes, dtype=bool)
    if not spots:
        return none
    far = np.array([np.hypot(*(mesh.nodes - spot.at).T) for spot in spots])
    here = node_sizes[np.argmin(far, axis=1)]
    drawn = np.array([_reach_on_drawing(shape, spot) for spot in spots])
    reach = np.maximum(drawn, REACH_ELEMENTS * here)
    area = element_sizes**2
    for halving in range(_HALVINGS):
        near = np.asarray((far <= reach[:, None] * 0.5**halving).any(axis=0))
        if area[near[mesh.quads[:, 8]]].sum() <= MOST_LEFT_OUT * area.sum() and not near.all():
            return near
    return none


def _reach_on_drawing(shape: Shape, spot: SingularSpot) -> float:
    """Radius round a singular place that goes by the drawing alone [mm]."""
    share = REACH_SHARE_OF_POINT if spot.rate >= POINT_RATE else REACH_SHARE
    reach = share * shape.size
    for piece in shape.curves:
        curve = piece.curve
        away = math.dist(spot.at, curve.point(curve.nearest(spot.at)))
        if away > 1e-6 * shape.size:
            reach = min(reach, REACH_OF_WALL * away)
    return reach


def level(values: Floats, near: Bools) -> float:
    """The largest of values [MPa] that does not lie near a singular place; 0 at least.

    Args:
        values: (n,).
        near: which of them lie near one, (n,).
    """
    largest = float(values.max(initial=0.0))
    beside = float(values[~near].max(initial=0.0))
    return max(beside, LEAST_LEVEL * largest)
