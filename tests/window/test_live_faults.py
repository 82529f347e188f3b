"""What is wrong is marked while it is drawn or dragged, and thin places tell their size."""

from __future__ import annotations

from dataclasses import replace

import pytest
from PySide6.QtCore import Qt
from pytestqt.qtbot import QtBot

from screenapp.model.errors import Fault
from screenapp.model.part import CircleHole
from screenapp.model.validity import faults_of
from screenapp.window.sheet.part_paragraph import PartParagraph
from screenapp.window.sheet.sheet import Sheet
from tests.window.board_kit import Hand, plate


@pytest.fixture
def hand(qtbot: QtBot) -> Hand:
    made = Hand(plate())
    qtbot.addWidget(made.board)
    return made


def live(hand: Hand) -> list[str]:
    return [fault.cause for fault in hand.document.live_faults]


def test_a_hole_dragged_over_the_edge_is_marked_on_the_way_and_said_in_the_sheet(
    hand: Hand, qtbot: QtBot
) -> None:
    sheet = Sheet(hand.document)
    qtbot.addWidget(sheet)
    part = sheet.paragraph(1)
    assert isinstance(part, PartParagraph)
    hand.press(50.0, 34.0)
    hand.go(60.0, 34.0)
    hand.go(96.0, 34.0)
    qtbot.waitUntil(lambda: bool(live(hand)), timeout=2000)
    assert "cross" in live(hand)[0]
    assert hand.canvas.marked.live
    assert any(f.blocks for _, f in hand.canvas.marked.spots)
    assert "As drawn now" in part.live.row("live 0").sentence.text
    hand.go(60.0, 34.0)
    qtbot.waitUntil(lambda: not live(hand), timeout=2000)
    assert hand.canvas.marked.spots == [] or not any(f.blocks for _, f in hand.canvas.marked.spots)
    hand.release(60.0, 34.0)
    assert part.live.ids == ()


def test_a_ring_that_crosses_itself_is_marked_while_it_is_drawn(hand: Hand, qtbot: QtBot) -> None:
    hand.document.apply("bare", replace(plate(), outline=None, holes=()))
    hand.type("L")
    for place in ((0.0, 0.0), (60.0, 40.0), (60.0, 0.0)):
        hand.click(*place)
    qtbot.wait(150)
    assert live(hand) == []
    hand.click(0.0, 40.0)
    qtbot.waitUntil(lambda: bool(live(hand)), timeout=2000)
    assert "cross" in live(hand)[0]
    hand.key(Qt.Key.Key_Escape)
    qtbot.waitUntil(lambda: not live(hand), timeout=2000)
    assert hand.part.outline is None


def thin(part_faults: tuple[Fault, ...]) -> Fault:
    return next(f for f in part_faults if f.span is not None)


def test_a_thin_ligament_has_its_ends(hand: Hand) -> None:
    part = replace(plate(), holes=(CircleHole("h1", (50.0, 10.8), 20.0),))
    fault = thin(faults_of(part))
    assert not fault.blocks
    assert fault.span is not None
    (_, y0), (_, y1) = fault.span
    assert sorted((y0, y1)) == pytest.approx([0.0, 0.8])
    hand.document.apply("thin", part)
    assert any(f.span for _, f in hand.canvas.marked.spots)
    hand.canvas.grab()  # painting it raises nothing


def test_marks_go_when_a_drag_is_dropped(hand: Hand, qtbot: QtBot) -> None:
    hand.press(50.0, 34.0)
    hand.go(60.0, 34.0)
    hand.go(96.0, 34.0)
    qtbot.waitUntil(lambda: bool(live(hand)), timeout=2000)
    hand.key(Qt.Key.Key_Escape)
    assert live(hand) == []
    assert not hand.canvas.marked.live
    hand.release(96.0, 34.0)
