"""Parts with zones, meshed in this process, for tests of the mechanics."""

from __future__ import annotations

from dataclasses import dataclass, replace

from screenapp.mechanics.point_reading import PointReader
from screenapp.mechanics.recovery import recover
from screenapp.mechanics.solve import solve
from screenapp.meshing.making import make_mesh
from screenapp.meshing.sizing import initial_sizes
from screenapp.model.mesh import Mesh
from screenapp.model.part import (
    Case,
    CircleHole,
    ElementName,
    Hole,
    LoopHole,
    Material,
    MeshWishes,
    Part,
    Point,
    Support,
    Wall,
    Zone,
)
from screenapp.model.regions import shape_with_zones
from screenapp.model.shape import Shape
from screenapp.model.solution import Solution, StressField
from tests.mechanics.structured import mapped
from tests.model.plates import loop, rectangle

ELEMENTS: tuple[ElementName, ...] = ("quad4", "quad4-incompatible", "quad8", "quad9")


def steel(poisson: float = 0.3, modulus: float = 210_000.0, name: str = "steel") -> Material:
    """A material with limits that no test reaches."""
    return Material(name, modulus, poisson, 7850.0, 235.0, 360.0)


def pad(
    corners: list[Point],
    thickness: float | None = None,
    material: str | None = None,
    id_: str = "z1",
) -> Zone:
    """A zone with straight edges."""
    return Zone(LoopHole(id_, loop(corners, prefix=id_)), thickness, material)


def disc(centre: Point, diameter: float, thickness: float | None, id_: str = "z1") -> Zone:
    """A round zone."""
    return Zone(CircleHole(id_, centre, diameter), thickness)


@dataclass(frozen=True)
class Solved:
    """A part solved and recovered on one mesh."""

    part: Part
    shape: Shape
    mesh: Mesh
    solution: Solution
    stress: StressField

    @property
    def reader(self) -> PointReader:
        """Reads it at points."""
        return PointReader(self.part, self.shape, self.mesh, self.solution, self.stress)


def strip(
    width: float,
    height: float,
    zones: tuple[Zone, ...],
    supports: tuple[Support, ...] = (),
    cases: tuple[Case, ...] = (),
    materials: tuple[Material, ...] = (),
    thickness: float = 2.0,
    holes: tuple[Hole, ...] = (),
) -> Part:
    """A rectangle from the origin: e1 below, e2 right, e3 above, e4 left."""
    materials = materials or (steel(),)
    return Part(
        outline=rectangle(width, height),
        holes=holes,
        zones=zones,
        wall=Wall(thickness, materials[0].name),
        materials=materials,
        supports=supports,
        cases=cases,
    )


def meshed(part: Part, size: float | None = None) -> tuple[Shape, Mesh]:
    """The divided shape and a mesh of it."""
    shape = shape_with_zones(part)
    wishes = replace(part.mesh, size=size)
    return shape, make_mesh(shape, initial_sizes(shape, wishes))


def in_rectangles(part: Part, width: float, height: float) -> Mesh:
    """A strip in equal rectangles, for the eight-node quad: it has complete quadratics only as a
    parallelogram (MacNeal & Harder 1992, from memory)."""
    return mapped(lambda xi, eta: (width * xi, height * eta), 20, 4, shape_with_zones(part))


def solved(
    part: Part,
    element: ElementName = "quad9",
    size: float | None = None,
    mesh: Mesh | None = None,
) -> Solved:
    """The part solved with an element, on a given mesh or on one of the mesher's."""
    part = replace(part, mesh=MeshWishes(element))
    shape = shape_with_zones(part)
    if mesh is None:
        shape, mesh = meshed(part, size)
    solution = solve(part, shape, mesh)
    return Solved(part, shape, mesh, solution, recover(part, shape, mesh, solution))
