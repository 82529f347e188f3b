"""From linear quads to the mesh record: middle and centre nodes, and the sides of the boundary."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from screenapp.meshing.boundary_points import BoundaryPoints
from screenapp.model.mesh import Mesh
from screenapp.model.shape import Shape

Floats = NDArray[np.float64]
Ints = NDArray[np.int64]


def build_mesh(shape: Shape, boundary: BoundaryPoints, points: Floats, quads: Ints) -> Mesh:
    """The nine-node mesh on linear quads whose first points are the boundary points.

    Its `worst_jacobian` is left at zero for `checks` to fill in.

    Raises:
        ValueError: a side of the boundary belongs to no quad, or a free side to no piece.
    """
    edges, edge_of = _edges(quads)
    element, side = _owners_of_sides(boundary, quads)
    middles = 0.5 * (points[edges[:, 0]] + points[edges[:, 1]])
    middles[edge_of[element, side]] = side_middles(shape, boundary)
    n, m = len(points), len(edges)
    own = middles[edge_of]
    centres = 0.5 * own.sum(axis=1) - 0.25 * points[quads].sum(axis=1)
    nodes = np.concatenate([points, middles, centres])
    all_quads = np.concatenate([quads, n + edge_of, n + m + np.arange(len(quads))[:, None]], axis=1)
    return Mesh(
        nodes,
        all_quads,
        np.stack([element, side], axis=1),
        boundary.piece.copy(),
        np.stack([boundary.t0, boundary.t1], axis=1),
        _corner_nodes(shape, boundary),
        0.0,
    )


def side_middles(shape: Shape, boundary: BoundaryPoints) -> Floats:
    """The point of each side at the middle of its parameters, on the exact curve, (n, 2)."""
    t = 0.5 * (boundary.t0 + boundary.t1)
    middles = np.empty((len(t), 2))
    bounds = np.searchsorted(boundary.piece, np.arange(len(shape.curves) + 1))
    for k, piece in enumerate(shape.curves):
        rows = slice(bounds[k], bounds[k + 1])
        middles[rows] = piece.curve.point(t[rows])
    return middles


def _edges(quads: Ints) -> tuple[Ints, Ints]:
    """Unique edges (k, 2), lower node first, and the edge of each side of each quad (m, 4)."""
    ends = np.stack([quads, np.roll(quads, -1, axis=1)], axis=2).reshape(-1, 2)
    ends.sort(axis=1)
    edges, edge_of = np.unique(ends, axis=0, return_inverse=True)
    return edges, edge_of.reshape(-1, 4)


def _owners_of_sides(boundary: BoundaryPoints, quads: Ints) -> tuple[Ints, Ints]:
    """Element and local side of each side of the boundary."""
    n = int(quads.max()) + 1
    start, stop = quads.ravel(), np.roll(quads, -1, axis=1).ravel()
    key = start * n + stop
    order = np.argsort(key)
    wanted = np.arange(len(boundary.piece)) * n + boundary.following
    place = np.searchsorted(key[order], wanted)
    found = order[np.minimum(place, len(order) - 1)]
    missing = key[found] != wanted
    if missing.any():
        at = boundary.points[np.flatnonzero(missing)[0]]
        raise ValueError(f"no quad lies on the boundary at ({at[0]:.4g}, {at[1]:.4g}) mm")
    return found // 4, found % 4


def _corner_nodes(shape: Shape, boundary: BoundaryPoints) -> dict[str, int]:
    """The node at each sharp corner: the start of a piece, and the nearest such."""
    starts = np.flatnonzero(boundary.t0 == 0.0)
    corners = {}
    for name, at in shape.sharp_corners:
        far = np.hypot(*(boundary.points[starts] - np.asarray(at)).T)
        corners[name] = int(starts[np.argmin(far)])
    return corners
