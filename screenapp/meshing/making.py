"""From shape and sizes to a checked mesh, with other ways tried when the first one is not good.

Runs in the worker process.  The ways, in order: the usual recipe; smaller elements where the
first mesh was poor, twice; two other triangulators; all triangles cut in three without joining
any.  The first mesh that passes all checks with a good worst Jacobian is taken, else the best one
that passes.  What went wrong and what was done instead stands in `Mesh.fallback`.
"""

from __future__ import annotations

import math
from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray

from screenapp.meshing.boundary_points import joint_angles, place_points
from screenapp.meshing.checks import connection_faults, find_faults, measure_quality
from screenapp.meshing.gmsh_quads import Recipe, fill
from screenapp.meshing.nine_nodes import build_mesh, side_middles
from screenapp.meshing.sewing import sew
from screenapp.meshing.size_field import SizeField, with_spots
from screenapp.meshing.smoothing import smooth
from screenapp.model.errors import MeshingError
from screenapp.model.mesh import Mesh
from screenapp.model.shape import Shape

Floats = NDArray[np.float64]

GOOD = 0.2
"""Worst scaled Jacobian at which no other way is tried."""

SHARE_OF_TIP = 0.8
"""At a corner of the part sharper than an element's good angle, this share of its sine is good."""


USUAL = Recipe()


@dataclass(frozen=True)
class Way:
    """One way of meshing.

    Attributes:
        words: its name in the record.
        recipe: how the quads are made.
        refine: whether the elements are made smaller where the last attempt was poor.
    """

    words: str
    recipe: Recipe = USUAL
    refine: bool = False


WAYS = (
    Way("the usual way"),
    Way("smaller elements at the poor places", refine=True),
    Way("smaller elements at the poor places again", refine=True),
    Way("another triangulation", Recipe(algorithm="frontal")),
    Way("a third triangulation", Recipe(algorithm="delaunay")),
    Way("triangles cut in three", Recipe(join_quality=2.0)),
)


@dataclass(frozen=True, eq=False)
class Attempt:
    """A mesh and what is wrong with it.

    Attributes:
        mesh: with its worst Jacobian.
        faults: sentences; empty if it passes.
        poor: middles of the poor elements [mm], (k, 2).
    """

    mesh: Mesh
    faults: list[str]
    poor: Floats


def make_mesh(shape: Shape, sizes: SizeField, ways: tuple[Way, ...] = WAYS) -> Mesh:
    """Mesh the shape.

    Raises:
        MeshingError: no way gave a mesh that passes the checks.
    """
    good = good_enough(shape)
    best: Mesh | None = None
    troubles: list[str] = []
    poor = np.empty((0, 2))
    for way in ways:
        if way.refine:
            if not len(poor):
                continue
            sizes = with_spots(sizes, poor, 0.5 * sizes.at(poor))
        try:
            found = _attempt(shape, sizes, way.recipe, good)
        except (RuntimeError, ValueError) as error:
            troubles.append(f"{way.words}: {error}")
            poor = np.empty((0, 2))
            continue
        poor, worst = found.poor, found.mesh.worst_jacobian
        if not found.faults and (best is None or worst > best.worst_jacobian):
            words = f"{'; '.join(troubles)}; taken: {way.words}" if troubles else ""
            best = replace(found.mesh, fallback=words)
        if not found.faults and worst >= good:
            break
        trouble = found.faults[0] if found.faults else f"worst scaled Jacobian {worst:.2f}"
        troubles.append(f"{way.words}: {trouble}")
    if best is None:
        raise MeshingError(
            f"no acceptable mesh was found ({troubles[0]})",
            "ask for smaller elements, or remove very short edges and very thin gaps",
        )
    return best


def good_enough(shape: Shape) -> float:
    """The worst scaled Jacobian that is good for a part: less than usual if a corner is sharp."""
    sharpest = min(float(joint_angles(part.shape).min()) for part in shape.parts)
    sharpest = min(sharpest, 0.5 * math.pi)
    return min(GOOD, SHARE_OF_TIP * math.sin(sharpest))


def _attempt(shape: Shape, sizes: SizeField, recipe: Recipe, good: float) -> Attempt:
    """One mesh with its checks.

    Raises:
        RuntimeError: gmsh failed.
        ValueError: what it made does not fit the boundary.
        MeshingError: the boundary cannot be divided.
    """
    meshes: list[Mesh] = []
    faults: list[str] = []
    poor: list[Floats] = []
    boundaries = place_points(shape, sizes.scaled(recipe.size_factor))
    for part, boundary in zip(shape.parts, boundaries, strict=True):
        linear = fill(boundary, sizes, recipe)
        middles = side_middles(part.shape, boundary)
        points = smooth(linear.points, linear.quads, boundary.following, middles)
        mesh = build_mesh(part.shape, boundary, points, linear.quads)
        quality = measure_quality(mesh)
        meshes.append(replace(mesh, worst_jacobian=quality.worst))
        poor.append(mesh.nodes[mesh.quads[quality.scaled < good, 8]])
        faults += find_faults(mesh, part.shape, quality)
    whole = sew(shape, meshes)
    if len(meshes) > 1 and not faults:
        faults += connection_faults(whole, len(shape.loops))
    return Attempt(whole, faults, np.concatenate(poor))
