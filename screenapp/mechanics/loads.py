"""Loads as consistent nodal forces, and as the tractions that they stand for.

Edge loads are integrated along the element's own side (straight for the bilinear quads, the
parabola through three nodes for the others), so that their resultant is exact for the mesh.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from screenapp.mechanics.body_forces import body_nodal_forces
from screenapp.mechanics.edge_loads import EdgePlaces, force_per_length
from screenapp.mechanics.element_walls import element_thickness
from screenapp.mechanics.places import misplaced, side_tangents, sides_of
from screenapp.mechanics.quadrature import gauss_line
from screenapp.mechanics.side_functions import carried_sides
from screenapp.model.edge_parts import point_of
from screenapp.model.members import spread_loads
from screenapp.model.mesh import Mesh
from screenapp.model.part import BodyLoad, Case, Part, PointLoad
from screenapp.model.shape import Shape

Floats = NDArray[np.float64]
Ints = NDArray[np.int64]

POINTS = 5
"""Gauss points along a side: exact for every even load on a parabola but for the root in its
length; a bearing load's cosine is smooth but for its two ends."""

POINT_MEND = "put the point load on a sharp corner, or say where along its edge"

_ENDS = np.array([0.0, 0.5, 1.0])


@dataclass(frozen=True, eq=False)
class SideRule:
    """Gauss points along some boundary sides.

    Attributes:
        places: where they are; one stretch a side.
        shapes: the sides' shape functions at the points, (points, nodes).
        nodes: mesh nodes of the sides, (n_sides, nodes).
    """

    places: EdgePlaces
    shapes: Floats
    nodes: Ints


def nodal_forces(part: Part, shape: Shape, mesh: Mesh, case: Case) -> Floats:
    """Nodal forces of a case, (n_nodes, 2) [N], consistent with the part's element.

    Raises:
        InvalidPartError: a load stands on a feature that cannot carry it.
        SolvingError: the part has weight or spins but has no material.
    """
    out = body_nodal_forces(part, mesh, case)
    for load in spread_loads(part, case):
        if isinstance(load, BodyLoad):
            continue
        if isinstance(load, PointLoad):
            out[point_node(part, shape, mesh, load)] += (load.x, load.y)
            continue
        rule = _rule(part, mesh, sides_of(part, shape, mesh, load))
        own = rule.places
        force = force_per_length(part, shape, load, own, own) * own.lengths[..., None]
        np.add.at(out, rule.nodes, np.einsum("pi,spd->sid", rule.shapes, force))
    return out


def side_tractions(part: Part, shape: Shape, mesh: Mesh, case: Case) -> Floats:
    """Traction that the case's loads put on the wall's face, (n_sides, 3, 2) [MPa].

    Axis 1 is the start, middle and end of each boundary side, axis 2 is x, y; directions follow
    the exact curve.  Sides without a load have zero; what supports give is not in it (see
    `constraints.held_sides`), nor are point loads.
    """
    out = np.zeros((len(mesh.sides), 3, 2))
    tangents = side_tangents(shape, mesh)
    for load in spread_loads(part, case):
        if isinstance(load, BodyLoad | PointLoad):
            continue
        sides = sides_of(part, shape, mesh, load)
        nodes = mesh.side_nodes[sides]
        thickness = side_thickness(part, mesh)[sides]
        ends = EdgePlaces(
            mesh.side_piece[sides],
            _parameters(mesh, sides, _ENDS),
            mesh.nodes[nodes],
            tangents[sides],
            np.zeros(nodes.shape),
            thickness,
        )
        whole = _rule(part, mesh, sides).places
        out[sides] += force_per_length(part, shape, load, ends, whole) / thickness[:, None, None]
    return out


def point_node(part: Part, shape: Shape, mesh: Mesh, load: PointLoad) -> int:
    """The node that a force at a point acts on.

    Raises:
        InvalidPartError: it stands on no sharp corner and no place of an edge.
    """
    if load.along is None and load.on in mesh.corner_nodes:
        return mesh.corner_nodes[load.on]
    at = point_of(part, shape, load)
    if at is not None:
        ends = np.unique(mesh.side_nodes[mesh.sides_on(shape.pieces_of(load.on))][:, ::2])
        far = np.hypot(*(mesh.nodes[ends] - at).T)
        if len(far) and far.min() < 1e-6 * shape.size:
            return int(ends[np.argmin(far)])
    raise misplaced(load.id, load.on, POINT_MEND)


def side_thickness(part: Part, mesh: Mesh) -> Floats:
    """Thickness of the wall behind each boundary side [mm], (n_sides,)."""
    return np.asarray(element_thickness(part, mesh)[mesh.sides[:, 0]])


def _parameters(mesh: Mesh, sides: Ints, along: Floats) -> Floats:
    """Parameters on the piece of places along each side, 0 to 1, (n_sides, points)."""
    begin, end = mesh.side_t[sides].T
    return np.asarray(begin[:, None] + (end - begin)[:, None] * along)


def _rule(part: Part, mesh: Mesh, sides: Ints) -> SideRule:
    """Gauss points along sides, as the part's element interpolates them."""
    s, weights = gauss_line(POINTS)
    nodes, shapes, slopes = carried_sides(mesh, part.mesh.element, sides, s)
    corners = mesh.nodes[nodes]
    run = np.einsum("pi,sid->spd", slopes, corners)
    stretch = np.linalg.norm(run, axis=2)
    places = EdgePlaces(
        mesh.side_piece[sides],
        _parameters(mesh, sides, 0.5 * (1.0 + s)),
        np.einsum("pi,sid->spd", shapes, corners),
        run / stretch[..., None],
        stretch * weights,
        side_thickness(part, mesh)[sides],
    )
    return SideRule(places, shapes, nodes)
