"""The rim of a round hole or slot as arcs and segments, counter-clockwise."""

from __future__ import annotations

import math

from screenapp.model.boundary_curve import BoundaryCurve
from screenapp.model.curves import Arc, Curve, Segment
from screenapp.model.errors import Fault
from screenapp.model.part import CircleHole, SlotHole


def hole_curves(
    hole: CircleHole | SlotHole, faults: list[Fault], where: str = ""
) -> list[BoundaryCurve]:
    """A circle (four quarter arcs) or slot, counter-clockwise; fields of faults begin with
    `where` (that of the hole where it is not given)."""
    where = where or f"holes.{hole.id}"
    sizes = (
        {"diameter": hole.diameter}
        if isinstance(hole, CircleHole)
        else {"length": hole.length, "width": hole.width}
    )
    for name, value in sizes.items():
        if not (math.isfinite(value) and value > 0.0):
            faults.append(
                Fault(
                    f"the {name} of {hole.id} is {value:g} mm",
                    f"give a {name} above zero",
                    f"{where}.{name}",
                    (hole.id,),
                    hole.centre,
                )
            )
            return []
    if isinstance(hole, CircleHole) or hole.length == hole.width:
        radius = (hole.diameter if isinstance(hole, CircleHole) else hole.width) / 2.0
        quarter = math.pi / 2.0
        return [
            BoundaryCurve(hole.id, "hole", Arc(hole.centre, radius, i * quarter, quarter), 0)
            for i in range(4)
        ]
    if hole.length < hole.width:
        faults.append(
            Fault(
                f"slot {hole.id} is {hole.length:g} mm long but {hole.width:g} mm wide",
                "make the overall length at least the width, or turn the slot by 90°",
                f"{where}.length",
                (hole.id,),
                hole.centre,
            )
        )
        return []
    angle, radius = math.radians(hole.angle), hole.width / 2.0
    half = (hole.length - hole.width) / 2.0
    cx, cy, c, s = *hole.centre, math.cos(angle), math.sin(angle)
    far, near = (cx + half * c, cy + half * s), (cx - half * c, cy - half * s)
    quarter = math.pi / 2.0
    ends = [
        Arc(far, radius, angle - quarter, quarter),
        Arc(far, radius, angle, quarter),
        Arc(near, radius, angle + quarter, quarter),
        Arc(near, radius, angle + 2.0 * quarter, quarter),
    ]
    chain: list[Curve] = [
        *ends[:2],
        Segment(ends[1].end, ends[2].start),
        *ends[2:],
        Segment(ends[3].end, ends[0].start),
    ]
    return [BoundaryCurve(hole.id, "hole", curve, 0) for curve in chain]
