"""Which elements lie across a wall, and how many across the narrowest one."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np
from numpy.typing import NDArray
from scipy.sparse import coo_array, csr_array
from scipy.sparse.csgraph import dijkstra

from screenapp.meshing.walls import measure_walls
from screenapp.model.ligaments import Ligament
from screenapp.model.mesh import Mesh
from screenapp.model.shape import Shape

Ints = NDArray[np.int64]

NEARLY = 1.05
"""Walls up to this much thicker than the thinnest count as narrowest too."""

MOST_PLACES = 40


def elements_across(mesh: Mesh, shape: Shape) -> int:
    """Least number of elements that must be passed, side by side, from one face of the narrowest
    wall to the other; 0 if no boundary faces another.

    At each narrowest place the way starts in any element on the near boundary within one wall
    thickness and ends in any such element on the far boundary, so a staggered row does not count
    for more than it is.
    """
    walls = measure_walls(shape)
    if not np.isfinite(walls.thinnest):
        return 0
    places = np.flatnonzero(walls.thickness <= NEARLY * walls.thinnest)
    places = places[:: max(1, len(places) // MOST_PLACES)]
    neighbours = _neighbours(mesh)
    middles = mesh.nodes[mesh.side_nodes[:, 1]]
    lengths = np.hypot(*(mesh.nodes[mesh.side_nodes[:, 2]] - mesh.nodes[mesh.side_nodes[:, 0]]).T)
    fewest = np.inf
    for k in places:
        reach = walls.thickness[k]
        near, far = (
            _elements_at(mesh, middles, lengths, at, reach, int(piece))
            for at, piece in (
                (walls.points[k], walls.piece[k]),
                (walls.facing[k], walls.facing_piece[k]),
            )
        )
        steps = dijkstra(neighbours, indices=near, unweighted=True, min_only=True)
        fewest = min(fewest, float(steps[far].min()) + 1.0)
    return int(fewest)


def elements_between(mesh: Mesh, shape: Shape, walls: Sequence[Ligament]) -> list[Ints]:
    """For each wall the elements that are passed on the shortest way from end to end, in order.

    The way starts and ends as in `elements_across`.
    """
    neighbours = _neighbours(mesh)
    middles = mesh.nodes[mesh.side_nodes[:, 1]]
    lengths = np.hypot(*(mesh.nodes[mesh.side_nodes[:, 2]] - mesh.nodes[mesh.side_nodes[:, 0]]).T)
    chains: list[Ints] = []
    for wall in walls:
        near, far = (
            _elements_at(mesh, middles, lengths, np.array(at), wall.width, *shape.pieces_of(id_))
            for at, id_ in zip(wall.ends, wall.between, strict=True)
        )
        steps, before, _ = dijkstra(
            neighbours, indices=near, unweighted=True, min_only=True, return_predecessors=True
        )
        chain = [int(far[np.argmin(steps[far])])]
        while before[chain[-1]] >= 0:
            chain.append(int(before[chain[-1]]))
        chains.append(np.array(chain[::-1], dtype=np.int64))
    return chains


def _elements_at(
    mesh: Mesh,
    middles: NDArray[np.float64],
    lengths: NDArray[np.float64],
    at: NDArray[np.float64],
    reach: float,
    *pieces: int,
) -> Ints:
    """Elements with a side on a piece within `reach` [mm] of a point, at least the nearest."""
    mine = np.flatnonzero(np.isin(mesh.side_piece, pieces))
    far = np.hypot(*(middles[mine] - at).T) - 0.5 * lengths[mine]
    picked = mine[(far <= 0.5 * reach) | (far == far.min())]
    return np.unique(mesh.sides[picked, 0])


def _neighbours(mesh: Mesh) -> csr_array:
    """Elements that share a side, as a sparse matrix."""
    quads = mesh.quads[:, :4]
    ends = np.sort(np.stack([quads, np.roll(quads, -1, axis=1)], axis=2).reshape(-1, 2), axis=1)
    _, edge = np.unique(ends, axis=0, return_inverse=True)
    element = np.repeat(np.arange(len(quads)), 4)
    order = np.argsort(edge, kind="stable")
    edge, element = edge[order], element[order]
    same = np.flatnonzero(edge[1:] == edge[:-1])
    a, b = element[same], element[same + 1]
    n = len(quads)
    return coo_array((np.ones(2 * len(a)), (np.r_[a, b], np.r_[b, a])), shape=(n, n)).tocsr()
