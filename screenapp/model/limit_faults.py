"""Limits that cannot be judged, and what they ask of a material that has it not."""

from __future__ import annotations

import math
from collections.abc import Iterator
from typing import get_args

from screenapp.model.errors import Fault
from screenapp.model.extents import FARTHEST
from screenapp.model.material_faults import positive
from screenapp.model.part import DisplacementLimit, Part, StressLimit, StressMeasure


def limit_faults(part: Part) -> Iterator[Fault]:
    """Limits that cannot be judged."""
    for limit in part.limits:
        where = f"limits.{limit.id}"
        if isinstance(limit, StressLimit):
            yield from _stress_limit_faults(limit, where)
        elif isinstance(limit, DisplacementLimit):
            yield from _displacement_limit_faults(limit, where)


def _displacement_limit_faults(limit: DisplacementLimit, where: str) -> Iterator[Fault]:
    if not positive(limit.most):
        yield Fault(
            f"the displacement limit {limit.id} is {limit.most:g} mm",
            "give a displacement above zero",
            f"{where}.most",
            (limit.id,),
        )
    if limit.at is not None and not all(abs(x) <= FARTHEST for x in limit.at):  # NaN is not
        yield Fault(
            f"the place of limit {limit.id} is ({limit.at[0]:.4g}, {limit.at[1]:.4g}) mm",
            "give coordinates of a point of the part in mm",
            f"{where}.at",
            (limit.id,),
        )
    if limit.angle is not None and not math.isfinite(limit.angle):
        yield Fault(
            f"the direction of limit {limit.id} is {limit.angle:g}",
            "give a direction in degrees from +x, or leave it out",
            f"{where}.angle",
            (limit.id,),
        )


def _stress_limit_faults(limit: StressLimit, where: str) -> Iterator[Fault]:
    if not positive(limit.factor):
        yield Fault(
            f"the factor of limit {limit.id} is {limit.factor:g}",
            "give a factor above zero, e.g. 1.5",
            f"{where}.factor",
            (limit.id,),
        )
    if limit.measure not in get_args(StressMeasure):
        yield Fault(
            f"limit {limit.id} is on “{limit.measure}”",
            f"choose one of: {', '.join(get_args(StressMeasure))}",
            f"{where}.measure",
            (limit.id,),
        )
    if limit.against not in ("proof_stress", "strength"):
        yield Fault(
            f"limit {limit.id} is against “{limit.against}”",
            "choose proof_stress or strength",
            f"{where}.against",
            (limit.id,),
        )


def limit_material_faults(part: Part) -> Iterator[Fault]:
    """Limits that need a stress which the material of the wall or of a zone has not."""
    used = (part.material_of(zone) for zone in range(-1, len(part.zones)))
    materials = {m.name: m for m in used if m is not None}
    for limit in part.limits:
        if not isinstance(limit, StressLimit):
            continue
        for material in materials.values():
            if getattr(material, limit.against, 0.0) is not None:
                continue
            words = limit.against.replace("_", " ")
            yield Fault(
                f"limit {limit.id} asks for the {words}, which “{material.name}” has not",
                f"give the material a {words}, or change the limit",
                f"limits.{limit.id}.against",
                (limit.id,),
            )
