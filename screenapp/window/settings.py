"""What the window remembers between sessions: an ini file in the user's configuration folder."""

from __future__ import annotations

import os
from pathlib import Path
from typing import get_args

from platformdirs import user_config_path
from PySide6.QtCore import QByteArray, QSettings

from screenapp.model.dimension_marks import DimensionsShown
from screenapp.model.part import DisplayUnits
from screenapp.window import theme
from screenapp.window.document import Lens

PLACE = "SCREENAPP_SETTINGS"
"""Environment variable that names another ini file (tests use it)."""

RECENT = 8
"""How many recent files are kept."""


class Settings:
    """Window geometry, theme, lens, dimensions shown, units of new parts, and recent files."""

    def __init__(self, path: Path | None = None) -> None:
        named = os.environ.get(PLACE)
        if path is None:
            path = Path(named) if named else user_config_path("screenapp") / "window.ini"
        self._store = QSettings(str(path), QSettings.Format.IniFormat)

    @property
    def theme(self) -> theme.Choice:
        """The chosen theme."""
        kept = str(self._store.value("theme", "system"))
        return next((c for c in theme.CHOICES if c == kept), "system")

    @theme.setter
    def theme(self, choice: theme.Choice) -> None:
        self._store.setValue("theme", choice)

    @property
    def lens(self) -> Lens:
        """The lens last chosen."""
        kept = str(self._store.value("lens", "Shape"))
        return next((lens for lens in get_args(Lens) if lens == kept), "Shape")

    @lens.setter
    def lens(self, lens: Lens) -> None:
        self._store.setValue("lens", lens)

    @property
    def units(self) -> DisplayUnits:
        """The units that new parts are shown in: those last chosen."""
        kept = str(self._store.value("units", ""))
        return next((u for u in get_args(DisplayUnits) if u == kept), "mm-N-MPa")

    @units.setter
    def units(self, units: DisplayUnits) -> None:
        self._store.setValue("units", units)

    @property
    def dimensions(self) -> DimensionsShown:
        """Which dimensions the board shows."""
        kept = str(self._store.value("dimensions", ""))
        return next((d for d in get_args(DimensionsShown) if d == kept), "plain")

    @dimensions.setter
    def dimensions(self, shown: DimensionsShown) -> None:
        self._store.setValue("dimensions", shown)

    def bytes_of(self, name: str) -> QByteArray | None:
        """Kept geometry or splitter state, None if there is none."""
        kept = self._store.value(f"window/{name}")
        return kept if isinstance(kept, QByteArray) and not kept.isEmpty() else None

    def keep_bytes(self, name: str, state: QByteArray) -> None:
        """Keep geometry or a splitter state."""
        self._store.setValue(f"window/{name}", state)

    @property
    def folder(self) -> Path:
        """The folder that file choosers begin in."""
        kept = Path(str(self._store.value("folder", "")) or Path.home())
        return kept if kept.is_dir() else Path.home()

    @property
    def recent(self) -> tuple[Path, ...]:
        """Recently opened files that still exist, last one first."""
        kept = self._store.value("recent", [])
        texts = [kept] if isinstance(kept, str) else list(kept or [])  # type: ignore[call-overload]
        return tuple(path for path in map(Path, map(str, texts)) if path.is_file())

    def note_recent(self, path: Path) -> None:
        """Put a file at the head of the recent ones."""
        path = path.resolve()
        others = [p for p in self.recent if p != path]
        self._store.setValue("recent", [str(p) for p in [path, *others][:RECENT]])
        self._store.setValue("folder", str(path.parent))

    def note_folder(self, folder: Path) -> None:
        """File choosers begin here next time."""
        self._store.setValue("folder", str(folder.resolve()))

    def forget_recent(self) -> None:
        """Empty the list of recent files."""
        self._store.setValue("recent", [])

    def sync(self) -> None:
        """Write the file now."""
        self._store.sync()
