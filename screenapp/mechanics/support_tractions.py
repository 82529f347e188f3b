"""The traction that a support puts on the boundary, from the nodal forces it gives.

Averaged stresses are at their worst on a held boundary: nothing is known there but the
displacement.  The nodal reactions are known far better (they are in exact equilibrium with the
loads), and a traction q that is consistent with them,

    ∫ N_i q t ds = R_i   for every node i of the held stretch,

is as accurate as the edge strain (consistent flux recovery; Carey, Chow & Seager 1985, Comput.
Meth. Appl. Mech. Engng 50, from memory).  A corner between two held stretches has one reaction but
two tractions; there the stretch is cut, and each end takes what the field inside says.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray
from scipy.sparse import coo_matrix, csr_matrix
from scipy.sparse.linalg import splu

from screenapp.mechanics.boundary_chains import BoundaryChains
from screenapp.model.mesh import Mesh
from screenapp.model.solution import Solution

Floats = NDArray[np.float64]
Ints = NDArray[np.int64]
Bools = NDArray[np.bool_]

_POINTS, _WEIGHTS = np.polynomial.legendre.leggauss(4)


def supported_stress(
    mesh: Mesh,
    chains: BoundaryChains,
    solution: Solution,
    held: Bools,
    traction: Floats,
    thickness: Floats,
    inside: Floats,
) -> Floats:
    """The averaged stress on the sides, brought to the traction of the supports where held.

    Args:
        held: sides held along their normal and tangent, (n_sides, 2).
        traction: of the loads, (n_cases, n_sides, 3, 2) [MPa].
        thickness: of the wall behind each side [mm], (n_sides,).
        inside: averaged stresses at the sides' nodes, (n_cases, n_sides, 3, 3) [MPa].

    Returns:
        As `inside`, whose stress along the edge stays as it is.
    """
    if solution.support_forces is None or not held.any():
        return inside
    n = chains.normals
    met = field_traction(n, inside)
    linear = solution.element.startswith("quad4")
    found = traction + support_tractions(
        mesh, chains, held, solution.support_forces, thickness, met - traction, linear
    )
    lack = np.where(np.asarray(held.any(axis=1))[:, None, None], found - met, 0.0)
    # the symmetric tensor d with d·n = lack that adds nothing along the edge
    across = (lack * n).sum(axis=-1)
    return np.asarray(
        inside
        + np.stack(
            [
                2.0 * lack[..., 0] * n[..., 0] - across * n[..., 0] ** 2,
                2.0 * lack[..., 1] * n[..., 1] - across * n[..., 1] ** 2,
                lack[..., 0] * n[..., 1]
                + lack[..., 1] * n[..., 0]
                - across * n[..., 0] * n[..., 1],
            ],
            axis=-1,
        )
    )


def field_traction(normals: Floats, stress: Floats) -> Floats:
    """Traction (..., 2) that a stress field (..., 3) gives on surfaces with these normals."""
    x, y = normals[..., 0], normals[..., 1]
    return np.stack(
        [stress[..., 0] * x + stress[..., 2] * y, stress[..., 2] * x + stress[..., 1] * y],
        axis=-1,
    )


def support_tractions(
    mesh: Mesh,
    chains: BoundaryChains,
    held: Bools,
    forces: Floats,
    thickness: Floats,
    inside: Floats,
    linear: bool,
) -> Floats:
    """Tractions of the supports at start, middle and end of each side, (n_cases, n_sides, 3, 2).

    Args:
        held: sides held along their normal and tangent, (n_sides, 2).
        forces: what the supports give at each node, (n_cases, n_nodes, 2) [N].
        thickness: of the wall behind each side [mm], (n_sides,).
        inside: traction of the averaged field at the sides' nodes, (n_cases, n_sides, 3, 2) [MPa].
        linear: whether the element's sides are linear (their middle node carries nothing).

    Returns:
        [MPa]; zero on sides that no support holds.
    """
    out = np.zeros((len(forces), len(mesh.sides), 3, 2))
    own = np.flatnonzero(held.any(axis=1))
    if not len(own):
        return out
    ends = _numbered(mesh, chains, held, own)  # (n_own, 3) numbers of the traction's unknowns
    count = int(ends.max()) + 1
    columns = [0, 2] if linear else [0, 1, 2]
    matrix, right = _equations(mesh, own, ends, columns, forces, thickness, count)
    known = _corner_values(chains, held, own, ends, inside)
    free = np.ones(count, dtype=bool)
    free[list(known)] = False
    used = np.zeros(count, dtype=bool)
    used[ends[:, columns]] = True
    free &= used
    values = np.zeros((len(forces), count, 2))
    for number, value in known.items():
        values[:, number] = value
    some = np.flatnonzero(free)
    if len(some):
        solver = splu(matrix[some][:, some].tocsc())
        for case in range(len(forces)):
            gap = right[case] - matrix @ values[case]
            values[case, some] = solver.solve(gap[some])
    found = values[:, ends]
    if linear:
        found[:, :, 1] = 0.5 * (found[:, :, 0] + found[:, :, 2])
    out[:, own] = found
    return out


def _numbered(mesh: Mesh, chains: BoundaryChains, held: Bools, own: Ints) -> Ints:
    """Unknowns of the held sides: nodes are shared where the boundary goes on smoothly."""
    place = np.full(len(mesh.sides), -1)
    place[own] = np.arange(len(own))
    numbers = np.arange(3 * len(own)).reshape(-1, 3)
    for k, side in enumerate(own):
        after = int(chains.following[side])
        if chains.smooth[side] and place[after] >= 0:
            numbers[k, 2] = numbers[place[after], 0]
    return np.asarray(np.unique(numbers, return_inverse=True)[1].reshape(-1, 3), dtype=np.int64)


def _equations(
    mesh: Mesh,
    own: Ints,
    ends: Ints,
    columns: list[int],
    forces: Floats,
    thickness: Floats,
    count: int,
) -> tuple[csr_matrix, Floats]:
    """Mass matrix of the held sides and the reactions on its right side."""
    nodes = mesh.side_nodes[own]
    slopes = np.stack([_POINTS - 0.5, -2.0 * _POINTS, _POINTS + 0.5], axis=1)
    length = np.hypot(*np.moveaxis(slopes @ mesh.nodes[nodes], -1, 0))  # (n_own, points)
    if len(columns) == 2:
        shapes = np.stack([0.5 * (1 - _POINTS), 0.5 * (1 + _POINTS)], axis=1)
        chord = mesh.nodes[nodes[:, 2]] - mesh.nodes[nodes[:, 0]]
        length = np.broadcast_to(0.5 * np.hypot(*chord.T)[:, None], length.shape)
    else:
        shapes = np.stack(
            [0.5 * _POINTS * (_POINTS - 1), 1 - _POINTS**2, 0.5 * _POINTS * (_POINTS + 1)], axis=1
        )
    block = np.einsum("n,g,ng,gi,gj->nij", thickness[own], _WEIGHTS, length, shapes, shapes)
    chosen = ends[:, columns]
    rows = np.broadcast_to(chosen[:, :, None], block.shape).ravel()
    across = np.broadcast_to(chosen[:, None, :], block.shape).ravel()
    matrix = coo_matrix((block.ravel(), (rows, across)), shape=(count, count)).tocsr()
    right = np.zeros((len(forces), count, 2))
    right[:, chosen] = forces[:, nodes[:, columns]]
    return matrix, right


def _corner_values(
    chains: BoundaryChains, held: Bools, own: Ints, ends: Ints, inside: Floats
) -> dict[int, Floats]:
    """The tractions that are taken from inside: on both sides of a corner between held sides."""
    is_held = np.asarray(held.any(axis=1))
    known: dict[int, Floats] = {}
    for k, side in enumerate(own):
        if not chains.smooth[side] and is_held[chains.following[side]]:
            known[int(ends[k, 2])] = inside[:, side, 2]
        if not chains.smooth[chains.preceding[side]] and is_held[chains.preceding[side]]:
            known[int(ends[k, 0])] = inside[:, side, 0]
    return known
