"""Starts the window."""

from __future__ import annotations

import os
import sys
from pathlib import Path

from PySide6.QtCore import QTimer
from PySide6.QtGui import QGuiApplication
from PySide6.QtWidgets import QApplication

from screenapp import __version__
from screenapp.meshing.service import Mesher
from screenapp.model.errors import ScreenappError
from screenapp.screening.screen import screen
from screenapp.window import theme
from screenapp.window.main_window import MainWindow
from screenapp.window.settings import Settings
from screenapp.window.style import dress


def run(path: Path | None) -> int:
    """Open the window, on the part in `path` if given, and stay until it is closed.

    Raises:
        ScreenappError: there is no display.
    """
    _check_display()
    app = QApplication.instance()
    if not isinstance(app, QApplication):
        app = QApplication(sys.argv[:1])
    app.setApplicationName("screenapp")
    app.setApplicationVersion(__version__)
    settings = Settings()
    theme.choose(settings.theme)
    dress(app)
    window = MainWindow(screen, Mesher, settings)
    app.aboutToQuit.connect(window.screener.shut_down)
    window.show()
    if path is not None:
        QTimer.singleShot(0, window, lambda: window.files.open(path))
    return app.exec()


def _check_display() -> None:
    """Qt ends the process by itself where there is no display: say it in words before."""
    if not sys.platform.startswith("linux") or QGuiApplication.instance() is not None:
        return
    named = os.environ.get("QT_QPA_PLATFORM", "")
    if named and not named.startswith(("xcb", "wayland")):
        return
    if not (os.environ.get("DISPLAY") or os.environ.get("WAYLAND_DISPLAY")):
        raise ScreenappError(
            "there is no display to open a window on",
            "start it in a desktop session, or screen without a window: screenapp screen FILE",
        )
