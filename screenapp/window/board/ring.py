"""One closed ring of the boundary as the board needs it; kept as long as its record stays."""

from __future__ import annotations

import math
from collections import deque
from collections.abc import Sequence
from dataclasses import dataclass, replace
from functools import cached_property, lru_cache

import numpy as np
from numpy.typing import NDArray

from screenapp.model.curve_table import CurveTable, alike_at_ends
from screenapp.model.curves import Curve, Segment
from screenapp.model.errors import InvalidPartError
from screenapp.model.part import Corner, Edge, Hole, Loop, LoopHole, Part, Point
from screenapp.model.shape import BoundaryCurve, edge_curves, outline_curves, shape_of
from screenapp.window.board.boundary_index import BoundaryIndex
from screenapp.window.board.identity import kept_by_identity

Floats = NDArray[np.float64]
Ints = NDArray[np.int64]

_STAND_IN = Loop(
    (Corner("", (0.0, 0.0)), Corner("", (1.0, 0.0)), Corner("", (0.0, 1.0))),
    (Edge(""), Edge(""), Edge("")),
)
"""An outline for holes to be worked out without their part."""

FINE = 2e-4
"""Sagitta for asking whether a place is inside, relative to the ring's own size."""


@dataclass(frozen=True, eq=False)
class RingPoints:
    """A ring flattened: its points (n, 2) [mm] and where each piece begins among them, and the end
    of the last one, (pieces + 1,)."""

    points: Floats
    starts: Ints


class Ring:
    """The pieces of the outline or of one hole, material on their left.

    A ring at fault may be open or empty.
    """

    def __init__(self, pieces: tuple[BoundaryCurve, ...], like: Ring | None = None) -> None:
        """A ring; most pieces of a long one may be those of the ring that it is `like`."""
        self.pieces = pieces
        self._like = like
        self._lines: dict[float, RingPoints] = {}
        self._common: dict[int, tuple[Ring, tuple[int, int]]] = {}

    def forget_like(self) -> None:
        """Let the ring go that this one is like; what was worked out stays."""
        self._like = None
        self._common.clear()

    def common_with(self, other: Ring) -> tuple[int, int]:
        """How many pieces are the same as those of another ring, at the beginning and the end."""
        if id(other) not in self._common:  # kept with its ring, so that the id stays its own
            self._common[id(other)] = other, alike_at_ends(other.pieces, self.pieces)
        return self._common[id(other)][1]

    @cached_property
    def index(self) -> BoundaryIndex:
        """Finds the nearest piece."""
        return BoundaryIndex.of(self.pieces)

    def pieces_of(self, feature: str) -> tuple[BoundaryCurve, ...]:
        """The pieces of an edge, fillet, chamfer or rim; none of anything else."""
        return self._by_feature.get(feature, ())

    @cached_property
    def _by_feature(self) -> dict[str, tuple[BoundaryCurve, ...]]:
        """The pieces of each feature; in a ring like another only what differs is sought."""
        like = self._like
        if like is None or "_by_feature" not in like.__dict__:
            return _grouped(self.pieces)
        head, tail = self.common_with(like)
        gone, come = (ring.pieces[head : len(ring.pieces) - tail] for ring in (like, self))
        changed = {piece.feature for piece in (*gone, *come)}
        found = dict(like._by_feature)
        for feature in changed:
            found.pop(feature, None)
        found.update(_grouped([p for p in self.pieces if p.feature in changed]))
        return found

    @cached_property
    def table(self) -> CurveTable:
        """The pieces as arrays."""
        like = self._like
        if like is None:
            return CurveTable.of(self.pieces)
        return CurveTable.patched(like.table, self.pieces, self.common_with(like))

    def _flattened(self, tolerance: float, first: int, last: int) -> RingPoints:
        """The pieces from `first` to before `last` as `flatten` gives them."""
        table = self.table
        some = np.arange(first, last)
        ratio = np.clip(1.0 - tolerance / table.radius[some], -1.0, 1.0)
        step = np.maximum(2.0 * np.arccos(ratio), 1e-4)
        parts = np.clip(np.ceil(np.abs(table.sweep[some]) / step), 4, 2000)
        counts = np.where(table.arc[some], parts, 1.0).astype(np.int64) + 1
        starts = np.concatenate([np.zeros(1, dtype=np.int64), np.cumsum(counts)])
        which = np.repeat(np.arange(len(counts)), counts)
        t = (np.arange(len(which)) - starts[which]) / (counts[which] - 1)
        return RingPoints(table.points(first + which, t), starts)

    @cached_property
    def box(self) -> tuple[float, float, float, float] | None:
        """Smallest x, y and largest x, y [mm], to the last figure; None if the ring is empty."""
        if not self.pieces:
            return None
        boxes = self.table.boxes
        if not np.isfinite(boxes).all():
            return None
        (x0, y0), (x1, y1) = boxes[:, :2].min(axis=0), boxes[:, 2:].max(axis=0)
        return float(x0), float(y0), float(x1), float(y1)

    def polyline(self, tolerance: float) -> Floats:
        """The ring as points (n, 2) [mm], arcs flattened to a sagitta of `tolerance` [mm]."""
        return self.flat(tolerance).points

    def flat(self, tolerance: float) -> RingPoints:
        """The ring flattened to a sagitta [mm]; what was last asked for is kept.

        Of a ring that is like another one only what differs is worked out.
        """
        if tolerance in self._lines:
            return self._lines[tolerance]
        if len(self._lines) > 4:
            self._lines.clear()
        n, like = len(self.pieces), self._like
        if not n:
            made = RingPoints(np.empty((0, 2)), np.zeros(1, dtype=np.int64))
        elif like is None or tolerance not in like._lines:
            made = self._flattened(tolerance, 0, n)
        else:
            head, tail = self.common_with(like)
            between = self._flattened(tolerance, head, n - tail)
            made = _patched(like._lines[tolerance], between, head, tail)
        self._lines[tolerance] = made
        return made

    def inside(self, at: Point) -> bool:
        """Whether a place lies inside the ring."""
        if self.box is None:
            return False
        x0, y0, x1, y1 = self.box
        size = max(x1 - x0, y1 - y0)
        x, y = at
        if not (x0 <= x <= x1 and y0 <= y <= y1):
            return False
        return point_in_ring(at, self.polyline(FINE * size))


