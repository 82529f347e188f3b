"""How a place may be held or loaded, with the values that each way asks for."""

from __future__ import annotations

import math
from collections.abc import Callable, Mapping, Sequence
from dataclasses import dataclass, replace

from screenapp.model.features import find
from screenapp.model.kinds import KindName
from screenapp.model.part import (
    BearingLoad,
    BodyLoad,
    BoltSupport,
    CircleHole,
    Edge,
    ElasticSupport,
    FixedSupport,
    ForceLoad,
    GravityLoad,
    LineLoad,
    Load,
    MisfitLoad,
    MomentLoad,
    Part,
    PinSupport,
    PointLoad,
    PrescribedSupport,
    PressureLoad,
    RollerSupport,
    ShearLoad,
    SpinLoad,
    Support,
    SymmetrySupport,
    TemperatureLoad,
    WeldSupport,
)
from screenapp.window.board.typed_entry import EntryField

Values = Mapping[str, float]
Record = Support | Load


@dataclass(frozen=True)
class Way:
    """One way of holding or loading a place.

    Attributes:
        key: stable name.
        label: on its button.
        tip: what it means, one line.
        fields: the values it has; a field with `empty` words may stay empty.
        make: the record from id, place and values; None while a needed value is missing.
        start: values shown at first.
    """

    key: str
    label: str
    tip: str
    fields: tuple[EntryField, ...]
    make: Callable[[str, str, Values], Record | None]
    start: tuple[tuple[str, float], ...] = ()


def vector_fields(kind: KindName) -> tuple[EntryField, ...]:
    """Size and angle, or both components: whichever is typed gives the other."""
    polar, plain = ("size", "angle"), ("x", "y")
    return (
        EntryField("size", "size", kind, plain),
        EntryField("angle", "towards", "angle", plain),
        EntryField("x", "or x", kind, polar),
        EntryField("y", "y", kind, polar),
    )


def components(values: Values) -> tuple[float, float] | None:
    """The vector given by size and angle [deg] or by x and y; None if its size is missing."""
    if "size" in values:
        a = math.radians(values.get("angle", -90.0))
        x, y = values["size"] * math.cos(a), values["size"] * math.sin(a)
        slack = 1e-12 * abs(values["size"])
        return (x if abs(x) > slack else 0.0, y if abs(y) > slack else 0.0)
    if "x" in values or "y" in values:
        return values.get("x", 0.0), values.get("y", 0.0)
    return None


def _vector(record: Callable[[str, str, float, float], Load]) -> Callable[..., Load | None]:
    def make(id_: str, on: str, values: Values) -> Load | None:
        found = components(values)
        return None if found is None else record(id_, on, *found)

    return make


def _point_on_edge(id_: str, on: str, values: Values) -> Load | None:
    found = components(values)
    if found is None or "along" not in values:
        return None
    return PointLoad(id_, on, *found, values["along"], values.get("patch"))


def _fixed(id_: str, on: str, values: Values) -> Support | None:
    return FixedSupport(id_, on)


def _roller(id_: str, on: str, values: Values) -> Support | None:
    return RollerSupport(id_, on, values.get("angle"))


def _moved(id_: str, on: str, values: Values) -> Support | None:
    if "x" not in values and "y" not in values:
        return None
    return PrescribedSupport(id_, on, values.get("x"), values.get("y"))


def _springs(id_: str, on: str, values: Values) -> Support | None:
    if "normal" not in values and "along" not in values:
        return None
    return ElasticSupport(id_, on, values.get("normal", 0.0), values.get("along", 0.0))


def _number(record: Callable[[str, str, float], Load], field: str) -> Callable[..., Load | None]:
    def make(id_: str, on: str, values: Values) -> Load | None:
        return record(id_, on, values[field]) if field in values else None

    return make


def _spin(id_: str, _on: str, values: Values) -> Load | None:
    if "speed" not in values:
        return None
    x, y = values.get("x", 0.0), values.get("y", 0.0)
    return SpinLoad(id_, x, y, values["speed"], values.get("factor", 1.0))


def _temperature(id_: str, on: str, values: Values) -> Load | None:
    """`on` is the zone that it is of, "" for the whole part."""
    if "change" not in values:
        return None
    x, y, start = values.get("x", 0.0), values.get("y", 0.0), values.get("start", 20.0)
    return TemperatureLoad(id_, values["change"], x, y, start, on or None)


