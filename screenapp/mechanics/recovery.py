"""The stress field of a solution: fitted inside the part, recovered along its edges.

Inside, `patch_recovery` fits the stresses round every inner corner node; where no patch reaches (a
wall one element wide) the elements' stresses are carried to the nodes and averaged.  On the
boundary both would lose an order of accuracy exactly where the peaks are, so `edge_recovery` takes
over there.  Where thickness or material changes the stress jumps: nothing is fitted or averaged
over such a line, and its nodes have a value on each hand (`Mesh.field_quads`).
"""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from screenapp.mechanics import constraints, loads, shape_functions
from screenapp.mechanics.boundary_chains import boundary_chains
from screenapp.mechanics.corner_stress import (
    disturbed_corners,
    known_corners,
    pressure_jumps,
    split_corners,
)
from screenapp.mechanics.edge_recovery import edge_strains, isotropic, recover_edge_stress
from screenapp.mechanics.elastic_supports import spring_tractions
from screenapp.mechanics.element_walls import element_hooke, element_thickness, hooke_of
from screenapp.mechanics.energy_error import energy_error
from screenapp.mechanics.patch_recovery import recover_inside
from screenapp.mechanics.quadrature import gauss_square
from screenapp.mechanics.strain_displacement import element_strains
from screenapp.mechanics.support_tractions import supported_stress
from screenapp.model.combinations import loadings
from screenapp.model.mesh import Mesh
from screenapp.model.part import Part
from screenapp.model.shape import Shape
from screenapp.model.solution import Solution, StressField

Floats = NDArray[np.float64]
Ints = NDArray[np.int64]


def recover(part: Part, shape: Shape, mesh: Mesh, solution: Solution) -> StressField:
    """Recover the stresses of every case and estimate the energy error.

    Raises:
        SolvingError: the wall has no usable material.
    """
    hooke = element_hooke(part, mesh)
    traction = known_tractions(part, shape, mesh, solution)
    held = constraints.held_sides(part, shape, mesh)
    inside = averaged_stress(mesh, extrapolated_stress(mesh, solution, hooke))
    chains = boundary_chains(shape, mesh)
    behind = mesh.sides[:, 0]
    thickness = element_thickness(part, mesh)
    at_supports = supported_stress(
        mesh, chains, solution, held, traction, thickness[behind], inside[:, mesh.side_fields]
    )
    samples = edge_strains(mesh, solution)
    side = recover_edge_stress(
        mesh,
        chains,
        samples,
        traction,
        held,
        disturbed_corners(part, mesh),
        at_supports,
        hooke_of(hooke, behind),
    )
    fitted, reached = recover_inside(mesh, solution, hooke)
    nodal = with_edges(mesh, np.where(reached[:, None], fitted, inside), side)
    error = energy_error(mesh, solution, hooke, nodal, side, thickness)
    return StressField(nodal, side, error)


def known_tractions(part: Part, shape: Shape, mesh: Mesh, solution: Solution) -> Floats:
    """What loads and beds of springs put on the boundary, (n_cases, n_sides, 3, 2) [MPa]."""
    given = np.stack([loads.side_tractions(part, shape, mesh, case) for case in loadings(part)])
    return given + spring_tractions(part, shape, mesh, solution)


def split_corner_nodes(part: Part, shape: Shape, mesh: Mesh, solution: Solution) -> Ints:
    """Nodes whose stress differs on the two sides (`corner_stress.split_corners`,
    `pressure_jumps`)."""
    traction = known_tractions(part, shape, mesh, solution)
    held = constraints.held_sides(part, shape, mesh)
    chains = boundary_chains(shape, mesh)
    even = isotropic(hooke_of(element_hooke(part, mesh), mesh.sides[:, 0]))
    _, known = known_corners(chains, traction, held, disturbed_corners(part, mesh), even)
    split = split_corners(chains, traction, known) | pressure_jumps(chains, traction, held)
    return np.asarray(mesh.side_nodes[split, 2])


def extrapolated_stress(mesh: Mesh, solution: Solution, hooke: Floats) -> Floats:
    """Each element's own stress at its nine nodes, carried there from its 2 × 2 points.

    Args:
        hooke: (3, 3) or one for each element (n_elements, 3, 3) [MPa].

    Returns:
        (n_cases, n_elements, 9, 3) [MPa].
    """
    points, _ = gauss_square(2)
    stress = element_strains(mesh, solution, points) @ hooke
    # the four points are the corners of a square that is smaller by sqrt(3); they come row by row
    # and the quad's corners run round
    order = [0, 1, 3, 2]
    carry = shape_functions.values(4, shape_functions.LOCAL_NODES * np.sqrt(3.0))  # (9, 4)
    return np.asarray(carry @ stress[:, :, order])


def averaged_stress(mesh: Mesh, own: Floats) -> Floats:
    """Mean over the elements of one zone that meet at each node, (n_cases, n_fields, 3) [MPa].

    Args:
        own: each element's stress at its nine nodes, (n_cases, n_elements, 9, 3).
    """
    flat, n = mesh.field_quads.ravel(), len(mesh.field_nodes)
    count = np.bincount(flat, minlength=n)
    total = np.stack(
        [[np.bincount(flat, case[..., k].ravel(), n) for k in range(3)] for case in own]
    )
    return np.asarray(np.swapaxes(total / np.maximum(count, 1), 1, 2))


def with_edges(mesh: Mesh, inside: Floats, side: Floats) -> Floats:
    """The field inside with its boundary nodes replaced by the mean of their sides' values."""
    flat, n = mesh.side_fields.ravel(), inside.shape[1]
    count = np.bincount(flat, minlength=n)
    rim = count > 0
    nodal = inside.copy()
    for case in range(len(side)):
        for k in range(3):
            total = np.bincount(flat, side[case, :, :, k].ravel(), n)
            nodal[case, rim, k] = total[rim] / count[rim]
    return nodal
