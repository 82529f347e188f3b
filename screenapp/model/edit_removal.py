"""Removing anything that bears an id."""

from __future__ import annotations

from dataclasses import replace

from screenapp.model.edit_combinations import without_case
from screenapp.model.edit_loops import remove_corner
from screenapp.model.edit_patterns import must_be_whole
from screenapp.model.edit_places import remove_hole, remove_outline
from screenapp.model.edit_rules import EditError, Outcome, must_find, without_stale_formulas
from screenapp.model.edit_zones import remove_zone
from screenapp.model.features import find, loops_of
from screenapp.model.misfits import without_orphans
from screenapp.model.part import FatigueLimit, Part


def remove(part: Part, *ids: str) -> Outcome:
    """Remove everything named: corners, holes, zones, supports, loads, cases, limits, probes.

    Of several ids those that go with another one are passed over.  A loop of which so many
    corners are named that nothing would be left goes as a whole.

    Raises:
        EditError: an id that nothing bears, an edge (its corners are what can be removed), or one
            member of a pattern.
    """
    for id_ in ids:
        if must_find(part, id_).kind == "edge":
            raise EditError(
                f"edge {id_} cannot be removed by itself", "remove one of the corners at its ends"
            )
        must_be_whole(part, id_)
    now = part
    lost: list[str] = []
    for where, owner, loop in loops_of(part):
        named = [c.id for c in loop.corners if c.id in ids]
        if named and len(loop.corners) - len(named) < 2:
            if where.startswith("zones"):
                outcome = Outcome(remove_zone(now, owner))
            else:
                outcome = remove_hole(now, owner) if owner else remove_outline(now)
            now, lost = outcome.part, [*lost, *outcome.lost]
    for id_ in ids:
        if find(now, id_) is not None:
            outcome = _remove_one(now, id_)
            now, lost = outcome.part, [*lost, *outcome.lost]
    asked = {word for word in lost if any(word.split()[1] == id_ for id_ in ids)}
    return Outcome(
        without_stale_formulas(part, now), tuple(word for word in lost if word not in asked)
    )


def _remove_one(part: Part, id_: str) -> Outcome:
    kind = must_find(part, id_).kind
    if kind == "corner":
        return remove_corner(part, id_)
    if kind == "hole":
        return remove_hole(part, id_)
    if kind == "zone":
        return Outcome(remove_zone(part, id_))
    if kind == "support":
        left = replace(part, supports=tuple(s for s in part.supports if s.id != id_))
        return Outcome(*without_orphans(left))
    if kind == "limit":
        return Outcome(replace(part, limits=tuple(g for g in part.limits if g.id != id_)))
    if kind == "probe":
        return Outcome(replace(part, readings=tuple(p for p in part.readings if p.id != id_)))
    if kind == "cut":
        return Outcome(replace(part, cuts=tuple(c for c in part.cuts if c.id != id_)))
    if kind == "load":
        cases = tuple(
            replace(c, loads=tuple(x for x in c.loads if x.id != id_)) for c in part.cases
        )
        return Outcome(replace(part, cases=cases))
    if kind == "combination":
        part, judged = _without_fatigue(part, id_)
        left = replace(part, combinations=tuple(c for c in part.combinations if c.id != id_))
        return Outcome(left, judged)
    gone = next(c for c in part.cases if c.id == id_)
    part, combined = without_case(part, id_)
    lost = tuple(f"load {x.id} of case “{gone.name}”" for x in gone.loads)
    part, judged = _without_fatigue(part, id_)
    left = replace(part, cases=tuple(c for c in part.cases if c.id != id_))
    return Outcome(left, lost + combined + judged)


def _without_fatigue(part: Part, case: str) -> tuple[Part, tuple[str, ...]]:
    """The part without the fatigue limits that a case or combination is an end of."""
    gone = [g for g in part.limits if isinstance(g, FatigueLimit) and case in (g.case, g.other)]
    kept = tuple(g for g in part.limits if g not in gone)
    return replace(part, limits=kept), tuple(f"limit {g.id} on case {case}" for g in gone)
