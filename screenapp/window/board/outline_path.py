"""The boundary of a mesh, as it lies or deformed, as a path to cut fields off at."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray
from PySide6.QtCore import QPointF, Qt
from PySide6.QtGui import QPainterPath

from screenapp.model.mesh import Mesh
from screenapp.model.shape import Shape

Floats = NDArray[np.float64]
Ints = NDArray[np.int64]


def mesh_path(mesh: Mesh, points: Floats) -> QPainterPath:
    """The mesh's boundary with its nodes at `points` [mm], (n_nodes, 2); its sides are parabolas,
    which a path carries exactly."""
    return sides_path(mesh.side_nodes, points)


def region_path(mesh: Mesh, elements: Ints, points: Floats) -> QPainterPath:
    """The rim of a set of elements, inner sides left out."""
    quads = mesh.quads[elements]
    nodes = np.concatenate([quads[:, [k, 4 + k, (k + 1) % 4]] for k in range(4)])
    ends = np.sort(nodes[:, [0, 2]], axis=1)
    _, inverse, count = np.unique(ends, axis=0, return_inverse=True, return_counts=True)
    return sides_path(nodes[count[inverse.ravel()] == 1], points)


def sides_path(sides: Ints, points: Floats) -> QPainterPath:
    """Curved sides (start, middle, end), (n_sides, 3), chained into closed rings."""
    path = QPainterPath()
    path.setFillRule(Qt.FillRule.OddEvenFill)
    following: dict[int, list[int]] = {}
    for i, start in enumerate(sides[:, 0].tolist()):
        following.setdefault(start, []).append(i)
    begin = points[sides[:, 0]]
    end = points[sides[:, 2]]
    control = (2.0 * points[sides[:, 1]] - 0.5 * (begin + end)).tolist()
    finish, last = end.tolist(), sides[:, 2].tolist()
    while following:
        start = next(iter(following))
        path.moveTo(QPointF(*points[start].tolist()))
        node = start
        while node in following:
            waiting = following[node]
            i = waiting.pop()
            if not waiting:
                del following[node]
            path.quadTo(QPointF(*control[i]), QPointF(*finish[i]))
            node = last[i]
        path.closeSubpath()
    return path


def shape_path(shape: Shape, tolerance: float) -> QPainterPath:
    """The exact boundary of a part, arcs flattened to a sagitta of `tolerance` [mm]."""
    path = QPainterPath()
    path.setFillRule(Qt.FillRule.OddEvenFill)
    for loop in range(len(shape.loops)):
        ring = shape.polyline(loop, tolerance).tolist()
        path.moveTo(QPointF(*ring[0]))
        for point in ring[1:]:
            path.lineTo(QPointF(*point))
        path.closeSubpath()
    return path
