"""Long loops worked out lately, so that moving a corner works out its neighbourhood only.

An edit keeps the records of all corners and edges that it does not change, so two loops are
compared by the identity of theirs.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import replace

from screenapp.model.boundary_curve import BoundaryCurve
from screenapp.model.errors import Fault
from screenapp.model.part import Edge, Loop

Group = list[BoundaryCurve]
"""The pieces of one edge: the cut of the corner before it, then what is left of the edge."""

LONG = 64
"""Loops with fewer corners are worked out at once anyway."""

MOST_CHANGED = 30
"""A stretch of changed corners may be this long."""

AROUND = 4
"""A corner's change reaches its neighbours' fillets and what these leave of the edges beyond; two
more corners on either side make these neighbours whole."""


class RecentLoops:
    """The last few long loops without a fault, with the pieces of each of their edges."""

    def __init__(self, most: int = 6) -> None:
        self._most = most
        self._kept: tuple[tuple[Loop, list[Group]], ...] = ()

    def keep(self, loop: Loop, groups: list[Group]) -> None:
        """Remember a loop; its groups must not be changed any more."""
        if len(loop.corners) >= LONG:
            # one assignment, so that a thread that reads meanwhile sees the old or the new
            self._kept = ((loop, groups), *self._kept[: self._most - 1])

    def pieces_of(
        self,
        loop: Loop,
        where: str,
        faults: list[Fault],
        work_out: Callable[[Loop, str, list[Fault]], list[Group]],
    ) -> list[Group] | None:
        """The pieces of a loop that is kept, or differs from one in a short stretch; else None.

        What does not fit in that stretch is added to `faults`; the rest is sound, as it was.
        """
        if len(loop.corners) < LONG:
            return None
        for old, groups in self._kept:
            if old is loop:
                return groups
        for old, groups in self._kept:
            span = _changed_stretch(old, loop)
            if span is not None:
                return self._patched(loop, groups, span, where, faults, work_out)
        return None

    def _patched(
        self,
        loop: Loop,
        groups: list[Group],
        span: tuple[int, int],
        where: str,
        faults: list[Fault],
        work_out: Callable[[Loop, str, list[Fault]], list[Group]],
    ) -> list[Group] | None:
        first, last = span
        base, stop = first - AROUND, last + AROUND
        corners = list(loop.corners[base : stop + 1])
        for end in (0, -1):
            corners[end] = replace(corners[end], round=0.0, chamfer=0.0)
        edges = (*loop.edges[base:stop], Edge("", None))  # the last one only closes the ring
        found: list[Fault] = []
        made = work_out(Loop(tuple(corners), edges), where, found)
        if found:
            if any("" in fault.ids for fault in found):  # of the edge that only closes the ring
                return None
            faults += found
            return []
        patched = list(groups)
        patched[first - 2 : last + 2] = made[first - 2 - base : last + 2 - base]
        self.keep(loop, patched)
        return patched


def _changed_stretch(old: Loop, new: Loop) -> tuple[int, int] | None:
    """First and last corner that differ (those of a changed edge too); None if none or too many."""
    n = len(new.corners)
    if len(old.corners) != n or len(old.edges) != n or len(new.edges) != n:
        return None
    changed = [i for i, c in enumerate(new.corners) if c is not old.corners[i]]
    for i, edge in enumerate(new.edges):
        if edge is not old.edges[i]:
            changed += [i, i + 1]
    if not changed:
        return None
    first, last = min(changed), max(changed)
    room = first >= AROUND and last + AROUND < n
    return (first, last) if room and last - first < MOST_CHANGED else None
