"""What the sheet does to the part: each change is one named, undoable step of the document."""

from __future__ import annotations

import math
from collections.abc import Callable
from dataclasses import replace
from typing import Any, TypeVar

from screenapp.model.curves import arc_through
from screenapp.model.edit_loops import move_corner, set_round
from screenapp.model.edit_removal import remove as removed
from screenapp.model.edit_rules import new_id, settle
from screenapp.model.errors import ScreenappError
from screenapp.model.features import find, loops_of
from screenapp.model.part import (
    BearingLoad,
    Case,
    Corner,
    DisplacementLimit,
    Edge,
    FixedSupport,
    ForceLoad,
    GravityLoad,
    Hole,
    LineLoad,
    Load,
    LoopHole,
    Material,
    Part,
    PointLoad,
    PrescribedSupport,
    PressureLoad,
    RollerSupport,
    ShearLoad,
    StressLimit,
    Support,
)
from screenapp.window.document import Document
from screenapp.window.sheet.direction import components, read_direction

FIRST_FORCE, FIRST_LINE, FIRST_PRESSURE = 100.0, 1.0, 1.0
"""What a new load begins with [N, N/mm, MPa]: never nothing, so that it is seen on the board."""

FREE_FALL = 9.80665
"""Standard gravity [m/s²] (3rd CGPM, 1901; from memory)."""


Record = TypeVar("Record")


def with_field(record: Record, field: str, value: Any) -> Record:
    """A frozen record with one field changed by its name."""
    return replace(record, **{field: value})  # type: ignore[type-var]


def apply(document: Document, name: str, part: Part) -> None:
    """Make `part` the present one if it is no nonsense.

    Raises:
        ScreenappError: what would be wrong with it.
    """
    document.apply(name, settle(document.part, part))


def set_title(document: Document, title: str) -> None:
    """Rename the part."""
    if not title.strip():
        raise ScreenappError("the title is empty", "give the part a name")
    document.apply("title", replace(document.part, title=title.strip()))


def set_units(document: Document, key: str) -> None:
    """Show other units."""
    document.apply("units shown", replace(document.part, display_units=key))  # type: ignore[arg-type]


def remove(document: Document, *ids: str) -> None:
    """Remove what the ids stand for, and with it what stands on it."""
    outcome = removed(document.part, *ids)
    document.select()
    document.apply(f"remove {', '.join(ids)}", outcome.part)
    if outcome.lost:
        document.said.emit(f"Removed with it: {'; '.join(outcome.lost)}")


# --- wall, mesh -----------------------------------------------------------------------------


def set_wall(document: Document, name: str, **fields: Any) -> None:
    """Change fields of the wall."""
    part = document.part
    apply(document, name, replace(part, wall=replace(part.wall, **fields)))


def set_mesh(document: Document, name: str, **fields: Any) -> None:
    """Change fields of the mesh wishes."""
    part = document.part
    apply(document, name, replace(part, mesh=replace(part.mesh, **fields)))


def choose_material(document: Document, material: Material) -> None:
    """Make the wall of a material, which the part takes up if it has not got it."""
    part = document.part
    materials = part.materials
    if all(m.name != material.name for m in materials):
        materials = (*(m for m in materials if m.name != part.wall.material), material)
    wall = replace(part.wall, material=material.name)
    apply(document, f"material {material.name}", replace(part, materials=materials, wall=wall))


def own_material(document: Document) -> None:
    """A material of one's own that begins with the present figures."""
    part = document.part
    base = part.material or Material("", 210_000.0, 0.3, 7850.0)
    names = {m.name for m in part.materials}
    name = next(
        n for n in ("Own material", *(f"Own material {i}" for i in range(2, 999))) if n not in names
    )
    own = replace(base, name=name, source="own figures")
    apply(
        document,
        "own material",
        replace(part, materials=(*part.materials, own), wall=replace(part.wall, material=name)),
    )


