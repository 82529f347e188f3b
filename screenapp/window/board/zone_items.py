"""Zones on the board: a tint of the wall, its edge as a thin dashed line, and its thickness."""

from __future__ import annotations

import numpy as np
from PySide6.QtCore import QPointF, Qt
from PySide6.QtGui import QBrush, QColor, QPainter, QPainterPath, QPen, QPolygonF

from screenapp.model.part import Part, Zone
from screenapp.window import theme
from screenapp.window.board import sketch
from screenapp.window.board.drawn_part import DrawnPart
from screenapp.window.board.frame import Frame, polygon
from screenapp.window.board.naming import zone_words
from screenapp.window.board.part_item import SAGITTA_PX, PartPaths, mixed
from screenapp.window.board.ring import flatten
from screenapp.window.board.screen_item import Z_FILL, Z_OUTLINE, ScreenItem

THICKER, THINNER, EVEN = 0.2, 0.025, 0.07
"""Share of the accent colour in the tint of thicker and thinner zones, and in that of the wall."""

LABEL_FROM = 34.0
"""Zones narrower than this on the screen bear no words [px]."""


class _ZoneItem(ScreenItem):
    """What both layers share: the part, and the forms of its zones in pixels."""

    def __init__(self, z: float, paths: PartPaths) -> None:
        super().__init__(z)  # type: ignore[arg-type]
        self.drawn: DrawnPart | None = None
        self._paths = paths

    def show_part(self, drawn: DrawnPart) -> None:
        """Paint the zones of this part from now on."""
        self.drawn = drawn
        self.update()

    def _forms(self, frame: Frame) -> list[tuple[Zone, QPolygonF]]:
        drawn = self.drawn
        if drawn is None:
            return []
        forms = []
        for zone, ring in zip(drawn.part.zones, drawn.zone_rings, strict=True):
            if not ring.pieces:
                continue
            lines = [flatten(p.curve, SAGITTA_PX / frame.scale) for p in ring.pieces]
            whole = polygon(frame.pxs(np.concatenate(lines)))
            if not whole.isEmpty():
                forms.append((zone, whole))
        return forms

    def _part_path(self, frame: Frame) -> QPainterPath:
        """The part in pixels, holes left out."""
        assert self.drawn is not None
        shift = self._paths.settle(self.drawn, frame)
        return self._paths.whole.translated(shift)


class ZoneFillItem(_ZoneItem):
    """Thicker zones are darker than the wall, thinner ones lighter, other materials hatched; the
    results are painted over it."""

    def __init__(self, paths: PartPaths) -> None:
        super().__init__(Z_FILL + 1, paths)

    def draw(self, painter: QPainter, frame: Frame) -> None:
        """Tint what of each zone lies in the part; later zones cover earlier ones."""
        forms = self._forms(frame)
        if not forms or self.drawn is None or self.drawn.part.outline is None:
            return
        painter.setClipPath(self._part_path(frame))
        palette = theme.current()
        for zone, form in forms:
            path = QPainterPath()
            path.addPolygon(form)
            share = _share(self.drawn.part, zone)
            painter.fillPath(path, mixed(palette.paper, palette.accent, share))
            if zone.material not in (None, self.drawn.part.wall.material):
                hatch = QColor(palette.quiet)
                hatch.setAlphaF(0.45)
                painter.fillPath(path, QBrush(hatch, Qt.BrushStyle.BDiagPattern))


class ZoneLineItem(_ZoneItem):
    """Edges of zones over the results, and in the Shape lens their thickness in words."""

    def __init__(self, paths: PartPaths) -> None:
        super().__init__(Z_OUTLINE - 1, paths)
        self.selected: tuple[str, ...] = ()
        self.hovered: str | None = None
        self.labels = True

    def draw(self, painter: QPainter, frame: Frame) -> None:
        """Dashed lines in the part, faint ones where the form reaches beyond it."""
        forms = self._forms(frame)
        if not forms or self.drawn is None:
            return
        painter.setRenderHint(QPainter.RenderHint.Antialiasing)
        palette = theme.current()
        part_path = self._part_path(frame)
        for zone, form in forms:
            lit = self._lit(zone.id)
            painter.setBrush(Qt.BrushStyle.NoBrush)
            painter.setPen(_dashed(QColor(palette.faint), 1.0))
            painter.drawPolygon(form)  # all of it, so that it can be taken where it reaches out
            painter.save()
            painter.setClipPath(part_path)
            painter.setPen(_dashed(QColor(palette.ink), 1.2))
            painter.drawPolygon(form)
            painter.restore()
            if lit:
                painter.setPen(_solid(QColor(palette.accent if lit == "chosen" else palette.ink)))
                painter.drawPolygon(form)
        if self.labels:
            self._draw_labels(painter, forms, part_path)

    def _draw_labels(
        self, painter: QPainter, forms: list[tuple[Zone, QPolygonF]], part_path: QPainterPath
    ) -> None:
        assert self.drawn is not None
        palette = theme.current()
        for k, (zone, form) in enumerate(forms):
            path = QPainterPath()
            path.addPolygon(form)
            seen = path.intersected(part_path)
            for _, later in forms[k + 1 :]:
                over = QPainterPath()
                over.addPolygon(later)
                seen = seen.subtracted(over)
            box = seen.boundingRect()
            if min(box.width(), box.height()) >= LABEL_FROM:
                at = _room_in(seen)
                sketch.label(painter, zone_words(zone, self.drawn.part), at, palette.ink)

    def _lit(self, zone: str) -> str:
        if zone in self.selected:
            return "chosen"
        return "hovered" if self.hovered == zone else ""


def _share(part: Part, zone: Zone) -> float:
    thickness = part.wall.thickness if zone.thickness is None else zone.thickness
    if thickness == part.wall.thickness:
        return EVEN
    return THICKER if thickness > part.wall.thickness else THINNER


def _room_in(path: QPainterPath) -> QPointF:
    """A place in a form that has room for words: its middle, or beside a hole there."""
    box = path.boundingRect()
    middle = box.center()
    best, most = middle, -1.0
    for i in range(1, 8):
        for j in range(1, 8):
            at = QPointF(box.left() + box.width() * i / 8.0, box.top() + box.height() * j / 8.0)
            if not path.contains(at):
                continue
            room = min(
                (
                    reach
                    for reach in (10.0, 20.0, 30.0, 40.0)
                    if not all(
                        path.contains(at + QPointF(dx * reach, dy * 0.5 * reach))
                        for dx, dy in ((1, 0), (-1, 0), (0, 1), (0, -1))
                    )
                ),
                default=50.0,
            )
            room -= 0.02 * (abs(at.x() - middle.x()) + abs(at.y() - middle.y()))
            if room > most:
                best, most = at, room
    return best


def _dashed(colour: QColor, width: float) -> QPen:
    pen = QPen(colour, width)
    pen.setDashPattern([6.0, 3.0])
    return pen


def _solid(colour: QColor) -> QPen:
    pen = QPen(colour, 2.5)
    pen.setJoinStyle(Qt.PenJoinStyle.RoundJoin)
    return pen
