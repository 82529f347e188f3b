"""The record's table of statics: what the loads of each case amount to, and what each support
gives."""

from __future__ import annotations

import math
from typing import Literal

from screenapp.model.findings import CaseFindings
from screenapp.model.part import DisplayUnits
from screenapp.model.solution import BoltForce
from screenapp.model.units import format_number, format_quantity, unit_label

ROUNDING = 1e-9
"""Share of the largest force (or moment) of a case below which another one is written as 0."""

DIGITS = 5


def balance_heads(units: DisplayUnits) -> tuple[str, str, str]:
    """Heads of the three columns of figures, with their units."""
    force, moment = unit_label("force", units), unit_label("moment", units)
    return f"x {force}", f"y {force}", f"moment about the origin {moment}"


def balance_rows(case: CaseFindings, units: DisplayUnits) -> list[tuple[str, tuple[str, ...]]]:
    """Rows of a case: whose, and its force along x and y and its moment about the origin.

    A single load is the sum itself and has no row of its own, unless it is none at all.  The bolts
    of a group follow it.
    """
    rows: list[tuple[str, tuple[float, ...]]] = [("loads together", case.applied)]
    rows += [
        (f"of which load {r.load}" + ("" if r.at else ", no force"), (r.x, r.y, r.moment))
        for r in case.loads
        if len(case.loads) > 1 or r.at is None
    ]
    for r in case.reactions:
        rows.append((f"support {r.support} gives", (r.x, r.y, r.moment)))
        rows += [(_bolt(b, units), (b.x, b.y)) for b in r.bolts]
    force = max(abs(value) for _whose, row in rows for value in row[:2])
    moment = max(abs(row[2]) for _whose, row in rows if len(row) > 2)
    return [
        (
            whose,
            (
                _figure(row[0], force, "force", units),
                _figure(row[1], force, "force", units),
                _figure(row[2], moment, "moment", units) if len(row) > 2 else "",
            ),
        )
        for whose, row in rows
    ]


def _bolt(bolt: BoltForce, units: DisplayUnits) -> str:
    """Which bolt of a group, and the size of its force."""
    size = format_quantity(math.hypot(bolt.x, bolt.y), "force", units)
    return f"its bolt in {bolt.on}, {size}"


def _figure(
    value: float, largest: float, kind: Literal["force", "moment"], units: DisplayUnits
) -> str:
    said = 0.0 if abs(value) <= ROUNDING * largest else value
    return format_number(said, kind, units, DIGITS)
