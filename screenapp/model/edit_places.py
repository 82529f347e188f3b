"""Taking away an outline or a hole, and with it what stood on it."""

from __future__ import annotations

from collections.abc import Collection, Mapping
from dataclasses import replace

from screenapp.model.edit_rules import Outcome, must_find
from screenapp.model.members import member_ids
from screenapp.model.misfits import without_orphans
from screenapp.model.part import BodyLoad, BoltSupport, JointLimit, LoopHole, Part, Support
from screenapp.model.support_records import stands_on


def moved_references(part: Part, to: Mapping[str, str]) -> Part:
    """Supports, loads and limits on the keys of `to` put on its values; the places stay."""
    supports = tuple(_moved(s, to) for s in part.supports)
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


def _moved(support: Support, to: Mapping[str, str]) -> Support:
    if not any(on in to for on in stands_on(support)):
        return support
    first, *others = dict.fromkeys(to.get(on, on) for on in stands_on(support))
    if isinstance(support, BoltSupport):
        return replace(support, on=first, also=tuple(others))
    return replace(support, on=first)


def _left(support: Support, places: Collection[str]) -> Support | None:
    """What is left of a support when places go; None if nothing is."""
    kept = tuple(on for on in stands_on(support) if on not in places)
    if not isinstance(support, BoltSupport):
        return support if kept else None
    return replace(support, on=kept[0], also=kept[1:]) if kept else None


def drop_from_places(part: Part, places: Collection[str]) -> Outcome:
    """Remove the supports, loads and limits on any of the places, not the places themselves."""
    lost: list[str] = []
    supports = []
    for support in part.supports:
        left = _left(support, places)
        if left is not None:
            supports.append(left)
        if left != support:
            gone_from = [on for on in stands_on(support) if on in places]
            lost.append(f"support {support.id} on {' and '.join(gone_from)}")
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
    now = replace(part, supports=tuple(supports), cases=tuple(cases), limits=limits)
    now, orphans = without_orphans(now)
    return Outcome(now, (*lost, *orphans))


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
