"""The structural stress beside a place of rising stress: read at 0.4 t and 1.0 t, drawn on to it.

Linear extrapolation along the free edge from two stated distances, in wall thicknesses,

    σ_s = 5/3 σ(0.4 t) - 2/3 σ(1.0 t),

of each component along and across the edge (a measure like von Mises stress has lost its sign), as
is common for welded toes (A. Hobbacher, IIW Recommendations for Fatigue Design of Welded Joints
and Components, surface stress extrapolation with a fine mesh: 1.67 and 0.67; from memory).  It
always has a finite value, and it counts only where the user accepts it, or where it alone already
exceeds what is allowed.
"""

from __future__ import annotations

import math
from collections.abc import Sequence

import numpy as np
from numpy.typing import NDArray

from screenapp.mechanics.singular_spot import POINT_RATE, SingularSpot
from screenapp.mechanics.singular_spots import faces
from screenapp.model.curves import Curve
from screenapp.model.findings import Estimate
from screenapp.model.part import Part, Point
from screenapp.model.shape import Shape
from screenapp.model.stress_measures import stress_measure
from screenapp.screening.passes import Pass
from screenapp.screening.trust import Sample, judge

Floats = NDArray[np.float64]

NEAR, FAR = 0.4, 1.0
"""Distances from the place, in wall thicknesses."""
_WEIGHT_NEAR = FAR / (FAR - NEAR)
_WEIGHT_FAR = NEAR / (FAR - NEAR)


def structural_stress(
    part: Part, shape: Shape, passes: Sequence[Pass], spot: SingularSpot, name: str, k: int
) -> tuple[Estimate, str] | None:
    """The largest structural stress [MPa] of the free edges that meet at a spot, and its edge.

    None where no free edge is long enough, or where a point force or support acts.
    """
    best: tuple[Estimate, str] | None = None
    for feature, points, tangents in _paths(part, shape, spot):
        samples: list[Sample] = []
        scale = 0.0
        for this in passes:
            values = this.read(np.array(points), name)
            local = _along_edge(values.stress[k], tangents)
            drawn = _to_axes(_WEIGHT_NEAR * local[0] - _WEIGHT_FAR * local[1], tangents[0])
            doubt = _WEIGHT_NEAR * values.doubt[k, 0] + _WEIGHT_FAR * values.doubt[k, 1]
            stresses, zones = np.stack([drawn, values.stress[k, 0]]), values.zones[k, :1]
            value, near = (float(v) for v in stress_measure(name, stresses, part, zones))
            samples.append(Sample(value, float(values.size[0]), float(doubt)))
            scale = max(abs(value), abs(near))  # of the last pass
        if not math.isfinite(samples[-1].value):
            continue
        estimate = judge(samples, part.mesh.tolerance, scale)
        if best is None or estimate.value > best[0].value:
            best = estimate, feature
    return best


def _along_edge(stress: Floats, tangents: Floats) -> Floats:
    """Stresses (n, 3) turned to the edge's own axes: along, across, shear."""
    c, s = tangents[:, 0], tangents[:, 1]
    x, y, xy = stress.T
    along = x * c * c + y * s * s + 2.0 * xy * c * s
    return np.stack([along, x + y - along, (y - x) * c * s + xy * (c * c - s * s)], axis=1)


def _to_axes(local: Floats, tangent: Floats) -> Floats:
    """Stresses (3,) along, across, shear of an edge back to σx, σy, τxy."""
    return np.asarray(_along_edge(local[None], np.array([[tangent[0], -tangent[1]]]))[0])


def reading_places(part: Part, shape: Shape, spot: SingularSpot) -> tuple[Point, ...]:
    """Where the structural stress of a spot is read [mm]."""
    return tuple(point for _, points, _ in _paths(part, shape, spot) for point in points)


def _paths(
    part: Part, shape: Shape, spot: SingularSpot
) -> list[tuple[str, tuple[Point, Point], Floats]]:
    """The free edges that meet at a spot, each with its near and far point and the tangents there,
    (2, 2).

    An edge must be long enough for the far point to stay clear of its other end.
    """
    if spot.rate >= POINT_RATE:  # a point force or support: no toe to draw a line to
        return []
    slack = 1e-9 * shape.size
    kinds = faces(part, shape)
    found: list[tuple[str, tuple[Point, Point], Floats]] = []
    for number, (piece, kind) in enumerate(zip(shape.curves, kinds, strict=True)):
        t = part.wall_of(shape.zone_behind(number)).thickness
        if kind != "free" or piece.curve.length < (FAR + NEAR) * t:
            continue
        if math.dist(piece.curve.start, spot.at) < slack:
            found.append((piece.feature, *_points(piece.curve, t)))
        elif math.dist(piece.curve.end, spot.at) < slack:
            found.append((piece.feature, *_points(piece.curve.reversed(), t)))
    return found


def _points(curve: Curve, thickness: float) -> tuple[tuple[Point, Point], Floats]:
    at = np.array([NEAR, FAR]) * thickness / curve.length
    near, far = curve.point(at)
    return ((float(near[0]), float(near[1])), (float(far[0]), float(far[1]))), curve.tangent(at)
