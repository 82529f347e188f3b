"""The library of materials that ships with the program, from `resources/materials.json`.

A part carries the materials it uses in its own file, so that a record stays true when the library
changes; the library only offers them.
"""

from __future__ import annotations

import functools
from pathlib import Path

from screenapp.model.assets import resource
from screenapp.model.errors import PartFileError
from screenapp.model.json_reader import JsonObject, read_json
from screenapp.model.part import Material
from screenapp.model.part_tree import FORMAT as PART_FORMAT
from screenapp.model.part_tree import VERSION, material_of_tree
from screenapp.model.schema_check import schema_faults

FORMAT = "screenapp materials"


@functools.cache
def library() -> tuple[Material, ...]:
    """All materials of the library, in the order of the file."""
    return read_materials(resource("materials.json"))


def material_named(name: str) -> Material | None:
    """The library's material of that name, or None."""
    return next((m for m in library() if m.name == name), None)


def read_materials(path: Path) -> tuple[Material, ...]:
    """Read a file of materials.

    Raises:
        PartFileError: it is not one; the faults give line and field.
    """
    tree = read_json(path.read_text(encoding="utf-8"), path.name).root
    if not isinstance(tree, JsonObject) or tree.get("format") != FORMAT:
        raise PartFileError(
            f"{path.name} is not a file of materials", f'its "format" must be "{FORMAT}"'
        )
    # Entries are those of a part file, so the part's schema judges them.
    faults = schema_faults(
        JsonObject({"format": PART_FORMAT, "version": VERSION, "materials": tree.get("materials")}),
        "part.schema.json",
    )
    if faults:
        first = faults[0]
        raise PartFileError(f"{path.name}, {first.field}: {first.cause}", first.mend, faults)
    return tuple(material_of_tree(entry) for entry in tree["materials"])
