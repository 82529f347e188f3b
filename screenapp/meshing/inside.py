"""Which points lie in the material."""

from __future__ import annotations

import numpy as np
import shapely
from numpy.typing import NDArray

from screenapp.model.shape import Shape

Floats = NDArray[np.float64]


def polygon_of(shape: Shape, tolerance: float) -> shapely.Polygon:
    """The part as a polygon, arcs flattened to a sagitta of `tolerance` [mm]."""
    rings = [shape.polyline(k, tolerance) for k in range(len(shape.loops))]
    return shapely.Polygon(rings[0], rings[1:])


def inside_shape(shape: Shape, points: Floats) -> NDArray[np.bool_]:
    """True for the points (n, 2) in the material, to 1e-4 of the part's size at arcs."""
    polygon = polygon_of(shape, 1e-4 * shape.size)
    shapely.prepare(polygon)
    return np.asarray(shapely.contains_xy(polygon, points[:, 0], points[:, 1]))
