"""Loads as consistent nodal forces, and as the tractions and body forces they stand for.

Edge loads are integrated along the element's own side (straight for the bilinear quads, the
parabola through three nodes for the others), so that their resultant is exact for the mesh.
"""

from __future__ import annotations

import math
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from screenapp.mechanics.body_forces import body_nodal_forces
from screenapp.mechanics.element_walls import element_thickness
from screenapp.mechanics.kernels import CARRIED_NODES
from screenapp.mechanics.places import misplaced, outward, side_tangents, sides_of
from screenapp.mechanics.quadrature import gauss_line
from screenapp.model.curves import Arc
from screenapp.model.edge_parts import pieces_under, runs_backward
from screenapp.model.members import spread_loads
from screenapp.model.mesh import Mesh
from screenapp.model.part import (
    BearingLoad,
    BodyLoad,
    Case,
    ForceLoad,
    LineLoad,
    Load,
    MomentLoad,
    Part,
    PointLoad,
    PressureLoad,
    ShearLoad,
)
from screenapp.model.shape import Shape

Floats = NDArray[np.float64]
Ints = NDArray[np.int64]

POINTS = 5
"""Gauss points along a side: exact for every even load on a parabola but for the root in its
length; a bearing load's cosine is smooth but for its two ends."""

_ENDS = np.array([0.0, 0.5, 1.0])

EdgeLoad = PressureLoad | ShearLoad | LineLoad | ForceLoad | BearingLoad | MomentLoad


@dataclass(frozen=True, eq=False)
class SidePoints:
    """Places along some boundary sides: (n_sides, points, ...).

    Attributes:
        sides: the sides, (n_sides,).
        along: where on their side they are, 0 to 1, (points,).
        at: coordinates [mm].
        tangents: unit, material on the left.
        lengths: length that each point stands for [mm]; zero where the places are no rule.
        shapes: the sides' shape functions at the points, (points, nodes).
        nodes: mesh nodes of the sides, (n_sides, nodes).
        thickness: of the wall behind each side [mm], (n_sides,).
    """

    sides: Ints
    along: Floats
    at: Floats
    tangents: Floats
    lengths: Floats
    shapes: Floats
    nodes: Ints
    thickness: Floats


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
            out[_corner_node(mesh, load)] += (load.x, load.y)
            continue
        rule = _rule(part, mesh, sides_of(part, shape, mesh, load))
        force = _per_length(part, shape, mesh, load, rule) * rule.lengths[..., None]
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
        ends = SidePoints(
            sides,
            _ENDS,
            mesh.nodes[nodes],
            tangents[sides],
            np.zeros(nodes.shape),
            np.eye(3),
            nodes,
            thickness,
        )
        out[sides] += _per_length(part, shape, mesh, load, ends) / thickness[:, None, None]
    return out


def _corner_node(mesh: Mesh, load: PointLoad) -> int:
    if load.on not in mesh.corner_nodes:
        raise misplaced(load.id, load.on, "put the point load on a sharp corner")
    return mesh.corner_nodes[load.on]


def side_thickness(part: Part, mesh: Mesh) -> Floats:
    """Thickness of the wall behind each boundary side [mm], (n_sides,)."""
    return np.asarray(element_thickness(part, mesh)[mesh.sides[:, 0]])


def _rule(part: Part, mesh: Mesh, sides: Ints) -> SidePoints:
    """Gauss points along sides, as the part's element interpolates them."""
    element = part.mesh.element
    s, weights = gauss_line(POINTS)
    if CARRIED_NODES[element] == 4:
        nodes = mesh.side_nodes[sides][:, ::2]
        shapes = np.stack([0.5 * (1.0 - s), 0.5 * (1.0 + s)], axis=1)
        slopes = np.tile([-0.5, 0.5], (len(s), 1))
    else:
        nodes = mesh.side_nodes[sides]
        shapes = np.stack([0.5 * s * (s - 1.0), 1.0 - s * s, 0.5 * s * (s + 1.0)], axis=1)
        slopes = np.stack([s - 0.5, -2.0 * s, s + 0.5], axis=1)
    corners = mesh.nodes[nodes]
    run = np.einsum("pi,sid->spd", slopes, corners)
    stretch = np.linalg.norm(run, axis=2)
    return SidePoints(
        sides,
        0.5 * (1.0 + s),
        np.einsum("pi,sid->spd", shapes, corners),
        run / stretch[..., None],
        stretch * weights,
        shapes,
        nodes,
        side_thickness(part, mesh)[sides],
    )


