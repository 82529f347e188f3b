"""The thin walls of a part: how many elements lie across each, and how much too stiff plain
bilinear quads of that number and aspect would be where it bends."""

from __future__ import annotations

import math

import numpy as np
from numpy.typing import NDArray

from screenapp.mechanics.wall_bending import bending_overstiffness
from screenapp.meshing.across import elements_between
from screenapp.model.features import place_name
from screenapp.model.findings import WallGauge
from screenapp.model.ligaments import Ligament, ligaments, narrowest_ligament
from screenapp.model.mesh import Mesh
from screenapp.model.part import Part
from screenapp.model.shape import Shape

THIN = 0.25
"""Walls narrower than this share of the part count as thin."""

MOST_WALLS = 6


def thin_walls(shape: Shape) -> list[Ligament]:
    """The thin walls of a part, narrowest first, at most `MOST_WALLS`.

    The neighbours of a feature mostly face what it faces: of ligaments whose middles lie within
    their width of one another only the narrowest counts.
    """
    kept: list[Ligament] = []
    for wall in ligaments(shape, THIN * shape.size):
        if all(math.dist(wall.at, other.at) > wall.width for other in kept):
            kept.append(wall)
        if len(kept) == MOST_WALLS:
            break
    return kept


def wall_gauges(part: Part, shape: Shape, mesh: Mesh) -> tuple[WallGauge, ...]:
    """The gauge of each thin wall on a mesh."""
    walls = thin_walls(shape)
    return tuple(
        _gauge(part, wall, len(chain), _length_along(mesh, chain, wall))
        for wall, chain in zip(walls, elements_between(mesh, shape, walls), strict=True)
    )


def expected_gauge(part: Part, shape: Shape) -> WallGauge | None:
    """The gauge of the narrowest wall by the part's wishes alone, before any mesh: as many square
    elements across as are asked for, or as the largest side allows; None where nothing faces."""
    wall = narrowest_ligament(shape)
    if wall is None:
        return None
    layers = max(1, part.mesh.across)
    if part.mesh.size is not None:
        layers = max(layers, math.ceil(wall.width / part.mesh.size))
    return _gauge(part, wall, layers, wall.width / layers)


def _gauge(part: Part, wall: Ligament, layers: int, along: float) -> WallGauge:
    """The gauge of a wall with `layers` elements across that are `along` [mm] long."""
    aspect = along / (wall.width / layers)
    poisson = part.material.poissons_ratio if part.material is not None else 0.3
    one, two = (place_name(part, id_) for id_ in wall.between)
    return WallGauge(
        wall.between,
        f"{one} and {two}",
        wall.width,
        wall.ends,
        layers,
        aspect,
        bending_overstiffness(poisson, aspect, layers, part.wall.state),
    )


def _length_along(mesh: Mesh, chain: NDArray[np.int64], wall: Ligament) -> float:
    """Mean length of elements along a wall [mm].

    The corners of a parallelogram with half sides g₁, g₂ lie at ± g₁ ± g₂ from its middle, so the
    mean square of their distances along the wall is that of the rectangle which stands for it.
    """
    (ax, ay), (bx, by) = wall.ends
    along = np.array([ay - by, bx - ax]) / math.hypot(bx - ax, by - ay)
    corners = mesh.nodes[mesh.quads[chain, :4]]
    from_middle = (corners - corners.mean(axis=1, keepdims=True)) @ along
    return float(2.0 * np.sqrt((from_middle**2).mean(axis=1)).mean())
