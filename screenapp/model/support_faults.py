"""Supports on places that are not there or cannot be held so, and a part that is not held."""

from __future__ import annotations

import math
from collections.abc import Iterator

import numpy as np

from screenapp.model.edge_parts import span_faults
from screenapp.model.errors import Fault
from screenapp.model.features import Places, edges_at, loops_of
from screenapp.model.members import whole_id
from screenapp.model.part import (
    BoltSupport,
    CircleHole,
    Corner,
    Edge,
    ElasticSupport,
    Part,
    PinSupport,
    Point,
    PrescribedSupport,
    RollerSupport,
    Support,
    SymmetrySupport,
    WeldSupport,
)
from screenapp.model.rigid_motions import FreeMotion, free_motions, held_by
from screenapp.model.shape import Shape
from screenapp.model.size_faults import finite_point
from screenapp.model.support_records import gives_way, stands_on

STIFFEST = 1e9
"""No bed of springs may be stiffer [N/mm²], no bolt [N/mm]: thousands of times what a wall of metal
is."""

THICKEST = 100.0
"""Throat of a weld that is surely meant otherwise [mm]."""

_WAYS = {"normal": "across", "along": "along"}


def support_faults(part: Part, places: Places, shape: Shape | None) -> Iterator[Fault]:
    """Supports that are wrong one by one, then those that contradict one another."""
    sound = True
    for support in part.supports:
        for fault in one_support_faults(part, support, places, shape):
            sound = sound and not fault.blocks
            yield fault
    if sound and shape is not None:
        yield from _contradictions(part, shape)
    if not part.supports:
        yield Fault(
            "nothing holds the part: it can slide along x and y and turn",
            "hold an edge, a hole or a corner",
            "supports",
        )
    elif sound and shape is not None:
        yield from _free_faults(part, shape)


def place_fault(
    part: Part, id_: str, on: str, field: str, places: Places, shape: Shape | None
) -> Fault | None:
    """Why a support or load cannot be on the place `on`, if it cannot be on any."""
    found = places.get(on)
    ids = (id_,)
    if found is None:
        return Fault(
            f"{id_} is on “{on}”, which is no corner, edge or hole of the part"
            if on
            else f"{id_} is on no place of the part",
            "choose a corner, edge or hole, or remove it",
            field,
            ids,
        )
    record = found.record
    if isinstance(record, Corner) and not record.sharp:
        around = next(
            (
                e
                for _, hole, loop in loops_of(part)
                if hole == found.owner
                if (e := edges_at(loop, on)) is not None
            ),
            None,
        )
        cut = "round" if record.round != 0.0 else "chamfer"
        edges = f"use edge {around[0].id} or {around[1].id}" if around else "use an edge"
        return Fault(
            f"{id_} is on corner {on}, which is {cut}ed, so there is no point there",
            f"{edges}, or set the {cut} of {on} to 0",
            field,
            (id_, on),
            finite_point(record.at),
        )
    if found.kind == "edge" and shape is not None and not shape.pieces_of(on):
        return Fault(
            f"{id_} is on edge {on}, which is used up by the corners at its ends",
            "make their rounds or chamfers smaller or choose another place",
            field,
            (id_, on),
        )
    return None


