"""Forces that act throughout the part: its own weight, and what a steady spin pulls outwards."""

from __future__ import annotations

import math

import numpy as np
from numpy.typing import NDArray

from screenapp.mechanics import shape_functions
from screenapp.mechanics.elasticity import zone_material
from screenapp.mechanics.element_walls import element_thickness
from screenapp.mechanics.quadrature import gauss_square
from screenapp.model.mesh import NODES_OF_ELEMENT, Mesh
from screenapp.model.part import Case, ElementName, GravityLoad, Part, SpinLoad

Floats = NDArray[np.float64]

POINTS = 3
"""Gauss points along each side of an element: exact for a linear force on a curved 9-node quad."""


def body_force(part: Part, case: Case, zone: int = -1) -> Floats:
    """Weight per volume of the case in a zone (-1: in the wall itself), (2,) [N/mm³].

    Density in kg/m³ times acceleration in m/s² is N/m³; one N/m³ is 1e-9 N/mm³.

    Raises:
        SolvingError: the part has weight but no material.
    """
    total = np.zeros(2)
    for load in case.loads:
        if isinstance(load, GravityLoad):
            total += 1e-9 * zone_material(part, zone).density * np.array([load.x, load.y])
    return total


def has_body_forces(case: Case) -> bool:
    """Whether anything acts throughout the part."""
    return any(isinstance(load, GravityLoad | SpinLoad) for load in case.loads)


def force_density(part: Part, mesh: Mesh, case: Case, at: Floats) -> Floats:
    """Force per volume at points `at` (n_elements, p, 2) [mm] of every element [N/mm³].

    Raises:
        SolvingError: the part has mass but no material.
    """
    zones = range(-1, len(part.zones))
    zone = mesh.element_zones + 1
    weight = np.array([body_force(part, case, z) for z in zones])[zone]
    out = np.broadcast_to(weight[:, None], at.shape).copy()
    for load in case.loads:
        if isinstance(load, SpinLoad):
            omega = load.speed * 2.0 * math.pi / 60.0
            # kg/m³ is 1e-12 t/mm³; tonnes, millimetres and seconds give newtons
            mass = np.array([1e-12 * zone_material(part, z).density for z in zones])[zone]
            pull = load.factor * omega**2 * mass[:, None, None]
            out += pull * (at - np.array([load.x, load.y]))
    return out


def body_rule(part: Part, mesh: Mesh, element: ElementName) -> tuple[Floats, Floats, Floats]:
    """A Gauss rule over every element, as the element interpolates it.

    Returns:
        places (n_elements, p, 2) [mm], volumes that they stand for (n_elements, p) [mm³], and
        shape functions there (p, nodes).
    """
    n = NODES_OF_ELEMENT[element]
    xi, weights = gauss_square(POINTS)
    shapes = shape_functions.values(n, xi)
    corners = mesh.nodes[mesh.quads[:, :n]]
    slopes = shape_functions.derivatives(n, xi)
    along = np.einsum("pna,enb->epab", slopes, corners)
    det = along[..., 0, 0] * along[..., 1, 1] - along[..., 0, 1] * along[..., 1, 0]
    volumes = det * weights * element_thickness(part, mesh)[:, None]
    return shapes @ corners, volumes, shapes


def body_nodal_forces(part: Part, mesh: Mesh, case: Case) -> Floats:
    """Nodal forces of what acts throughout the part, (n_nodes, 2) [N].

    Raises:
        SolvingError: the part has mass but no material.
    """
    out = np.zeros((mesh.n_nodes, 2))
    if not has_body_forces(case):
        return out
    at, volumes, shapes = body_rule(part, mesh, part.mesh.element)
    force = force_density(part, mesh, case, at) * volumes[..., None]
    nodes = mesh.quads[:, : shapes.shape[1]].ravel()
    shares = np.einsum("pn,epk->enk", shapes, force).reshape(-1, 2)
    for k in (0, 1):
        out[:, k] = np.bincount(nodes, shares[:, k], minlength=mesh.n_nodes)
    return out
