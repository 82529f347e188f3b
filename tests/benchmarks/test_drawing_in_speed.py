"""Time to read a drawing of 3,000 forms, make a part of it, and paint 200,000 lines."""

from __future__ import annotations

from pathlib import Path
from typing import Any

import numpy as np
import pytest
from PySide6.QtGui import QColor, QImage, QPainter, QPen, QTransform
from pytest_benchmark.fixture import BenchmarkFixture
from pytestqt.qtbot import QtBot

from screenapp.exchange.bringing_in import bring_in
from screenapp.exchange.choosing import Wishes
from screenapp.exchange.dxf_reading import read_drawing
from screenapp.window.board.frame import Frame
from screenapp.window.many_lines import paint_pieces
from tests.exchange.drawings import rectangle, write


@pytest.fixture(scope="module")
def perforated(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """A sheet of 500 × 150 with 2,000 round and 1,000 square holes."""

    def draw(space: Any) -> None:
        rectangle(space, -5, -5, 505, 155)
        for i in range(3000):
            x, y = 5.0 * (i % 100), 5.0 * (i // 100)
            if i % 3:
                space.add_circle((x, y), 1.5)
            else:
                rectangle(space, x - 1, y - 1, x + 1, y + 1)

    return write(tmp_path_factory.mktemp("sheet") / "sheet.dxf", draw)


def test_reading_a_drawing(benchmark: BenchmarkFixture, perforated: Path) -> None:
    drawing = benchmark.pedantic(read_drawing, (perforated,), rounds=3)
    assert len(drawing.curves) == 6004


def test_making_a_part_of_a_drawing(benchmark: BenchmarkFixture, perforated: Path) -> None:
    drawing = read_drawing(perforated)
    brought = benchmark.pedantic(bring_in, (drawing, Wishes()), rounds=3)
    assert brought.part is not None
    assert len(brought.part.holes) == 3000


def test_painting_many_lines(benchmark: BenchmarkFixture, qtbot: QtBot) -> None:
    random = np.random.default_rng(1)
    starts = random.uniform(0.0, 600.0, (200_000, 1, 2))
    pieces = np.concatenate([starts, starts + random.uniform(-1.5, 1.5, starts.shape)], axis=1)
    image = QImage(660, 560, QImage.Format.Format_ARGB32)
    image.fill(0)

    def paint() -> None:
        painter = QPainter(image)
        frame = Frame(QTransform())
        paint_pieces(painter, frame, pieces, (660, 560), QPen(QColor("black"), 1.0))
        painter.end()

    benchmark(paint)
    assert image.pixelColor(300, 300).alpha() == 255
