"""The slim menu bar and every key that works in the whole window."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass, replace
from functools import partial
from typing import TYPE_CHECKING

from PySide6.QtGui import QAction, QActionGroup, QKeySequence
from PySide6.QtWidgets import QLineEdit, QMenu, QPlainTextEdit

from screenapp.window import theme
from screenapp.window.board.lens_bar import LENSES, TIPS
from screenapp.window.commands import Command
from screenapp.window.samples import fill_sample_menu

if TYPE_CHECKING:
    from screenapp.window.main_window import MainWindow

Standard = QKeySequence.StandardKey


LINES = {
    "new": "Begins an empty part, in the units last chosen.",
    "open": "Opens a part file.",
    "save": "Writes the part into its file.",
    "save as": "Writes the part into another file.",
    "quit": "Asks about unsaved work, then closes the window.",
    "undo": "Takes the last step back; there is no limit.",
    "redo": "Takes the step again that was taken back.",
    "delete": "Removes it from the part, with what stands on it.",
    "fit": "Shows the whole part.",
    "go board": "Puts the keyboard on the board.",
    "go sheet": "Puts the keyboard on the first value that is missing, or on the first one.",
    "go readings": "Puts the keyboard on the readings.",
    "screen": "Meshes and solves until every number that counts is settled.",
    "cancel": "Stops within half a second; the part is unharmed.",
    "copy readings": "Puts the table on the clipboard as text.",
    "keys": "Lists every command with its key, and runs it.",
    "about": "What the program is, and what it is not.",
}
"""What each line of the menus does, by its name."""


@dataclass(frozen=True)
class Item:
    """One line of a menu: its text, what it does, its keys, and a sentence about it."""

    name: str
    text: str
    act: Callable[[], object]
    keys: tuple[Standard | str, ...] = ()
    line: str = ""


class Actions:
    """Makes the menus of a window and keeps their lines up to date."""

    def __init__(self, window: MainWindow) -> None:
        self._window = window
        self.by_name: dict[str, QAction] = {}
        self._items: dict[str, Item] = {}
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
        self.by_name["cancel"].setEnabled(self._window.screener.busy or self._window.record.busy)
        self.by_name["screen"].setEnabled(not any(f.blocks for f in document.faults))
        for lens in LENSES:
            self.by_name[f"lens {lens}"].setChecked(document.view.lens == lens)
        for choice in theme.CHOICES:
            self.by_name[f"theme {choice}"].setChecked(theme.choice() == choice)

    # --- menus ------------------------------------------------------------------------------

    def _file_menu(self, menu: QMenu) -> None:
        files = self._window.files
        self._add(
            menu,
            Item(
                "new",
                "&New part",
                files.new,
                (Standard.New,),
                line="Begins an empty part, in the units last chosen.",
            ),
        )
        self._add(
            menu,
            Item(
                "open", "&Open…", files.choose_and_open, (Standard.Open,), line="Opens a part file."
            ),
        )
        self.recent = menu.addMenu("Open &recent")
        self.recent.aboutToShow.connect(self._fill_recent)
        self.samples = menu.addMenu("Sa&mples")
        self.samples.aboutToShow.connect(lambda: fill_sample_menu(self.samples, files.open_sample))
        menu.addSeparator()
        self._add(
            menu,
            Item(
                "save", "&Save", files.save, (Standard.Save,), line="Writes the part into its file."
            ),
        )
        self._add(
            menu,
            Item(
                "save as",
                "Save &as…",
                files.save_as,
                ("Ctrl+Shift+S",),
                line="Writes the part into another file.",
            ),
        )
        menu.addSeparator()
        self._add(
            menu,
            Item(
                "bring in",
                "&Bring in a drawing…",
                files.choose_drawing,
                ("Ctrl+Shift+B",),
                line="Makes a part of a DXF drawing: layers, unit and tolerance are chosen there.",
            ),
        )
        self._add(
            menu,
            Item(
                "export drawing",
                "&Export drawing…",
                files.export_drawing,
                ("Ctrl+Shift+E",),
                line="Writes outline, holes and zones as a DXF drawing.",
            ),
        )
        self._add(
            menu,
            Item(
                "write record",
                "&Write the record…",
                self._window.record.choose_and_write,
                ("Ctrl+Shift+R",),
                line="Writes page, PDF, pictures, tables and fields of the findings into a folder.",
            ),
        )
        menu.addSeparator()
        self._add(
            menu,
            Item(
                "quit",
                "&Quit",
                self._window.close,
                ("Ctrl+Q",),
                line="Asks about unsaved work, then closes the window.",
            ),
        )

    def _edit_menu(self, menu: QMenu) -> None:
        document = self._window.document
        self._add(
            menu,
            Item(
                "undo",
                "&Undo",
                document.undo,
                (Standard.Undo,),
                line="Takes the last step back; there is no limit.",
            ),
        )
        self._add(
            menu,
            Item(
                "redo",
                "&Redo",
                document.redo,
                ("Ctrl+Shift+Z", "Ctrl+Y"),
                line="Takes the step again that was taken back.",
            ),
        )
        menu.addSeparator()
        self._add(
            menu,
            Item(
                "delete",
                "&Delete what is selected",
                self._window.delete,
                ("Del",),
                line="Removes it from the part, with what stands on it.",
            ),
        )

    def _view_menu(self, menu: QMenu) -> None:
        window = self._window
        lenses = QActionGroup(menu)
        for number, lens in enumerate(LENSES, start=1):
            look = partial(window.document.look, lens=lens)
            # the key itself belongs to the row of lenses; here it is only shown
            action = self._add(
                menu, Item(f"lens {lens}", f"{lens}\tAlt+{number}", look, line=TIPS[lens] + ".")
            )
            action.setCheckable(True)
            lenses.addAction(action)
        menu.addSeparator()
        self._add(
            menu,
            Item(
                "fit",
                "&Fit the part in the board",
                window.board.fit,
                ("Ctrl+0",),
                line="Shows the whole part.",
            ),
        )
        self._add(
            menu,
            Item(
                "go board",
                "Go to the &board",
                window.go_to_board,
                ("Ctrl+B",),
                line="Puts the keyboard on the board.",
            ),
        )
        self._add(
            menu,
            Item(
                "go sheet",
                "Go to the &sheet",
                window.go_to_sheet,
                ("Ctrl+T",),
                line="Puts the keyboard on the first value that is missing, or on the first one.",
            ),
        )
        self._add(
            menu,
            Item(
                "go readings",
                "Go to the &readings",
                window.go_to_readings,
                ("Ctrl+R",),
                line="Puts the keyboard on the readings.",
            ),
        )
        menu.addSeparator()
        themes = QActionGroup(menu)
        words = {"system": "Theme of the system", "paper": "Paper theme", "slate": "Slate theme"}
        for number, choice in enumerate(theme.CHOICES, start=1):
            take = partial(window.choose_theme, choice)
            line = "The colours of the window; the choice is kept."
            item = Item(f"theme {choice}", words[choice], take, (f"Ctrl+Alt+{number}",), line)
            action = self._add(menu, item)
            action.setCheckable(True)
            themes.addAction(action)

    def _part_menu(self, menu: QMenu) -> None:
        window = self._window
        units = "Switches between mm, N, MPa and in, lbf, ksi; the part stays as it is."
        item = Item("units", "Other &units", window.switch_units, ("Ctrl+U",), units)
        self._add(menu, item)
        menu.addSeparator()
        self._add(
            menu,
            Item(
                "screen",
                "&Screen the part",
                window.screen_part,
                ("Ctrl+Return", "Ctrl+Enter"),
                line="Meshes and solves until every number that counts is settled.",
            ),
        )
        self._add(
            menu,
            Item(
                "cancel",
                "&Cancel screening",
                window.cancel,
                ("Ctrl+.",),
                line="Stops within half a second; the part is unharmed.",
            ),
        )
        menu.addSeparator()
        self._add(
            menu,
            Item(
                "copy readings",
                "Copy the &readings",
                window.readings.table.copy,
                ("Ctrl+Shift+C",),
                line="Puts the table on the clipboard as text.",
            ),
        )

    def _help_menu(self, menu: QMenu) -> None:
        window = self._window
        self._add(
            menu,
            Item(
                "keys",
                "&Commands and keys",
                window.show_commands,
                ("F1", "Ctrl+K"),
                line="Lists every command with its key, and runs it.",
            ),
        )
        self._add(
            menu,
            Item(
                "about",
                "&About and cautions",
                window.show_about,
                ("Shift+F1",),
                line="What the program is, and what it is not.",
            ),
        )

    def _add(self, menu: QMenu, item: Item) -> QAction:
        action = QAction(item.text, self._window)
        action.setShortcuts([QKeySequence(key) for key in item.keys])
        action.triggered.connect(lambda _checked=False: item.act())
        menu.addAction(action)
        menu.setToolTipsVisible(True)
        self.by_name[item.name] = action
        self._items[item.name] = replace(item, line=item.line or LINES[item.name])
        action.setToolTip(self._command(item.name).tip)
        return action

    @property
    def commands(self) -> tuple[Command, ...]:
        """Every line of the menus as a command, as its action now is."""
        return tuple(self._command(name) for name in self.by_name)

    def _command(self, name: str) -> Command:
        action, item = self.by_name[name], self._items[name]
        text, _, key = item.text.replace("&", "").partition("\t")
        shown = action.text().replace("&", "").partition("\t")[0]
        form = QKeySequence.SequenceFormat.PortableText
        keys = tuple(k.toString(form) for k in action.shortcuts()) or ((key,) if key else ())
        return Command(
            shown.rstrip("…") if name in ("undo", "redo") else text.rstrip("…"),
            item.line,
            keys,
            action.trigger,
            "everywhere",
            action.isEnabled,
        )

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
