"""Places where the theory of elasticity itself gives no finite stress.

A sharp re-entrant corner, the end of a support, a corner or end of a change of thickness, a force
or a support at a point: there the stress grows with every refinement, and the number on any one
mesh means nothing.  Where a shear load stops it grows as well, but slowly (`shear_ends`).
"""

from __future__ import annotations

import math
from collections.abc import Callable
from dataclasses import replace
from typing import Literal

import numpy as np
from numpy.typing import NDArray

from screenapp.mechanics.corner_exponent import SLIDING, Face, growth_rate
from screenapp.mechanics.shear_ends import shear_ends
from screenapp.mechanics.singular_spot import POINT_RATE, SingularSpot
from screenapp.mechanics.zone_spots import fans, zone_spots
from screenapp.model.combinations import loadings
from screenapp.model.curves import Curve
from screenapp.model.edge_parts import pieces_under, point_of
from screenapp.model.members import spread_loads, whole_id
from screenapp.model.part import (
    BoltSupport,
    Case,
    ElasticSupport,
    FixedSupport,
    Part,
    PinSupport,
    Point,
    PointLoad,
    PrescribedSupport,
    Support,
    SymmetrySupport,
    WeldSupport,
)
from screenapp.model.shape import Shape
from screenapp.model.support_records import gives_way

Held = Literal["free", "fixed", "normal"] | float
"""How a piece of the boundary is held; a number is the angle [rad] of the one held direction."""

__all__ = ["SingularSpot", "face_at", "faces", "junctions", "singular_spots"]

_LEAST_RATE = 0.02
"""Growth slower than this cannot be told from none in seven passes and is not counted."""

_ANY_RATIO = (0.0, 0.25, 0.49)
"""Poisson's ratios that stand for all."""

_SMOOTH = 1e-6  # the boundary is smooth where it turns by less [rad]
_SAME_DIRECTION = 1e-6  # sine of the angle between directions that count as one


def singular_spots(part: Part, shape: Shape) -> tuple[SingularSpot, ...]:
    """Every singular place of a valid part."""
    kinds = faces(part, shape)
    at_zones = zone_spots(
        part, shape, lambda piece, along: _against(kinds[piece], along), _LEAST_RATE
    )
    ends = [fan.at for fan in fans(shape)]
    spots = [
        s
        for s in _junctions(part, shape)
        if all(math.dist(s.at, end) > 1e-6 * shape.size for end in ends)
    ]  # at an interface the fan of walls says more
    spots += [*at_zones, *_points(part, shape)]

    def known(spot: SingularSpot) -> bool:
        return any(
            s.case in ("", spot.case) and math.dist(s.at, spot.at) < 1e-6 * shape.size
            for s in spots
        )

    if part.uses_orthotropic():
        spots = [_unstated(spot) for spot in spots]
    slow = shear_ends(part, shape, junctions(shape), face_at(part, shape))
    return (*spots, *(spot for spot in slow if not known(spot)))


def _unstated(spot: SingularSpot) -> SingularSpot:
    """The spot with a word on its exponent, which is not that of an isotropic wedge."""
    if spot.rate >= POINT_RATE:
        return spot
    return replace(
        spot, why=f"{spot.why} (how fast it grows is not worked out for an orthotropic sheet)"
    )


def faces(part: Part, shape: Shape) -> list[Held]:
    """How each piece of the boundary is held."""
    kinds: list[Held] = ["free"] * len(shape.curves)
    for support in part.supports:
        for i in pieces_under(part, shape, support):
            kinds[i] = _both(kinds[i], _held(support), shape.curves[i].curve)
    return kinds


def face_at(part: Part, shape: Shape) -> Callable[[int, bool], Face]:
    """How a piece of the boundary (by index) is held at its start (True) or its end."""
    kinds = faces(part, shape)

    def face(piece: int, start: bool) -> Face:
        tangent = shape.curves[piece].curve.tangent(0.0 if start else 1.0)
        return _against(kinds[piece], tangent if start else -tangent)

    return face


def _held(support: Support) -> Held:
    if isinstance(support, FixedSupport):
        return "fixed"
    if isinstance(support, PrescribedSupport):
        if support.x is not None and support.y is not None:
            return "fixed"
        if support.x is None and support.y is None:
            return "free"
        return 0.0 if support.x is not None else 0.5 * math.pi
    if isinstance(support, ElasticSupport | WeldSupport) or gives_way(support):
        return "free"  # springs give a finite traction
    if isinstance(support, PinSupport | SymmetrySupport | BoltSupport):
        return "normal"
    return "normal" if support.angle is None else math.radians(support.angle) % math.pi


def _both(a: Held, b: Held, curve: Curve) -> Held:
    """What two supports on one piece hold together."""
    if a == "free" or b == "free":
        return b if a == "free" else a
    if "fixed" in (a, b) or (curve.curvature != 0.0 and a != b):
        return "fixed"
    one, other = (_against(kind, curve.tangent(0.5)) for kind in (a, b))
    assert not isinstance(one, str)
    assert not isinstance(other, str)
    return a if abs(math.sin(one - other)) < _SAME_DIRECTION else "fixed"


def _against(held: Held, along: NDArray[np.float64]) -> Face:
    """The hold of a face that leaves its corner in the direction `along`."""
    if held == "normal":
        return SLIDING
    if isinstance(held, str):
        return held
    return round((held - math.atan2(along[1], along[0])) % math.pi, 9)


