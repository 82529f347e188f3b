"""Exact plane fields laid on a mesh, so that a recovery can be tested without a solver."""

from __future__ import annotations

from collections.abc import Callable

import numpy as np
from numpy.typing import NDArray

from screenapp.mechanics.boundary_chains import boundary_chains
from screenapp.mechanics.edge_recovery import edge_strains, recover_edge_stress
from screenapp.model.mesh import NODES_OF_ELEMENT, Mesh
from screenapp.model.part import ElementName
from screenapp.model.shape import Shape
from screenapp.model.solution import Solution

Floats = NDArray[np.float64]
Field = Callable[[Floats], Floats]
"""Takes points (n, 2) to displacements (n, 2) or stresses (n, 3)."""


def solution_of(mesh: Mesh, displacement: Field, element: ElementName = "quad9") -> Solution:
    """A solution whose nodes move exactly as the field says."""
    used = np.unique(mesh.quads[:, : NODES_OF_ELEMENT[element]])
    u = np.full((1, mesh.n_nodes, 2), np.nan)
    u[0, used] = displacement(mesh.nodes[used])
    for side, (a, b) in enumerate(((0, 1), (1, 2), (2, 3), (3, 0))):
        if element.startswith("quad4"):
            ends = mesh.quads[:, [a, b]]
            u[0, mesh.quads[:, 4 + side]] = u[0, ends].mean(axis=1)
    u[np.isnan(u)] = 0.0  # centre nodes that the element does not carry
    return Solution(element, u, ((),), (), 0.0, 0)


def tractions(shape: Shape, mesh: Mesh, stress: Field) -> Floats:
    """Tractions of a stress field at start, middle and end of each side, (1, n_sides, 3, 2)."""
    n = boundary_chains(shape, mesh).normals
    s = stress(mesh.nodes[mesh.side_nodes].reshape(-1, 2)).reshape(len(n), 3, 3)
    return np.stack(
        [
            s[..., 0] * n[..., 0] + s[..., 2] * n[..., 1],
            s[..., 2] * n[..., 0] + s[..., 1] * n[..., 1],
        ],
        axis=-1,
    )[None]


def edge_stress_of(
    shape: Shape, mesh: Mesh, solution: Solution, stress: Field, hooke: Floats
) -> Floats:
    """Recovered edge stress (n_sides, 3, 3) when every traction is the field's own."""
    sides = len(mesh.sides)
    return recover_edge_stress(
        mesh,
        boundary_chains(shape, mesh),
        edge_strains(mesh, solution),
        tractions(shape, mesh, stress),
        np.zeros((sides, 2), dtype=bool),
        np.zeros(sides, dtype=bool),
        np.zeros((1, sides, 3, 3)),
        hooke,
    )[0]


def kirsch_stress(points: Floats, radius: float = 1.0, tension: float = 1.0) -> Floats:
    """Round hole in a wide plate under tension along x (Kirsch 1898; Timoshenko & Goodier,
    art. 35, from memory): σx, σy, τxy (n, 3)."""
    r, a = np.hypot(*points.T), np.arctan2(points[:, 1], points[:, 0])
    q = (radius / r) ** 2
    rr = 0.5 * tension * (1 - q + (1 - 4 * q + 3 * q * q) * np.cos(2 * a))
    tt = 0.5 * tension * (1 + q - (1 + 3 * q * q) * np.cos(2 * a))
    rt = -0.5 * tension * (1 + 2 * q - 3 * q * q) * np.sin(2 * a)
    c, s = np.cos(a), np.sin(a)
    return np.stack(
        [
            rr * c * c + tt * s * s - 2 * rt * c * s,
            rr * s * s + tt * c * c + 2 * rt * c * s,
            (rr - tt) * c * s + rt * (c * c - s * s),
        ],
        axis=1,
    )


def kirsch_displacement(
    points: Floats, e: float, nu: float, radius: float = 1.0, tension: float = 1.0
) -> Floats:
    """Displacements that go with `kirsch_stress` in plane stress, (n, 2).

    From the stresses by Hooke's law and ε_r = ∂u_r/∂r, ε_θ = u_r/r + ∂u_θ/r∂θ (derived here).
    """
    r, a = np.hypot(*points.T), np.arctan2(points[:, 1], points[:, 0])
    q = (radius / r) ** 2
    scale = tension * r / (2.0 * e)
    ur = scale * ((1 - nu) + (1 + nu) * q + ((1 + nu) + 4 * q - (1 + nu) * q * q) * np.cos(2 * a))
    ut = -scale * ((1 + nu) + 2 * (1 - nu) * q + (1 + nu) * q * q) * np.sin(2 * a)
    c, s = np.cos(a), np.sin(a)
    return np.stack([ur * c - ut * s, ur * s + ut * c], axis=1)
