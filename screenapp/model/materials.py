"""The library of materials that ships with the program, from `resources/materials.json`.

A part carries the materials it uses in its own file, so that a record stays true when the library
changes; the library only offers them.
"""

from __future__ import annotations

import functools
import math
from dataclasses import dataclass
from pathlib import Path

from screenapp.model.assets import resource
from screenapp.model.errors import PartFileError
from screenapp.model.json_reader import JsonObject, read_json
from screenapp.model.part import Material
from screenapp.model.part_tree import (
    FORMAT as PART_FORMAT,
    VERSION as PART_VERSION,
    material_of_tree,
)
from screenapp.model.schema_check import schema_faults

FORMAT = "screenapp materials"
VERSION = 2


@dataclass(frozen=True)
class Grade:
    """A grade: one material for each range of thickness that its standard tells apart."""

    name: str
    ranges: tuple[Material, ...]

    def at(self, thickness: float) -> Material:
        """The figures for a wall of that thickness [mm]; the nearest range if none holds it.

        `Material.stands_for` tells whether they really stand for it.
        """
        fitting = [m for m in self.ranges if m.stands_for(thickness)]
        return fitting[0] if fitting else min(self.ranges, key=lambda m: _gap(m, thickness))


@functools.cache
def library() -> tuple[Grade, ...]:
    """All grades of the library, in the order of the file."""
    return read_materials(resource("materials.json"))


def material_named(name: str, thickness: float) -> Material | None:
    """The library's figures of that name for a wall of that thickness [mm], or None."""
    return next((g.at(thickness) for g in library() if g.name == name), None)


def read_materials(path: Path) -> tuple[Grade, ...]:
    """Read a file of materials.

    Each entry is a material as in a part file, but for `by_thickness`: a list of what differs from
    range to range.

    Raises:
        PartFileError: it is not one; the faults give line and field.
    """
    tree = read_json(path.read_text(encoding="utf-8"), path.name).root
    if not isinstance(tree, JsonObject) or tree.get("format") != FORMAT:
        raise PartFileError(
            f"{path.name} is not a file of materials", f'its "format" must be "{FORMAT}"'
        )
    version = tree.get("version", VERSION)
    if type(version) is not int or not 1 <= version <= VERSION:
        raise PartFileError(
            f"{path.name} is of version {version}, this program reads up to {VERSION}",
            "use a newer screenapp; the file is left as it is",
        )
    entries = tree.get("materials")
    if not isinstance(entries, list) or not all(isinstance(e, dict) for e in entries):
        raise PartFileError(f"{path.name} has no list of materials", 'give "materials": [...]')
    spread = [_spread(e) for e in entries]
    # Entries are those of a part file, so the part's schema judges them.
    faults = schema_faults(
        JsonObject(
            {
                "format": PART_FORMAT,
                "version": PART_VERSION,
                "materials": [JsonObject(m) for ranges in spread for m in ranges],
            }
        ),
        "part.schema.json",
    )
    if faults:
        first = faults[0]
        raise PartFileError(f"{path.name}, {first.field}: {first.cause}", first.mend, faults)
    grades = [tuple(material_of_tree(m) for m in ranges) for ranges in spread]
    return tuple(Grade(ranges[0].name, ranges) for ranges in grades)


def _spread(entry: dict[str, object]) -> list[dict[str, object]]:
    """One entry as a list of materials, one for each range."""
    common = {key: value for key, value in entry.items() if key != "by_thickness"}
    ranges = entry.get("by_thickness")
    if not isinstance(ranges, list) or not all(isinstance(r, dict) for r in ranges):
        return [common]
    return [{**common, **r} for r in ranges] or [common]


def _gap(m: Material, thickness: float) -> float:
    """How far a thickness is from the range of a material [mm]."""
    low = m.thickness_from if m.thickness_from is not None else -math.inf
    high = m.thickness_upto if m.thickness_upto is not None else math.inf
    return max(low - thickness, thickness - high, 0.0)
