"""Cutting a ring out of a part, or joining one to it: exact, and ids of what stays survive."""

from __future__ import annotations

import math
from collections.abc import Callable, Sequence
from dataclasses import dataclass, replace

from screenapp.model.arrangement import Operation, Ring, Side, combine, inside, meets
from screenapp.model.baking import baked
from screenapp.model.boundary_curve import area_under
from screenapp.model.curves import Arc, Curve, Segment
from screenapp.model.edit_patterns import break_pattern
from screenapp.model.edit_places import drop_from_places
from screenapp.model.edit_rules import EditError, Outcome, new_ids, settle
from screenapp.model.features import loops_of
from screenapp.model.hole_loops import loop_of_hole, reversed_loop
from screenapp.model.loop_curves import edge_curves
from screenapp.model.members import all_holes, members, patterned
from screenapp.model.misfits import without_orphans
from screenapp.model.part import (
    BearingLoad,
    BodyLoad,
    BoltSupport,
    CircleHole,
    Corner,
    Edge,
    Hole,
    Loop,
    LoopHole,
    MomentLoad,
    Part,
    PinSupport,
)
from screenapp.model.support_records import stands_on


def ring_meets(part: Part, ring: Loop) -> bool:
    """Whether a ring crosses or touches the outline or a hole, so that it can be cut or joined."""
    curves = edge_curves(ring)
    if part.outline is None or not all(c.length > 0.0 for c in curves):
        return False
    return any(meets(edge_curves(loop), curves) for _, _, loop in _material_loops(part))


def cut(part: Part, ring: Loop) -> Outcome:
    """Take everything inside a ring out of the part; the ring's ids are given anew.

    Raises:
        EditError: no outline, no material there, nothing would be left, or several pieces would.
    """
    return _combined(part, ring, "cut")


def join(part: Part, ring: Loop) -> Outcome:
    """Make everything inside a ring material; the ring's ids are given anew.

    Raises:
        EditError: no outline, the ring is inside the part already, or does not touch it.
    """
    return _combined(part, ring, "join")


@dataclass(frozen=True)
class _Source:
    """A loop that takes part, material on its left.

    Attributes:
        hole: id of the hole whose rim it is, "" for the outline, None for the ring.
        loop: its corners and edges.
        first: number of its first curve among all.
    """

    hole: str | None
    loop: Loop
    first: int


def _combined(part: Part, ring: Loop, operation: Operation) -> Outcome:
    if part.outline is None:
        raise EditError("there is no outline to work on", "draw an outline first")
    for loop in (part.outline, ring, *(h.loop for h in part.holes if isinstance(h, LoopHole))):
        if not all(math.isfinite(c.length) and c.length > 0.0 for c in edge_curves(loop)):
            raise EditError("an edge has no length", "move one of its corners or remove it")
    part = _ready(part, ring)
    assert part.outline is not None
    every = [c for _, _, loop in _material_loops(part) for c in edge_curves(loop)]
    ring = _running(baked(ring, every), left=True)
    loops: list[tuple[str | None, Loop]] = [
        (hole, _running(loop, left=not hole)) for _, hole, loop in _material_loops(part)
    ]
    sources: list[_Source] = []
    curves: list[list[Curve]] = []
    for hole, loop in [*loops, (None, ring)]:
        sources.append(_Source(hole, loop, sum(len(c) for c in curves)))
        curves.append(edge_curves(loop))
    rings = combine(curves[:-1], curves[-1], operation)
    outer = [r for r in rings if r.area > 0.0]
    if not outer:
        raise EditError("nothing of the part would be left", "draw a smaller ring")
    if len(outer) > 1:
        if operation == "join":
            raise EditError("the ring does not touch the part", "draw it so that it overlaps")
        raise EditError(
            f"the part would fall into {len(outer)} pieces", "draw the ring so that one piece stays"
        )
    if all(_untouched(r, sources) is not None for r in rings) and len(rings) == len(curves) - 1:
        where = "inside the part already" if operation == "join" else "where no material is"
        raise EditError(f"the ring lies {where}", "draw it across the edge of the part")
    return _rebuilt(part, sources, outer[0], [r for r in rings if r.area <= 0.0])


def _ready(part: Part, ring: Loop) -> Part:
    """Patterns that the ring meets or holds broken up, rounds that it meets made edges."""
    curves = edge_curves(ring)
    for hole in part.holes:
        if not patterned(hole):
            continue
        rims = [edge_curves(loop_of_hole(m)) for m in members(hole)]
        within = inside(curves, [rim[0].start for rim in rims])
        if any(within) or any(meets(rim, curves) for rim in rims):
            part = break_pattern(part, hole.id)
    used = part
    assert part.outline is not None
    outline = baked(part.outline, curves, used)
    part = replace(part, outline=outline)
    for hole in part.holes:
        if isinstance(hole, LoopHole):
            loop = baked(hole.loop, curves, part)
            holes = tuple(LoopHole(h.id, loop) if h.id == hole.id else h for h in part.holes)
            part = replace(part, holes=holes)
    return part


