"""Regular patterns of holes: a row, a grid or a bolt circle, kept as one thing.

Lengths in mm, angles in degrees counter-clockwise from +x.  A hole with a pattern stands once in
the part file; its members bear ids derived from its own ("h4.1", "h4.2", in a grid "h4.2-3" for
row 2, column 3), so that a support or load points at one member or at all, and another count moves
none of them to another hole.
"""

from __future__ import annotations

import math
from dataclasses import dataclass

MOST_MEMBERS = 1000
"""No pattern may have more members."""


@dataclass(frozen=True)
class RowPattern:
    """`count` holes `pitch` [mm] apart in the direction `angle` [deg]; the first at the centre."""

    count: int
    pitch: float
    angle: float = 0.0


@dataclass(frozen=True)
class GridPattern:
    """`columns` × `rows` holes, the first at the centre.

    Columns are `pitch_x` [mm] apart along `angle` [deg], rows `pitch_y` [mm] apart across it.
    """

    columns: int
    rows: int
    pitch_x: float
    pitch_y: float
    angle: float = 0.0


@dataclass(frozen=True)
class BoltCircle:
    """`count` holes evenly round the centre on a circle of `radius` [mm]; the first at `start`.

    `start` [deg] is counter-clockwise from +x; slots turn with their place.
    """

    count: int
    radius: float
    start: float = 0.0


Pattern = RowPattern | GridPattern | BoltCircle


@dataclass(frozen=True)
class Station:
    """Where one member stands.

    Attributes:
        name: what its id has after the dot: "3", in a grid "2-3".
        x, y: from the hole's centre [mm].
        turn: how far it is turned [deg].
    """

    name: str
    x: float
    y: float
    turn: float = 0.0


def size_of(pattern: Pattern) -> int:
    """How many members a pattern has."""
    if isinstance(pattern, GridPattern):
        return max(0, pattern.columns) * max(0, pattern.rows)
    return max(0, pattern.count)


def stations(pattern: Pattern) -> tuple[Station, ...]:
    """Every member, in the order of their names; none beyond `MOST_MEMBERS`.

    Example:
        >>> [s.name for s in stations(GridPattern(2, 2, 10.0, 10.0))]
        ['1-1', '1-2', '2-1', '2-2']
    """
    if size_of(pattern) > MOST_MEMBERS:
        return ()
    if isinstance(pattern, BoltCircle):
        made = []
        for i in range(pattern.count):
            turn = 360.0 * i / pattern.count
            x, y = _polar(pattern.radius, pattern.start + turn)
            made.append(Station(str(i + 1), x, y, turn))
        return tuple(made)
    c, s = _polar(1.0, pattern.angle)
    if isinstance(pattern, RowPattern):
        steps = [(str(i + 1), i * pattern.pitch, 0.0) for i in range(pattern.count)]
    else:
        steps = [
            (f"{row + 1}-{column + 1}", column * pattern.pitch_x, row * pattern.pitch_y)
            for row in range(pattern.rows)
            for column in range(pattern.columns)
        ]
    return tuple(Station(name, a * c - b * s, a * s + b * c) for name, a, b in steps)


def _polar(radius: float, angle: float) -> tuple[float, float]:
    """x, y at an angle [deg]; exact at the quarters, so that a level row stays level."""
    if not math.isfinite(angle):
        return math.nan, math.nan
    quarter = angle / 90.0
    if quarter == round(quarter):
        c, s = ((1.0, 0.0), (0.0, 1.0), (-1.0, 0.0), (0.0, -1.0))[round(quarter) % 4]
    else:
        c, s = math.cos(math.radians(angle)), math.sin(math.radians(angle))
    return radius * c, radius * s
