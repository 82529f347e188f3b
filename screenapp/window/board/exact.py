"""The numbers of a corner, hole, zone or probe that can be typed exactly."""

from __future__ import annotations

import dataclasses
from dataclasses import replace

from screenapp.model import edits
from screenapp.model.features import Found, Record, find
from screenapp.model.kinds import KindName
from screenapp.model.part import CircleHole, Corner, LoopHole, Part, Point, Probe, SlotHole, Zone
from screenapp.model.pattern_faults import COUNTS
from screenapp.window.board.typed_entry import EntryField

PLACE = (EntryField("x", "x"), EntryField("y", "y"))
THICKNESS = EntryField("thickness", "thickness")
CUTS = (
    EntryField("round", "round", "length", ("chamfer",)),
    EntryField("chamfer", "chamfer", "length", ("round",)),
)
DIAMETER = EntryField("diameter", "diameter")
SLOT = (
    EntryField("length", "length"),
    EntryField("width", "width"),
    EntryField("angle", "angle", "angle"),
)


def exact_fields(found: Found) -> tuple[EntryField, ...]:
    """What may be typed for a thing; nothing for edges and the like."""
    record = _formed(found)
    if isinstance(found.record, Zone):
        return (*exact_fields(replace(found, record=record)), THICKNESS)
    if isinstance(record, Corner):
        return (*PLACE, *CUTS)
    if isinstance(record, CircleHole | SlotHole):
        sizes = (DIAMETER,) if isinstance(record, CircleHole) else SLOT
        return (*PLACE, *sizes, *pattern_fields(record))
    return PLACE if isinstance(record, LoopHole | Probe) else ()


def pattern_fields(hole: CircleHole | SlotHole) -> tuple[EntryField, ...]:
    """What may be typed for the pattern of a hole."""
    if hole.pattern is None:
        return ()
    names = [f.name for f in dataclasses.fields(hole.pattern)]
    return tuple(
        EntryField(PATTERN_KEYS.get(n, n), PATTERN_WORDS[n], PATTERN_KINDS.get(n, "length"))
        for n in names
    )


PATTERN_WORDS = {
    "count": "holes",
    "columns": "columns",
    "rows": "rows",
    "pitch": "pitch",
    "pitch_x": "pitch x",
    "pitch_y": "pitch y",
    "radius": "circle radius",
    "angle": "turned",
    "start": "first at",
}
PATTERN_KINDS: dict[str, KindName] = {
    "count": "number",
    "columns": "number",
    "rows": "number",
    "angle": "angle",
    "start": "angle",
}
PATTERN_KEYS = {"angle": "pattern angle"}
"""Where a pattern's value has the name of one of the hole's own."""


def pattern_values(hole: CircleHole | SlotHole) -> dict[str, float]:
    """The values of a hole's pattern by the names of their fields."""
    if hole.pattern is None:
        return {}
    names = [f.name for f in dataclasses.fields(hole.pattern)]
    return {PATTERN_KEYS.get(n, n): float(getattr(hole.pattern, n)) for n in names}


def exact_values(found: Found) -> dict[str, float]:
    """The present values [mm, deg] of those fields."""
    record = _formed(found)
    if isinstance(record, Corner):
        cuts = {"round": record.round, "chamfer": record.chamfer}
        return {"x": record.at[0], "y": record.at[1], **cuts}
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
    if isinstance(found.record, Zone) and found.record.thickness is not None:
        values["thickness"] = found.record.thickness
    return values if isinstance(record, LoopHole) else values | pattern_values(record)


def _formed(found: Found) -> Record:
    """The record, or the form of a zone."""
    return found.record.form if isinstance(found.record, Zone) else found.record


def exact_paths(found: Found) -> dict[str, str]:
    """The dotted path in the part file of each of those fields, where an expression is kept."""
    record = _formed(found)
    if isinstance(record, LoopHole):
        return {"thickness": f"{found.field}.thickness"} if found.kind == "zone" else {}
    place = "centre" if isinstance(record, CircleHole | SlotHole) else "at"
    places = {"x": f"{place}.0", "y": f"{place}.1"}
    paths = {f.name: f"{found.field}.{places.get(f.name, f.name)}" for f in exact_fields(found)}
    if isinstance(record, CircleHole | SlotHole) and record.pattern is not None:
        for field in dataclasses.fields(record.pattern):
            key = PATTERN_KEYS.get(field.name, field.name)
            paths[key] = f"{found.field}.pattern.{field.name}"
            if field.name in COUNTS:
                del paths[key]  # a count is never an expression
    return paths


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
        if "chamfer" in typed:
            return edits.set_chamfer(part, id_, values["chamfer"])
        return edits.set_round(part, id_, values["round"]) if "round" in typed else part
    if isinstance(record, Probe):
        return edits.move_probe(part, id_, to)
    if moves and isinstance(record, Zone):
        x, y = edits.hole_centre(record.form)
        part = edits.move(part, [id_], to[0] - x, to[1] - y)
    elif moves:
        part = edits.move_hole(part, id_, to)
    if isinstance(record, Zone):
        sizes = {k: v for k, v in typed.items() if k not in ("x", "y", "thickness")}
        if "thickness" in typed:
            part = edits.set_zone(part, id_, thickness=typed["thickness"])
        return edits.reshape_zone(part, id_, **sizes) if sizes else part
    assert isinstance(record, CircleHole | SlotHole | LoopHole)
    repeated = {} if isinstance(record, LoopHole) else pattern_values(record)
    fields = {v: k for k, v in PATTERN_KEYS.items()}
    pattern = {fields.get(k, k): v for k, v in typed.items() if k in repeated}
    sizes = {k: v for k, v in typed.items() if k not in ("x", "y") and k not in repeated}
    if sizes:
        part = edits.resize_hole(part, id_, **sizes)
    return edits.change_pattern(part, id_, **pattern).part if pattern else part
