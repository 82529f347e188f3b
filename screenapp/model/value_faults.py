"""Wall, mesh wishes and probes whose numbers cannot be worked with."""

from __future__ import annotations

import math
from collections.abc import Iterator
from typing import get_args

from screenapp.model.errors import Fault
from screenapp.model.extents import FARTHEST, SMALLEST
from screenapp.model.part import (
    DisplayUnits,
    ElementName,
    MeshWishes,
    Part,
    WallState,
)
from screenapp.model.shape import Shape

TIGHTEST, LOOSEST = 0.0005, 0.2
"""Bounds of the mesh tolerance [-]."""

MOST_ELEMENTS = 1e6
"""An element size must not ask for more elements than this."""


def one_of(value: object, allowed: object, name: str, field: str) -> Iterator[Fault]:
    """The fault of a word that is none of those allowed."""
    words = get_args(allowed)
    if value not in words:
        yield Fault(f"{name} is “{value}”", f"choose one of: {', '.join(words)}", field)


def wall_faults(part: Part) -> Iterator[Fault]:
    """Thickness, state and material of the wall."""
    wall = part.wall
    yield from one_of(part.display_units, DisplayUnits, "the display unit", "display_units")
    if not (math.isfinite(wall.thickness) and SMALLEST <= wall.thickness <= FARTHEST):
        yield Fault(
            f"the wall is {wall.thickness:g} mm thick",
            "give a thickness above zero",
            "wall.thickness",
        )
    yield from one_of(wall.state, WallState, "the state of the wall", "wall.state")
    if not wall.material:
        yield Fault("no material is chosen", "choose a material for the wall", "wall.material")
    elif part.material is None:
        known = ", ".join(m.name for m in part.materials) or "none"
        yield Fault(
            f"the material “{wall.material}” is not among the part's materials ({known})",
            "choose another material or add this one",
            "wall.material",
        )


def dimension_faults(part: Part) -> Iterator[Fault]:
    """Named dimensions without a finite value or with bounds that shut it out."""
    seen: set[str] = set()
    for d in part.dimensions:
        where = f"dimensions.{d.name}"
        if d.name in seen:
            yield Fault(f"two dimensions are called “{d.name}”", "rename or remove one", where)
        seen.add(d.name)
        if not all(math.isfinite(v) for v in (d.value, d.lower, d.upper) if v is not None):
            yield Fault(
                f"dimension “{d.name}” or a bound of it is not a finite number",
                "give finite numbers",
                where,
            )
        elif (d.lower is not None and d.value < d.lower) or (
            d.upper is not None and d.value > d.upper
        ):
            low = d.lower is not None and d.value < d.lower
            bound = d.lower if low else d.upper
            yield Fault(
                f"dimension “{d.name}” is {d.value:g}, "
                f"{'below' if low else 'above'} its bound of {bound:g}",
                "change the value or the bound",
                f"{where}.value",
                blocks=False,
            )


def mesh_faults(mesh: MeshWishes) -> Iterator[Fault]:
    """Mesh wishes that cannot be met."""
    yield from one_of(mesh.element, ElementName, "the element", "mesh.element")
    if not TIGHTEST <= mesh.tolerance <= LOOSEST:
        yield Fault(
            f"the tolerance of the mesh is {mesh.tolerance:g}",
            f"give a tolerance between {TIGHTEST:g} (0.05 %) and {LOOSEST:g} (20 %)",
            "mesh.tolerance",
        )
    if mesh.size is not None and not SMALLEST <= mesh.size <= FARTHEST:
        yield Fault(
            f"the element size is {mesh.size:g} mm",
            f"give a size of at least {SMALLEST:g} mm, or leave it to the program",
            "mesh.size",
        )
    if not 1 <= mesh.across <= 20:
        yield Fault(
            f"{mesh.across:g} elements are wanted across the thinnest wall",
            "give a whole number from 1 to 20",
            "mesh.across",
        )


def element_count_faults(mesh: MeshWishes, shape: Shape) -> Iterator[Fault]:
    """An element size that asks for more elements than any laptop holds."""
    if mesh.size is None or not SMALLEST <= mesh.size <= FARTHEST:
        return
    area = shape.area
    if area > MOST_ELEMENTS * mesh.size**2:
        yield Fault(
            f"elements of {mesh.size:g} mm would be about {area / mesh.size**2:.1e} in number",
            f"give a size of at least {math.sqrt(area / MOST_ELEMENTS):.2g} mm, "
            "or leave it to the program",
            "mesh.size",
        )


def reading_faults(part: Part) -> Iterator[Fault]:
    """Probes and cuts that stand nowhere."""
    yield from _cut_faults(part)
    for probe in part.readings:
        if not all(math.isfinite(x) for x in probe.at):
            yield Fault(
                f"the place of probe {probe.id} is not a pair of finite numbers",
                "give finite coordinates in mm",
                f"readings.{probe.id}.at",
                (probe.id,),
            )
        elif max(abs(x) for x in probe.at) > FARTHEST:
            yield Fault(
                f"probe {probe.id} lies at ({probe.at[0]:.4g}, {probe.at[1]:.4g}) mm",
                "move it onto the part or remove it",
                f"readings.{probe.id}.at",
                (probe.id,),
            )


def _cut_faults(part: Part) -> Iterator[Fault]:
    for cut in part.cuts:
        where = f"readings.{cut.id}"
        numbers = (*cut.start, *cut.end)
        if not all(math.isfinite(x) for x in numbers):
            yield Fault(
                f"the ends of cut {cut.id} are not pairs of finite numbers",
                "give finite coordinates in mm",
                where,
                (cut.id,),
            )
        elif max(abs(x) for x in numbers) > FARTHEST:
            yield Fault(
                f"cut {cut.id} reaches beyond {FARTHEST:g} mm",
                "draw it across the part or remove it",
                where,
                (cut.id,),
            )
        elif math.dist(cut.start, cut.end) < SMALLEST:
            yield Fault(
                f"cut {cut.id} begins and ends at one point",
                "draw it across the part or remove it",
                where,
                (cut.id,),
            )