class MaterialChange:
    """Changes the figures of one of the part's materials."""

    def __init__(self, document: Document, name: str) -> None:
        self._document = document
        self._name = name

    def setter(self, field: str) -> Callable[[Any], None]:
        """A function that sets a field."""
        return lambda value: self._set(field, value)

    def rename(self, name: str) -> None:
        """Give it another name."""
        part = self._document.part
        name = name.strip()
        if not name:
            raise ScreenappError("the material has no name", "type one")
        if any(m.name == name for m in part.materials):
            raise ScreenappError(f"another material is called “{name}”", "type another name")
        materials = tuple(
            replace(m, name=name) if m.name == self._name else m for m in part.materials
        )
        wall = replace(part.wall, material=name)
        apply(self._document, f"material {name}", replace(part, materials=materials, wall=wall))

    def _set(self, field: str, value: Any) -> None:
        part = self._document.part
        materials = tuple(
            replace(with_field(m, field, value), source=_own_source(m))
            if m.name == self._name
            else m
            for m in part.materials
        )
        words = field.replace("_", " ")
        apply(self._document, f"{words} of {self._name}", replace(part, materials=materials))


def _own_source(m: Material) -> str:
    if not m.source or m.source.startswith("own"):
        return m.source
    return f"own figures, from: {m.source}"


# --- shape ----------------------------------------------------------------------------------


class HoleChange:
    """Changes the numbers of a round hole or slot."""

    def __init__(self, document: Document, hole: str) -> None:
        self._document = document
        self._hole = hole

    def setter(self, field: str) -> Callable[[float], None]:
        """A function that sets a size or, for "x" and "y", a coordinate of the centre."""
        return lambda value: self._set(field, value)

    def _set(self, field: str, value: float) -> None:
        part = self._document.part
        holes = tuple(_with(h, field, value) if h.id == self._hole else h for h in part.holes)
        apply(self._document, f"{field} of hole {self._hole}", replace(part, holes=holes))


def _with(hole: Hole, field: str, value: float) -> Hole:
    if isinstance(hole, LoopHole):
        return hole
    if field == "x":
        return replace(hole, centre=(value, hole.centre[1]))
    if field == "y":
        return replace(hole, centre=(hole.centre[0], value))
    return with_field(hole, field, value)


class CornerChange:
    """Changes the place or the round of a corner."""

    def __init__(self, document: Document, corner: str) -> None:
        self._document = document
        self._corner = corner

    def setter(self, field: str) -> Callable[[float], None]:
        """A function that sets "x", "y" or "round"."""
        return lambda value: self._set(field, value)

    def _set(self, field: str, value: float) -> None:
        part, corner = self._document.part, self._corner
        found = find(part, corner)
        if found is None or not isinstance(found.record, Corner):
            return
        x, y = found.record.at
        if field == "round":
            self._document.apply(f"round of {corner}", set_round(part, corner, value))
        else:
            to = (value, y) if field == "x" else (x, value)
            self._document.apply(f"move corner {corner}", move_corner(part, corner, to))


def edge_length(part: Part, edge: str) -> float | None:
    """Length [mm] of an edge from corner to corner, before rounding."""
    for _, _, loop in loops_of(part):
        for i, e in enumerate(loop.edges):
            if e.id == edge and len(loop.corners) == len(loop.edges):
                return _length(e, loop.corners[i], loop.corners[(i + 1) % len(loop.corners)])
    return None


def _length(edge: Edge, start: Corner, end: Corner) -> float:
    if edge.through is None:
        return math.dist(start.at, end.at)
    return arc_through(start.at, edge.through, end.at).length


# --- supports -------------------------------------------------------------------------------


def add_support(document: Document, on: str) -> None:
    """Hold a place in both directions; its row then says how else it may be held."""
    part = document.part
    support = FixedSupport(new_id(part, "s"), on)
    apply(document, f"hold {on}", replace(part, supports=(*part.supports, support)))
    document.select(support.id)


class SupportChange:
    """Changes how a place is held."""

    def __init__(self, document: Document, support: str) -> None:
        self._document = document
        self._support = support

    def kind(self, kind: str) -> None:
        """Hold it "fixed", by its "normal", along an "angle", or "moved"."""
        old = next(s for s in self._document.part.supports if s.id == self._support)
        new: Support
        if kind == "fixed":
            new = FixedSupport(old.id, old.on)
        elif kind == "normal":
            new = RollerSupport(old.id, old.on)
        elif kind == "angle":
            new = RollerSupport(old.id, old.on, 90.0)
        else:
            new = PrescribedSupport(old.id, old.on, 0.0, 0.0)
        self._put(f"how {old.on} is held", new)

    def setter(self, field: str) -> Callable[[Any], None]:
        """A function that sets "angle", "x" or "y"."""
        return lambda value: self._set(field, value)

    def _set(self, field: str, value: float | None) -> None:
        old = next(s for s in self._document.part.supports if s.id == self._support)
        self._put(f"{field} of the support at {old.on}", with_field(old, field, value))

    def _put(self, name: str, new: Support) -> None:
        part = self._document.part
        supports = tuple(new if s.id == new.id else s for s in part.supports)
        apply(self._document, name, replace(part, supports=supports))


