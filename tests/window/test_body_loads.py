"""Spin, temperature and moments: put in by the sheet and by the board, shown, changed, undone."""

from __future__ import annotations

from dataclasses import replace

import pytest
from PySide6.QtWidgets import QPushButton
from pytestqt.qtbot import QtBot

from screenapp.model.part import (
    Case,
    CircleHole,
    MomentLoad,
    SpinLoad,
    TemperatureLoad,
    Zone,
)
from screenapp.report.page import load_words
from screenapp.window.board.frame import Frame
from screenapp.window.board.load_marks import load_mark
from screenapp.window.sheet.loaded_paragraph import LoadedParagraph
from screenapp.window.sheet.sheet import Sheet
from tests.window.board_kit import Hand, plate as board_plate
from tests.window.fabricate import plate
from tests.window.window_kit import pick, shown_sheet, type_into

PAD = Zone(CircleHole("z1", (20.0, 20.0), 8.0), 5.0)


@pytest.fixture
def sheet(qtbot: QtBot) -> Sheet:
    """The sheet of a strip with a hole and a pad."""
    return shown_sheet(qtbot, replace(plate(), zones=(PAD,)))


def block(sheet: Sheet):  # type: ignore[no-untyped-def]
    """The block of the first case."""
    found = next(p for p in sheet.paragraphs if isinstance(p, LoadedParagraph))
    return found.block("case1")


def test_a_spin_is_added_and_typed(sheet: Sheet) -> None:
    pick(block(sheet).foot.field("add"), "spin about a point")
    load = sheet.document.part.cases[0].loads[-1]
    hole = sheet.document.part.holes[0]
    assert isinstance(load, SpinLoad)
    assert isinstance(hole, CircleHole)
    assert (load.x, load.y) == hole.centre
    sentence = block(sheet).loads.row(load.id).sentence
    type_into(sentence.field("speed"), "50 Hz")
    type_into(sentence.field("x"), "1 in")
    assert sentence.text.startswith("spins at 3000 rpm about x 25.4 mm, y ")
    load = sheet.document.part.cases[0].loads[-1]
    assert load == SpinLoad(load.id, 25.4, hole.centre[1], 3000.0)
    sheet.document.undo()
    assert sheet.document.part.cases[0].loads[-1].speed == 3000.0  # type: ignore[union-attr]


def test_a_temperature_is_typed_and_put_on_a_zone(sheet: Sheet) -> None:
    pick(block(sheet).foot.field("add"), "a change of temperature")
    load = sheet.document.part.cases[0].loads[-1]
    assert load == TemperatureLoad(load.id, 20.0)
    row = block(sheet).loads.row(load.id)
    type_into(row.sentence.field("change"), "90 °F")
    type_into(row.sentence.field("start"), "25")
    type_into(row.sentence.field("y"), "0.5 K/mm")
    pick(row.sentence.field("zone"), "zone z1")
    load = sheet.document.part.cases[0].loads[-1]
    assert load == TemperatureLoad(load.id, 50.0, 0.0, 0.5, 25.0, "z1")
    row = block(sheet).loads.row(load.id)
    assert row.sentence.text == (
        "warmed by 50 K from 25 °C, and by 0 K/mm along x, 0.5 K/mm along y: zone z1"
        " –\u00a0no force"
    )
    pick(row.sentence.field("zone"), "the whole part")
    assert sheet.document.part.cases[0].loads[-1].zone is None  # type: ignore[union-attr]
    type_into(row.sentence.field("start"), "70 °F")
    assert "temperature in °C" in row.sentence.complaint


def test_a_moment_is_added_to_a_hole(sheet: Sheet) -> None:
    pick(block(sheet).foot.field("add"), "hole h1", "a moment, sheared round it")
    load = sheet.document.part.cases[0].loads[-1]
    assert load == MomentLoad(load.id, "h1", 10_000.0)
    sentence = block(sheet).loads.row(load.id).sentence
    assert sentence.text.startswith("turned by 10 N·m –")
    type_into(sentence.field("moment"), "-250 N mm")
    assert sheet.document.part.cases[0].loads[-1] == MomentLoad(load.id, "h1", -250.0)


def test_a_moment_is_put_on_a_hole_by_the_board(qtbot: QtBot) -> None:
    hand = Hand(board_plate())
    qtbot.addWidget(hand.board)
    hand.type("W")
    hand.click(50.0, 40.0)  # on the rim
    popover = hand.canvas.placing.popover
    button = next(b for b in popover.findChildren(QPushButton) if b.text() == "Moment")
    shown = [b for b in popover.findChildren(QPushButton) if b.isVisible()]
    assert all(b.width() >= b.sizeHint().width() for b in shown)  # no word is cut off
    button.click()
    hand.type("3")
    hand.enter()
    (case,) = hand.part.cases
    assert case.loads == (MomentLoad("l1", "h1", 3000.0),)


@pytest.mark.parametrize(
    ("load", "label"),
    [
        (SpinLoad("l", 30.0, 20.0, -1200.0), "1200 rpm"),
        (TemperatureLoad("l", 40.0), "+40 K"),
        (TemperatureLoad("l", -15.0, 0.0, 1.0, zone="z1"), "−15 K, graded"),
        (MomentLoad("l", "h1", 4500.0), "4.5 N·m"),
    ],
)
def test_each_has_a_symbol_and_words(load, label: str, qtbot: QtBot) -> None:  # type: ignore
    part = replace(board_plate(), zones=(PAD,), cases=(Case("k", "a", (load,)),))
    hand = Hand(part)
    qtbot.addWidget(hand.board)
    frame: Frame = hand.canvas.frame_now
    mark = load_mark(hand.canvas.drawn, frame, load)
    assert mark.lines
    assert mark.label == label
    assert len(load_words(load)) > 15


@pytest.mark.parametrize(
    "load",
    [
        SpinLoad("l", 30.0, 20.0, 1200.0, 1.5),
        TemperatureLoad("l", 40.0, 0.1, 0.2, 30.0, "z1"),
        MomentLoad("l", "h1", 4500.0),
    ],
)
def test_changing_one_on_the_board_keeps_what_is_not_typed(load, qtbot: QtBot) -> None:  # type: ignore
    part = replace(board_plate(), zones=(PAD,), cases=(Case("k", "a", (load,)),))
    hand = Hand(part)
    qtbot.addWidget(hand.board)
    hand.canvas.placing.change("l", hand.px(10.0, 10.0))
    assert hand.canvas.placing.busy
    hand.enter()
    assert not hand.canvas.placing.busy
    assert hand.part.cases[0].loads == (load,)


def test_no_temperature_symbol_without_a_change(qtbot: QtBot) -> None:
    hand = Hand(board_plate())
    qtbot.addWidget(hand.board)
    assert not load_mark(hand.canvas.drawn, hand.canvas.frame_now, TemperatureLoad("l", 0.0)).lines
