"""Named dimensions in the window: the rows of paragraph 1, and expressions in every field."""

from __future__ import annotations

import math
from dataclasses import replace
from pathlib import Path

import pytest
from PySide6.QtCore import Qt
from PySide6.QtTest import QTest
from pytestqt.qtbot import QtBot

from screenapp.model.edit_dimensions import formula_at
from screenapp.model.part import Case, CircleHole, Dimension, ForceLoad, Part
from screenapp.model.part_json import part_from_text, part_to_text
from screenapp.window.main_window import MainWindow
from screenapp.window.sheet.dimension_rows import row_id
from screenapp.window.sheet.field import Field
from screenapp.window.sheet.loaded_paragraph import LoadedParagraph
from screenapp.window.sheet.part_paragraph import PartParagraph
from screenapp.window.sheet.rows import Row
from screenapp.window.sheet.wall_paragraph import WallParagraph
from tests.window.board_kit import plate
from tests.window.window_kit import LEFT, pick, settle, type_into, window


@pytest.fixture
def win(qtbot: QtBot, tmp_path: Path) -> MainWindow:
    made = window(tmp_path)
    qtbot.addWidget(made)
    made.document.open(plate(), None)
    settle()
    return made


def paragraph(win: MainWindow) -> PartParagraph:
    found = win.sheet.paragraph(1)
    assert isinstance(found, PartParagraph)
    return found


def row(win: MainWindow, name: str) -> Row:
    return paragraph(win).dimensions.row(row_id(name))


def hole_field(win: MainWindow, key: str) -> Field:
    return paragraph(win).holes.row("h1").sentence.field(key)


def hole(win: MainWindow) -> CircleHole:
    (only,) = win.document.part.holes
    assert isinstance(only, CircleHole)
    return only


def add(win: MainWindow, name: str, value: str, kind: str = "a length") -> None:
    pick(paragraph(win).add.field("add dimension"), kind)
    made = win.document.part.dimensions[-1].name
    type_into(row(win, made).where.field("name"), name)
    type_into(row(win, name).sentence.field("value"), value)


def test_a_dimension_is_added_used_and_changed_in_one_step(win: MainWindow) -> None:
    add(win, "bore", "24 mm")
    assert win.document.part.dimensions == (Dimension("bore", 24.0),)
    type_into(hole_field(win, "diameter"), "bore/2 + 1")
    assert hole(win).diameter == 13.0
    assert hole_field(win, "diameter").piece.text == "=\u200913 mm"
    assert "bore/2 + 1" in hole_field(win, "diameter").toolTip()
    assert "bore/2 + 1" in hole_field(win, "diameter").accessibleName()
    assert "Gives diameter of hole h1." in row(win, "bore").sentence.text
    before = win.document.part
    type_into(row(win, "bore").sentence.field("value"), "1 in")
    assert hole(win).diameter == pytest.approx(13.7)
    win.document.undo()
    settle()
    assert win.document.part == before
    QTest.mouseClick(hole_field(win, "diameter"), LEFT)
    editor = hole_field(win, "diameter").editor
    assert editor is not None
    assert editor.text() == "bore/2 + 1"
    QTest.keyClick(editor, Qt.Key.Key_Return)
    assert win.document.part == before


def test_a_plain_number_takes_the_expressions_place_even_if_it_is_the_same(
    win: MainWindow,
) -> None:
    add(win, "bore", "24")
    type_into(hole_field(win, "diameter"), "bore")
    assert formula_at(win.document.part, "holes.h1.diameter") == "bore"
    type_into(hole_field(win, "diameter"), "24")
    assert formula_at(win.document.part, "holes.h1.diameter") is None
    win.document.undo()
    assert formula_at(win.document.part, "holes.h1.diameter") == "bore"


def test_what_has_no_value_is_said_in_its_place_and_nothing_changes(win: MainWindow) -> None:
    add(win, "a", "10")
    add(win, "b", "2*a")
    assert win.document.part.dimensions[1].value == 20.0
    before = win.document.part
    type_into(row(win, "a").sentence.field("value"), "b/2")
    assert "depends on itself: a → b → a" in row(win, "a").sentence.complaint.replace("\n", " ")
    assert win.document.part == before
    editor = row(win, "a").sentence.field("value").editor
    assert editor is not None
    QTest.keyClick(editor, Qt.Key.Key_Escape)
    settle()
    assert row(win, "a").sentence.complaint == ""
    type_into(hole_field(win, "x"), "c + 1")
    assert "is not a dimension of the part" in paragraph(win).holes.row("h1").sentence.complaint
    assert win.document.part == before


