"""What lies under the cursor."""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import Literal, Protocol

from PySide6.QtCore import QPointF

from screenapp.model.part import Point
from screenapp.window.board.cut_item import nearest_cut
from screenapp.window.board.drawn_part import DrawnPart
from screenapp.window.board.frame import Frame

HitKind = Literal[
    "corner",
    "edge",
    "fillet",
    "chamfer",
    "hole",
    "zone",
    "support",
    "load",
    "probe",
    "cut",
]

POINT_PX, LINE_PX = 9.0, 7.0
"""How near the cursor must be to a point and to a line [px]."""


@dataclass(frozen=True)
class Hit:
    """Something under the cursor.

    Attributes:
        kind: what it is; a fillet bears the id of its corner.
        id: its id.
        at: the nearest place on it [mm].
    """

    kind: HitKind
    id: str
    at: Point


class SymbolFinder(Protocol):
    """Whatever knows where symbols stand on the screen."""

    def nearest(self, px: QPointF, frame: Frame, within: float) -> tuple[HitKind, str] | None:
        """Kind and id of the nearest symbol that is nearer than `within` [px]."""
        ...


def hit_test(
    drawn: DrawnPart, frame: Frame, px: QPointF, symbols: SymbolFinder | None = None
) -> Hit | None:
    """The thing under the cursor at `px`, None if there is none.

    Points come before lines and symbols, the nearer of which counts, these before lines of zones,
    and these before the inside of a hole or zone.
    """
    at = frame.mm(px)
    if (point := _nearest_probe(drawn, frame, at) or _nearest_corner(drawn, frame, at)) is not None:
        return point
    piece = nearest_piece(drawn, at, LINE_PX / frame.scale)
    near = math.inf if piece is None else math.dist(piece.at, at) * frame.scale
    if symbols is not None and (symbol := symbols.nearest(px, frame, min(near, LINE_PX - 2.0))):
        return Hit(*symbol, at)
    line = piece or _zone_line(drawn, frame, at) or _cut_at(drawn, frame, at)
    return line or _hole_around(drawn, at) or zone_around(drawn, at)


def nearest_piece(drawn: DrawnPart, at: Point, reach: float) -> Hit | None:
    """The edge, fillet or rim within `reach` [mm] of a place, with the nearest place on it."""
    foot = drawn.index.nearest(at)
    if foot is None or foot.far > reach:
        return None
    return Hit(foot.piece.kind, foot.piece.feature, foot.at)


def _cut_at(drawn: DrawnPart, frame: Frame, at: Point) -> Hit | None:
    found = nearest_cut(drawn.part, at, LINE_PX / frame.scale)
    return None if found is None else Hit("cut", found[0].id, found[1])


def _nearest_probe(drawn: DrawnPart, frame: Frame, at: Point) -> Hit | None:
    reach = POINT_PX / frame.scale
    near = [p for p in drawn.part.readings if math.dist(p.at, at) <= reach]
    if not near:
        return None
    probe = min(near, key=lambda p: math.dist(p.at, at))
    return Hit("probe", probe.id, probe.at)


def _nearest_corner(drawn: DrawnPart, frame: Frame, at: Point) -> Hit | None:
    reach = POINT_PX / frame.scale
    near = [c for c in drawn.corners.values() if c.sharp and math.dist(c.at, at) <= reach]
    if not near:
        return None
    corner = min(near, key=lambda c: math.dist(c.at, at))
    return Hit("corner", corner.id, corner.at)


def _zone_line(drawn: DrawnPart, frame: Frame, at: Point) -> Hit | None:
    foot = drawn.zone_index.nearest(at) if drawn.zone_rings else None
    if foot is None or foot.far > LINE_PX / frame.scale:
        return None
    return Hit("zone", drawn.zone_of(foot.piece.feature), foot.at)


def zone_edge(drawn: DrawnPart, frame: Frame, at: Point) -> str:
    """The edge of a zone drawn as a loop that is near a place; "" for none."""
    foot = drawn.zone_index.nearest(at) if drawn.zone_rings else None
    if foot is None or foot.far > LINE_PX / frame.scale or foot.piece.kind != "edge":
        return ""
    return foot.piece.feature


def zone_around(drawn: DrawnPart, at: Point) -> Hit | None:
    """The zone at a place of the wall: the last one that holds it."""
    if drawn.zone_rings and drawn.inside(at):
        for zone, ring in zip(drawn.part.zones[::-1], drawn.zone_rings[::-1], strict=True):
            if ring.inside(at):
                return Hit("zone", zone.id, at)
    return None


def _hole_around(drawn: DrawnPart, at: Point) -> Hit | None:
    for loop, hole_id in enumerate(drawn.hole_ids):
        if hole_id is not None and drawn.inside(at, loop):
            return Hit("hole", hole_id, at)
    return None
