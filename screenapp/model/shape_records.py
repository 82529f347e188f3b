"""What is drawn: corners and edges of closed loops, holes, zones.

Lengths are in mm, angles in degrees (counter-clockwise from +x).  A closed loop is a ring of
corners; `edges[i]` runs from `corners[i]` to `corners[i + 1]` (the last edge closes the ring)::

        c4 ----e3---- c3
        |              |
        e4            e2          edges[i] joins corners[i] and corners[i + 1]
        |              |
        c1 ----e1---- c2

A fillet is a property (`round`) of a corner.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

from screenapp.model.pattern import Pattern

Point = tuple[float, float]

ZoneSides = Literal["both", "one"]


@dataclass(frozen=True)
class Corner:
    """A corner of a loop at `at` [mm], where its two edges would meet.

    It is sharp, or rounded by a fillet of radius `round` [mm], or cut off by a chamfer that takes
    `chamfer` [mm] of both edges; not both.
    """

    id: str
    at: Point
    round: float = 0.0
    chamfer: float = 0.0

    @property
    def sharp(self) -> bool:
        """Whether the two edges meet in the corner itself."""
        return self.round == 0.0 and self.chamfer == 0.0


@dataclass(frozen=True)
class Edge:
    """An edge of a loop: straight, or the circular arc that passes `through` a point [mm]."""

    id: str
    through: Point | None = None


@dataclass(frozen=True)
class Loop:
    """A closed ring; `edges[i]` joins `corners[i]` to `corners[(i + 1) % n]`; n >= 2 (an arc)."""

    corners: tuple[Corner, ...]
    edges: tuple[Edge, ...]


@dataclass(frozen=True)
class CircleHole:
    """A round hole: centre [mm] and diameter [mm]; with a pattern, many of them."""

    id: str
    centre: Point
    diameter: float
    pattern: Pattern | None = None


@dataclass(frozen=True)
class SlotHole:
    """A slot with round ends: overall `length` [mm] >= `width` [mm], axis at `angle` [deg].

    With a pattern, many of them.
    """

    id: str
    centre: Point
    length: float
    width: float
    angle: float = 0.0
    pattern: Pattern | None = None


@dataclass(frozen=True)
class LoopHole:
    """A hole of any form, bounded by a loop with corners and edges of its own."""

    id: str
    loop: Loop


Hole = CircleHole | SlotHole | LoopHole


@dataclass(frozen=True)
class Zone:
    """A stretch of the wall with a thickness or material of its own: a pad, a pocket, a rib.

    The screening takes its middle plane to be that of the wall, which is so where the thickness is
    on both sides.  What of it lies outside the part does not count; where zones overlap, the later
    one of the list wins.

    Attributes:
        form: the closed form, as of a hole; it bears the zone's id.
        thickness: [mm], None for the wall's.
        material: name of its material, None for the wall's.
        name: what the user calls it, may be empty.
        axis: direction of the 1-axis of an orthotropic material [deg] from +x, None for the wall's.
        sides: whether what its thickness adds or takes away is on both sides of the wall alike or
            on one only; None where it is not said.
    """

    form: CircleHole | SlotHole | LoopHole
    thickness: float | None = None
    material: str | None = None
    name: str = ""
    sides: ZoneSides | None = None
    axis: float | None = None

    @property
    def id(self) -> str:
        """The id, unique in the part."""
        return self.form.id
