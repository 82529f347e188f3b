"""Edits of holes, and moving a selection of corners, edges, holes, zones and probes together."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import replace

from screenapp.model.edit_loops import moved_loop, new_loop
from screenapp.model.edit_rules import (
    EditError,
    must_be_point,
    must_find,
    new_id,
    settle,
    with_loop,
    without_stale_formulas,
)
from screenapp.model.features import loops_of
from screenapp.model.members import whole_id
from screenapp.model.part import CircleHole, Corner, Hole, Loop, LoopHole, Part, Point, SlotHole


def add_circle_hole(part: Part, centre: Point, diameter: float) -> Part:
    """Add a round hole; its id is `new_id(part, "h")`."""
    id_ = new_id(part, "h")
    return _with_hole(part, CircleHole(id_, must_be_point(centre, "the centre"), float(diameter)))


def add_slot_hole(
    part: Part, centre: Point, length: float, width: float, angle: float = 0.0
) -> Part:
    """Add a slot of overall `length` and `width` [mm] along `angle` [deg]."""
    centre = must_be_point(centre, "the centre")
    hole = SlotHole(new_id(part, "h"), centre, float(length), float(width), float(angle))
    _must_be_long(hole)
    return _with_hole(part, hole)


def add_loop_hole(
    part: Part,
    corners: Sequence[Point],
    through: Sequence[Point | None] | None = None,
    round_: float = 0.0,
) -> Part:
    """Add a hole of any form, every corner rounded by `round_` [mm].

    `through[i]` is the arc point of the edge after corner i.
    """
    return _with_hole(part, LoopHole(new_id(part, "h"), new_loop(part, corners, through, round_)))


def resize_hole(part: Part, hole: str, **sizes: float) -> Part:
    """Change `diameter` of a round hole, or `length`, `width`, `angle` of a slot.

    Raises:
        EditError: a size that this hole has not, or that is not above zero.
    """
    record = must_find(part, whole_id(hole), "hole").record
    allowed = {CircleHole: ("diameter",), SlotHole: ("length", "width", "angle")}
    names = allowed.get(type(record), ())
    for name in sizes:
        if name not in names:
            has = ", ".join(names) or "no size of its own: move its corners"
            raise EditError(f"hole {hole} has no {name}", f"it has {has}")
    changed: Hole = replace(record, **{k: float(v) for k, v in sizes.items()})  # type: ignore
    if isinstance(changed, SlotHole):
        _must_be_long(changed)
    return settle(part, _with_changed(part, changed))


def move_hole(part: Part, hole: str, to: Point) -> Part:
    """Move a hole's centre to a point; of a loop hole, the middle of its corners' bounds.

    A member of a pattern takes the whole pattern with it.
    """
    found = must_find(part, hole, "hole")
    record = found.record
    x, y = must_be_point(to, f"hole {hole}")
    if isinstance(record, CircleHole | SlotHole) and not found.owner:
        return without_stale_formulas(part, _with_changed(part, replace(record, centre=(x, y))))
    assert isinstance(record, CircleHole | SlotHole | LoopHole)
    cx, cy = hole_centre(record)
    return move(part, [hole], x - cx, y - cy)


def hole_centre(hole: Hole) -> Point:
    """The centre of a hole; of a loop hole, the middle of its corners' bounds [mm]."""
    if isinstance(hole, CircleHole | SlotHole):
        return hole.centre
    xs, ys = zip(*(c.at for c in hole.loop.corners), strict=True)
    return (min(xs) + max(xs)) / 2.0, (min(ys) + max(ys)) / 2.0


def move(part: Part, ids: Iterable[str], dx: float, dy: float) -> Part:
    """Move all the named corners, edges (with both ends), holes, zones and probes by (dx, dy) [mm].

    Supports, loads and limits follow what they are on and are passed over here; so are ids that
    nothing bears.
    """
    wanted = {whole_id(id_) for id_ in ids}

    def shifted(p: Point, name: str) -> Point:
        return must_be_point((p[0] + dx, p[1] + dy), name)

    after = part
    for _, owner, loop in list(loops_of(part)):
        going = _going_corners(loop, wanted, whole=owner in wanted)
        if going:
            to = {c.id: shifted(c.at, f"corner {c.id}") for c in going}
            after = with_loop(after, owner, moved_loop(loop, to))

    def carried(form: Hole) -> Hole:
        if form.id in wanted and isinstance(form, CircleHole | SlotHole):
            return replace(form, centre=shifted(form.centre, form.id))
        return form

    holes = tuple(carried(h) for h in after.holes)
    zones = tuple(replace(z, form=carried(z.form)) for z in after.zones)
    readings = tuple(
        replace(p, at=shifted(p.at, f"probe {p.id}")) if p.id in wanted else p
        for p in part.readings
    )
    cuts = tuple(
        replace(c, start=shifted(c.start, f"cut {c.id}"), end=shifted(c.end, f"cut {c.id}"))
        if c.id in wanted
        else c
        for c in part.cuts
    )
    moved = replace(after, holes=holes, zones=zones, readings=readings, cuts=cuts)
    return without_stale_formulas(part, moved)


def _going_corners(loop: Loop, wanted: set[str], whole: bool) -> list[Corner]:
    n = len(loop.corners)
    going = {c.id for c in loop.corners if whole or c.id in wanted}
    for i, e in enumerate(loop.edges):
        if e.id in wanted:
            going |= {loop.corners[i].id, loop.corners[(i + 1) % n].id}
    return [c for c in loop.corners if c.id in going]


def _with_hole(part: Part, hole: Hole) -> Part:
    return settle(part, replace(part, holes=(*part.holes, hole)))


def _with_changed(part: Part, hole: Hole) -> Part:
    return replace(part, holes=tuple(hole if h.id == hole.id else h for h in part.holes))


def _must_be_long(slot: SlotHole) -> None:
    if slot.length < slot.width:
        raise EditError(
            f"the slot would be {slot.length:g} mm long but {slot.width:g} mm wide",
            "make the overall length at least the width",
        )
