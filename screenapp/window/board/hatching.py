"""45° hatching of zones whose numbers are not to be trusted, at constant screen pitch."""

from __future__ import annotations

from dataclasses import dataclass

from PySide6.QtCore import QPointF, Qt
from PySide6.QtGui import QBrush, QColor, QImage, QPainter, QPainterPath, QPen

from screenapp.window import theme
from screenapp.window.board.frame import Frame
from screenapp.window.board.screen_item import Z_MESH, ScreenItem

PITCH = 7
"""Distance of the hatch lines along a row [px]."""


@dataclass(frozen=True, eq=False)
class Zone:
    """A region [mm] with the name of the theme's colour that it is hatched in."""

    path: QPainterPath
    colour: str
    dashed: bool  # outline dashed (unsettled) or solid (rising)


class HatchItem(ScreenItem):
    """Hatches zones and draws their rims."""

    def __init__(self) -> None:
        super().__init__(Z_MESH + 5)
        self._zones: tuple[Zone, ...] = ()

    def show_zones(self, zones: tuple[Zone, ...]) -> None:
        """Hatch these zones and no others."""
        self._zones = zones
        self.update()

    @property
    def zones(self) -> tuple[Zone, ...]:
        """What is hatched."""
        return self._zones

    def draw(self, painter: QPainter, frame: Frame) -> None:
        """Paint the hatching, anchored to the part so that it moves with it."""
        painter.setRenderHint(QPainter.RenderHint.Antialiasing)
        device = painter.device()
        ratio = device.devicePixelRatioF() if device is not None else 1.0
        origin = frame.px((0.0, 0.0))
        # whole pixels keep the lines as crisp as they were made
        anchor = QPointF(round(origin.x()) % PITCH, round(origin.y()) % PITCH)
        for zone in self._zones:
            path = frame.transform.map(zone.path)
            colour = theme.colour(zone.colour)
            painter.setBrushOrigin(anchor)
            painter.fillPath(path, hatch_brush(colour, ratio))
            style = Qt.PenStyle.DashLine if zone.dashed else Qt.PenStyle.SolidLine
            painter.strokePath(path, QPen(colour, 1.2, style))


def hatch_brush(colour: QColor, ratio: float = 1.0) -> QBrush:
    """A brush of smooth 45° lines, rising to the right."""
    size = round(PITCH * ratio)
    image = QImage(size, size, QImage.Format.Format_ARGB32_Premultiplied)
    image.fill(Qt.GlobalColor.transparent)
    painter = QPainter(image)
    painter.setRenderHint(QPainter.RenderHint.Antialiasing)
    painter.setPen(QPen(colour, 1.1 * ratio))
    for shift in (-size, 0, size):  # neighbours bring in the cut-off corners
        painter.drawLine(QPointF(shift - 1, size + 1), QPointF(shift + size + 1, -1))
    painter.end()
    brush = QBrush(image)
    if ratio != 1.0:
        transform = brush.transform()
        transform.scale(PITCH / size, PITCH / size)
        brush.setTransform(transform)
    return brush
