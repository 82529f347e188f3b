"""Numbers and records of the shape that are wrong by themselves, whatever stands beside them."""

from __future__ import annotations

import math
from collections.abc import Iterator

from screenapp.model.curves import Segment, arc_through
from screenapp.model.errors import Fault
from screenapp.model.extents import FARTHEST, SMALLEST
from screenapp.model.features import everything, ids_of, loops_of
from screenapp.model.part import CircleHole, Corner, Hole, Loop, Part, Point, SlotHole
from screenapp.model.pattern_faults import pattern_faults, zone_pattern_faults


def id_faults(part: Part) -> list[Fault]:
    """Ids that are empty or borne by more than one thing."""
    ids = list(ids_of(part))
    if len(set(ids)) == len(ids) and "" not in ids:
        return []
    faults: list[Fault] = []
    seen: dict[str, str] = {}
    for found in everything(part):
        id_ = found.record.id
        if not id_:
            faults.append(
                Fault(f"a {found.kind} has no id", "give it an id", found.field.rstrip("."))
            )
        elif id_ in seen:
            faults.append(
                Fault(
                    f"the id “{id_}” is borne by a {seen[id_]} and by another {found.kind}"
                    if seen[id_] == found.kind
                    else f"the id “{id_}” is borne by a {seen[id_]} and by a {found.kind}",
                    "give one of them another id",
                    found.field,
                    (id_,),
                )
            )
        else:
            seen[id_] = found.kind
    return faults


def size_faults(part: Part) -> list[Fault]:
    """Everything drawn that keeps the boundary and the zones from being worked out at all."""
    if part.outline is None:
        faults = [Fault("the part has no outline", "draw a closed outline", "outline")]
    else:
        faults = []
    for where, owner, loop in loops_of(part):
        word = "zone" if where.startswith("zones") else "hole"
        faults += _loop_faults(loop, where, f"{word} {owner}" if owner else "the outline")
    for h in part.holes:
        faults += _form_faults(h, "holes", "slot" if isinstance(h, SlotHole) else "hole")
        faults += pattern_faults(h)
    for z in part.zones:
        faults += _form_faults(z.form, "zones", "zone")
        faults += zone_pattern_faults(z)
    return faults


def _form_faults(form: Hole, group: str, word: str) -> Iterator[Fault]:
    """Centre and sizes of a circle or slot that is a hole or a zone."""
    if isinstance(form, CircleHole) and SMALLEST <= form.diameter <= FARTHEST:
        x, y = form.centre
        if abs(x) <= FARTHEST and abs(y) <= FARTHEST:
            return  # sound, as most are
    where, id_ = f"{group}.{form.id}", form.id
    noun = "hole" if group == "holes" else "zone"
    if isinstance(form, CircleHole | SlotHole):
        yield from _point_faults(form.centre, f"the centre of {noun} {id_}", id_, f"{where}.centre")
    if isinstance(form, CircleHole):
        yield from length_fault(
            form.diameter, f"the diameter of {word} {id_}", form, "diameter", group
        )
    elif isinstance(form, SlotHole):
        yield from length_fault(form.length, f"the length of {word} {id_}", form, "length", group)
        yield from length_fault(form.width, f"the width of {word} {id_}", form, "width", group)
        if not math.isfinite(form.angle):
            yield _not_a_number(f"the angle of {word} {id_}", id_, f"{where}.angle")


def _loop_faults(loop: Loop, where: str, name: str) -> Iterator[Fault]:
    n, m = len(loop.corners), len(loop.edges)
    if n != m:
        yield Fault(
            f"{name} has {n} corners but {m} edges",
            "give as many edges as corners; edge number i joins corner i and corner i + 1",
            f"{where}.edges",
        )
        return
    if n < 2 or (n == 2 and all(e.through is None for e in loop.edges)):
        yield Fault(
            f"{name} has {n} corner{'' if n == 1 else 's'}",
            "draw at least three corners, or two with an arc between them",
            f"{where}.corners",
            tuple(c.id for c in loop.corners),
        )
        return
    before = len(faults := list(_corner_faults(loop, where)))
    yield from faults
    if before == 0:
        yield from _arc_faults(loop, where)


