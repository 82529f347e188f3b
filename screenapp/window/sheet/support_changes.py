"""What the sheet does to supports."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import replace
from typing import Any

from screenapp.model import edits
from screenapp.model.edge_parts import span_of
from screenapp.model.part import (
    BoltSupport,
    ElasticSupport,
    FixedSupport,
    PinSupport,
    PrescribedSupport,
    RollerSupport,
    Support,
    SymmetrySupport,
    WeldSupport,
)
from screenapp.window.document import Document
from screenapp.window.sheet.changes import with_field

THROAT = 3.0
"""Throat that a weld begins with [mm]: the least that EN 1993-1-8 allows (4.5.2, from memory)."""

SPRINGS = 100.0
"""Stiffness that a bed of springs begins with [N/mm²], to be typed over."""


def add_support(document: Document, on: str) -> None:
    """Hold a place in both directions; its row then says how else it may be held."""
    part = edits.add_support(document.part, FixedSupport("", on))
    document.apply(f"hold {on}", part)
    document.select(part.supports[-1].id)


class SupportChange:
    """Changes how a place is held."""

    def __init__(self, document: Document, support: str) -> None:
        self._document = document
        self._support = support

    def kind(self, kind: str) -> None:
        """Hold it in the way that a key of the paragraph's `KINDS` names."""
        old = next(s for s in self._document.part.supports if s.id == self._support)
        new: Support
        if kind == "fixed":
            new = FixedSupport(old.id, old.on)
        elif kind == "symmetry":
            new = SymmetrySupport(old.id, old.on)
        elif kind in ("normal", "pin"):
            new = RollerSupport(old.id, old.on)
        elif kind == "pushing":
            new = PinSupport(old.id, old.on)
        elif kind == "weld":
            new = WeldSupport(old.id, old.on, THROAT)
        elif kind == "bolts":
            new = BoltSupport(old.id, old.on)
        elif kind == "springs":
            new = ElasticSupport(old.id, old.on, SPRINGS, SPRINGS)
        elif kind == "angle":
            new = RollerSupport(old.id, old.on, 90.0)
        else:
            new = PrescribedSupport(old.id, old.on, 0.0, 0.0)
        if not isinstance(new, PinSupport | BoltSupport):
            start, end = span_of(old)
            new = replace(new, start=start, end=end)
        self._put(f"how {old.on} is held", new)

    def setter(self, field: str) -> Callable[[Any], None]:
        """A function that sets "angle", "x", "y", "normal" or "along"."""
        return lambda value: self._set(field, value)

    def put(self, fields: dict[str, Any]) -> None:
        """Set several fields at once."""
        old = next(s for s in self._document.part.supports if s.id == self._support)
        self._put(f"where {old.on} is held", replace(old, **fields))

    def _set(self, field: str, value: float | None) -> None:
        if field in ("normal", "along"):
            value = value or 0.0  # free
        old = next(s for s in self._document.part.supports if s.id == self._support)
        self._put(f"{field} of the support at {old.on}", with_field(old, field, value))

    def _put(self, name: str, new: Support) -> None:
        self._document.apply(name, edits.replace_support(self._document.part, new))
