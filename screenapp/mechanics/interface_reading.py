"""Points on a line between two zones: the elements on the other hand."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from screenapp.mechanics.locate import PointLocator
from screenapp.model.mesh import Mesh

Floats = NDArray[np.float64]
Ints = NDArray[np.int64]

_WAYS = np.array([[np.cos(a), np.sin(a)] for a in np.arange(8) * (np.pi / 4.0) + 0.1])


def other_hands(
    mesh: Mesh, locator: PointLocator, points: Floats, element: Ints, near: float
) -> tuple[Ints, Ints, Floats]:
    """Elements of other zones within `near` [mm] of points that lie in elements at an interface.

    Args:
        points: (n, 2) [mm].
        element: the element of each, -1 for none, (n,).

    Returns:
        index of the point, element and (ξ, η) there; a point may come several times.
    """
    none = np.zeros(0, dtype=np.int64)
    if len(mesh.field_nodes) == mesh.n_nodes:
        return none, none, np.zeros((0, 2))
    beside = np.asarray(np.isin(mesh.quads, mesh.field_nodes[mesh.n_nodes :]).any(axis=1))
    some = np.flatnonzero((element >= 0) & beside[element])
    aside = (points[some, None] + near * _WAYS).reshape(-1, 2)
    found, local = locator.locate(aside)
    who = np.repeat(some, len(_WAYS))
    zone = mesh.element_zones
    differs = (found >= 0) & (zone[found] != zone[element[who]])
    return who[differs], found[differs], local[differs]


def zones_at(
    mesh: Mesh, locator: PointLocator, points: Floats, near: float
) -> list[tuple[int, ...]]:
    """The zones that meet at each point, lowest index first; none off the part."""
    element, _ = locator.locate(points)
    met: list[set[int]] = [{int(mesh.element_zones[e])} if e >= 0 else set() for e in element]
    for who, other, _ in zip(*other_hands(mesh, locator, points, element, near), strict=True):
        met[who].add(int(mesh.element_zones[other]))
    return [tuple(sorted(zones)) for zones in met]
