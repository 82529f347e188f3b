"""Cases without loads, loads that are no numbers, and loads on places they cannot act on."""

from __future__ import annotations

import math
from collections.abc import Iterator

from screenapp.model.body_load_faults import body_load_faults, temperature_faults
from screenapp.model.edge_parts import span_faults
from screenapp.model.errors import Fault
from screenapp.model.features import Places
from screenapp.model.misfits import misfit_faults_of_case
from screenapp.model.part import (
    BearingLoad,
    BodyLoad,
    Case,
    CircleHole,
    ForceLoad,
    GravityLoad,
    LineLoad,
    Load,
    MisfitLoad,
    MomentLoad,
    Part,
    PlacedLoad,
    PointLoad,
    PrescribedSupport,
    PressureLoad,
    ShearLoad,
    SpinLoad,
    TemperatureLoad,
)
from screenapp.model.point_load_faults import point_load_faults
from screenapp.model.shape import Shape
from screenapp.model.support_faults import place_fault

LARGEST = 1e15
"""No component of a load may be larger [N, N/mm, MPa or m/s²]."""

FAST = 1000.0
"""An acceleration above this [m/s²] is pointed out: it was perhaps meant in mm/s²."""

WORDS: dict[type, str] = {
    PressureLoad: "pressure",
    ShearLoad: "shear",
    LineLoad: "line load",
    ForceLoad: "force",
    BearingLoad: "bearing force",
    PointLoad: "point load",
    MomentLoad: "moment",
    GravityLoad: "gravity",
    SpinLoad: "spin",
    TemperatureLoad: "temperature change",
    MisfitLoad: "misfit",
}
"""What each load is called."""


def load_faults(part: Part, places: Places, shape: Shape | None) -> Iterator[Fault]:
    """Faults of all cases, one after another."""
    if not part.cases:
        yield Fault("there is no load case", "add a case and put a load into it", "cases")
    pushed = any(
        isinstance(s, PrescribedSupport) and (s.x not in (None, 0.0) or s.y not in (None, 0.0))
        for s in part.supports
    )
    names: set[str] = set()
    for case in part.cases:
        where = f"cases.{case.id}"
        if case.name in names:
            yield Fault(
                f"two cases are called “{case.name}”",
                "rename one of them, so that findings can be told apart",
                f"{where}.name",
                (case.id,),
                blocks=False,
            )
        names.add(case.name)
        if not case.loads:
            if not pushed:
                yield Fault(
                    f"case “{case.name}” has no load",
                    "put a load on an edge, a hole or a corner, or remove the case",
                    f"{where}.loads",
                    (case.id,),
                )
            continue
        yield from one_load_faults(part, case, places, shape)
        yield from temperature_faults(part, case, shape)
        if shape is not None:
            yield from misfit_faults_of_case(part, case, shape)
        if not pushed and all(not any(components(load).values()) for load in case.loads):
            yield Fault(
                f"all loads of case “{case.name}” are zero",
                "give a load that is not zero, or remove the case",
                f"{where}.loads",
                (case.id, *(load.id for load in case.loads)),
            )


def components(load: Load) -> dict[str, float]:
    """The numbers by which a load is large or small, by the names of their fields.

    All but the speed of a spin are proportional to what the load does.
    """
    if isinstance(load, PressureLoad):
        return _given(pressure=load.pressure, end_pressure=load.end_pressure)
    if isinstance(load, ShearLoad):
        return {"per_length": load.per_length}
    if isinstance(load, MomentLoad):
        return {"moment": load.moment}
    if isinstance(load, SpinLoad):
        return {"speed": load.speed}
    if isinstance(load, TemperatureLoad):
        return {"change": load.change, "x": load.x, "y": load.y}
    if isinstance(load, LineLoad):
        return _given(x=load.x, y=load.y, end_x=load.end_x, end_y=load.end_y)
    return {"x": load.x, "y": load.y}


def _given(**values: float | None) -> dict[str, float]:
    """Those that are given."""
    return {name: value for name, value in values.items() if value is not None}


def one_load_faults(part: Part, case: Case, places: Places, shape: Shape | None) -> Iterator[Fault]:
    """What is wrong with the loads of one case, one by one."""
    for load in case.loads:
        where = f"cases.{case.id}.loads.{load.id}"
        name = f"{WORDS.get(type(load), 'load')} {load.id}"
        for axis, value in components(load).items():
            if not math.isfinite(value) or abs(value) > LARGEST:
                yield Fault(
                    f"the {axis.replace('_', ' ')} of {name} is {value:g}",
                    "give a finite number",
                    f"{where}.{axis}",
                    (load.id,),
                )
        if isinstance(load, GravityLoad):
            if FAST < math.hypot(load.x, load.y) <= LARGEST:
                yield Fault(
                    f"{name} is {math.hypot(load.x, load.y):.4g} m/s², "
                    f"{math.hypot(load.x, load.y) / 9.80665:.3g} times free fall",
                    "check its unit: m/s² is wanted",
                    where,
                    (load.id,),
                    blocks=False,
                )
        elif isinstance(load, BodyLoad):
            yield from body_load_faults(part, load, name, where)
        else:
            yield from _place_faults(part, load, name, where, places, shape)


def _place_faults(
    part: Part,
    load: PlacedLoad,
    name: str,
    where: str,
    places: Places,
    shape: Shape | None,
) -> Iterator[Fault]:
    found = places.get(load.on)
    ids = (load.id, load.on)
    if found is not None and not isinstance(load, PointLoad) and found.kind == "corner":
        round_ = isinstance(load, BearingLoad | MomentLoad)
        wanted = "a round hole" if round_ else "an edge or hole"
        yield Fault(
            f"{name} cannot act on corner {load.on}",
            f"put it on {wanted}, or use a point load",
            f"{where}.on",
            ids,
        )
        return
    fault = place_fault(part, name, load.on, f"{where}.on", places, shape)
    if fault is not None:
        yield Fault(fault.cause, fault.mend, fault.field, ids if found else (load.id,), fault.at)
        return
    assert found is not None
    if not isinstance(load, PointLoad):
        yield from span_faults(load, name, where, places, shape)
    varies = any(axis.startswith("end_") for axis in components(load))
    if varies and found.kind != "edge":
        yield Fault(
            f"{name} varies along {found.kind} {load.on}, which has no start and end",
            "leave out its values at the end, or put it on an edge",
            f"{where}.{next(axis for axis in components(load) if axis.startswith('end_'))}",
            ids,
        )
    if isinstance(load, BearingLoad | MomentLoad) and not isinstance(found.record, CircleHole):
        yield Fault(
            f"{name} cannot act on {found.kind} {load.on}: a pin needs a round hole",
            "put it on a round hole, or use a force",
            f"{where}.on",
            ids,
        )
    elif isinstance(load, PointLoad):
        yield from point_load_faults(part, load, found, name, where, shape)