def test_bounds_are_set_and_passing_them_is_said(win: MainWindow) -> None:
    add(win, "bore", "24")
    type_into(row(win, "bore").sentence.field("upper"), "30")
    type_into(row(win, "bore").sentence.field("lower"), "20")
    assert win.document.part.dimensions == (Dimension("bore", 24.0, 20.0, 30.0),)
    type_into(row(win, "bore").sentence.field("value"), "40")
    said = [f.cause for f in win.document.faults if f.field.startswith("dimensions")]
    assert said == ["dimension “bore” is 40, above its bound of 30"]
    type_into(row(win, "bore").sentence.field("upper"), "any")
    assert win.document.part.dimensions[0].upper is None


def test_renaming_and_removing_keep_the_part_as_it_is(win: MainWindow) -> None:
    add(win, "bore", "24")
    type_into(hole_field(win, "diameter"), "bore - 4")
    type_into(row(win, "bore").where.field("name"), "bohrung")
    assert formula_at(win.document.part, "holes.h1.diameter") == "bohrung - 4"
    QTest.mouseClick(row(win, "bohrung").cross, LEFT)
    settle()
    assert win.document.part.dimensions == ()
    assert win.document.part.formulas == ()
    assert hole(win).diameter == 20.0
    assert "now stands in the place that used it" in win.said.text()


def test_inches_shown_and_an_angle(win: MainWindow) -> None:
    add(win, "bore", "25.4")
    win.document.apply(
        "units", Part(**{**win.document.part.__dict__, "display_units": "in-lbf-ksi"})
    )
    settle()
    assert row(win, "bore").sentence.field("value").piece.text == "1 in"
    type_into(hole_field(win, "diameter"), "bore - 0.5")
    assert formula_at(win.document.part, "holes.h1.diameter") == "bore - 12.7"
    QTest.mouseClick(hole_field(win, "diameter"), LEFT)
    editor = hole_field(win, "diameter").editor
    assert editor is not None
    assert editor.text() == "bore - 12.7 mm"
    QTest.keyClick(editor, Qt.Key.Key_Escape)
    add(win, "lean", "0.5 rad", "an angle")
    assert row(win, "lean").sentence.field("value").piece.text == "28.65°"


def test_the_wall_is_given_by_a_dimension_too(win: MainWindow) -> None:
    add(win, "t", "2")
    wall = win.sheet.paragraph(2)
    assert isinstance(wall, WallParagraph)
    type_into(wall.wall.field("thickness"), "2*t")
    assert win.document.part.wall.thickness == 4.0
    type_into(row(win, "t").sentence.field("value"), "1.5")
    assert win.document.part.wall.thickness == 3.0


def test_the_size_of_a_load_keeps_its_expression(win: MainWindow) -> None:
    """Typed, turned another way, followed when the dimension changes, let go, and undone."""
    document = win.document
    load = ForceLoad("l1", "e2", 0.0, -100.0)
    document.apply("load", replace(document.part, cases=(Case("k1", "pull", (load,)),)))
    add(win, "pull", "500", "a plain number")
    loaded = win.sheet.paragraph(4)
    assert isinstance(loaded, LoadedParagraph)

    def field(key: str) -> Field:
        return loaded.block("k1").loads.row("l1").sentence.field(key)

    def vector() -> tuple[float, float]:
        (now,) = document.part.cases[0].loads
        assert isinstance(now, ForceLoad)
        return now.x, now.y

    type_into(field("size"), "2*pull + 0.1 kN")
    assert vector() == (0.0, -1100.0)
    assert formula_at(document.part, "cases.k1.loads.l1.y") == "-(2*pull + 100)"
    assert field("size").piece.text.startswith("=")
    type_into(field("way"), "30")
    assert vector() == pytest.approx((1100.0 * math.cos(math.radians(30.0)), 550.0))
    type_into(row(win, "pull").sentence.field("value"), "1000")
    assert vector() == pytest.approx((2100.0 * math.cos(math.radians(30.0)), 1050.0))
    assert field("size").piece.formula.startswith("2*pull + 100")
    again = part_from_text(part_to_text(document.part))
    assert again == document.part
    type_into(field("size"), "700 N")
    assert vector() == pytest.approx((700.0 * math.cos(math.radians(30.0)), 350.0))
    assert [f for f in document.part.formulas if f.field.startswith("cases")] == []
    document.undo()
    assert vector() == pytest.approx((2100.0 * math.cos(math.radians(30.0)), 1050.0))
    assert len([f for f in document.part.formulas if f.field.startswith("cases")]) == 2
