"""Separate maxima of a stress measure along every boundary and inside the part, on one mesh.

A peak is a local maximum that stands out: it is at least `LEAST_SHARE` of the level of its case
(`screening/level.py`: the largest value but for singular places) and falls by `PROMINENCE` of it,
and of its own value, before a higher one is reached.
"""

from __future__ import annotations

import math
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray
from scipy.signal import find_peaks

from screenapp.model.allowables import demands
from screenapp.model.curves import Arc
from screenapp.model.findings import Fields
from screenapp.model.part import Part, Point
from screenapp.model.place_words import edge_words, point_words
from screenapp.model.shape import BoundaryCurve, Shape
from screenapp.model.stress_measures import stress_measure

Floats = NDArray[np.float64]
Ints = NDArray[np.int64]

LEAST_SHARE = 0.3
PROMINENCE = 0.05
MOST = 12
"""Peaks that are listed of one measure in one case; as many again at singular places."""

REACH = 2.5
"""A peak belongs to a singular place, or is one of an earlier pass, if it lies within this many of
its elements."""

SAME = 1e-9
"""Share of the level of a case by which values may differ and yet be equal."""

_SAMPLES = np.array([0.0, 0.25, 0.5, 0.75])
"""Where each side is sampled; the next side brings the end."""


@dataclass(frozen=True)
class RawPeak:
    """A maximum as one mesh shows it.

    Attributes:
        value: of the measure [MPa].
        at: place [mm].
        piece: index of the boundary piece, -1 inside.
        s: arc length along the loop [mm] (0 inside).
        size: size of the element there [mm].
        zone: index of the zone it is in, -1 for the wall itself.
        demand: how much more its value counts than elsewhere (`allowables.demands`).
    """

    value: float
    at: Point
    piece: int
    s: float
    size: float
    zone: int = -1
    demand: float = 1.0

    @property
    def counted(self) -> float:
        """The value times its demand, by which peaks are compared [MPa]."""
        return self.value * self.demand


def find(
    name: str, part: Part, shape: Shape, fields: Fields, case: int, level: float
) -> list[RawPeak]:
    """Peaks of one measure in one case, largest first.

    `level` is that of the case [MPa], by values times their demand.
    """
    found = _on_boundary(name, part, shape, fields, case, level)
    found += _inside(name, part, fields, case, level)
    unit = max(SAME * level, 1e-300)
    found.sort(key=lambda peak: -round(peak.counted / unit))
    least = LEAST_SHARE * level
    return [peak for peak in found if peak.counted >= least and peak.value > 0.0]


def side_stress(stress: Floats, t: Floats) -> Floats:
    """Stress along sides: (n_sides, 3 places, 3) at local t in [0, 1] -> (n_sides, n_t, 3)."""
    shape = np.stack([(1 - t) * (1 - 2 * t), 4 * t * (1 - t), t * (2 * t - 1)])
    return np.asarray(np.einsum("pt,npc->ntc", shape, stress))


