"""Principal directions as crosses: where they lie, how they are told apart, and their key."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import replace

import numpy as np
import pytest
from numpy.testing import assert_allclose
from PySide6.QtCore import QLineF, QRectF, Qt
from PySide6.QtGui import QTransform
from PySide6.QtTest import QTest
from pytestqt.qtbot import QtBot

from screenapp.window import theme
from screenapp.window.board.crosses_item import ARM, BAR, CrossesItem, spread
from screenapp.window.board.frame import Frame
from screenapp.window.document import View
from screenapp.window.painted import Crosses, Source
from screenapp.window.painting import paint
from screenapp.window.principal_crosses import crosses_of
from tests.window import fabricate as made
from tests.window.test_lenses import Bench

FRAME = Frame(QTransform(10.0, 0.0, 0.0, -10.0, 100.0, 100.0))
VIEW = QRectF(0.0, 0.0, 400.0, 400.0)


def cross(stresses: tuple[float, float], angle: float = 0.0) -> Crosses:
    """One cross at the origin, σ1 at `angle` [rad]."""
    along = np.array([np.cos(angle), np.sin(angle)])
    directions = np.array([[along, [-along[1], along[0]]]])
    return Crosses(np.zeros((1, 2)), np.array([stresses]), directions)


def lines(crosses: Crosses, frame: Frame = FRAME) -> tuple[list[QLineF], ...]:
    item = CrossesItem()
    item.crosses = crosses
    return item.lines(frame, VIEW)


def test_at_the_crown_of_a_hole_tension_lies_along_its_edge() -> None:
    """Kirsch 1898: under remote tension along x, σ1 = 3 S along x at the crown."""
    arrays = made.fields(made.ring(64, 20), 1)
    found = crosses_of(arrays, 0, arrays.mesh.nodes)
    assert found.at.shape == (arrays.mesh.n_elements, 2)
    crown = int(np.hypot(*(found.at - (0.0, made.RADIUS)).T).argmin())
    assert abs(found.directions[crown, 0, 0]) > 0.99
    assert_allclose(np.hypot(found.directions[..., 0], found.directions[..., 1]), 1.0)
    assert_allclose((found.directions[:, 0] * found.directions[:, 1]).sum(axis=1), 0.0, atol=1e-12)
    assert (found.stresses[:, 0] >= found.stresses[:, 1]).all()


def test_of_all_cases_the_one_that_governs_gives_the_directions() -> None:
    arrays = made.fields(made.ring(16, 4), 2)
    each = [crosses_of(arrays, case, arrays.mesh.nodes) for case in (0, 1)]
    for case in (0, 1):
        of = np.full(arrays.mesh.n_nodes, case)
        both = crosses_of(arrays, 0, arrays.mesh.nodes, of)
        assert_allclose(both.stresses, each[case].stresses)
    mixed = np.zeros((arrays.mesh.n_elements, 9), dtype=int)
    mixed[3] = 1
    both = crosses_of(arrays, 0, arrays.mesh.nodes, mixed)
    assert_allclose(both.stresses[3], each[1].stresses[3])
    assert_allclose(both.stresses[4], each[0].stresses[4])


def test_lengths_are_of_the_screen_and_compression_has_bars() -> None:
    for scale in (1.0, 10.0, 1000.0):
        frame = Frame(QTransform(scale, 0.0, 0.0, -scale, 200.0, 200.0))
        tension, compression, bars = lines(cross((80.0, -40.0)), frame)
        assert [round(line.length(), 6) for line in tension] == [2 * ARM]
        assert [round(line.length(), 6) for line in compression] == [ARM]
        assert [round(line.length(), 6) for line in bars] == [2 * BAR] * 2


def test_directions_turn_with_y_upwards() -> None:
    tension, _, _ = lines(cross((10.0, 0.0), np.radians(30.0)))
    (line,) = tension  # and nothing for a stress of nothing
    assert line.dx() != 0.0
    assert np.degrees(np.arctan(-line.dy() / line.dx())) == pytest.approx(30.0)


def test_small_elements_share_a_cross_and_keep_it_while_the_view_is_moved() -> None:
    x, y = np.meshgrid(np.linspace(0.0, 20.0, 101), np.linspace(0.0, 20.0, 101))
    at = np.stack([x.ravel(), y.ravel()], axis=1)
    kept = spread(at, 2.8)
    assert 20 < len(kept) < 60
    gaps = np.hypot(*(at[kept][:, None] - at[kept][None]).transpose(2, 0, 1))
    assert gaps[~np.eye(len(kept), dtype=bool)].min() >= 2.0
    part = at[at[:, 0] > 7.9]
    assert {tuple(p) for p in part[spread(part, 2.8)] if p[0] > 12.0} == {
        tuple(p) for p in at[kept] if p[0] > 12.0
    }
    assert len(spread(at, 0.01)) == len(at)


def test_what_is_out_of_view_is_not_drawn() -> None:
    far = replace(cross((5.0, -5.0)), at=np.array([[1e4, 0.0]]))
    assert lines(far) == ([], [], [])


def test_only_lenses_of_stress_have_crosses_and_say_what_they_mean() -> None:
    findings = made.findings(made.plate(), "key", made.ring(16, 4))
    assert findings.last is not None
    source = Source(findings.last, 0, made.plate(), findings)
    for lens, wanted in (("Stress", True), ("Utilisation", True), ("Displacement", False)):
        painting = paint(View(lens, crosses=True), source)  # type: ignore[arg-type]
        assert painting is not None
        assert (painting.crosses is not None) == wanted
        assert ("tension" in painting.caption) == wanted
    plain = paint(View("Stress"), source)
    assert plain is not None
    assert plain.crosses is None


@pytest.fixture
def bench(qtbot: QtBot) -> Iterator[Bench]:
    theme.choose("paper")
    return Bench(qtbot)


def test_the_key_shows_and_hides_them(bench: Bench) -> None:
    bench.document.look(lens="Stress")
    bench.screen()
    before = bench.image()
    QTest.keyClick(bench.board.canvas, Qt.Key.Key_P, Qt.KeyboardModifier.ShiftModifier)
    assert bench.document.view.crosses
    assert "full lines" in bench.caption
    assert "shown" in bench.said[-1]
    assert bench.image() != before
    QTest.keyClick(bench.board.canvas, Qt.Key.Key_P, Qt.KeyboardModifier.ShiftModifier)
    assert bench.painter.crosses.crosses is None
    assert bench.image() == before


def test_all_cases_are_chosen_by_keys_and_a_case_again(bench: Bench) -> None:
    bench.document.look(lens="Utilisation")
    bench.screen()
    chooser = bench.painter.heading.case
    chooser.setFocus()
    QTest.keyClick(chooser, Qt.Key.Key_End)
    assert bench.document.view.envelope
    assert "all cases" in chooser.currentText()
    assert bench.caption.startswith("Of 2 cases")
    bench.document.look(lens="Trust")
    assert chooser.count() == 2, "the lens of trust shows one case"
    bench.document.look(lens="Utilisation")
    assert "all cases" in chooser.currentText(), "the choice is kept"
    QTest.keyClick(chooser, Qt.Key.Key_Home)
    assert not bench.document.view.envelope
    assert bench.document.view.case == 0


def test_a_long_caption_wraps_and_is_not_cut_off(bench: Bench) -> None:
    bench.document.look(lens="Utilisation", envelope=True, crosses=True)
    bench.screen()
    heading = bench.painter.heading
    for width in (420, 1200):
        bench.board.resize(width, 640)
        bench.settle()
        label = heading.caption
        assert label.height() >= label.heightForWidth(label.width()) or not label.wordWrap()
        assert label.wordWrap() == (width == 420)
        assert heading.geometry().right() <= bench.board.canvas.width()
        assert heading.rect().contains(label.geometry())
