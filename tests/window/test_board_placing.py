"""Supports, loads and probes put on by clicking."""

from __future__ import annotations

from dataclasses import replace
from pathlib import Path

import pytest
from PySide6.QtCore import QPointF, Qt
from PySide6.QtWidgets import QPushButton
from pytestqt.qtbot import QtBot

from screenapp.model.part import (
    BearingLoad,
    Case,
    CircleHole,
    FixedSupport,
    ForceLoad,
    GravityLoad,
    Part,
    PointLoad,
    PrescribedSupport,
    PressureLoad,
    RollerSupport,
)
from screenapp.model.part_json import write_part
from screenapp.window import theme
from screenapp.window.board import empty_board
from tests.window.board_kit import Hand, plate


@pytest.fixture
def hand(qtbot: QtBot) -> Hand:
    made = Hand(plate())
    qtbot.addWidget(made.board)
    return made


def choose(hand: Hand, way: str) -> None:
    """Click a way in the popover."""
    popover = hand.canvas.placing.popover
    button = next(b for b in popover.findChildren(QPushButton) if b.text() == way and b.isVisible())
    button.click()


def test_a_click_and_enter_fixes_an_edge(hand: Hand) -> None:
    hand.type("H")
    hand.click(0.0, 20.0)
    assert hand.canvas.placing.busy
    assert hand.canvas.part.supports == (FixedSupport("s1", "e4"),)
    assert hand.part.supports == ()
    hand.enter()
    assert hand.part.supports == (FixedSupport("s1", "e4"),)
    assert not hand.canvas.placing.busy


def test_rollers_pins_and_moved_places(hand: Hand) -> None:
    hand.type("H")
    hand.click(30.0, 0.0)
    choose(hand, "Roller")
    hand.enter()
    hand.click(60.0, 30.0)
    choose(hand, "Pin")
    hand.enter()
    hand.click(100.0, 60.0)
    choose(hand, "Moved")
    hand.type("0.1 in")
    hand.enter()
    assert hand.part.supports[:2] == (RollerSupport("s1", "e1"), RollerSupport("s2", "h1"))
    moved = hand.part.supports[2]
    assert isinstance(moved, PrescribedSupport)
    assert moved.x == pytest.approx(2.54, abs=1e-12)
    assert moved.y is None


def test_a_hole_is_loaded_by_bearing_downwards_in_a_new_case(hand: Hand) -> None:
    hand.type("W")
    hand.click(50.0, 30.0)
    hand.type("2 kN")
    assert hand.canvas.part.cases[0].loads == (BearingLoad("l1", "h1", 0.0, -2000.0),)
    hand.enter()
    assert hand.part.cases == (Case("k1", "Case 1", (BearingLoad("l1", "h1", 0.0, -2000.0),)),)
    hand.document.undo()
    assert hand.part.cases == ()


def test_an_edge_takes_a_force_or_a_pressure(hand: Hand) -> None:
    hand.type("W")
    hand.click(100.0, 20.0)
    hand.type("100")
    hand.tab()
    hand.type("0")
    hand.enter()
    hand.click(100.0, 20.0)
    choose(hand, "Pressure")
    hand.type("2")
    hand.enter()
    loads = hand.part.cases[0].loads
    assert loads == (ForceLoad("l1", "e2", 100.0, 0.0), PressureLoad("l2", "e2", 2.0))


def test_a_corner_takes_a_point_load_by_components(hand: Hand) -> None:
    hand.type("W")
    hand.click(100.0, 60.0)
    hand.tab()
    hand.tab()
    hand.type("30")
    hand.tab()
    hand.type("-40")
    hand.enter()
    assert hand.part.cases[0].loads == (PointLoad("l1", "c3", 30.0, -40.0),)


def test_loads_go_into_the_present_case(hand: Hand) -> None:
    hand.document.apply("cases", replace(hand.part, cases=(Case("k1", "a"), Case("k2", "b"))))
    hand.document.look(case=1)
    hand.type("W")
    hand.click(50.0, 30.0)
    hand.type("5")
    hand.enter()
    assert [len(c.loads) for c in hand.part.cases] == [0, 1]


def test_without_a_value_nothing_is_put_and_it_is_said(hand: Hand) -> None:
    hand.type("W")
    hand.click(50.0, 30.0)
    hand.enter()
    assert hand.part == plate()
    assert hand.canvas.placing.busy
    hand.key(Qt.Key.Key_Escape)
    assert not hand.canvas.placing.busy
    assert hand.part == plate()


