"""Shape functions of the bilinear, 8-node and 9-node quads on the square [-1, 1]².

Numbering as in `screenapp.model.mesh`.  Functions take points (n, 2) in (ξ, η) and return the
values (n, n_nodes) or the derivatives (n, n_nodes, 2).
"""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

Floats = NDArray[np.float64]

LOCAL_NODES: Floats = np.array(
    [[-1, -1], [1, -1], [1, 1], [-1, 1], [0, -1], [1, 0], [0, 1], [-1, 0], [0, 0]], dtype=float
)
"""(ξ, η) of the nine nodes, (9, 2); the first 4 and 8 serve the smaller quads."""


def values(n_nodes: int, points: Floats) -> Floats:
    """Shape function values, (n_points, n_nodes), for n_nodes = 4, 8 or 9."""
    return _evaluate(n_nodes, np.atleast_2d(points))[0]


def derivatives(n_nodes: int, points: Floats) -> Floats:
    """Derivatives by ξ and η, (n_points, n_nodes, 2), for n_nodes = 4, 8 or 9."""
    return _evaluate(n_nodes, np.atleast_2d(points))[1]


def _evaluate(n_nodes: int, points: Floats) -> tuple[Floats, Floats]:
    if n_nodes == 4:
        return _bilinear(points)
    if n_nodes == 8:
        return _serendipity(points)
    if n_nodes == 9:
        return _lagrange(points)
    raise ValueError(f"no quad has {n_nodes} nodes")


def _bilinear(points: Floats) -> tuple[Floats, Floats]:
    x, y = points[:, :1], points[:, 1:]
    a, b = LOCAL_NODES[:4, 0], LOCAL_NODES[:4, 1]
    n = 0.25 * (1 + a * x) * (1 + b * y)
    d = np.stack([0.25 * a * (1 + b * y), 0.25 * b * (1 + a * x)], axis=-1)
    return n, d


def _serendipity(points: Floats) -> tuple[Floats, Floats]:
    x, y = points[:, :1], points[:, 1:]
    a, b = LOCAL_NODES[:4, 0], LOCAL_NODES[:4, 1]
    u, v = 1 + a * x, 1 + b * y
    s = a * x + b * y - 1
    n = [0.25 * u * v * s]
    dx = [0.25 * a * v * (s + u)]
    dy = [0.25 * b * u * (s + v)]
    for i in range(4, 8):
        a1, b1 = LOCAL_NODES[i]
        if a1 == 0:
            n.append(0.5 * (1 - x * x) * (1 + b1 * y))
            dx.append(-x * (1 + b1 * y))
            dy.append(0.5 * b1 * (1 - x * x))
        else:
            n.append(0.5 * (1 + a1 * x) * (1 - y * y))
            dx.append(0.5 * a1 * (1 - y * y))
            dy.append(-y * (1 + a1 * x))
    return (
        np.concatenate(n, axis=1),
        np.stack([np.concatenate(dx, axis=1), np.concatenate(dy, axis=1)], axis=-1),
    )


def line_values(s: Floats) -> Floats:
    """Quadratics that are 1 at -1, 0, +1 in turn: of a side's begin, middle and end, (..., 3)."""
    return np.stack([0.5 * s * (s - 1.0), 1.0 - s * s, 0.5 * s * (s + 1.0)], axis=-1)


def line_slopes(s: Floats) -> Floats:
    """Their derivatives by `s`, (..., 3)."""
    return np.stack([s - 0.5, -2.0 * s, s + 0.5], axis=-1)


def _lagrange(points: Floats) -> tuple[Floats, Floats]:
    fx, fy = line_values(points[:, 0]), line_values(points[:, 1])
    dx, dy = line_slopes(points[:, 0]), line_slopes(points[:, 1])
    i = LOCAL_NODES[:, 0].astype(int) + 1
    j = LOCAL_NODES[:, 1].astype(int) + 1
    return fx[:, i] * fy[:, j], np.stack([dx[:, i] * fy[:, j], fx[:, i] * dy[:, j]], axis=-1)
