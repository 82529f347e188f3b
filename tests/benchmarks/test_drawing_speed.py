"""Speed of painting results at 1400 x 900: a gesture frame under 16 ms, a full redraw under 0.25 s
at 50 000 elements.

Run with `pytest tests/benchmarks/test_drawing_speed.py --benchmark-enable`.
"""

from __future__ import annotations

import itertools

import numpy as np
import pytest
from pytest_benchmark.fixture import BenchmarkFixture
from pytestqt.qtbot import QtBot

from screenapp.model.mesh import Mesh
from screenapp.report import colours
from screenapp.report.raster import Viewport, rasterise
from screenapp.window.board.board import Board
from screenapp.window.board.field_item import GROWN, grow
from screenapp.window.board.lens_painter import LensPainter
from screenapp.window.board.line_raster import rasterise_lines
from screenapp.window.board.mesh_item import mesh_lines
from screenapp.window.document import Document
from tests.window import fabricate as made

WHOLE = Viewport(-65.0, 42.0, 130 / 1400, 130 / 1400, 1400, 900)
CLOSE = Viewport(-20.0, 13.0, 40 / 1400, 40 / 1400, 1400, 900)


@pytest.fixture(scope="module", params=[(160, 63), (400, 125)], ids=["10k", "50k"])
def mesh(request: pytest.FixtureRequest) -> Mesh:
    """About 10 000 and exactly 50 000 elements."""
    return made.ring(*request.param)


@pytest.mark.parametrize("view", [WHOLE, CLOSE], ids=["whole", "close"])
def test_field_picture(benchmark: BenchmarkFixture, mesh: Mesh, view: Viewport) -> None:
    values = made.kirsch(mesh.nodes)[:, 0]
    scale = colours.cividis(float(values.min()), float(values.max()))

    def redraw() -> np.ndarray:
        return scale.words(grow(rasterise(mesh.nodes, mesh.quads, values, view), GROWN))

    assert benchmark(redraw).any()


@pytest.mark.parametrize("view", [WHOLE, CLOSE], ids=["whole", "close"])
def test_mesh_picture(benchmark: BenchmarkFixture, mesh: Mesh, view: Viewport) -> None:
    starts, ends = mesh_lines(mesh, mesh.nodes)
    table = colours.veil("#1c222b", 0.3)

    def redraw() -> np.ndarray:
        coverage = rasterise_lines(starts, ends, view)
        return table[(coverage * np.float32(255)).astype(np.uint8)]

    assert benchmark(redraw).any()


@pytest.fixture
def painter(qtbot: QtBot, mesh: Mesh) -> LensPainter:
    """The board with the utilisation of a mesh painted on a canvas of 1400 x 900."""
    document = Document(made.plate())
    board = Board(document)
    qtbot.addWidget(board)
    made_painter = LensPainter(document, board)
    board.show()
    qtbot.waitExposed(board)
    board.resize(
        board.width() - board.canvas.width() + 1400, board.height() - board.canvas.height() + 900
    )
    board.fit()
    document.set_findings(made.findings(document.part, document.key, mesh))
    document.look(lens="Utilisation")
    qtbot.waitUntil(lambda: not (made_painter.field.busy or made_painter.mesh.busy), timeout=10_000)
    assert (board.canvas.width(), board.canvas.height()) == (1400, 900)
    made_painter.board = board  # type: ignore[attr-defined]  # lives as long as the painter
    return made_painter


def test_gesture_frame(benchmark: BenchmarkFixture, painter: LensPainter) -> None:
    """Pan and zoom by turns, each with a repaint of everything on the board."""
    canvas = painter.board.canvas  # type: ignore[attr-defined]
    steps = itertools.cycle([(0.9, 1.5), (1 / 0.9, -1.5)])

    def frame() -> None:
        scale, shift = next(steps)
        canvas.view_box.translateBy(x=shift, y=shift / 2)
        canvas.view_box.scaleBy((scale, scale))
        canvas.grab()

    benchmark(frame)


def test_full_redraw(benchmark: BenchmarkFixture, painter: LensPainter) -> None:
    """Field and mesh made afresh and painted, without a thread."""
    canvas = painter.board.canvas  # type: ignore[attr-defined]

    def redraw() -> None:
        painter.wait()
        canvas.grab()

    benchmark(redraw)


def test_change_of_range(benchmark: BenchmarkFixture, painter: LensPainter) -> None:
    """Another scale on the field at hand, and the repaint."""
    canvas = painter.board.canvas  # type: ignore[attr-defined]
    highs = itertools.cycle([1.4, 1.6])

    def change() -> None:
        painter.field.set_scale(colours.utilisation(next(highs)))
        canvas.grab()

    benchmark(change)
