"""Element sizes: the first ones from the part's form, later ones from the error of a mesh.

The first sizes follow from four things: no arc turns by more than `ARC_ANGLE` over an element, no
piece of the boundary has fewer than two elements, at least `across` elements lie across each wall
between facing boundaries, and nothing is larger than the user's wish (or a share of the part).
Between such places the size changes by at most 0.3 per distance.
"""

from __future__ import annotations

import math

import numpy as np
from numpy.typing import NDArray

from screenapp.meshing.boundary_points import count_sides
from screenapp.meshing.inside import inside_shape
from screenapp.meshing.size_field import SizeField, background, grade
from screenapp.meshing.walls import measure_walls
from screenapp.model.curves import Arc, Curve
from screenapp.model.mesh import Mesh
from screenapp.model.part import MeshWishes
from screenapp.model.shape import Shape

Floats = NDArray[np.float64]
Ints = NDArray[np.int64]

ARC_ANGLE = math.radians(22.5)
"""Turn of an arc over one element of the first mesh: 16 round a hole, 4 along a quarter fillet
(common practice, no source)."""

COARSEST_ANGLE = math.radians(45.0)
"""Turn of an arc over one element that no later mesh may exceed."""

FIGURES = 6
"""Figures of a size that count."""

GRID = 1e-9
"""Share of the part's size to which the places of sizes are rounded."""

INSIDE, ALONG = 0.92, 0.65
"""Elements per unit of the integral of 1/h² over the part, and of 1/h along its boundary."""

SHARE_OF_PART = 1.0 / 24.0
"""Largest side of the first mesh over the diagonal of the part, where the user has no wish."""


def initial_sizes(shape: Shape, wishes: MeshWishes) -> SizeField:
    """Sizes of the first mesh [mm], from curvature, small features, walls and the user's wishes."""
    largest = SHARE_OF_PART * shape.size if wishes.size is None else wishes.size
    return _from_form(shape, largest, ARC_ANGLE, wishes.across)


def uniform_sizes(shape: Shape, h: float) -> SizeField:
    """The same size `h` [mm] everywhere, less only where a piece of the boundary needs it: each
    has two elements at least and no arc turns by more than 45° over an element."""
    return _from_form(shape, h, COARSEST_ANGLE, 0)


def adapted_sizes(
    shape: Shape, mesh: Mesh, wanted: Floats, smallest: float, largest: float, across: int = 3
) -> SizeField:
    """Sizes for the next mesh on the nodes of the last one.

    Args:
        shape: the boundary.
        mesh: the last mesh.
        wanted: wanted sizes [mm] at its nodes, (n_nodes,); not finite where nothing is wanted.
        smallest: no size below this [mm], except where the form of the part asks for it.
        largest: no size above this [mm].
        across: least number of elements across a wall.
    """
    sizes = np.where(np.isfinite(wanted), wanted, largest)
    sizes = np.clip(sizes, smallest, largest)
    form = _from_form(shape, largest, COARSEST_ANGLE, across)
    sizes = np.minimum(sizes, form.at(mesh.nodes))
    triangles = _triangles_of(mesh.quads)
    graded = grade(mesh.nodes, triangles, sizes)
    return _on_corners_and_centres(mesh, graded)


def estimate_elements(shape: Shape, sizes: SizeField) -> int:
    """About how many quads a mesh with these sizes will have, before it is made.

    The integral of 1/h² over the part and that of 1/h along its boundary, each by a measured
    share: inside, triangles come out a little larger than asked, along the boundary smaller.
    Measured on 160 random parts and six uniform meshes of 400 to 190 000 elements: the meshes
    had 0.98 to 1.31 times as many.

    Each triangle is split in 16 and every bit counts by its centre, so that the edge of the part
    is followed.
    """
    corners, h = sizes.nodes[sizes.triangles], sizes.sizes[sizes.triangles]
    a, b = corners[:, 1] - corners[:, 0], corners[:, 2] - corners[:, 0]
    area = 0.5 * np.abs(a[:, 0] * b[:, 1] - a[:, 1] * b[:, 0])
    # The coarsest triangles may be larger than the part: split them until they are small.
    total = 0.0
    shares = _bit_centres(4)
    big = area > 1e-3 * shape.size**2
    for group, split in ((~big, shares), (big, _bit_centres(32))):
        if not group.any():
            continue
        points = np.einsum("ks,msd->mkd", split, corners[group])
        size = np.einsum("ks,ms->mk", split, h[group])
        inside = inside_shape(shape, points.reshape(-1, 2)).reshape(size.shape)
        total += float(np.sum(inside / size**2 * area[group, None] / len(split)))
    along = count_sides(shape, sizes)
    return math.ceil(INSIDE * total + ALONG * along)