DOWN = (("angle", -90.0),)
FIXED = Way("fixed", "Fixed", "Held in both directions.", (), _fixed)
ROLLER = Way(
    "roller",
    "Roller",
    "Held across its boundary, or along an angle that you give; free the other way.",
    (EntryField("angle", "held along", "angle", (), "its normal"),),
    _roller,
)
PIN = Way(
    "roller",
    "Pin",
    "Sits on a pin that it can turn about; with an angle, held along that direction only.",
    (EntryField("angle", "held along", "angle", (), "all round"),),
    _roller,
)
PUSHING_PIN = Way(
    "pushing",
    "Pushing pin",
    "A pin that bears only on the side that is pressed against it; found case by case.",
    (),
    lambda id_, on, _values: PinSupport(id_, on),
)
SYMMETRY = Way(
    "symmetry",
    "Symmetry",
    "Only one half is drawn: the edge stays on its line and slides along it.",
    (),
    lambda id_, on, _values: SymmetrySupport(id_, on),
)
SPRINGS = Way(
    "springs",
    "Springs",
    "A bed of springs: force per length for each length of movement; it pulls as well as pushes.",
    (
        EntryField("normal", "across", "bed_stiffness", (), "free"),
        EntryField("along", "along", "bed_stiffness", (), "free"),
    ),
    _springs,
)
BOLTS = Way(
    "bolts",
    "Bolts",
    "A bolt in each hole: they share force and moment, and the force in each is told.",
    (EntryField("stiffness", "each gives way by", "spring_stiffness", (), "rigid"),),
    lambda id_, on, values: BoltSupport(id_, on, (), values.get("stiffness")),
)
WELD = Way(
    "weld",
    "Weld",
    "A fillet weld, about as stiff as the wall's own material; the force per length is told.",
    (EntryField("throat", "throat", "length"),),
    lambda id_, on, values: WeldSupport(id_, on, values["throat"]) if "throat" in values else None,
)
CORNER_ROLLER = Way(
    "roller",
    "Roller",
    "Held along the given angle, free across it.",
    (EntryField("angle", "held along", "angle"),),
    _roller,
    (("angle", 90.0),),
)
MOVED = Way(
    "moved",
    "Moved",
    "Moved by given amounts; what stays empty is free.",
    (
        EntryField("x", "x", "length", (), "free"),
        EntryField("y", "y", "length", (), "free"),
    ),
    _moved,
)


def _vector_way(
    key: str, tip: str, kind: KindName, record: Callable[[str, str, float, float], Load]
) -> Way:
    """A load given by a vector that points down at first."""
    return Way(key, key.capitalize(), tip, vector_fields(kind), _vector(record), DOWN)


FORCE = _vector_way("force", "A total force spread evenly.", "force", ForceLoad)
BEARING = _vector_way(
    "bearing", "A pin's force: radial pressure over the half it bears on.", "force", BearingLoad
)
POINT = _vector_way(
    "point", "A force at a corner; the stress under it has no finite value.", "force", PointLoad
)
POINT_ON_EDGE = Way(
    "point",
    "Point",
    "A force at a place of the edge, or over a short patch about it; at a point the stress has no "
    "finite value.",
    (
        *vector_fields("force"),
        EntryField("along", "along it", "length"),
        EntryField("patch", "over", "length", (), "a point"),
    ),
    _point_on_edge,
    DOWN,
)
PRESSURE = Way(
    "pressure",
    "Pressure",
    "Pushes on the material; negative pulls.",
    (EntryField("pressure", "pressure", "stress"),),
    _number(PressureLoad, "pressure"),
)
SHEAR = Way(
    "shear",
    "Shear",
    "Along the edge, with the material on its left.",
    (EntryField("shear", "per length", "line_load"),),
    _number(ShearLoad, "shear"),
)
LINE = _vector_way("line", "A force per length in one direction.", "line_load", LineLoad)
OWN_WEIGHT = Way(
    "gravity",
    "Own weight",
    "The part's own weight under this acceleration.",
    vector_fields("acceleration"),
    lambda id_, _on, values: (
        None if (found := components(values)) is None else GravityLoad(id_, *found)
    ),
    (("size", 9.81), ("angle", -90.0)),
)


MOMENT = Way(
    "moment",
    "Moment",
    "An even shear round the hole; positive turns counter-clockwise.",
    (EntryField("moment", "moment", "moment"),),
    _number(MomentLoad, "moment"),
)
SPIN = Way(
    "spin",
    "Spin",
    "The part turns steadily about this point and its mass pulls outwards.",
    (
        EntryField("speed", "speed", "speed"),
        EntryField("x", "about x", "length"),
        EntryField("y", "y", "length"),
        EntryField("factor", "forces times", "number", (), "1"),
    ),
    _spin,
)
TEMPERATURE = Way(
    "temperature",
    "Temperature",
    "A change of temperature; a gradient makes it vary from place to place.",
    (
        EntryField("change", "change", "temperature_change"),
        EntryField("start", "from", "temperature", (), "20 °C"),
        EntryField("x", "and along x", "temperature_gradient", (), "even"),
        EntryField("y", "along y", "temperature_gradient", (), "even"),
    ),
    _temperature,
)


MISFIT = Way(
    "misfit",
    "Misfit",
    "The support here is not where the drawing has it, in this case; what it holds moves with it.",
    vector_fields("length"),
    lambda id_, on, values: (  # `on` is the support
        None if (found := components(values)) is None else MisfitLoad(id_, on, *found)
    ),
    (("angle", 0.0),),
)


def body_ways(load: BodyLoad) -> tuple[str, tuple[Way, ...]]:
    """What a load that acts throughout the part is called, and how it is given."""
    if isinstance(load, SpinLoad):
        return "Spin", (SPIN,)
    if isinstance(load, TemperatureLoad):
        return "Change of temperature", (TEMPERATURE,)
    if isinstance(load, MisfitLoad):
        return f"Misfit of support {load.support}", (MISFIT,)
    return "Own weight", (OWN_WEIGHT,)


