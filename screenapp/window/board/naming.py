"""The words that name what is under the cursor, with its size and its faults."""

from __future__ import annotations

import math
from collections.abc import Sequence

from screenapp.model.errors import Fault
from screenapp.model.features import Found, find, name_of, place_name
from screenapp.model.part import (
    BearingLoad,
    BoltSupport,
    CircleHole,
    Corner,
    DisplayUnits,
    ElasticSupport,
    FixedSupport,
    ForceLoad,
    GravityLoad,
    LineLoad,
    MisfitLoad,
    MomentLoad,
    Part,
    PinSupport,
    PointLoad,
    PressureLoad,
    Probe,
    RollerSupport,
    ShearLoad,
    SlotHole,
    SpinLoad,
    Support,
    SymmetrySupport,
    TemperatureLoad,
    WeldSupport,
    Zone,
)
from screenapp.model.pattern import size_of
from screenapp.model.restated import restated
from screenapp.model.units import format_quantity
from screenapp.window.board.hit_test import Hit
from screenapp.window.document import Document


def name_at(document: Document, hit: Hit | None, faults: Sequence[Fault] = ()) -> str:
    """The tooltip for what is under the cursor, with the faults there; "" for nothing."""
    lines: list[str] = []
    found = find(document.part, hit.id) if hit is not None else None
    if found is not None:
        lines.append(described(document.part, found))
        faults = (*faults, *(f for f in document.faults if found.record.id in f.ids))
    units = document.part.display_units
    told = [restated(str(fault), units) for fault in faults]
    return "\n".join([*lines, *dict.fromkeys(told)])


def described(part: Part, found: Found) -> str:
    """The name of something with its size, or what it does: "hole h1, ⌀ 12 mm"."""
    record, units = found.record, part.display_units
    words = name_of(found)
    if isinstance(record, CircleHole | SlotHole):
        if isinstance(record, CircleHole):
            size = f"⌀ {_length(record.diameter, units)}"
        else:
            size = f"{_length(record.length, units)} × {_length(record.width, units)}"
        if record.pattern is not None:
            return f"{words}, {size_of(record.pattern)} holes, each {size}"
        one = words if isinstance(record, CircleHole) else f"slot {record.id}"
        whole = f", one of {place_name(part, found.owner)}" if found.owner else ""
        return f"{one}, {size}{whole}"
    if isinstance(record, Zone):
        return f"{words}{f' ({record.name})' if record.name else ''}, {zone_words(record, part)}"
    if isinstance(record, Corner) and record.round:
        return f"{words}, R {_length(record.round, units)}"
    if isinstance(record, Corner) and record.chamfer:
        return f"{words}, {_length(record.chamfer, units)} off both edges"
    if isinstance(record, Probe):
        return f"probe {record.name}"
    if isinstance(record, Support):
        return f"{place_name(part, record.on)} {_held(record, units)}"
    if isinstance(record, GravityLoad):
        pull = format_quantity(math.hypot(record.x, record.y), "acceleration", units)
        return f"load {record.id}, the part's own weight at {pull}"
    if isinstance(record, SpinLoad):
        speed = format_quantity(record.speed, "speed", units)
        about = f"{_length(record.x, units)}, {_length(record.y, units)}"
        return f"load {record.id}, spin at {speed} about {about}"
    if isinstance(record, TemperatureLoad):
        change = format_quantity(record.change, "temperature_change", units)
        start = format_quantity(record.start, "temperature", units)
        where = "" if record.zone is None else f" of zone {record.zone}"
        return f"load {record.id}, change of temperature{where} by {change} from {start}"
    if isinstance(record, MisfitLoad):
        x, y = (_length(v, units) for v in (record.x, record.y))
        return f"load {record.id}, misfit of support {record.support} by {x}, {y}"
    if found.kind == "load":
        return f"{_loaded(record, units)} on {place_name(part, record.on)}"  # type: ignore
    return words


def zone_words(zone: Zone, part: Part) -> str:
    """What a zone is, in the words that stand on the board: "8 mm, brass"."""
    words = []
    if zone.thickness is not None or zone.material is None:
        own = part.wall.thickness if zone.thickness is None else zone.thickness
        words.append(_length(own, part.display_units))
    if zone.material is not None:
        words.append(zone.material)
    return ", ".join(words)


def _held(record: Support, units: DisplayUnits) -> str:
    if isinstance(record, FixedSupport):
        return "is held in both directions"
    if isinstance(record, SymmetrySupport):
        return "is a line of symmetry"
    if isinstance(record, ElasticSupport):
        return f"is held by springs, {spring_words(record, units)}"
    if isinstance(record, WeldSupport):
        return f"is held by a weld of throat {_length(record.throat, units)}"
    if isinstance(record, BoltSupport):
        more = f" with {' and '.join(record.also)}" if record.also else ""
        if record.stiffness is None:
            return f"is held by rigid bolts{more}"
        each = format_quantity(record.stiffness, "spring_stiffness", units)
        return f"is held by bolts of {each}{more}"
    if isinstance(record, PinSupport):
        return "sits on a pin that only pushes"
    if isinstance(record, RollerSupport):
        if record.angle is None:
            return "is held across its boundary and slides along it"
        return f"is held along {format_quantity(record.angle, 'angle', units)}"
    given = [
        f"{_length(v, units)} in {axis}"
        for axis, v in (("x", record.x), ("y", record.y))
        if v is not None
    ]
    return "is moved by " + " and ".join(given)


def spring_words(support: ElasticSupport, units: DisplayUnits) -> str:
    """The stiffnesses that a bed of springs has: "50 N/mm² across, 20 N/mm² along"."""
    ways = (("across", support.normal), ("along", support.along))
    given = [f"{format_quantity(v, 'bed_stiffness', units)} {way}" for way, v in ways if v]
    return ", ".join(given) or "without stiffness"


def _loaded(record: object, units: DisplayUnits) -> str:
    if isinstance(record, PressureLoad):
        return f"pressure of {format_quantity(record.pressure, 'stress', units)}"
    if isinstance(record, ShearLoad):
        return f"shear of {format_quantity(record.per_length, 'line_load', units)}"
    if isinstance(record, MomentLoad):
        return f"moment of {format_quantity(record.moment, 'moment', units)}"
    if isinstance(record, LineLoad):
        x, y = (format_quantity(v, "line_load", units) for v in (record.x, record.y))
        return f"line load of {x}, {y}"
    if isinstance(record, ForceLoad | BearingLoad | PointLoad):
        kind = {ForceLoad: "force", BearingLoad: "bearing force", PointLoad: "point force"}
        x, y = (format_quantity(v, "force", units) for v in (record.x, record.y))
        patch = getattr(record, "patch", None)
        spread = "" if patch is None else f" over {_length(patch, units)}"
        return f"{kind[type(record)]} of {x}, {y}{spread}"
    return "load"


def _length(value: float, units: DisplayUnits) -> str:
    return format_quantity(value, "length", units)
