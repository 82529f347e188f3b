"""Counts, pitches and radii of hole patterns that are wrong by themselves."""

from __future__ import annotations

import dataclasses
import math
from collections.abc import Iterator

from screenapp.model.errors import Fault
from screenapp.model.extents import FARTHEST, SMALLEST
from screenapp.model.part import CircleHole, Hole, LoopHole, SlotHole, Zone
from screenapp.model.pattern import MOST_MEMBERS, size_of

COUNTS = frozenset({"count", "columns", "rows"})
"""The whole numbers of a pattern."""

ANGLES = frozenset({"angle", "start"})
"""The angles of a pattern."""


def zone_pattern_faults(zone: Zone) -> Iterator[Fault]:
    """A zone is never repeated: overlapping members would have no order."""
    if isinstance(zone.form, CircleHole | SlotHole) and zone.form.pattern is not None:
        yield Fault(
            f"zone {zone.id} is a pattern",
            "break the pattern up first, or draw the zones one by one",
            f"zones.{zone.id}",
            (zone.id,),
        )


def pattern_faults(hole: Hole) -> Iterator[Fault]:
    """What is wrong with a hole's pattern by itself; a pitch may run backwards, a radius not."""
    if isinstance(hole, LoopHole) or hole.pattern is None:
        return
    pattern = hole.pattern
    at = hole.centre if all(map(math.isfinite, hole.centre)) else None

    def fault(cause: str, mend: str, name: str = "") -> Fault:
        field = f"holes.{hole.id}.pattern"
        return Fault(cause, mend, f"{field}.{name}" if name else field, (hole.id,), at)

    if size_of(pattern) > MOST_MEMBERS:
        yield fault(f"pattern {hole.id} has {size_of(pattern)} holes", f"keep to {MOST_MEMBERS}")
    for name in (f.name for f in dataclasses.fields(pattern)):
        value = getattr(pattern, name)
        words = f"the {name.replace('_', ' ')} of pattern {hole.id}"
        if not math.isfinite(value):
            yield fault(f"{words} is not a finite number", "give a finite number", name)
        elif name in COUNTS:
            if value < 1:
                yield fault(f"{words} is {value}", "give a whole number from 1", name)
        elif name not in ANGLES and not SMALLEST <= abs(value) <= FARTHEST:
            most = f"{FARTHEST:,.0f}".replace(",", " ")
            mend = f"give a length between {SMALLEST:g} and {most} mm"
            yield fault(f"{words} is {value:g} mm", mend, name)
        elif name == "radius" and value < 0.0:
            yield fault(f"{words} is {value:g} mm", "give a radius above zero", name)
