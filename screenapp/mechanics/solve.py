"""The plane problem of a part on a mesh: supports and loads in, displacements and reactions out."""

from __future__ import annotations

import math
from dataclasses import replace

import numpy as np

from screenapp.mechanics.assembly import assemble
from screenapp.mechanics.constraints import held_directions
from screenapp.mechanics.elastic_supports import springs
from screenapp.mechanics.element_walls import element_hooke, element_thickness
from screenapp.mechanics.linear_system import solve_system
from screenapp.mechanics.loads import nodal_forces
from screenapp.mechanics.one_sided import has_pins, solve_with_pins
from screenapp.mechanics.thermal import free_strains, thermal_forces
from screenapp.model.combinations import loadings
from screenapp.model.mesh import Mesh
from screenapp.model.part import ElementName, Part
from screenapp.model.progress import SILENT, Progress
from screenapp.model.shape import Shape
from screenapp.model.solution import Solution


def solve(part: Part, shape: Shape, mesh: Mesh, progress: Progress = SILENT) -> Solution:
    """Solve all load cases of a part, with one factorisation unless pins that only push hold it.

    Prescribed displacements act in every case, misfits in theirs.

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
    beds = springs(part, shape, mesh)
    if has_pins(part):
        found = solve_with_pins(part, system, held, forces, progress, beds)
    else:
        found = solve_system(system, held, forces, progress, beds)
    return replace(found, free_strains=free)


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
