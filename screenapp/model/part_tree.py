"""The part as a tree of plain dicts and lists, as the file holds it, and back.

The tree has a number wherever the part has one; `formulas.py` puts expressions in and out.
Keys and their order are those of the records in `part.py`; a record that is one of several kinds
says which by `kind`, after its id.
"""

from __future__ import annotations

import dataclasses
import types
import typing
from typing import Any, TypeVar

from screenapp.model.part import (
    BearingLoad,
    BoltSupport,
    Case,
    CircleHole,
    Combination,
    Corner,
    Cut,
    Dimension,
    DisplacementLimit,
    Edge,
    ElasticSupport,
    FatigueLimit,
    FixedSupport,
    ForceLoad,
    Formula,
    GravityLoad,
    JobDetails,
    JointLimit,
    LineLoad,
    Loop,
    LoopHole,
    Material,
    MeshWishes,
    MisfitLoad,
    MomentLoad,
    Part,
    PinSupport,
    Point,
    PointLoad,
    PrescribedSupport,
    PressureLoad,
    Probe,
    RollerSupport,
    ShearLoad,
    SlotHole,
    SpinLoad,
    StrainLimit,
    StressLimit,
    SymmetrySupport,
    TemperatureLoad,
    Term,
    Wall,
    WeldSupport,
    Zone,
)
from screenapp.model.pattern import BoltCircle, GridPattern, Pattern, RowPattern

FORMAT = "screenapp part"
VERSION = 3
"""The version that is written; `migrations.py` tells what each version changed."""

Tree = dict[str, Any]
Record = TypeVar("Record")

HOLES: dict[str, type] = {"circle": CircleHole, "slot": SlotHole, "loop": LoopHole}
SUPPORTS: dict[str, type] = {
    "fixed": FixedSupport,
    "roller": RollerSupport,
    "prescribed": PrescribedSupport,
    "pin": PinSupport,
    "symmetry": SymmetrySupport,
    "elastic": ElasticSupport,
    "bolts": BoltSupport,
    "weld": WeldSupport,
}
LOADS: dict[str, type] = {
    "pressure": PressureLoad,
    "shear": ShearLoad,
    "line": LineLoad,
    "force": ForceLoad,
    "bearing": BearingLoad,
    "point": PointLoad,
    "moment": MomentLoad,
    "gravity": GravityLoad,
    "spin": SpinLoad,
    "temperature": TemperatureLoad,
    "misfit": MisfitLoad,
}
LIMITS: dict[str, type] = {
    "stress": StressLimit,
    "displacement": DisplacementLimit,
    "joint": JointLimit,
    "fatigue": FatigueLimit,
    "strain": StrainLimit,
}
READINGS: dict[str, type] = {"probe": Probe, "cut": Cut}
PATTERNS: dict[str, type] = {"row": RowPattern, "grid": GridPattern, "bolt circle": BoltCircle}

KIND_OF: dict[type, str] = {
    cls: kind
    for group in (HOLES, SUPPORTS, LOADS, LIMITS, READINGS, PATTERNS)
    for kind, cls in group.items()
}


# --- forms of fields ------------------------------------------------------------------------


def _form(hint: Any) -> str:
    options = set(typing.get_args(hint)) if isinstance(hint, types.UnionType) else {hint}
    for kind, form in ((float, "number"), (Point, "point"), (int, "whole")):
        if kind in options:
            return form
    return "text"


def _forms(cls: Any) -> dict[str, str]:
    hints = typing.get_type_hints(cls)
    return {f.name: _form(hints[f.name]) for f in dataclasses.fields(cls) if f.name != "pattern"}


FORMS: dict[type, dict[str, str]] = {
    cls: _forms(cls)
    for cls in (Corner, Edge, Wall, Material, MeshWishes, Dimension, Term, JobDetails, *KIND_OF)
    if cls is not LoopHole
}
"""The form of each field of the plain records: "number", "point", "whole" or "text"."""

NUMBER_KEYS: frozenset[str] = frozenset(
    name
    for cls, forms in FORMS.items()
    if cls is not Dimension
    for name, form in forms.items()
    if form in ("number", "point")
)
"""Keys whose value is a number or a point, so that an expression may stand there."""


# --- part to tree ---------------------------------------------------------------------------


def tree_of_part(part: Part) -> Tree:
    """The whole file's tree, without formulas; None marks what the part does not have."""
    return {
        "format": FORMAT,
        "version": VERSION,
        "title": part.title,
        "notes": part.notes,
        "record": {key: text for key, text in _tree(part.record).items() if text} or None,
        "display_units": part.display_units,
        "dimensions": [_dimension_tree(d) for d in part.dimensions],
        "shape": {
            "outline": _loop_tree(part.outline) if part.outline is not None else None,
            "holes": [_hole_tree(h) for h in part.holes],
            "zones": [_zone_tree(z) for z in part.zones] or None,
        },
        "wall": _tree(part.wall),
        "materials": [_tree(m) for m in part.materials],
        "supports": [_tree(s) for s in part.supports],
        "cases": [
            {"id": c.id, "name": c.name, "loads": [_tree(load) for load in c.loads]}
            for c in part.cases
        ],
        "combinations": [
            {"id": c.id, "name": c.name, "terms": [_tree(t) for t in c.terms]}
            for c in part.combinations
        ]
        or None,
        "limits": [_tree(limit) for limit in part.limits],
        "mesh": _tree(part.mesh),
        "readings": [_tree(r) for r in (*part.readings, *part.cuts)],
    }


