"""The words that name what is under the cursor, with its size and its faults."""

from __future__ import annotations

from screenapp.model.features import find, name_of
from screenapp.window.board.hit_test import Hit
from screenapp.window.document import Document


def name_at(document: Document, hit: Hit | None) -> str:
    """The tooltip for something under the cursor; "" for nothing."""
    if hit is None:
        return ""
    found = find(document.part, hit.id)
    if found is None:
        return ""
    lines = [name_of(found)]
    lines += [str(fault) for fault in document.faults if hit.id in fault.ids]
    return "\n".join(lines)
