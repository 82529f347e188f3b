"""Linear quads by gmsh: the only module that imports it, and only a worker process imports this.

The boundary is given as straight lines that are not divided further; gmsh fills it with triangles
of twice the size, joins them to quads where that is good, and its subdivision (each quad in four,
each triangle in three) makes every element a quad.  The nodes that subdivision puts on the
boundary are then known one by one, so that they can be moved to the exact curve.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

import gmsh
import numpy as np
from numpy.typing import NDArray

from screenapp.meshing.boundary_points import BoundaryPoints
from screenapp.meshing.size_field import SizeField

Floats = NDArray[np.float64]
Ints = NDArray[np.int64]

TRIANGLE_FACTOR = 2.2
"""Side of the triangles asked for over the wanted side of the quads (measured; see
tests/meshing/test_gmsh_quads.py)."""

ALGORITHMS: dict[str, int] = {"frontal": 6, "delaunay": 5, "meshadapt": 1}

OPTIONS: dict[str, float] = {
    "General.Terminal": 0,
    "General.NumThreads": 1,
    "General.AbortOnError": 0,
    "Mesh.RecombinationAlgorithm": 0,
    "Mesh.SubdivisionAlgorithm": 1,
    "Mesh.LcIntegrationPrecision": 1e-3,
    "Mesh.MeshSizeExtendFromBoundary": 0,
    "Mesh.MeshSizeFromPoints": 0,
    "Mesh.MeshSizeFromCurvature": 0,
    "Mesh.Smoothing": 1,
}


@dataclass(frozen=True)
class Recipe:
    """One way of asking for the mesh.

    Attributes:
        algorithm: the triangulator.
        size_factor: the wanted sizes are multiplied by it.
        join_quality: triangles are joined to a quad of at least this quality only.
        join: whether triangles are joined at all (if not, each gives three quads).
    """

    algorithm: Literal["frontal", "delaunay", "meshadapt"] = "frontal"
    size_factor: float = 1.0
    join_quality: float = 0.4
    join: bool = True


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
    if not gmsh.isInitialized():
        gmsh.initialize(readConfigFiles=False, run=False, interruptible=False)
    for name, value in OPTIONS.items():
        gmsh.option.setNumber(name, value)
    gmsh.option.setNumber("Mesh.Algorithm", ALGORITHMS[recipe.algorithm])
    gmsh.option.setNumber("Mesh.RecombineAll", int(recipe.join))
    gmsh.option.setNumber("Mesh.RecombineMinimumQuality", recipe.join_quality)
    gmsh.model.add("part")
    try:
        lines = _draw(boundary)
        _ask_sizes(sizes.scaled(TRIANGLE_FACTOR * recipe.size_factor))
        try:
            gmsh.model.mesh.generate(2)
        except Exception as error:
            raise RuntimeError(f"the mesher refused: {error}") from error
        return _read(boundary, lines)
    finally:
        gmsh.clear()


def _draw(boundary: BoundaryPoints) -> Ints:
    """Lines over two sides each; returns their tags, in order."""
    geo = gmsh.model.geo
    following = boundary.following
    points = {i: geo.addPoint(*boundary.points[i], 0.0) for i in range(0, len(following), 2)}
    tags = []
    loops = []
    for first, last in boundary.loops:
        mine = [
            geo.addLine(points[i], points[int(following[i + 1])]) for i in range(first, last, 2)
        ]
        loops.append(geo.addCurveLoop(mine))
        tags += mine
    geo.addPlaneSurface(loops)
    for tag in tags:
        geo.mesh.setTransfiniteCurve(tag, 2)
    geo.synchronize()
    return np.array(tags, dtype=np.int64)


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


def _read(boundary: BoundaryPoints, lines: Ints) -> LinearQuads:
    """Nodes and quads, boundary nodes first and at their given places."""
    tags, coordinates, _ = gmsh.model.mesh.getNodes()
    tags = np.asarray(tags, dtype=np.int64)
    points = np.asarray(coordinates).reshape(-1, 3)[:, :2]
    kinds, _, connectivity = gmsh.model.mesh.getElements(2)
    if list(kinds) != [3]:
        raise RuntimeError("the mesher left elements that are not quads, or none at all")
    quads = np.asarray(connectivity[0], dtype=np.int64).reshape(-1, 4)

    owner = np.full(int(tags.max()) + 1, -1, dtype=np.int64)  # tag -> boundary point
    kinds, _, chains = gmsh.model.mesh.getElements(1)
    if list(kinds) != [1] or len(chains[0]) != 4 * len(lines):
        raise RuntimeError("the mesher divided the boundary otherwise than asked")
    # Two line elements a line, start - middle - end, in the order of the lines' tags.
    for k, line in enumerate(lines):
        _, _, ends = gmsh.model.mesh.getElements(1, int(line))
        a, b, c, _ = (int(v) for v in ends[0])
        if b != c:
            raise RuntimeError("the mesher divided the boundary otherwise than asked")
        owner[a], owner[b] = 2 * k, 2 * k + 1
    n = len(boundary.points)
    inner = np.setdiff1d(np.unique(quads), np.flatnonzero(owner >= 0))
    owner[inner] = n + np.arange(len(inner))
    place = np.zeros((n + len(inner), 2))
    known = owner[tags] >= 0
    place[owner[tags[known]]] = points[known]
    place[:n] = boundary.points
    quads = owner[quads]
    if (quads < 0).any():
        raise RuntimeError("the mesher returned quads on unknown nodes")
    p = place[quads]
    d1, d2 = p[:, 2] - p[:, 0], p[:, 3] - p[:, 1]
    clockwise = d1[:, 0] * d2[:, 1] - d1[:, 1] * d2[:, 0] < 0.0
    quads[clockwise] = quads[clockwise][:, ::-1]
    return LinearQuads(place, quads)
