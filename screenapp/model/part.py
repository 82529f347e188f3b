"""The part: what the engineer draws, holds, loads and asks, as frozen records.

Lengths are in mm, forces in N, stresses in MPa, angles in degrees (counter-clockwise from +x),
densities in kg/m³, accelerations in m/s², temperatures in °C - always, whatever units are shown.

Everything that supports, loads, limits and readings point at has an `id` that is unique in the
part and survives edits.

Every number in these records is a float.  Where the file gives an expression in the named
dimensions ("width/2 - 5"), the record holds its value and `Part.formulas` keeps the text.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

from screenapp.model.limit_records import (
    DisplacementLimit as DisplacementLimit,
    FatigueLimit as FatigueLimit,
    JointLimit as JointLimit,
    Limit as Limit,
    StrainLimit as StrainLimit,
    StressLimit as StressLimit,
    StressMeasure as StressMeasure,
)
from screenapp.model.load_records import (
    BearingLoad as BearingLoad,
    BodyLoad as BodyLoad,
    ForceLoad as ForceLoad,
    GravityLoad as GravityLoad,
    LineLoad as LineLoad,
    Load as Load,
    MisfitLoad as MisfitLoad,
    MomentLoad as MomentLoad,
    PlacedLoad as PlacedLoad,
    PointLoad as PointLoad,
    PressureLoad as PressureLoad,
    ShearLoad as ShearLoad,
    SpinLoad as SpinLoad,
    TemperatureLoad as TemperatureLoad,
)
from screenapp.model.material_records import (
    Material as Material,
    MaterialFamily as MaterialFamily,
)
from screenapp.model.shape_records import (
    CircleHole as CircleHole,
    Corner as Corner,
    Edge as Edge,
    Hole as Hole,
    Loop as Loop,
    LoopHole as LoopHole,
    Point as Point,
    SlotHole as SlotHole,
    Zone as Zone,
    ZoneSides as ZoneSides,
)
from screenapp.model.support_records import (
    BoltSupport as BoltSupport,
    ElasticSupport as ElasticSupport,
    FixedSupport as FixedSupport,
    PinSupport as PinSupport,
    PrescribedSupport as PrescribedSupport,
    RollerSupport as RollerSupport,
    Support as Support,
    SymmetrySupport as SymmetrySupport,
    WeldSupport as WeldSupport,
)

WallState = Literal["plane stress", "plane strain"]
ElementName = Literal["quad4", "quad4-incompatible", "quad8", "quad9"]
DisplayUnits = Literal["mm-N-MPa", "in-lbf-ksi"]
Measures = Literal["length", "angle", "number"]


@dataclass(frozen=True)
class Wall:
    """The wall: `thickness` [mm], the name of its material, and what holds across it.

    `axis` is the direction [deg] of the 1-axis of an orthotropic material from +x; None is 0.
    """

    thickness: float
    material: str
    state: WallState = "plane stress"
    axis: float | None = None


# --- cases ---------------------------------------------------------------------------------


@dataclass(frozen=True)
class Case:
    """A load case: loads that act together."""

    id: str
    name: str
    loads: tuple[Load, ...] = ()


@dataclass(frozen=True)
class Term:
    """A case's share in a combination: all its loads times `factor`."""

    case: str
    factor: float


@dataclass(frozen=True)
class Combination:
    """Cases that act together, each with its factor."""

    id: str
    name: str
    terms: tuple[Term, ...] = ()


# --- mesh, readings -----------------------------------------------------------------


@dataclass(frozen=True)
class MeshWishes:
    """What the user asks of the mesh.

    Attributes:
        element: which quad.
        tolerance: relative accuracy at which a number counts as settled (0.02 = 2 %).
        size: largest element side [mm]; None lets the program choose.
        across: least number of elements across the thinnest wall.
    """

    element: ElementName = "quad9"
    tolerance: float = 0.02
    size: float | None = None
    across: int = 3


@dataclass(frozen=True)
class Probe:
    """A reading at a point [mm] of the part."""

    id: str
    name: str
    at: Point


@dataclass(frozen=True)
class Cut:
    """A reading along a straight line from `start` to `end` [mm] across the part.

    Its normal points to the right of the way from start to end; the part to the left is the free
    body whose section forces are read.
    """

    id: str
    name: str
    start: Point
    end: Point


@dataclass(frozen=True)
class Dimension:
    """A named value that expressions may use, with the bounds it may vary within.

    `measures` says what the numbers are: a length [mm], an angle [deg] or a plain number.
    """

    name: str
    value: float
    lower: float | None = None
    upper: float | None = None
    measures: Measures = "length"


@dataclass(frozen=True)
class Formula:
    """The text of an expression; `field` is its dotted path, e.g. "outline.corners.c3.at.0"."""

    field: str
    text: str


@dataclass(frozen=True)
class JobDetails:
    """Who did a screening and who checked it, and what it belongs to; each may be empty.

    The program only prints them: they sign nothing and decide nothing.
    """

    done_by: str = ""
    checked_by: str = ""
    job: str = ""
    drawing: str = ""
    revision: str = ""


@dataclass(frozen=True)
class Part:
    """Everything a `*.part.json` file holds."""

    title: str = "Untitled part"
    notes: str = ""
    record: JobDetails = JobDetails()
    display_units: DisplayUnits = "mm-N-MPa"
    dimensions: tuple[Dimension, ...] = ()
    formulas: tuple[Formula, ...] = ()
    outline: Loop | None = None
    holes: tuple[Hole, ...] = ()
    zones: tuple[Zone, ...] = ()
    wall: Wall = Wall(3.0, "")
    materials: tuple[Material, ...] = ()
    supports: tuple[Support, ...] = ()
    cases: tuple[Case, ...] = ()
    combinations: tuple[Combination, ...] = ()
    limits: tuple[Limit, ...] = ()
    mesh: MeshWishes = MeshWishes()
    readings: tuple[Probe, ...] = ()
    cuts: tuple[Cut, ...] = ()

    @property
    def material(self) -> Material | None:
        """The wall's material, or None while none is chosen."""
        return self.material_of(-1)

    def wall_of(self, zone: int) -> Wall:
        """Thickness and material of a zone, by its index in `zones`; -1 for the wall itself."""
        if zone < 0:
            return self.wall
        own = self.zones[zone]
        return Wall(
            self.wall.thickness if own.thickness is None else own.thickness,
            self.wall.material if own.material is None else own.material,
            self.wall.state,
            self.wall.axis if own.axis is None else own.axis,
        )

    def uses_orthotropic(self) -> bool:
        """Whether the wall or a zone is of an orthotropic material."""
        used = (self.material_of(zone) for zone in range(-1, len(self.zones)))
        return any(m is not None and m.orthotropic for m in used)

    def material_of(self, zone: int) -> Material | None:
        """The material of a zone (-1: of the wall itself), None if the part does not carry it."""
        name = self.wall_of(zone).material
        return next((m for m in self.materials if m.name == name), None)
