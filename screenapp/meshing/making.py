"""From shape and sizes to a checked mesh, with other ways tried when the first one is not good.

Runs in the worker process.  The ways, in order: the measured recipe; smaller elements round the
poor ones; another triangulator; all triangles cut in three without joining any.  The first mesh
that passes all checks with a good worst Jacobian is taken, else the best one that passes.
"""

from __future__ import annotations

import math
from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray

from screenapp.meshing.boundary_points import joint_angles, place_points
from screenapp.meshing.checks import find_faults, measure_quality
from screenapp.meshing.gmsh_quads import Recipe, fill
from screenapp.meshing.nine_nodes import build_mesh, side_middles
from screenapp.meshing.size_field import SizeField
from screenapp.meshing.smoothing import smooth
from screenapp.model.errors import MeshingError
from screenapp.model.mesh import Mesh
from screenapp.model.shape import Shape

Floats = NDArray[np.float64]

GOOD = 0.2
"""Worst scaled Jacobian at which no other way is tried."""


@dataclass(frozen=True)
class Way:
    """One attempt: its words for the record, the recipe, and whether to refine at poor spots."""

    words: str
    recipe: Recipe


WAYS = (
    Way("the usual way", Recipe()),
    Way("elements a tenth smaller", Recipe(size_factor=0.9)),
    Way("another triangulation", Recipe(algorithm="frontal")),
    Way("a third triangulation", Recipe(algorithm="delaunay", size_factor=0.95)),
    Way("triangles cut in three", Recipe(join_quality=2.0)),
)


def make_mesh(shape: Shape, sizes: SizeField) -> Mesh:
    """Mesh the shape.

    Raises:
        MeshingError: no way gave a mesh that passes the checks.
    """
    good = min(GOOD, 0.8 * math.sin(min(float(joint_angles(shape).min()), math.pi / 2.0)))
    best: Mesh | None = None
    troubles: list[str] = []
    for way in WAYS:
        try:
            mesh = _attempt(shape, sizes, way.recipe)
        except (RuntimeError, ValueError) as error:
            troubles.append(f"{way.words}: {error}")
            continue
        if best is None or mesh.worst_jacobian > best.worst_jacobian:
            words = f"{'; '.join(troubles)}; taken: {way.words}" if troubles else ""
            best = replace(mesh, fallback=words)
        if mesh.worst_jacobian >= good:
            break
        troubles.append(f"{way.words}: worst scaled Jacobian {mesh.worst_jacobian:.2f}")
    if best is None:
        raise MeshingError(
            f"no acceptable mesh was found ({troubles[0]})",
            "ask for smaller elements, or remove very short edges and very thin gaps",
        )
    return best


def _attempt(shape: Shape, sizes: SizeField, recipe: Recipe) -> Mesh:
    """One mesh, checked.

    Raises:
        RuntimeError: gmsh failed, or the mesh does not pass.
        ValueError: the mesh does not fit its boundary.
    """
    boundary = place_points(shape, sizes.scaled(recipe.size_factor))
    linear = fill(boundary, sizes, recipe)
    middles = side_middles(shape, boundary)
    points = smooth(linear.points, linear.quads, boundary.following, middles)
    mesh = build_mesh(shape, boundary, points, linear.quads)
    quality = measure_quality(mesh)
    faults = find_faults(mesh, shape, quality)
    if faults:
        raise RuntimeError(faults[0])
    return replace(mesh, worst_jacobian=quality.worst)