def one_support_faults(
    part: Part, support: Support, places: Places, shape: Shape | None
) -> Iterator[Fault]:
    """What is wrong with one support by itself."""
    where, ids = f"supports.{support.id}", (support.id,)
    name = f"support {support.id}"
    fault = place_fault(part, name, support.on, f"{where}.on", places, shape)
    if fault is not None:
        yield _with_ids(fault, support.id, support.on)
        return
    if isinstance(support, BoltSupport):
        yield from _bolt_faults(part, support, places, shape)
        return
    yield from span_faults(support, name, where, places, shape)
    on_corner = places[support.on].kind == "corner"
    if isinstance(support, SymmetrySupport):
        record = places[support.on].record
        if not isinstance(record, Edge) or record.through is not None:
            yield Fault(
                f"{name} is a line of symmetry on {places[support.on].kind} {support.on}",
                "put it on a straight edge, or hold the place in another way",
                f"{where}.on",
                (*ids, support.on),
            )
    elif isinstance(support, PinSupport):
        if not isinstance(places[support.on].record, CircleHole):
            yield Fault(
                f"{name} is a pin on {places[support.on].kind} {support.on}",
                "put it on a round hole, or hold the place in another way",
                f"{where}.on",
                (*ids, support.on),
            )
    elif isinstance(support, RollerSupport):
        if support.angle is None and on_corner:
            yield Fault(
                f"{name} is a roller on corner {support.on}, which has no normal of its own",
                "give the angle of the direction in which it holds",
                f"{where}.angle",
                (*ids, support.on),
            )
        elif support.angle is not None and not math.isfinite(support.angle):
            yield Fault(
                f"the angle of {name} is not a finite number",
                "give an angle in degrees",
                f"{where}.angle",
                ids,
            )
    elif isinstance(support, ElasticSupport):
        yield from _elastic_faults(support, name, where, on_corner)
    elif isinstance(support, WeldSupport):
        if on_corner:
            yield Fault(
                f"{name} is a weld on corner {support.on}, which has no length",
                "put it on an edge or a hole",
                f"{where}.on",
                (*ids, support.on),
            )
        if not (math.isfinite(support.throat) and 0.0 < support.throat <= THICKEST):
            yield Fault(
                f"the throat of {name} is {support.throat:g} mm",
                f"give a throat above zero and up to {THICKEST:g} mm",
                f"{where}.throat",
                ids,
            )
    elif isinstance(support, PrescribedSupport):
        given = {k: v for k, v in (("x", support.x), ("y", support.y)) if v is not None}
        if not given:
            yield Fault(
                f"{name} holds neither x nor y",
                "give a displacement for x or y, or remove it",
                where,
                ids,
            )
        for axis, value in given.items():
            if not math.isfinite(value):
                yield Fault(
                    f"the {axis} displacement of {name} is not a finite number",
                    "give a displacement in mm",
                    f"{where}.{axis}",
                    ids,
                )
            elif shape is not None and abs(value) > shape.size:
                yield Fault(
                    f"{name} moves its place by {value:g} mm, farther than the part is large",
                    "give a displacement far smaller than the part",
                    f"{where}.{axis}",
                    ids,
                )


def _bolt_faults(
    part: Part, support: BoltSupport, places: Places, shape: Shape | None
) -> Iterator[Fault]:
    where, name = f"supports.{support.id}", f"support {support.id}"
    seen: set[str] = set()
    for number, on in enumerate(stands_on(support)):
        field = f"{where}.{'also' if number else 'on'}"
        fault = place_fault(part, name, on, field, places, shape)
        if fault is not None:
            yield _with_ids(fault, support.id, on)
        elif not isinstance(places[on].record, CircleHole):
            yield Fault(
                f"{name} has a bolt in {places[on].kind} {on}",
                "choose round holes only, or hold the place in another way",
                field,
                (support.id, on),
            )
        elif on in seen or whole_id(on) in seen:
            yield Fault(
                f"{name} has hole {on} twice",
                "leave it out once",
                field,
                (support.id, on),
            )
        seen.add(on)
    stiffness = support.stiffness
    if stiffness is not None and not (math.isfinite(stiffness) and 0.0 < stiffness <= STIFFEST):
        yield Fault(
            f"the stiffness of the bolts of {name} is {stiffness:g} N/mm",
            "give a stiffness above zero, or leave it out for rigid bolts",
            f"{where}.stiffness",
            (support.id,),
        )