def holding_ways(part: Part, on: str) -> tuple[Way, ...]:
    """The ways in which a place may be held, the most likely first."""
    found = find(part, on)
    if found is None or found.inside or found.kind not in ("edge", "hole", "corner"):
        return ()
    if found.kind == "corner":
        return FIXED, CORNER_ROLLER, MOVED
    if isinstance(found.record, CircleHole):
        return FIXED, PIN, PUSHING_PIN, BOLTS, SPRINGS, MOVED
    if isinstance(found.record, Edge) and found.record.through is None:
        return FIXED, ROLLER, SYMMETRY, WELD, SPRINGS, MOVED
    return FIXED, (PIN if found.kind == "hole" else ROLLER), WELD, SPRINGS, MOVED


def bolting_ways(part: Part, holes: Sequence[str]) -> tuple[Way, ...]:
    """How several round holes may be held together; nothing where one of them is not round."""
    found = [find(part, on) for on in holes]
    if len(holes) < 2 or not all(f and isinstance(f.record, CircleHole) for f in found):
        return ()
    also = tuple(holes[1:])

    def make(id_: str, on: str, values: Values) -> Support:
        return BoltSupport(id_, on, also, values.get("stiffness"))

    return (replace(BOLTS, make=make),)


def loading_ways(part: Part, on: str, along: float | None = None) -> tuple[Way, ...]:
    """The ways in which a place may be loaded, the most likely first; what is held may be off.

    `along` is where on an edge a force at a point begins [mm].
    """
    held = next(
        (s.id for s in part.supports if s.on == on and not isinstance(s, SymmetrySupport)), None
    )
    if held is None:
        return _loading_ways(part, on, along)

    def make(id_: str, _on: str, values: Values) -> Record | None:
        return MISFIT.make(id_, held, values)

    return (*_loading_ways(part, on, along), replace(MISFIT, make=make))


def _loading_ways(part: Part, on: str, along: float | None) -> tuple[Way, ...]:
    found = find(part, on)
    if found is None or found.inside or found.kind not in ("edge", "hole", "corner"):
        return ()
    if found.kind == "corner":
        return (POINT,)
    if isinstance(found.record, CircleHole):
        return BEARING, FORCE, PRESSURE, SHEAR, MOMENT
    if found.kind == "edge":
        start = DOWN if along is None else (*DOWN, ("along", along))
        return FORCE, PRESSURE, SHEAR, LINE, replace(POINT_ON_EDGE, start=start)
    return FORCE, PRESSURE, SHEAR, LINE


def read_back(record: Record) -> tuple[str, dict[str, float]]:
    """The key of the way and the values that would make this record."""
    if isinstance(record, FixedSupport):
        return "fixed", {}
    if isinstance(record, SymmetrySupport):
        return "symmetry", {}
    if isinstance(record, PinSupport):
        return "pushing", {}
    if isinstance(record, RollerSupport):
        return "roller", {} if record.angle is None else {"angle": record.angle}
    if isinstance(record, WeldSupport):
        return "weld", {"throat": record.throat}
    if isinstance(record, BoltSupport):
        return "bolts", {} if record.stiffness is None else {"stiffness": record.stiffness}
    if isinstance(record, ElasticSupport):
        ways = {"normal": record.normal, "along": record.along}
        return "springs", {k: v for k, v in ways.items() if v}
    if isinstance(record, PrescribedSupport):
        both = {"x": record.x, "y": record.y}
        return "moved", {k: v for k, v in both.items() if v is not None}
    if isinstance(record, PressureLoad):
        return "pressure", {"pressure": record.pressure}
    if isinstance(record, ShearLoad):
        return "shear", {"shear": record.per_length}
    if isinstance(record, MomentLoad):
        return "moment", {"moment": record.moment}
    if isinstance(record, SpinLoad):
        names: tuple[str, ...] = ("speed", "x", "y", "factor")
        return "spin", {name: getattr(record, name) for name in names}
    if isinstance(record, TemperatureLoad):
        names = ("change", "start", "x", "y")
        return "temperature", {name: getattr(record, name) for name in names}
    if isinstance(record, PointLoad):
        where = {"along": record.along, "patch": record.patch}
        given = {name: value for name, value in where.items() if value is not None}
        return "point", {"x": record.x, "y": record.y, **given}
    keys: dict[type, str] = {
        ForceLoad: "force",
        BearingLoad: "bearing",
        LineLoad: "line",
        GravityLoad: "gravity",
        MisfitLoad: "misfit",
    }
    return keys[type(record)], {"x": record.x, "y": record.y}


REST = ("start", "end", "also", "end_pressure", "end_x", "end_y")
"""Fields that the popover does not show: the sheet has them."""


def with_rest(made: Record, old: Record) -> Record:
    """What the popover made of a record, with what of the old one it does not show."""
    if isinstance(made, BodyLoad):
        return made
    kept = {name: getattr(old, name) for name in REST if hasattr(old, name) and hasattr(made, name)}
    return replace(made, **kept)
