"""The pieces that symbols of supports and loads are made of, in pixels."""

from __future__ import annotations

import math
from dataclasses import dataclass, field, replace
from typing import Literal

import numpy as np
from PySide6.QtCore import QPointF

from screenapp.model.boundary_curve import BoundaryCurve
from screenapp.model.edge_parts import WHOLE, Span, runs_backward
from screenapp.model.part import Point
from screenapp.window.board.drawn_part import DrawnPart
from screenapp.window.board.frame import Floats, Frame

HEAD = 8.0
"""Length of an arrow head [px]."""

MOST_SIGNS = 400
"""Signs along one edge; more only stand outside the view."""

SCREEN = 6000.0
"""Signs farther out than this [px] are left out."""


@dataclass(eq=False)
class Mark:
    """The symbol of one support or load.

    Attributes:
        id: of the support or load.
        kind: which of them.
        lines: polylines (n, 2) [px].
        fills: filled polygons (n, 2) [px].
        circles: centre [px] and radius [px].
        label: its value in words, drawn at `label_at` [px].
    """

    id: str
    kind: Literal["support", "load"]
    lines: list[Floats] = field(default_factory=list)
    fills: list[Floats] = field(default_factory=list)
    circles: list[tuple[Floats, float]] = field(default_factory=list)
    label: str = ""
    label_at: QPointF = field(default_factory=QPointF)

    def line(self, *points: Floats) -> None:
        """Add a polyline."""
        self.lines.append(np.array(points, dtype=float))

    def circle(self, centre: Floats, radius: float) -> None:
        """Add a circle."""
        self.circles.append((centre, radius))

    def arrow(self, tail: Floats, tip: Floats, head: float = HEAD) -> None:
        """Add an arrow with a filled head."""
        gap = tip - tail
        length = float(np.hypot(*gap))
        if length < 1e-6:
            return
        d = gap / length
        head = min(head, length)
        neck = tip - head * d
        side = 0.38 * head * np.array([-d[1], d[0]])
        self.line(tail, neck)
        self.fills.append(np.array([tip, neck + side, neck - side]))

    def say(self, text: str, at: Floats) -> None:
        """Put the label."""
        self.label, self.label_at = text, QPointF(float(at[0]), float(at[1]))


@dataclass(frozen=True, eq=False)
class Stations:
    """Places along a boundary: positions, outward normals and tangents [px], each (n, 2)."""

    at: Floats
    out: Floats
    along: Floats

    def __len__(self) -> int:
        return len(self.at)


def stations(
    drawn: DrawnPart,
    frame: Frame,
    feature: str,
    gap: float,
    ends: bool = False,
    span: Span = WHOLE,
) -> Stations:
    """Places about `gap` px apart along an edge or rim, or the `span` of an edge; with `ends`, also
    at both ends."""
    at: list[Floats] = []
    out: list[Floats] = []
    along: list[Floats] = []
    pieces = spanned(drawn, feature, span)
    for i, piece in enumerate(pieces):
        n = max(1, min(MOST_SIGNS, round(piece.curve.length * frame.scale / gap)))
        if ends:
            closed = len(pieces) > 1 and span == WHOLE
            t = np.linspace(0.0, 1.0, n + 1)[: n if closed or i < len(pieces) - 1 else n + 1]
        else:
            t = (np.arange(n) + 0.5) / n
        tangent = piece.curve.tangent(t)
        at.append(frame.pxs(piece.curve.point(t)))
        out.append(np.stack([tangent[:, 1], tangent[:, 0]], axis=-1))  # to the right; y is down
        along.append(np.stack([tangent[:, 0], -tangent[:, 1]], axis=-1))
    if not at:
        empty = np.empty((0, 2))
        return Stations(empty, empty, empty)
    found = Stations(np.concatenate(at), np.concatenate(out), np.concatenate(along))
    seen = (np.abs(found.at) < SCREEN).all(axis=1)
    return Stations(found.at[seen], found.out[seen], found.along[seen])


def spanned(drawn: DrawnPart, feature: str, span: Span) -> tuple[BoundaryCurve, ...]:
    """The pieces of a feature, cut off where a span of it begins and ends."""
    pieces = drawn.pieces_of(feature)
    if span == WHOLE or len(pieces) != 1:
        return pieces
    (piece,) = pieces
    whole = piece.curve.length
    start = min(max(span[0] or 0.0, 0.0), whole)
    end = whole if span[1] is None else min(max(span[1], 0.0), whole)
    if end - start < 1e-9 * whole:
        return pieces
    if runs_backward(drawn.part, feature):
        start, end = whole - end, whole - start
    return (replace(piece, curve=piece.curve.part(start / whole, end / whole)),)


def middle(
    drawn: DrawnPart, frame: Frame, feature: str, span: Span = WHOLE
) -> tuple[Floats, Floats] | None:
    """Position and outward direction [px] of the one place that stands for a feature.

    An edge's middle; a hole's centre (outward is down); a corner with the direction away from the
    part.
    """
    if feature in drawn.holes:
        centre = frame.pxs(drawn.centre_of(drawn.holes[feature]))
        return centre, np.array([0.0, 1.0])
    if feature in drawn.corners:
        at = drawn.corners[feature].at
        return frame.pxs(at), corner_outward(drawn, at)
    pieces = spanned(drawn, feature, span)
    if not pieces:
        return None
    curve = pieces[len(pieces) // 2].curve
    tangent = curve.tangent(0.5)
    return frame.pxs(curve.point(0.5)), np.array([tangent[1], tangent[0]])


def corner_outward(drawn: DrawnPart, at: Point) -> Floats:
    """Direction [px] away from the part at a corner: between the outward normals beside it."""
    total = np.zeros(2)
    for piece in drawn.pieces:
        for t, end in ((0.0, piece.curve.start), (1.0, piece.curve.end)):
            if math.dist(end, at) < 1e-9:
                tangent = piece.curve.tangent(t)
                total += (tangent[1], tangent[0])
    length = float(np.hypot(*total))
    return total / length if length > 1e-9 else np.array([0.0, 1.0])


def radius_px(drawn: DrawnPart, frame: Frame, feature: str) -> float:
    """Half the smaller extent of a hole's rim [px]; infinite for what is no hole."""
    if feature not in drawn.holes:
        return math.inf
    ring = drawn.polyline(drawn.hole_ids.index(feature), 0.05)
    if not len(ring):
        return math.inf
    return float((ring.max(axis=0) - ring.min(axis=0)).min()) / 2.0 * frame.scale


def to_px(x: float, y: float) -> Floats | None:
    """The direction of a vector on the screen, None if it has none."""
    length = math.hypot(x, y)
    return np.array([x, -y]) / length if length > 0.0 else None
