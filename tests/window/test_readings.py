"""The readings at the foot of the board."""

from __future__ import annotations

import math
from dataclasses import replace

import pytest
from PySide6.QtCore import Qt
from PySide6.QtGui import QFontMetrics
from PySide6.QtTest import QTest
from PySide6.QtWidgets import QApplication, QLineEdit
from pytestqt.qtbot import QtBot

from screenapp.model.findings import READING_QUANTITIES, Estimate, Reading
from screenapp.model.part import Probe
from screenapp.window import theme
from screenapp.window.document import Document
from screenapp.window.figure_painting import lines_of
from screenapp.window.read_values import size_of
from screenapp.window.readings import EMPTY, Readings
from tests.window.fabricate import plate
from tests.window.window_kit import made_up, settle

LEFT = Qt.MouseButton.LeftButton


@pytest.fixture
def readings(qtbot: QtBot) -> Readings:
    """Two probes in two cases."""
    part = plate()
    two = (*part.readings, Probe("p2", "P2", (-30.0, 10.0)))
    made = Readings(Document(replace(part, readings=two)))
    qtbot.addWidget(made)
    made.resize(880, 180)
    made.show()
    made.activateWindow()
    settle()
    return made


def texts(readings: Readings) -> list[tuple[str, ...]]:
    """What stands in the table."""
    return [line.texts for line in readings.table.figures.lines]


def screened(document: Document) -> None:
    """Put findings with all quantities into the document."""
    estimate = Estimate(10.0, 9.9, 10.1, "settled")
    values = dict.fromkeys(READING_QUANTITIES, estimate)
    values["von_mises"] = Estimate(187.43, 186.6, 188.3, "settled")
    values |= {
        "u_x": Estimate(0.3, 0.29, 0.31, "settled"),
        "u_y": Estimate(-0.4, -0.41, -0.39, "settled"),
    }
    rising = Estimate(61.0, 61.0, math.inf, "rising")
    found = made_up(document.part)
    rows = tuple(
        Reading(
            probe.id,
            probe.name,
            case.id,
            probe.at,
            values if probe.id == "p1" else values | {"von_mises": rising},
            "settled" if probe.id == "p1" else "rising",
            why="" if probe.id == "p1" else "a sharp corner",
        )
        for probe in document.part.readings
        for case in document.part.cases
    )
    document.set_findings(replace(found, readings=rows))


def test_places_with_dashes_before_screening(readings: Readings) -> None:
    assert texts(readings)[0] == ("P1", "Pull", "20, 20", "–", "–", "–", "–", "–")
    assert len(texts(readings)) == 4


def test_figures_with_bands_after_it(readings: Readings) -> None:
    screened(readings.document)
    first, third = texts(readings)[0], texts(readings)[2]
    assert first[3] == "187.4 ± 0.9"
    assert first[7] == "settled"
    assert third[3] == "≥ 61.0"
    assert third[7] == "rising"
    assert "sharp corner" in readings.table.line_at(2).tip


def test_the_displacement_covers_every_vector_of_its_bands() -> None:
    e = Estimate
    values = {"u_x": e(0.3, 0.29, 0.31, "settled"), "u_y": e(-0.4, -0.41, -0.39, "unsettled")}
    size = size_of(Reading("p", "P", "k", (0.0, 0.0), values, "unsettled"))
    assert size.value == pytest.approx(0.5)
    assert size.low == pytest.approx(math.hypot(0.29, 0.39))
    assert size.high == pytest.approx(math.hypot(0.31, 0.41))
    assert size.trust == "unsettled"
    values["u_x"] = e(0.01, -0.02, 0.04, "settled")
    assert size_of(Reading("p", "P", "k", (0, 0), values, "unsettled")).low == pytest.approx(0.39)


def test_a_moved_probe_shows_dashes_until_it_is_read_anew(readings: Readings) -> None:
    document = readings.document
    screened(document)
    moved = replace(document.part.readings[0], at=(25.0, 20.0))
    document.apply("move", replace(document.part, readings=(moved, *document.part.readings[1:])))
    assert texts(readings)[0][2:4] == ("25, 20", "–")


def test_f2_renames(readings: Readings) -> None:
    table = readings.table
    table.setFocus()
    table.selectRow(0)
    QTest.keyClick(table, Qt.Key.Key_F2)
    editor = table.findChild(QLineEdit)
    assert editor is not None
    editor.selectAll()
    QTest.keyClicks(editor, "fillet c3")
    QTest.keyClick(editor, Qt.Key.Key_Return)
    settle()
    assert readings.document.part.readings[0].name == "fillet c3"
    assert texts(readings)[0][0] == "fillet c3"


def test_an_empty_name_is_refused_with_a_word(readings: Readings) -> None:
    said: list[str] = []
    readings.document.said.connect(said.append)
    model = readings.table.figures
    assert not model.setData(model.index(0, 0), "  ")
    assert readings.document.part.readings[0].name == "P1"
    assert "name" in said[0]


