"""What loads amount to: in the sheet at once, and drawn on their line of action."""

from __future__ import annotations

import math
from dataclasses import replace

import numpy as np
import pytest
from PySide6.QtCore import Qt
from pytestqt.qtbot import QtBot

from screenapp.model import edits
from screenapp.model.part import (
    BearingLoad,
    Case,
    Combination,
    GravityLoad,
    MomentLoad,
    Part,
    PressureLoad,
    TemperatureLoad,
    Term,
)
from screenapp.model.solution import LoadResultant
from screenapp.window.board.resultant_item import LONG, RADIUS, resultant_mark
from screenapp.window.document import Document
from screenapp.window.load_amounts import amounts_of, together_id
from screenapp.window.sheet.loaded_paragraph import LoadedParagraph
from tests.model.plates import plate
from tests.window.board_kit import Hand

LOADED = replace(
    plate(),
    cases=(
        Case("k1", "pull", (PressureLoad("l1", "e2", -4.0), BearingLoad("l2", "h1", 0.0, -50.0))),
        Case("k2", "warm", (TemperatureLoad("l3", 40.0),)),
    ),
    combinations=(Combination("m1", "both", (Term("k1", 2.0), Term("k2", 1.0))),),
)


@pytest.fixture
def document() -> Document:
    return Document(LOADED)


def said(paragraph: LoadedParagraph, case: str, id_: str) -> str:
    row = paragraph.block(case).loads.row(id_)
    return row.sentence.text.replace("\u00a0", " ")


@pytest.fixture
def hand(qtbot: QtBot) -> Hand:
    made = Hand(LOADED)
    qtbot.addWidget(made.board)
    return made


@pytest.fixture
def paragraph(qtbot: QtBot, document: Document) -> LoadedParagraph:
    made = LoadedParagraph(document)
    qtbot.addWidget(made)
    made.refresh()
    return made


def test_the_sheet_says_what_each_load_amounts_to(paragraph: LoadedParagraph) -> None:
    assert "Fx 600 N, Fy 0 N, M −15 N·m" in said(paragraph, "k1", "l1")
    assert "Fx 0 N, Fy −50 N, M −2.5 N·m" in said(paragraph, "k1", "l2")
    assert "Fx 600 N, Fy −50 N, M −17.5 N·m" in said(paragraph, "k1", together_id("k1"))
    assert "no force" in said(paragraph, "k2", "l3")
    assert not paragraph.key.isHidden()


def test_it_follows_an_edit_at_once(document: Document, paragraph: LoadedParagraph) -> None:
    document.apply("pull", edits.replace_load(document.part, PressureLoad("l1", "e2", -8.0)))
    paragraph.refresh()
    assert "Fx 1200 N" in said(paragraph, "k1", "l1")


def test_a_combination_counts_its_factors(document: Document) -> None:
    total = document.amounts.totals["m1"]
    assert (total.x, total.y, total.moment) == pytest.approx((1200.0, -100.0, -35000.0))


@pytest.mark.parametrize(
    "broken",
    [
        Part(),
        replace(LOADED, outline=None),
        replace(LOADED, cases=(Case("k1", "x", (PressureLoad("l1", "e9", 1.0),)),)),
        replace(LOADED, cases=(Case("k1", "x", (BearingLoad("l1", "e2", 1.0, 0.0),)),)),
        replace(LOADED, cases=(Case("k1", "x", (PressureLoad("l1", "e2", math.inf),)),)),
        replace(LOADED, cases=(Case("k1", "x", (GravityLoad("l1", 0.0, -9.8),)),), materials=()),
    ],
)
def test_a_part_at_fault_is_no_fault_of_ours(broken: Part) -> None:
    assert Document(broken).amounts.of("l1") is None
    assert amounts_of(broken, None).totals == {}


def test_the_arrow_ends_on_the_line_of_action(hand: Hand) -> None:
    item, frame = hand.canvas.resultants, hand.canvas.frame_now
    assert item.marks(frame) == []
    hand.document.hover("l2")
    (mark,) = item.marks(frame)
    found = hand.document.amounts.of("l2")
    assert found is not None
    assert found.at is not None
    assert found.at[0] == pytest.approx(50.0)  # below the centre, on the side that bears
    assert 20.0 < found.at[1] < 25.0
    tip = frame.pxs(found.at)
    assert np.hypot(*(mark.outlines[0] - tip).T).min() < 1e-9
    assert np.ptp(mark.outlines[0], axis=0)[1] == pytest.approx(LONG)
    assert mark.lines[0][:, 0] == pytest.approx(tip[0])
    assert mark.text == "50 N"
    hand.document.hover(None)
    hand.document.select(together_id("k1"))
    (mark,) = item.marks(frame)
    assert mark.text.startswith("602.1 N")


def test_the_arrow_keeps_its_size_at_any_zoom(hand: Hand) -> None:
    hand.document.select("l1")
    before = np.ptp(hand.canvas.resultants.marks(hand.canvas.frame_now)[0].outlines[0], axis=0)
    hand.canvas.view_box.scaleBy((0.4, 0.4))
    after = np.ptp(hand.canvas.resultants.marks(hand.canvas.frame_now)[0].outlines[0], axis=0)
    assert after == pytest.approx(before)


def test_deleting_while_all_loads_are_selected_takes_nothing(hand: Hand) -> None:
    hand.document.select(together_id("k1"))
    hand.key(Qt.Key.Key_Delete)
    assert hand.document.part == LOADED


def test_a_couple_is_a_turning_arrow() -> None:
    part = replace(plate(), cases=(Case("k1", "turn", (MomentLoad("l1", "h1", -900.0),)),))
    found = Document(part).amounts.of("l1")
    assert found is not None
    mark = resultant_mark(found, np.array([100.0, 80.0]), "mm-N-MPa")
    assert mark is not None
    assert mark.lines == []
    assert mark.text == "−0.9 N·m"
    far = np.hypot(*(mark.outlines[0] - [100.0, 80.0]).T)
    assert far.max() < RADIUS + 18.0
    assert far.min() > RADIUS - 18.0


def test_a_force_far_off_is_drawn_with_its_couple() -> None:
    mark = resultant_mark(
        LoadResultant("l1", 0.0, -1.0, 500.0, (10.0, 0.0)), np.zeros(2), "mm-N-MPa"
    )
    assert mark is not None
    assert len(mark.outlines) == 2
    assert mark.text == "1 N and 0.51 N·m"
    nothing = LoadResultant("l1", 0.0, 0.0, 0.0, (1.0, 2.0))
    assert resultant_mark(nothing, np.zeros(2), "mm-N-MPa") is None
