"""Texts on the board: none covers another, a card, a chooser or the mark that it belongs to."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import replace
from itertools import combinations

import pytest
from PySide6.QtCore import QPointF, QRectF, QSizeF
from PySide6.QtWidgets import QApplication
from pytestqt.qtbot import QtBot

from screenapp.model.part import Part, PointLoad, Probe
from screenapp.window import theme
from screenapp.window.board.label_placing import Wish, place, round_about, round_text
from screenapp.window.board.labels import GAPS
from tests.window import fabricate as made
from tests.window.test_lenses import Bench

VIEW = QRectF(0.0, 0.0, 400.0, 300.0)


def overlap(boxes: list[QRectF]) -> float:
    """The largest area that two of the boxes share [px²]."""
    shared = [a.intersected(b) for a, b in combinations(boxes, 2)]
    return max((max(s.width(), 0.0) * max(s.height(), 0.0) for s in shared), default=0.0)


def test_texts_of_one_place_stand_apart() -> None:
    size = QSizeF(90.0, 30.0)
    at = QPointF(200.0, 150.0)
    wishes = [Wish(size, round_about(at, size, GAPS)) for _ in range(6)]
    boxes = place(wishes, [], VIEW)
    assert overlap(boxes) == 0.0
    assert boxes[0].topLeft() == QPointF(155.0, 159.0)  # below, the first choice
    assert all(VIEW.contains(box) for box in boxes)


def test_a_text_stays_in_the_view_and_off_what_is_taken() -> None:
    size = QSizeF(80.0, 16.0)
    (corner,) = place([Wish(size, round_text(QPointF(396.0, 4.0), size))], [], VIEW)
    assert VIEW.intersected(corner).width() == pytest.approx(80.0)
    card = QRectF(150.0, 140.0, 120.0, 40.0)
    (beside,) = place([Wish(size, round_text(QPointF(200.0, 150.0), size))], [card], VIEW)
    assert not beside.intersects(card)


def test_with_no_free_place_the_least_bad_is_taken() -> None:
    size = QSizeF(40.0, 20.0)
    (box,) = place([Wish(size, round_about(QPointF(20, 20), size, (9.0,)))], [VIEW], VIEW)
    assert VIEW.contains(box)


def crowded() -> Part:
    """The strip with five probes on its hole and a load at a corner beside another probe."""
    part = made.plate()
    x, y = made.HALF_LENGTH, made.HALF_WIDTH
    places = ((10.0, 0.0), (0.0, 10.0), (-10.0, 0.0), (0.0, -10.0), (12.0, 3.0), (x, y - 1.0))
    readings = tuple(
        Probe(f"p{i}", f"a reading with a long name {i}", at) for i, at in enumerate(places)
    )
    loads = (*part.cases[0].loads, PointLoad("l9", "c3", 300.0, -500.0))
    cases = (replace(part.cases[0], loads=loads), *part.cases[1:])
    return replace(part, readings=readings, cases=cases)


@pytest.fixture
def bench(qtbot: QtBot) -> Iterator[Bench]:
    theme.choose("paper")
    yield Bench(qtbot, crowded())
    theme.choose("paper")


@pytest.mark.parametrize("lens", ["Shape", "Stress", "Trust"])
@pytest.mark.parametrize("size", [(800, 520), (1150, 860)])
def test_nothing_covers_anything_on_a_crowded_board(
    bench: Bench, lens: str, size: tuple[int, int]
) -> None:
    bench.board.resize(*size)
    bench.document.look(lens=lens)
    bench.screen()
    QApplication.processEvents()
    bench.board.fit()
    bench.settle()
    frame = bench.board.canvas.frame_now
    labels, cards = bench.board.canvas.labels, bench.painter.callouts.cards(frame)
    boxes = labels.boxes(frame)
    assert len(boxes) == 8  # six probes and two loads
    assert overlap([*boxes, *cards]) < 1.0
    for over in bench.painter._overlays():
        assert all(overlap([over, box]) < 1.0 for box in [*boxes, *cards])
    rings = [frame.px(probe.at) for probe in bench.document.part.readings]
    covered = [box for box in [*boxes, *cards] for ring in rings if box.contains(ring)]
    assert covered == []


def test_texts_move_with_the_part_while_the_view_pans(bench: Bench) -> None:
    canvas = bench.board.canvas
    bench.settle()
    before = canvas.labels.boxes(canvas.frame_now)
    canvas.begin_pan(QPointF(300.0, 300.0))
    canvas.pan_to(QPointF(307.0, 296.0))
    canvas.end_pan()
    after = canvas.labels.boxes(canvas.frame_now)
    for a, b in zip(before, after, strict=True):
        assert b.left() - a.left() == pytest.approx(7.0, abs=0.6)
        assert b.top() - a.top() == pytest.approx(-4.0, abs=0.6)


def test_the_notice_that_findings_are_old_covers_no_card(bench: Bench) -> None:
    bench.document.look(lens="Stress")
    bench.screen()
    part = bench.document.part
    bench.document.apply("wall", replace(part, wall=replace(part.wall, thickness=5.0)))
    bench.settle()
    frame = bench.board.canvas.frame_now
    notice = QRectF(bench.painter.heading.geometry())
    assert bench.warning.startswith("Out of date")
    assert all(not card.intersects(notice) for card in bench.painter.callouts.cards(frame))
