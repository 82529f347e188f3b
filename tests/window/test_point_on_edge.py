"""A force at a place of an edge, or over a patch of it: in the sheet and on the board."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from PySide6.QtCore import QPoint, Qt
from PySide6.QtTest import QTest
from pytestqt.qtbot import QtBot

from screenapp.model.part import Case, PointLoad
from screenapp.window.board.load_marks import load_mark
from screenapp.window.document import Document
from screenapp.window.sheet.loaded_paragraph import LoadedParagraph, load_choices
from tests.window.board_kit import Hand, plate
from tests.window.window_kit import settle, type_into

LOAD = PointLoad("l1", "e3", 0.0, -100.0, 30.0, 5.0)


@pytest.fixture
def document() -> Document:
    return Document(replace(plate(), cases=(Case("k1", "pull", (LOAD,)),)))


@pytest.fixture
def paragraph(qtbot: QtBot, document: Document) -> LoadedParagraph:
    made = LoadedParagraph(document)
    qtbot.addWidget(made)
    made.resize(460, 300)
    made.show()
    made.refresh()
    document.part_changed.connect(made.refresh)
    return made


def test_place_and_patch_are_typed(document: Document, paragraph: LoadedParagraph) -> None:
    row = paragraph.block("k1").loads.row("l1")
    assert row.sentence.text.startswith("pulled by 100 N, down, 30 mm along it, spread over 5 mm –")
    type_into(row.sentence.field("along"), "1 in")
    type_into(row.sentence.field("patch"), "8")
    assert document.part.cases[0].loads == (replace(LOAD, along=25.4, patch=8.0),)
    type_into(row.sentence.field("patch"), "no length")
    assert document.part.cases[0].loads == (replace(LOAD, along=25.4, patch=None),)
    assert "spread over no length" in row.sentence.text


def test_at_a_corner_it_is_put_on_a_patch_of_an_edge_that_is_chosen(
    document: Document, paragraph: LoadedParagraph
) -> None:
    corner = PointLoad("l1", "c3", 0.0, -100.0)
    document.apply("corner", replace(document.part, cases=(Case("k1", "pull", (corner,)),)))
    row = paragraph.block("k1").loads.row("l1")
    assert row.sentence.text.startswith("pulled at the point by 100 N, down · over a patch –")
    link = next(p for p in row.spec.pieces if getattr(p, "key", "") == "patch")
    assert [choice.key for choice in link.choices()] == ["e2", "e3"]
    link.act("e2")
    assert document.part.cases[0].loads == (PointLoad("l1", "e2", 0.0, -100.0, 57.0, 6.0),)
    document.undo()
    link.act("e3")
    assert document.part.cases[0].loads == (PointLoad("l1", "e3", 0.0, -100.0, 3.0, 6.0),)


def test_an_edge_offers_it() -> None:
    edges = [c for c in load_choices(Document(plate())) if c.key == "e3"]
    assert "point e3" in [c.key for c in edges[0].children]


@pytest.fixture
def hand(qtbot: QtBot) -> Hand:
    made = Hand(plate())
    qtbot.addWidget(made.board)
    return made


def test_the_board_puts_it_where_the_edge_was_clicked(hand: Hand) -> None:
    hand.canvas.placing.load("e3", hand.px(70.0, 60.0))
    popover = hand.canvas.placing.popover
    button = next(b for b in popover.findChildren(type(popover._put)) if b.text() == "Point")
    QTest.mouseClick(button, Qt.MouseButton.LeftButton)
    settle()
    popover.field("size").setText("40")
    popover.field("size").textEdited.emit("40")
    popover.field("patch").setText("4")
    popover.field("patch").textEdited.emit("4")
    assert hand.canvas.placing.accept()
    (load,) = hand.part.cases[0].loads
    assert isinstance(load, PointLoad)
    assert (load.x, load.y, load.patch) == (0.0, -40.0, 4.0)
    assert load.along == pytest.approx(30.0, abs=0.3)  # e3 runs from (100, 60)


@pytest.mark.parametrize("patch", [None, 5.0])
def test_it_is_drawn_where_it_acts(hand: Hand, patch: float | None) -> None:
    mark = load_mark(hand.canvas.drawn, hand.canvas.frame_now, replace(LOAD, patch=patch))
    at = hand.canvas.frame_now.pxs((70.0, 60.0))
    tip = mark.fills[0][0]
    assert np.hypot(*(tip - at)) < 4.0
    assert isinstance(hand.px(0.0, 0.0), QPoint)
