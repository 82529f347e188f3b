"""A hand that works the board with real mouse and key events, and parts to work on."""

from __future__ import annotations

from PySide6.QtCore import QPoint, Qt
from PySide6.QtTest import QTest
from PySide6.QtWidgets import QApplication, QWidget

from screenapp.model.part import (
    CircleHole,
    Corner,
    Edge,
    Loop,
    Material,
    Part,
    Point,
    Wall,
)
from screenapp.window.board.board import Board
from screenapp.window.document import Document

NONE = Qt.KeyboardModifier.NoModifier
LEFT = Qt.MouseButton.LeftButton


def ring(*places: Point, first: int = 1) -> Loop:
    """A loop of straight edges."""
    return Loop(
        tuple(Corner(f"c{first + i}", p) for i, p in enumerate(places)),
        tuple(Edge(f"e{first + i}") for i in range(len(places))),
    )


def plate() -> Part:
    """100 × 60 mm with a round hole of 20 mm in the middle; edges e1 below, e2 right, e3, e4."""
    return Part(
        outline=ring((0.0, 0.0), (100.0, 0.0), (100.0, 60.0), (0.0, 60.0)),
        holes=(CircleHole("h1", (50.0, 30.0), 20.0),),
        wall=Wall(3.0, "Steel"),
        materials=(Material("Steel", 210e3, 0.3, 7850.0, 235.0),),
    )


class Hand:
    """Clicks, drags and types on a board that is shown at 1000 × 700 px."""

    def __init__(self, part: Part | None = None) -> None:
        self.document = Document(part)
        self.board = Board(self.document)
        self.canvas = self.board.canvas
        self.board.resize(1000, 700)
        self.board.show()
        self.board.activateWindow()
        QApplication.processEvents()
        self.canvas.setFocus()
        self.said: list[str] = []
        self.document.said.connect(self.said.append)

    @property
    def part(self) -> Part:
        """The document's part."""
        return self.document.part

    @property
    def target(self) -> QWidget:
        """Where keys go."""
        return QApplication.focusWidget() or self.canvas

    def px(self, x: float, y: float) -> QPoint:
        """A place [mm] on the viewport, to the pixel."""
        return self.canvas.frame_now.px((x, y)).toPoint()

    def go(self, x: float, y: float) -> None:
        """Move the cursor to a place [mm]."""
        QTest.mouseMove(self.canvas.viewport(), self.px(x, y))
        QApplication.processEvents()

    def click(self, x: float, y: float, keys: Qt.KeyboardModifier = NONE) -> None:
        """Move there and click."""
        self.go(x, y)
        QTest.mouseClick(self.canvas.viewport(), LEFT, keys, self.px(x, y))
        QApplication.processEvents()

    def double(self, x: float, y: float) -> None:
        """Move there and double-click."""
        self.click(x, y)
        QTest.mouseDClick(self.canvas.viewport(), LEFT, NONE, self.px(x, y))
        QApplication.processEvents()

    def press(self, x: float, y: float) -> None:
        """Move there and put the button down."""
        self.go(x, y)
        QTest.mousePress(self.canvas.viewport(), LEFT, NONE, self.px(x, y))

    def release(self, x: float, y: float) -> None:
        """Let the button go at a place."""
        QTest.mouseRelease(self.canvas.viewport(), LEFT, NONE, self.px(x, y))
        QApplication.processEvents()

    def drag(self, start: Point, end: Point) -> None:
        """Press at one place, go by its middle to another, let go."""
        self.press(*start)
        self.go((start[0] + end[0]) / 2.0, (start[1] + end[1]) / 2.0)
        self.go(*end)
        self.release(*end)

    def key(self, key: Qt.Key, keys: Qt.KeyboardModifier = NONE) -> None:
        """Press a key where the focus is."""
        QTest.keyClick(self.target, key, keys)
        QApplication.processEvents()

    def type(self, text: str) -> None:
        """Type text, letter by letter, each where the focus then is."""
        for letter in text:
            QTest.keyClicks(self.target, letter)
        QApplication.processEvents()

    def enter(self) -> None:
        """Press Enter."""
        self.key(Qt.Key.Key_Return)

    def tab(self) -> None:
        """Press Tab."""
        self.key(Qt.Key.Key_Tab)
