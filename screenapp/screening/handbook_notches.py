"""Two opposite half-round notches in the edges of a strip."""

from __future__ import annotations

import math
from collections.abc import Iterator

import numpy as np

from screenapp.model.curves import Arc, Segment
from screenapp.model.hand_formulas import (
    NOTCH_LEAST,
    NOTCH_MOST,
    NOTCH_SOURCE,
    opposite_notches,
)
from screenapp.model.part import Part
from screenapp.model.shape import Shape
from screenapp.screening.handbook_geometry import (
    CENTRAL,
    PARALLEL,
    Frame,
    HandbookCase,
    clear,
)


def notch_cases(part: Part, shape: Shape) -> Iterator[HandbookCase]:
    """Every pair of equal half-round notches that face one another across a strip."""
    first, last = shape.loops[0]
    halves = [i for i in range(first, last) if _half_round(shape, i)]
    for n, i in enumerate(halves):
        for j in halves[n + 1 :]:
            case = _pair(part, shape, i, j)
            if case is not None:
                yield case


def _half_round(shape: Shape, i: int) -> bool:
    """Whether a piece is a half circle cut out of the material, between two edges in line."""
    curve = shape.curves[i].curve
    if not isinstance(curve, Arc) or abs(curve.sweep + math.pi) > PARALLEL:
        return False
    before, after = (shape.curves[k].curve for k in _neighbours(shape, i))
    if not (isinstance(before, Segment) and isinstance(after, Segment)):
        return False
    chord = np.subtract(curve.end, curve.start) / (2.0 * curve.radius)
    return all(float(np.hypot(*(s.tangent(0.0) - chord))) <= PARALLEL for s in (before, after))


def _neighbours(shape: Shape, i: int) -> tuple[int, int]:
    count = shape.loops[0][1]
    return (i - 1) % count, (i + 1) % count


def _pair(part: Part, shape: Shape, i: int, j: int) -> HandbookCase | None:
    one, other = shape.curves[i].curve, shape.curves[j].curve
    if not (isinstance(one, Arc) and isinstance(other, Arc)):
        return None
    pieces = (i, j, *_neighbours(shape, i), *_neighbours(shape, j))
    frame = Frame(np.array(one.centre), shape.curves[pieces[2]].curve.tangent(0.0))
    r, t = one.radius, part.wall.thickness
    along, width = (float(v) for v in frame.local(np.array(other.centre)))
    opposite = shape.curves[pieces[4]].curve.tangent(0.0) + frame.along
    if (
        abs(other.radius - r) > PARALLEL * shape.size
        or float(np.hypot(*opposite)) > PARALLEL
        or abs(along) > CENTRAL * width
        or not NOTCH_LEAST <= 2.0 * r / width <= NOTCH_MOST
    ):
        return None
    reach = width + r
    # the edges beside the notches: those of the first run forwards, those of the other backwards
    starts = [float(frame.ends(shape, k)[:, 0].min()) for k in (pieces[2], pieces[5])]
    stops = [float(frame.ends(shape, k)[:, 0].max()) for k in (pieces[3], pieces[4])]
    before, after = -max(starts), min(stops)
    if min(before, after) < reach:
        return None
    if not clear(shape, frame, (-reach, reach), (0.0, width), pieces):
        return None
    features = shape.curves[i].feature, shape.curves[j].feature
    both = tuple(frame.section(s, 0.0, width) for s in (reach, -reach))
    return HandbookCase(
        kind="two opposite half-round notches in a strip",
        features=features,
        place=f"notches {features[0]} and {features[1]}",
        bare=frozenset(shape.curves[k].feature for k in pieces),
        loading="tension",
        sections=lambda _: both,
        stress=lambda force, _: opposite_notches(force, r, width, t),
        source=NOTCH_SOURCE,
        valid=f"2r/W from {NOTCH_LEAST:g} to {NOTCH_MOST:g}, here {2.0 * r / width:.3g}; nothing "
        f"else within {reach:.4g} mm; off by up to 1 %",
    )
