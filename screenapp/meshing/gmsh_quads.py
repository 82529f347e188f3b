"""Linear quads on triangles by gmsh: the only module that imports it, and only the worker does.

The boundary is given as straight lines over two sides each that gmsh does not divide further; it
fills it with triangles of twice the size of the quads wanted.  Joining and dividing them is our
own (`joining`): there the exact boundary is known, which gmsh's recombination does not see (it
left straight-angled corners on rounds and holes, with Jacobians of zero, in one part of ten).
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

import gmsh
import numpy as np
from numpy.typing import NDArray

from screenapp.meshing.boundary_points import BoundaryPoints
from screenapp.meshing.joining import divide, join_pairs, turn_ears
from screenapp.meshing.size_field import SizeField

Floats = NDArray[np.float64]
Ints = NDArray[np.int64]

Algorithm = Literal["frontal", "right-angled", "delaunay", "meshadapt"]

TRIANGLE_FACTOR = 2.2
"""Side of the triangles asked for over the wanted side of the quads (measured; see
tests/meshing/test_making.py)."""

ALGORITHMS: dict[Algorithm, int] = {
    "frontal": 6,
    "right-angled": 8,
    "delaunay": 5,
    "meshadapt": 1,
}

OPTIONS: dict[str, float] = {
    "General.Terminal": 0,
    "General.NumThreads": 1,
    "Mesh.RecombineAll": 0,
    "Mesh.SubdivisionAlgorithm": 0,
    "Mesh.LcIntegrationPrecision": 1e-3,
    "Mesh.MeshSizeExtendFromBoundary": 0,
    "Mesh.MeshSizeFromPoints": 0,
    "Mesh.MeshSizeFromCurvature": 0,
}


@dataclass(frozen=True)
class Recipe:
    """One way of making the quads.

    Attributes:
        algorithm: the triangulator.
        size_factor: the wanted sizes are multiplied by it.
        join_quality: triangles are joined to a quad of at least this quality; above 1 none are.
    """

    algorithm: Algorithm = "right-angled"
    size_factor: float = 1.0
    join_quality: float = 0.3


@dataclass(frozen=True, eq=False)
class LinearQuads:
    """Quads with straight sides.

    Attributes:
        points: (n, 2) [mm]; the first ones are the boundary points, in their order.
        quads: (m, 4), counter-clockwise.
    """

    points: Floats
    quads: Ints


def fill(boundary: BoundaryPoints, sizes: SizeField, recipe: Recipe) -> LinearQuads:
    """Fill the boundary with quads.

    Raises:
        RuntimeError: gmsh refused, or what it returned is not what was asked for.
    """
    points, triangles = _triangulate(boundary, sizes, recipe)
    half = len(boundary.piece) // 2
    angles = np.full(len(points), np.inf)
    angles[:half] = boundary.angles[::2]
    triangles = turn_ears(points, triangles, angles)
    quads, rest = join_pairs(points, triangles, angles, recipe.join_quality)
    # Every second boundary point is a corner of the triangles (row k), the one behind it is the
    # middle of the line that follows (row len(points) + k).
    following = boundary.following[1::2] // 2
    ends = np.sort(np.stack([np.arange(half), following], axis=1), axis=1)
    middles = {(a, b): len(points) + k for k, (a, b) in enumerate(ends.tolist())}
    known = np.concatenate([points, boundary.points[1::2]])
    points, quads = divide(known, quads, rest, middles)
    # Boundary points first and in their order, then all others.
    place = np.empty(len(points), dtype=np.int64)
    place[:half] = np.arange(0, 2 * half, 2)
    n = len(known)
    place[half : n - half] = 2 * half + np.arange(n - 2 * half)
    place[n - half : n] = np.arange(1, 2 * half, 2)
    place[n:] = np.arange(n, len(points))
    ordered = np.empty_like(points)
    ordered[place] = points
    return LinearQuads(ordered, place[quads])


def _triangulate(boundary: BoundaryPoints, sizes: SizeField, recipe: Recipe) -> tuple[Floats, Ints]:
    """Points, those of the boundary (every second one) first, and counter-clockwise triangles."""
    if not gmsh.isInitialized():
        gmsh.initialize(readConfigFiles=False, run=False, interruptible=False)
    for name, value in OPTIONS.items():
        gmsh.option.setNumber(name, value)
    gmsh.option.setNumber("Mesh.Algorithm", ALGORITHMS[recipe.algorithm])
    gmsh.model.add("part")
    try:
        tags = _draw(boundary)
        _ask_sizes(sizes.scaled(TRIANGLE_FACTOR * recipe.size_factor))
        try:
            gmsh.model.mesh.generate(2)
        except Exception as error:
            raise RuntimeError(f"the mesher refused: {error}") from error
        return _read(boundary, tags)
    finally:
        gmsh.clear()


def _draw(boundary: BoundaryPoints) -> list[int]:
    """Lines over two sides each; returns the tags of the points at their ends, in order."""
    geo = gmsh.model.geo
    corners = [geo.addPoint(x, y, 0.0) for x, y in boundary.points[::2].tolist()]
    following = (boundary.following[1::2] // 2).tolist()
    lines = [geo.addLine(corners[i], corners[j]) for i, j in enumerate(following)]
    geo.addPlaneSurface(
        [geo.addCurveLoop(lines[first // 2 : last // 2]) for first, last in boundary.loops]
    )
    for line in lines:
        geo.mesh.setTransfiniteCurve(line, 2)
    geo.synchronize()
    return corners


def _ask_sizes(sizes: SizeField) -> None:
    """Hand over the size field as a view with a value at each corner of each triangle."""
    corners = sizes.nodes[sizes.triangles]  # (m, 3, 2)
    rows = np.concatenate(
        [
            corners[:, :, 0],
            corners[:, :, 1],
            np.zeros((len(corners), 3)),
            sizes.sizes[sizes.triangles],
        ],
        axis=1,
    )
    view = gmsh.view.add("sizes")
    gmsh.view.addListData(view, "ST", len(rows), rows.ravel())
    field = gmsh.model.mesh.field.add("PostView")
    gmsh.model.mesh.field.setNumber(field, "ViewTag", view)
    gmsh.model.mesh.field.setAsBackgroundMesh(field)


def _read(boundary: BoundaryPoints, corners: list[int]) -> tuple[Floats, Ints]:
    """The triangles and their points, the boundary's in the order given."""
    tags, coordinates, _ = gmsh.model.mesh.getNodes()
    tags = np.asarray(tags, dtype=np.int64)
    place = np.full((int(tags.max()) + 1, 2), np.nan)
    place[tags] = np.asarray(coordinates).reshape(-1, 3)[:, :2]
    kinds, _, connectivity = gmsh.model.mesh.getElements(2)
    if list(kinds) != [2]:
        raise RuntimeError("the mesher made no triangles")
    triangles = np.asarray(connectivity[0], dtype=np.int64).reshape(-1, 3)
    of_corners = [int(gmsh.model.mesh.getNodes(0, tag)[0][0]) for tag in corners]
    row = np.full(len(place), -1, dtype=np.int64)
    row[of_corners] = np.arange(len(corners))
    inner = np.setdiff1d(np.unique(triangles), of_corners)
    row[inner] = len(corners) + np.arange(len(inner))
    points = np.concatenate([boundary.points[::2], place[inner]])
    triangles = row[triangles]
    p = points[triangles]
    a, b = p[:, 1] - p[:, 0], p[:, 2] - p[:, 0]
    clockwise = a[:, 0] * b[:, 1] - a[:, 1] * b[:, 0] < 0.0
    triangles[clockwise] = triangles[clockwise][:, ::-1]
    return points, triangles
