"""Checks of a finished mesh against the exact boundary; every mesh passes them or is thrown away.

The area of the mesh is compared with the exact area of the part.  Boundary sides are parabolas
through three points of an arc; over the half angle φ the parabola encloses with its chord the
area (4/3)·r²·sin φ·(1 − cos φ) (Archimedes' quadrature), the arc r²·(φ − sin φ·cos φ), so the
difference that the method leaves is known exactly.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from screenapp.model.curves import Arc
from screenapp.model.mesh import Mesh
from screenapp.model.shape import Shape

Floats = NDArray[np.float64]
Ints = NDArray[np.int64]
Bools = NDArray[np.bool_]

GAUSS = np.array([-np.sqrt(0.6), 0.0, np.sqrt(0.6)])
GAUSS_WEIGHTS = np.array([5.0, 8.0, 5.0]) / 9.0

FLAT = 1e-3
"""Scaled Jacobian up to which an element counts as flat."""

AREA_ROUNDING = 1e-9
"""Largest difference of areas that rounding may leave, over the exact area."""


@dataclass(frozen=True, eq=False)
class Quality:
    """What the Jacobians of a mesh say.

    Attributes:
        scaled: smallest scaled Jacobian of each element over corners and Gauss points, (m,): the
            sine of the angle between the lines of constant η and ξ; negative where turned over.
        determinant: smallest Jacobian determinant of each element at the same points [mm²], (m,).
        area: of the curved elements [mm²].
    """

    scaled: Floats
    determinant: Floats
    area: float

    @property
    def worst(self) -> float:
        """The smallest scaled Jacobian."""
        return float(self.scaled.min())


def measure_quality(mesh: Mesh) -> Quality:
    """Jacobians at the 3×3 Gauss points and the four corners of every element."""
    xi, eta = (a.ravel() for a in np.meshgrid(GAUSS, GAUSS, indexing="ij"))
    corners = np.array([[-1, -1], [1, -1], [1, 1], [-1, 1]], dtype=float)
    points = np.concatenate([np.stack([xi, eta], axis=1), corners])
    d = _derivatives(points)  # (13, 9, 2)
    x = mesh.nodes[mesh.quads]  # (m, 9, 2)
    along_xi = np.matmul(d[:, :, 0], x)
    along_eta = np.matmul(d[:, :, 1], x)
    det = along_xi[..., 0] * along_eta[..., 1] - along_xi[..., 1] * along_eta[..., 0]
    lengths = np.hypot(*np.moveaxis(along_xi, -1, 0)) * np.hypot(*np.moveaxis(along_eta, -1, 0))
    scaled = det / np.maximum(lengths, 1e-300)
    weights = np.outer(GAUSS_WEIGHTS, GAUSS_WEIGHTS).ravel()
    return Quality(scaled.min(axis=1), det.min(axis=1), float((det[:, :9] @ weights).sum()))


def find_faults(mesh: Mesh, shape: Shape, quality: Quality) -> list[str]:
    """Everything that is wrong with the mesh, one sentence each; empty if nothing is."""
    faults = []
    if not np.isfinite(mesh.nodes).all():
        return ["a node has no place"]
    turned = np.flatnonzero(quality.scaled <= FLAT)
    if len(turned):
        x, y = mesh.nodes[mesh.quads[turned[0], 8]]
        faults.append(
            f"{len(turned)} elements are flat or turned over, the first at ({x:.4g}, {y:.4g}) mm"
        )
    expected = shape.area + parabola_excess(mesh, shape)
    if abs(quality.area - expected) > AREA_ROUNDING * shape.area:
        faults.append(
            f"the mesh covers {quality.area:.8g} mm² where the part has {expected:.8g} mm²"
        )
    return faults + _boundary_faults(mesh, shape) + connection_faults(mesh, len(shape.loops))


def parabola_excess(mesh: Mesh, shape: Shape) -> float:
    """Area by which parabolic sides exceed the exact arcs, over the whole boundary [mm²]."""
    total = 0.0
    span = mesh.side_t[:, 1] - mesh.side_t[:, 0]
    for k, piece in enumerate(shape.curves):
        if isinstance(arc := piece.curve, Arc):
            half = 0.5 * span[mesh.side_piece == k] * abs(arc.sweep)
            parabola = (4.0 / 3.0) * np.sin(half) * (1.0 - np.cos(half))
            segment = half - np.sin(half) * np.cos(half)
            excess = float((parabola - segment).sum()) * arc.radius**2
            # An arc that turns left has the material inside, one that turns right outside.
            total += excess if arc.sweep > 0.0 else -excess
    return total


def _boundary_faults(mesh: Mesh, shape: Shape) -> list[str]:
    """Every piece is covered once from t = 0 to 1, its nodes on the exact curve."""
    faults = []
    slack = 1e-9 * shape.size
    nodes = mesh.side_nodes
    for k, piece in enumerate(shape.curves):
        mine = np.flatnonzero(mesh.side_piece == k)
        t = mesh.side_t[mine]
        covered = (
            len(mine) > 0
            and t[0, 0] == 0.0
            and t[-1, 1] == 1.0
            and bool(np.all(t[1:, 0] == t[:-1, 1]))
            and bool(np.all(t[:, 1] > t[:, 0]))
            and bool(np.all(nodes[mine[1:], 0] == nodes[mine[:-1], 2]))
        )
        if not covered:
            faults.append(f"the sides along {piece.feature} do not cover it once")
            continue
        at = np.stack([t[:, 0], t.mean(axis=1), t[:, 1]], axis=1)
        off = np.abs(piece.curve.point(at) - mesh.nodes[nodes[mine]]).max()
        if off > slack:
            faults.append(f"a node stands {off:.3g} mm off {piece.feature}")
    return faults


def connection_faults(mesh: Mesh, n_loops: int) -> list[str]:
    """Sides belong to two elements inside and to one on the boundary; no node is loose; the
    number of corners, sides and elements fits a plate with that many loops (Euler)."""
    faults = []
    quads = mesh.quads[:, :4]
    ends = np.stack([quads, np.roll(quads, -1, axis=1)], axis=2).reshape(-1, 2)
    ends = np.sort(ends, axis=1)
    edges, edge_of, count = np.unique(ends, axis=0, return_inverse=True, return_counts=True)
    if (count > 2).any():
        faults.append("a side belongs to more than two elements")
    element, side = mesh.sides.T
    free = np.zeros(len(edges), dtype=bool)
    free[edge_of.reshape(-1, 4)[element, side]] = True
    if not np.array_equal(free, count == 1) or int(free.sum()) != len(mesh.sides):
        faults.append("the free sides are not the sides of the boundary")
    if len(np.unique(mesh.quads)) != mesh.n_nodes:
        faults.append("a node belongs to no element")
    if len(np.unique(quads)) - len(edges) + len(quads) != 2 - n_loops:
        faults.append("the elements do not hang together as the part does")
    return faults


def _derivatives(points: Floats) -> Floats:
    """Derivatives by ξ and η of the nine Lagrange functions at points (k, 2): (k, 9, 2)."""
    place = np.array([[0, 0], [2, 0], [2, 2], [0, 2], [1, 0], [2, 1], [1, 2], [0, 1], [1, 1]])
    s = points[..., None]  # (k, 2, 1)
    value = np.concatenate([0.5 * s * (s - 1), 1 - s * s, 0.5 * s * (s + 1)], axis=2)
    slope = np.concatenate([s - 0.5, -2 * s, s + 0.5], axis=2)
    i, j = place.T
    return np.stack([slope[:, 0, i] * value[:, 1, j], value[:, 0, i] * slope[:, 1, j]], axis=-1)
