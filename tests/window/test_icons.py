"""The icon loader and the icons of the drawing tools."""

from __future__ import annotations

import pytest
from PySide6.QtCore import QSize
from pytestqt.qtbot import QtBot

from screenapp.model.assets import resource
from screenapp.model.errors import ScreenappError
from screenapp.window.icons import icon

NAMES = sorted(path.stem for path in resource("icons").glob("*.svg"))


@pytest.mark.parametrize("name", NAMES)
def test_an_icon_is_drawn_in_the_colour_asked_for(qtbot: QtBot, name: str) -> None:
    image = icon(name, "#ff0000").pixmap(QSize(40, 40), 1.0).toImage()
    colours = [image.pixelColor(x, y) for x in range(image.width()) for y in range(image.height())]
    solid = [c for c in colours if c.alpha() == 255]
    assert len(solid) > 20
    assert all((c.red(), c.green(), c.blue()) == (255, 0, 0) for c in solid)
    assert colours[0].alpha() == 0


def test_an_icon_that_is_not_there_is_told(qtbot: QtBot) -> None:
    with pytest.raises(ScreenappError, match="no-such-icon"):
        icon("no-such-icon", "#000000")
