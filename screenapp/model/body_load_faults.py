"""What is wrong with spins, changes of temperature and misfits."""

from __future__ import annotations

import math
from collections.abc import Iterator

import numpy as np

from screenapp.model.errors import Fault
from screenapp.model.misfits import misfit_faults
from screenapp.model.part import (
    BodyLoad,
    Case,
    LoopHole,
    MisfitLoad,
    Part,
    SpinLoad,
    TemperatureLoad,
)
from screenapp.model.shape import Shape

COLDEST = -273.15
"""Absolute zero [°C]."""

FASTEST = 1e6
"""A speed above this [1/min] is pointed out: it was perhaps meant in degrees per second."""


def body_load_faults(part: Part, load: BodyLoad, name: str, where: str) -> Iterator[Fault]:
    """What is wrong with one of them by itself, but for the numbers of `components`."""
    fields: dict[str, float] = {}
    if isinstance(load, SpinLoad):
        fields = {"x": load.x, "y": load.y, "factor": load.factor}
        if FASTEST < abs(load.speed) < math.inf:
            yield Fault(
                f"{name} turns {load.speed:g} times a minute",
                "check its unit: 1/min is wanted",
                f"{where}.speed",
                (load.id,),
                blocks=False,
            )
    elif isinstance(load, MisfitLoad):
        yield from misfit_faults(part, load, name, where)
    elif isinstance(load, TemperatureLoad):
        fields = {"start": load.start}
        if load.zone is not None and all(z.id != load.zone for z in part.zones):
            known = ", ".join(z.id for z in part.zones) or "none yet"
            yield Fault(
                f"{name} is of zone “{load.zone}”, which is not there",
                f"choose one of: {known}; or let it act on the whole part",
                f"{where}.zone",
                (load.id,),
            )
    for field, value in fields.items():
        if not math.isfinite(value) or abs(value) > 1e15:
            yield Fault(
                f"the {field} of {name} is {value:g}",
                "give a finite number",
                f"{where}.{field}",
                (load.id,),
            )


def temperature_faults(part: Part, case: Case, shape: Shape | None) -> Iterator[Fault]:
    """Temperatures that the materials, or the state of the wall, cannot be worked out for."""
    heating = [load for load in case.loads if isinstance(load, TemperatureLoad)]
    if not heating:
        return
    ids = tuple(load.id for load in heating)
    where = f"cases.{case.id}.loads.{heating[0].id}"
    if part.wall.state == "plane strain":
        yield Fault(
            f"case “{case.name}” changes the temperature of a wall in plane strain, whose stress "
            "across the wall is not worked out",
            "set the wall to plane stress",
            "wall.state",
            ids,
        )
    said: set[str] = set()
    for zone in range(-1, len(part.zones)):
        acting = [
            load
            for load in heating
            if load.zone is None or (zone >= 0 and load.zone == part.zones[zone].id)
        ]
        material = part.material_of(zone)
        if not acting or material is None:
            continue
        lacking = "expansion" if material.expansion is None else ""
        if material.orthotropic and not lacking and material.expansion_2 is None:
            lacking = "expansion_2"
        if lacking and material.name not in said:
            said.add(material.name)
            yield Fault(
                f"“{material.name}” has no coefficient of expansion"
                f"{' along 2' if lacking == 'expansion_2' else ''}, so case “{case.name}” cannot "
                "be worked out",
                "give its expansion, or choose another material",
                f"materials.{material.name}.{lacking}",
                ids,
            )
        coldest, hottest = _range(part, acting, zone, shape)
        most = material.temperature_max
        if most is not None and hottest > most:
            yield Fault(
                f"case “{case.name}” warms “{material.name}” to {hottest:.4g} °C, its figures "
                f"stand up to {most:g} °C",
                "choose another material, or give figures for that temperature",
                where,
                ids,
                blocks=False,
            )
        if coldest < COLDEST:
            yield Fault(
                f"case “{case.name}” cools the part to {coldest:.4g} °C, below absolute zero",
                "check the change, its gradient and the temperature that it starts from",
                where,
                ids,
            )


def _range(
    part: Part, acting: list[TemperatureLoad], zone: int, shape: Shape | None
) -> tuple[float, float]:
    """Lowest and highest temperature [°C] in a zone (-1: in the wall), as far as it is known.

    A linear field has them on the boundary; of a round zone the box is taken.
    """
    at = np.zeros((1, 2))
    if zone >= 0:
        form = part.zones[zone].form
        if isinstance(form, LoopHole):
            at = np.array([c.at for c in form.loop.corners])
        else:
            reach = 0.5 * float(getattr(form, "diameter", getattr(form, "length", 0.0)))
            at = np.array(form.centre) + reach * np.array([(1, 1), (-1, 1), (-1, -1), (1, -1)])
    elif shape is not None:
        at = shape.polyline(0, 1e-3 * shape.size)
    change = sum(load.change + at @ np.array([load.x, load.y]) for load in acting)
    found = acting[0].start + np.asarray(change)
    return float(found.min()), float(found.max())
