"""The numbers of a corner, hole or probe that can be typed exactly."""

from __future__ import annotations

from screenapp.model import edits
from screenapp.model.features import Found, find
from screenapp.model.part import CircleHole, Corner, LoopHole, Part, Point, Probe, SlotHole
from screenapp.window.board.typed_entry import EntryField

PLACE = (EntryField("x", "x"), EntryField("y", "y"))
ROUND = EntryField("round", "round")
DIAMETER = EntryField("diameter", "diameter")
SLOT = (
    EntryField("length", "length"),
    EntryField("width", "width"),
    EntryField("angle", "angle", "angle"),
)


def exact_fields(found: Found) -> tuple[EntryField, ...]:
    """What may be typed for a thing; nothing for edges and the like."""
    record = found.record
    if isinstance(record, Corner):
        return (*PLACE, ROUND)
    if isinstance(record, CircleHole):
        return (*PLACE, DIAMETER)
    if isinstance(record, SlotHole):
        return (*PLACE, *SLOT)
    return PLACE if isinstance(record, LoopHole | Probe) else ()


def exact_values(found: Found) -> dict[str, float]:
    """The present values [mm, deg] of those fields."""
    record = found.record
    if isinstance(record, Corner):
        return {"x": record.at[0], "y": record.at[1], "round": record.round}
    if isinstance(record, Probe):
        return {"x": record.at[0], "y": record.at[1]}
    if not isinstance(record, CircleHole | SlotHole | LoopHole):
        return {}
    x, y = edits.hole_centre(record)
    values = {"x": x, "y": y}
    if isinstance(record, CircleHole):
        values["diameter"] = record.diameter
    elif isinstance(record, SlotHole):
        values |= {"length": record.length, "width": record.width, "angle": record.angle}
    return values


def exact_paths(found: Found) -> dict[str, str]:
    """The dotted path in the part file of each of those fields, where an expression is kept."""
    record = found.record
    if isinstance(record, LoopHole):
        return {}
    place = "centre" if isinstance(record, CircleHole | SlotHole) else "at"
    places = {"x": f"{place}.0", "y": f"{place}.1"}
    return {f.name: f"{found.field}.{places.get(f.name, f.name)}" for f in exact_fields(found)}


def with_exact(part: Part, id_: str, typed: dict[str, float]) -> Part:
    """The part with the typed values in the place of the present ones.

    Raises:
        EditError: a value that makes no sense.
    """
    found = find(part, id_)
    if found is None:
        return part
    values = exact_values(found) | typed
    to: Point = (values["x"], values["y"])
    moves = "x" in typed or "y" in typed
    record = found.record
    if isinstance(record, Corner):
        if moves:
            part = edits.move_corner(part, id_, to)
        return edits.set_round(part, id_, values["round"]) if "round" in typed else part
    if isinstance(record, Probe):
        return edits.move_probe(part, id_, to)
    if moves:
        part = edits.move_hole(part, id_, to)
    sizes = {k: v for k, v in typed.items() if k not in ("x", "y")}
    return edits.resize_hole(part, id_, **sizes) if sizes else part
