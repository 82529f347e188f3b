"""What each load amounts to: its force and moment, before there is any mesh.

Loads along the boundary are integrated over the exact curves, with the force per length that the
nodal forces are made of; weight and spin over the exact area, by Green's theorem along its
boundary.  Moments are about the origin of the drawing, as those of the reactions are.
"""

from __future__ import annotations

import dataclasses
import math
from collections.abc import Iterable

import numpy as np
from numpy.typing import NDArray

from screenapp.mechanics.edge_loads import EdgePlaces, force_per_length
from screenapp.mechanics.elasticity import zone_material
from screenapp.mechanics.equilibrium import resultant
from screenapp.mechanics.loads import POINT_MEND
from screenapp.mechanics.places import misplaced
from screenapp.mechanics.quadrature import gauss_line
from screenapp.model.curves import Arc
from screenapp.model.edge_parts import pieces_under, point_of
from screenapp.model.members import spread_loads
from screenapp.model.part import (
    Case,
    GravityLoad,
    Load,
    MisfitLoad,
    Part,
    Point,
    PointLoad,
    SpinLoad,
    TemperatureLoad,
)
from screenapp.model.shape import Shape
from screenapp.model.solution import LoadResultant

Floats = NDArray[np.float64]

POINTS = 8
"""Gauss points along each stretch of a curve."""

STRETCH = math.pi / 16.0
"""An arc is taken in stretches of at most this angle [rad]: what is integrated are sines and
cosines of it, which so many points have to the last figures."""

NOTHING = 1e-11
"""A force below this share of all that acts (a moment: times the distance) is rounding."""

FAR = 10.0
"""A line of action farther off than so many extents of where the load acts is not gone to."""

Acting = tuple[Floats, Floats]
"""Places (n, 2) [mm] and forces (n, 2) [N]."""


def load_resultants(part: Part, shape: Shape, case: Case) -> tuple[LoadResultant, ...]:
    """Force, moment and place of every load of a case, in its order.

    Args:
        shape: the divided shape, cut where loads begin and end (as `validity.check` gives it).

    Raises:
        InvalidPartError: a load stands on what cannot carry it.
        SolvingError: the part has weight or spins but has no material.
    """
    found: dict[str, list[Acting]] = {load.id: [] for load in case.loads}
    for load in spread_loads(part, case):
        found[load.id].append(_acting(part, shape, load))
    return tuple(_summed(id_, acting) for id_, acting in found.items())


def total_of(case: str, loads: Iterable[LoadResultant]) -> LoadResultant:
    """All loads of a case together; its place is on their line of action."""
    each = [load for load in loads if load.at is not None]
    places = np.array([load.at for load in each]).reshape(-1, 2)
    forces = np.array([(load.x, load.y) for load in each]).reshape(-1, 2)
    moment = np.array([load.moment for load in each])
    couples = moment - (places[:, 0] * forces[:, 1] - places[:, 1] * forces[:, 0])
    return _resultant(case, places, forces, couples)


def _summed(id_: str, acting: list[Acting]) -> LoadResultant:
    places = np.concatenate([at for at, _ in acting])
    forces = np.concatenate([force for _, force in acting])
    return _resultant(id_, places, forces, np.zeros(len(places)))


def _resultant(id_: str, places: Floats, forces: Floats, couples: Floats) -> LoadResultant:
    """Of forces at places, and couples [N·mm] beside them."""
    if not len(places):
        return LoadResultant(id_, 0.0, 0.0, 0.0, None)
    x, y, moment = resultant(places, forces)
    moment += couples.sum()
    size = np.hypot(*forces.T)
    weight = size if size.any() else np.abs(couples)
    if not weight.any():
        return LoadResultant(id_, 0.0, 0.0, 0.0, None)
    middle = (weight[:, None] * places).sum(axis=0) / weight.sum()
    about = moment - (middle[0] * y - middle[1] * x)
    reach = FAR * float(np.hypot(*(places - middle).T).max())
    least = NOTHING * float(size.sum())
    x, y = (0.0 if abs(v) <= least else float(v) for v in (x, y))
    least = NOTHING * float((size * np.hypot(*places.T)).sum() + np.abs(couples).sum())
    moment, about = (0.0 if abs(v) <= least else float(v) for v in (moment, about))
    force = math.hypot(x, y)
    if 0.0 < abs(about) <= force * reach:
        middle = middle + about / force**2 * np.array([y, -x])
    at: Point = float(middle[0]), float(middle[1])
    return LoadResultant(id_, x, y, moment if x or y or about else 0.0, at)