def test_a_click_elsewhere_keeps_what_is_complete(hand: Hand) -> None:
    hand.type("W")
    hand.click(100.0, 20.0)
    hand.type("7")
    hand.click(0.0, 20.0)
    assert [x.id for x in hand.part.cases[0].loads] == ["l1"]
    hand.click(-8.0, -8.0)
    assert [x.id for x in hand.part.cases[0].loads] == ["l1"]


def test_a_load_is_changed_by_double_click_and_removed(hand: Hand) -> None:
    loads = (ForceLoad("l1", "e2", 100.0, 0.0), GravityLoad("l2", 0.0, -9.81))
    hand.document.apply("load", replace(hand.part, cases=(Case("k1", "a", loads),)))
    frame = hand.canvas.frame_now
    mark = next(m for m in hand.canvas.symbols.marks(frame) if m.id == "l1")
    shaft = mark.lines[0].mean(axis=0)
    spot = frame.mm(QPointF(*shaft))
    hand.double(*spot)
    assert hand.document.selection == ("l1",)
    popover = hand.canvas.placing.popover
    assert popover.field("x").text() == "100 N"
    popover.field("x").setFocus()
    popover.field("x").selectAll()
    hand.type("250")
    hand.enter()
    assert hand.part.cases[0].loads[0] == ForceLoad("l1", "e2", 250.0, 0.0)
    hand.click(*spot)
    hand.key(Qt.Key.Key_Delete)
    assert hand.part.cases[0].loads == (GravityLoad("l2", 0.0, -9.81),)


def test_probes_land_exactly_on_rims_and_take_typed_places(hand: Hand) -> None:
    hand.type("P")
    hand.click(57.0, 37.0)
    x, y = hand.part.readings[0].at
    assert (x - 50.0) ** 2 + (y - 30.0) ** 2 == pytest.approx(100.0, rel=1e-12)
    hand.go(20.0, 20.0)
    hand.type("12.5")
    hand.tab()
    hand.type("7")
    hand.enter()
    assert hand.part.readings[1].at == (12.5, 7.0)
    assert [p.name for p in hand.part.readings] == ["P1", "P2"]


def test_no_probe_where_there_is_no_material(hand: Hand) -> None:
    hand.type("P")
    hand.click(50.0, 30.0)
    hand.click(-6.0, 20.0)
    assert hand.part.readings == ()
    assert "no material" in hand.said[-1]


def test_faults_are_ringed_and_told_on_hover(hand: Hand) -> None:
    hand.document.apply("hole", replace(hand.part, holes=(CircleHole("h1", (50.0, 30.0), -1.0),)))
    assert any(f.ids == ("h1",) for _, f in hand.canvas.marked.spots)
    hand.go(50.0, 30.0)
    assert "diameter" in hand.canvas.viewport().toolTip()


def test_every_tool_has_a_key_a_tooltip_and_a_name(hand: Hand) -> None:
    keys = [t.key for t in hand.board.tools]
    assert len(set(keys)) == len(keys)
    for tool in hand.board.tools:
        button = hand.board.strip.button(tool.name)
        hand.board.take(tool.name)
        hand.board.take(tool.name)
        assert button.accessibleName() == tool.name
        assert f"({tool.key})" in button.toolTip()
        assert tool.line in button.toolTip()
        assert not button.icon().isNull()
        hand.canvas.setFocus()
        hand.type(tool.key)
        assert hand.canvas.tool is tool
        assert button.isChecked()


def test_an_empty_board_offers_samples(
    qtbot: QtBot, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    for i in range(4):
        write_part(replace(plate(), title=f"Plate {i}"), tmp_path / f"s{i}.part.json")
    monkeypatch.setattr(empty_board, "sample_paths", lambda: sorted(tmp_path.glob("*.part.json")))
    hand = Hand(Part())
    qtbot.addWidget(hand.board)
    assert hand.board.empty.isVisible()
    assert [b.text() for b in hand.board.empty.buttons] == ["Plate 0", "Plate 1", "Plate 2"]
    wanted: list[object] = []
    hand.board.sample_wanted.connect(wanted.append)
    hand.board.empty.buttons[1].click()
    assert wanted == [tmp_path / "s1.part.json"]
    hand.document.open(plate(), None)
    assert not hand.board.empty.isVisible()


def test_themes_change_while_shown(hand: Hand) -> None:
    before = hand.board.grab().toImage().pixelColor(500, 20)
    theme.choose("slate")
    try:
        after = hand.board.grab().toImage().pixelColor(500, 20)
    finally:
        theme.choose("paper")
    assert after.lightness() < 80 < before.lightness()
