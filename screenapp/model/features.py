"""What each id of a part stands for, and the words that name it.

Supports, loads, limits and readings point at corners, edges and holes by id; this module is the
one place that looks ids up.  It takes any part, also one with faults: of two things that bear the
same id the first one is found.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass, replace
from typing import Literal

from screenapp.model.loop_curves import loop_curves, sharp_places
from screenapp.model.members import member_ids, members, whole_id
from screenapp.model.part import (
    BodyLoad,
    Case,
    CircleHole,
    Combination,
    Corner,
    Cut,
    Edge,
    Hole,
    Limit,
    Load,
    Loop,
    LoopHole,
    Part,
    Probe,
    SlotHole,
    Support,
    Zone,
)
from screenapp.model.pattern import BoltCircle, GridPattern, RowPattern
from screenapp.model.support_records import stands_on

Kind = Literal[
    "corner",
    "edge",
    "hole",
    "zone",
    "support",
    "case",
    "combination",
    "load",
    "limit",
    "probe",
    "cut",
]
Record = Corner | Edge | Hole | Zone | Support | Case | Load | Limit | Probe | Cut | Combination

PREFIXES: dict[Kind, str] = {
    "corner": "c",
    "edge": "e",
    "hole": "h",
    "zone": "z",
    "support": "s",
    "case": "k",
    "load": "l",
    "limit": "g",
    "probe": "p",
    "cut": "x",
    "combination": "m",
}
"""The letter that ids made by this program begin with."""


PATTERN_WORDS: dict[type, str] = {
    RowPattern: "row of holes",
    GridPattern: "grid of holes",
    BoltCircle: "bolt circle",
}
"""What each pattern of holes is called."""


@dataclass(frozen=True)
class Found:
    """What an id stands for.

    Attributes:
        kind: what sort of thing it is.
        record: the record itself.
        owner: id of the hole or zone for a corner or edge of its loop, of the whole for a member
            of a pattern, of the case for a load; else "".
        group: dotted path of the list in the part file that holds it.
    """

    kind: Kind
    record: Record
    owner: str
    group: str

    @property
    def field(self) -> str:
        """Dotted path of the record in the part file, e.g. "outline.corners.c4"."""
        return f"{self.group}.{whole_id(self.record.id)}"

    @property
    def inside(self) -> bool:
        """Whether it is a zone or belongs to one: inside the part, where nothing can stand."""
        return self.group.startswith("zones")


def everything(part: Part) -> Iterator[Found]:
    """All things of a part that bear an id, outline first, in the order of the part file."""
    for where, owner, loop in loops_of(part):
        corners, edges = f"{where}.corners", f"{where}.edges"
        for corner in loop.corners:
            yield Found("corner", corner, owner, corners)
        for edge in loop.edges:
            yield Found("edge", edge, owner, edges)
    for hole in part.holes:
        yield Found("hole", hole, "", "holes")
        if member_ids(hole):
            for member in members(hole):
                yield Found("hole", member, hole.id, "holes")
    for zone in part.zones:
        yield Found("zone", zone, "", "zones")
    for support in part.supports:
        yield Found("support", support, "", "supports")
    for case in part.cases:
        yield Found("case", case, "", "cases")
        for load in case.loads:
            yield Found("load", load, case.id, f"cases.{case.id}.loads")
    for combination in part.combinations:
        yield Found("combination", combination, "", "combinations")
    for limit in part.limits:
        yield Found("limit", limit, "", "limits")
    for probe in part.readings:
        yield Found("probe", probe, "", "readings")
    for cut in part.cuts:
        yield Found("cut", cut, "", "readings")


def ids_of(part: Part) -> Iterator[str]:
    """The ids of `everything`, members of patterns left out (theirs follow from the whole's)."""
    for _, _, loop in loops_of(part):
        yield from (c.id for c in loop.corners)
        yield from (e.id for e in loop.edges)
    cases = part.cases
    groups = (
        part.holes,
        part.zones,
        part.supports,
        cases,
        part.combinations,
        part.limits,
        part.readings,
        part.cuts,
    )
    for group in groups:
        yield from (one.id for one in group)
    yield from (load.id for case in cases for load in case.loads)


def loops_of(part: Part) -> Iterator[tuple[str, str, Loop]]:
    """Field, owner's id ("" for the outline, else a hole or zone) and loop of all that is drawn
    as a loop."""
    if part.outline is not None:
        yield "outline", "", part.outline
    for hole in part.holes:
        if isinstance(hole, LoopHole):
            yield f"holes.{hole.id}", hole.id, hole.loop
    for zone in part.zones:
        if isinstance(zone.form, LoopHole):
            yield f"zones.{zone.id}", zone.id, zone.form.loop


Places = dict[str, Found]
"""Corners, edges and holes on the boundary of a part by id, as far as they are asked for."""


def places_of(part: Part) -> Places:
    """The places on the boundary that supports and loads stand on, by id.

    Of two things with one id the first counts; those of a zone are not on the boundary.
    """
    wanted = {on for s in part.supports for on in stands_on(s)}
    wanted |= {x.on for c in part.cases for x in c.loads if not isinstance(x, BodyLoad)}
    places: Places = {}
    if not wanted:
        return places
    for where, owner, loop in loops_of(part):
        if where.startswith("zones"):
            continue
        for kind, records in (("corner", loop.corners), ("edge", loop.edges)):
            for record in records:
                if record.id in wanted:
                    found = Found(kind, record, owner, f"{where}.{kind}s")  # type: ignore[arg-type]
                    places.setdefault(record.id, found)
    for hole in part.holes:
        for one in (hole, *members(hole)):
            if one.id in wanted:
                owner = "" if one.id == hole.id else hole.id
                places.setdefault(one.id, Found("hole", one, owner, "holes"))
    return places


def find(part: Part, id_: str) -> Found | None:
    """What `id_` stands for in the part, None if nothing bears it.

    The two ends of a chamfer ("c4.1", "c4.2") are found as sharp corners.
    """
    for where, owner, loop in loops_of(part):  # thousands of corners: looked through plainly
        for corner in loop.corners:
            if corner.id == id_:
                return Found("corner", corner, owner, f"{where}.corners")
        for edge in loop.edges:
            if edge.id == id_:
                return Found("edge", edge, owner, f"{where}.edges")
    for hole in part.holes:
        if hole.id == id_:
            return Found("hole", hole, "", "holes")
        if hole.id == whole_id(id_):
            for member in members(hole):
                if member.id == id_:
                    return Found("hole", member, hole.id, "holes")
    bare = replace(part, outline=None, holes=())
    found = next((found for found in everything(bare) if found.record.id == id_), None)
    return found if found is not None or "." not in id_ else _chamfer_end(part, id_)


def _chamfer_end(part: Part, id_: str) -> Found | None:
    corner = whole_id(id_)
    for where, owner, loop in loops_of(part):
        if any(c.id == corner and c.chamfer for c in loop.corners):
            for name, at in sharp_places(loop, loop_curves(loop, where, [])):
                if name == id_:
                    return Found("corner", Corner(id_, at), owner, f"{where}.corners")
    return None


def place_name(part: Part, id_: str) -> str:
    """The words for an id: "edge e3", "hole h1", "corner c2", "fillet c3", "support s1" ...

    An id that nothing bears is given back as it is, in quotes.
    """
    found = find(part, id_)
    return f"“{id_}”" if found is None else name_of(found)


def name_of(found: Found) -> str:
    """The words for something found: "edge e3", "fillet c3" for a rounded corner ..."""
    record = found.record
    if isinstance(record, Corner) and not record.sharp:
        return f"{'fillet' if record.round != 0.0 else 'chamfer'} {record.id}"
    if isinstance(record, CircleHole | SlotHole) and record.pattern is not None:
        return f"{PATTERN_WORDS[type(record.pattern)]} {record.id}"
    return f"{found.kind} {record.id}"


def hole_word(hole: Hole) -> str:
    """What a hole is in one or two words: "round hole", "slot" or "hole"."""
    if isinstance(hole, CircleHole):
        return "round hole"
    return "slot" if isinstance(hole, SlotHole) else "hole"


def edges_at(loop: Loop, corner: str) -> tuple[Edge, Edge] | None:
    """The edges that end and begin at a corner; None if the loop is broken or has no such one."""
    if len(loop.corners) != len(loop.edges):
        return None
    for i, c in enumerate(loop.corners):
        if c.id == corner:
            return loop.edges[i - 1], loop.edges[i]
    return None
