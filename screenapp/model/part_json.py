"""Reads and writes `*.part.json` files, and names parts by hashes.

The way in: bytes, text, tree with lines (`json_reader`), migration, schema, double ids, formulas
worked out, part.  The way out: tree (`part_tree`), formulas put back, text (`json_writer`), bytes.
The same part always gives the same bytes.
"""

from __future__ import annotations

import hashlib
import math
import re
from dataclasses import replace
from pathlib import Path

from screenapp.model.atomic_write import write_atomically
from screenapp.model.errors import Fault, PartFileError
from screenapp.model.formulas import number_slots, work_out, written_tree
from screenapp.model.json_reader import JsonObject, dotted, line_of, read_json
from screenapp.model.json_writer import json_text
from screenapp.model.migrations import migrate
from screenapp.model.naming_faults import naming_faults
from screenapp.model.part import Part
from screenapp.model.part_tree import (
    FORMAT,
    VERSION,
    part_of_tree,
)
from screenapp.model.schema_check import schema_faults

SUFFIX = ".part.json"


# --- writing --------------------------------------------------------------------------------


def part_to_text(part: Part) -> str:
    """The text of the part's file.

    Raises:
        PartFileError: a number of the part is not finite; the faults name every such field.
    """
    tree = written_tree(part)
    slots = [(holder[key], path) for holder, key, path in number_slots(tree)]
    slots += [
        (value, ("dimensions", i, key))
        for i, dimension in enumerate(tree["dimensions"])
        for key, value in dimension.items()
    ]
    faults = tuple(
        Fault(f"the value is {value}", "give a finite number", dotted(tree, path))
        for value, path in slots
        if isinstance(value, float) and not math.isfinite(value)
    )
    if faults:
        raise _error(faults, "")
    return json_text(tree)


def write_part(part: Part, path: Path) -> None:
    """Save the part: whole or not at all, and never over a file of a newer version.

    Raises:
        PartFileError: the file there is newer, the part holds a number that is not finite, or the
            place cannot be written.
    """
    content = part_to_text(part).encode("utf-8")
    try:
        newer = _newer_version(path.read_bytes()) if path.exists() else None
        if newer is not None:
            raise PartFileError(
                f"{path.name} is of version {newer}, this program writes version {VERSION}",
                "save under another name, or use the newer program",
            )
        write_atomically(path, content)
    except OSError as error:
        raise PartFileError(
            f"{path} cannot be written: {error.strerror or error}", "save in another place"
        ) from error


def part_sha256(part: Part) -> str:
    """SHA-256 of the bytes that `write_part` stores, as 64 hexadecimal digits."""
    return hashlib.sha256(_loose_text(part).encode("utf-8")).hexdigest()


def screening_key(part: Part) -> str:
    """SHA-256 of everything that findings depend on.

    Title, notes, who did it, display units and readings do not count, nor how a number was come by:
    a formula counts by its value.  A new probe or a renamed part leaves findings current.
    """
    blank = Part()
    bare = replace(
        part,
        title=blank.title,
        notes=blank.notes,
        record=blank.record,
        display_units=blank.display_units,
        readings=(),
        cuts=(),
        formulas=(),
        dimensions=(),
    )
    return part_sha256(bare)


# --- reading --------------------------------------------------------------------------------


def read_part(path: Path) -> Part:
    """Open a part file.

    Raises:
        PartFileError: it cannot be read; `faults` lists everything that is wrong, with line and
            field.
    """
    try:
        content = path.read_bytes()
    except OSError as error:
        raise PartFileError(
            f"{path} cannot be opened: {error.strerror or error}", "look at the name and the folder"
        ) from error
    return part_from_text(_decode(content, path.name), path.name)


def part_from_text(text: str, name: str = "") -> Part:
    """The part of a file's text; `name` begins the error's message.

    Raises:
        PartFileError: as `read_part`.
    """
    read = read_json(text.removeprefix("\ufeff"), name)
    tree = read.root
    if not isinstance(tree, JsonObject):
        raise _error((Fault("the file is not an object", "begin it with {", line=1),), name)
    _check_version(tree, name)
    migrate(tree)
    faults = [*read.faults, *schema_faults(tree, "part.schema.json"), *naming_faults(tree)]
    formulas, formula_faults = work_out(tree)
    faults += formula_faults
    if faults:
        raise _error(tuple(sorted(faults, key=lambda f: f.line or 0)), name)
    return part_of_tree(tree, formulas)


# --- steps ----------------------------------------------------------------------------------


def _loose_text(part: Part) -> str:
    """The text to hash: as stored; a number that is not finite is spelt out."""
    tree = written_tree(part)
    for holder, key, _ in list(number_slots(tree)):
        if isinstance(holder[key], float) and not math.isfinite(holder[key]):
            holder[key] = str(holder[key])
    for dimension in tree["dimensions"]:
        dimension.update(
            {k: str(v) for k, v in dimension.items() if v in (math.inf, -math.inf) or v != v}
        )
    return json_text(tree)


def _check_version(tree: JsonObject, name: str) -> None:
    """Refuse what is no part file, or a newer one, before anything else is said about it."""
    if tree.get("format") != FORMAT:
        cause = 'the file is not a part: "format" is not "screenapp part"'
        line = line_of(tree, ("format",))
        raise _error((Fault(cause, "open a *.part.json file", "format", line=line),), name)
    version = tree.get("version")
    line = line_of(tree, ("version",))
    if type(version) is not int or version < 1:
        fault = Fault(
            "the version is not a whole number from 1", f"write {VERSION}", "version", line=line
        )
        raise _error((fault,), name)
    if version > VERSION:
        cause = f"the file is of version {version}, this program reads up to {VERSION}"
        mend = "use a newer screenapp; the file is left as it is"
        raise _error((Fault(cause, mend, "version", line=line),), name)


def _newer_version(content: bytes) -> int | None:
    """The version of a part file that is too new for us; also of one that is not quite whole."""
    text = content.decode("utf-8", "replace")
    if FORMAT not in text:
        return None
    version = re.search(r'"version"\s*:\s*(\d{1,9})', text)
    return int(version[1]) if version and int(version[1]) > VERSION else None


def _decode(content: bytes, name: str) -> str:
    try:
        return content.decode("utf-8-sig")
    except UnicodeDecodeError as error:
        line = content.count(b"\n", 0, error.start) + 1
        wide = content[:2] in (b"\xff\xfe", b"\xfe\xff")
        cause = "the file is UTF-16" if wide else f"line {line} is not UTF-8"
        fault = Fault(cause, "save the file as UTF-8", line=line)
        raise _error((fault,), name) from error


def _error(faults: tuple[Fault, ...], name: str) -> PartFileError:
    """The error of a non-empty tuple of faults; the first one gives the wording."""
    first = faults[0]
    place = ", ".join(
        word for word in (name, f"line {first.line}" if first.line else "", first.field) if word
    )
    more = f" (and {len(faults) - 1} more)" if len(faults) > 1 else ""
    return PartFileError((f"{place}: " if place else "") + first.cause + more, first.mend, faults)