def _material_loops(part: Part) -> list[tuple[str, str, Loop]]:
    """Field, hole's id and loop of the outline and of every hole."""
    assert part.outline is not None
    holes = [("holes", h.id, loop_of_hole(h)) for h in all_holes(part)]
    return [("outline", "", part.outline), *holes]


def _running(loop: Loop, left: bool) -> Loop:
    """The loop with its inside on the left, or on the right."""
    inside_left = sum(area_under(c) for c in edge_curves(loop)) > 0.0
    return loop if inside_left == left else reversed_loop(loop)


# --- records from rings ---------------------------------------------------------------------


def _untouched(ring: Ring, sources: Sequence[_Source]) -> _Source | None:
    """The loop of which a ring is the whole, unchanged."""
    sides = _merged(ring.sides)
    if any((s.t0, s.t1) != (0.0, 1.0) for s in sides):
        return None
    source = _source_of(sides[0], sources)
    mine = {s.source for s in sides}
    whole = set(range(source.first, source.first + len(source.loop.edges)))
    return source if mine == whole and source.hole is not None else None


def _source_of(side: Side, sources: Sequence[_Source]) -> _Source:
    return next(s for s in reversed(sources) if s.first <= side.source)


def _rebuilt(part: Part, sources: list[_Source], outer: Ring, inner: list[Ring]) -> Outcome:
    builder = _Builder(part, sources, [outer, *inner])
    whole = _untouched(outer, sources)
    outline = part.outline if whole is not None and whole.hole == "" else builder.loop(outer)
    kept: dict[str, Hole | None] = {h.id: None for h in part.holes}
    fresh: list[Ring] = []
    for ring in inner:
        source = _untouched(ring, sources)
        if source is not None and source.hole:
            hole = next(h for h in part.holes if source.hole in (h.id, *(m.id for m in members(h))))
            kept[hole.id] = hole
            continue
        owners = [o for s in ring.sides if (o := _source_of(s, sources).hole)]
        id_ = max(owners, key=owners.count) if owners else ""
        if id_ in kept and kept[id_] is None:  # members of a pattern bear no id that can be kept
            kept[id_] = LoopHole(id_, builder.loop(ring))
        else:
            fresh.append(ring)
    holes = [h for h in kept.values() if h is not None]
    ids = new_ids(part, "h", len(fresh))
    holes += [LoopHole(id_, builder.loop(r)) for id_, r in zip(ids, fresh, strict=True)]
    after = replace(part, outline=outline, holes=tuple(holes))
    bare = drop_from_places(after, _stood_on(after) - _places(after))
    loose = _without_loose_pins(bare.part)
    return Outcome(settle(part, loose.part), (*bare.lost, *loose.lost))


def _without_loose_pins(part: Part) -> Outcome:
    """The part without pins, bolts and their forces in holes that are no longer round."""
    round_ = {h.id for h in (*part.holes, *all_holes(part)) if isinstance(h, CircleHole)}
    lost: list[str] = []
    cases = []
    for case in part.cases:
        loose = [
            x for x in case.loads if isinstance(x, BearingLoad | MomentLoad) and x.on not in round_
        ]
        lost += [f"load {x.id} on {x.on} (case “{case.name}”)" for x in loose]
        cases.append(replace(case, loads=tuple(x for x in case.loads if x not in loose)))
    held = []
    for support in part.supports:
        loose_holes = {on for on in stands_on(support) if on not in round_}
        if not isinstance(support, PinSupport | BoltSupport) or not loose_holes:
            held.append(support)
            continue
        lost.append(f"support {support.id} on {' and '.join(sorted(loose_holes))}")
        kept = tuple(on for on in stands_on(support) if on in round_)
        if isinstance(support, BoltSupport) and kept:
            held.append(replace(support, on=kept[0], also=kept[1:]))
    if not lost:
        return Outcome(part)
    now, orphans = without_orphans(replace(part, cases=tuple(cases), supports=tuple(held)))
    return Outcome(now, (*lost, *orphans))


def _stood_on(part: Part) -> set[str]:
    loads = (x for c in part.cases for x in c.loads if not isinstance(x, BodyLoad))
    return {on for s in part.supports for on in stands_on(s)} | {load.on for load in loads}


def _places(part: Part) -> set[str]:
    ids = {h.id for h in (*part.holes, *all_holes(part))}
    for where, _, loop in loops_of(part):
        if not where.startswith("zones"):
            ids |= {c.id for c in loop.corners} | {e.id for e in loop.edges}
    return ids


