"""The lines of a part file that faults of the part stand on."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace
from typing import Any

from screenapp.model.errors import Fault, ScreenappError
from screenapp.model.json_reader import JsonArray, JsonObject, Path, line_of, read_json
from screenapp.model.migrations import migrate


def with_lines(faults: Sequence[Fault], text: str) -> tuple[Fault, ...]:
    """The faults of the part that `text` holds, each with the line of its field.

    A field that the file does not have (its value is the default) gets the line of what it belongs
    to; a fault without a field keeps its line.
    """
    try:
        tree = read_json(text.removeprefix("\ufeff")).root
    except ScreenappError:  # the file has changed since the part was read
        return tuple(faults)
    if isinstance(tree, JsonObject):
        migrate(tree)
    return tuple(
        replace(fault, line=line_of(tree, _path(tree, fault.field)))
        if fault.line is None and fault.field
        else fault
        for fault in faults
    )


def _path(tree: Any, field: str) -> Path:
    """The keys and indices of a dotted field, as far as the tree has them."""
    path: list[str | int] = []
    words, node = field.split("."), tree
    if isinstance(tree, dict) and words[0] not in tree and words[0] in (tree.get("shape") or ()):
        words.insert(0, "shape")
    while words:
        if isinstance(node, dict) and words[0] in node:
            step: str | int = words.pop(0)
        elif isinstance(node, JsonArray):
            found = _element(node, words)
            if found is None:
                break
            step, used = found
            del words[:used]
        else:
            break
        path.append(step)
        node = node[step]
    return tuple(path)


def _element(node: JsonArray, words: Sequence[str]) -> tuple[int, int] | None:
    """Index of the element that the first words name, and how many they are (names of materials
    may hold full stops)."""
    for used in range(len(words), 0, -1):
        name = ".".join(words[:used])
        for i, value in enumerate(node):
            if isinstance(value, dict) and value.get("id", value.get("name")) == name:
                return i, used
    if words[0].isdigit() and int(words[0]) < len(node):
        return int(words[0]), 1
    return None