def _corner_faults(loop: Loop, where: str) -> Iterator[Fault]:
    for c in loop.corners:
        if _plainly_sound(c):
            continue
        yield from _point_faults(c.at, f"corner {c.id}", c.id, f"{where}.corners.{c.id}.at")
        if not c.sharp:
            yield from _cut_faults(c, "round", c.round, "radius", where)
            yield from _cut_faults(c, "chamfer", c.chamfer, "length", where)
    for e in loop.edges:
        if e.through is not None:
            field = f"{where}.edges.{e.id}.through"
            yield from _point_faults(e.through, f"the arc point of edge {e.id}", e.id, field)


def _plainly_sound(c: Corner) -> bool:
    """Whether nothing can be wrong with a corner; a part can have thousands, most of them so."""
    x, y = c.at
    if not (abs(x) <= FARTHEST and abs(y) <= FARTHEST):  # False for what is not a number, too
        return False
    return c.sharp or (c.chamfer == 0.0 and SMALLEST <= c.round <= FARTHEST)


def _cut_faults(c: Corner, name: str, size: float, what: str, where: str) -> Iterator[Fault]:
    """What is wrong with the round or chamfer of a corner by itself."""
    field = f"{where}.corners.{c.id}.{name}"
    if not math.isfinite(size):
        yield _not_a_number(f"the {name} of corner {c.id}", c.id, field, finite_point(c.at))
    elif size > FARTHEST or 0.0 < size < SMALLEST or size < 0.0:
        yield Fault(
            f"the {name} of corner {c.id} is {size:g} mm",
            f"give a {what} of at least {SMALLEST:g} mm, or 0 for a sharp corner"
            if size < SMALLEST
            else f"give a smaller {what}",
            field,
            (c.id,),
            finite_point(c.at),
        )


def _arc_faults(loop: Loop, where: str) -> Iterator[Fault]:
    for i, e in enumerate(loop.edges):
        if e.through is None:
            continue
        a, b = loop.corners[i].at, loop.corners[(i + 1) % len(loop.corners)].at
        field = f"{where}.edges.{e.id}.through"
        if a == b:
            continue  # no length: said with the boundary
        if e.through in (a, b):
            yield Fault(
                f"the arc point of edge {e.id} lies on one of the edge's corners",
                "put it between the corners, or make the edge straight",
                field,
                (e.id,),
                e.through,
            )
            continue
        curve = arc_through(a, e.through, b)
        if isinstance(curve, Segment):
            if curve.nearest(e.through) in (0.0, 1.0):
                yield Fault(
                    f"the arc point of edge {e.id} lies in line with the edge's corners "
                    "but not between them",
                    "move it to the side, or make the edge straight",
                    field,
                    (e.id,),
                    e.through,
                )
        elif curve.radius > FARTHEST:
            yield Fault(
                f"the arc of edge {e.id} has a radius of {curve.radius:.3g} mm",
                "make the edge straight, or move its arc point farther to the side",
                field,
                (e.id,),
                e.through,
            )


def _point_faults(p: Point, name: str, id_: str, field: str) -> Iterator[Fault]:
    if not (math.isfinite(p[0]) and math.isfinite(p[1])):
        yield _not_a_number(name, id_, field)
    elif max(abs(p[0]), abs(p[1])) > FARTHEST:
        yield Fault(
            f"{name} lies at ({p[0]:.4g}, {p[1]:.4g}) mm",
            f"keep all coordinates under {FARTHEST:,.0f} mm".replace(",", " "),
            field,
            (id_,),
        )


def _not_a_number(name: str, id_: str, field: str, at: Point | None = None) -> Fault:
    return Fault(f"{name} is not a finite number", "give a finite number in mm", field, (id_,), at)


def length_fault(
    value: float, name: str, hole: CircleHole | SlotHole, attribute: str, group: str = "holes"
) -> Iterator[Fault]:
    """The fault of a hole's or zone's size, if it has one."""
    field, at = f"{group}.{hole.id}.{attribute}", finite_point(hole.centre)
    if not math.isfinite(value):
        yield _not_a_number(name, hole.id, field, at)
    elif value < SMALLEST or value > FARTHEST:
        yield Fault(
            f"{name} is {value:g} mm",
            f"give a {attribute} between {SMALLEST:g} and {FARTHEST:,.0f} mm".replace(",", " "),
            field,
            (hole.id,),
            at,
        )


def finite_point(p: Point) -> Point | None:
    """The point, or None if it cannot be drawn."""
    return p if math.isfinite(p[0]) and math.isfinite(p[1]) else None