class _Builder:
    """Makes loops of rings; an edge that was parted keeps its id on its longest piece."""

    def __init__(self, part: Part, sources: list[_Source], rings: list[Ring]) -> None:
        self._part = part
        self._sources = sources
        longest: dict[int, tuple[float, Side]] = {}
        for ring in rings:
            for side in _merged(ring.sides):
                length = side.curve.length
                if side.source not in longest or length > longest[side.source][0] * (1.0 + 1e-9):
                    longest[side.source] = length, side
        self._heirs = {source: side for source, (_, side) in longest.items()}
        count = sum(len(ring.sides) for ring in rings) + 1
        self._corner_ids = iter(new_ids(part, "c", count))
        self._edge_ids = iter(new_ids(part, "e", count))

    def loop(self, ring: Ring) -> Loop:
        """The record of a ring."""
        sides = _whole_arcs(_merged(ring.sides), self._nameless)
        corners = [self._corner(sides[k - 1], side) for k, side in enumerate(sides)]
        return Loop(tuple(corners), tuple(self._edge(side) for side in sides))

    def _corner(self, before: Side, side: Side) -> Corner:
        """The corner in which a side begins."""
        source = _source_of(side, self._sources)
        n, k = len(source.loop.corners), side.source - source.first
        backwards = side.t0 > side.t1
        at_end = side.t0 == (1.0 if backwards else 0.0)
        if not at_end:
            return Corner(next(self._corner_ids), side.curve.start)
        old = source.loop.corners[(k + 1) % n if backwards else k]
        other = source.first + ((k + 1) % n if backwards else (k - 1) % n)
        along = before.source == other and before.t1 == (0.0 if backwards else 1.0)
        id_ = old.id if source.hole is not None and old.id else next(self._corner_ids)
        return replace(old, id=id_) if along else Corner(id_, old.at)

    def _nameless(self, side: Side) -> bool:
        """Whether a side begins in a corner that was only made to write a circle as a loop."""
        source = _source_of(side, self._sources)
        k, n = side.source - source.first, len(source.loop.corners)
        backwards = side.t0 > side.t1
        if side.t0 != (1.0 if backwards else 0.0):
            return False
        corner = source.loop.corners[(k + 1) % n if backwards else k]
        return not corner.id and corner.sharp

    def _edge(self, side: Side) -> Edge:
        source = _source_of(side, self._sources)
        old = source.loop.edges[side.source - source.first]
        bent = isinstance(side.curve, Arc)
        heir = self._heirs.get(side.source) == side and source.hole is not None and old.id
        id_ = old.id if heir else next(self._edge_ids)
        if (side.t0, side.t1) == (0.0, 1.0):
            return replace(old, id=id_)
        x, y = side.curve.point(0.5)
        return Edge(id_, (float(x), float(y)) if bent else None)


def _merged(sides: Sequence[Side]) -> list[Side]:
    """Pieces of one curve that follow one another as one piece; a ring is left a ring."""
    runs: list[list[Side]] = []
    for side in sides:
        if runs and _continues(runs[-1][-1], side):
            runs[-1].append(side)
        else:
            runs.append([side])
    if len(runs) > 1 and _continues(runs[-1][-1], runs[0][0]):
        runs[0] = [*runs.pop(), *runs[0]]
    return [_one(run) for run in runs]


def _whole_arcs(sides: list[Side], nameless: Callable[[Side], bool]) -> list[Side]:
    """Arcs of one circle that follow one another as one, where the corner between has no name."""
    joined: list[Side] = []
    for side in sides:
        before = joined[-1] if joined else None
        if before is not None and nameless(side) and _same_circle(before.curve, side.curve):
            joined[-1] = _with_more(before, side)
        else:
            joined.append(side)
    if len(joined) > 2 and nameless(joined[0]) and _same_circle(joined[-1].curve, joined[0].curve):
        joined[0] = _with_more(joined.pop(), joined[0])
    return joined


def _same_circle(a: Curve, b: Curve) -> bool:
    if not (isinstance(a, Arc) and isinstance(b, Arc)) or a.sweep * b.sweep < 0.0:
        return False
    near = 1e-9 * a.radius
    alike = abs(a.radius - b.radius) <= near and math.dist(a.centre, b.centre) <= near
    return alike and abs(a.sweep) + abs(b.sweep) < 1.9 * math.pi


def _with_more(one: Side, more: Side) -> Side:
    """Both as one side; it ends where no corner of its own curve is."""
    assert isinstance(one.curve, Arc)
    assert isinstance(more.curve, Arc)
    curve = replace(one.curve, sweep=one.curve.sweep + more.curve.sweep)
    return Side(one.source, one.t0, math.nan, curve)


def _continues(one: Side, other: Side) -> bool:
    same_way = (one.t0 < one.t1) == (other.t0 < other.t1)
    return one.source == other.source and same_way and one.t1 == other.t0


def _one(run: list[Side]) -> Side:
    if len(run) == 1:
        return run[0]
    first, last = run[0], run[-1]
    curve: Curve
    if isinstance(first.curve, Arc):
        sweep = sum(s.curve.sweep for s in run if isinstance(s.curve, Arc))
        curve = replace(first.curve, sweep=sweep)
    else:
        curve = Segment(first.curve.start, last.curve.end)
    return Side(first.source, first.t0, last.t1, curve)