def _acting(part: Part, shape: Shape, load: Load) -> Acting:
    """The forces that a load stands for."""
    if isinstance(load, TemperatureLoad | MisfitLoad):
        return np.zeros((0, 2)), np.zeros((0, 2))
    if isinstance(load, GravityLoad | SpinLoad):
        return _throughout(part, shape, load)
    if isinstance(load, PointLoad):
        at = point_of(part, shape, load)
        if at is None:
            raise misplaced(load.id, load.on, POINT_MEND)
        return np.array([at]), np.array([[load.x, load.y]])
    pieces = pieces_under(part, shape, load)
    if not pieces:
        raise misplaced(load.id, load.on, "put it on an edge, a fillet or a hole of the part")
    rule = _rule(part, shape, pieces)
    force = force_per_length(part, shape, load, rule, rule) * rule.lengths[..., None]
    return rule.at.reshape(-1, 2), force.reshape(-1, 2)


def _throughout(part: Part, shape: Shape, load: GravityLoad | SpinLoad) -> Acting:
    """Of each zone the force, at its centre of mass.

    What a spin pulls passes through the axis and the centre of mass, so that one place is enough.
    """
    at: list[Floats] = []
    forces: list[Floats] = []
    for region in shape.parts:
        area, first = _area_moments(part, region.shape)
        # kg/m³ is 1e-12 t/mm³; tonnes, millimetres and seconds give newtons
        mass = 1e-12 * zone_material(part, region.zone).density
        mass *= area * part.wall_of(region.zone).thickness
        centre = first / area
        at.append(centre)
        if isinstance(load, GravityLoad):
            forces.append(mass * 1e3 * np.array([load.x, load.y]))
        else:
            omega = load.speed * 2.0 * math.pi / 60.0
            axis = np.array([load.x, load.y])
            arm = centre - axis
            arm[np.abs(arm) <= NOTHING * (shape.size + np.abs(axis).max())] = 0.0
            forces.append(mass * load.factor * omega**2 * arm)
    return np.array(at), np.array(forces)


def _area_moments(part: Part, shape: Shape) -> tuple[float, Floats]:
    """Area [mm²] and its first moments ∫x dA, ∫y dA [mm³], (2,)."""
    rule = _rule(part, shape, tuple(range(len(shape.curves))))
    x, y = rule.at[..., 0], rule.at[..., 1]
    dx, dy = (rule.tangents[..., k] * rule.lengths for k in (0, 1))
    first = 0.5 * np.array([(x * x * dy).sum(), -(y * y * dx).sum()])
    return float(0.5 * (x * dy - y * dx).sum()), first


def _rule(part: Part, shape: Shape, pieces: tuple[int, ...]) -> EdgePlaces:
    """Gauss points over exact pieces of the boundary, arcs in short stretches."""
    s, weights = gauss_line(POINTS)
    rows: list[EdgePlaces] = []
    for piece in pieces:
        curve = shape.curves[piece].curve
        n = math.ceil(abs(curve.sweep) / STRETCH) if isinstance(curve, Arc) else 1
        t = (np.arange(n)[:, None] + 0.5 * (1.0 + s)) / n
        lengths = np.broadcast_to(0.5 * curve.length / n * weights, t.shape)
        thickness = part.wall_of(shape.zone_behind(piece)).thickness
        rows.append(
            EdgePlaces(
                np.full(n, piece),
                t,
                curve.point(t),
                curve.tangent(t),
                lengths,
                np.full(n, thickness),
            )
        )
    return EdgePlaces(
        *(
            np.concatenate([getattr(row, field.name) for row in rows])
            for field in dataclasses.fields(EdgePlaces)
        )
    )
