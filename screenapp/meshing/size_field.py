"""How large elements should be at each place: sizes on a triangulation that covers the part.

Between the nodes the size is linear.  `grade` limits how fast it may change, `background` makes a
triangulation that is fine enough for given spots of small size.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

import numpy as np
from numpy.typing import NDArray
from scipy.sparse import coo_array
from scipy.sparse.csgraph import dijkstra
from scipy.spatial import Delaunay, cKDTree

Floats = NDArray[np.float64]
Ints = NDArray[np.int64]

GRADATION = 0.3
"""Largest change of element size over distance [-]."""

CANDIDATES = 16
"""Triangles looked at for each point when the one that holds it is sought."""

DEEPEST = 24
"""Most halvings of the background squares: sizes range over 2**24 at most."""


@dataclass(frozen=True, eq=False)
class SizeField:
    """Wanted element sides over the plane.

    Attributes:
        nodes: corners of the triangles [mm], (n, 2).
        triangles: node indices, (m, 3), any orientation.
        sizes: wanted length of an element side at each node [mm], (n,).
    """

    nodes: Floats
    triangles: Ints
    sizes: Floats

    def at(self, points: Floats) -> Floats:
        """Wanted sizes [mm] at points (k, 2); outside the triangles that of the nearest place."""
        corners = self.nodes[self.triangles]
        count = min(CANDIDATES, len(self.triangles))
        _, near = self._centroids.query(points, k=count)
        near = np.asarray(near).reshape(len(points), count)
        a = corners[near, 0]
        ab, ac = corners[near, 1] - a, corners[near, 2] - a
        ap = points[:, None, :] - a
        twice = _cross(ab, ac)
        twice = np.where(twice == 0.0, 1e-300, twice)
        shares = np.stack([_cross(ap, ac) / twice, _cross(ab, ap) / twice], axis=-1)
        shares = np.concatenate([1.0 - shares.sum(axis=-1, keepdims=True), shares], axis=-1)
        best = np.argmax(shares.min(axis=-1), axis=1)
        rows = np.arange(len(points))
        weight = np.clip(shares[rows, best], 0.0, None)
        weight /= weight.sum(axis=1, keepdims=True)
        at_corners = self.sizes[self.triangles[near[rows, best]]]
        return np.asarray((weight * at_corners).sum(axis=1))

    def scaled(self, factor: float) -> SizeField:
        """The same field with all sizes multiplied."""
        return SizeField(self.nodes, self.triangles, self.sizes * factor)

    @cached_property
    def _centroids(self) -> cKDTree:
        return cKDTree(self.nodes[self.triangles].mean(axis=1))


def grade(nodes: Floats, triangles: Ints, sizes: Floats, rate: float = GRADATION) -> Floats:
    """The largest sizes (n,) that are nowhere above `sizes` and change by at most `rate`.

    Distances are measured along the sides of the triangles: the answer is a shortest path from a
    source that stands `sizes / rate` away from each node.
    """
    n = len(nodes)
    pairs = np.concatenate([triangles[:, [0, 1]], triangles[:, [1, 2]], triangles[:, [2, 0]]])
    pairs.sort(axis=1)
    pairs = np.unique(pairs, axis=0)
    lengths = np.hypot(*(nodes[pairs[:, 0]] - nodes[pairs[:, 1]]).T)
    finite = np.flatnonzero(np.isfinite(sizes))
    rows = np.concatenate([pairs[:, 0], pairs[:, 1], np.full(len(finite), n)])
    columns = np.concatenate([pairs[:, 1], pairs[:, 0], finite])
    weights = np.concatenate([lengths, lengths, sizes[finite] / rate])
    # A zero weight would count as "no link", hence the smallest number instead.
    graph = coo_array((np.maximum(weights, 1e-300), (rows, columns)), shape=(n + 1, n + 1))
    return np.asarray(dijkstra(graph.tocsr(), indices=[n])[0, :n] * rate)


def background(
    spots: Floats, sizes: Floats, box: tuple[float, float, float, float], largest: float
) -> SizeField:
    """A field of at most `largest`, and of at most `sizes` at the `spots`, graded in between.

    Squares are halved round each spot until their side is at most the size there, neighbouring
    squares differing by one halving at most; all their corners and the spots are triangulated.

    Args:
        spots: (k, 2) [mm].
        sizes: (k,) [mm], positive.
        box: smallest x, y and largest x, y that must be covered [mm].
        largest: size [mm] where nothing asks for less.
    """
    x0, y0, x1, y1 = box
    side = 1.2 * max(x1 - x0, y1 - y0)
    corner = np.array([0.5 * (x0 + x1) - 0.5 * side, 0.5 * (y0 + y1) - 0.5 * side])
    fine = sizes < largest
    spots, sizes = spots[fine], sizes[fine]
    points = corner + side * np.array([[0, 0], [1, 0], [0, 1], [1, 1]], dtype=float)
    if len(spots):
        depth = np.clip(np.ceil(np.log2(side / sizes)), 1, DEEPEST).astype(np.int64)
        squares = _square_corners((spots - corner) / side, depth)
        points = np.concatenate([corner + side * squares, spots])
    wanted = np.full(len(points), largest)
    if len(spots):
        wanted[-len(spots) :] = sizes
    points, wanted = _merged(points, wanted)
    triangles = np.asarray(Delaunay(points).simplices, dtype=np.int64)
    return SizeField(points, triangles, grade(points, triangles, wanted))


def with_spots(field: SizeField, spots: Floats, sizes: Floats) -> SizeField:
    """The field with sizes of at most `sizes` (k,) [mm] at `spots` (k, 2) [mm], graded."""
    (x0, y0), (x1, y1) = field.nodes.min(axis=0), field.nodes.max(axis=0)
    largest = float(field.sizes.max())
    extra = background(spots, sizes, (float(x0), float(y0), float(x1), float(y1)), largest)
    nodes = np.concatenate([field.nodes, extra.nodes])
    wanted = np.concatenate([field.sizes, np.minimum(extra.sizes, field.at(extra.nodes))])
    nodes, wanted = _merged(nodes, wanted)
    triangles = np.asarray(Delaunay(nodes).simplices, dtype=np.int64)
    return SizeField(nodes, triangles, grade(nodes, triangles, np.minimum(wanted, extra.at(nodes))))


def _merged(points: Floats, sizes: Floats) -> tuple[Floats, Floats]:
    """Points nearer than a tiny share of all are one, with the least size of them: Delaunay would
    make slivers of them."""
    low = points.min(axis=0)
    cell = 1e-9 * float((points.max(axis=0) - low).max())
    _, first, group = np.unique(
        np.round((points - low) / cell), axis=0, return_index=True, return_inverse=True
    )
    least = np.full(len(first), np.inf)
    np.minimum.at(least, group.ravel(), sizes)
    return points[first], least


def _square_corners(spots: Floats, depth: Ints) -> Floats:
    """Corners of the halved squares of the unit square, (n, 2); spots in unit coordinates."""
    deepest = int(depth.max())
    corners = []
    finer = np.empty((0, 2), dtype=np.int64)
    around = np.array([(i, j) for i in (-1, 0, 1) for j in (-1, 0, 1)])
    for level in range(deepest, 0, -1):
        cells = np.floor(spots[depth >= level] * 2.0**level).astype(np.int64)
        parents = (finer[:, None, :] // 2 + around).reshape(-1, 2)
        cells = np.unique(np.concatenate([cells, parents]), axis=0)
        cells = cells[np.all((cells >= 0) & (cells < 2**level), axis=1)]
        quads = cells[:, None, :] + np.array([[0, 0], [1, 0], [0, 1], [1, 1]])
        corners.append(quads.reshape(-1, 2) * 2 ** (deepest - level))
        finer = cells
    corners.append(np.array([[0, 0], [1, 0], [0, 1], [1, 1]]) * 2**deepest)
    return np.unique(np.concatenate(corners), axis=0) / 2.0**deepest


def _cross(a: Floats, b: Floats) -> Floats:
    return np.asarray(a[..., 0] * b[..., 1] - a[..., 1] * b[..., 0])
