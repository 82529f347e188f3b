"""What lies under the cursor."""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass
from typing import Literal

import numpy as np
from PySide6.QtCore import QPointF

from screenapp.model.part import Point
from screenapp.window.board.drawn_part import DrawnPart
from screenapp.window.board.frame import Floats, Frame

HitKind = Literal["corner", "edge", "fillet", "hole", "support", "load", "probe"]

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


@dataclass(frozen=True, eq=False)
class Clickable:
    """A symbol as it stands on the screen: polylines (n, 2) [px] that may be clicked."""

    kind: HitKind
    id: str
    lines: tuple[Floats, ...]


def hit_test(
    drawn: DrawnPart, frame: Frame, px: QPointF, symbols: Sequence[Clickable] = ()
) -> Hit | None:
    """The thing under the cursor at `px`, None if there is none.

    Points come before lines and symbols, the nearer of which counts, and these before the inside
    of a hole.
    """
    at = frame.mm(px)
    if (point := _nearest_probe(drawn, frame, at) or _nearest_corner(drawn, frame, at)) is not None:
        return point
    piece = nearest_piece(drawn, at, LINE_PX / frame.scale)
    near = math.inf if piece is None else math.dist(piece.at, at) * frame.scale
    symbol = _nearest_symbol(symbols, px, at, near)
    return symbol or piece or _hole_around(drawn, at)


def nearest_piece(drawn: DrawnPart, at: Point, reach: float) -> Hit | None:
    """The edge, fillet or rim within `reach` [mm] of a place, with the nearest place on it."""
    best: tuple[float, Hit] | None = None
    for piece in drawn.pieces:
        x, y = piece.curve.point(piece.curve.nearest(at))
        far = math.dist((x, y), at)
        if far <= reach and (best is None or far < best[0]):
            best = far, Hit(piece.kind, piece.feature, (float(x), float(y)))
    return best[1] if best else None


def _nearest_probe(drawn: DrawnPart, frame: Frame, at: Point) -> Hit | None:
    reach = POINT_PX / frame.scale
    near = [p for p in drawn.part.readings if math.dist(p.at, at) <= reach]
    if not near:
        return None
    probe = min(near, key=lambda p: math.dist(p.at, at))
    return Hit("probe", probe.id, probe.at)


def _nearest_corner(drawn: DrawnPart, frame: Frame, at: Point) -> Hit | None:
    reach = POINT_PX / frame.scale
    near = [c for c in drawn.corners.values() if c.round == 0.0 and math.dist(c.at, at) <= reach]
    if not near:
        return None
    corner = min(near, key=lambda c: math.dist(c.at, at))
    return Hit("corner", corner.id, corner.at)


def _nearest_symbol(
    symbols: Sequence[Clickable], px: QPointF, at: Point, within: float
) -> Hit | None:
    """The nearest symbol, if it is nearer than `within` [px]."""
    best: tuple[float, Hit] | None = None
    p = np.array([px.x(), px.y()])
    for symbol in symbols:
        far = min((_distance_to(line, p) for line in symbol.lines), default=math.inf)
        if far <= LINE_PX - 2.0 and far < within and (best is None or far < best[0]):
            best = far, Hit(symbol.kind, symbol.id, at)
    return best[1] if best else None


def _distance_to(line: Floats, p: Floats) -> float:
    """Distance from a point to a polyline (n, 2)."""
    if len(line) == 1:
        return float(np.hypot(*(line[0] - p)))
    a, d = line[:-1], np.diff(line, axis=0)
    lengths = np.einsum("ij,ij->i", d, d)
    t = np.clip(np.einsum("ij,ij->i", p - a, d) / np.where(lengths > 0.0, lengths, 1.0), 0.0, 1.0)
    return float(np.hypot(*(a + t[:, None] * d - p).T).min())


def _hole_around(drawn: DrawnPart, at: Point) -> Hit | None:
    for loop, hole_id in enumerate(drawn.hole_ids):
        if hole_id is not None and drawn.inside(at, loop):
            return Hit("hole", hole_id, at)
    return None
