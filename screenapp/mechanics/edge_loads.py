"""Loads along the boundary as force per length, at any places on it, with a mesh or without one."""

from __future__ import annotations

import math
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from screenapp.mechanics.places import misplaced, outward
from screenapp.model.curves import Arc
from screenapp.model.edge_parts import pieces_under, runs_backward
from screenapp.model.part import (
    BearingLoad,
    ForceLoad,
    LineLoad,
    MomentLoad,
    Part,
    PressureLoad,
    ShearLoad,
)
from screenapp.model.shape import Shape

Floats = NDArray[np.float64]
Ints = NDArray[np.int64]

EdgeLoad = PressureLoad | ShearLoad | LineLoad | ForceLoad | BearingLoad | MomentLoad


@dataclass(frozen=True, eq=False)
class EdgePlaces:
    """Places along some stretches of the boundary, the same number of them on each.

    Attributes:
        pieces: piece of the boundary that each stretch lies on, (n,).
        t: parameters of the places on their piece, (n, points).
        at: coordinates [mm], (n, points, 2).
        tangents: unit, material on the left, (n, points, 2).
        lengths: length that each place stands for [mm], (n, points); zero where they are no rule.
        thickness: of the wall behind each stretch [mm], (n,).
    """

    pieces: Ints
    t: Floats
    at: Floats
    tangents: Floats
    lengths: Floats
    thickness: Floats


def force_per_length(
    part: Part, shape: Shape, load: EdgeLoad, places: EdgePlaces, whole: EdgePlaces
) -> Floats:
    """Force per length [N/mm] of a load at some places, (n, points, 2).

    Args:
        whole: a rule over all that the load stands on; what has a given total is spread so that
            this rule gives exactly that.

    Raises:
        InvalidPartError: a pin's load is on what is no round hole.
    """
    if isinstance(load, PressureLoad):
        size: Floats = np.full(places.at.shape[:2], load.pressure)
        if load.end_pressure is not None:
            share = _shares(part, shape, load, places)
            size = (1.0 - share) * load.pressure + share * load.end_pressure
        face = size * places.thickness[:, None]
        return np.asarray(-face[..., None] * outward(places.tangents))
    if isinstance(load, ShearLoad):
        return load.per_length * places.tangents
    if isinstance(load, LineLoad):
        if load.end_x is None and load.end_y is None:
            return np.broadcast_to([load.x, load.y], places.at.shape).astype(float)
        share = _shares(part, shape, load, places)[..., None]
        last = [
            load.x if load.end_x is None else load.end_x,
            load.y if load.end_y is None else load.end_y,
        ]
        return np.asarray((1.0 - share) * [load.x, load.y] + share * last)
    if isinstance(load, ForceLoad):
        length = float(whole.lengths.sum())
        return np.broadcast_to([load.x / length, load.y / length], places.at.shape).astype(float)
    if isinstance(load, BearingLoad):
        return _bearing(shape, load, places, whole)
    if isinstance(load, MomentLoad):
        return _turning(shape, load, places, whole)
    raise TypeError(f"{type(load).__name__} does not act along the boundary")


def _shares(part: Part, shape: Shape, load: PressureLoad | LineLoad, places: EdgePlaces) -> Floats:
    """How far along its edge, as drawn, from 0 to 1 each place of a load is, (n, points)."""
    pieces = pieces_under(part, shape, load)
    backward = runs_backward(part, load.on)
    lengths = np.array([shape.curves[k].curve.length for k in pieces])
    before = np.cumsum(lengths) - lengths
    order = {piece: number for number, piece in enumerate(pieces)}
    number = np.array([order[int(p)] for p in places.pieces])
    own = (1.0 - places.t if backward else places.t) * lengths[number][:, None]
    return np.asarray((before[number][:, None] + own) / lengths.sum())


def _bearing(shape: Shape, load: BearingLoad, places: EdgePlaces, whole: EdgePlaces) -> Floats:
    """Radial push of a pin, cosine over the half it bears on, (n, points, 2) [N/mm].

    At the angle θ from the force the pressure is a·e with the radial unit vector e, over whatever
    thickness the wall has there; the vector `a` is along the force but for the unevenness of the
    rule and the wall, and is chosen so that the sum over the rule is exactly the force (the exact
    rim of one thickness t would give a = 2 F / (π r t)).
    """
    centre = pin_centre(shape, load)
    force = np.array([load.x, load.y])
    if not force.any():
        return np.zeros(places.at.shape)
    bearing, borne = _radial(whole.at, centre, force)
    face = whole.lengths * whole.thickness[:, None]
    spread = np.einsum("sp,spa,spb->ab", face * borne, bearing, bearing)
    push = np.linalg.solve(spread, force)
    radial, on = _radial(places.at, centre, force)
    return radial * (on * (radial @ push) * places.thickness[:, None])[..., None]


def _radial(at: Floats, centre: Floats, force: Floats) -> tuple[Floats, Floats]:
    """Unit vectors from the centre, and 1.0 on the half that the force bears on, else 0.0."""
    arm = at - centre
    radial = arm / np.linalg.norm(arm, axis=-1, keepdims=True)
    return radial, (radial @ force > 0.0).astype(float)


def _turning(shape: Shape, load: MomentLoad, places: EdgePlaces, whole: EdgePlaces) -> Floats:
    """An even shear round a hole, (n, points, 2) [N/mm]: M / (2 π r²) on the exact rim.

    Its size is chosen so that the moment of the rule is exactly the load's.
    """
    centre = pin_centre(shape, load)
    reach = float((whole.lengths * np.linalg.norm(whole.at - centre, axis=-1)).sum())
    arm = places.at - centre
    around = np.stack([-arm[..., 1], arm[..., 0]], axis=-1)
    around /= np.linalg.norm(arm, axis=-1, keepdims=True)
    return np.asarray(load.moment / reach * around)


def pin_centre(shape: Shape, load: BearingLoad | MomentLoad) -> Floats:
    """Centre of the round hole that a pin sits in [mm], (2,).

    Raises:
        InvalidPartError: the load is on something else.
    """
    curves = [shape.curves[i].curve for i in shape.pieces_of(load.on)]
    arcs = [c for c in curves if isinstance(c, Arc)]
    if load.on in shape.hole_ids and len(arcs) == len(curves) and arcs:
        spread = max(math.dist(a.centre, arcs[0].centre) for a in arcs)
        turned = abs(sum(a.sweep for a in arcs))
        if spread <= 1e-6 * arcs[0].radius and abs(turned - 2.0 * math.pi) < 1e-6:
            return np.asarray(arcs[0].centre)
    raise misplaced(load.id, load.on, "put it on a round hole")
