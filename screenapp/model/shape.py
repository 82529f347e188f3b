"""The exact boundary of a part: every loop as a chain of segments and arcs, rounds worked in.

The material is always on the left: the outline runs counter-clockwise, holes run clockwise,
whichever way the user drew them.  Each piece names the feature it belongs to, so that a mesh edge,
a load and a stress peak can all be told by the same words.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from functools import cached_property, lru_cache

import numpy as np
from numpy.typing import NDArray

from screenapp.model.boundary_curve import BoundaryCurve, area_under, turned
from screenapp.model.curve_table import CurveTable
from screenapp.model.curves import Curve, Segment
from screenapp.model.errors import Fault, InvalidPartError
from screenapp.model.hole_curves import hole_curves
from screenapp.model.loop_curves import edge_curves, loop_curves, runs_clockwise, sharp_places
from screenapp.model.members import all_holes
from screenapp.model.part import CircleHole, Hole, Loop, LoopHole, Part, Point, SlotHole

__all__ = ["BoundaryCurve", "Shape", "edge_curves", "loop_curves", "shape_of"]


@dataclass(frozen=True)
class Interface:
    """A line inside the part on which thickness or material changes, between two junctions.

    Attributes:
        zone: id of the zone whose form it follows.
        curve: the line itself.
        left, right: index in `Part.zones` of what lies on either hand, -1 for the wall itself.
    """

    zone: str
    curve: Curve
    left: int
    right: int


@dataclass(frozen=True)
class Region:
    """A connected stretch of the part with one thickness and one material.

    Attributes:
        zone: index in `Part.zones`, -1 for the wall itself.
        shape: its own boundary, interfaces included, material on the left.
        pieces: for each curve of `shape`, the piece of the whole shape's `curves` that it is, or
            their number plus the index of the interface.
        forward: whether each of them runs the same way as there.
    """

    zone: int
    shape: Shape
    pieces: tuple[int, ...]
    forward: tuple[bool, ...]


@dataclass(frozen=True)
class Shape:
    """The whole boundary.

    Attributes:
        curves: all pieces; those of one loop follow one another and close.
        loops: for each loop, the range (first, past the last) of its pieces in `curves`.
        hole_ids: the hole's id for each loop, None for the outline; members of a pattern have
            derived ids ("h4.3").
        sharp_corners: id and place [mm] of each sharp point; a chamfer has two ("c4.1", "c4.2").
        interfaces, regions: where thickness or material changes, and what lies between; both are
            empty where the whole part is one (see `regions.shape_with_zones`).
    """

    curves: tuple[BoundaryCurve, ...]
    loops: tuple[tuple[int, int], ...]
    hole_ids: tuple[str | None, ...]
    sharp_corners: tuple[tuple[str, Point], ...]
    interfaces: tuple[Interface, ...] = ()
    regions: tuple[Region, ...] = ()

    @property
    def parts(self) -> tuple[Region, ...]:
        """The regions; where there are no zones, the whole shape as one."""
        every = range(len(self.curves))
        return self.regions or (Region(-1, self, tuple(every), tuple(True for _ in every)),)

    def zone_behind(self, piece: int) -> int:
        """The zone that a piece of the boundary belongs to, -1 for the wall itself."""
        return next((r.zone for r in self.regions if piece in r.pieces), -1)

    @property
    def area(self) -> float:
        """Exact area [mm²], holes taken out."""
        return sum(area_under(c.curve) for c in self.curves)

    @cached_property
    def bounds(self) -> tuple[float, float, float, float]:
        """Smallest x, smallest y, largest x, largest y [mm] of the outline."""
        first, last = self.loops[0]
        boxes = self.table.boxes[first:last]
        (x0, y0), (x1, y1) = boxes[:, :2].min(axis=0), boxes[:, 2:].max(axis=0)
        return float(x0), float(y0), float(x1), float(y1)

    @cached_property
    def table(self) -> CurveTable:
        """The pieces as arrays, for questions that go over all of them at once."""
        return CurveTable.of(self.curves)

    @property
    def size(self) -> float:
        """Diagonal of the bounding box [mm]."""
        x0, y0, x1, y1 = self.bounds
        return math.hypot(x1 - x0, y1 - y0)

    def pieces_of(self, feature: str) -> tuple[int, ...]:
        """Indices of the pieces of an edge, a fillet, a hole of any kind or a whole pattern."""
        if feature in self.hole_ids:
            first, last = self.loops[self.hole_ids.index(feature)]
            return tuple(range(first, last))
        mine = tuple(i for i, c in enumerate(self.curves) if c.feature == feature)
        within = f"{feature}."
        return mine or tuple(i for i, c in enumerate(self.curves) if c.feature.startswith(within))

    def polyline(self, loop: int, tolerance: float) -> NDArray[np.float64]:
        """The loop as points (n, 2) [mm], arcs flattened to a sagitta of `tolerance` [mm]."""
        first, last = self.loops[loop]
        return np.concatenate([_flatten(c.curve, tolerance) for c in self.curves[first:last]])


def shape_of(part: Part) -> Shape:
    """Work out the exact boundary of a part that has an outline.

    Raises:
        InvalidPartError: no outline, a size that is not positive, or a round that does not fit;
            the faults name corner, hole and field.
    """
    faults: list[Fault] = []
    pieces: list[BoundaryCurve] = []
    loops: list[tuple[int, int]] = []
    hole_ids: list[str | None] = []
    corners: list[tuple[str, Point]] = []
    if part.outline is None:
        raise InvalidPartError.of(
            (Fault("the part has no outline", "draw a closed outline", "outline"),)
        )
    sources: list[tuple[str | None, Loop | Hole]] = [(None, part.outline)]
    sources += [(hole.id, hole) for hole in all_holes(part)]
    for number, (hole_id, source) in enumerate(sources):
        loop = source.loop if isinstance(source, LoopHole) else source
        if isinstance(loop, Loop):
            where = "outline" if hole_id is None else f"holes.{hole_id}"
            curves = loop_curves(loop, where, faults)
            corners += sharp_places(loop, curves)
            if curves and runs_clockwise(loop) == (hole_id is None):
                curves = [turned(c) for c in reversed(curves)]
            if number:
                curves = [BoundaryCurve(c.feature, c.kind, c.curve, number) for c in curves]
        else:
            curves = _rim(loop, number) or hole_curves(loop, faults)
        loops.append((len(pieces), len(pieces) + len(curves)))
        pieces += curves
        hole_ids.append(hole_id)
    if faults:
        raise InvalidPartError.of(tuple(faults))
    return Shape(tuple(pieces), tuple(loops), tuple(hole_ids), tuple(corners))


def outline_curves(outline: Loop) -> tuple[tuple[BoundaryCurve, ...], tuple[Fault, ...]]:
    """The pieces of an outline alone, material on their left, and what does not fit in it."""
    faults: list[Fault] = []
    curves = loop_curves(outline, "outline", faults)
    if curves and not faults and runs_clockwise(outline):
        curves = [turned(c) for c in reversed(curves)]
    return tuple(curves), tuple(faults)


@lru_cache(maxsize=8192)
def _rim(hole: CircleHole | SlotHole, number: int) -> list[BoundaryCurve]:
    """The rim of a hole, clockwise, empty if it is at fault; most holes stay in an edit."""
    rim = [turned(c) for c in reversed(hole_curves(hole, []))]
    return [BoundaryCurve(c.feature, c.kind, c.curve, number) for c in rim]


def _flatten(curve: Curve, tolerance: float) -> NDArray[np.float64]:
    """Points along the curve without its last one (the next piece brings it)."""
    if isinstance(curve, Segment):
        return curve.point([0.0])
    step = 2.0 * math.acos(max(0.0, 1.0 - tolerance / curve.radius))
    n = max(2, math.ceil(abs(curve.sweep) / max(step, 1e-3)))
    return curve.point(np.linspace(0.0, 1.0, n + 1)[:-1])
