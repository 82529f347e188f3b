"""Patterns, chamfers and notes in the sheet."""

from __future__ import annotations

from dataclasses import replace

import pytest
from PySide6.QtCore import Qt
from PySide6.QtTest import QTest
from pytestqt.qtbot import QtBot

from screenapp.model import edits
from screenapp.model.part import CircleHole, Dimension, FixedSupport
from screenapp.model.pattern import BoltCircle, GridPattern, RowPattern
from screenapp.window.sheet.part_paragraph import PartParagraph
from screenapp.window.sheet.sheet import Sheet
from tests.model.plates import plate
from tests.window.window_kit import pick, settle, shown_sheet, type_into

ROW = CircleHole("h1", (10.0, 10.0), 6.0, RowPattern(4, 15.0))


@pytest.fixture
def sheet(qtbot: QtBot) -> Sheet:
    return shown_sheet(qtbot, plate(None, ROW, CircleHole("h2", (80.0, 40.0), 5.0)), 800)


def part_of(sheet: Sheet) -> PartParagraph:
    paragraph = sheet.paragraph(1)
    assert isinstance(paragraph, PartParagraph)
    return paragraph


def test_a_pattern_is_one_row_and_all_holes_are_counted(sheet: Sheet) -> None:
    paragraph = part_of(sheet)
    assert "5 holes" in paragraph.summary.text
    assert paragraph.holes.ids == ("h1", "h2")
    words = paragraph.holes.row("h1").sentence.text
    assert "4 in a row, 15 mm apart, turned 0°" in words


def test_count_and_pitch_are_typed_and_what_goes_is_said(sheet: Sheet) -> None:
    document = sheet.document
    said: list[str] = []
    document.said.connect(said.append)
    document.apply("hold", edits.add_support(document.part, FixedSupport("", "h1.4")))
    row = part_of(sheet).holes.row("h1").sentence
    type_into(row.field("pattern count"), "3")
    assert document.part.holes[0].pattern == RowPattern(3, 15.0)  # type: ignore[union-attr]
    assert document.history.undo_name == "count of pattern h1"
    assert "support s2 on h1.4" in said[-1]
    type_into(row.field("pattern pitch"), "0.5 in")
    assert document.part.holes[0].pattern == RowPattern(3, pytest.approx(12.7))  # type: ignore[union-attr]
    type_into(row.field("pattern count"), "0")
    assert document.part.holes[0].pattern.count == 3  # type: ignore[union-attr]


def test_a_pitch_may_be_an_expression(sheet: Sheet) -> None:
    part = replace(sheet.document.part, dimensions=(Dimension("p", 7.25),))
    sheet.document.apply("dimension", part)
    row = part_of(sheet).holes.row("h1").sentence
    type_into(row.field("pattern pitch"), "2*p")
    assert sheet.document.part.holes[0].pattern == RowPattern(4, 14.5)  # type: ignore[union-attr]
    assert [f.field for f in sheet.document.part.formulas] == ["holes.h1.pattern.pitch"]


@pytest.mark.parametrize(
    ("kind", "pattern"),
    [("row", RowPattern), ("grid", GridPattern), ("bolt circle", BoltCircle)],
)
def test_a_hole_is_repeated_from_the_sheet(sheet: Sheet, kind: str, pattern: type) -> None:
    pick(part_of(sheet).holes.row("h2").sentence.field("repeat"), f"a {kind}")
    assert isinstance(sheet.document.part.holes[1].pattern, pattern)  # type: ignore[union-attr]
    assert sheet.document.history.undo_name == "repeat hole h2"


def test_a_pattern_is_broken_up_from_the_sheet(sheet: Sheet) -> None:
    field = part_of(sheet).holes.row("h1").sentence.field("break up")
    field.setFocus()
    QTest.keyClick(field, Qt.Key.Key_Return)
    settle()
    assert [h.id for h in sheet.document.part.holes] == ["h1", "h3", "h4", "h5", "h2"]


def test_the_chamfer_of_a_selected_corner(sheet: Sheet) -> None:
    document = sheet.document
    document.apply("chamfer", edits.set_chamfer(document.part, "c2", 5.0))
    document.select("c2")
    row = part_of(sheet).picked.row("c2").sentence
    assert "chamfered by 5 mm" in row.text
    type_into(row.field("chamfer"), "3")
    assert document.part.outline is not None
    assert document.part.outline.corners[1].chamfer == 3.0


def test_a_hole_beyond_the_list_is_shown_when_selected(sheet: Sheet) -> None:
    holes = tuple(CircleHole(f"h{i}", (5.0 * i, 40.0), 2.0) for i in range(1, 17))
    sheet.document.apply("many", replace(sheet.document.part, holes=holes))
    sheet.document.select("h16")
    assert part_of(sheet).picked.ids == ("h16",)


def test_notes_are_kept_by_leaving_and_restored_by_escape(sheet: Sheet) -> None:
    notes = part_of(sheet).notes
    notes.setFocus()
    QTest.keyClicks(notes, "Bolted to the frame")
    QTest.keyClick(notes, Qt.Key.Key_Return)
    QTest.keyClicks(notes, "by M6.")
    assert sheet.document.part.notes == ""
    sheet.head.title.setFocus()
    assert sheet.document.part.notes == "Bolted to the frame\nby M6."
    assert sheet.document.history.undo_name == "notes"
    notes.setFocus()
    QTest.keyClicks(notes, "x")
    QTest.keyClick(notes, Qt.Key.Key_Escape)
    assert notes.toPlainText() == "Bolted to the frame\nby M6."
    sheet.document.undo()
    assert notes.toPlainText() == ""


def test_notes_still_being_typed_are_taken_when_saving(sheet: Sheet) -> None:
    notes = part_of(sheet).notes
    notes.setFocus()
    QTest.keyClicks(notes, "half")
    sheet.take_typing()
    assert sheet.document.part.notes == "half"
