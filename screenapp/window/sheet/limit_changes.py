"""What the sheet does to limits."""

from __future__ import annotations

from collections.abc import Callable
from typing import Any

from screenapp.model import edits
from screenapp.model.combinations import loadings
from screenapp.model.errors import ScreenappError
from screenapp.model.part import (
    DisplacementLimit,
    FatigueLimit,
    JointLimit,
    Limit,
    StrainLimit,
    StressLimit,
)
from screenapp.window.document import Document
from screenapp.window.sheet.changes import with_field


def add_stress_limit(document: Document) -> None:
    """Von Mises stress under the proof stress (or the strength where only that is known); of
    orthotropic sheets Tsai–Hill."""
    m = document.part.material
    only_strength = m is not None and m.proof_stress is None and m.strength is not None
    limit = StressLimit("", against="strength" if only_strength else "proof_stress")
    if document.part.uses_orthotropic():
        limit = StressLimit("", "tsai_hill")
    _add(document, "stress limit", limit)


def add_displacement_limit(document: Document) -> None:
    """At most one millimetre."""
    _add(document, "displacement limit", DisplacementLimit("", 1.0))


def add_joint_limit(document: Document, on: str) -> None:
    """The rules of a handbook for a hole with a pin."""
    _add(document, "joint limit", JointLimit("", on))


def add_fatigue_limit(document: Document) -> None:
    """A million swings between the first case and no load."""
    cases = loadings(document.part)
    if not cases:
        raise ScreenappError("there is no load case yet", "load the part first")
    _add(document, "fatigue limit", FatigueLimit("", cases[0].id))


def add_strain_limit(document: Document) -> None:
    """At most one per cent of local strain."""
    _add(document, "strain limit", StrainLimit(""))


def _add(document: Document, name: str, limit: Limit) -> None:
    part = edits.add_limit(document.part, limit)
    document.apply(name, part)
    document.select(part.limits[-1].id)


class LimitChange:
    """Changes a limit."""

    def __init__(self, document: Document, limit: str) -> None:
        self._document = document
        self._limit = limit

    def setter(self, field: str) -> Callable[[Any], None]:
        """A function that sets a field."""
        return lambda value: self.set(field, value)

    def set(self, field: str, value: Any) -> None:
        """Set a field."""
        part = self._document.part
        limit = next(g for g in part.limits if g.id == self._limit)
        changed = edits.replace_limit(part, with_field(limit, field, value))
        self._document.apply(f"{field} of limit {self._limit}", changed)
