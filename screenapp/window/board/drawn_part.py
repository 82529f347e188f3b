"""The part's boundary for the board: what `shape_of` gives, or, while the part is at fault, as much
of it as can be drawn."""

from __future__ import annotations

import math
from dataclasses import dataclass
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from screenapp.model.edits import hole_centre
from screenapp.model.members import all_holes, member_ids
from screenapp.model.part import (
    CircleHole,
    Corner,
    Hole,
    Loop,
    LoopHole,
    Part,
    Point,
    Probe,
    SlotHole,
    Zone,
)
from screenapp.model.shape import BoundaryCurve
from screenapp.window.board.boundary_index import BoundaryIndex
from screenapp.window.board.identity import kept_by_identity
from screenapp.window.board.ring import Ring, hole_ring, hole_rings, outline_ring


@dataclass(frozen=True, eq=False)
class DrawnPart:
    """Boundary pieces of a part, material on their left, with what the board asks of them.

    Attributes:
        part: the part drawn.
        loops: the rings; one at fault may be open or empty.
        hole_ids: the hole's id for each ring, None for the outline; members of a pattern have
            their own.
        zone_rings: the ring of each zone, in the order of the part.
    """

    part: Part
    loops: tuple[Ring, ...]
    hole_ids: tuple[str | None, ...]
    zone_rings: tuple[Ring, ...] = ()

    @cached_property
    def pieces(self) -> tuple[BoundaryCurve, ...]:
        """All pieces."""
        return tuple(piece for ring in self.loops for piece in ring.pieces)

    @cached_property
    def index(self) -> BoundaryIndex:
        """Finds the nearest piece."""
        return BoundaryIndex.joined([ring.index for ring in self.loops])

    @cached_property
    def corners(self) -> dict[str, Corner]:
        """Every corner of outline, loop holes and zones by id."""
        return {c.id: c for loop in loops_of(self.part) for c in loop.corners}

    @cached_property
    def holes(self) -> dict[str, Hole]:
        """Every hole by id, a pattern and each of its members too."""
        found = {h.id: h for h in self.part.holes}
        found.update((h.id, h) for h in self.cut_holes)
        return found

    @cached_property
    def cut_holes(self) -> tuple[Hole, ...]:
        """Every hole that is cut, patterns unfolded."""
        return all_holes(self.part)

    @cached_property
    def crosses(self) -> NDArray[np.float64]:
        """Centre x, y, half length, half width [mm] and angle [rad] of round holes and slots."""
        return _crosses(self.cut_holes)

    @cached_property
    def zones(self) -> dict[str, Zone]:
        """Every zone by id."""
        return {z.id: z for z in self.part.zones}

    @cached_property
    def zone_index(self) -> BoundaryIndex:
        """Finds the nearest line of a zone."""
        return BoundaryIndex.joined([ring.index for ring in self.zone_rings])

    @cached_property
    def snap_index(self) -> BoundaryIndex:
        """Finds the nearest piece of the boundary or line of a zone: what the cursor snaps to."""
        if not self.zone_rings:
            return self.index
        return BoundaryIndex.joined([self.index, self.zone_index])

    def zone_of(self, feature: str) -> str:
        """The zone that a corner or edge belongs to; "" for none."""
        for zone in self.part.zones:
            form = zone.form
            if isinstance(form, LoopHole):
                ids = {c.id for c in form.loop.corners} | {e.id for e in form.loop.edges}
                if feature in ids:
                    return zone.id
        return feature if feature in self.zones else ""

    @cached_property
    def probes(self) -> dict[str, Probe]:
        """Every probe by id."""
        return {r.id: r for r in self.part.readings}

    @cached_property
    def bounds(self) -> tuple[float, float, float, float] | None:
        """Smallest x, y and largest x, y [mm] of all that is drawn; None if nothing is."""
        boxes = [ring.box for ring in self.loops if ring.box is not None]
        if not boxes:
            return None
        x0, y0, x1, y1 = zip(*boxes, strict=True)
        return min(x0), min(y0), max(x1), max(y1)

    @property
    def exact_bounds(self) -> tuple[float, float, float, float] | None:
        """Smallest x, y and largest x, y [mm] of the outline, to the last figure."""
        return self.loops[0].box if self.part.outline is not None else None

    def pieces_of(self, feature: str) -> tuple[BoundaryCurve, ...]:
        """Pieces of an edge, fillet, hole of any kind or whole pattern."""
        if feature in self.zones:
            return self.zone_rings[list(self.zones).index(feature)].pieces
        if feature in self.hole_ids:
            return self.loops[self.hole_ids.index(feature)].pieces
        for ring in (*self.loops, *self.zone_rings):
            if mine := ring.pieces_of(feature):
                return mine
        if feature not in self.holes:
            return ()
        return tuple(p for p in self.pieces if p.feature.startswith(f"{feature}."))

    def members_of(self, hole: str) -> tuple[str, ...]:
        """Ids of a pattern's members; none for any other id."""
        found = self.holes.get(hole)
        return member_ids(found) if found is not None else ()

    def polyline(self, loop: int, tolerance: float) -> NDArray[np.float64]:
        """Ring `loop` as points (n, 2) [mm], arcs flattened to a sagitta of `tolerance` [mm]."""
        return self.loops[loop].polyline(tolerance)

    def inside(self, at: Point, loop: int = 0) -> bool:
        """Whether a place lies inside ring `loop` (the outline unless told otherwise)."""
        return self.loops[loop].inside(at)

    def centre_of(self, hole: Hole) -> Point:
        """The centre of a hole or bolt circle, of a pattern's first member [mm].

        Of a loop hole the middle of its bounding box.
        """
        if not isinstance(hole, LoopHole):
            return hole.centre
        box = self.loops[self.hole_ids.index(hole.id)].box
        if box is None:
            return hole.loop.corners[0].at
        return (box[0] + box[2]) / 2.0, (box[1] + box[3]) / 2.0

    def anchor_of(self, feature: str) -> Point | None:
        """A place [mm] that stands for a corner, edge, hole or probe: where a mark is put."""
        if feature in self.corners and not self.pieces_of(feature):
            return self.corners[feature].at
        if feature in self.holes:
            return self.centre_of(self.holes[feature])
        if feature in self.zones:
            return hole_centre(self.zones[feature].form)
        if feature in self.probes:
            return self.probes[feature].at
        for cut in self.part.cuts:
            if cut.id == feature:
                return cut.start
        if pieces := self.pieces_of(feature):
            x, y = pieces[len(pieces) // 2].curve.point(0.5)
            return float(x), float(y)
        return None


@kept_by_identity(4)
def _crosses(holes: tuple[Hole, ...]) -> NDArray[np.float64]:
    """As `DrawnPart.crosses`; most edits keep all holes."""
    rows = []
    for hole in holes:
        if isinstance(hole, CircleHole):
            half = hole.diameter / 2.0
            rows.append((*hole.centre, half, half, 0.0))
        elif isinstance(hole, SlotHole):
            angle = math.radians(hole.angle) if math.isfinite(hole.angle) else 0.0
            rows.append((*hole.centre, hole.length / 2.0, hole.width / 2.0, angle))
    return np.array(rows, dtype=float).reshape(-1, 5)


@kept_by_identity(4)
def drawn_part(part: Part) -> DrawnPart:
    """The boundary to draw, kept for the parts last asked for."""
    holes = all_holes(part)
    rings = list(hole_rings(holes))
    ids: list[str | None] = [hole.id for hole in holes]
    if part.outline is not None:
        rings, ids = [outline_ring(part.outline), *rings], [None, *ids]
    zones = tuple(hole_ring(zone.form) for zone in part.zones)
    return DrawnPart(part, tuple(rings), tuple(ids), zones)


def loops_of(part: Part) -> list[Loop]:
    """The outline and the ring of every loop hole and zone."""
    loops = [part.outline] if part.outline is not None else []
    forms = [*part.holes, *(z.form for z in part.zones)]
    return loops + [form.loop for form in forms if isinstance(form, LoopHole)]