def without_noise(sizes: Floats) -> Floats:
    """Sizes to six figures: their last digits come from the rounding of the solution, which differs
    from machine to machine, and a mesher makes another mesh of the smallest difference."""
    scale = 10.0 ** (np.floor(np.log10(sizes)) - FIGURES + 1)
    return np.asarray(np.round(sizes / scale) * scale)


def piece_limit(curve: Curve, angle: float) -> float:
    """Largest side [mm] on a piece of the boundary: half its length, or `angle` [rad] of turn."""
    limit = 0.5 * curve.length
    if isinstance(curve, Arc):
        limit = min(limit, curve.radius * angle)
    return limit


def _from_form(shape: Shape, largest: float, angle: float, across: int) -> SizeField:
    """A field from the form of the part: pieces, arcs and, if `across` > 0, walls."""
    spots, sizes = [], []
    for part in shape.parts:
        for piece in part.shape.curves:
            limit = piece_limit(piece.curve, angle)
            if limit >= largest:
                continue
            count = math.ceil(piece.curve.length / limit)
            spots.append(piece.curve.point(np.linspace(0.0, 1.0, count + 1)))
            sizes.append(np.full(count + 1, limit))
        if across > 0:
            walls = measure_walls(part.shape)
            # Elements come from triangles twice as large, of which a whole number lies across.
            layers = 2 * math.ceil(0.5 * across)
            thin = walls.thickness < layers * largest
            spots.append(walls.points[thin])
            sizes.append(walls.thickness[thin] / layers)
    points = np.concatenate(spots) if spots else np.empty((0, 2))
    limits = np.concatenate(sizes) if sizes else np.empty(0)
    return background(points, limits, shape.bounds, largest)


def _triangles_of(quads: Ints) -> Ints:
    """Eight triangles of each nine-node quad, fanned round its centre, (8 n, 3)."""
    ring = [0, 4, 1, 5, 2, 6, 3, 7]
    fans = [quads[:, [8, ring[k], ring[(k + 1) % 8]]] for k in range(8)]
    return np.concatenate(fans)


def _on_corners_and_centres(mesh: Mesh, sizes: Floats) -> SizeField:
    """The field on four triangles a quad: half as many for the mesher to search."""
    quads = mesh.quads
    fans = [quads[:, [8, k, (k + 1) % 4]] for k in range(4)]
    triangles = np.concatenate(fans)
    used, compact = np.unique(triangles, return_inverse=True)
    low = mesh.nodes.min(axis=0)
    cell = GRID * float(np.ptp(mesh.nodes, axis=0).max())
    places = low + np.round((mesh.nodes[used] - low) / cell) * cell
    return SizeField(places, compact.reshape(triangles.shape), without_noise(sizes[used]))


def _bit_centres(n: int) -> Floats:
    """Barycentric centres of the n² equal bits of a triangle, (n², 3)."""
    rows = []
    for i in range(n):
        for j in range(n - i):
            rows.append(((i + 1 / 3) / n, (j + 1 / 3) / n))
            if i + j < n - 1:
                rows.append(((i + 2 / 3) / n, (j + 2 / 3) / n))
    uv = np.array(rows)
    return np.column_stack([1.0 - uv.sum(axis=1), uv])
