"""Features of a part that are a handbook's case by their geometry, matched strictly."""

from __future__ import annotations

from collections.abc import Callable, Collection, Iterator
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from screenapp.model.curves import Arc, Segment
from screenapp.model.hand_formulas import (
    HOLE_MOST,
    HOLE_SOURCE,
    SHOULDER_LEAST,
    SHOULDER_MOST,
    SHOULDER_SOURCE,
    hole_in_strip,
    shoulder_in_tension,
    shoulder_length,
)
from screenapp.model.members import all_holes, whole_id
from screenapp.model.part import CircleHole, Part, Point
from screenapp.model.shape import Shape

Floats = NDArray[np.float64]

PARALLEL = 1e-6
"""Edges are parallel within this angle [rad], lines the same within this share of the part."""

CENTRAL = 0.005
"""A hole or a step is in the middle within this share of the width."""


@dataclass(frozen=True)
class Section:
    """A section that the force is read in: its middle [mm], unit vector along the bar, width."""

    middle: Point
    along: Point
    width: float


@dataclass(frozen=True)
class HandbookCase:
    """A feature with its formula.

    Attributes:
        kind: in words.
        features: ids of the places of its largest stress.
        place: in words.
        bare: ids on which nothing may act.
        sections: where the force must be the same pure tension or compression.
        stress: from the force [N] to the largest stress [MPa].
        source, valid: of the formula.
    """

    kind: str
    features: tuple[str, ...]
    place: str
    bare: frozenset[str]
    sections: tuple[Section, ...]
    stress: Callable[[float], float]
    source: str
    valid: str


@dataclass(frozen=True)
class _Frame:
    """Coordinates along and across a bar from an origin [mm]."""

    origin: Floats
    along: Floats

    def local(self, points: Floats) -> Floats:
        across = np.array([-self.along[1], self.along[0]])
        return np.asarray((points - self.origin) @ np.stack([self.along, across], axis=1))

    def ends(self, shape: Shape, piece: int) -> Floats:
        curve = shape.curves[piece].curve
        return self.local(np.array([curve.start, curve.end]))

    def section(self, s: float, low: float, high: float) -> Section:
        across = np.array([-self.along[1], self.along[0]])
        x, y = self.origin + s * self.along + 0.5 * (low + high) * across
        ax, ay = self.along
        return Section((float(x), float(y)), (float(ax), float(ay)), high - low)


def handbook_cases(part: Part, shape: Shape) -> tuple[HandbookCase, ...]:
    """Every hole in a strip and every shoulder of a stepped bar that nothing holds."""
    supported = {s.on for s in part.supports}
    found = (*_strips(part, shape), *_shoulders(part, shape))
    return tuple(case for case in found if not case.bare & supported)


def _strips(part: Part, shape: Shape) -> Iterator[HandbookCase]:
    for hole in all_holes(part):
        if not isinstance(hole, CircleHole):
            continue
        for one, other in _edge_pairs(shape):
            case = _strip(part, shape, hole, one, other)
            if case is not None:
                yield case
                break


def _edge_pairs(shape: Shape) -> Iterator[tuple[int, int]]:
    first, last = shape.loops[0]
    straight = [i for i in range(first, last) if isinstance(shape.curves[i].curve, Segment)]
    ways = {i: shape.curves[i].curve.tangent(0.0) for i in straight}
    for n, i in enumerate(straight):
        for j in straight[n + 1 :]:
            # the outline runs round the material: two edges of a strip run opposite ways
            if float(np.hypot(*(ways[i] + ways[j]))) < PARALLEL:
                yield i, j


def _strip(part: Part, shape: Shape, hole: CircleHole, one: int, other: int) -> HandbookCase | None:
    frame = _Frame(np.array(hole.centre), shape.curves[one].curve.tangent(0.0))
    ends = [frame.ends(shape, i) for i in (one, other)]
    low, high = float(ends[0][0, 1]), float(ends[1][0, 1])  # material is left of the first edge
    width, d, t = high - low, hole.diameter, part.wall.thickness
    if not low < 0.0 < high or abs(high + low) > 2.0 * CENTRAL * width:
        return None
    reach = width + 0.5 * d
    short = any(e[:, 0].min() > -reach or e[:, 0].max() < reach for e in ends)
    own = shape.hole_ids.index(hole.id)
    rim = [i for i, piece in enumerate(shape.curves) if piece.loop == own]
    if d / width > HOLE_MOST or short:
        return None
    if not _bare(shape, frame, (-reach, reach), (low, high), (one, other, *rim)):
        return None
    edges = shape.curves[one].feature, shape.curves[other].feature
    return HandbookCase(
        kind="round hole in the middle of a strip",
        features=(hole.id,),
        place=f"hole {hole.id} between {edges[0]} and {edges[1]}",
        bare=frozenset({hole.id, whole_id(hole.id), *edges}),
        sections=(frame.section(reach, low, high), frame.section(-reach, low, high)),
        stress=lambda force: hole_in_strip(force, d, width, t),
        source=HOLE_SOURCE,
        valid=f"d/W up to {HOLE_MOST:g}, here {d / width:.3g}; nothing else within "
        f"{reach:.4g} mm of the hole",
    )


