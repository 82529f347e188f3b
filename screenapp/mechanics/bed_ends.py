"""Where a bed of springs that resists sliding stops, so that the stress creeps there.

The springs' shear traction at their last millimetre is finite, but it stops at once: the edge's
stress grows by (2/π) Δτ ln(1/r) as under a shear load that stops (`shear_ends`).  How large the
traction is only the solution tells.
"""

from __future__ import annotations

import math
from collections.abc import Sequence

import numpy as np

from screenapp.mechanics.boundary_chains import boundary_chains
from screenapp.mechanics.corner_exponent import SLIDING
from screenapp.mechanics.elastic_supports import beds, spring_tractions
from screenapp.mechanics.shear_ends import NEARLY, edge_growth
from screenapp.mechanics.singular_spot import SingularSpot
from screenapp.mechanics.singular_spots import face_at, junctions
from screenapp.model.combinations import loadings
from screenapp.model.mesh import Mesh
from screenapp.model.part import Part
from screenapp.model.shape import Shape
from screenapp.model.solution import Solution

LEAST = 1e-12
"""Growth [MPa] that stands for none, so that every pass has the same places."""


def with_bed_ends(
    part: Part, shape: Shape, mesh: Mesh, solution: Solution, spots: Sequence[SingularSpot]
) -> tuple[SingularSpot, ...]:
    """The singular places of the geometry and, after them, the ends of the beds, by case."""
    sliding: dict[int, list[str]] = {}
    for bed in beds(part, shape):
        if bed.along > 0.0:
            for piece in bed.pieces:
                sliding.setdefault(piece, []).append(part.supports[bed.owner].id)
    if not sliding:
        return tuple(spots)
    tangents = boundary_chains(shape, mesh).tangents
    shear = (spring_tractions(part, shape, mesh, solution) * tangents).sum(axis=-1)
    first = {int(p): int(np.flatnonzero(mesh.side_piece == p)[0]) for p in sliding}
    last = {int(p): int(np.flatnonzero(mesh.side_piece == p)[-1]) for p in sliding}
    face = face_at(part, shape)
    found: list[SingularSpot] = []
    for before, after, angle in junctions(shape):
        mine = [*sliding.get(before, ()), *sliding.get(after, ())]
        if not mine or sliding.get(before) == sliding.get(after):
            continue
        held = face(before, False), face(after, True)
        slides = [h for h in held if not isinstance(h, str) and abs(h - SLIDING) < NEARLY]
        straight = held == ("free", "free") and abs(angle - math.pi) <= NEARLY
        square = "free" in held and bool(slides) and abs(angle - 0.5 * math.pi) <= NEARLY
        x, y = shape.curves[after].curve.start
        at = (float(x), float(y))
        if not (straight or square) or any(
            not s.case and math.dist(s.at, at) < 1e-6 * shape.size for s in spots
        ):
            continue
        growth = edge_growth(part, shape, after)
        for k, case in enumerate(loadings(part)):
            into = shear[k, last[before], 2] if before in last else 0.0
            out = shear[k, first[after], 0] if after in first else 0.0
            jump = abs(into - out) if straight else 2.0 * abs(into + out)
            found.append(
                _spot(
                    shape,
                    at,
                    (before, after),
                    tuple(mine),
                    case.id,
                    growth * float(jump),
                )
            )
    return (*spots, *found)


def _spot(
    shape: Shape,
    at: tuple[float, float],
    pieces: tuple[int, int],
    supports: tuple[str, ...],
    case: str,
    growth: float,
) -> SingularSpot:
    corner = next((c for c, p in shape.sharp_corners if math.dist(p, at) < 1e-9 * shape.size), "")
    features = tuple(dict.fromkeys(shape.curves[k].feature for k in pieces))
    between = " and ".join(features)
    within = f"within {between}" if len(features) == 1 else f"between {between}"
    named = " and ".join(dict.fromkeys(supports))
    where = f"corner {corner}" if corner else f"the end of support {named} {within}"
    return SingularSpot(
        at,
        (*((corner,) if corner else ()), *features, *dict.fromkeys(supports)),
        f"what support {named} takes along the boundary stops at once at {where}, and the stress "
        "keeps growing there, slowly",
        "judge it by a reading at a stated distance",
        0.0,
        where,
        case,
        max(growth, LEAST),
    )
