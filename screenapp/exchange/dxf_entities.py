"""Turns one entity of a drawing into plane curves in world coordinates.

Circles, arcs and polylines stand in a coordinate system of their own (OCS) that is turned over
when a part was mirrored (extrusion -Z): there an arc runs clockwise and a bulge changes its sign.
Lines, ellipses and splines stand in world coordinates.
"""

from __future__ import annotations

import math
from collections.abc import Callable, Iterable, Sequence
from itertools import pairwise

from ezdxf.entities import DXFGraphic
from ezdxf.math import OCS, Vec3

from screenapp.exchange.bulges import bulged_edge
from screenapp.exchange.drawing import AnyCurve
from screenapp.exchange.free_curves import EllipseArc, Spline
from screenapp.model.curves import Arc, Segment
from screenapp.model.part import Point

Found = tuple[AnyCurve, bool]
"""A curve and whether it is flat."""

FLAT = 1e-6
"""Heights may differ by this share of an entity's extent and it is still flat."""

TWO_PI = 2.0 * math.pi

IGNORED = {
    "TEXT": "texts",
    "MTEXT": "texts",
    "ATTRIB": "texts",
    "ATTDEF": "texts",
    "DIMENSION": "dimensions",
    "ARC_DIMENSION": "dimensions",
    "LARGE_RADIAL_DIMENSION": "dimensions",
    "LEADER": "leaders",
    "MULTILEADER": "leaders",
    "MLEADER": "leaders",
    "TOLERANCE": "tolerance frames",
    "HATCH": "hatches",
    "MPOLYGON": "hatches",
    "SOLID": "filled areas",
    "TRACE": "filled areas",
    "WIPEOUT": "filled areas",
    "POINT": "points",
    "IMAGE": "pictures",
    "OLE2FRAME": "pictures",
    "PDFUNDERLAY": "pictures",
    "VIEWPORT": "views",
    "RAY": "endless lines",
    "XLINE": "endless lines",
    "ACAD_TABLE": "tables",
    "3DFACE": "3D faces",
    "MESH": "3D faces",
    "POLYMESH": "3D faces",
    "3DSOLID": "3D bodies",
    "BODY": "3D bodies",
    "SURFACE": "3D bodies",
    "EXTRUDEDSURFACE": "3D bodies",
    "LOFTEDSURFACE": "3D bodies",
    "REVOLVEDSURFACE": "3D bodies",
    "SWEPTSURFACE": "3D bodies",
    "HELIX": "3D curves",
    "REGION": "regions",
}
"""What entities without lines of a shape are called in the report."""

THREE_D = ("3D faces", "3D bodies", "3D curves", "regions")


class Unusable(Exception):
    """An entity has no extent or nonsense in it."""


def curves_of(entity: DXFGraphic) -> list[Found] | None:
    """The curves of an entity; None if it is no line of a shape (see `IGNORED`).

    Raises:
        Unusable: its figures make no curve (no length, no radius, not a number).
    """
    make = _MAKERS.get(entity.dxftype())
    if make is None:
        return None
    try:
        return make(entity)
    except (ValueError, ZeroDivisionError, IndexError, OverflowError) as error:
        raise Unusable(str(error)) from error


# --- lines, circles, arcs -----------------------------------------------------------------------


def _line(entity: DXFGraphic) -> list[Found]:
    start, end = entity.dxf.start, entity.dxf.end
    return [(Segment(_xy(start), _xy(end)), _level((start, end)))]


def _circle(entity: DXFGraphic) -> list[Found]:
    radius = _positive(abs(entity.dxf.radius))
    ocs = entity.ocs()
    centre, turned, flat = _plane(ocs, entity.dxf.center)
    if not flat:
        return [(_tilted_circle(ocs, centre, radius, 0.0, TWO_PI), False)]
    return [(Arc(_xy(centre), radius, 0.0, -TWO_PI if turned else TWO_PI), True)]


def _arc(entity: DXFGraphic) -> list[Found]:
    radius = _positive(abs(entity.dxf.radius))
    begin = math.radians(entity.dxf.start_angle)
    sweep = math.radians((entity.dxf.end_angle - entity.dxf.start_angle) % 360.0) or TWO_PI
    ocs = entity.ocs()
    centre, turned, flat = _plane(ocs, entity.dxf.center)
    if not flat:
        return [(_tilted_circle(ocs, centre, radius, begin, begin + sweep), False)]
    if turned:
        across = ocs.to_wcs(Vec3(math.cos(begin), math.sin(begin), 0.0))
        return [(Arc(_xy(centre), radius, math.atan2(across.y, across.x), -sweep), True)]
    return [(Arc(_xy(centre), radius, begin, sweep), True)]


def _tilted_circle(ocs: OCS, centre: Vec3, radius: float, t0: float, t1: float) -> EllipseArc:
    """What is seen of a circle in a plane that is tilted."""
    major, minor = ocs.to_wcs(Vec3(radius, 0.0, 0.0)), ocs.to_wcs(Vec3(0.0, radius, 0.0))
    return EllipseArc(_xy(centre), _xy(major), _xy(minor), t0, t1)


# --- polylines ----------------------------------------------------------------------------------


