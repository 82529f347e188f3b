"""The holes that are cut: patterns unfolded into their members, each a plain hole.

A member's id is the pattern's id, a full stop and the member's name; ids of drawn things have no
full stop, so the two never meet.
"""

from __future__ import annotations

from dataclasses import replace
from functools import lru_cache

from screenapp.model.part import (
    BearingLoad,
    BoltSupport,
    Case,
    CircleHole,
    ForceLoad,
    Hole,
    Load,
    LoopHole,
    MomentLoad,
    Part,
    PointLoad,
    SlotHole,
)
from screenapp.model.pattern import stations
from screenapp.model.support_records import stands_on


def whole_id(id_: str) -> str:
    """The id of the pattern (or chamfered corner) that a derived id belongs to; else the id.

    Example:
        >>> whole_id("h4.2-3"), whole_id("e7")
        ('h4', 'e7')
    """
    return id_.partition(".")[0]


@lru_cache(maxsize=4096)
def members(hole: Hole) -> tuple[Hole, ...]:
    """The plain holes of a pattern; a hole without one is its own only member."""
    if isinstance(hole, LoopHole) or hole.pattern is None:
        return (hole,)
    made: list[Hole] = []
    for station in stations(hole.pattern):
        id_ = f"{hole.id}.{station.name}"
        centre = hole.centre[0] + station.x, hole.centre[1] + station.y
        if isinstance(hole, SlotHole):
            turned = hole.angle + station.turn
            made.append(replace(hole, id=id_, centre=centre, angle=turned, pattern=None))
        else:
            made.append(replace(hole, id=id_, centre=centre, pattern=None))
    return tuple(made)


def all_holes(part: Part) -> tuple[Hole, ...]:
    """Every hole that is cut, patterns unfolded, in the order of the part file."""
    global _latest
    given, made = _latest
    if given is not part.holes:
        given = part.holes
        made = tuple(member for hole in given for member in members(hole))
        _latest = (
            given,
            made,
        )  # one assignment: a thread that reads meanwhile sees the old or the new
    return made


_latest: tuple[tuple[Hole, ...], tuple[Hole, ...]] = ((), ())
"""The holes last unfolded; most edits of a part keep them all, and many ask for them."""


def patterned(hole: object) -> bool:
    """Whether a record is a hole with a pattern."""
    return isinstance(hole, CircleHole | SlotHole) and hole.pattern is not None


def member_ids(hole: Hole) -> tuple[str, ...]:
    """Ids of a pattern's members; none for a hole without one."""
    return tuple(m.id for m in members(hole)) if patterned(hole) else ()


def bolt_holes(part: Part, support: BoltSupport) -> tuple[CircleHole, ...]:
    """The round holes that a group of bolts is in, patterns unfolded."""
    wanted = stands_on(support)
    return tuple(
        member
        for id_ in wanted
        for hole in part.holes
        if hole.id == whole_id(id_)
        for member in members(hole)
        if isinstance(member, CircleHole) and id_ in (hole.id, member.id)
    )


def spread_loads(part: Part, case: Case) -> tuple[Load, ...]:
    """The loads of a case as they act: a pin's force or moment on a whole pattern is shared evenly
    by its members, and a force on a patch is one spread over that part of its edge."""
    wholes = {h.id: h for h in part.holes if patterned(h)}
    loads: list[Load] = []
    for load in case.loads:
        if isinstance(load, BearingLoad | MomentLoad) and load.on in wholes:
            loads += shared(load, wholes[load.on])
        elif isinstance(load, PointLoad) and load.along is not None and load.patch is not None:
            begin, end = load.along - 0.5 * load.patch, load.along + 0.5 * load.patch
            loads.append(ForceLoad(load.id, load.on, load.x, load.y, begin, end))
        else:
            loads.append(load)
    return tuple(loads)


Shareable = BearingLoad | ForceLoad | MomentLoad
"""Loads of which the holes of a pattern take equal shares."""


def shared(load: Shareable, hole: Hole) -> list[Shareable]:
    """The load's equal shares, one on each member; their ids are the load's."""
    ids = member_ids(hole)
    n = len(ids)
    if isinstance(load, MomentLoad):
        return [replace(load, on=id_, moment=load.moment / n) for id_ in ids]
    return [replace(load, on=id_, x=load.x / n, y=load.y / n) for id_ in ids]
