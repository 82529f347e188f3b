"""The history of a chosen number: chosen by mouse and key, on the board and in the sheet."""

from __future__ import annotations

from pathlib import Path

import pytest
from PySide6.QtCore import QPoint, Qt
from PySide6.QtGui import QColor
from PySide6.QtTest import QTest
from PySide6.QtWidgets import QApplication
from pytestqt.qtbot import QtBot

from screenapp.window import theme
from screenapp.window.figure_table import FigureTable
from screenapp.window.main_window import MainWindow
from screenapp.window.sheet.findings_paragraph import FindingsParagraph
from screenapp.window.traced import Traced, traced_number
from tests.window import fabricate as made
from tests.window.window_kit import settle, window

MESH = made.ring(32, 8)


@pytest.fixture
def main(qtbot: QtBot, tmp_path: Path) -> MainWindow:
    """A window with findings under the Stress lens."""
    theme.choose("paper")
    shown = window(tmp_path)
    qtbot.addWidget(shown)
    shown.document.open(made.plate(), None)
    part = shown.document.part
    shown.document.set_findings(made.findings(part, shown.document.key, MESH))
    shown.document.look(lens="Stress")
    shown.document.mark_saved(tmp_path / "x.part.json")
    settle()
    return shown


def findings_of(main: MainWindow) -> FindingsParagraph:
    """The paragraph."""
    return next(p for p in main.sheet.paragraphs if isinstance(p, FindingsParagraph))


def press(table: FigureTable, row: int) -> None:
    """Click a row."""
    middle = table.visualRect(table.figures.index(row, 0)).center()
    QTest.mouseClick(table.viewport(), Qt.MouseButton.LeftButton, pos=middle)
    settle()


def callouts_with_history(main: MainWindow) -> list[str]:
    """Heads of the cards on the board that show a history."""
    return [c.head for c in main.painter.callouts.callouts if c.history is not None]


def test_a_row_of_the_findings_shows_the_history_below_it_and_on_the_board(
    main: MainWindow,
) -> None:
    paragraph = findings_of(main)
    assert not paragraph.history.isVisibleTo(main.sheet)
    assert callouts_with_history(main) == []
    press(paragraph.table, 0)
    figure = paragraph.history.figure
    assert figure is not None
    assert figure.name == "hole h1, 90°"
    assert len(figure.points) == 3
    assert paragraph.history.isVisibleTo(main.sheet)
    assert callouts_with_history(main) == ["150.2 ± 0.6 MPa"]


def test_the_history_is_reached_by_keys_and_said_in_words(main: MainWindow) -> None:
    paragraph = findings_of(main)
    paragraph.table.setFocus()
    QTest.keyClick(paragraph.table, Qt.Key.Key_Down)
    settle()
    plot = paragraph.history
    assert plot.figure is not None
    assert plot.focusPolicy() == Qt.FocusPolicy.TabFocus
    assert plot.accessibleName().startswith("History of hole h1, 90°")
    assert "3 passes" in plot.accessibleDescription()
    QTest.keyClick(paragraph.table, Qt.Key.Key_Tab)
    assert QApplication.focusWidget() is plot


def test_another_case_is_shown_with_its_number(main: MainWindow) -> None:
    paragraph = findings_of(main)
    names = [paragraph.table.line_at(i).texts[1] for i in range(2)]
    press(paragraph.table, names.index("Push"))
    assert main.document.view.case == 1
    assert main.document.traced is not None
    assert main.document.traced.case == "case2"
    assert len(callouts_with_history(main)) == 1


def test_a_reading_unfolds_where_it_was_read(main: MainWindow) -> None:
    press(main.readings.table, 0)
    cards = [c for c in main.painter.callouts.callouts if c.history is not None]
    assert [c.head for c in cards] == ["61.3 ± 0.4 MPa"]
    assert cards[0].at == (20.0, 20.0)
    assert main.board.canvas.labels.values == ()  # its value stands in the card
    figure = findings_of(main).history.figure
    assert figure is not None
    assert figure.name == "P1"


def test_a_press_on_a_card_unfolds_it_and_empty_board_folds_it(main: MainWindow) -> None:
    canvas = main.board.canvas
    canvas.grab()  # paint the cards
    (card,) = main.painter.callouts.cards(canvas.frame_now)
    QTest.mouseClick(canvas.viewport(), Qt.MouseButton.LeftButton, pos=card.center().toPoint())
    settle()
    assert callouts_with_history(main) == ["150.2 ± 0.6 MPa"]
    assert main.document.selection == ("h1",)
    taller = main.painter.callouts.cards(canvas.frame_now)[0]
    assert taller.height() > card.height() + 80.0
    QTest.mouseClick(canvas.viewport(), Qt.MouseButton.LeftButton, pos=QPoint(3, 3))
    settle()
    assert main.document.traced is None
    assert callouts_with_history(main) == []
    assert not findings_of(main).history.isVisibleTo(main.sheet)


def test_the_trust_lens_shows_the_first_history_by_itself(main: MainWindow) -> None:
    main.document.look(lens="Trust")
    settle()
    assert callouts_with_history(main) == ["150.2 ± 0.6 MPa"]


def test_the_choice_outlives_another_screening(main: MainWindow) -> None:
    press(findings_of(main).table, 0)
    again = made.findings(main.document.part, main.document.key, MESH, "rising")
    main.document.set_findings(again)
    settle()
    figure = findings_of(main).history.figure
    assert figure is not None
    assert figure.trust == "rising"
    assert figure.band is None
    main.document.set_findings(None)
    settle()
    assert findings_of(main).history.figure is None


def test_band_and_line_are_painted_in_both_themes(main: MainWindow) -> None:
    press(findings_of(main).table, 0)
    plot = findings_of(main).history
    for name in ("paper", "slate"):
        theme.choose(name)
        settle()
        image = plot.grab().toImage()
        colours = {
            image.pixelColor(x, y).name()
            for x in range(image.width())
            for y in range(image.height())
        }
        ink = QColor(theme.current().ink)
        near = [c for c in map(QColor, colours) if abs(c.lightness() - ink.lightness()) < 12]
        assert near, name
        assert len(colours) > 8
    theme.choose("paper")


def test_what_is_not_in_the_findings_is_not_traced() -> None:
    part = made.plate()
    found = made.findings(part, "k", MESH)
    assert traced_number(found, Traced("case1", probe="gone")) is None
    assert traced_number(found, Traced("case1", feature="h9")) is None
    assert traced_number(None, Traced("case1", feature="h1")) is None
    assert traced_number(found, Traced("case1", feature="h1")) is found.cases[0].peaks[0]
