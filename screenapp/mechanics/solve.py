"""The plane problem of a part on a mesh: supports and loads in, displacements and reactions out."""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import replace

import numpy as np
from numpy.typing import NDArray
from scipy import sparse

from screenapp.mechanics.assembly import System, assemble, condense_loads, internal_forces, spread
from screenapp.mechanics.constraints import HeldDirections, held_directions, reduce
from screenapp.mechanics.dissection import elimination_order
from screenapp.mechanics.element_walls import element_hooke, element_thickness
from screenapp.mechanics.equilibrium import balance, reactions
from screenapp.mechanics.linear_solve import factorise, solve_refined
from screenapp.mechanics.loads import nodal_forces
from screenapp.mechanics.thermal import free_strains, thermal_forces
from screenapp.model.combinations import loadings
from screenapp.model.mesh import Mesh
from screenapp.model.part import ElementName, Part
from screenapp.model.progress import SILENT, Progress
from screenapp.model.shape import Shape
from screenapp.model.solution import Solution

Floats = NDArray[np.float64]
Ints = NDArray[np.int64]


def solve(part: Part, shape: Shape, mesh: Mesh, progress: Progress = SILENT) -> Solution:
    """Solve all load cases of a part with one factorisation.

    Prescribed displacements act in every case.

    Raises:
        InvalidPartError: a support or load stands where it cannot act, or supports disagree.
        SolvingError: no material, a motion that nothing holds, or equations that cannot be solved.
        Cancelled: the user asked to stop.
    """
    held = held_directions(part, shape, mesh)
    forces = np.zeros((len(loadings(part)), mesh.n_nodes, 2))
    for number, case in enumerate(loadings(part)):
        forces[number] = nodal_forces(part, shape, mesh, case)
    free = free_strains(part, mesh)
    if free is not None:
        forces += thermal_forces(part, mesh, free)
    system = assemble(
        mesh,
        part.mesh.element,
        element_hooke(part, mesh),
        element_thickness(part, mesh),
        progress,
    )
    return replace(solve_system(system, held, forces, progress), free_strains=free)


def solve_system(
    system: System, held: HeldDirections, forces: Floats, progress: Progress = SILENT
) -> Solution:
    """Solve assembled equations for nodal forces (n_cases, n_nodes, 2) [N].

    Raises:
        InvalidPartError, SolvingError, Cancelled: as for `solve`.
    """
    mesh = system.mesh
    reduction = reduce(held, mesh, system.index)
    loads = condense_loads(system, forces)
    basis = reduction.basis
    reduced = (basis.T @ system.stiffness @ basis).tocsc()
    right = basis.T @ (loads - system.stiffness @ reduction.held).T
    held_term = np.broadcast_to(reduction.held, loads.shape)

    def in_full(terms: Sequence[Floats]) -> list[Floats]:
        return [held_term, *((basis @ term).T for term in terms)]

    def gap_of(terms: Sequence[Floats]) -> Floats:
        progress.check()
        return np.asarray(basis.T @ (loads - internal_forces(system, in_full(terms))).T)

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
    given = tuple(reactions(held, mesh.nodes, case) for case in support_forces)
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


def estimate_unknowns(n_elements: int, element: ElementName) -> int:
    """Unknowns of a large mesh of quads: to each quad belong one corner and two sides.

    Holes and supports take a little off, the boundary adds up to 2 % at 1600 quads.
    """
    nodes = 1 if element in ("quad4", "quad4-incompatible") else 3
    return 2 * nodes * n_elements


BYTES_PER_UNKNOWN = 350.0
"""Measured with SuperLU: growth of the process at its peak over n log₂ n was 288 to 318 for the
8- and 9-node quads on square plates of 10 to 407 thousand unknowns (rising slowly, hence the
margin), 200 on a long strip and 190 to 217 for the 4-node quads."""


def estimate_memory(unknowns: int) -> int:
    """Memory that solving so many unknowns takes at its peak [bytes], on the safe side."""
    return math.ceil(BYTES_PER_UNKNOWN * unknowns * math.log2(max(unknowns, 2)))
