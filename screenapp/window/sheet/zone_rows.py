"""Rows of the zones in the Wall paragraph: "zone z1: 8 mm thick, of the wall's material"."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import replace
from typing import Literal, cast

from screenapp.model import edits
from screenapp.model.errors import ScreenappError
from screenapp.model.materials import library
from screenapp.model.own_materials import own_materials
from screenapp.model.part import Part, Zone
from screenapp.window.document import Document
from screenapp.window.sheet import changes
from screenapp.window.sheet.pieces import Choice, Value
from screenapp.window.sheet.quantities import Quantities
from screenapp.window.sheet.rows import RowOf

MINE = "mine:"
"""Begins the key of a material that the user keeps."""

SAME = "the wall's material"
UNNAMED = "no name"
SIDES = {"both": "on both sides", "one": "on one side", "": "sides not said"}


def zone_rows(
    document: Document, q: Quantities, library_choices: Callable[[], tuple[Choice, ...]]
) -> list[RowOf]:
    """One row for each zone; `library_choices` are the materials that the wall may have."""
    return [_row(document, zone, q, library_choices) for zone in document.part.zones]


def _row(
    document: Document,
    zone: Zone,
    q: Quantities,
    library_choices: Callable[[], tuple[Choice, ...]],
) -> RowOf:
    part, where = document.part, f"zone {zone.id}"
    thickness = q.value(
        "thickness",
        part.wall.thickness if zone.thickness is None else zone.thickness,
        "length",
        f"Thickness of {where}",
        lambda value: document.apply(
            f"thickness of {where}", edits.set_zone(document.part, zone.id, thickness=value)
        ),
        field=f"zones.{zone.id}.thickness",
    )
    material = Value(
        "material",
        SAME if zone.material is None else zone.material,
        f"Material of {where}",
        lambda key: _choose(document, zone.id, key),
        lambda: (Choice("", SAME), *library_choices()),
    )
    name = Value(
        "name",
        zone.name or UNNAMED,
        f"Name of {where}",
        lambda text: document.apply(
            f"name of {where}", edits.set_zone(document.part, zone.id, name=text)
        ),
        hint="Leave it empty for none",
        typed=zone.name,
    )
    return RowOf(
        zone.id,
        (where,),
        (
            *(name, ", ", thickness, " thick", *_sides(document, zone)),
            *(", of ", material, *_axis(document, zone, q)),
        ),
        lambda: changes.remove(document, zone.id),
        f"Remove {where}",
    )


def _sides(document: Document, zone: Zone) -> tuple[Value | str, ...]:
    """On which sides the thickness of a zone is; nothing where it is the wall's."""
    if zone.thickness in (None, document.part.wall.thickness):
        return ()

    def choose(key: str) -> None:
        sides = cast(Literal["both", "one", ""], key)
        document.apply(
            f"sides of zone {zone.id}", edits.set_zone(document.part, zone.id, sides=sides)
        )

    return (
        ", ",
        Value(
            "sides",
            SIDES[zone.sides or ""],
            f"On which sides zone {zone.id} differs from the wall",
            choose,
            lambda: (
                Choice("both", SIDES["both"], "middle planes aligned"),
                Choice("one", SIDES["one"], "the wall bends as well: a caution"),
                Choice("", SIDES[""], "a caution"),
            ),
        ),
    )


def _axis(document: Document, zone: Zone, q: Quantities) -> tuple[Value | str, ...]:
    """Where the 1-axis of an orthotropic material lies in a zone; nothing of other materials."""
    part = document.part
    index = part.zones.index(zone)
    material = part.material_of(index)
    if material is None or not material.orthotropic:
        return ()
    value = q.value(
        "axis",
        part.wall_of(index).axis or 0.0,
        "angle",
        f"Direction of the 1-axis in zone {zone.id}",
        lambda to: document.apply(
            f"1-axis of zone {zone.id}", edits.set_zone(document.part, zone.id, axis=to)
        ),
        "Counter-clockwise from x",
        field=f"zones.{zone.id}.axis",
    )
    return (", its 1-axis at ", value, " from x")


def _choose(document: Document, zone: str, key: str) -> None:
    """Make a zone of a material of the part or of the library; "" is the wall's."""
    part = document.part
    if key.startswith(MINE):
        key = key.removeprefix(MINE)
        kept = own_materials().named(key)
        if kept is None:
            raise ScreenappError("that material is no longer kept", "choose another one")
        if any(m.name == key for m in part.materials):
            raise ScreenappError(
                f"the part has another material called “{key}”", "rename one of them"
            )
        part = replace(part, materials=(*part.materials, kept))
    changed = edits.set_zone(with_material(part, key, _thickness(part, zone)), zone, material=key)
    document.apply(f"material of zone {zone}", changed)


def _thickness(part: Part, zone: str) -> float:
    index = next(k for k, z in enumerate(part.zones) if z.id == zone)
    return part.wall_of(index).thickness


def with_material(part: Part, name: str, thickness: float) -> Part:
    """The part with a material of the library among its own, as the standard has it for a
    thickness [mm]; the part itself if it has it, or for ""."""
    if not name or any(m.name == name for m in part.materials):
        return part
    grade = next(g for g in library() if g.name == name)
    return replace(part, materials=(*part.materials, grade.at(thickness)))
