"""Hand checks: where a feature is a handbook case, the formula's stress beside the computed one.

Geometry and load are matched strictly; where anything differs from the handbook's case, nothing is
said.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from screenapp.mechanics.free_body import section_forces
from screenapp.mechanics.straight_cut import straight_cut
from screenapp.model.combinations import loadings
from screenapp.model.curves import Segment
from screenapp.model.findings import CaseFindings, HandCheck
from screenapp.model.hand_formulas import HOLE_MOST, HOLE_SOURCE, hole_in_strip
from screenapp.model.members import all_holes, whole_id
from screenapp.model.part import BodyLoad, Case, CircleHole, Part
from screenapp.model.shape import Shape
from screenapp.screening.passes import Pass

Floats = NDArray[np.float64]

PARALLEL = 1e-6
CENTRAL = 0.005
"""The hole is in the middle of its strip within this share of the width."""

PURE = 0.01
"""Bending and shear in the strip may add at most this share of the tension."""


@dataclass(frozen=True)
class Strip:
    """A hole between two parallel straight edges.

    Attributes:
        hole: the hole in its middle.
        along: unit vector along the edges.
        width: between the edges [mm].
        reach: distance from the hole's centre, both ways, in which there is nothing else [mm].
        edges: ids of the two edges.
    """

    hole: CircleHole
    along: tuple[float, float]
    width: float
    reach: float
    edges: tuple[str, str]


def hand_checks(
    part: Part, shape: Shape, passes: Sequence[Pass], cases: Sequence[CaseFindings]
) -> tuple[HandCheck, ...]:
    """Every handbook case that the part has, in every load case that is one of its own."""
    if part.zones or part.wall.state != "plane stress":
        return ()
    strips = list(strips_of(part, shape))
    return tuple(
        check
        for k, (case, found) in enumerate(zip(loadings(part), cases, strict=True))
        for strip in strips
        if (check := _hole_check(part, shape, passes, k, case, found, strip)) is not None
    )


def strips_of(part: Part, shape: Shape) -> Iterator[Strip]:
    """The round holes in the middle of a strip that is as wide again to both sides, and bare."""
    supported = {s.on for s in part.supports}
    for hole in all_holes(part):
        if not isinstance(hole, CircleHole) or {hole.id, whole_id(hole.id)} & supported:
            continue
        for one, other in _edge_pairs(shape):
            strip = _strip(shape, hole, one, other)
            if strip is not None and not supported & set(strip.edges):
                yield strip
                break


def _edge_pairs(shape: Shape) -> Iterator[tuple[int, int]]:
    first, last = shape.loops[0]
    straight = [i for i in range(first, last) if isinstance(shape.curves[i].curve, Segment)]
    ways = {i: shape.curves[i].curve.tangent(0.0) for i in straight}
    for n, i in enumerate(straight):
        for j in straight[n + 1 :]:
            # the outline runs round the material: two edges of a strip run opposite ways
            if float(ways[i] @ ways[j]) < -1.0 + 0.5 * PARALLEL**2 + 1e-12:
                yield i, j


def _strip(shape: Shape, hole: CircleHole, one: int, other: int) -> Strip | None:
    along = shape.curves[one].curve.tangent(0.0)
    across = np.array([-along[1], along[0]])
    centre = np.array(hole.centre)

    def local(points: Floats) -> Floats:
        return np.asarray((points - centre) @ np.stack([along, across], axis=1))

    ends = [local(np.array([shape.curves[i].curve.start, shape.curves[i].curve.end]))
            for i in (one, other)]  # fmt: skip
    low, high = float(ends[0][0, 1]), float(ends[1][0, 1])  # material is left of the first edge
    width = high - low
    if not (low < 0.0 < high) or abs(high + low) > 2.0 * CENTRAL * width:
        return None
    if not 0.0 < hole.diameter / width <= HOLE_MOST:
        return None
    reach = width + 0.5 * hole.diameter
    if any(e[:, 0].min() > -reach or e[:, 0].max() < reach for e in ends):
        return None
    own = shape.hole_ids.index(hole.id)
    t = np.linspace(0.0, 1.0, 65)
    for i, piece in enumerate(shape.curves):
        if i in (one, other) or piece.loop == own:
            continue
        s, n = local(piece.curve.point(t)).T
        slack = 1e-9 * shape.size
        inside = (np.abs(s) < reach - slack) & (n > low + slack) & (n < high - slack)
        if inside.any():
            return None
    features = shape.curves[one].feature, shape.curves[other].feature
    return Strip(hole, (float(along[0]), float(along[1])), width, reach, features)


def _hole_check(
    part: Part,
    shape: Shape,
    passes: Sequence[Pass],
    k: int,
    case: Case,
    found: CaseFindings,
    strip: Strip,
) -> HandCheck | None:
    hole, thickness = strip.hole, part.wall.thickness
    touched = {hole.id, whole_id(hole.id), *strip.edges}
    if any(isinstance(load, BodyLoad) or load.on in touched for load in case.loads):
        return None
    peaks = [
        p
        for p in found.peaks
        if p.quantity == "von_mises" and p.feature == hole.id and p.estimate.trust != "rising"
    ]
    force = _tension(part, shape, passes[-1], k, strip)
    if force is None or not peaks:
        return None
    peak = max(peaks, key=lambda p: p.estimate.value)
    return HandCheck(
        kind="round hole in the middle of a strip in tension"
        if force > 0.0
        else "round hole in the middle of a strip in compression",
        case=case.id,
        feature=hole.id,
        place=f"hole {hole.id} between {strip.edges[0]} and {strip.edges[1]}",
        at=peak.at,
        computed=peak.estimate,
        formula=hole_in_strip(abs(force), hole.diameter, strip.width, thickness),
        source=HOLE_SOURCE,
        valid=f"d/W up to {HOLE_MOST:g}, here {hole.diameter / strip.width:.3g}; "
        f"nothing else within {strip.reach:.4g} mm of the hole",
        nominal=f"N = {force:.4g} N in the strip of {strip.width:.4g} × {thickness:.4g} mm, by the "
        "balance of the free body",
    )


def _tension(part: Part, shape: Shape, last: Pass, k: int, strip: Strip) -> float | None:
    """The force [N] in a strip on both sides of its hole, None where it is no pure tension."""
    ux, uy = strip.along
    forces: list[float] = []
    half = 0.5 * strip.width * (1.0 + 1e-3)
    for side in (1.0, -1.0):
        x = strip.hole.centre[0] + side * strip.reach * ux
        y = strip.hole.centre[1] + side * strip.reach * uy
        cut = straight_cut(shape, (x - half * uy, y + half * ux), (x + half * uy, y - half * ux))
        if len(cut.spans) != 1 or abs(cut.length - strip.width) > 1e-6 * strip.width:
            return None
        given = section_forces(part, shape, last.fields.mesh, last.fields.solution, k, cut)
        if given is None:
            return None
        most = PURE * abs(given.normal)
        if abs(given.shear) * 1.5 > most or abs(given.moment) * 6.0 / strip.width > most:
            return None
        forces.append(given.normal)
    if forces[0] == 0.0 or abs(forces[0] - forces[1]) > PURE * abs(forces[0]):
        return None
    return forces[0]
