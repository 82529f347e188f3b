"""The record of a snap: where a click would land, and what drew it there."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

from screenapp.model.part import Point

SnapKind = Literal[
    "none",
    "grid",
    "corner",
    "centre",
    "middle",
    "edge",
    "start",
    "intersection",
    "tangent",
    "perpendicular",
    "horizontal",
    "vertical",
]


@dataclass(frozen=True)
class Snap:
    """Where a click would land.

    Attributes:
        kind: what drew it there.
        at: the place [mm].
        id: id of the corner, edge or hole; "" for grid and nothing.
        along: direction of the edge there [rad], for the sign.
        to: places that it is in line with [mm], for the sign.
    """

    kind: SnapKind
    at: Point
    id: str = ""
    along: float = 0.0
    to: tuple[Point, ...] = ()

    @property
    def words(self) -> str:
        """The snap in force, for the corner of the board."""
        if self.kind == "none":
            return "off"
        if self.kind in ("horizontal", "vertical") and self.id:
            return f"{self.kind} from {self.id}"
        if self.kind in ("tangent", "perpendicular"):
            return f"{self.kind} to {self.id}"
        return self.kind
