"""What the sheet does to load cases and loads."""

from __future__ import annotations

import math
from collections.abc import Callable
from dataclasses import replace
from typing import Any

from screenapp.model import edits
from screenapp.model.edge_parts import half_length
from screenapp.model.part import (
    BearingLoad,
    CircleHole,
    ForceLoad,
    GravityLoad,
    LineLoad,
    Load,
    MisfitLoad,
    MomentLoad,
    Part,
    PointLoad,
    PressureLoad,
    ShearLoad,
    SpinLoad,
    TemperatureLoad,
)
from screenapp.model.sized_vectors import given_vector, stored_size
from screenapp.window.document import Document
from screenapp.window.sheet.changes import remove, with_field
from screenapp.window.sheet.direction import components, read_direction

FIRST_FORCE, FIRST_LINE, FIRST_PRESSURE = 100.0, 1.0, 1.0
"""What a new load begins with [N, N/mm, MPa]: never nothing, so that it is seen on the board."""

FIRST_MOMENT, FIRST_SPEED, FIRST_CHANGE = 10_000.0, 1000.0, 20.0
"""[N·mm, 1/min, K]."""

FIRST_MISFIT = 0.1
"""[mm]."""

Directed = LineLoad | ForceLoad | BearingLoad | PointLoad | GravityLoad | MisfitLoad
"""Loads with a size and a direction."""

FREE_FALL = 9.80665
"""Standard gravity [m/s²] (3rd CGPM, 1901; from memory)."""


def add_case(document: Document) -> None:
    """Add an empty load case and show it."""
    part = edits.add_case(document.part)
    document.apply(f"case {part.cases[-1].name}", part)
    document.look(case=len(part.cases) - 1)


def add_load(document: Document, case: str | None, key: str) -> None:
    """Add a load; `key` is "kind place", "misfit support" or "gravity"; without a case, one is
    made."""
    part = document.part
    if case is None:
        part = edits.add_case(part)
        case = part.cases[-1].id
    kind, _, on = key.partition(" ")
    load = _first_load(part, kind, edits.new_id(part, "l"), on)
    document.apply(f"load {on}".strip(), edits.add_load(part, case, load))
    document.select(load.id)


def _first_load(part: Part, kind: str, id_: str, on: str) -> Load:
    if kind == "spin":
        return SpinLoad(id_, *_middle(part), FIRST_SPEED)
    if kind == "misfit":
        return MisfitLoad(id_, on, FIRST_MISFIT, 0.0)
    if kind == "temperature":
        return TemperatureLoad(id_, FIRST_CHANGE)
    if kind == "moment":
        return MomentLoad(id_, on, FIRST_MOMENT)
    if kind == "gravity":
        return GravityLoad(id_, 0.0, -FREE_FALL)
    if kind == "pressure":
        return PressureLoad(id_, on, FIRST_PRESSURE)
    if kind == "shear":
        return ShearLoad(id_, on, FIRST_LINE)
    if kind == "line":
        return LineLoad(id_, on, 0.0, -FIRST_LINE)
    if kind == "bearing":
        return BearingLoad(id_, on, 0.0, -FIRST_FORCE)
    if kind == "force":
        return ForceLoad(id_, on, 0.0, -FIRST_FORCE)
    return PointLoad(id_, on, 0.0, -FIRST_FORCE, half_length(part, on))


def _middle(part: Part) -> tuple[float, float]:
    """The centre of the first round hole, else the origin: what a part most likely turns about."""
    return next((h.centre for h in part.holes if isinstance(h, CircleHole)), (0.0, 0.0))


class CaseChange:
    """Changes a load case."""

    def __init__(self, document: Document, case: str) -> None:
        self._document = document
        self._case = case

    def rename(self, name: str) -> None:
        """Give it another name."""
        part = edits.rename_case(self._document.part, self._case, name)
        self._document.apply(f"name of case {name.strip()}", part)

    def add(self, key: str) -> None:
        """Add a load to it."""
        add_load(self._document, self._case, key)

    def remove(self) -> None:
        """Remove it with its loads."""
        remove(self._document, self._case)


class LoadChange:
    """Changes a load."""

    def __init__(self, document: Document, load: str) -> None:
        self._document = document
        self._load = load

    def setter(self, field: str) -> Callable[[Any], None]:
        """A function that sets a field."""
        return lambda value: self._put(with_field(self._find(), field, value))

    def put(self, fields: dict[str, Any]) -> None:
        """Set several fields at once."""
        self._put(replace(self._find(), **fields))

    def resize(self, size: float) -> None:
        """Another size in the same direction; a negative one turns it round."""
        load = self._find()
        assert isinstance(load, Directed)
        x, y = load.x, load.y
        old = math.hypot(x, y)
        ux, uy = (x / old, y / old) if old > 0.0 else (0.0, -1.0)
        self._put(replace(load, x=size * ux + 0.0, y=size * uy + 0.0))

    def set_vector(self, x: float, y: float) -> None:
        """Other components."""
        load = self._find()
        assert isinstance(load, Directed)
        self._put(replace(load, x=x, y=y))

    def direct(self, text: str, field: str) -> None:
        """Another direction, the same size; an expression of the size stays.

        `field` is the load's dotted path in the part file.
        """
        load = self._find()
        assert isinstance(load, Directed)
        angle, part = read_direction(text), self._document.part
        size = stored_size(part, field, (load.x, load.y))
        if size is None:
            self.set_vector(*components(math.hypot(load.x, load.y), angle))
            return
        x, y, texts = given_vector(part, field, size, angle)
        with self._document.keeping(texts):
            self.set_vector(x, y)

    def remove(self) -> None:
        """Remove it."""
        remove(self._document, self._load)

    def _find(self) -> Load:
        return next(
            load
            for case in self._document.part.cases
            for load in case.loads
            if load.id == self._load
        )

    def _put(self, new: Load) -> None:
        self._document.apply(f"load {new.id}", edits.replace_load(self._document.part, new))