def _elastic_faults(
    support: ElasticSupport, name: str, where: str, on_corner: bool
) -> Iterator[Fault]:
    ids = (support.id, support.on)
    if on_corner:
        yield Fault(
            f"{name} is a bed of springs on corner {support.on}, which has no length",
            "put it on an edge or a hole",
            f"{where}.on",
            ids,
        )
    for field, value in (("normal", support.normal), ("along", support.along)):
        if not (math.isfinite(value) and 0.0 <= value <= STIFFEST):
            yield Fault(
                f"the stiffness {_WAYS[field]} the boundary of {name} is {value:g} N/mm²",
                "give zero or more, and for what hardly gives way another kind of support",
                f"{where}.{field}",
                ids,
            )
            return
    if support.normal == 0.0 and support.along == 0.0:
        yield Fault(
            f"{name} is a bed of springs without stiffness",
            "give a stiffness across or along the boundary, or remove it",
            where,
            ids,
        )


def _with_ids(fault: Fault, id_: str, on: str) -> Fault:
    """The same fault with the plain id (not its words) to be marked."""
    ids = (id_, on) if len(fault.ids) > 1 else (id_,)
    return Fault(fault.cause, fault.mend, fault.field, ids, fault.at)


def _contradictions(part: Part, shape: Shape) -> Iterator[Fault]:
    """Supports that ask one point to be in two places."""
    if not any(isinstance(s, PrescribedSupport) for s in part.supports):
        return  # all other supports ask for zero
    held = [held_by(part, s, shape) for s in part.supports]
    moving = [k for k, s in enumerate(part.supports) if isinstance(s, PrescribedSupport)]
    for a in moving:
        for b in range(len(held)):
            if gives_way(part.supports[b]):
                continue  # springs give way
            if b == a or (b in moving and b < a):
                continue
            at = clash(held[a].points, held[b].points, (held[a], held[b]))
            if at is not None:
                one, two = part.supports[a].id, part.supports[b].id
                yield Fault(
                    f"supports {one} and {two} ask for different displacements at "
                    f"({at[0]:.4g}, {at[1]:.4g})",
                    "remove one of them, or give both the same displacement there",
                    f"supports.{one}",
                    (one, two),
                    at,
                )


def clash(p: np.ndarray, q: np.ndarray, held: tuple) -> Point | None:  # type: ignore[type-arg]
    """A common point at which no displacement satisfies both supports."""
    if len(p) == 0 or len(q) == 0:
        return None
    near = np.hypot(*(p[:, None] - q[None]).transpose(2, 0, 1)) <= 1e-6
    for k in np.flatnonzero(near.any(axis=1)):
        rows, values = [], []
        for h in held:
            here = np.hypot(*(h.points - p[k]).T) <= 1e-6
            rows.append(h.directions[here])
            values.append(h.values[here])
        a, b = np.concatenate(rows), np.concatenate(values)
        u, *_ = np.linalg.lstsq(a, b, rcond=None)
        if np.abs(a @ u - b).max() > 1e-9 * max(1e-9, float(np.abs(b).max())):
            return float(p[k, 0]), float(p[k, 1])
    return None


def _free_faults(part: Part, shape: Shape) -> Iterator[Fault]:
    for motion in free_motions(part, shape):
        at = motion.centre
        ids = tuple(s.id for s in part.supports)
        if motion.weak:
            yield Fault(
                f"the supports hardly stop the part from {motion}",
                f"{_mend(motion)}, or expect large displacements",
                "supports",
                ids,
                at,
                blocks=False,
            )
        else:
            yield Fault(f"nothing stops the part from {motion}", _mend(motion), "supports", ids, at)


def _mend(motion: FreeMotion) -> str:
    if motion.kind == "turn":
        return "hold another place away from there, or the same one in both directions"
    dx, dy = motion.direction
    way = "in x" if abs(dy) < 1e-6 else "in y" if abs(dx) < 1e-6 else "in that direction"
    return f"hold an edge, a hole or a corner {way}"
