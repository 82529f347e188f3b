"""For tests of the window: nothing that one test has opened lives on into the next."""

from __future__ import annotations

from collections.abc import Iterator

import pytest
from PySide6.QtCore import QCoreApplication, QEvent
from PySide6.QtWidgets import QApplication


@pytest.fixture(autouse=True)
def no_widget_outlives_its_test() -> Iterator[None]:
    """Delete top-level widgets: each change of the style sheet goes over all that live."""
    yield
    app = QApplication.instance()
    if not isinstance(app, QApplication):
        return
    for widget in app.topLevelWidgets():
        if widget.parent() is None:
            widget.close()
            widget.deleteLater()
    QCoreApplication.sendPostedEvents(None, QEvent.Type.DeferredDelete)