def _lwpolyline(entity: DXFGraphic) -> list[Found]:
    rows = entity.get_points("xyb")
    height = float(entity.dxf.elevation)
    places = [Vec3(x, y, height) for x, y, _ in rows]
    return _bulged(entity.ocs(), places, [float(b) for _, _, b in rows], bool(entity.closed))


def _polyline(entity: DXFGraphic) -> list[Found] | None:
    if entity.is_polygon_mesh or entity.is_poly_face_mesh:
        return None
    # the control points of a smoothed polyline stand among the points of the line itself
    vertices = [v for v in entity.vertices if not v.dxf.flags & 16]
    places = [v.dxf.location for v in vertices]
    closed = bool(entity.is_closed)
    if entity.is_2d_polyline:
        height = float(entity.dxf.get("elevation", Vec3()).z)
        places = [Vec3(p.x, p.y, height) for p in places]
        return _bulged(entity.ocs(), places, [float(v.dxf.bulge) for v in vertices], closed)
    if closed:
        places = [*places, places[0]]
    return _segments(places)


def _bulged(ocs: OCS, places: Sequence[Vec3], bulges: list[float], closed: bool) -> list[Found]:
    """A polyline whose bulge b bends the edge to an arc of 4·atan(b) (DXF reference)."""
    if not places:
        return []
    _, turned, flat = _plane(ocs, places[0])
    world = [_xy(ocs.to_wcs(p)) for p in places]
    last = len(world) if closed else len(world) - 1
    found: list[Found] = []
    for i in range(last):
        start, end = world[i], world[(i + 1) % len(world)]
        if start == end:
            continue
        found.append((bulged_edge(start, end, -bulges[i] if turned else bulges[i]), flat))
    return found


def _segments(places: Iterable[Vec3]) -> list[Found]:
    listed = list(places)
    flat = _level(listed)
    return [(Segment(_xy(a), _xy(b)), flat) for a, b in pairwise(listed) if _xy(a) != _xy(b)]


# --- ellipses and splines -----------------------------------------------------------------------


def _ellipse(entity: DXFGraphic) -> list[Found]:
    major = Vec3(entity.dxf.major_axis)
    _positive(major.magnitude)
    up = Vec3(entity.dxf.extrusion).normalize()
    minor = up.cross(major) * entity.dxf.ratio
    begin = float(entity.dxf.start_param)
    sweep = (float(entity.dxf.end_param) - begin) % TWO_PI
    if sweep < 1e-9 or sweep > TWO_PI - 1e-9:
        sweep = TWO_PI
    flat = abs(major.z) + abs(minor.z) <= FLAT * major.magnitude
    centre = _xy(entity.dxf.center)
    if flat and abs(minor.magnitude - major.magnitude) <= 1e-12 * major.magnitude:
        way = math.copysign(1.0, up.z)
        start = math.atan2(major.y, major.x) + way * begin
        return [(Arc(centre, major.magnitude, start, way * sweep), True)]
    return [(EllipseArc(centre, _xy(major), _xy(minor), begin, begin + sweep), flat)]


def _spline(entity: DXFGraphic) -> list[Found]:
    tool = entity.construction_tool()
    control = list(tool.control_points)
    degree = int(tool.order) - 1
    weights = [float(w) for w in tool.weights()] or [1.0] * len(control)
    knots = [float(k) for k in tool.knots()]
    if len(knots) != len(control) + degree + 1 or min(weights) <= 0.0:
        raise ValueError("knots, weights and control points of a spline do not match")
    if any(b < a for a, b in pairwise(knots)):
        raise ValueError("the knots of a spline fall")
    flat = _level(control)
    if degree == 1:
        return _segments(control)
    places = tuple(_xy(p) for p in control)
    if all(math.dist(p, places[0]) == 0.0 for p in places):
        raise ValueError("a spline has no extent")
    return [(Spline(degree, tuple(knots), places, tuple(weights)), flat)]


_MAKERS: dict[str, Callable[[DXFGraphic], list[Found] | None]] = {
    "LINE": _line,
    "CIRCLE": _circle,
    "ARC": _arc,
    "LWPOLYLINE": _lwpolyline,
    "POLYLINE": _polyline,
    "ELLIPSE": _ellipse,
    "SPLINE": _spline,
}


# --- places -------------------------------------------------------------------------------------


def _plane(ocs: OCS, place: Vec3) -> tuple[Vec3, bool, bool]:
    """A place in world coordinates, whether its plane is turned over, and whether it is flat."""
    up = ocs.uz
    return ocs.to_wcs(Vec3(place)), up.z < 0.0, abs(up.x) + abs(up.y) <= FLAT


def _level(places: Iterable[Vec3]) -> bool:
    """Whether places are at one height."""
    listed = list(places)
    if not listed:
        return True
    heights = [p.z for p in listed]
    xs, ys = [p.x for p in listed], [p.y for p in listed]
    rise = max(heights) - min(heights)
    return bool(rise <= FLAT * max(max(xs) - min(xs), max(ys) - min(ys), 1e-12))


def _xy(place: Vec3) -> Point:
    x, y = float(place.x), float(place.y)
    if not (math.isfinite(x) and math.isfinite(y)):
        raise ValueError("a coordinate is not a number")
    return x, y


def _positive(value: float) -> float:
    if not (math.isfinite(value) and value > 0.0):
        raise ValueError("a radius is not above zero")
    return float(value)
