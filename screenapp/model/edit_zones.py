"""Edits of zones: drawn, made from a hole and back, with their thickness and material."""

from __future__ import annotations

from dataclasses import replace
from typing import Literal

from screenapp.model.edit_places import drop_from_places
from screenapp.model.edit_rules import EditError, Outcome, must_find, new_id, settle
from screenapp.model.part import CircleHole, Loop, LoopHole, Part, SlotHole, Zone, ZoneSides
from screenapp.model.zone_faults import zone_value_faults

Form = CircleHole | SlotHole | LoopHole


def add_zone(
    part: Part, form: Form | Loop, thickness: float | None = None, material: str | None = None
) -> Part:
    """Add a zone of the given form; its id is `new_id(part, "z")`, whatever the form bore.

    Without a thickness and a material of its own it begins as a pad of twice the wall.
    """
    id_ = new_id(part, "z")
    named: Form = LoopHole(id_, form) if isinstance(form, Loop) else replace(form, id=id_)
    if isinstance(named, CircleHole | SlotHole) and named.pattern is not None:
        raise EditError("a pattern cannot be a zone", "draw one zone, or several")
    if thickness is None and material is None:
        thickness = 2.0 * part.wall.thickness
    zone = Zone(named, None if thickness is None else float(thickness), material)
    return settle(part, replace(part, zones=(*part.zones, zone)), zone_value_faults)


def set_zone(
    part: Part,
    zone: str,
    thickness: float | None = None,
    material: str | None = None,
    name: str | None = None,
    sides: ZoneSides | Literal[""] | None = None,
    axis: float | None = None,
) -> Part:
    """Give a zone a thickness [mm], a material, a name, sides or the direction of its material's
    1-axis [deg]; None leaves each as it is.

    A material of "" stands for the wall's; sides of "" say nothing.
    """
    record = _zone(part, zone)
    changed = Zone(
        record.form,
        record.thickness if thickness is None else float(thickness),
        record.material if material is None else (material or None),
        record.name if name is None else name.strip(),
        record.sides if sides is None else (sides or None),
        record.axis if axis is None else float(axis),
    )
    return settle(part, _with_zone(part, changed), zone_value_faults)


def reshape_zone(part: Part, zone: str, **sizes: float) -> Part:
    """Change `diameter` of a round zone, or `length`, `width`, `angle` of a slot-like one.

    Raises:
        EditError: a size that this zone has not, or that is not above zero.
    """
    record = _zone(part, zone)
    allowed = {CircleHole: ("diameter",), SlotHole: ("length", "width", "angle")}
    for name in sizes:
        if name not in allowed.get(type(record.form), ()):
            raise EditError(f"zone {zone} has no {name}", "move its corners")
    form = replace(record.form, **{k: float(v) for k, v in sizes.items()})  # type: ignore
    if isinstance(form, SlotHole) and form.length < form.width:
        raise EditError(
            f"zone {zone} would be {form.length:g} mm long but {form.width:g} mm wide",
            "make the overall length at least the width",
        )
    return settle(part, _with_zone(part, replace(record, form=form)))


def remove_zone(part: Part, zone: str) -> Part:
    """Take a zone away; the wall stays."""
    _zone(part, zone)
    return replace(part, zones=tuple(z for z in part.zones if z.id != zone))


def hole_to_zone(part: Part, hole: str, thickness: float | None = None) -> Outcome:
    """Fill a hole with a zone of its form; supports and loads on the hole go with it."""
    record = must_find(part, hole, "hole").record
    assert isinstance(record, CircleHole | SlotHole | LoopHole)
    places = {hole}
    if isinstance(record, LoopHole):
        places |= {c.id for c in record.loop.corners} | {e.id for e in record.loop.edges}
    bare = drop_from_places(part, places)
    filled = replace(bare.part, holes=tuple(h for h in bare.part.holes if h.id != hole))
    return Outcome(add_zone(filled, record, thickness), bare.lost)


def zone_to_hole(part: Part, zone: str) -> Part:
    """Cut a zone out of the wall; the hole's id is `new_id(part, "h")`."""
    form = replace(_zone(part, zone).form, id=new_id(part, "h"))
    bare = remove_zone(part, zone)
    return settle(part, replace(bare, holes=(*bare.holes, form)))


def _zone(part: Part, zone: str) -> Zone:
    record = must_find(part, zone, "zone").record
    assert isinstance(record, Zone)
    return record


def _with_zone(part: Part, zone: Zone) -> Part:
    return replace(part, zones=tuple(zone if z.id == zone.id else z for z in part.zones))
