"""An arc of a chain that runs on smoothly from the edge before it."""

from __future__ import annotations

import math
from typing import ClassVar

from PySide6.QtGui import QPainter

from screenapp.model.curves import Arc, Curve, tangent_arc
from screenapp.model.part import Point
from screenapp.window.board import sketch
from screenapp.window.board.frame import Frame
from screenapp.window.board.tools.chain import LinesTool


class TangentArcTool(LinesTool):
    """Only the end is given: the arc leaves in the direction in which the edge before arrives."""

    name: ClassVar[str] = "Tangent arc"
    key: ClassVar[str] = "T"
    line: ClassVar[str] = "After an edge of a chain: click the end of an arc that runs on smoothly."
    icon: ClassVar[str] = "tangent-arc"
    group: ClassVar[str] = "arcs"

    def hint(self) -> str:
        """What the next click does."""
        if self.direction() is None:
            return "Click two places for the straight edge that the arc runs on from."
        return "Click the end of the arc."

    def direction(self) -> float | None:
        """In which direction the chain arrives at its last place [rad]; None before an edge."""
        edges = self.draft.edges()
        if not edges:
            return None
        x, y = edges[-1].tangent(1.0)
        return math.atan2(float(y), float(x))

    def curve_to(self, at: Point) -> Curve | None:
        """The edge that a click would add."""
        way = self.direction()
        return None if way is None else tangent_arc(self.draft.points[-1], way, at)

    def accept_point(self, at: Point) -> None:
        """The end of the arc; before the first edge, the ends of that."""
        curve = self.curve_to(at)
        if not isinstance(curve, Arc):
            super().accept_point(at)
            return
        x, y = curve.point(0.5)
        through = float(x), float(y)
        if self.draft.can_close_by_arc and math.dist(at, self.draft.points[0]) < 1e-9:
            self.close(through)
        elif math.dist(at, self.draft.points[-1]) > 1e-9:
            self.draft.throughs.append(through)
            self.draft.points.append(self.keep(at))

    def paint_next(self, painter: QPainter, frame: Frame, at: Point) -> None:
        """The arc that a click would add, with its radius."""
        curve = self.curve_to(at)
        if curve is None or not math.isfinite(curve.length) or curve.length == 0.0:
            super().paint_next(painter, frame, at)
            return
        sketch.curve(painter, frame, curve, dashed=True)
        if isinstance(curve, Arc):
            x, y = curve.point(0.5)
            text = sketch.arc_text(curve, self.canvas.part.display_units)
            sketch.label(painter, text, frame.px((float(x), float(y))))