# --- cases and loads ------------------------------------------------------------------------


def add_case(document: Document) -> None:
    """Add an empty load case and show it."""
    part = document.part
    case = Case(new_id(part, "k"), _case_name(part))
    document.apply(f"case {case.name}", replace(part, cases=(*part.cases, case)))
    document.look(case=len(part.cases))


def add_load(document: Document, case: str | None, key: str) -> None:
    """Add a load; `key` is "kind place" or "gravity"; without a case, one is made."""
    part = document.part
    if case is None:
        made = Case(new_id(part, "k"), _case_name(part))
        part, case = replace(part, cases=(*part.cases, made)), made.id
    kind, _, on = key.partition(" ")
    load = _first_load(kind, new_id(part, "l"), on)
    cases = tuple(replace(c, loads=(*c.loads, load)) if c.id == case else c for c in part.cases)
    apply(document, f"load {on}".strip(), replace(part, cases=cases))
    document.select(load.id)


def _case_name(part: Part) -> str:
    names = {case.name for case in part.cases}
    return next(n for i in range(1, 9999) if (n := f"Case {i}") not in names)


def _first_load(kind: str, id_: str, on: str) -> Load:
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
    return PointLoad(id_, on, 0.0, -FIRST_FORCE)


class CaseChange:
    """Changes a load case."""

    def __init__(self, document: Document, case: str) -> None:
        self._document = document
        self._case = case

    def rename(self, name: str) -> None:
        """Give it another name."""
        part = self._document.part
        name = name.strip()
        if not name:
            raise ScreenappError("the case has no name", "type one")
        if any(c.name == name and c.id != self._case for c in part.cases):
            raise ScreenappError(f"another case is called “{name}”", "type another name")
        cases = tuple(replace(c, name=name) if c.id == self._case else c for c in part.cases)
        apply(self._document, f"name of case {name}", replace(part, cases=cases))

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

    def setter(self, field: str) -> Callable[[float], None]:
        """A function that sets a field."""
        return lambda value: self._put(with_field(self._find(), field, value))

    def resize(self, size: float) -> None:
        """Another size in the same direction; a negative one turns it round."""
        load = self._find()
        assert not isinstance(load, PressureLoad | ShearLoad)
        x, y = load.x, load.y
        old = math.hypot(x, y)
        ux, uy = (x / old, y / old) if old > 0.0 else (0.0, -1.0)
        self._put(replace(load, x=size * ux + 0.0, y=size * uy + 0.0))

    def direct(self, text: str) -> None:
        """Another direction, the same size."""
        load = self._find()
        assert not isinstance(load, PressureLoad | ShearLoad)
        x, y = components(math.hypot(load.x, load.y), read_direction(text))
        self._put(replace(load, x=x, y=y))

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
        part = self._document.part
        cases = tuple(
            replace(c, loads=tuple(new if x.id == new.id else x for x in c.loads))
            for c in part.cases
        )
        apply(self._document, f"load {new.id}", replace(part, cases=cases))


# --- limits ---------------------------------------------------------------------------------


def add_stress_limit(document: Document) -> None:
    """Von Mises stress under the proof stress (or the strength where only that is known)."""
    part = document.part
    m = part.material
    against = "strength" if m and m.proof_stress is None and m.strength is not None else None
    limit = StressLimit(new_id(part, "g"))
    if against:
        limit = replace(limit, against="strength")
    apply(document, "stress limit", replace(part, limits=(*part.limits, limit)))
    document.select(limit.id)


def add_displacement_limit(document: Document) -> None:
    """At most one millimetre."""
    part = document.part
    limit = DisplacementLimit(new_id(part, "g"), 1.0)
    apply(document, "displacement limit", replace(part, limits=(*part.limits, limit)))
    document.select(limit.id)


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
        limits = tuple(
            with_field(g, field, value) if g.id == self._limit else g for g in part.limits
        )
        apply(self._document, f"{field} of limit {self._limit}", replace(part, limits=limits))
