"""Commands: one list of keys, searched and run; every tool and command has a key, and it works."""

from __future__ import annotations

from pathlib import Path

import pytest
from PySide6.QtCore import Qt
from PySide6.QtTest import QTest
from PySide6.QtWidgets import QToolButton
from pytestqt.qtbot import QtBot

from screenapp.window.commands import Command, matches
from screenapp.window.commands_panel import CommandsPanel
from screenapp.window.main_window import MainWindow
from tests.window.board_kit import plate
from tests.window.window_kit import settle, window

CONTROL = Qt.KeyboardModifier.ControlModifier


@pytest.fixture
def main(qtbot: QtBot, tmp_path: Path) -> MainWindow:
    made = window(tmp_path)
    qtbot.addWidget(made)
    made.document.open(plate(), None)
    settle()
    return made


def panel(main: MainWindow) -> CommandsPanel:
    QTest.keyClick(main, Qt.Key.Key_F1)
    settle()
    made = main._panels["commands"]
    assert isinstance(made, CommandsPanel)
    return made


def test_every_command_has_a_key_a_name_and_one_line(main: MainWindow) -> None:
    for command in main.commands:
        assert command.keys, command.name
        assert command.name
        assert command.line.endswith("."), command.name
        assert "\n" not in command.line


def test_no_key_does_two_things_at_one_place(main: MainWindow) -> None:
    own = {id(c): t.name for t in main.board.tools for c in t.commands()}
    for tool in main.board.tools:  # what another tool's keys do counts only in its hand
        keys = [
            key
            for command in main.commands
            if command.run is not None and own.get(id(command), tool.name) == tool.name
            for key in command.keys
            if key != "Del"  # on the board and in the menu it removes the same
        ]
        assert sorted(keys) == sorted(set(keys)), tool.name


def test_typing_finds_and_enter_runs(main: MainWindow) -> None:
    found = panel(main)
    assert not found.isModal()
    assert len(found.shown) == len(main.commands)
    QTest.keyClicks(found.search, "round ho")
    assert found.shown[0].name == "Round hole"  # after it come those whose line says it
    assert len(found.shown) < 4
    QTest.keyClick(found.search, Qt.Key.Key_Return)
    settle()
    assert main.board.canvas.tool is not None
    assert main.board.canvas.tool.name == "Round hole"
    assert "commands" not in main._panels


def test_arrows_choose_while_one_types_and_escape_closes(main: MainWindow) -> None:
    found = panel(main)
    QTest.keyClicks(found.search, "theme")
    names = [c.name for c in found.shown]
    assert len(names) == 3
    QTest.keyClick(found.search, Qt.Key.Key_Down)
    assert found.list.currentRow() == 1
    QTest.keyClick(found.search, Qt.Key.Key_Escape)
    settle()
    assert "commands" not in main._panels


def test_a_search_by_key_and_one_that_finds_nothing(main: MainWindow) -> None:
    found = panel(main)
    QTest.keyClicks(found.search, "ctrl+s")
    assert "Save" in [c.name for c in found.shown]
    found.search.clear()
    QTest.keyClicks(found.search, "zzz")
    assert found.shown == []
    assert found.none.isVisible()
    QTest.keyClick(found.search, Qt.Key.Key_Return)  # nothing to run


def test_what_cannot_be_done_now_is_listed_but_not_run(main: MainWindow) -> None:
    found = panel(main)
    QTest.keyClicks(found.search, "cancel screening")
    (item,) = [found.list.item(i) for i in range(found.list.count())]
    assert not item.flags() & Qt.ItemFlag.ItemIsEnabled


def test_every_tool_is_taken_by_its_key(main: MainWindow) -> None:
    main.go_to_board()
    for tool in main.board.tools:
        QTest.keyClicks(main.board.canvas, tool.key)
        assert main.board.canvas.tool is tool
        QTest.keyClick(main.board.canvas, Qt.Key.Key_Escape)
        assert main.board.canvas.tool is main.board.tools[0]


def test_tooltips_tell_name_key_and_one_line(main: MainWindow) -> None:
    for tool in main.board.tools:
        main.board.take(tool.name)  # a button that stands for several shows the one in hand
        button = main.board.strip.button(tool.name)
        assert isinstance(button, QToolButton)
        main.board.take(tool.name)
        assert button.toolTip().startswith(f"{tool.name} ({tool.key})\n{tool.line}")
    save = main.actions_.by_name["save"]
    assert save.toolTip() == "Save (Ctrl+S)\nWrites the part into its file."


def test_units_are_switched_by_a_key(main: MainWindow) -> None:
    QTest.keyClick(main, Qt.Key.Key_U, CONTROL)
    assert main.document.part.display_units == "in-lbf-ksi"
    QTest.keyClick(main, Qt.Key.Key_U, CONTROL)
    assert main.document.part.display_units == "mm-N-MPa"


@pytest.mark.parametrize(
    ("wanted", "found"),
    [
        ("hole", True),
        ("round hole", True),
        ("rim", True),
        ("c", True),
        ("board", True),
        ("ole", True),
        ("square", False),
    ],
)
def test_search_words(wanted: str, found: bool) -> None:
    command = Command("Round hole", "Click the centre, then the rim.", ("C",), lambda: None)
    assert matches(command, wanted) is found
