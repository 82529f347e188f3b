"""The only two modal things: choosing a file, and what to do with unsaved work.

`Ask` is handed to the window, so that tests answer in its place.
"""

from __future__ import annotations

from pathlib import Path
from typing import Literal

from PySide6.QtWidgets import QFileDialog, QMessageBox, QWidget

PART_FILES = "Parts (*.part.json);;All files (*)"
SUFFIX = ".part.json"
DRAWING_FILES = "Drawings (*.dxf *.DXF);;All files (*)"
DRAWING_SUFFIX = ".dxf"

Unsaved = Literal["save", "discard", "stay"]


class Ask:
    """Asks the user through Qt's own dialogs."""

    def path_to_open(self, parent: QWidget, folder: Path) -> Path | None:
        """The part file to open, None if the user thought better of it."""
        name, _ = QFileDialog.getOpenFileName(parent, "Open a part", str(folder), PART_FILES)
        return Path(name) if name else None

    def path_to_save(self, parent: QWidget, suggested: Path) -> Path | None:
        """Where to save; the ending is added where it is missing."""
        name, _ = QFileDialog.getSaveFileName(parent, "Save the part", str(suggested), PART_FILES)
        return with_suffix(Path(name)) if name else None

    def drawing_to_open(self, parent: QWidget, folder: Path) -> Path | None:
        """The drawing to bring in, None if the user thought better of it."""
        name, _ = QFileDialog.getOpenFileName(
            parent, "Bring in a drawing", str(folder), DRAWING_FILES
        )
        return Path(name) if name else None

    def drawing_to_save(self, parent: QWidget, suggested: Path) -> Path | None:
        """Where to write a drawing; the ending is added where it is missing."""
        name, _ = QFileDialog.getSaveFileName(
            parent, "Export a drawing", str(suggested), DRAWING_FILES
        )
        path = Path(name) if name else None
        if path is None or path.suffix.lower() == DRAWING_SUFFIX:
            return path
        return path.with_name(path.name + DRAWING_SUFFIX)

    def folder_for_record(self, parent: QWidget, suggested: Path) -> Path | None:
        """The folder that the record goes into."""
        name = QFileDialog.getExistingDirectory(
            parent, "Write the record into a folder", str(suggested)
        )
        return Path(name) if name else None

    def unsaved(self, parent: QWidget, title: str) -> Unsaved:
        """What to do with changes that are not saved."""
        box = QMessageBox(parent)
        box.setIcon(QMessageBox.Icon.NoIcon)
        box.setWindowTitle("Unsaved work")
        box.setText(f"“{title}” has changes that are not saved.")
        box.setInformativeText("Save them before going on?")
        save = box.addButton("Save", QMessageBox.ButtonRole.AcceptRole)
        discard = box.addButton("Discard the changes", QMessageBox.ButtonRole.DestructiveRole)
        stay = box.addButton("Stay here", QMessageBox.ButtonRole.RejectRole)
        box.setDefaultButton(save)
        box.setEscapeButton(stay)
        box.exec()
        pressed = box.clickedButton()
        if pressed is save:
            return "save"
        return "discard" if pressed is discard else "stay"


def with_suffix(path: Path) -> Path:
    """The path with the ending of part files.

    Example:
        >>> with_suffix(Path("bracket")).name, with_suffix(Path("a.part.json")).name
        ('bracket.part.json', 'a.part.json')
    """
    if path.name.endswith(SUFFIX):
        return path
    name = path.name.removesuffix(".json").removesuffix(".part")
    return path.with_name(name + SUFFIX)
