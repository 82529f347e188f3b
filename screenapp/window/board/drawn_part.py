"""The part's boundary for the board: what `shape_of` gives, or, while the part is at fault, as much
of it as can be drawn."""

from __future__ import annotations

import math
from dataclasses import dataclass
from functools import cached_property, lru_cache

import numpy as np
from numpy.typing import NDArray

from screenapp.model.curves import Curve, Segment
from screenapp.model.errors import Fault, InvalidPartError
from screenapp.model.part import (
    CircleHole,
    Corner,
    Edge,
    Hole,
    Loop,
    LoopHole,
    Part,
    Point,
    Probe,
    SlotHole,
)
from screenapp.model.shape import BoundaryCurve, edge_curves, loop_curves, shape_of


@dataclass(frozen=True, eq=False)
class DrawnPart:
    """Boundary pieces of a part, material on their left, with what the board asks of them.

    Attributes:
        part: the part drawn.
        loops: the pieces of each ring, in order; a ring at fault may be open or empty.
        hole_ids: the hole's id for each ring, None for the outline.
    """

    part: Part
    loops: tuple[tuple[BoundaryCurve, ...], ...]
    hole_ids: tuple[str | None, ...]

    @cached_property
    def pieces(self) -> tuple[BoundaryCurve, ...]:
        """All pieces."""
        return tuple(piece for loop in self.loops for piece in loop)

    @cached_property
    def corners(self) -> dict[str, Corner]:
        """Every corner of outline and loop holes by id."""
        return {c.id: c for loop in loops_of(self.part) for c in loop.corners}

    @cached_property
    def holes(self) -> dict[str, Hole]:
        """Every hole by id."""
        return {h.id: h for h in self.part.holes}

    @cached_property
    def probes(self) -> dict[str, Probe]:
        """Every probe by id."""
        return {r.id: r for r in self.part.readings}

    @cached_property
    def bounds(self) -> tuple[float, float, float, float] | None:
        """Smallest x, y and largest x, y [mm] of all that is drawn; None if nothing is."""
        points = [p for p in (self.polyline(i, 0.05) for i in range(len(self.loops))) if len(p)]
        if not points:
            return None
        every = np.concatenate(points)
        every = every[np.isfinite(every).all(axis=1)]
        if not len(every):
            return None
        (x0, y0), (x1, y1) = every.min(axis=0), every.max(axis=0)
        return float(x0), float(y0), float(x1), float(y1)

    def pieces_of(self, feature: str) -> tuple[BoundaryCurve, ...]:
        """Pieces of an edge, fillet or hole of any kind."""
        if feature in self.hole_ids:
            return self.loops[self.hole_ids.index(feature)]
        return tuple(p for p in self.pieces if p.feature == feature)

    def polyline(self, loop: int, tolerance: float) -> NDArray[np.float64]:
        """Ring `loop` as points (n, 2) [mm], arcs flattened to a sagitta of `tolerance` [mm]."""
        parts = [flatten(p.curve, tolerance) for p in self.loops[loop]]
        return np.concatenate(parts) if parts else np.empty((0, 2))

    def inside(self, at: Point, loop: int = 0) -> bool:
        """Whether a place lies inside ring `loop` (the outline unless told otherwise)."""
        return point_in_ring(at, self.polyline(loop, 0.01))

    def centre_of(self, hole: Hole) -> Point:
        """The centre of a hole [mm]; of a loop hole the middle of its bounding box."""
        if not isinstance(hole, LoopHole):
            return hole.centre
        ring = self.polyline(self.hole_ids.index(hole.id), 0.01)
        if not len(ring):
            return hole.loop.corners[0].at
        low, high = ring.min(axis=0), ring.max(axis=0)
        return float(low[0] + high[0]) / 2.0, float(low[1] + high[1]) / 2.0

    def anchor_of(self, feature: str) -> Point | None:
        """A place [mm] that stands for a corner, edge, hole or probe: where a mark is put."""
        if feature in self.corners and not self.pieces_of(feature):
            return self.corners[feature].at
        if feature in self.holes:
            return self.centre_of(self.holes[feature])
        if feature in self.probes:
            return self.probes[feature].at
        if pieces := self.pieces_of(feature):
            x, y = pieces[len(pieces) // 2].curve.point(0.5)
            return float(x), float(y)
        return None


class _ById:
    """Lets the cache compare parts by identity: comparing whole parts would cost more."""

    def __init__(self, part: Part) -> None:
        self.part = part

    def __hash__(self) -> int:
        return id(self.part)

    def __eq__(self, other: object) -> bool:
        return isinstance(other, _ById) and other.part is self.part


@lru_cache(maxsize=4)
def _drawn(keeper: _ById) -> DrawnPart:
    return _draw(keeper.part)


def drawn_part(part: Part) -> DrawnPart:
    """The boundary to draw, kept for the parts last asked for."""
    return _drawn(_ById(part))


def loops_of(part: Part) -> list[Loop]:
    """The outline and every loop hole's ring."""
    loops = [part.outline] if part.outline is not None else []
    return loops + [h.loop for h in part.holes if isinstance(h, LoopHole)]


def flatten(curve: Curve, tolerance: float) -> NDArray[np.float64]:
    """A curve as points (n, 2) [mm], both ends included, to a sagitta of `tolerance` [mm]."""
    if isinstance(curve, Segment):
        return np.array([curve.start, curve.end], dtype=float)
    step = 2.0 * math.acos(max(0.0, 1.0 - tolerance / curve.radius))
    n = int(min(2000, max(4, math.ceil(abs(curve.sweep) / max(step, 1e-4)))))
    return np.asarray(curve.point(np.linspace(0.0, 1.0, n + 1)))


def point_in_ring(at: Point, ring: NDArray[np.float64]) -> bool:
    """Whether a place lies inside a closed polyline (n, 2), by the crossings of a ray."""
    if len(ring) < 3:
        return False
    x, y = at
    a, b = ring, np.roll(ring, -1, axis=0)
    spans = (a[:, 1] > y) != (b[:, 1] > y)
    with np.errstate(divide="ignore", invalid="ignore"):
        cross = a[:, 0] + (y - a[:, 1]) * (b[:, 0] - a[:, 0]) / (b[:, 1] - a[:, 1])
    return bool(np.count_nonzero(spans & (x < cross)) % 2)


def _draw(part: Part) -> DrawnPart:
    try:
        shape = shape_of(part)
    except (InvalidPartError, ArithmeticError, ValueError):
        return _draw_leniently(part)
    loops = tuple(shape.curves[first:last] for first, last in shape.loops)
    return DrawnPart(part, loops, shape.hole_ids)


def _draw_leniently(part: Part) -> DrawnPart:
    """Ring by ring; a ring whose rounds do not fit is drawn without them."""
    loops: list[tuple[BoundaryCurve, ...]] = []
    ids: list[str | None] = []
    if part.outline is not None:
        loops.append(_ring(part.outline, 0, hole=False))
        ids.append(None)
    for hole in part.holes:
        number = len(loops)
        if isinstance(hole, LoopHole):
            loops.append(_ring(hole.loop, number, hole=True))
        else:
            loops.append(_round_ring(hole, number))
        ids.append(hole.id)
    return DrawnPart(part, tuple(loops), tuple(ids))


def _ring(loop: Loop, number: int, hole: bool) -> tuple[BoundaryCurve, ...]:
    faults: list[Fault] = []
    pieces: list[BoundaryCurve] = []
    try:
        pieces = loop_curves(loop, "", faults)
    except (ArithmeticError, ValueError):
        pieces = []
    if faults or not pieces:
        curves = edge_curves(loop)
        pieces = [
            BoundaryCurve(edge.id, "edge", curve, number)
            for edge, curve in zip(loop.edges, curves, strict=True)
            if math.isfinite(curve.length) and curve.length > 0.0
        ]
    pieces = [BoundaryCurve(p.feature, p.kind, p.curve, number) for p in pieces]
    return _material_left(pieces, hole)


def _round_ring(hole: CircleHole | SlotHole, number: int) -> tuple[BoundaryCurve, ...]:
    """Through `shape_of` of a stand-in part, so that holes have one definition only."""
    square = tuple(Corner(str(i), at) for i, at in enumerate(((0.0, 0.0), (1.0, 0.0), (0.0, 1.0))))
    from_edges = Loop(square, tuple(Edge(f"e{i}") for i in range(3)))
    try:
        shape = shape_of(Part(outline=from_edges, holes=(hole,)))
    except (InvalidPartError, ArithmeticError, ValueError):
        return ()
    first, last = shape.loops[1]
    return tuple(
        BoundaryCurve(p.feature, p.kind, p.curve, number) for p in shape.curves[first:last]
    )


def _material_left(pieces: list[BoundaryCurve], hole: bool) -> tuple[BoundaryCurve, ...]:
    if not pieces:
        return ()
    ring = np.concatenate([flatten(p.curve, 0.01) for p in pieces])
    x, y = ring[:, 0], ring[:, 1]
    area = 0.5 * float(np.sum(x * np.roll(y, -1) - np.roll(x, -1) * y))
    if (area < 0.0) != hole:
        pieces = [
            BoundaryCurve(p.feature, p.kind, p.curve.reversed(), p.loop) for p in reversed(pieces)
        ]
    return tuple(pieces)
