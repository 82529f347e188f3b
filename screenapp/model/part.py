"""The part: what the engineer draws, holds, loads and asks, as frozen records.

Lengths are in mm, forces in N, stresses in MPa, angles in degrees (counter-clockwise from +x),
densities in kg/m³, accelerations in m/s², temperatures in °C - always, whatever units are shown.

A closed loop is a ring of corners; `edges[i]` runs from `corners[i]` to `corners[i + 1]` (the last
edge closes the ring)::

        c4 ----e3---- c3
        |              |
        e4            e2          edges[i] joins corners[i] and corners[i + 1]
        |              |
        c1 ----e1---- c2

Everything that supports, loads, limits and readings point at has an `id` that is unique in the
part and survives edits.  A fillet is a property (`round`) of a corner.

Every number in these records is a float.  Where the file gives an expression in the named
dimensions ("width/2 - 5"), the record holds its value and `Part.formulas` keeps the text.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

from screenapp.model.limit_records import (
    DisplacementLimit as DisplacementLimit,
)
from screenapp.model.limit_records import (
    FatigueLimit as FatigueLimit,
)
from screenapp.model.limit_records import (
    JointLimit as JointLimit,
)
from screenapp.model.limit_records import (
    Limit as Limit,
)
from screenapp.model.limit_records import (
    StrainLimit as StrainLimit,
)
from screenapp.model.limit_records import (
    StressLimit as StressLimit,
)
from screenapp.model.limit_records import (
    StressMeasure as StressMeasure,
)
from screenapp.model.load_records import (
    BearingLoad as BearingLoad,
)
from screenapp.model.load_records import (
    BodyLoad as BodyLoad,
)
from screenapp.model.load_records import (
    ForceLoad as ForceLoad,
)
from screenapp.model.load_records import (
    GravityLoad as GravityLoad,
)
from screenapp.model.load_records import (
    LineLoad as LineLoad,
)
from screenapp.model.load_records import (
    Load as Load,
)
from screenapp.model.load_records import (
    MisfitLoad as MisfitLoad,
)
from screenapp.model.load_records import (
    MomentLoad as MomentLoad,
)
from screenapp.model.load_records import (
    PlacedLoad as PlacedLoad,
)
from screenapp.model.load_records import (
    PointLoad as PointLoad,
)
from screenapp.model.load_records import (
    PressureLoad as PressureLoad,
)
from screenapp.model.load_records import (
    ShearLoad as ShearLoad,
)
from screenapp.model.load_records import (
    SpinLoad as SpinLoad,
)
from screenapp.model.load_records import (
    TemperatureLoad as TemperatureLoad,
)
from screenapp.model.material_records import (
    Material as Material,
)
from screenapp.model.material_records import (
    MaterialFamily as MaterialFamily,
)
from screenapp.model.pattern import Pattern
from screenapp.model.support_records import (
    BoltSupport as BoltSupport,
)
from screenapp.model.support_records import (
    ElasticSupport as ElasticSupport,
)
from screenapp.model.support_records import (
    FixedSupport as FixedSupport,
)
from screenapp.model.support_records import (
    PinSupport as PinSupport,
)
from screenapp.model.support_records import (
    PrescribedSupport as PrescribedSupport,
)
from screenapp.model.support_records import (
    RollerSupport as RollerSupport,
)
from screenapp.model.support_records import (
    Support as Support,
)
from screenapp.model.support_records import (
    SymmetrySupport as SymmetrySupport,
)
from screenapp.model.support_records import (
    WeldSupport as WeldSupport,
)

Point = tuple[float, float]

WallState = Literal["plane stress", "plane strain"]
ZoneSides = Literal["both", "one"]
ElementName = Literal["quad4", "quad4-incompatible", "quad8", "quad9"]
DisplayUnits = Literal["mm-N-MPa", "in-lbf-ksi"]
Measures = Literal["length", "angle", "number"]


@dataclass(frozen=True)
class Corner:
    """A corner of a loop at `at` [mm], where its two edges would meet.

    It is sharp, or rounded by a fillet of radius `round` [mm], or cut off by a chamfer that takes
    `chamfer` [mm] of both edges; not both.
    """

    id: str
    at: Point
    round: float = 0.0
    chamfer: float = 0.0

    @property
    def sharp(self) -> bool:
        """Whether the two edges meet in the corner itself."""
        return self.round == 0.0 and self.chamfer == 0.0


@dataclass(frozen=True)
class Edge:
    """An edge of a loop: straight, or the circular arc that passes `through` a point [mm]."""

    id: str
    through: Point | None = None


@dataclass(frozen=True)
class Loop:
    """A closed ring; `edges[i]` joins `corners[i]` to `corners[(i + 1) % n]`; n >= 2 (an arc)."""

    corners: tuple[Corner, ...]
    edges: tuple[Edge, ...]


@dataclass(frozen=True)
class CircleHole:
    """A round hole: centre [mm] and diameter [mm]; with a pattern, many of them."""

    id: str
    centre: Point
    diameter: float
    pattern: Pattern | None = None


@dataclass(frozen=True)
class SlotHole:
    """A slot with round ends: overall `length` [mm] >= `width` [mm], axis at `angle` [deg].

    With a pattern, many of them.
    """

    id: str
    centre: Point
    length: float
    width: float
    angle: float = 0.0
    pattern: Pattern | None = None


@dataclass(frozen=True)
class LoopHole:
    """A hole of any form, bounded by a loop with corners and edges of its own."""

    id: str
    loop: Loop


Hole = CircleHole | SlotHole | LoopHole


@dataclass(frozen=True)
class Zone:
    """A stretch of the wall with a thickness or material of its own: a pad, a pocket, a rib.

    The screening takes its middle plane to be that of the wall, which is so where the thickness is
    on both sides.  What of it lies outside the part does not count; where zones overlap, the later
    one of the list wins.

    Attributes:
        form: the closed form, as of a hole; it bears the zone's id.
        thickness: [mm], None for the wall's.
        material: name of its material, None for the wall's.
        name: what the user calls it, may be empty.
        axis: direction of the 1-axis of an orthotropic material [deg] from +x, None for the wall's.
        sides: whether what its thickness adds or takes away is on both sides of the wall alike or
            on one only; None where it is not said.
    """

    form: CircleHole | SlotHole | LoopHole
    thickness: float | None = None
    material: str | None = None
    name: str = ""
    sides: ZoneSides | None = None
    axis: float | None = None

    @property
    def id(self) -> str:
        """The id, unique in the part."""
        return self.form.id


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
