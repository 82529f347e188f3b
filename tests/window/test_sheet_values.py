"""Values in sentences: changed in place by mouse and keys, refused with a sentence, kept."""

from __future__ import annotations

import itertools
from dataclasses import replace

import pytest
from PySide6.QtCore import Qt
from PySide6.QtTest import QTest
from PySide6.QtWidgets import QApplication, QLineEdit
from pytestqt.qtbot import QtBot

from screenapp.model.part import StressLimit
from screenapp.window.sheet.field import LINE
from screenapp.window.sheet.rows import Cross
from screenapp.window.sheet.sheet import Sheet
from screenapp.window.sheet.wall_paragraph import WallParagraph
from tests.window.fabricate import plate
from tests.window.window_kit import pick, settle, shown_sheet, type_into


@pytest.fixture
def sheet(qtbot: QtBot) -> Sheet:
    """The sheet of a strip with a hole."""
    return shown_sheet(qtbot, plate(), 800)


def wall(sheet: Sheet) -> WallParagraph:
    """Its second paragraph."""
    paragraph = sheet.paragraph(2)
    assert isinstance(paragraph, WallParagraph)
    return paragraph


def test_enter_accepts_and_the_step_has_a_name(sheet: Sheet) -> None:
    thickness = wall(sheet).wall.field("thickness")
    type_into(thickness, "6 mm")
    assert sheet.document.part.wall.thickness == 6.0
    assert sheet.document.history.undo_name == "thickness of the wall"
    assert "The wall is 6 mm thick" in wall(sheet).wall.text
    assert not thickness.editing
    assert thickness.hasFocus()


@pytest.mark.parametrize(
    ("typed", "millimetres"), [("0.25 in", 6.35), ("5", 5.0), ("3,5", 3.5), ("1 cm", 10.0)]
)
def test_units_are_taken(sheet: Sheet, typed: str, millimetres: float) -> None:
    type_into(wall(sheet).wall.field("thickness"), typed)
    assert sheet.document.part.wall.thickness == pytest.approx(millimetres, rel=1e-12)


def test_escape_restores(sheet: Sheet) -> None:
    field = wall(sheet).wall.field("thickness")
    before = sheet.document.part
    type_into(field, "9", Qt.Key.Key_Escape)
    assert sheet.document.part is before
    assert not field.editing


@pytest.mark.parametrize("typed", ["4 kg", "thick", "-2", "0", "1e9 mm"])
def test_nonsense_is_refused_under_the_sentence_and_the_value_kept(
    sheet: Sheet, typed: str
) -> None:
    sentence = wall(sheet).wall
    before, tall = sheet.document.part, sentence.heightForWidth(sentence.width())
    type_into(sentence.field("thickness"), typed)
    assert sheet.document.part is before
    assert sentence.complaint
    assert sentence.field("thickness").editing
    assert sentence.heightForWidth(sentence.width()) > tall
    editor = sentence.field("thickness").editor
    assert editor is not None
    editor.selectAll()
    QTest.keyClicks(editor, "5")
    assert sentence.complaint == "", "typing on takes the complaint away"
    QTest.keyClick(editor, Qt.Key.Key_Return)
    assert sheet.document.part.wall.thickness == 5.0


def test_enter_f2_space_and_a_figure_begin(sheet: Sheet) -> None:
    field = wall(sheet).wall.field("thickness")
    for key in (Qt.Key.Key_Return, Qt.Key.Key_F2, Qt.Key.Key_Space):
        field.setFocus()
        QTest.keyClick(field, key)
        assert field.editing
        assert field.editor is not None
        QTest.keyClick(field.editor, Qt.Key.Key_Escape)
        assert not field.editing
    QTest.keyClick(field, Qt.Key.Key_7)
    assert field.editor is not None
    assert field.editor.text() == "7"
    QTest.keyClick(field.editor, Qt.Key.Key_Return)
    assert sheet.document.part.wall.thickness == 7.0


def test_leaving_a_value_accepts_it(sheet: Sheet) -> None:
    type_into(wall(sheet).wall.field("thickness"), "8", Qt.Key.Key_Tab)
    assert sheet.document.part.wall.thickness == 8.0
    assert QApplication.focusWidget() is wall(sheet).wall.field("material")


def test_typing_and_focus_survive_a_change_elsewhere(sheet: Sheet) -> None:
    field = wall(sheet).wall.field("thickness")
    type_into(field, "12", None)
    document = sheet.document
    document.apply("title", replace(document.part, title="Another"))
    document.apply("limits", replace(document.part, limits=(StressLimit("m1"), StressLimit("m2"))))
    settle()
    assert field.editing
    assert field.editor is QApplication.focusWidget()
    assert field.editor is not None
    assert field.editor.text() == "12"


def test_a_chooser_by_keys_alone(sheet: Sheet) -> None:
    field = wall(sheet).wall.field("state")
    field.setFocus()
    QTest.keyClick(field, Qt.Key.Key_Return)
    menu = field.menu
    assert menu is not None
    assert menu.activeAction().text().startswith("plane stress"), "it opens on what is chosen"
    QTest.keyClick(menu, Qt.Key.Key_Down)
    QTest.keyClick(menu, Qt.Key.Key_Return)
    settle()
    assert sheet.document.part.wall.state == "plane strain"
    assert "Held from contracting across" in wall(sheet).wall.text


def test_choosing_a_material_of_the_library(sheet: Sheet) -> None:
    from screenapp.model.materials import library

    grade = library()[0]
    pick(wall(sheet).wall.field("material"), "Steel grades", grade.name)
    assert sheet.document.part.material == grade.at(sheet.document.part.wall.thickness)


