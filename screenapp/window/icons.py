"""The program's own line icons, drawn in the theme's colour."""

from __future__ import annotations

from functools import lru_cache

from PySide6.QtCore import QByteArray, QRectF, Qt
from PySide6.QtGui import QIcon, QPainter, QPixmap
from PySide6.QtSvg import QSvgRenderer

from screenapp.model import assets

SIZES = (20, 40, 60)
"""Sizes drawn [px]: for screens at 100, 200 and 300 %."""


@lru_cache(maxsize=256)
def icon(name: str, colour: str) -> QIcon:
    """The icon `resources/icons/<name>.svg` with its lines in `colour` (#rrggbb).

    Raises:
        ScreenappError: there is no such icon.
    """
    source = assets.resource(f"icons/{name}.svg").read_text(encoding="utf-8")
    text = source.replace("currentColor", colour)
    renderer = QSvgRenderer(QByteArray(text.encode()))
    made = QIcon()
    for size in SIZES:
        pixmap = QPixmap(size, size)
        pixmap.fill(Qt.GlobalColor.transparent)
        painter = QPainter(pixmap)
        renderer.render(painter, QRectF(0, 0, size, size))
        painter.end()
        made.addPixmap(pixmap)
    return made
