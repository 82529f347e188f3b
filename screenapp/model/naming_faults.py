"""Faults of a part file that no schema can find: double ids and names, loops an edge short."""

from __future__ import annotations

from collections.abc import Iterator
from typing import Any

from screenapp.model.errors import Fault
from screenapp.model.expressions import ExpressionError, check_name
from screenapp.model.json_reader import JsonObject, Path, dotted, line_of


def naming_faults(tree: JsonObject) -> Iterator[Fault]:
    """Double ids and names, names that no dimension can have, loops with an edge too few.

    The tree may hold any other fault: what is not understood is left alone.
    """
    yield from _double(tree, list(_ids(tree)), "id")
    for group in ("dimensions", "materials"):
        named: list[tuple[Path, str]] = [
            ((group, i, "name"), entry["name"])
            for i, entry in _entries(tree, group)
            if isinstance(entry.get("name"), str)
        ]
        yield from _double(tree, named, "name")
    for i, entry in _entries(tree, "dimensions"):
        if isinstance(entry.get("name"), str):
            try:
                check_name(entry["name"])
            except ExpressionError as error:
                path: Path = ("dimensions", i, "name")
                field = dotted(tree, path)
                yield Fault(error.cause, error.mend, field, line=line_of(tree, path))
    for where, loop in _loops(tree):
        corners, edges = loop.get("corners"), loop.get("edges")
        if isinstance(corners, list) and isinstance(edges, list) and len(corners) != len(edges):
            yield Fault(
                f"the loop has {len(corners)} corners but {len(edges)} edges",
                "give as many edges as corners; the last edge closes the loop",
                dotted(tree, where),
                line=line_of(tree, where),
            )


def _double(tree: JsonObject, named: list[tuple[Path, str]], word: str) -> Iterator[Fault]:
    first: dict[str, Path] = {}
    for path, name in named:
        if name not in first:
            first[name] = path
            continue
        where = dotted(tree, first[name][:-1])
        line = line_of(tree, first[name])
        yield Fault(
            f'the {word} "{name}" is used twice, first in line {line} ({where})',
            f"give one of the two another {word}",
            dotted(tree, path),
            (name,),
            line=line_of(tree, path),
        )


def _ids(node: Any, path: Path = ()) -> Iterator[tuple[Path, str]]:
    """Path and text of every id, in the order of the file."""
    if isinstance(node, dict):
        if isinstance(node.get("id"), str):
            yield (*path, "id"), node["id"]
        for key, value in node.items():
            yield from _ids(value, (*path, key))
    elif isinstance(node, list):
        for i, value in enumerate(node):
            yield from _ids(value, (*path, i))


def _entries(tree: JsonObject, group: str) -> list[tuple[int, dict[str, Any]]]:
    listed = tree.get(group)
    if not isinstance(listed, list):
        return []
    return [(i, entry) for i, entry in enumerate(listed) if isinstance(entry, dict)]


def _loops(tree: JsonObject) -> Iterator[tuple[Path, dict[str, Any]]]:
    shape = tree.get("shape")
    if not isinstance(shape, dict):
        return
    if isinstance(shape.get("outline"), dict):
        yield ("shape", "outline"), shape["outline"]
    for group in ("holes", "zones"):
        forms = shape.get(group)
        for i, form in enumerate(forms if isinstance(forms, list) else ()):
            if isinstance(form, dict) and form.get("kind") == "loop":
                yield ("shape", group, i), form
