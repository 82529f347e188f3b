"""What acts on one side of a cut: the free body that an engineer would draw.

Loads are integrated along the sides that lie on the body and weight and spin over its elements, a
side or element that the cut divides exactly as far as it reaches (`cut_elements`); supports give
their forces at its nodes.
"""

from __future__ import annotations

import numpy as np
import shapely
from numpy.typing import NDArray

from screenapp.mechanics.body_forces import force_density, has_body_forces
from screenapp.mechanics.cut_elements import area_points, side_pieces
from screenapp.mechanics.element_walls import element_thickness
from screenapp.mechanics.equilibrium import resultant
from screenapp.mechanics.loads import side_thickness, side_tractions
from screenapp.mechanics.quadrature import gauss_line
from screenapp.mechanics.shape_functions import line_slopes, line_values
from screenapp.mechanics.straight_cut import StraightCut
from screenapp.model.combinations import loadings
from screenapp.model.edge_parts import point_of
from screenapp.model.findings import SectionForces
from screenapp.model.members import spread_loads
from screenapp.model.mesh import Mesh
from screenapp.model.part import Case, Part, PointLoad
from screenapp.model.shape import Shape
from screenapp.model.solution import Solution

Floats = NDArray[np.float64]

FLAT = 1e-5
"""Arcs are flattened to this share of the part's size for the question what lies on the body."""


def section_forces(
    part: Part, shape: Shape, mesh: Mesh, solution: Solution, case: int, cut: StraightCut
) -> SectionForces | None:
    """Section forces that keep the body left of the cut in balance.

    None where the cut does not divide the part in two, or the supports' forces were not kept.
    """
    body = body_left_of(shape, cut)
    if body is None or solution.support_forces is None:
        return None
    held, loads = solution.support_forces[case], loadings(part)[case]
    total = _on_body(part, shape, mesh, held, loads, body, cut)
    middle = cut.start + centroid(part, cut) * cut.along
    force = -total[:2]
    about = total[2] - (middle[0] * total[1] - middle[1] * total[0])
    return SectionForces(float(force @ cut.normal), float(force @ cut.along), float(about))


def centroid(part: Part, cut: StraightCut) -> float:
    """Distance of the section's middle from the start of the cut [mm]."""
    areas = span_thickness(part, cut) * np.ptp(cut.spans, axis=1)
    return float((areas * cut.spans.mean(axis=1)).sum() / areas.sum())


def span_thickness(part: Part, cut: StraightCut) -> Floats:
    """Thickness of the wall along each span [mm], (n_spans,)."""
    return np.array([part.wall_of(int(zone)).thickness for zone in cut.zones])


def body_left_of(shape: Shape, cut: StraightCut) -> shapely.Geometry | None:
    """The part of the material left of the cut, None if the cut leaves it in one piece."""
    if not len(cut.spans):
        return None
    tolerance = FLAT * shape.size
    rings = [shape.polyline(loop, tolerance) for loop in range(len(shape.loops))]
    whole = shapely.Polygon(rings[0], rings[1:])
    beyond = 10.0 * tolerance
    blades = [
        shapely.LineString(
            [cut.start + (a - beyond) * cut.along, cut.start + (b + beyond) * cut.along]
        )
        for a, b in cut.spans
    ]
    lines = shapely.union_all([whole.boundary, *blades])
    faces = [
        face
        for face in shapely.polygonize([lines]).geoms
        if whole.contains(face.representative_point())
    ]
    if len(faces) < 2:
        return None
    middles = cut.start + cut.spans.mean(axis=1)[:, None] * cut.along
    left = [_face_at(faces, p - beyond * cut.normal) for p in middles]
    right = [_face_at(faces, p + beyond * cut.normal) for p in middles]
    if set(left) & set(right):
        return None
    return shapely.union_all([faces[k] for k in sorted(set(left))])


def _face_at(faces: list[shapely.Geometry], point: Floats) -> int:
    at = shapely.Point(point)
    return min(range(len(faces)), key=lambda k: float(faces[k].distance(at)))


def _on_body(
    part: Part,
    shape: Shape,
    mesh: Mesh,
    support_forces: Floats,
    case: Case,
    body: shapely.Geometry,
    cut: StraightCut,
) -> Floats:
    """Force [N] and moment about the origin [N·mm] of all that acts on the body, (3,)."""
    shapely.prepare(body)
    total = np.zeros(3)
    total += _sum(body, *_side_forces(part, shape, mesh, case, cut))
    total += _throughout(part, mesh, case, body, cut)
    points = [load for load in spread_loads(part, case) if isinstance(load, PointLoad)]
    if points:
        places = np.array([point_of(part, shape, load) for load in points])
        total += _sum(body, places, np.array([(load.x, load.y) for load in points]))
    held = np.flatnonzero(support_forces.any(axis=1))
    total += _sum(body, mesh.nodes[held], support_forces[held])
    return total


def _side_forces(
    part: Part, shape: Shape, mesh: Mesh, case: Case, cut: StraightCut
) -> tuple[Floats, Floats]:
    """Places (n, 2) [mm] and forces (n, 2) [N] of a fine rule over all loaded sides."""
    traction = side_tractions(part, shape, mesh, case)
    loaded = np.flatnonzero(traction.any(axis=(1, 2)))
    points, weights = gauss_line(16)
    nodes = mesh.nodes[mesh.side_nodes[loaded]]
    thickness = side_thickness(part, mesh)[loaded]
    at, force = [np.zeros((0, 2))], [np.zeros((0, 2))]
    for side, a, b in side_pieces(nodes, cut):
        t = 0.5 * (a + b) + 0.5 * (b - a) * points
        shapes, slopes = line_values(t), line_slopes(t)
        at.append(shapes @ nodes[side])
        stretch = np.linalg.norm(slopes @ nodes[side], axis=1) * 0.5 * (b - a)
        share = (thickness[side] * stretch * weights)[:, None]
        force.append(share * (shapes @ traction[loaded[side]]))
    return np.concatenate(at), np.concatenate(force)


def _throughout(
    part: Part, mesh: Mesh, case: Case, body: shapely.Geometry, cut: StraightCut
) -> Floats:
    """Force and moment of weight and spin on the body, (3,)."""
    if not has_body_forces(case):
        return np.zeros(3)
    at, areas = area_points(mesh, cut, lambda points: _holds(body, points))
    volumes = areas * element_thickness(part, mesh)[:, None]
    force = force_density(part, mesh, case, at) * volumes[..., None]
    return resultant(at.reshape(-1, 2), force.reshape(-1, 2))


def _sum(body: shapely.Geometry, at: Floats, force: Floats) -> Floats:
    """Resultant (3,) of the forces that stand on the body."""
    if not len(at):
        return np.zeros(3)
    mine = _holds(body, at)
    return resultant(at[mine], force[mine])


def _holds(body: shapely.Geometry, at: Floats) -> NDArray[np.bool_]:
    """Which points lie on the body or so near to it as its flattened arcs are to the arcs."""
    reach = 1e-6 * float(np.ptp(np.asarray(body.bounds).reshape(2, 2), axis=0).max())
    return np.asarray(shapely.dwithin(body, shapely.points(at), 20.0 * reach))
