"""Assembled equations with their supports: displacements and reactions of every case."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np
from numpy.typing import NDArray
from scipy import sparse

from screenapp.mechanics.assembly import System, condense_loads, internal_forces, spread
from screenapp.mechanics.constraints import HeldDirections, reduce
from screenapp.mechanics.dissection import elimination_order
from screenapp.mechanics.elastic_supports import Springs
from screenapp.mechanics.equilibrium import balance, reactions
from screenapp.mechanics.linear_solve import factorise, solve_refined
from screenapp.model.progress import SILENT, Progress
from screenapp.model.solution import Solution

Floats = NDArray[np.float64]
Ints = NDArray[np.int64]


def solve_system(
    system: System,
    held: HeldDirections,
    forces: Floats,
    progress: Progress = SILENT,
    springs: Springs | None = None,
) -> Solution:
    """Solve assembled equations for nodal forces (n_cases, n_nodes, 2) [N], on supports that hold
    and on springs that give way.

    Raises:
        InvalidPartError, SolvingError, Cancelled: as for `solve`.
    """
    mesh = system.mesh
    reduction = reduce(held, mesh, system.index, springs)
    loads = condense_loads(system, forces)
    basis = reduction.basis
    bedded = None if springs is None else springs.stiffness(system.carried)
    stiffness = system.stiffness if bedded is None else system.stiffness + bedded
    reduced = (basis.T @ stiffness @ basis).tocsc()
    driven = loads if springs is None else loads + springs.pulls(system.carried, loads.shape)
    right = basis.T @ (driven - (stiffness @ reduction.held.T).T).T
    held_term = np.broadcast_to(reduction.held, loads.shape)

    def in_full(terms: Sequence[Floats]) -> list[Floats]:
        return [held_term, *((basis @ term).T for term in terms)]

    def gap_of(terms: Sequence[Floats]) -> Floats:
        progress.check()
        full = in_full(terms)
        back = driven - internal_forces(system, full)
        if bedded is not None:
            back -= (bedded @ np.sum(full, axis=0).T).T
        return np.asarray(basis.T @ back.T)

    progress.check()
    terms, residual = solve_refined(
        reduced, right, gap_of, lambda matrix: factorise(matrix, lambda: _order(system, basis))
    )
    progress.check()
    parts = in_full(terms)
    unknowns = np.sum(parts, axis=0)
    displacements, modes = spread(system, unknowns, forces)
    support_forces = np.zeros(forces.shape)
    support_forces[:, system.carried] = (internal_forces(system, parts) - loads).reshape(
        len(forces), len(system.carried), 2
    )
    beds = {} if springs is None else springs.forces(displacements)
    given = tuple(
        reactions(held, mesh.nodes, case, {owner: bed[k] for owner, bed in beds.items()})
        for k, case in enumerate(support_forces)
    )
    return Solution(
        element=system.element,
        displacements=displacements,
        reactions=given,
        balance=tuple(
            balance(mesh.nodes, case, back) for case, back in zip(forces, given, strict=True)
        ),
        residual=residual,
        unknowns=reduced.shape[0],
        internal_modes=modes,
        support_forces=support_forces,
    )


def _order(system: System, basis: sparse.csc_array) -> Ints:
    """Unknowns of the reduced system in the order in which to eliminate them."""
    node = basis.indices[basis.indptr[:-1]] // 2  # of the first displacement that each moves
    return elimination_order(
        system.element_nodes, system.mesh.nodes[system.carried], node.astype(np.int64)
    )
