"""Taking away an outline or a hole, and with it what stood on it."""

from __future__ import annotations

from collections.abc import Collection, Mapping
from dataclasses import replace

from screenapp.model.edit_rules import Outcome, must_find
from screenapp.model.members import member_ids
from screenapp.model.misfits import without_orphans
from screenapp.model.part import BodyLoad, JointLimit, LoopHole, Part


def moved_references(part: Part, to: Mapping[str, str]) -> Part:
    """Supports, loads and limits on the keys of `to` put on its values; the places stay."""
    supports = tuple(replace(s, on=to[s.on]) if s.on in to else s for s in part.supports)
    cases = tuple(
        replace(
            case,
            loads=tuple(
                replace(x, on=to[x.on]) if not isinstance(x, BodyLoad) and x.on in to else x
                for x in case.loads
            ),
        )
        for case in part.cases
    )
    limits = tuple(
        replace(g, on=to[g.on]) if isinstance(g, JointLimit) and g.on in to else g
        for g in part.limits
    )
    return replace(part, supports=supports, cases=cases, limits=limits)


def drop_from_places(part: Part, places: Collection[str]) -> Outcome:
    """Remove the supports, loads and limits on any of the places, not the places themselves."""
    lost: list[str] = []
    supports = []
    for support in part.supports:
        if support.on in places:
            lost.append(f"support {support.id} on {support.on}")
        else:
            supports.append(support)
    cases = []
    for case in part.cases:
        gone = [x for x in case.loads if not isinstance(x, BodyLoad) and x.on in places]
        lost += [f"load {x.id} on {x.on} (case “{case.name}”)" for x in gone]
        loads = tuple(x for x in case.loads if x not in gone)
        cases.append(replace(case, loads=loads) if gone else case)
    gone_limits = [g for g in part.limits if isinstance(g, JointLimit) and g.on in places]
    lost += [f"limit {g.id} on {g.on}" for g in gone_limits]
    limits = tuple(g for g in part.limits if g not in gone_limits)
    if not lost:
        return Outcome(part)
    left = replace(part, supports=tuple(supports), cases=tuple(cases), limits=limits)
    left, orphans = without_orphans(left)
    return Outcome(left, (*lost, *orphans))


def remove_outline(part: Part) -> Outcome:
    """Take the outline away with the supports and loads on it; holes stay."""
    if part.outline is None:
        return Outcome(part)
    outline = part.outline
    places = {c.id for c in outline.corners} | {e.id for e in outline.edges}
    bare = drop_from_places(part, places)
    return Outcome(replace(bare.part, outline=None), bare.lost)


def remove_hole(part: Part, hole: str) -> Outcome:
    """Take a hole away with the supports and loads on it."""
    record = must_find(part, hole, "hole").record
    places = {hole, *member_ids(record)}  # type: ignore[arg-type]
    if isinstance(record, LoopHole):
        places |= {c.id for c in record.loop.corners} | {e.id for e in record.loop.edges}
    bare = drop_from_places(part, places)
    holes = tuple(h for h in part.holes if h.id != hole)
    return Outcome(replace(bare.part, holes=holes), bare.lost)
