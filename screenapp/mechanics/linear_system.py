"""Assembled equations with their supports: displacements and reactions of every case."""

from __future__ import annotations

import math
from collections.abc import Sequence

import numpy as np
from numpy.typing import NDArray
from scipy import sparse

from screenapp.mechanics.assembly import System, condense_loads, internal_forces, spread
from screenapp.mechanics.constraints import HeldDirections, Reduction, reduce
from screenapp.mechanics.dissection import elimination_order
from screenapp.mechanics.elastic_supports import Springs
from screenapp.mechanics.equilibrium import balance, reactions
from screenapp.mechanics.linear_solve import factorise, solve_refined
from screenapp.mechanics.superposition import Superposition, superpose
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
    cases = _superposition(forces, reduction, springs)
    own = forces[cases.solved]
    prescribed = np.broadcast_to(reduction.held, (len(forces), reduction.held.shape[1]))[
        cases.solved
    ]
    loads = condense_loads(system, own)
    basis = reduction.basis
    bedded = None if springs is None else springs.stiffness(system.carried)
    stiffness = system.stiffness if bedded is None else system.stiffness + bedded
    reduced = (basis.T @ stiffness @ basis).tocsc()
    driven = loads
    if springs is not None:
        driven = loads + springs.of_cases(cases.solved).pulls(system.carried, loads.shape)
    right = basis.T @ (driven - (stiffness @ prescribed.T).T).T

    def in_full(terms: Sequence[Floats]) -> list[Floats]:
        return [prescribed, *((basis @ term).T for term in terms)]

    put_up: dict[int, Floats] = {}  # internal forces by the number of terms

    def gap_of(terms: Sequence[Floats]) -> Floats:
        progress.check()
        full = in_full(terms)
        put_up[len(terms)] = internal_forces(system, full)
        back = driven - put_up[len(terms)]
        if bedded is not None:
            back -= (bedded @ np.sum(full, axis=0).T).T
        return np.asarray(basis.T @ back.T)

    progress.check()
    terms, residual = solve_refined(
        reduced, right, gap_of, lambda matrix: factorise(matrix, lambda: _order(system, basis))
    )
    progress.check()
    displacements, modes = spread(system, np.sum(in_full(terms), axis=0), own)
    if len(terms) not in put_up:  # there was nothing to solve for
        put_up[len(terms)] = internal_forces(system, in_full(terms))
    support_forces = np.zeros(own.shape)
    support_forces[:, system.carried] = (put_up[len(terms)] - loads).reshape(
        len(own), len(system.carried), 2
    )
    support_forces = cases.spread(support_forces)
    displacements = cases.spread(displacements)
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
        internal_modes=None if modes is None else cases.spread(modes),
        support_forces=support_forces,
    )


def _superposition(forces: Floats, reduction: Reduction, springs: Springs | None) -> Superposition:
    """Which cases to solve: what acts in a case are its forces, the displacements that supports
    prescribe and the springs whose ground is off, each measured by its largest in any case."""
    acting = [forces, np.broadcast_to(reduction.held, (len(forces), reduction.held.shape[1]))]
    if springs is not None and springs.off is not None:
        acting.append(springs.off)
    columns = []
    for kind in acting:
        flat = kind.reshape(len(forces), math.prod(kind.shape[1:]))
        flat = flat[:, flat.any(axis=0)]
        columns.append(flat / np.abs(flat).max(initial=1e-300))
    return superpose(np.concatenate(columns, axis=1))


def _order(system: System, basis: sparse.csc_array) -> Ints:
    """Unknowns of the reduced system in the order in which to eliminate them."""
    node = basis.indices[basis.indptr[:-1]] // 2  # of the first displacement that each moves
    return elimination_order(
        system.element_nodes, system.mesh.nodes[system.carried], node.astype(np.int64)
    )
