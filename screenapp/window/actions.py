"""The slim menu bar and every key that works in the whole window."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from functools import partial
from typing import TYPE_CHECKING

from PySide6.QtGui import QAction, QActionGroup, QKeySequence
from PySide6.QtWidgets import QLineEdit, QMenu, QPlainTextEdit

from screenapp.window import theme
from screenapp.window.board.lens_bar import LENSES

if TYPE_CHECKING:
    from screenapp.window.main_window import MainWindow

Standard = QKeySequence.StandardKey


@dataclass(frozen=True)
class Item:
    """One line of a menu."""

    name: str
    text: str
    act: Callable[[], object]
    keys: tuple[Standard | str, ...] = ()
    tip: str = ""


class Actions:
    """Makes the menus of a window and keeps their lines up to date."""

    def __init__(self, window: MainWindow) -> None:
        self._window = window
        self.by_name: dict[str, QAction] = {}
        bar = window.menuBar()
        self._file_menu(bar.addMenu("&File"))
        self._edit_menu(bar.addMenu("&Edit"))
        self._view_menu(bar.addMenu("&View"))
        self._part_menu(bar.addMenu("&Part"))
        self._help_menu(bar.addMenu("&Help"))
        document = window.document
        document.part_changed.connect(self.refresh)
        document.selection_changed.connect(self.refresh)
        document.view_changed.connect(self.refresh)
        self.refresh()

    def refresh(self) -> None:
        """Enable what can be done, and name what undo and redo would do."""
        document = self._window.document
        history = document.history
        undo, redo = self.by_name["undo"], self.by_name["redo"]
        undo.setEnabled(history.can_undo)
        undo.setText(f"&Undo {history.undo_name}".strip())
        redo.setEnabled(history.can_redo)
        redo.setText(f"&Redo {history.redo_name}".strip())
        self.by_name["delete"].setEnabled(bool(document.selection))
        self.by_name["cancel"].setEnabled(self._window.screener.busy)
        self.by_name["screen"].setEnabled(not any(f.blocks for f in document.faults))
        for lens in LENSES:
            self.by_name[f"lens {lens}"].setChecked(document.view.lens == lens)
        for choice in theme.CHOICES:
            self.by_name[f"theme {choice}"].setChecked(theme.choice() == choice)

    # --- menus ------------------------------------------------------------------------------

    def _file_menu(self, menu: QMenu) -> None:
        files = self._window.files
        self._add(menu, Item("new", "&New part", files.new, (Standard.New,)))
        self._add(menu, Item("open", "&Open…", files.choose_and_open, (Standard.Open,)))
        self.recent = menu.addMenu("Open &recent")
        self.recent.aboutToShow.connect(self._fill_recent)
        menu.addSeparator()
        self._add(menu, Item("save", "&Save", files.save, (Standard.Save,)))
        self._add(menu, Item("save as", "Save &as…", files.save_as, ("Ctrl+Shift+S",)))
        menu.addSeparator()
        self._add(menu, Item("quit", "&Quit", self._window.close, ("Ctrl+Q",)))

    def _edit_menu(self, menu: QMenu) -> None:
        document = self._window.document
        self._add(menu, Item("undo", "&Undo", document.undo, (Standard.Undo,)))
        self._add(menu, Item("redo", "&Redo", document.redo, ("Ctrl+Shift+Z", "Ctrl+Y")))
        menu.addSeparator()
        self._add(menu, Item("delete", "&Delete what is selected", self._window.delete, ("Del",)))

    def _view_menu(self, menu: QMenu) -> None:
        window = self._window
        lenses = QActionGroup(menu)
        for number, lens in enumerate(LENSES, start=1):
            look = partial(window.document.look, lens=lens)
            # the key itself belongs to the row of lenses; here it is only shown
            action = self._add(menu, Item(f"lens {lens}", f"{lens}\tAlt+{number}", look))
            action.setCheckable(True)
            lenses.addAction(action)
        menu.addSeparator()
        self._add(menu, Item("fit", "&Fit the part in the board", window.board.fit, ("Ctrl+0",)))
        self._add(
            menu,
            Item("go board", "Go to the &board", window.go_to_board, ("Ctrl+B",)),
        )
        self._add(menu, Item("go sheet", "Go to the &sheet", window.go_to_sheet, ("Ctrl+T",)))
        self._add(
            menu, Item("go readings", "Go to the &readings", window.go_to_readings, ("Ctrl+R",))
        )
        menu.addSeparator()
        themes = QActionGroup(menu)
        words = {"system": "Theme of the system", "paper": "Paper theme", "slate": "Slate theme"}
        for choice in theme.CHOICES:
            action = self._add(
                menu, Item(f"theme {choice}", words[choice], partial(window.choose_theme, choice))
            )
            action.setCheckable(True)
            themes.addAction(action)

    def _part_menu(self, menu: QMenu) -> None:
        window = self._window
        self._add(
            menu,
            Item("screen", "&Screen the part", window.screen_part, ("Ctrl+Return", "Ctrl+Enter")),
        )
        self._add(menu, Item("cancel", "&Cancel screening", window.cancel, ("Ctrl+.",)))
        menu.addSeparator()
        self._add(menu, Item("copy readings", "Copy the &readings", window.readings.table.copy))

    def _help_menu(self, menu: QMenu) -> None:
        window = self._window
        self._add(menu, Item("keys", "&Keys", window.show_keys, ("F1",)))
        self._add(menu, Item("about", "&About and cautions", window.show_about))

    def _add(self, menu: QMenu, item: Item) -> QAction:
        action = QAction(item.text, self._window)
        action.setShortcuts([QKeySequence(key) for key in item.keys])
        action.triggered.connect(lambda _checked=False: item.act())
        if item.tip:
            action.setToolTip(item.tip)
        menu.addAction(action)
        self.by_name[item.name] = action
        return action

    def _fill_recent(self) -> None:
        self.recent.clear()
        paths = self._window.settings.recent
        for number, path in enumerate(paths, start=1):
            label = f"&{number}  {path.name}\t{path.parent.name}".replace("&&", "&")
            action = self.recent.addAction(label)
            action.setToolTip(str(path))
            action.triggered.connect(
                lambda _checked=False, chosen=path: self._window.files.open(chosen)
            )
        if not paths:
            self.recent.addAction("None yet").setEnabled(False)
            return
        self.recent.addSeparator()
        self.recent.addAction("Empty this list", self._window.settings.forget_recent)


def keeps_delete(widget: object) -> bool:
    """Whether the Delete key belongs to the widget that is being typed in."""
    return isinstance(widget, QLineEdit | QPlainTextEdit)