def without_blanks(tree: Any) -> Any:
    """The tree without what is None and without rounds and chamfers of zero, as it is written."""
    if isinstance(tree, dict):
        return {
            key: without_blanks(value)
            for key, value in tree.items()
            if value is not None and not (key in ("round", "chamfer") and value == 0)
        }
    return [without_blanks(item) for item in tree] if isinstance(tree, list) else tree


def _tree(record: Any) -> Tree:
    """A record of plain fields."""
    tree: Tree = {"kind": KIND_OF[type(record)]} if isinstance(record, Pattern) else {}
    for name in FORMS[type(record)]:
        value = getattr(record, name)
        tree[name] = (list(value) or None) if isinstance(value, tuple) else value
        if name == "id" and type(record) in KIND_OF:
            tree["kind"] = KIND_OF[type(record)]
    return tree


def _dimension_tree(dimension: Dimension) -> Tree:
    """A length need not say that it is one."""
    tree = _tree(dimension)
    return tree if dimension.measures != "length" else {**tree, "measures": None}


def _loop_tree(loop: Loop) -> Tree:
    return {
        "corners": [_tree(corner) for corner in loop.corners],
        "edges": [_tree(edge) for edge in loop.edges],
    }


def _hole_tree(hole: Any) -> Tree:
    if isinstance(hole, LoopHole):
        return {"id": hole.id, "kind": "loop", **_loop_tree(hole.loop)}
    pattern = None if hole.pattern is None else _tree(hole.pattern)
    return {**_tree(hole), "pattern": pattern}


def _zone_tree(zone: Zone) -> Tree:
    return {
        **_hole_tree(zone.form),
        "thickness": zone.thickness,
        "material": zone.material,
        "name": zone.name or None,
        "sides": zone.sides,
        "axis": zone.axis,
    }


# --- tree to part ---------------------------------------------------------------------------


def part_of_tree(tree: Tree, formulas: tuple[Formula, ...] = ()) -> Part:
    """The part of a tree that the schema has passed and that holds numbers only."""
    blank = Part()
    shape = tree.get("shape", {})
    return Part(
        title=tree.get("title", blank.title),
        notes=tree.get("notes", blank.notes),
        record=_record(JobDetails, tree.get("record", {})),
        display_units=tree.get("display_units", blank.display_units),
        dimensions=tuple(_record(Dimension, d) for d in tree.get("dimensions", ())),
        formulas=formulas,
        outline=_loop(shape["outline"]) if "outline" in shape else None,
        holes=tuple(_hole(h) for h in shape.get("holes", ())),
        zones=tuple(_zone(z) for z in shape.get("zones", ())),
        wall=_record(Wall, tree["wall"]) if "wall" in tree else blank.wall,
        materials=tuple(_record(Material, m) for m in tree.get("materials", ())),
        supports=tuple(_record(SUPPORTS[s["kind"]], s) for s in tree.get("supports", ())),
        cases=tuple(
            Case(c["id"], c["name"], tuple(_record(LOADS[x["kind"]], x) for x in c["loads"]))
            for c in tree.get("cases", ())
        ),
        combinations=tuple(
            Combination(c["id"], c["name"], tuple(_record(Term, t) for t in c["terms"]))
            for c in tree.get("combinations", ())
        ),
        limits=tuple(_record(LIMITS[x["kind"]], x) for x in tree.get("limits", ())),
        mesh=_record(MeshWishes, tree.get("mesh", {})),
        readings=_of_kind(Probe, tree),
        cuts=_of_kind(Cut, tree),
    )


def _of_kind(cls: type[Record], tree: Tree) -> tuple[Record, ...]:
    """The readings of one kind, in the order of the file."""
    kind = KIND_OF[cls]
    return tuple(_record(cls, r) for r in tree.get("readings", ()) if r["kind"] == kind)


def material_of_tree(tree: Tree) -> Material:
    """One material of a tree that the schema has passed."""
    return _record(Material, tree)


def _loop(tree: Tree) -> Loop:
    return Loop(
        tuple(_record(Corner, c) for c in tree["corners"]),
        tuple(_record(Edge, e) for e in tree["edges"]),
    )


def _hole(tree: Tree) -> Any:
    if tree["kind"] == "loop":
        return LoopHole(tree["id"], _loop(tree))
    hole: Any = _record(HOLES[tree["kind"]], tree)
    if "pattern" in tree:
        pattern = tree["pattern"]
        hole = dataclasses.replace(hole, pattern=_record(PATTERNS[pattern["kind"]], pattern))
    return hole


def _zone(tree: Tree) -> Zone:
    thickness, axis = tree.get("thickness"), tree.get("axis")
    return Zone(
        _hole(tree),
        None if thickness is None else float(thickness),
        tree.get("material"),
        tree.get("name", ""),
        tree.get("sides"),
        None if axis is None else float(axis),
    )


def _record(cls: type[Record], tree: Tree) -> Record:
    """A record of plain fields; what the tree leaves out keeps the record's default."""
    values: dict[str, Any] = {}
    for name, form in FORMS[cls].items():
        if name not in tree:
            continue
        value = tree[name]
        if form == "number":
            value = float(value)
        elif form == "point":
            value = (float(value[0]), float(value[1]))
        elif form == "whole":
            value = int(value)
        elif isinstance(value, list):
            value = tuple(value)
        values[name] = value
    return cls(**values)