def _on_boundary(
    name: str, part: Part, shape: Shape, fields: Fields, case: int, level: float
) -> list[RawPeak]:
    mesh, stress = fields.mesh, fields.stress.side[case]
    found: list[RawPeak] = []
    loop_of = np.array([piece.loop for piece in shape.curves])[mesh.side_piece]
    # both ends of a side count: at a sharp corner the two sides differ there
    places = np.concatenate([_SAMPLES, [1.0]])
    zones = mesh.element_zones[mesh.sides[:, 0]]
    demand = np.array(demands(name, part))[zones + 1]
    values = (
        stress_measure(name, side_stress(stress, places), part, zones[:, None]) * demand[:, None]
    )
    lengths = np.array([shape.curves[i].curve.length for i in mesh.side_piece])
    lengths = lengths * (mesh.side_t[:, 1] - mesh.side_t[:, 0])
    if float(values.max(initial=0.0)) <= 0.0:
        return []
    for loop in range(len(shape.loops)):
        sides = np.flatnonzero(loop_of == loop)
        line = values[sides].ravel()
        start = np.concatenate([[0.0], np.cumsum(lengths[sides])[:-1]])
        s = (start[:, None] + places * lengths[sides][:, None]).ravel()
        for k in _cyclic_peaks(line, level):
            side, place = sides[k // len(places)], places[k % len(places)]
            piece = int(mesh.side_piece[side])
            t0, t1 = mesh.side_t[side]
            at = shape.curves[piece].curve.point(t0 + place * (t1 - t0))
            found.append(
                RawPeak(
                    float(line[k] / demand[side]),
                    (float(at[0]), float(at[1])),
                    piece,
                    float(s[k]),
                    float(lengths[side]),
                    int(zones[side]),
                    float(demand[side]),
                )
            )
    return found


def _cyclic_peaks(line: Floats, level: float) -> list[int]:
    """Indices of the prominent maxima of a closed line; a constant line has one."""
    prominence = PROMINENCE * level
    n = len(line)
    if n == 0:
        return []
    if level > 0.0:
        line = np.round(line / (SAME * level))  # rounding must not choose among equals
        prominence /= SAME * level
    if float(np.ptp(line)) <= prominence:
        return [int(np.argmax(line))]
    turned = np.roll(line, -int(np.argmin(line)))  # starts and ends at the lowest value
    closed = np.concatenate([turned, turned[:1]])
    peaks, found = find_peaks(closed, prominence=prominence)
    peaks = peaks[found["prominences"] >= PROMINENCE * closed[peaks]]
    return sorted({int((k + np.argmin(line)) % n) for k in peaks})


def _inside(name: str, part: Part, fields: Fields, case: int, level: float) -> list[RawPeak]:
    """Nodes inside whose value no neighbour exceeds, away from the boundary's elements."""
    mesh, zones, sizes = fields.mesh, fields.mesh.field_zones, fields.mesh.element_sizes
    demand = np.array(demands(name, part))[zones + 1]
    value = stress_measure(name, fields.stress.nodal[case], part, zones) * demand
    quads, n = mesh.field_quads, len(mesh.field_nodes)
    around = np.full(n, -np.inf)
    np.maximum.at(around, quads, value[quads].max(axis=1, keepdims=True))
    around -= SAME * level
    inner = np.ones(n, dtype=bool)
    inner[quads[mesh.sides[:, 0]]] = False
    inner[mesh.side_fields] = False
    top = np.flatnonzero(inner & (value >= around) & (value > 0.5 * level))
    size = np.zeros(n)
    np.maximum.at(size, quads, np.broadcast_to(sizes[:, None], quads.shape))
    return [
        RawPeak(
            float(value[i] / demand[i]),
            (float(x), float(y)),
            -1,
            0.0,
            float(size[i]),
            int(zones[i]),
            float(demand[i]),
        )
        for i in top
        for x, y in [mesh.nodes[mesh.field_nodes[i]]]
    ]


def feature_of(shape: Shape, piece: int) -> str:
    """Id of the edge, fillet corner or hole that a boundary piece belongs to; "" inside."""
    if piece < 0:
        return ""
    curve = shape.curves[piece]
    hole = shape.hole_ids[curve.loop]
    return hole if hole is not None and curve.kind == "hole" else curve.feature


def place_in_words(shape: Shape, piece: int, at: Point) -> str:
    """Where a point of the boundary lies, e.g. "hole h2, 344°", "fillet c3", "edge e5 at c5"."""
    if piece < 0:
        return f"inside, at {point_words(at)}"
    curve: BoundaryCurve = shape.curves[piece]
    for corner, point in shape.sharp_corners:
        if math.dist(point, at) < 1e-6 * shape.size:
            return f"corner {corner}"
    if curve.kind in ("fillet", "chamfer"):
        return f"{curve.kind} {curve.feature}"
    if curve.kind == "hole":
        centre = _hole_centre(shape, curve.loop)
        angle = math.degrees(math.atan2(at[1] - centre[1], at[0] - centre[0])) % 360.0
        return f"hole {curve.feature}, {angle:.0f}°"
    return edge_words(shape, piece, at)


def _hole_centre(shape: Shape, loop: int) -> Point:
    first, last = shape.loops[loop]
    centres = {c.curve.centre for c in shape.curves[first:last] if isinstance(c.curve, Arc)}
    x, y = np.mean(list(centres), axis=0)
    return float(x), float(y)


ON_BOUNDARY = 1e-4
"""A point this near to the boundary, as a share of the part's size, counts as on it: places are
typed and stored with a few decimals, and the boundary is where the stress peaks."""


def piece_at(shape: Shape, at: Point) -> int:
    """Index of the boundary piece that a point lies on, or -1."""
    return _nearest(shape, at)[0]


def on_boundary(shape: Shape, at: Point) -> Point:
    """The point itself, brought exactly onto the boundary if it lies on it but for rounding."""
    return _nearest(shape, at)[1]


def _nearest(shape: Shape, at: Point) -> tuple[int, Point]:
    best, piece, point = ON_BOUNDARY * shape.size, -1, at
    for i, candidate in enumerate(shape.curves):
        nearest = candidate.curve.point(candidate.curve.nearest(at))
        far = math.dist(nearest, at)
        if far < best:
            best, piece, point = far, i, (float(nearest[0]), float(nearest[1]))
    return piece, point
