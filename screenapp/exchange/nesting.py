"""Which ring lies in which: the outer ones are outlines, those right inside them are holes."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
import shapely

from screenapp.exchange.rings import Ring, boxes
from screenapp.model.curves import Arc
from screenapp.model.part import Point


@dataclass(frozen=True)
class Nest:
    """An outline and what lies right inside it, by the numbers of the rings.

    Attributes:
        outline: the outer ring.
        holes: the rings in it that lie in no other one of it.
        bounds: smallest x, y, largest x, y [mm].
        depth: how many rings it lies in itself: 0, or 2, 4 ... for a part inside a hole.
    """

    outline: int
    holes: tuple[int, ...]
    bounds: tuple[float, float, float, float]
    depth: int

    @property
    def middle(self) -> Point:
        """The middle of its bounds [mm]."""
        x0, y0, x1, y1 = self.bounds
        return 0.5 * (x0 + x1), 0.5 * (y0 + y1)


def nests_of(rings: list[Ring], sagitta: float) -> list[Nest]:
    """Every ring at an even depth with its holes, the largest first.

    Args:
        rings: closed, not crossing (those that cross are sorted by their first points).
        sagitta: how far flattened arcs may lie off [mm].
    """
    if not rings:
        return []
    shapes = [shapely.Polygon(_points(ring, sagitta)) for ring in rings]
    areas = np.array([shape.area for shape in shapes])
    parents: list[list[int]] = [[] for _ in rings]
    tree = shapely.STRtree(shapes)
    probes = [_probes(ring) for ring in rings]
    for inner, shape in enumerate(shapes):
        shapely.prepare(shape)
        for outer in tree.query(shapely.Point(probes[inner][0])).tolist():
            if areas[outer] <= areas[inner] or outer == inner:
                continue
            within = shapely.contains_xy(shapes[outer], *np.array(probes[inner]).T)
            if int(np.sum(within)) > len(within) // 2:
                parents[inner].append(outer)
    depth = [len(p) for p in parents]
    own = [min(p, key=lambda k: areas[k]) if p else None for p in parents]
    holes: dict[int, list[int]] = {}
    for inner, outer in enumerate(own):
        if outer is not None and depth[inner] % 2:
            holes.setdefault(outer, []).append(inner)
    found = [
        Nest(k, tuple(holes.get(k, ())), _bounds(rings[k]), depth[k])
        for k in range(len(rings))
        if depth[k] % 2 == 0
    ]
    return sorted(found, key=lambda nest: (-areas[nest.outline], nest.bounds))


def _bounds(ring: Ring) -> tuple[float, float, float, float]:
    found = boxes(ring)
    (x0, y0), (x1, y1) = found[:, :2].min(axis=0).tolist(), found[:, 2:].max(axis=0).tolist()
    return x0, y0, x1, y1


def meets(ring: Ring, other: Ring, sagitta: float) -> bool:
    """Whether two rings have area in common."""
    one, two = (shapely.make_valid(shapely.Polygon(_points(r, sagitta))) for r in (ring, other))
    return float(one.intersection(two).area) > 0.0


def _points(ring: Ring, sagitta: float) -> np.ndarray[tuple[int, ...], np.dtype[np.float64]]:
    rows = []
    for curve in ring:
        n = 1
        if isinstance(curve, Arc):
            step = 2.0 * np.arccos(max(0.0, 1.0 - sagitta / curve.radius))
            n = max(3, int(np.ceil(abs(curve.sweep) / max(float(step), 0.02))))
        rows.append(curve.point(np.linspace(0.0, 1.0, n + 1)[:-1]))
    points = np.concatenate(rows)
    return points if len(points) > 2 else np.concatenate([points, points[:1], points[:1]])


def _probes(ring: Ring) -> list[Point]:
    """A few places on the ring: most of them say what it lies in."""
    chosen = [ring[i] for i in sorted({0, len(ring) // 3, (2 * len(ring)) // 3})]
    places = [tuple(curve.point(t).tolist()) for curve in chosen for t in (0.17, 0.5, 0.83)]
    return places
