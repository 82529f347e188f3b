"""Changes of thickness or material as places where the stress may have no finite value: where a
line between zones ends at an edge, turns sharply or meets another one."""

from __future__ import annotations

import math
from collections.abc import Callable, Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from screenapp.mechanics.corner_exponent import Face
from screenapp.mechanics.singular_spot import SingularSpot
from screenapp.mechanics.wedge_exponent import Wedge, fan_growth_rate
from screenapp.model.features import loops_of
from screenapp.model.part import Material, Part, Point
from screenapp.model.shape import Shape

Floats = NDArray[np.float64]

UNKNOWN_RATE = 0.03
"""Growth rate that stands for one which is not known, where an orthotropic sheet meets another."""

SMOOTH = 1e-6
"""A line that turns by less than this [rad] does not turn."""


@dataclass(frozen=True)
class _Sector:
    """A region at a point: where its first side leads [rad], its angle [rad], its zone, and the
    pieces of the boundary at its first and last side, -1 for an interface."""

    heading: float
    angle: float
    zone: int
    first: int
    last: int


@dataclass(frozen=True)
class Fan:
    """The regions that meet at a point of an interface, counter-clockwise.

    Attributes:
        at: [mm].
        sectors: from the boundary on, if the point is on it.
    """

    at: Point
    sectors: tuple[_Sector, ...]

    @property
    def closed(self) -> bool:
        """Whether the point lies inside the part."""
        return all(s.first < 0 and s.last < 0 for s in self.sectors)


def fans(shape: Shape) -> list[Fan]:
    """All places where interfaces end, turn sharply or meet."""
    near = 1e-9 * shape.size
    ends = np.array([p for i in shape.interfaces for p in (i.curve.start, i.curve.end)])
    if not len(ends):
        return []
    found: dict[tuple[int, int], tuple[Point, list[_Sector]]] = {}
    n = len(shape.curves)
    for region in shape.regions:
        own = region.shape
        for first, last in own.loops:
            for k in range(first, last):
                before = k - 1 if k > first else last - 1
                at = own.curves[k].curve.start
                if np.hypot(*(ends - at).T).min() > 1e3 * near:
                    continue
                out = own.curves[k].curve.tangent(0.0)
                back = -own.curves[before].curve.tangent(1.0)
                heading = math.atan2(float(out[1]), float(out[0]))
                angle = (math.atan2(float(back[1]), float(back[0])) - heading) % (2.0 * math.pi)
                pieces = [p if p < n else -1 for p in (region.pieces[k], region.pieces[before])]
                key = (round(at[0] / (1e4 * near)), round(at[1] / (1e4 * near)))
                known = found.setdefault(key, (at, []))[1]
                known.append(_Sector(heading, angle, region.zone, *pieces))
    made = [Fan(at, _ordered(sectors)) for at, sectors in found.values()]
    return [fan for fan in made if not _even(fan)]


def _ordered(sectors: Sequence[_Sector]) -> tuple[_Sector, ...]:
    """Counter-clockwise, beginning with the one that begins at the boundary."""
    start = next((s.heading for s in sectors if s.first >= 0), sectors[0].heading)
    return tuple(sorted(sectors, key=lambda s: (s.heading - start + SMOOTH) % (2.0 * math.pi)))


def _even(fan: Fan) -> bool:
    """Whether a smooth line only goes on there."""
    return (
        fan.closed
        and len(fan.sectors) == 2
        and all(abs(s.angle - math.pi) < SMOOTH for s in fan.sectors)
    )


def zone_spots(
    part: Part, shape: Shape, face: Callable[[int, Floats], Face], least: float
) -> list[SingularSpot]:
    """The fans whose stress grows faster than `least`.

    `face` tells how a piece of the boundary (by index) is held that leaves the point in the given
    direction.
    """
    corners = {c.at: c.id for where, _, loop in loops_of(part) for c in loop.corners
               if where.startswith("zones")}  # fmt: skip
    spots: list[SingularSpot] = []
    for fan in fans(shape):
        wedges = []
        for sector in fan.sectors:
            material = part.material_of(sector.zone)
            if material is None:
                break
            t = part.wall_of(sector.zone).thickness
            wedges.append(_wedge(material, sector.angle, t))
        ends: tuple[Face, Face] | None = None
        if not fan.closed:
            first, last = fan.sectors[0].first, fan.sectors[-1].last
            ends = (
                face(first, shape.curves[first].curve.tangent(0.0)),
                face(last, -shape.curves[last].curve.tangent(1.0)),
            )
        rate = fan_growth_rate(wedges, ends)
        if _turns_axes(part, fan):
            rate = max(rate, UNKNOWN_RATE)
        if rate < least:
            continue
        corner = next(
            (id_ for at, id_ in corners.items() if math.dist(at, fan.at) < 1e-6 * shape.size), ""
        )
        spots.append(_spot(part, shape, fan, rate, corner))
    return spots


def _wedge(material: Material, angle: float, thickness: float) -> Wedge:
    """A wedge of isotropic material; for an orthotropic one, one of its mean stiffness, which tells
    whether the stress grows there rather than how fast."""
    modulus, poisson = material.youngs_modulus, material.poissons_ratio
    if material.youngs_modulus_2 is not None:
        mean = math.sqrt(modulus * material.youngs_modulus_2)
        modulus, poisson = mean, min(poisson * mean / modulus, 0.49)
    return Wedge(angle, modulus, poisson, thickness)


def _turns_axes(part: Part, fan: Fan) -> bool:
    """Whether the elasticity changes there in other ways than by its mean."""
    zones = {sector.zone for sector in fan.sectors}
    materials = {zone: part.material_of(zone) for zone in zones}
    kinds = {
        (m.name, (part.wall_of(zone).axis or 0.0) % 180.0 if m.orthotropic else 0.0)
        for zone, m in materials.items()
        if m is not None
    }
    return len(kinds) > 1 and any(m is not None and m.orthotropic for m in materials.values())


def _spot(part: Part, shape: Shape, fan: Fan, rate: float, corner: str) -> SingularSpot:
    zones = [part.zones[z].id for z in sorted({s.zone for s in fan.sectors}) if z >= 0]
    meeting = " and ".join(f"zone {z}" for z in zones)
    if fan.closed:
        place = f"corner {corner} of {meeting}" if corner else f"a corner of {meeting}"
        mend = (
            f"give corner {corner} of the zone a radius, or judge it by a reading at a stated "
            "distance"
            if corner
            else "round the zone there, or judge it by a reading at a stated distance"
        )
        ids: tuple[str, ...] = (*zones, corner) if corner else tuple(zones)
        why = (
            f"the thickness or material changes round {place}, where the stress has no finite value"
        )
    else:
        edges = [
            shape.curves[p].feature for s in (fan.sectors[0], fan.sectors[-1])
            for p in (s.first, s.last) if p >= 0
        ]  # fmt: skip
        edges = list(dict.fromkeys(edges))
        place = f"the end of {meeting} at {' and '.join(edges)}"
        mend = (
            "let the zone end elsewhere or at another angle, make the step smaller, or judge it by "
            "a reading at a stated distance"
        )
        ids = (*zones, *edges)
        why = f"the thickness or material changes at {place}, where the stress has no finite value"
    return SingularSpot(fan.at, ids, why, mend, rate, place)
