"""Frames of the board while something is dragged, panned, zoomed or pointed at.

Each frame is one mouse event with the repaint that follows it, at 1920 × 1080 on a part of 60
corners, 24 holes, 12 supports and 12 loads; the aim is 16 ms of
processor time, for the machine may have other work.
"""

from __future__ import annotations

import itertools
import math
import time
from collections.abc import Callable

import pytest
from PySide6.QtCore import QEvent, QPoint, QPointF, Qt
from PySide6.QtGui import QMouseEvent
from PySide6.QtTest import QTest
from PySide6.QtWidgets import QApplication
from pytest_benchmark.fixture import BenchmarkFixture
from pytestqt.qtbot import QtBot

from screenapp.model import edits
from screenapp.model.part import (
    BearingLoad,
    Case,
    CircleHole,
    Corner,
    Edge,
    FixedSupport,
    Loop,
    Material,
    Part,
    PressureLoad,
    Wall,
)
from tests.benchmarks.test_validity_speed import large_part
from tests.window.board_kit import Hand

pytestmark = pytest.mark.benchmark(timer=time.process_time)

N = 60


def busy_part() -> Part:
    """A cog with rounded corners, a ring of holes, and much on it."""
    corners = tuple(
        Corner(
            f"c{i}",
            (
                (100.0 if i % 2 else 115.0) * math.cos(2.0 * math.pi * i / N),
                (100.0 if i % 2 else 115.0) * math.sin(2.0 * math.pi * i / N),
            ),
            2.0,
        )
        for i in range(N)
    )
    holes = tuple(
        CircleHole(
            f"h{i}",
            (75.0 * math.cos(2.0 * math.pi * i / 24), 75.0 * math.sin(2.0 * math.pi * i / 24)),
            10.0,
        )
        for i in range(24)
    )
    loads = tuple(BearingLoad(f"l{i}", f"h{2 * i}", 0.0, -100.0) for i in range(6))
    pressures = tuple(PressureLoad(f"l{6 + i}", f"e{5 * i}", 1.0) for i in range(6))
    return Part(
        outline=Loop(corners, tuple(Edge(f"e{i}") for i in range(N))),
        holes=holes,
        wall=Wall(3.0, "Steel"),
        materials=(Material("Steel", 210e3, 0.3, 7850.0, 235.0),),
        supports=tuple(
            FixedSupport(f"s{i}", f"h{2 * i + 1}" if i < 6 else f"e{5 * i - 28}") for i in range(12)
        ),
        cases=(Case("k1", "a", (*loads, *pressures)),),
    )


@pytest.fixture
def hand(qtbot: QtBot) -> Hand:
    made = Hand(busy_part())
    qtbot.addWidget(made.board)
    made.board.resize(1920, 1080)
    QApplication.processEvents()
    made.canvas.fit()
    QApplication.processEvents()
    return made


def move_to(hand: Hand, px: QPoint) -> None:
    """A mouse move, without the repaint that an event loop would add."""
    view = hand.canvas.viewport()
    none = Qt.MouseButton.NoButton
    at, plain = QPointF(px), Qt.KeyboardModifier.NoModifier
    event = QMouseEvent(QEvent.Type.MouseMove, at, view.mapToGlobal(at), none, none, plain)
    QApplication.sendEvent(view, event)


def frames(hand: Hand, step: Callable[[int], None]) -> Callable[[], None]:
    """A function that makes the next step and paints it."""
    count = itertools.count()

    def frame() -> None:
        step(next(count))
        hand.canvas.viewport().repaint()

    return frame


def test_pointing(hand: Hand, benchmark: BenchmarkFixture) -> None:
    benchmark(frames(hand, lambda i: move_to(hand, QPoint(400 + 7 * i % 900, 500))))


def test_panning(hand: Hand, benchmark: BenchmarkFixture) -> None:
    view, middle = hand.canvas.viewport(), Qt.MouseButton.MiddleButton
    QTest.mousePress(view, middle, Qt.KeyboardModifier.NoModifier, QPoint(700, 500))
    benchmark(frames(hand, lambda i: move_to(hand, QPoint(700 + 9 * i % 100, 500 + i % 7))))


def test_zooming(hand: Hand, benchmark: BenchmarkFixture) -> None:
    benchmark(frames(hand, lambda i: hand.canvas.zoom(1.05 if i % 40 < 20 else 1.0 / 1.05)))


def test_dragging_a_hole(hand: Hand, benchmark: BenchmarkFixture) -> None:
    hole = next(h for h in hand.part.holes if h.id == "h13")
    assert isinstance(hole, CircleHole)
    rim = (hole.centre[0] + 3.0, hole.centre[1] + 4.0)
    hand.press(*rim)
    spot = hand.px(*rim)
    benchmark(frames(hand, lambda i: move_to(hand, spot + QPoint(10 + 3 * i % 60, 5 + i % 5))))
    assert hand.canvas.previewing


def test_drawing_a_chain(hand: Hand, benchmark: BenchmarkFixture) -> None:
    hand.board.take("Lines")
    hand.click(0.0, 0.0)
    hand.click(20.0, 0.0)
    benchmark(frames(hand, lambda i: move_to(hand, QPoint(900 + 3 * i % 300, 400 + i % 9))))


@pytest.fixture(params=["hole", "corner"])
def large(qtbot: QtBot, request: pytest.FixtureRequest) -> tuple[Hand, str]:
    """A part of 2,000 rounded corners and 500 holes, and what of it is dragged."""
    made = Hand(large_part(0.8))
    qtbot.addWidget(made.board)
    made.board.resize(1920, 1080)
    QApplication.processEvents()
    made.canvas.fit()
    QApplication.processEvents()
    return made, request.param


@pytest.mark.parametrize("magnified", [1.0, 8.0], ids=["whole", "close"])
def test_dragging_in_a_large_part(
    large: tuple[Hand, str], magnified: float, benchmark: BenchmarkFixture
) -> None:
    """The aim is 16 ms a frame with a hole, and with a corner, of a very large part."""
    hand, what = large
    hand.canvas.zoom(magnified, QPointF(hand.px(1000.0, 0.0)))
    QApplication.processEvents()
    if what == "hole":
        hole = hand.part.holes[480]
        assert isinstance(hole, CircleHole)
        grip = hole.centre
    else:
        assert hand.part.outline is not None
        grip = hand.part.outline.corners[6].at
        hand.document.apply("sharp", edits.set_round(hand.part, "c6", 0.0))
    hand.press(*grip)
    spot = hand.px(*grip)
    benchmark(frames(hand, lambda i: move_to(hand, spot + QPoint(5 + i % 3, 4 + i % 2))))
    assert hand.canvas.previewing
