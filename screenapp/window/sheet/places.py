"""Choosers of a place on the part: holes, edges and corners by their names."""

from __future__ import annotations

from screenapp.model.features import everything, name_of
from screenapp.model.part import CircleHole, Corner
from screenapp.window.document import Document
from screenapp.window.sheet.pieces import Choice


def place_choices(document: Document, corners: bool = True) -> tuple[Choice, ...]:
    """Every hole, edge and sharp corner, the selected ones first."""
    found = {"hole": [], "edge": [], "corner": []}  # type: dict[str, list[Choice]]
    chosen: list[Choice] = []
    for thing in everything(document.part):
        if thing.kind not in found or thing.inside:
            continue
        record = thing.record
        if isinstance(record, Corner) and not (record.sharp and corners):
            continue
        remark = f"Ø {record.diameter:.4g}" if isinstance(record, CircleHole) else ""
        line = Choice(record.id, name_of(thing), remark)
        found[thing.kind].append(line)
        if record.id in document.selection:
            chosen.append(line)
    lines: list[Choice] = []
    if chosen:
        lines += [Choice("-", "Selected"), *chosen]
    for title, kind in (("Holes", "hole"), ("Edges", "edge"), ("Sharp corners", "corner")):
        if found[kind]:
            lines += [Choice("-", title), *found[kind]]
    return tuple(lines)