def test_delete_removes_the_probe(readings: Readings) -> None:
    table = readings.table
    table.setFocus()
    table.selectRow(2)
    assert readings.document.selection == ("p2",)
    QTest.keyClick(table, Qt.Key.Key_Delete)
    settle()
    assert [p.id for p in readings.document.part.readings] == ["p1"]
    readings.document.select("p1")
    QTest.keyClick(table, Qt.Key.Key_Delete)
    settle()
    assert readings.empty.isVisible()
    assert readings.empty.text() == EMPTY


def test_selection_goes_both_ways(readings: Readings) -> None:
    table, document = readings.table, readings.document
    rect = table.visualRect(table.figures.index(3, 0))
    QTest.mouseClick(table.viewport(), LEFT, pos=rect.center())
    assert document.selection == ("p2",)
    document.select("p1")
    assert {i.row() for i in table.selectionModel().selectedRows()} == {0}
    document.select("h1")
    assert not table.selectionModel().hasSelection()


def test_the_table_is_copied_as_text(readings: Readings) -> None:
    screened(readings.document)
    QTest.mouseClick(readings.copy_button, LEFT)
    rows = QApplication.clipboard().text().splitlines()
    assert rows[0].split("\t")[:2] == ["Reading", "Case"]
    assert rows[1].split("\t")[3] == "187.4 ± 0.9"
    assert len(rows) == 5


@pytest.mark.parametrize("width", [720, 800, 1180])
def test_numbers_are_never_cut(readings: Readings, width: int) -> None:
    screened(readings.document)
    readings.resize(width, 180)
    settle()
    table = readings.table
    metrics = table.fontMetrics()
    for row, line in enumerate(table.figures.lines):
        for column, spec in enumerate(table.figures.columns):
            if spec.number:
                room = table.visualRect(table.figures.index(row, column)).width() - 12
                assert metrics.horizontalAdvance(line.texts[column]) <= room


def test_all_cases_show_each_reading_in_the_case_that_governs_there(readings: Readings) -> None:
    document = readings.document
    screened(document)
    assert document.findings is not None
    more = Estimate(300.0, 299.0, 301.0, "settled")
    rows = [
        replace(
            r,
            values=r.values | {"von_mises": more, "sigma_2": Estimate(-9.0, -9.1, -8.9, "settled")},
        )
        if (r.probe, r.case) == ("p1", "case2")
        else r
        for r in document.findings.readings
    ]
    document.set_findings(replace(document.findings, readings=tuple(rows)))
    document.look(lens="Stress", envelope=True)
    first, second = texts(readings)
    assert first[:2] == ("P1", "Push")
    assert first[3] == "300.0 ± 1.0"
    assert second[:2] == ("P2", "Pull"), "of equals the first case"
    assert readings.table.figures.columns[1].title == "Governing case"
    document.look(stress="sigma_1")
    assert texts(readings)[0][:2] == ("P1", "Pull"), "10 in both: the first case"
    document.look(stress="sigma_2")
    assert texts(readings)[0][:2] == ("P1", "Push"), "the most compressive"
    QTest.mouseClick(
        readings.table.viewport(),
        LEFT,
        pos=readings.table.visualRect(readings.table.figures.index(0, 0)).center(),
    )
    assert document.traced is not None
    assert document.traced.case == "case2", "the history is that of the case shown"
    document.look(case=0)
    assert len(texts(readings)) == 4
    assert readings.table.figures.columns[1].title == "Case"


def test_what_rises_in_one_case_governs_before_larger_numbers(readings: Readings) -> None:
    document = readings.document
    screened(document)
    assert document.findings is not None
    rising = Estimate(20.0, 20.0, math.inf, "rising")
    rows = [
        replace(r, values=r.values | {"von_mises": rising})
        if (r.probe, r.case) == ("p1", "case2")
        else r
        for r in document.findings.readings
    ]
    document.set_findings(replace(document.findings, readings=tuple(rows)))
    document.look(lens="Utilisation", envelope=True)
    assert texts(readings)[0][1] == "Push"


def test_long_names_wrap_where_numbers_leave_no_room(readings: Readings) -> None:
    """Nothing of a name of words is cut, and no number."""
    document = readings.document
    name = "beside the upper toe of the weld"
    first = document.part.readings[0]
    named = (replace(first, name=name), *document.part.readings[1:])
    document.apply("name", replace(document.part, readings=named))
    screened(document)
    readings.resize(660, 180)
    settle()
    table = readings.table
    assert table.rowHeight(0) > table.rowHeight(2)
    metrics = QFontMetrics(theme.font())
    needed = lines_of(metrics, name, table.columnWidth(0))
    assert 2 <= needed <= 3
    assert table.rowHeight(0) >= needed * metrics.lineSpacing()
    for column in range(3, 7):
        if not table.isColumnHidden(column):
            text = texts(readings)[0][column]
            assert metrics.horizontalAdvance(text) <= table.columnWidth(column)
    readings.resize(1400, 180)
    settle()
    assert table.rowHeight(0) == table.rowHeight(2), "with room they stand in one line again"
