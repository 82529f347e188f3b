"""Zones on the board and in the sheet, worked by real mouse and key events."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from PySide6.QtCore import QPoint, Qt
from PySide6.QtGui import QColor
from pytestqt.qtbot import QtBot

from screenapp.model.part import CircleHole, LoopHole, Material, Part, Zone
from screenapp.window import theme
from screenapp.window.document import Document
from screenapp.window.sheet import changes
from screenapp.window.sheet.sheet import Sheet
from screenapp.window.sheet.wall_paragraph import WallParagraph
from tests.window.board_kit import Hand, plate
from tests.window.window_kit import pick, shown_sheet, texts, type_into

SHIFT = Qt.KeyboardModifier.ShiftModifier


@pytest.fixture
def hand(qtbot: QtBot) -> Hand:
    made = Hand(plate())
    qtbot.addWidget(made.board)
    return made


def padded() -> Part:
    """The plate with a round pad of 8 mm right of its hole."""
    return replace(plate(), zones=(Zone(CircleHole("z1", (80.0, 30.0), 24.0), 8.0),))


@pytest.fixture
def on_pad(qtbot: QtBot) -> Hand:
    made = Hand(padded())
    qtbot.addWidget(made.board)
    return made


def corners_of(zone: Zone) -> list[tuple[float, float]]:
    assert isinstance(zone.form, LoopHole)
    return [c.at for c in zone.form.loop.corners]


def test_a_zone_is_drawn_by_two_corners_and_may_reach_over_the_edge(hand: Hand) -> None:
    hand.key(Qt.Key.Key_Z)
    hand.click(70.0, -10.0)
    hand.click(110.0, 20.0)
    (zone,) = hand.part.zones
    assert corners_of(zone) == [(70.0, -10.0), (110.0, -10.0), (110.0, 20.0), (70.0, 20.0)]
    assert zone.thickness == 6.0
    assert hand.document.selection == ("z1",)
    assert hand.canvas.tool is not None
    assert hand.canvas.tool.name == "Select"
    hand.document.undo()
    assert hand.part.zones == ()


def test_a_zone_is_drawn_by_typed_sizes(hand: Hand) -> None:
    hand.key(Qt.Key.Key_Z)
    hand.click(10.0, 10.0)
    hand.go(20.0, 20.0)
    hand.type("25")
    hand.tab()
    hand.type("30")
    hand.enter()
    assert corners_of(hand.part.zones[0])[2] == (35.0, 40.0)


def test_without_an_outline_no_zone_is_drawn(qtbot: QtBot) -> None:
    hand = Hand(Part())
    qtbot.addWidget(hand.board)
    hand.key(Qt.Key.Key_Z)
    hand.click(10.0, 10.0)
    hand.click(40.0, 30.0)
    assert hand.part.zones == ()
    assert any("outline first" in words for words in hand.said)


def test_a_click_inside_selects_a_zone_and_a_drag_moves_it(on_pad: Hand) -> None:
    on_pad.click(80.0, 25.0)
    assert on_pad.document.selection == ("z1",)
    on_pad.drag((80.0, 30.0), (86.0, 36.0))
    assert on_pad.part.zones[0].form == CircleHole("z1", (86.0, 36.0), 24.0)
    on_pad.key(Qt.Key.Key_Delete)
    assert on_pad.part.zones == ()
    on_pad.document.undo()
    assert len(on_pad.part.zones) == 1


def test_a_click_on_its_line_selects_a_zone(on_pad: Hand) -> None:
    on_pad.click(68.0, 30.0)
    assert on_pad.document.selection == ("z1",)


def test_a_hole_in_a_zone_comes_first(qtbot: QtBot) -> None:
    part = replace(plate(), zones=(Zone(CircleHole("z1", (50.0, 30.0), 40.0), 8.0),))
    hand = Hand(part)
    qtbot.addWidget(hand.board)
    hand.click(50.0, 30.0)
    assert hand.document.selection == ("h1",)
    hand.click(65.0, 30.0)
    assert hand.document.selection == ("z1",)


def test_a_corner_of_a_zone_is_dragged_by_itself(hand: Hand) -> None:
    hand.key(Qt.Key.Key_Z)
    hand.click(70.0, 10.0)
    hand.click(90.0, 20.0)
    hand.click(80.0, 15.0)
    hand.drag((90.0, 20.0), (96.0, 30.0))
    assert corners_of(hand.part.zones[0])[2] == (96.0, 30.0)


def test_a_zone_is_edited_exactly(on_pad: Hand) -> None:
    on_pad.click(80.0, 25.0)
    on_pad.key(Qt.Key.Key_F2)
    on_pad.type("75")
    on_pad.tab()
    on_pad.tab()
    on_pad.type("20")
    on_pad.tab()
    on_pad.type("5")
    on_pad.enter()
    assert on_pad.part.zones == (Zone(CircleHole("z1", (75.0, 30.0), 20.0), 5.0),)


def test_a_hole_becomes_a_zone_and_the_zone_a_hole(hand: Hand) -> None:
    hand.click(50.0, 30.0)
    hand.key(Qt.Key.Key_Z, SHIFT)
    assert hand.part.holes == ()
    assert hand.part.zones == (Zone(CircleHole("z1", (50.0, 30.0), 20.0), 6.0),)
    assert hand.document.selection == ("z1",)
    hand.key(Qt.Key.Key_Z, SHIFT)
    assert hand.part.zones == ()
    assert hand.part.holes == (CircleHole("h1", (50.0, 30.0), 20.0),)


def test_a_zone_cannot_be_held(on_pad: Hand) -> None:
    on_pad.key(Qt.Key.Key_H)
    on_pad.click(68.0, 30.0)
    assert on_pad.part.supports == ()
    assert any("Click an edge" in words for words in on_pad.said)


def test_a_thicker_zone_is_darker_than_the_wall(on_pad: Hand) -> None:
    image = on_pad.canvas.grab().toImage()
    ratio = image.devicePixelRatio()

    def lightness(x: float, y: float) -> float:
        spot = on_pad.px(x, y) * ratio
        return QColor(image.pixel(spot)).lightnessF()

    assert lightness(83.0, 24.0) < lightness(25.0, 24.0) - 0.02
    paper = QColor(theme.current().paper).lightnessF()
    assert lightness(25.0, 24.0) < paper


def _sheet(qtbot: QtBot, part: Part) -> tuple[Sheet, WallParagraph]:
    made = shown_sheet(qtbot, part)
    return made, next(p for p in made.paragraphs if isinstance(p, WallParagraph))


def test_the_sheet_says_and_changes_thickness_and_material(qtbot: QtBot) -> None:
    sheet, paragraph = _sheet(qtbot, padded())
    row = paragraph.zones.row("z1").sentence
    assert row.text == "no name, 8 mm thick, sides not said, of the wall's material"
    type_into(row.field("name"), "boss")
    pick(row.field("sides"), "on one side")
    assert row.text == "boss, 8 mm thick, on one side, of the wall's material"
    assert sheet.document.part.zones[0].sides == "one"
    assert any("on one side only" in f.cause for f in sheet.document.faults)
    pick(row.field("sides"), "on both sides")
    assert not any("middle plane" in f.cause for f in sheet.document.faults)
    type_into(row.field("name"), " ")
    assert sheet.document.part.zones[0].name == ""
    type_into(row.field("thickness"), "0.5 in")
    assert sheet.document.part.zones[0].thickness == 12.7
    assert sheet.document.history.undo_name == "thickness of zone z1"
    pick(paragraph.zones.row("z1").sentence.field("material"), "Steel")
    assert sheet.document.part.zones[0].material == "Steel"
    pick(paragraph.zones.row("z1").sentence.field("material"), "the wall's material")
    assert sheet.document.part.zones[0].material is None


def test_the_mass_counts_the_zones(qtbot: QtBot) -> None:
    sheet, _ = _sheet(qtbot, padded())
    area = 6000.0 - np.pi * 100.0 - np.pi * 144.0
    grams = 7850e-9 * (3.0 * area + 8.0 * np.pi * 144.0) * 1e3
    assert f"{grams:.4g}"[:2] in " ".join(texts(sheet))


def test_another_material_for_the_wall_leaves_that_of_a_zone(qtbot: QtBot) -> None:

    part = padded()
    part = replace(part, zones=(replace(part.zones[0], material="Steel"),))
    document = Document(part)
    changes.choose_material(document, Material("Brass", 1e5, 0.35, 8500.0))
    assert {m.name for m in document.part.materials} == {"Steel", "Brass"}
    changes.MaterialChange(document, "Steel").rename("Mild steel")
    assert document.part.zones[0].material == "Mild steel"
    assert document.part.wall.material == "Brass"


def test_the_strip_has_a_button_for_zones(hand: Hand) -> None:
    button = hand.board.strip.button("Zone")
    assert button.isVisible()
    assert "Zone" in button.toolTip()


def test_a_double_click_on_its_edge_puts_a_corner_there(hand: Hand) -> None:
    hand.key(Qt.Key.Key_Z)
    hand.click(70.0, 10.0)
    hand.click(90.0, 20.0)
    hand.click(30.0, 5.0)
    hand.double(80.0, 10.0)
    assert len(corners_of(hand.part.zones[0])) == 5
    assert corners_of(hand.part.zones[0])[1] == pytest.approx((80.0, 10.0), abs=0.3)


def test_the_menu_fills_a_hole_and_cuts_a_zone_out(hand: Hand) -> None:
    menu = hand.canvas.context.actions_for("h1", (50.0, 30.0), QPoint(10, 10))
    next(a for a in menu.actions() if a.text() == "Fill it with a zone").trigger()
    assert [z.id for z in hand.part.zones] == ["z1"]
    menu = hand.canvas.context.actions_for("z1", (50.0, 30.0), QPoint(10, 10))
    texts_of = [a.text().split("\t")[0] for a in menu.actions()]
    assert not {"Hold it", "Load it"} & set(texts_of)
    next(a for a in menu.actions() if a.text() == "Cut it out as a hole").trigger()
    assert hand.part.zones == ()
    assert [h.id for h in hand.part.holes] == ["h1"]