def _per_length(part: Part, shape: Shape, mesh: Mesh, load: Load, places: SidePoints) -> Floats:
    """Force per length [N/mm] of a load at some places, (n_sides, points, 2)."""
    if isinstance(load, PressureLoad):
        size: Floats = np.full(places.at.shape[:2], load.pressure)
        if load.end_pressure is not None:
            share = _shares(part, shape, mesh, load, places)
            size = (1.0 - share) * load.pressure + share * load.end_pressure
        face = size * places.thickness[:, None]
        return np.asarray(-face[..., None] * outward(places.tangents))
    if isinstance(load, ShearLoad):
        return load.per_length * places.tangents
    if isinstance(load, LineLoad):
        if load.end_x is None and load.end_y is None:
            return np.broadcast_to([load.x, load.y], places.at.shape).astype(float)
        share = _shares(part, shape, mesh, load, places)[..., None]
        last = [
            load.x if load.end_x is None else load.end_x,
            load.y if load.end_y is None else load.end_y,
        ]
        return np.asarray((1.0 - share) * [load.x, load.y] + share * last)
    if isinstance(load, ForceLoad):
        sides = sides_of(part, shape, mesh, load)
        length = float(_rule(part, mesh, sides).lengths.sum())
        return np.broadcast_to([load.x / length, load.y / length], places.at.shape).astype(float)
    if isinstance(load, BearingLoad):
        return _bearing(part, shape, mesh, load, places)
    if isinstance(load, MomentLoad):
        return _turning(part, shape, mesh, load, places)
    raise TypeError(f"{type(load).__name__} does not act along sides")


def _shares(
    part: Part, shape: Shape, mesh: Mesh, load: PressureLoad | LineLoad, places: SidePoints
) -> Floats:
    """How far along its edge, as drawn, from 0 to 1 each place of a load is, (n_sides, points)."""
    pieces = pieces_under(part, shape, load)
    backward = runs_backward(part, load.on)
    lengths = np.array([shape.curves[k].curve.length for k in pieces])
    before = np.cumsum(lengths) - lengths
    order = {piece: number for number, piece in enumerate(pieces)}
    number = np.array([order[int(p)] for p in mesh.side_piece[places.sides]])
    begin, end = mesh.side_t[places.sides].T
    t = begin[:, None] + (end - begin)[:, None] * places.along
    own = (1.0 - t if backward else t) * lengths[number][:, None]
    return np.asarray((before[number][:, None] + own) / lengths.sum())


def _bearing(part: Part, shape: Shape, mesh: Mesh, load: BearingLoad, places: SidePoints) -> Floats:
    """Radial push of a pin, cosine over the half it bears on, (n_sides, points, 2) [N/mm].

    At the angle θ from the force the pressure is a·e with the radial unit vector e, over whatever
    thickness the wall has there; the vector `a` is along the force but for the unevenness of the
    mesh and the wall, and is chosen so that the sum over the mesh's own rule is exactly the force
    (the exact rim of one thickness t would give a = 2 F / (π r t)).
    """
    centre = _pin_centre(shape, load)
    force = np.array([load.x, load.y])
    size = math.hypot(load.x, load.y)
    if size == 0.0:
        return np.zeros(places.at.shape)
    rule = _rule(part, mesh, sides_of(part, shape, mesh, load))
    bearing, borne = _radial(rule.at, centre, force)
    face = rule.lengths * rule.thickness[:, None]
    spread = np.einsum("sp,spa,spb->ab", face * borne, bearing, bearing)
    push = np.linalg.solve(spread, force)
    radial, on = _radial(places.at, centre, force)
    return radial * (on * (radial @ push) * places.thickness[:, None])[..., None]


def _radial(at: Floats, centre: Floats, force: Floats) -> tuple[Floats, Floats]:
    """Unit vectors from the centre, and 1.0 on the half that the force bears on, else 0.0."""
    arm = at - centre
    radial = arm / np.linalg.norm(arm, axis=-1, keepdims=True)
    return radial, (radial @ force > 0.0).astype(float)


def _turning(part: Part, shape: Shape, mesh: Mesh, load: MomentLoad, places: SidePoints) -> Floats:
    """An even shear round a hole, (n_sides, points, 2) [N/mm]: M / (2 π r²) on the exact rim.

    Its size is chosen so that the moment of the mesh's own rule is exactly the load's.
    """
    centre = _pin_centre(shape, load)
    rule = _rule(part, mesh, sides_of(part, shape, mesh, load))
    reach = float((rule.lengths * np.linalg.norm(rule.at - centre, axis=-1)).sum())
    arm = places.at - centre
    around = np.stack([-arm[..., 1], arm[..., 0]], axis=-1)
    around /= np.linalg.norm(arm, axis=-1, keepdims=True)
    return np.asarray(load.moment / reach * around)


def _pin_centre(shape: Shape, load: BearingLoad | MomentLoad) -> Floats:
    """Centre of the round hole that a pin sits in."""
    curves = [shape.curves[i].curve for i in shape.pieces_of(load.on)]
    arcs = [c for c in curves if isinstance(c, Arc)]
    if load.on in shape.hole_ids and len(arcs) == len(curves) and arcs:
        spread = max(math.dist(a.centre, arcs[0].centre) for a in arcs)
        turned = abs(sum(a.sweep for a in arcs))
        if spread <= 1e-6 * arcs[0].radius and abs(turned - 2.0 * math.pi) < 1e-6:
            return np.asarray(arcs[0].centre)
    raise misplaced(load.id, load.on, "put it on a round hole")
