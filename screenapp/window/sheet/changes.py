"""What the sheet does to the part: each change is one named, undoable step of the document."""

from __future__ import annotations

import math
from collections.abc import Callable
from dataclasses import replace
from typing import Any, TypeVar

from screenapp.model.curves import arc_through
from screenapp.model.edit_loops import move_corner, set_chamfer, set_round
from screenapp.model.edit_patterns import (
    break_pattern as broken_pattern,
    change_pattern,
    set_pattern,
)
from screenapp.model.edit_removal import remove as removed
from screenapp.model.edit_rules import Outcome, settle
from screenapp.model.errors import ScreenappError
from screenapp.model.features import find, loops_of
from screenapp.model.part import (
    CircleHole,
    Corner,
    Edge,
    Hole,
    LoopHole,
    Material,
    Part,
    SlotHole,
)
from screenapp.model.pattern import BoltCircle, GridPattern, Pattern, RowPattern
from screenapp.window.document import Document

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
    """Make the wall of a material, which the part takes up in place of its last or a namesake."""
    part = document.part
    if material in part.materials:
        materials = part.materials
    else:
        named = {zone.material for zone in part.zones}  # zones keep what they are made of
        replaced = ({part.wall.material} - named) | {material.name}
        materials = (*(m for m in part.materials if m.name not in replaced), material)
    wall = replace(part.wall, material=material.name)
    apply(document, f"material {material.name}", replace(part, materials=materials, wall=wall))


SHEET = Material(
    "",
    10_000.0,
    0.1,
    1000.0,
    youngs_modulus_2=10_000.0,
    shear_modulus=4_500.0,
)
"""What an orthotropic sheet of one's own begins with: as good as isotropic."""


def own_sheet(document: Document) -> None:
    """An orthotropic sheet of one's own; it begins with the present one's figures if that is one,
    or with its modulus in both directions."""
    m = document.part.material
    if m is not None and m.orthotropic:
        own_material(document)
        return
    base = SHEET
    if m is not None:
        base = Material(
            "",
            m.youngs_modulus,
            m.poissons_ratio,
            m.density,
            expansion=m.expansion,
            temperature_max=m.temperature_max,
            youngs_modulus_2=m.youngs_modulus,
            shear_modulus=0.5 * m.youngs_modulus / (1.0 + m.poissons_ratio),
            expansion_2=m.expansion,
        )
    _add_own(document, base)


def own_material(document: Document) -> None:
    """A material of one's own that begins with the present figures."""
    _add_own(document, document.part.material or Material("", 210_000.0, 0.3, 7850.0))


def _add_own(document: Document, base: Material) -> None:
    part = document.part
    names = {m.name for m in part.materials}
    name = next(
        n for n in ("Own material", *(f"Own material {i}" for i in range(2, 999))) if n not in names
    )
    own = replace(base, name=name, thickness_from=None, thickness_upto=None, source="own figures")
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
        wall = part.wall
        if wall.material == self._name:
            wall = replace(wall, material=name)
        zones = tuple(
            replace(z, material=name) if z.material == self._name else z for z in part.zones
        )
        changed = replace(part, materials=materials, wall=wall, zones=zones)
        apply(self._document, f"material {name}", changed)

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


def pattern_setter(document: Document, hole: str, field: str) -> Callable[[float], None]:
    """A function that sets a count, pitch, radius or angle of a hole's pattern."""

    def set_(value: float) -> None:
        words = field.replace("_", " ")
        _apply_outcome(
            document,
            f"{words} of pattern {hole}",
            change_pattern(document.part, hole, **{field: value}),
        )

    return set_


def repeat_hole(document: Document, hole: str, kind: str) -> None:
    """Repeat a hole, spaced by three times its own size."""
    found = find(document.part, hole)
    if found is None or not isinstance(found.record, CircleHole | SlotHole):
        return
    record = found.record
    far = 3.0 * (record.diameter if isinstance(record, CircleHole) else record.length)
    patterns: dict[str, Pattern] = {
        "row": RowPattern(3, far),
        "grid": GridPattern(2, 2, far, far),
        "bolt circle": BoltCircle(6, far),
    }
    _apply_outcome(
        document, f"repeat hole {hole}", set_pattern(document.part, hole, patterns[kind])
    )


def break_pattern(document: Document, hole: str) -> None:
    """Make the members of a pattern holes of their own."""
    document.apply(f"break up pattern {hole}", broken_pattern(document.part, hole))


def _apply_outcome(document: Document, name: str, outcome: Outcome) -> None:
    document.apply(name, outcome.part)
    if outcome.lost:
        document.said.emit(f"Removed with it: {'; '.join(outcome.lost)}")


class CornerChange:
    """Changes the place or the round of a corner."""

    def __init__(self, document: Document, corner: str) -> None:
        self._document = document
        self._corner = corner

    def setter(self, field: str) -> Callable[[float], None]:
        """A function that sets "x", "y", "round" or "chamfer"."""
        return lambda value: self._set(field, value)

    def _set(self, field: str, value: float) -> None:
        part, corner = self._document.part, self._corner
        found = find(part, corner)
        if found is None or not isinstance(found.record, Corner):
            return
        x, y = found.record.at
        if field == "round":
            self._document.apply(f"round of {corner}", set_round(part, corner, value))
        elif field == "chamfer":
            self._document.apply(f"chamfer of {corner}", set_chamfer(part, corner, value))
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
