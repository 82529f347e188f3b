"""The sample parts of the program: where they lie, which are shown first, and their menu."""

from __future__ import annotations

import logging
from collections.abc import Callable
from functools import partial
from pathlib import Path
from textwrap import fill

from PySide6.QtWidgets import QMenu

from screenapp.model.assets import PACKAGE
from screenapp.model.errors import ScreenappError
from screenapp.model.part import Part
from screenapp.model.part_json import read_part

log = logging.getLogger(__name__)

FIRST_LOOK = ("lifting-lug", "pump-bracket", "rake-knee")
"""Offered before the others: one that holds, one that does not, one that is undecided."""


def sample_paths(package: Path = PACKAGE) -> list[Path]:
    """The sample parts, in the checkout or in the installed package, those of the first look
    first; none if they are missing."""
    for folder in (package / "samples", package.parent / "samples"):
        if folder.is_dir():
            return sorted(folder.glob("*.part.json"), key=_rank)
    return []


def _rank(path: Path) -> tuple[int, str]:
    name = path.name.removesuffix(".part.json")
    return (FIRST_LOOK.index(name) if name in FIRST_LOOK else len(FIRST_LOOK), name)


def read_sample(path: Path) -> Part | None:
    """A sample, or None (and a line in the log) if it cannot be read."""
    try:
        return read_part(path)
    except (ScreenappError, OSError) as fault:
        log.warning("sample %s cannot be offered: %s", path.name, fault)
        return None


def fill_sample_menu(menu: QMenu, open_sample: Callable[[Path], object]) -> None:
    """One line for each sample that can be read, by its title; its notes are the tooltip."""
    menu.clear()
    menu.setToolTipsVisible(True)
    for path in sample_paths():
        sample = read_sample(path)
        if sample is None:
            continue
        number = len(menu.actions()) + 1
        action = menu.addAction(f"&{number}  {sample.title.replace('&', '&&')}")
        action.setToolTip("\n".join(fill(line, 72) for line in sample.notes.split("\n")))
        action.triggered.connect(partial(_open, open_sample, path))
    if menu.isEmpty():
        menu.addAction("None found").setEnabled(False)


def _open(open_sample: Callable[[Path], object], path: Path, _checked: bool = False) -> None:
    open_sample(path)
