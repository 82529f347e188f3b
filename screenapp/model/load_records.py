"""How a part may be loaded: one frozen record for each kind of load.

Units are those of `part.py`.  Where a record has `start` and `end` beside `on` it may stand on part
of an edge only: these are lengths [mm] along it from its first corner (see `edge_parts`), None the
edge's own start and end.
"""

from __future__ import annotations

from dataclasses import dataclass


@dataclass(frozen=True)
class PressureLoad:
    """A pressure [MPa] on the wall's face along an edge or hole; positive pushes on the material.

    The force per length is pressure x thickness.  With `end_pressure` it varies evenly along the
    edge and reaches that at the end.
    """

    id: str
    on: str
    pressure: float
    end_pressure: float | None = None
    start: float | None = None
    end: float | None = None


@dataclass(frozen=True)
class ShearLoad:
    """A shear force per length [N/mm] along an edge or hole.

    Positive acts with the material on its left (counter-clockwise round the outline, clockwise
    round a hole).
    """

    id: str
    on: str
    per_length: float
    start: float | None = None
    end: float | None = None


@dataclass(frozen=True)
class LineLoad:
    """A force per length with components `x`, `y` [N/mm] along an edge or hole.

    With `end_x` or `end_y` that component varies evenly along the edge and reaches that at the end.
    """

    id: str
    on: str
    x: float
    y: float
    end_x: float | None = None
    end_y: float | None = None
    start: float | None = None
    end: float | None = None


@dataclass(frozen=True)
class ForceLoad:
    """A total force `x`, `y` [N] spread evenly along an edge or round a hole."""

    id: str
    on: str
    x: float
    y: float
    start: float | None = None
    end: float | None = None


@dataclass(frozen=True)
class BearingLoad:
    """A pin's force `x`, `y` [N] on a circular hole: radial pressure, cosine over the half it
    bears on (common practice, no source)."""

    id: str
    on: str
    x: float
    y: float


@dataclass(frozen=True)
class PointLoad:
    """A force `x`, `y` [N] at a place of the boundary.

    At a point (a sharp corner, or a place on an edge) the stress under it has no finite value; on
    a patch of an edge it has one.

    Attributes:
        on: id of a sharp corner or of an edge.
        along: on an edge, the length along it from its first corner (see `edge_parts`) [mm].
        patch: length of edge over which the force is spread evenly, half on either side [mm]; None
            for a point.
    """

    id: str
    on: str
    x: float
    y: float
    along: float | None = None
    patch: float | None = None


@dataclass(frozen=True)
class GravityLoad:
    """The part's own weight under the free-fall acceleration `x`, `y` [m/s²], e.g. (0, -9.81)."""

    id: str
    x: float
    y: float


@dataclass(frozen=True)
class MomentLoad:
    """A moment [N·mm] on a circular hole, positive counter-clockwise.

    It acts as an even shear all round the rim; on a pattern each hole takes an equal share.
    """

    id: str
    on: str
    moment: float


@dataclass(frozen=True)
class SpinLoad:
    """The part turns steadily about a point: each bit of it pulls outwards with ρ ω² r.

    Attributes:
        x, y: the point [mm].
        speed: [1/min]; its sign does not matter.
        factor: all forces count so many times.
    """

    id: str
    x: float
    y: float
    speed: float
    factor: float = 1.0


@dataclass(frozen=True)
class TemperatureLoad:
    """A change of temperature: the material would like to grow by α ΔT in every direction.

    The change at a place is `change` + `x`·(its x) + `y`·(its y).

    Attributes:
        change: at the origin; everywhere where there is no gradient [K].
        x, y: gradient [K/mm].
        start: temperature at which nothing is strained [°C].
        zone: id of the only zone that changes; None for the whole part.
    """

    id: str
    change: float
    x: float = 0.0
    y: float = 0.0
    start: float = 20.0
    zone: str | None = None


@dataclass(frozen=True)
class MisfitLoad:
    """A support that is not where the drawing has it: `x`, `y` [mm] away, in this case only.

    It moves what the support holds, in the directions in which it holds; the movement adds to the
    one that the support may prescribe in all cases.

    Attributes:
        support: id of the support.
    """

    id: str
    support: str
    x: float
    y: float


PlacedLoad = PressureLoad | ShearLoad | LineLoad | ForceLoad | BearingLoad | PointLoad | MomentLoad
BodyLoad = GravityLoad | SpinLoad | TemperatureLoad | MisfitLoad
"""Loads that act throughout the part or through a support, not on a place of its boundary."""
Load = PlacedLoad | BodyLoad
