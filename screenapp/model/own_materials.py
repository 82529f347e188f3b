"""The user's own materials, kept beyond any one part: `materials.json` in the configuration folder.

The file is one of materials as the library's, so that it can be read, mended and carried about by
hand.  A part still has its own copy of what it uses: a record stays true, and re-runs elsewhere,
whatever becomes of this file.  A file that cannot be read is left as it is, and says so.
"""

from __future__ import annotations

import os
from dataclasses import dataclass
from pathlib import Path

from platformdirs import user_config_path

from screenapp.model.atomic_write import write_atomically
from screenapp.model.errors import PartFileError, ScreenappError
from screenapp.model.json_writer import json_text
from screenapp.model.material_faults import material_faults
from screenapp.model.materials import FORMAT, VERSION, read_materials
from screenapp.model.part import Material, Part
from screenapp.model.part_tree import tree_of_part, without_blanks

FOLDER_VARIABLE = "SCREENAPP_CONFIG"
"""Environment variable that names another folder for the file."""

MOST = 500
"""More materials than this are not kept."""


@dataclass(frozen=True)
class OwnMaterials:
    """What the file holds: its materials, and what is wrong with it ("" if nothing)."""

    materials: tuple[Material, ...] = ()
    problem: str = ""

    def named(self, name: str) -> Material | None:
        """The one of a name, or None."""
        return next((m for m in self.materials if m.name == name), None)


_last: tuple[tuple[str, int, int], OwnMaterials] | None = None


def own_materials_file() -> Path:
    """Where the file stands; it need not exist."""
    chosen = os.environ.get(FOLDER_VARIABLE)
    return (Path(chosen) if chosen else user_config_path("screenapp")) / "materials.json"


def own_materials() -> OwnMaterials:
    """The user's materials; none, with the reason, where the file cannot be read.

    A file that has not changed is not read again.
    """
    global _last
    path = own_materials_file()
    try:
        seen = path.stat()
    except FileNotFoundError:
        return OwnMaterials()
    except OSError as error:
        return OwnMaterials((), f"{path} cannot be opened: {error.strerror or error}")
    stamp = (str(path), seen.st_mtime_ns, seen.st_size)
    if _last is None or _last[0] != stamp:
        try:
            found = OwnMaterials(_read(path))
        except ScreenappError as error:
            found = OwnMaterials((), f"{error.cause}: {error.mend}")
        _last = stamp, found
    return _last[1]


def keep_material(material: Material) -> None:
    """Keep a material, in place of one of the same name.

    Raises:
        ScreenappError: its figures cannot be, the file there cannot be read (it is left as it is),
            or the place cannot be written.
    """
    fault = next(material_faults(Part(materials=(material,))), None)
    if fault is not None:
        raise ScreenappError(fault.cause, fault.mend)
    kept = _kept()
    others = [m for m in kept if m.name != material.name]
    if len(others) >= MOST:
        raise ScreenappError(f"{MOST} materials are kept already", "remove one")
    at = next((i for i, m in enumerate(kept) if m.name == material.name), len(others))
    _write((*others[:at], material, *others[at:]))


def remove_material(name: str) -> None:
    """Keep a material no longer; nothing happens where it is not kept.

    Raises:
        ScreenappError: as `keep_material`.
    """
    kept = _kept()
    if any(m.name == name for m in kept):
        _write(tuple(m for m in kept if m.name != name))


def _kept() -> tuple[Material, ...]:
    path = own_materials_file()
    return _read(path) if path.exists() else ()


def _read(path: Path) -> tuple[Material, ...]:
    try:
        grades = read_materials(path)
    except UnicodeDecodeError as error:
        raise PartFileError(f"{path} is not UTF-8", "mend it, or move it away") from error
    except OSError as error:
        raise PartFileError(
            f"{path} cannot be opened: {error.strerror or error}", "look at the file"
        ) from error
    except PartFileError as error:
        raise PartFileError(
            f"{path.parent}: {error.cause}", f"{error.mend}, or move the file away", error.faults
        ) from error
    return tuple(m for grade in grades for m in grade.ranges)


def _write(materials: tuple[Material, ...]) -> None:
    path = own_materials_file()
    entries = tree_of_part(Part(materials=materials))["materials"]
    tree = {"format": FORMAT, "version": VERSION, "materials": entries}
    try:
        path.parent.mkdir(parents=True, exist_ok=True)
        write_atomically(path, json_text(without_blanks(tree)).encode("utf-8"))
    except OSError as error:
        raise ScreenappError(
            f"{path} cannot be written: {error.strerror or error}", "look at the folder"
        ) from error
