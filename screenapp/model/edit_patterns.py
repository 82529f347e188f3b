"""Edits of regular patterns of holes: repeat a hole, change how, break the pattern up."""

from __future__ import annotations

import dataclasses
from dataclasses import replace
from typing import Any

from screenapp.model.edit_places import drop_from_places, moved_references
from screenapp.model.edit_rules import EditError, Outcome, must_find, new_ids, settle
from screenapp.model.members import Shareable, member_ids, members, patterned, shared, whole_id
from screenapp.model.part import (
    BodyLoad,
    BoltSupport,
    Case,
    CircleHole,
    Hole,
    Load,
    MisfitLoad,
    Part,
    SlotHole,
    Support,
)
from screenapp.model.pattern import Pattern
from screenapp.model.pattern_faults import COUNTS
from screenapp.model.support_records import stands_on


def set_pattern(part: Part, hole: str, pattern: Pattern | None) -> Outcome:
    """Repeat a round hole or slot, change how it is repeated, or leave only the first (None).

    What is on a hole that is not repeated yet stays on the first member; what is on a member that
    is no more goes with it.

    Raises:
        EditError: a hole with corners of its own, or a pattern with a count or size that cannot be.
    """
    record = _whole(part, hole)
    changed = replace(record, pattern=pattern)
    after = replace(part, holes=tuple(changed if h.id == record.id else h for h in part.holes))
    old, new = member_ids(record), member_ids(changed)
    after = settle(part, after)
    if not old and new:
        return Outcome(moved_references(after, {record.id: new[0]}))
    if old and not new:
        after = moved_references(after, {old[0]: record.id})
    return drop_from_places(after, set(old) - set(new))


def change_pattern(part: Part, hole: str, **numbers: float) -> Outcome:
    """Change counts, pitches, radius or angles of a hole's pattern.

    Raises:
        EditError: a number that this pattern has not, or that makes no sense.
    """
    record = _whole(part, hole)
    if record.pattern is None:
        raise EditError(f"hole {record.id} is not repeated", "make it a row, grid or bolt circle")
    names = {f.name for f in dataclasses.fields(record.pattern)}
    values: dict[str, Any] = {}
    for name, value in numbers.items():
        if name not in names:
            raise EditError(f"pattern {record.id} has no {name}", f"it has {', '.join(names)}")
        if name in COUNTS and value != round(value):
            raise EditError(
                f"the {name} of pattern {record.id} would be {value:g}", "give a whole number"
            )
        values[name] = round(value) if name in COUNTS else float(value)
    return set_pattern(part, record.id, replace(record.pattern, **values))


def break_pattern(part: Part, hole: str) -> Part:
    """Make the members of a pattern holes of their own; the first keeps the pattern's id.

    What is on a member stays on it.  A support on all is put on each; so is a load, a total force
    in equal shares.
    """
    record = _whole(part, hole)
    if record.pattern is None:
        raise EditError(f"hole {record.id} is not repeated", "choose a pattern")
    holes = members(record)
    ids = [record.id, *new_ids(part, "h", len(holes) - 1)]
    single: list[Hole] = [replace(h, id=id_) for h, id_ in zip(holes, ids, strict=True)]
    at = next(i for i, h in enumerate(part.holes) if h.id == record.id)
    after = replace(part, holes=(*part.holes[:at], *single, *part.holes[at + 1 :]))
    mapping = dict(zip((h.id for h in holes), ids, strict=True))
    return settle(part, moved_references(_spread(after, record, ids), mapping))


def _spread(part: Part, hole: Hole, ids: list[str]) -> Part:
    """Supports and loads on the whole pattern, put on each of the holes with these ids."""
    supports: list[Support] = []
    became: dict[str, list[str]] = {}
    for support in part.supports:
        if isinstance(support, BoltSupport) and hole.id in stands_on(support):
            first, *others = [
                each for on in stands_on(support) for each in (ids if on == hole.id else [on])
            ]
            supports.append(replace(support, on=first, also=tuple(others)))
            continue
        if support.on != hole.id:
            supports.append(support)
            continue
        names = [support.id, *_fresh(part, "s", len(ids) - 1, [s.id for s in supports])]
        supports += [replace(support, id=n, on=on) for n, on in zip(names, ids, strict=True)]
        became[support.id] = names
    part = replace(part, supports=tuple(supports))
    cases: list[Case] = []
    for number, case in enumerate(part.cases):
        loads: list[Load] = []
        for load in case.loads:
            used = [x.id for c in cases for x in c.loads] + [x.id for x in loads]
            if isinstance(load, MisfitLoad) and load.support in became:
                mine = became[load.support]
                names = [load.id, *_fresh(part, "l", len(mine) - 1, used)]
                loads += [replace(load, id=n, support=s) for s, n in zip(mine, names, strict=True)]
                continue
            if isinstance(load, BodyLoad) or load.on != hole.id:
                loads.append(load)
                continue
            names = [load.id, *_fresh(part, "l", len(ids) - 1, used)]
            total = isinstance(load, Shareable)
            shares = shared(load, hole) if total else [load] * len(ids)  # type: ignore[arg-type]
            loads += [
                replace(share, id=n, on=on) for share, n, on in zip(shares, names, ids, strict=True)
            ]
        cases.append(replace(part.cases[number], loads=tuple(loads)))
    return replace(part, cases=tuple(cases))


def _fresh(part: Part, prefix: str, count: int, used: list[str]) -> list[str]:
    """As `new_ids`, beyond those that were given out already."""
    taken = set(used)
    found = [i for i in new_ids(part, prefix, count + len(used)) if i not in taken]
    return found[:count]


def _whole(part: Part, hole: str) -> CircleHole | SlotHole:
    record = must_find(part, whole_id(hole), "hole").record
    if not isinstance(record, CircleHole | SlotHole):
        raise EditError(
            f"hole {hole} has corners of its own and cannot be repeated", "copy and paste it"
        )
    return record


def must_be_whole(part: Part, id_: str) -> None:
    """Refuse to do to one member of a pattern what concerns the whole.

    Raises:
        EditError: `id_` is a member of a pattern.
    """
    found = must_find(part, id_)
    if found.kind == "hole" and patterned_owner(part, found.owner):
        raise EditError(
            f"hole {id_} is one of pattern {found.owner}",
            "change the pattern's count, or break it up first",
        )


def patterned_owner(part: Part, owner: str) -> bool:
    """Whether an id is that of a pattern."""
    return any(h.id == owner and patterned(h) for h in part.holes)
