"""Where a shear load stops so that the stress grows without end, though only as ln(1/r).

A shear traction that jumps by Δτ on a straight edge gives the edge a stress of (2/π) Δτ ln(1/r) at
the distance r (the half-plane under a tangential load over a part of its edge, summed up from
Flamant's solution; Timoshenko & Goodier, Theory of Elasticity, from memory).  A sliding support at
a right angle to a sheared edge mirrors it with the shear reversed, so the jump is twice the shear.
At any other corner two tractions give finite stresses (`mechanics/corner_stress.py`).
"""

from __future__ import annotations

import math
from collections.abc import Callable, Sequence

import numpy as np
from numpy.typing import NDArray

from screenapp.mechanics.characteristic_roots import tangential_growth
from screenapp.mechanics.corner_exponent import SLIDING, Face
from screenapp.mechanics.elasticity import axis_of, constitutive_matrix
from screenapp.mechanics.singular_spot import SingularSpot
from screenapp.model.combinations import loadings
from screenapp.model.edge_parts import pieces_under, runs_backward
from screenapp.model.members import spread_loads
from screenapp.model.part import Case, ForceLoad, LineLoad, Part, Point, ShearLoad
from screenapp.model.shape import Shape

Floats = NDArray[np.float64]

GROWTH = 2.0 / math.pi
"""Growth of the edge's stress over ln(1/r), for a jump of 1 in the shear."""

NEARLY = math.radians(5.0)
"""A corner that is straight, or square to a sliding support, within this is as good as that: at
any distance that a mesh reaches the stress grows as it would there."""

_NEGLIGIBLE = 1e-6  # share of the largest traction of these loads in the case


def shear_ends(
    part: Part,
    shape: Shape,
    junctions: Sequence[tuple[int, int, float]],
    face: Callable[[int, bool], Face],
) -> list[SingularSpot]:
    """Every such place, by case.

    Args:
        junctions: pieces before and after, and the angle of the material between them [rad].
        face: how a piece is held (by index) at its start (True) or its end.
    """
    spots: list[SingularSpot] = []
    for case in loadings(part):
        shear, by, most = _shears(part, shape, case)
        for before, after, angle in junctions:
            into, out = shear[before][1], shear[after][0]
            held = face(before, False), face(after, True)
            slides = [h for h in held if not isinstance(h, str) and abs(h - SLIDING) < NEARLY]
            if held == ("free", "free") and abs(angle - math.pi) <= NEARLY:
                jump, meets = abs(into - out), False
            elif "free" in held and slides and abs(angle - 0.5 * math.pi) <= NEARLY:
                jump, meets = 2.0 * abs(into + out), True
            else:
                continue
            if jump > _NEGLIGIBLE * most:
                loads = tuple(dict.fromkeys((*by[before], *by[after])))
                growth = edge_growth(part, shape, after) * jump
                spots.append(_spot(shape, case, before, after, loads, growth, meets))
    return spots


def edge_growth(part: Part, shape: Shape, piece: int) -> float:
    """Growth of the stress along a piece of the boundary at its start over ln(1/r), for a jump of 1
    in the shear; against a sliding support askew to an orthotropic sheet's axes, a guess."""
    zone = shape.zone_behind(piece)
    material = part.material_of(zone)
    if material is None or not material.orthotropic:
        return GROWTH
    x, y = shape.curves[piece].curve.tangent(0.0)
    hooke = constitutive_matrix(material, part.wall.state, axis_of(part, zone))
    return GROWTH * tangential_growth(hooke, math.degrees(math.atan2(float(y), float(x))))


def _shears(
    part: Part, shape: Shape, case: Case
) -> tuple[list[tuple[float, float]], list[list[str]], float]:
    """The shear traction [MPa] at start and end of each piece, forwards, the loads it is of, and
    the largest traction of any of them [MPa]."""
    shear = [(0.0, 0.0)] * len(shape.curves)
    by: list[list[str]] = [[] for _ in shape.curves]
    most = 0.0
    for load in spread_loads(part, case):
        if not isinstance(load, ShearLoad | LineLoad | ForceLoad):
            continue
        for i, start, end in _per_length(part, shape, load):
            thickness = part.wall_of(shape.zone_behind(i)).thickness
            tangents = (shape.curves[i].curve.tangent(t) for t in (0.0, 1.0))
            own = [float(f @ t) / thickness for f, t in zip((start, end), tangents, strict=True)]
            most = max(most, *(float(np.hypot(*f)) / thickness for f in (start, end)))
            shear[i] = shear[i][0] + own[0], shear[i][1] + own[1]
            by[i].append(load.id)
    return shear, by, most


def _per_length(
    part: Part, shape: Shape, load: ShearLoad | LineLoad | ForceLoad
) -> list[tuple[int, Floats, Floats]]:
    """The pieces that a load stands on, and its force per length (2,) [N/mm] at start and end of
    each, forwards."""
    pieces = pieces_under(part, shape, load)  # in the direction of drawing
    curves = [shape.curves[i].curve for i in pieces]
    if isinstance(load, ShearLoad):
        return [
            (i, load.per_length * c.tangent(0.0), load.per_length * c.tangent(1.0))
            for i, c in zip(pieces, curves, strict=True)
        ]
    reached = np.concatenate([[0.0], np.cumsum([c.length for c in curves])])
    first = last = np.array([load.x, load.y])
    if isinstance(load, ForceLoad):
        first = last = first / max(float(reached[-1]), 1e-300)
    else:
        ends = zip((load.end_x, load.end_y), (load.x, load.y), strict=True)
        last = np.array([at if end is None else end for end, at in ends])
    share = (reached / max(float(reached[-1]), 1e-300))[:, None]
    force = (1.0 - share) * first + share * last
    backward = runs_backward(part, load.on)
    return [
        (i, force[k + 1], force[k]) if backward else (i, force[k], force[k + 1])
        for k, i in enumerate(pieces)
    ]


def _spot(
    shape: Shape,
    case: Case,
    before: int,
    after: int,
    loads: tuple[str, ...],
    growth: float,
    meets: bool,
) -> SingularSpot:
    x, y = shape.curves[after].curve.start
    at: Point = (float(x), float(y))
    corner = next((c for c, p in shape.sharp_corners if math.dist(p, at) < 1e-9 * shape.size), "")
    features = dict.fromkeys((shape.curves[before].feature, shape.curves[after].feature))
    between = " and ".join(features)
    where = f"the junction of {between}" if len(features) > 1 else f"a place within {between}"
    where = f"corner {corner}" if corner else where
    named = " and ".join(loads)
    what = (
        f"the shear of load {named} meets a sliding support at {where}"
        if meets
        else f"the shear of load {named} ends at {where}"
    )
    return SingularSpot(
        at,
        (*((corner,) if corner else ()), *features, *loads),
        f"{what}, and the stress keeps growing there, slowly",
        "spread the load so that it fades out, or judge it by a reading at a stated distance",
        0.0,
        where if corner else f"the end of load {named} at {between}",
        case.id,
        growth,
    )
