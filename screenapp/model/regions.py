"""A part divided by its zones: where thickness or material changes, and what lies between."""

from __future__ import annotations

import itertools
from collections.abc import Sequence
from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray

from screenapp.model.boundary_curve import BoundaryCurve, area_under, turned
from screenapp.model.crossings import TOUCH
from screenapp.model.curve_table import CurveTable
from screenapp.model.curves import Curve
from screenapp.model.edge_parts import with_span_ends
from screenapp.model.errors import Fault, InvalidPartError
from screenapp.model.hole_curves import hole_curves
from screenapp.model.loop_curves import loop_curves
from screenapp.model.part import LoopHole, Part
from screenapp.model.shape import (
    Interface,
    Region,
    Shape,
    shape_of,
)
from screenapp.model.zone_arrangement import (
    Cut,
    Step,
    cut_at_junctions,
    trace_loops,
    without_doubles,
)

Floats = NDArray[np.float64]
Ints = NDArray[np.int64]

OUTSIDE = -2
"""What lies beside the part, where zones are numbered from 0 and the wall is -1."""

BESIDE = 20.0
"""How far beside a line it is asked what lies there, in distances at which curves touch."""


def shape_with_zones(part: Part) -> Shape:
    """The exact boundary of a part, divided by its zones; `shape_of` where it has none.

    The boundary must be sound (see `crossings.boundary_faults`), and so must each zone by itself.

    Raises:
        InvalidPartError: as `shape_of`, or a zone runs so nearly along another line that what lies
            between cannot be told.
    """
    shape = with_span_ends(part, shape_of(part))
    return divide(part, shape) if part.zones else shape


def zone_curves(part: Part, faults: list[Fault]) -> list[list[BoundaryCurve]]:
    """The curves of each zone as drawn, counter-clockwise; what does not fit goes to `faults`."""
    drawn: list[list[BoundaryCurve]] = []
    for zone in part.zones:
        form, where = zone.form, f"zones.{zone.id}"
        curves = (
            loop_curves(form.loop, where, faults)
            if isinstance(form, LoopHole)
            else hole_curves(form, faults, where)
        )
        if sum(area_under(c.curve) for c in curves) < 0.0:  # drawn clockwise
            curves = [turned(c) for c in reversed(curves)]
        drawn.append(curves)
    return drawn


def divide(part: Part, shape: Shape) -> Shape:
    """As `shape_with_zones`, of a boundary already worked out."""
    faults: list[Fault] = []
    drawn = zone_curves(part, faults)
    if faults:
        raise InvalidPartError.of(tuple(faults))
    first = len(shape.loops)
    curves = list(shape.curves)
    for number, own in enumerate(drawn):
        curves += [replace(c, loop=first + number) for c in own]
    near, n = TOUCH * shape.size, len(shape.curves)
    cuts = without_doubles(cut_at_junctions(curves, n, near), n, near)
    ask = _Asker(shape, CurveTable.of(tuple(curves)), len(part.zones))
    left, right = ask.beside(cuts, n, BESIDE * near)
    edges = [
        k for k, cut in enumerate(cuts) if cut.source < n or left[k] != right[k]
    ]  # the others lie outside the part or under a later zone
    cuts = [cuts[k] for k in edges]
    left, right = left[edges], right[edges]
    boundary = [cut.source < n for cut in cuts]
    for k, cut in enumerate(cuts):
        sides = (left[k],) if boundary[k] else (left[k], right[k])
        if OUTSIDE in sides:
            raise InvalidPartError.of((_too_near(part, curves[cut.source], cut, first),))
    return _assembled(part, shape, curves, cuts, boundary, left, right, first)


@dataclass(frozen=True, eq=False)
class _Asker:
    """Tells which zone lies at a place."""

    shape: Shape
    table: CurveTable
    n_zones: int

    def beside(self, cuts: Sequence[Cut], n_boundary: int, gap: float) -> tuple[Ints, Ints]:
        """What lies to the left and right of the middle of each cut: the last zone there, -1 for
        the wall itself, `OUTSIDE` beside the part."""
        middles, along = _middles(cuts)
        across = np.stack([-along[:, 1], along[:, 0]], axis=1)
        left = self._zones(middles + gap * across)
        right = np.full(len(cuts), OUTSIDE)
        drawn = np.flatnonzero([cut.source >= n_boundary for cut in cuts])
        for side, points in ((left, middles + gap * across), (right, middles - gap * across)):
            zones = self._zones(points[drawn])
            zones[self._outside(points[drawn])] = OUTSIDE
            side[drawn] = zones
        return left, right

    def _zones(self, points: Floats) -> Ints:
        first = len(self.shape.loops)
        found = np.full(len(points), -1, dtype=np.int64)
        for zone in range(self.n_zones):
            found[self.table.inside(first + zone, points)] = zone
        return found

    def _outside(self, points: Floats) -> NDArray[np.bool_]:
        own = self.shape.table
        out = np.asarray(~own.inside(0, points))
        boxes = own.loop_boxes(self.shape)
        for loop in range(1, len(self.shape.loops)):
            low, high = boxes[loop, :2], boxes[loop, 2:]
            near = np.flatnonzero(np.all((points > low) & (points < high), axis=1))
            if len(near):
                out[near] |= own.inside(loop, points[near])
        return out