def _junctions(part: Part, shape: Shape) -> list[SingularSpot]:
    kinds = faces(part, shape)
    named = {point: corner for corner, point in shape.sharp_corners}
    spots: list[SingularSpot] = []
    for i, j, angle in junctions(shape):
        before, after = shape.curves[i], shape.curves[j]
        if abs(angle - math.pi) < _SMOOTH and kinds[i] == kinds[j]:
            continue
        # the wedge opens from the piece that leaves the corner, the material on its left
        sides = (
            _against(kinds[j], after.curve.tangent(0.0)),
            _against(kinds[i], -before.curve.tangent(1.0)),
        )
        rate = _rate(part, angle, sides)
        if rate < _LEAST_RATE:
            continue
        x, y = after.curve.start
        corner = next((c for p, c in named.items() if math.dist(p, (x, y)) < 1e-9 * shape.size), "")
        ids = tuple(dict.fromkeys(k for k in (corner, before.feature, after.feature) if k))
        spots.append(_junction_spot(part, ids, corner, (x, y), angle, rate, kinds[i], kinds[j]))
    return spots


def _rate(part: Part, angle: float, sides: tuple[Face, Face]) -> float:
    """Growth rate at a corner; of an orthotropic sheet only a sign that the stress grows.

    There the exponent depends on how the axes lie in the corner.  Free corners that re-enter grow
    in any sheet; of held ones the largest rate that any isotropic sheet has there warns.
    """
    material = part.material
    poisson = material.poissons_ratio if material else 0.3
    if part.uses_orthotropic():
        return max(growth_rate(angle, sides, nu, part.wall.state) for nu in _ANY_RATIO)
    return growth_rate(angle, sides, poisson, part.wall.state)


def junctions(shape: Shape) -> list[tuple[int, int, float]]:
    """Every piece of the boundary, the one after it, and the angle of the material between."""
    found: list[tuple[int, int, float]] = []
    for first, last in shape.loops:
        for i in range(first, last):
            j = i + 1 if i + 1 < last else first
            found.append((i, j, _inside_angle(shape.curves[i].curve, shape.curves[j].curve)))
    return found


def _inside_angle(before: Curve, after: Curve) -> float:
    """Angle of the material [rad] where one piece ends and the next begins, in [0, 2π]."""
    t_in, t_out = before.tangent(1.0), after.tangent(0.0)
    turn = math.atan2(t_in[0] * t_out[1] - t_in[1] * t_out[0], float(t_in @ t_out))
    if math.pi - abs(turn) < _SMOOTH:  # a cusp: the curvatures say on which side the material is
        return 0.0 if before.curvature + after.curvature < 0.0 else 2.0 * math.pi
    return math.pi - turn


def _junction_spot(
    part: Part,
    ids: tuple[str, ...],
    corner: str,
    at: Point,
    angle: float,
    rate: float,
    before: Held,
    after: Held,
) -> SingularSpot:
    degrees = math.degrees(angle)
    whole = whole_id(corner)
    instead = "" if whole == corner else " instead of the chamfer"
    radius = f"a radius of at least the wall, {part.wall.thickness:g} mm{instead}"
    if before == after == "free":
        return SingularSpot(
            at,
            ids,
            f"the corner {corner} is sharp ({degrees:.0f}° inside) and has no finite stress",
            f"give corner {whole} {radius}",
            rate,
            f"corner {corner}",
        )
    within = f"a place within {ids[0]}" if len(ids) == 1 else ""
    where = f"corner {corner}" if corner else within or "the junction of " + " and ".join(ids)
    mend = (
        "hold the part as it is really held (a bolt hole, a longer edge), or judge it by a "
        "reading at a stated distance"
    )
    if before == after:
        why = f"the held boundary turns sharply at {where} ({degrees:.0f}° inside)"
        mend = f"give corner {whole} {radius}, or {mend}" if corner else mend
    elif "free" in (before, after):
        why = f"a support ends at {where}"
    else:
        why = f"two supports meet at {where}"
    return SingularSpot(
        at,
        ids,
        f"{why}, where a rigid hold gives no finite stress",
        mend,
        rate,
        where
        if corner
        else f"the end of a support within {ids[0]}"
        if within
        else "the end of a support between " + " and ".join(ids),
    )


def _points(part: Part, shape: Shape) -> list[SingularSpot]:
    corners = dict(shape.sharp_corners)
    fixed = [
        end
        for piece, held in zip(shape.curves, faces(part, shape), strict=True)
        if held == "fixed"
        for end in (piece.curve.start, piece.curve.end)
    ]
    spots: list[SingularSpot] = []
    for support in part.supports:
        if support.on in corners and _held(support) != "free":
            at = corners[support.on]
            if any(math.dist(at, end) < 1e-9 * shape.size for end in fixed):
                continue  # the edge holds it already
            spots.append(
                SingularSpot(
                    corners[support.on],
                    (support.on, support.id),
                    f"corner {support.on} is held at a point, where the stress has no finite value",
                    "hold an edge or a hole instead",
                    1.0,
                    f"corner {support.on}",
                )
            )
    for case in loadings(part):
        spots += _point_loads(part, shape, case)
    return spots


def _point_loads(part: Part, shape: Shape, case: Case) -> list[SingularSpot]:
    spots: list[SingularSpot] = []
    for load in spread_loads(part, case):
        if not isinstance(load, PointLoad) or not (load.x or load.y):
            continue
        at = point_of(part, shape, load)
        if at is None:
            continue
        place = load.on if load.along is None else f"{load.along:g} mm along {load.on}"
        spots.append(
            SingularSpot(
                at,
                (load.on, load.id),
                f"a force acts at the point {place}, where the stress has no finite value",
                "spread the force over a patch of an edge, or over an edge or a hole",
                1.0,
                f"corner {place}" if load.along is None else place,
                case.id,
            )
        )
    return spots
