"""Moves the inner nodes of linear quads to where the elements are closest to squares.

Each corner of each quad, with sides a and b, counts κ = (|a|² + |b|²) / (2 a×b): 1 at the corner of
a square, growing without limit as the corner folds up or one side gets long (the inverse mean
ratio; Knupp 2001, SIAM J. Sci. Comput. 23, from memory).  The sum of κ^`POWER` is made small by a
quasi-Newton method; a high power looks after the worst corners.  Along the boundary the sides are
the tangents of the curved sides, so elements there are squared to the true boundary.  a×b is
replaced by a positive function of it, so that a folded element can be unfolded (Escobar et al.
2003, Comput. Methods Appl. Mech. Eng. 192, from memory).
"""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray
from scipy.optimize import minimize
from scipy.sparse import csr_array

Floats = NDArray[np.float64]
Ints = NDArray[np.int64]

POWER = 3
STEPS = 40

UNFOLDING = 0.05
"""The positive function differs from a×b below about this share of the element's area."""


def smooth(points: Floats, quads: Ints, following: Ints, middles: Floats) -> Floats:
    """The points (n, 2) with all but the boundary's moved.

    Args:
        points: (n, 2) [mm], boundary points first.
        quads: (m, 4), counter-clockwise.
        following: the boundary point after each boundary point, (n_boundary,).
        middles: the middle of the curved side between both [mm], (n_boundary, 2).
    """
    n, fixed = len(points), len(following)
    if n == fixed:
        return points
    start, stop = quads, np.roll(quads, -1, axis=1)
    curved = (start < fixed) & (following[np.minimum(start, fixed - 1)] == stop)
    # Slopes of the parabola through start, middle and end, at both ends.
    x0, x1, xm = points[start[curved]], points[stop[curved]], middles[start[curved]]
    leaving_fixed, arriving_fixed = 4.0 * xm - 3.0 * x0 - x1, 3.0 * x1 + x0 - 4.0 * xm
    scale = _mean_areas(points, quads)[:, None]
    slack = 2.0 * UNFOLDING * scale
    rows = np.arange(4 * len(quads))
    gather = csr_array(
        (np.ones(len(rows)), (quads.ravel(), rows)), shape=(n, len(rows))
    )  # adds up what the corners contribute to each node
    # Moves are counted in sides of the elements round each node: sizes range over decades, and
    # the method would otherwise see little but the smallest elements.
    corners, sides = quads.ravel(), np.sqrt(np.repeat(scale[:, 0], 4))
    around = np.bincount(corners, sides, n) / np.bincount(corners, minlength=n)
    unit = np.repeat(around[fixed:], 2)

    def cost(moving: Floats) -> tuple[float, Floats]:
        x = np.concatenate([points[:fixed], points[fixed:] + (moving * unit).reshape(-1, 2)])
        side = x[stop] - x[start]
        leaving, arriving = side.copy(), side
        leaving[curved] = leaving_fixed
        arriving = side.copy()
        arriving[curved] = arriving_fixed
        a, b = leaving, -np.roll(arriving, 1, axis=1)
        cross = a[..., 0] * b[..., 1] - a[..., 1] * b[..., 0]
        root = np.sqrt(cross**2 + slack**2)
        positive = 0.5 * (cross + root)
        slope = 0.5 * (1.0 + cross / root)
        squares = (a**2).sum(axis=-1) + (b**2).sum(axis=-1)
        kappa = squares / (2.0 * positive)
        value = float((kappa**POWER).sum())
        factor = POWER * kappa ** (POWER - 1) / positive
        turn = factor * kappa * slope
        by_a = factor[..., None] * a - turn[..., None] * np.stack([b[..., 1], -b[..., 0]], axis=-1)
        by_b = factor[..., None] * b - turn[..., None] * np.stack([-a[..., 1], a[..., 0]], axis=-1)
        by_leaving = by_a
        by_leaving[curved] = 0.0
        by_arriving = -np.roll(by_b, -1, axis=1)
        by_arriving[curved] = 0.0
        by_side = by_leaving + by_arriving  # at the start node of the side: minus this
        by_corner = np.roll(by_side, 1, axis=1) - by_side
        gradient = gather @ by_corner.reshape(-1, 2)
        return value, gradient[fixed:].ravel() * unit

    found = minimize(
        cost,
        np.zeros(2 * (n - fixed)),
        jac=True,
        method="L-BFGS-B",
        options={"maxiter": STEPS, "maxcor": 8},
    )
    moved = points[fixed:] + (np.asarray(found.x) * unit).reshape(-1, 2)
    return np.concatenate([points[:fixed], moved])


def _mean_areas(points: Floats, quads: Ints) -> Floats:
    """A representative area of each quad that is positive even if it is folded, (m,) [mm²]."""
    p = points[quads]
    side = np.roll(p, -1, axis=1) - p
    return np.asarray((side**2).sum(axis=(1, 2)) / 4.0)