def _middles(cuts: Sequence[Cut]) -> tuple[Floats, Floats]:
    """Middle points and tangents of cuts, (n, 2) each."""
    table = CurveTable.of(tuple(BoundaryCurve("", "edge", cut.curve, 0) for cut in cuts))
    every, half = np.arange(len(cuts)), np.full(len(cuts), 0.5)
    return table.points(every, half), table.tangents(every, half)


def _assembled(
    part: Part,
    shape: Shape,
    curves: Sequence[BoundaryCurve],
    cuts: Sequence[Cut],
    boundary: Sequence[bool],
    left: Ints,
    right: Ints,
    first: int,
) -> Shape:
    """The divided shape: boundary pieces loop by loop, then interfaces, then the regions."""
    pieces = [
        replace(curves[cut.source], curve=cut.curve)
        for cut, edge in zip(cuts, boundary, strict=True)
        if edge
    ]
    loop_of = np.array([piece.loop for piece in pieces])
    bounds = np.searchsorted(loop_of, np.arange(first + 1))
    interfaces = [
        Interface(
            part.zones[curves[cut.source].loop - first].id, cut.curve, int(left[k]), int(right[k])
        )
        for k, cut in enumerate(cuts)
        if not boundary[k]
    ]
    number = np.cumsum(boundary) - 1  # of boundary pieces; interfaces follow them
    number = np.where(boundary, number, len(pieces) + np.arange(len(cuts)) - np.cumsum(boundary))
    loops = trace_loops(cuts, boundary)
    regions = []
    for outer, holes in _nested(cuts, loops):
        walks = [outer, *holes]
        zones = {int((left if s.forward else right)[s.cut]) for walk in walks for s in walk}
        if len(zones) != 1:
            cut = cuts[next(s.cut for s in outer if not boundary[s.cut])]
            raise InvalidPartError.of((_too_near(part, curves[cut.source], cut, first),))
        regions.append(_region(zones.pop(), walks, cuts, curves, boundary, number))
    divided = replace(
        shape,
        curves=tuple(pieces),
        loops=tuple((int(a), int(b)) for a, b in itertools.pairwise(bounds)),
    )
    if not interfaces and all(r.zone == -1 for r in regions):
        return shape
    return replace(divided, interfaces=tuple(interfaces), regions=tuple(regions))


def _region(
    zone: int,
    walks: Sequence[tuple[Step, ...]],
    cuts: Sequence[Cut],
    curves: Sequence[BoundaryCurve],
    boundary: Sequence[bool],
    number: Ints,
) -> Region:
    own: list[BoundaryCurve] = []
    loops: list[tuple[int, int]] = []
    for loop, walk in enumerate(walks):
        loops.append((len(own), len(own) + len(walk)))
        for step in walk:
            source = curves[cuts[step.cut].source]
            curve = _run(cuts[step.cut], step.forward)
            kind = source.kind if boundary[step.cut] else "edge"
            own.append(BoundaryCurve(source.feature, kind, curve, loop))
    steps = [step for walk in walks for step in walk]
    shape = Shape(tuple(own), tuple(loops), (None,) * len(walks), ())
    return Region(
        zone,
        shape,
        tuple(int(number[step.cut]) for step in steps),
        tuple(step.forward for step in steps),
    )


def _nested(
    cuts: Sequence[Cut], loops: Sequence[tuple[Step, ...]]
) -> list[tuple[tuple[Step, ...], list[tuple[Step, ...]]]]:
    """Each walk round a face with the walks round what is cut out of it."""
    area = [sum(area_under(_run(cuts[s.cut], s.forward)) for s in walk) for walk in loops]
    outer = [k for k in range(len(loops)) if area[k] > 0.0]
    tables = {
        k: CurveTable.of(
            tuple(BoundaryCurve("", "edge", _run(cuts[s.cut], s.forward), 0) for s in loops[k])
        )
        for k in outer
    }
    holes: dict[int, list[tuple[Step, ...]]] = {k: [] for k in outer}
    inner = [k for k in range(len(loops)) if area[k] <= 0.0]
    if not inner:
        return [(loops[k], []) for k in outer]
    firsts = [cuts[loops[k][0].cut] for k in inner]
    middles, along = _middles(firsts)
    forward = np.array([1.0 if loops[k][0].forward else -1.0 for k in inner])[:, None]
    lengths = np.array([cut.curve.length for cut in firsts])[:, None]
    across = np.stack([-along[:, 1], along[:, 0]], axis=1)
    beside = middles + 1e-6 * lengths * forward * across
    held = {k: tables[k].inside(0, beside) for k in outer}
    for row, k in enumerate(inner):
        around = [m for m in outer if held[m][row]]
        if around:
            holes[min(around, key=lambda m: area[m])].append(loops[k])
    return [(loops[k], holes[k]) for k in outer]


def _run(cut: Cut, forward: bool) -> Curve:
    return cut.curve if forward else cut.curve.reversed()


def _too_near(part: Part, source: BoundaryCurve, cut: Cut, first: int) -> Fault:
    x, y = (float(v) for v in cut.curve.point(0.5))
    ids = (part.zones[source.loop - first].id,) if source.loop >= first else ()
    name = f"zone {ids[0]}" if ids else f"{source.kind} {source.feature}"
    where = f"zones.{ids[0]}" if ids else "zones"
    return Fault(
        f"{name} runs almost along another line near ({x:.4g}, {y:.4g})",
        "let the zone reach beyond that line, or keep it clear of it",
        where,
        ids or (source.feature,),
        (x, y),
    )