@kept_by_identity(64)
def outline_ring(outline: Loop) -> Ring:
    """The ring of an outline, without the rounds and chamfers that do not fit."""
    pieces = _fitting_pieces(outline)
    like = _latest[-1] if _latest else None
    ring = Ring(pieces, like)
    if like is not None:
        like.forget_like()  # no chain of rings
    _latest.append(ring)
    return ring


def _grouped(pieces: Sequence[BoundaryCurve]) -> dict[str, tuple[BoundaryCurve, ...]]:
    """Pieces by the feature they belong to, in their order."""
    found: dict[str, list[BoundaryCurve]] = {}
    for piece in pieces:
        found.setdefault(piece.feature, []).append(piece)
    return {feature: tuple(mine) for feature, mine in found.items()}


def _patched(old: RingPoints, new: RingPoints, head: int, tail: int) -> RingPoints:
    """The first `head` and last `tail` pieces of an old ring, with a new stretch between them."""
    kept = len(old.starts) - 1 - tail
    points = np.concatenate(
        [old.points[: old.starts[head]], new.points, old.points[old.starts[kept] :]]
    )
    begin = old.starts[head] + new.starts
    end = begin[-1] - old.starts[kept] + old.starts[kept + 1 :]
    return RingPoints(points, np.concatenate([old.starts[:head], begin, end]))


_latest: deque[Ring] = deque(maxlen=1)
"""The outline last worked out: in a drag the next one is much like it."""


def _fitting_pieces(outline: Loop) -> tuple[BoundaryCurve, ...]:
    try:
        pieces, faults = outline_curves(outline)
        if not faults:
            return pieces
        found = {id_ for fault in faults for id_ in fault.ids}
    except (ArithmeticError, ValueError):
        found = set()
    less = list(outline.corners)
    for i in [i for i, c in enumerate(less) if c.id in found]:
        if not less[i].sharp:
            less[i] = replace(less[i], round=0.0, chamfer=0.0)
    try:  # the corners round about keep theirs
        pieces, faults = outline_curves(replace(outline, corners=tuple(less)))
        return _unrounded(outline, hole=False) if faults else pieces
    except (ArithmeticError, ValueError):
        return _unrounded(outline, hole=False)


@kept_by_identity(4)
def hole_rings(holes: tuple[Hole, ...]) -> tuple[Ring, ...]:
    """The rings of all holes of a part; most edits keep them all."""
    return tuple(hole_ring(hole) for hole in holes)


@lru_cache(maxsize=1024)
def hole_ring(hole: Hole) -> Ring:
    """The ring of a hole; if its rounds do not fit, without them; empty if it has no size."""
    try:
        shape = shape_of(Part(outline=_STAND_IN, holes=(hole,)))
    except (InvalidPartError, ArithmeticError, ValueError):
        return Ring(_unrounded(hole.loop, hole=True) if isinstance(hole, LoopHole) else ())
    first, last = shape.loops[1]
    return Ring(shape.curves[first:last])


def flatten(curve: Curve, tolerance: float) -> Floats:
    """A curve as points (n, 2) [mm], both ends included, to a sagitta of `tolerance` [mm]."""
    if isinstance(curve, Segment):
        return np.array([curve.start, curve.end], dtype=float)
    step = 2.0 * math.acos(max(0.0, 1.0 - tolerance / curve.radius))
    n = int(min(2000, max(4, math.ceil(abs(curve.sweep) / max(step, 1e-4)))))
    return np.asarray(curve.point(np.linspace(0.0, 1.0, n + 1)))


def point_in_ring(at: Point, ring: Floats) -> bool:
    """Whether a place lies inside a closed polyline (n, 2), by the crossings of a ray."""
    if len(ring) < 3:
        return False
    x, y = at
    a, b = ring, np.roll(ring, -1, axis=0)
    spans = (a[:, 1] > y) != (b[:, 1] > y)
    with np.errstate(divide="ignore", invalid="ignore"):
        cross = a[:, 0] + (y - a[:, 1]) * (b[:, 0] - a[:, 0]) / (b[:, 1] - a[:, 1])
    return bool(np.count_nonzero(spans & (x < cross)) % 2)


def _unrounded(loop: Loop, hole: bool) -> tuple[BoundaryCurve, ...]:
    """The edges alone, those without a length left out."""
    if len(loop.edges) != len(loop.corners):
        return ()
    number = 1 if hole else 0
    pieces = [
        BoundaryCurve(edge.id, "edge", curve, number)
        for edge, curve in zip(loop.edges, edge_curves(loop), strict=True)
        if math.isfinite(curve.length) and curve.length > 0.0
    ]
    if not pieces:
        return ()
    ring = np.concatenate([flatten(p.curve, 0.01 * p.curve.length) for p in pieces])
    x, y = ring[:, 0], ring[:, 1]
    area = 0.5 * float(np.sum(x * np.roll(y, -1) - np.roll(x, -1) * y))
    if (area < 0.0) != hole:
        pieces = [
            BoundaryCurve(p.feature, p.kind, p.curve.reversed(), number) for p in reversed(pieces)
        ]
    return tuple(pieces)