def test_the_same_material_chosen_anew_for_another_thickness(sheet: Sheet) -> None:
    document = sheet.document
    pick(wall(sheet).wall.field("material"), "Steel grades", "S235JR plate")
    type_into(wall(sheet).wall.field("thickness"), "20 mm")
    material = document.part.material
    assert material is not None
    assert (material.proof_stress, material.stands_for(20.0)) == (235.0, False)
    pick(wall(sheet).wall.field("material"), "S235JR plate")
    material = document.part.material
    assert material is not None
    assert (material.proof_stress, material.stands_for(20.0)) == (225.0, True)
    assert [m.name for m in document.part.materials] == ["S235JR plate"]


def test_a_material_of_ones_own(sheet: Sheet) -> None:
    pick(wall(sheet).wall.field("material"), "Own material…")
    material = sheet.document.part.material
    assert material is not None
    assert material.name == "Own material"
    type_into(wall(sheet).figures.field("E"), "70")  # as it is shown: GPa
    type_into(wall(sheet).figures.field("nu"), "0.33")
    type_into(wall(sheet).figures.field("proof_stress"), "12 ksi")
    own = sheet.document.part.material
    assert own is not None
    assert own.youngs_modulus == 70_000.0
    assert own.poissons_ratio == 0.33
    assert own.proof_stress == pytest.approx(12 * 6.894757, rel=1e-6)
    type_into(wall(sheet).figures.field("name"), "Cast, lot 7")
    assert sheet.document.part.wall.material == "Cast, lot 7"
    type_into(wall(sheet).figures.field("strength"), "400 MPa")
    field = wall(sheet).figures.field("strength")
    QTest.mouseClick(field, Qt.MouseButton.LeftButton)
    assert field.editor is not None
    QTest.keyClick(field.editor, Qt.Key.Key_Backspace)
    QTest.keyClick(field.editor, Qt.Key.Key_Return)
    own = sheet.document.part.material
    assert own is not None
    assert own.strength is None


def test_tab_reads_the_sheet_from_top_to_bottom_and_back(sheet: Sheet) -> None:
    # a row that was made last still comes in its place
    document = sheet.document
    hole = replace(document.part.holes[0], id="h2", centre=(30.0, 20.0), diameter=6.0)
    document.apply("hole", replace(document.part, holes=(*document.part.holes, hole)))
    settle()
    stops = sheet.stops()
    assert len(stops) > 20
    stops[0].setFocus()
    walked = [stops[0]]
    for _ in range(len(stops) - 1):
        QTest.keyClick(QApplication.focusWidget(), Qt.Key.Key_Tab)
        walked.append(QApplication.focusWidget())
    assert walked == stops
    QTest.keyClick(QApplication.focusWidget(), Qt.Key.Key_Backtab)
    assert QApplication.focusWidget() is stops[-2]
    # the cross at the end of a row stands at its first line, however many lines a row has
    places = [
        w.mapTo(sheet.page, w.rect().center()).y()
        for w in stops
        if sheet.page.isAncestorOf(w) and not isinstance(w, Cross)
    ]
    assert all(b >= a - LINE / 2 for a, b in itertools.pairwise(places))
    for before, cross in itertools.pairwise(stops):
        if isinstance(cross, Cross):
            assert cross.parentWidget().isAncestorOf(before)


def test_a_value_reached_by_tab_is_scrolled_to(sheet: Sheet) -> None:
    sheet.resize(420, 420)
    settle()
    last = [w for w in sheet.stops() if sheet.page.isAncestorOf(w)][-1]
    before = [w for w in sheet.stops() if sheet.page.isAncestorOf(w)][-2]
    before.setFocus()
    QTest.keyClick(before, Qt.Key.Key_Tab)
    settle()
    assert QApplication.focusWidget() is last
    top = last.mapTo(sheet.scroll_area.viewport(), last.rect().topLeft()).y()
    assert 0 <= top < sheet.scroll_area.viewport().height()


@pytest.mark.parametrize("width", [360, 420, 540, 800])
def test_sentences_wrap_at_any_width(sheet: Sheet, width: int) -> None:
    sheet.resize(width, 800)
    settle()
    for stop in sheet.stops():
        if not sheet.page.isAncestorOf(stop):
            continue
        right = stop.mapTo(sheet.page, stop.rect().topRight()).x()
        assert right <= sheet.page.width()
    assert sheet.page.width() <= width


def test_a_narrow_sheet_needs_more_lines(sheet: Sheet) -> None:
    sentence = wall(sheet).wall
    heights = [sentence.heightForWidth(w) for w in (800, 300, 150)]
    assert heights == sorted(heights)
    assert heights[0] < heights[2]


def test_every_stop_has_a_name_for_screen_readers(sheet: Sheet) -> None:
    for stop in sheet.stops():
        assert stop.accessibleName(), stop
        if not isinstance(stop, QLineEdit):
            assert stop.toolTip() or stop.accessibleName()


def test_the_title_is_edited_in_the_head(sheet: Sheet) -> None:
    title = sheet.head.title
    title.setFocus()
    title.selectAll()
    QTest.keyClicks(title, "Lug, left hand")
    QTest.keyClick(title, Qt.Key.Key_Return)
    assert sheet.document.part.title == "Lug, left hand"
    title.selectAll()
    QTest.keyClicks(title, "no")
    QTest.keyClick(title, Qt.Key.Key_Escape)
    assert title.text() == "Lug, left hand"
