"""Places where the theory of elasticity itself gives no finite stress.

A sharp re-entrant corner, the end of a support, a force or a support at a point: there the stress
grows with every refinement, and the number on any one mesh means nothing.
"""

from __future__ import annotations

import math
from dataclasses import dataclass

from screenapp.mechanics.corner_exponent import Face, growth_rate
from screenapp.model.members import whole_id
from screenapp.model.part import (
    Case,
    FixedSupport,
    Part,
    Point,
    PointLoad,
    PrescribedSupport,
    Support,
)
from screenapp.model.shape import BoundaryCurve, Shape

_LEAST_RATE = 0.02
"""Growth slower than this cannot be told from none in seven passes and is not counted."""


@dataclass(frozen=True)
class SingularSpot:
    """One such place.

    Attributes:
        at: [mm].
        ids: what meets there (corner, edges, support, load).
        why: in words, e.g. "the stress at the sharp re-entrant corner c4 (270°) has no finite
            value".
        mend: what would settle it.
        rate: growth rate α = 1 - λ; 1 under a point force (stress as 1/r).
        case: id of the only case it belongs to; empty for all cases.
    """

    at: Point
    ids: tuple[str, ...]
    why: str
    mend: str
    rate: float
    case: str = ""


def singular_spots(part: Part, shape: Shape) -> tuple[SingularSpot, ...]:
    """Every singular place of a valid part."""
    spots = [*_junctions(part, shape), *_points(part, shape)]
    return tuple(spots)


def faces(part: Part, shape: Shape) -> list[Face]:
    """How each piece of the boundary is held."""
    kinds: list[Face] = ["free"] * len(shape.curves)
    for support in part.supports:
        for i in shape.pieces_of(support.on):
            kinds[i] = _stricter(kinds[i], _face(support, shape.curves[i]))
    return kinds


def _face(support: Support, piece: BoundaryCurve) -> Face:
    if isinstance(support, FixedSupport):
        return "fixed"
    if isinstance(support, PrescribedSupport):
        if support.x is not None and support.y is not None:
            return "fixed"
        if support.x is None and support.y is None:
            return "free"
        held = 0.0 if support.x is not None else math.pi / 2.0
    elif support.angle is None:
        return "sliding"
    else:
        held = math.radians(support.angle)
    if piece.curve.curvature != 0.0:
        return "other"
    t = piece.curve.tangent(0.5)
    along = abs(math.cos(held) * t[0] + math.sin(held) * t[1])
    return "sliding" if along < 1e-6 else "other"


def _stricter(a: Face, b: Face) -> Face:
    order: list[Face] = ["free", "sliding", "other", "fixed"]
    return max(a, b, key=order.index)


def _junctions(part: Part, shape: Shape) -> list[SingularSpot]:
    material = part.material
    poisson = material.poissons_ratio if material else 0.3
    kinds = faces(part, shape)
    named = {point: corner for corner, point in shape.sharp_corners}
    spots: list[SingularSpot] = []
    for first, last in shape.loops:
        for i in range(first, last):
            j = i + 1 if i + 1 < last else first
            before, after = shape.curves[i], shape.curves[j]
            t_in, t_out = before.curve.tangent(1.0), after.curve.tangent(0.0)
            turn = math.atan2(t_in[0] * t_out[1] - t_in[1] * t_out[0], float(t_in @ t_out))
            angle = math.pi - turn
            rate = growth_rate(angle, (kinds[i], kinds[j]), poisson, part.wall.state)
            smooth = abs(turn) < 1e-6
            if smooth and kinds[i] == kinds[j]:
                continue
            if rate < _LEAST_RATE:
                continue
            x, y = after.curve.start
            corner = next(
                (c for p, c in named.items() if math.dist(p, (x, y)) < 1e-9 * shape.size), ""
            )
            ids = tuple(dict.fromkeys(k for k in (corner, before.feature, after.feature) if k))
            spots.append(_junction_spot(part, ids, corner, (x, y), angle, rate, kinds[i], kinds[j]))
    return spots


def _junction_spot(
    part: Part,
    ids: tuple[str, ...],
    corner: str,
    at: Point,
    angle: float,
    rate: float,
    before: Face,
    after: Face,
) -> SingularSpot:
    degrees = math.degrees(angle)
    if before == after == "free":
        whole = whole_id(corner)
        instead = "" if whole == corner else " instead of the chamfer"
        return SingularSpot(
            at,
            ids,
            f"the corner {corner} is sharp ({degrees:.0f}° inside) and has no finite stress",
            f"give corner {whole} a radius of at least the wall, {part.wall.thickness:g} mm"
            + instead,
            rate,
        )
    where = f"corner {corner}" if corner else "the junction of " + " and ".join(ids)
    return SingularSpot(
        at,
        ids,
        f"a support ends at {where}, where a rigid hold gives no finite stress",
        "hold the part as it is really held (a bolt hole, a longer edge), or judge it by a "
        "reading at a stated distance",
        rate,
    )


def _points(part: Part, shape: Shape) -> list[SingularSpot]:
    corners = dict(shape.sharp_corners)
    spots: list[SingularSpot] = []
    for support in part.supports:
        if support.on in corners and not _holds_nothing(support):
            spots.append(
                SingularSpot(
                    corners[support.on],
                    (support.on, support.id),
                    f"corner {support.on} is held at a point, where the stress has no finite value",
                    "hold an edge or a hole instead",
                    1.0,
                )
            )
    for case in part.cases:
        spots += _point_loads(case, corners)
    return spots


def _holds_nothing(support: Support) -> bool:
    return isinstance(support, PrescribedSupport) and support.x is None and support.y is None


def _point_loads(case: Case, corners: dict[str, Point]) -> list[SingularSpot]:
    return [
        SingularSpot(
            corners[load.on],
            (load.on, load.id),
            f"a force acts at the point {load.on}, where the stress has no finite value",
            "spread the force over an edge or a hole",
            1.0,
            case.id,
        )
        for load in case.loads
        if isinstance(load, PointLoad) and load.on in corners and (load.x or load.y)
    ]
