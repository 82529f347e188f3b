"""What is known of the stress where two sides of the boundary meet at an angle.

At a convex corner the tractions on both sides fix the whole stress (a free corner has none).  At a
right angle against a line of symmetry the field goes on in its mirror image.
"""

from __future__ import annotations

import math

import numpy as np
from numpy.typing import NDArray

from screenapp.mechanics.boundary_chains import SMOOTH_TURN, BoundaryChains
from screenapp.model.mesh import Mesh
from screenapp.model.part import Part, PointLoad

Floats = NDArray[np.float64]
Ints = NDArray[np.int64]
Bools = NDArray[np.bool_]

LEAST_TURN = math.radians(45.0)
"""A corner must turn by this for its tractions to fix the stress; flatter ones reach it too
slowly for the elements next to them (Williams 1952: the next term grows as r^0.18 at 150°)."""

NEGLIGIBLE = 1e-6  # share of the largest traction of a case


def known_corners(
    chains: BoundaryChains, traction: Floats, held: Bools, disturbed: Bools
) -> tuple[Floats, Bools]:
    """Stress at the corner at every side's end, where the tractions on both sides fix it.

    Four tractions fix three stresses; where they contradict each other (a shear on one side only)
    the stress is not single-valued and nothing is known.  One such case rules the corner out for
    all, so that the recovery of a sum of cases is the sum of their recoveries.

    Args:
        traction: (n_cases, n_sides, 3, 2) [MPa].
        held: (n_sides, 2).
        disturbed: corners with a point load or a support of their own, by the side that ends
            there, (n_sides,).

    Returns:
        σx, σy, τxy (n_cases, n_sides, 3) [MPa] and whether they are known (n_sides,).
    """
    after = chains.following
    turn = chains.turn
    open_ = (turn >= LEAST_TURN) & (turn <= math.pi - LEAST_TURN) & ~disturbed
    open_ &= chains.same_wall & ~held.any(axis=1) & ~held[after].any(axis=1)
    n1, n2 = chains.normals[:, 2], chains.normals[after, 0]
    t1, t2 = traction[:, :, 2], traction[:, after, 0]
    contradiction = np.abs((t1 * n2).sum(axis=-1) - (t2 * n1).sum(axis=-1))
    scale = np.abs(traction).max(axis=(1, 2, 3))[:, None]
    known = open_ & (contradiction <= NEGLIGIBLE * scale).all(axis=0)
    stress = np.zeros((*contradiction.shape, 3))
    some = np.flatnonzero(open_)
    rows = np.zeros((len(some), 4, 3))
    for k, n in ((0, n1[some]), (2, n2[some])):
        rows[:, k, 0], rows[:, k, 2] = n[:, 0], n[:, 1]
        rows[:, k + 1, 1], rows[:, k + 1, 2] = n[:, 1], n[:, 0]
    right = np.concatenate([t1[:, some], t2[:, some]], axis=-1)
    stress[:, some] = (np.linalg.pinv(rows) @ right[..., None])[..., 0]
    return stress, known


def mirrored_ends(chains: BoundaryChains, traction: Floats, held: Bools) -> Bools:
    """Whether a line of symmetry stands at the start and end of each side, (n_sides, 2).

    A line of symmetry is a straight side, held along its normal only and free of shear, that meets
    the side at a right angle; the side itself must be free of shear there too.
    """
    shear = np.abs((traction * chains.tangents).sum(axis=-1))
    scale = NEGLIGIBLE * np.abs(traction).max(axis=(1, 2, 3))[:, None, None]
    smooth = (shear <= scale).all(axis=0)  # (n_sides, 3)
    straight = np.abs(chains.curvature) * chains.lengths < 1e-6
    plane = held[:, 0] & ~held[:, 1] & straight & smooth.all(axis=1)
    free = ~held.any(axis=1)
    right = np.abs(chains.turn - 0.5 * math.pi) < SMOOTH_TURN
    right &= chains.same_wall
    before, after = chains.preceding, chains.following
    return np.stack(
        [
            free & smooth[:, 0] & right[before] & plane[before],
            free & smooth[:, 2] & right & plane[after],
        ],
        axis=1,
    )


def disturbed_corners(part: Part, mesh: Mesh) -> Bools:
    """Sides that end at a corner with a point load or a support of its own, (n_sides,)."""
    names = {support.on for support in part.supports}
    names |= {load.on for case in part.cases for load in case.loads if isinstance(load, PointLoad)}
    nodes = [node for name, node in mesh.corner_nodes.items() if name in names]
    return np.isin(mesh.side_nodes[:, 2], nodes)