def _shoulders(part: Part, shape: Shape) -> Iterator[HandbookCase]:
    first, last = shape.loops[0]
    fillets = [
        i
        for i in range(first, last)
        if shape.curves[i].kind == "fillet" and shape.curves[i].curve.curvature < 0.0
    ]
    for i in fillets:
        for j in fillets:
            case = _shoulder(part, shape, i, j) if i != j else None
            if case is not None:
                yield case


def _shoulder(part: Part, shape: Shape, i: int, j: int) -> HandbookCase | None:
    """The step from a wide to a narrow bar by fillets `i` and `j`, if it is one::

    wide ----+                       wide, shoulder, i, narrow: as the outline runs;
             | j     narrow          the other side: narrow, j, shoulder, wide
             (-----------------
             i
             (-----------------
    wide ----+
    """
    count = shape.loops[0][1]
    pieces = [(i - 2) % count, (i - 1) % count, i, (i + 1) % count]
    pieces += [(j - 1) % count, j, (j + 1) % count, (j + 2) % count]
    curves = [shape.curves[k].curve for k in pieces]
    arcs = curves[2], curves[5]
    straight = [c for c in curves if isinstance(c, Segment)]
    if len(set(pieces)) < 8 or len(straight) < 6:
        return None
    u = curves[3].tangent(0.0)
    n = np.array([-u[1], u[0]])
    wanted = (u, n, u, -u, n, -u)
    if any(float(np.hypot(*(c.tangent(0.0) - w))) > PARALLEL
           for c, w in zip(straight, wanted, strict=True)):  # fmt: skip
        return None
    one, other = arcs
    if not (isinstance(one, Arc) and isinstance(other, Arc)):
        return None
    frame = _Frame(np.array(one.centre), u)
    slack = PARALLEL * shape.size
    wide1, shoulder1, narrow1, narrow2, shoulder2, wide2 = (
        frame.ends(shape, pieces[k]) for k in (0, 1, 3, 4, 6, 7)
    )
    d = float(narrow2[0, 1] - narrow1[0, 1])
    wide = float(wide2[0, 1] - wide1[0, 1])
    r = one.radius
    off = abs(float(wide1[0, 1] + wide2[0, 1] - narrow1[0, 1] - narrow2[0, 1]))
    if (
        not 0.0 < d < wide
        or abs(other.radius - r) > slack
        or abs(float(shoulder1[0, 0] - shoulder2[0, 0])) > slack
        or off > 2.0 * CENTRAL * d
        or not SHOULDER_LEAST <= 0.5 * (wide - d) / r <= SHOULDER_MOST
    ):
        return None
    step = float(shoulder1[0, 0])
    length = min(float(np.ptp(wide1[:, 0])), float(np.ptp(wide2[:, 0])))
    thin = min(float(narrow1[:, 0].max()), float(narrow2[:, 0].max()))
    least = max(shoulder_length(wide, d, r), wide)
    inner, outer = (
        (float(narrow1[0, 1]), float(narrow2[0, 1])),
        (float(wide1[0, 1]), float(wide2[0, 1])),
    )
    if length < least or thin < 2.0 * d:
        return None
    if not _bare(shape, frame, (step - least, step), outer, pieces) or not _bare(
        shape, frame, (step, 2.0 * d), inner, pieces
    ):
        return None
    features = shape.curves[i].feature, shape.curves[j].feature
    t = part.wall.thickness
    return HandbookCase(
        kind="shoulder fillets of a stepped flat bar",
        features=features,
        place=f"fillets {features[0]} and {features[1]}",
        bare=frozenset(shape.curves[k].feature for k in pieces),
        sections=(frame.section(d, *inner), frame.section(step - wide, *outer)),
        stress=lambda force: shoulder_in_tension(force, wide, d, r, t),
        source=SHOULDER_SOURCE,
        valid=f"h/r from {SHOULDER_LEAST:g} to {SHOULDER_MOST:g}, here {0.5 * (wide - d) / r:.3g}; "
        f"wide part longer than {shoulder_length(wide, d, r):.4g} mm, here {length:.4g} mm; "
        "the fit is off by up to about 5 %",
    )


def _bare(
    shape: Shape,
    frame: _Frame,
    along: tuple[float, float],
    across: tuple[float, float],
    own: Collection[int],
) -> bool:
    """Whether no other piece of the boundary enters a rectangle."""
    slack = 1e-9 * shape.size
    t = np.linspace(0.0, 1.0, 65)
    for i, piece in enumerate(shape.curves):
        if i in own:
            continue
        s, n = frame.local(piece.curve.point(t)).T
        inside = (s > along[0] + slack) & (s < along[1] - slack)
        inside &= (n > across[0] + slack) & (n < across[1] - slack)
        if inside.any():
            return False
    return True
