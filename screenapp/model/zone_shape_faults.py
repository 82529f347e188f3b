"""Zones that cannot be put into the part: crossing themselves, outside, or leaving slivers."""

from __future__ import annotations

import math
from dataclasses import replace

import numpy as np

from screenapp.model.crossings import boundary_faults
from screenapp.model.curve_table import CurveTable
from screenapp.model.errors import Fault, InvalidPartError
from screenapp.model.part import Part
from screenapp.model.regions import divide, zone_curves
from screenapp.model.shape import Shape

NARROWEST = 1e-4
"""No line between zones may be shorter, no stretch thinner, than this share of the part's size."""

SHARPEST = 3.0
"""No stretch may end in a tip sharper than this [deg]."""


def divided_shape(part: Part, shape: Shape) -> tuple[Shape | None, list[Fault]]:
    """A sound boundary divided by the part's zones, None if they cannot be; and all their faults.

    A shape comes back only without a fault that blocks.
    """
    faults = zone_shape_faults(part)
    if faults:
        return None, faults
    try:
        divided = divide(part, shape)
    except InvalidPartError as error:
        return None, list(error.faults)
    faults = _thin_faults(part, divided)
    faults += _idle_faults(part, divided)
    return (None if any(f.blocks for f in faults) else divided), faults


def zone_shape_faults(part: Part) -> list[Fault]:
    """Zones that are no closed form by themselves."""
    faults: list[Fault] = []
    drawn = zone_curves(part, faults)
    if faults:
        return faults
    for zone, curves in zip(part.zones, drawn, strict=True):
        own = Shape(tuple(curves), ((0, len(curves)),), (None,), ())
        for fault in boundary_faults(own, CurveTable.of(own.curves)):
            faults.append(
                replace(
                    fault,
                    mend=fault.mend.replace("outline", "zone"),
                    field=fault.field.replace("outline", f"zones.{zone.id}", 1),
                    ids=(zone.id, *fault.ids),
                )
            )
    return faults


def _idle_faults(part: Part, divided: Shape) -> list[Fault]:
    """Zones that are nowhere: outside the part (blocks), or wholly under later ones."""
    seen = {region.zone for region in divided.regions}
    faults: list[Fault] = []
    for number, zone in enumerate(part.zones):
        if number in seen:
            continue
        alone = divide(replace(part, zones=(zone,)), replace(divided, interfaces=(), regions=()))
        outside = all(region.zone == -1 for region in alone.regions)
        faults.append(
            Fault(
                f"zone {zone.id} lies outside the part"
                if outside
                else f"zone {zone.id} lies wholly under later zones, so it counts for nothing",
                "move it onto the part or remove it" if outside else "remove it, or draw it later",
                f"zones.{zone.id}",
                (zone.id,),
                blocks=outside,
            )
        )
    return faults


def _thin_faults(part: Part, shape: Shape) -> list[Fault]:
    """Regions of a divided shape that no mesh can fill: slivers, cusps and very short lines."""
    faults: list[Fault] = []
    for region in shape.regions:
        faults += _region_faults(part, region.shape, region.zone, shape.size)
    return faults


def _region_faults(part: Part, own: Shape, zone: int, size: float) -> list[Fault]:
    faults: list[Fault] = []
    name = f"zone {part.zones[zone].id}" if zone >= 0 else "the wall beside the zones"
    mend = "let the zone reach beyond that line, or keep it clear of it"
    ids = (part.zones[zone].id,) if zone >= 0 else tuple(z.id for z in part.zones)
    field = f"zones.{ids[0]}"
    table = CurveTable.of(own.curves)
    perimeter = float(table.lengths.sum())
    if 2.0 * own.area < NARROWEST * size * perimeter:
        x, y = (float(v) for v in own.curves[0].curve.point(0.5))
        width = 2.0 * own.area / perimeter
        words = f"{name} is a sliver only {width:.2g} mm wide near ({x:.4g}, {y:.4g})"
        return [Fault(words, mend, field, ids, (x, y))]
    for k in np.flatnonzero(table.lengths < NARROWEST * size)[:3]:
        x, y = (float(v) for v in own.curves[k].curve.point(0.5))
        words = f"a line of {name} is only {table.lengths[k]:.2g} mm long at ({x:.4g}, {y:.4g})"
        faults.append(Fault(words, mend, field, ids, (x, y)))
    for a, b in own.loops:
        for k in range(a, b):
            before = own.curves[k - 1 if k > a else b - 1].curve.tangent(1.0)
            after = own.curves[k].curve.tangent(0.0)
            turn = math.atan2(
                float(before[0] * after[1] - before[1] * after[0]), float(before @ after)
            )
            if math.degrees(math.pi - turn) < SHARPEST:
                x, y = own.curves[k].curve.start
                words = (
                    f"{name} ends in a tip of {math.degrees(math.pi - turn):.2g}° "
                    f"at ({x:.4g}, {y:.4g})"
                )
                faults.append(
                    Fault(words, "let the lines cross at a larger angle", field, ids, (x, y))
                )
    return faults
