"""Elastic strains straight from an element's own displacements, at any local points.

No averaging and no recovery: what the strain-displacement matrix of the element gives, less what
the temperature would give it if it were free, so that Hooke's law makes stresses of it.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from screenapp.mechanics import shape_functions
from screenapp.mechanics.thermal import strains_from
from screenapp.model.mesh import NODES_OF_ELEMENT, Mesh
from screenapp.model.solution import Solution

Floats = NDArray[np.float64]
Ints = NDArray[np.int64]

CHUNK = 4000  # elements at a time: keeps the working arrays inside the processor's cache


def element_strains(
    mesh: Mesh, solution: Solution, points: Floats, elements: Ints | None = None
) -> Floats:
    """Strains εx, εy, γxy of all cases at the same local points of every element.

    Args:
        points: (ξ, η), (n_points, 2).
        elements: which elements; None for all.

    Returns:
        (n_cases, n_elements, n_points, 3).
    """
    chosen = np.arange(mesh.n_elements) if elements is None else elements
    n = NODES_OF_ELEMENT[solution.element]
    slopes = shape_functions.derivatives(n, points)[None]  # (1, points, n, 2)
    strains = np.empty((len(solution.displacements), len(chosen), len(points), 3))
    for begin in range(0, len(chosen), CHUNK):
        part = slice(begin, begin + CHUNK)
        strains[:, part] = _strains(mesh, solution, chosen[part], slopes, points[None])
    return strains


def strains_at(mesh: Mesh, solution: Solution, elements: Ints, points: Floats) -> Floats:
    """Strains of all cases, each at its own local point of its own element.

    Args:
        elements: (n,).
        points: (ξ, η) for each of them, (n, 2).

    Returns:
        (n_cases, n, 3).
    """
    n = NODES_OF_ELEMENT[solution.element]
    slopes = shape_functions.derivatives(n, points)[:, None]  # (n, 1, nodes, 2)
    return _strains(mesh, solution, elements, slopes, points[:, None])[:, :, 0]


def element_geometry(mesh: Mesh, solution: Solution, points: Floats) -> Floats:
    """Determinant of the Jacobian of every element at local points, (n_elements, n_points)."""
    n = NODES_OF_ELEMENT[solution.element]
    slopes = shape_functions.derivatives(n, points)[None]
    return _invert(_gradients(mesh.nodes[mesh.quads[:, :n]], slopes))[1]


def _strains(
    mesh: Mesh, solution: Solution, elements: Ints, slopes: Floats, points: Floats
) -> Floats:
    """(n_cases, n_elements, n_points, 3); the first axis of slopes and points may be 1."""
    quads = mesh.quads[elements, : slopes.shape[2]]
    inverse, det = _invert(_gradients(mesh.nodes[quads], slopes))
    found = np.empty((len(solution.displacements), *det.shape, 3))
    for case, displacements in enumerate(solution.displacements):
        gradient = _gradients(displacements[quads], slopes) @ inverse
        if solution.internal_modes is not None:
            modes = solution.internal_modes[case, elements]
            gradient += _mode_gradients(mesh.nodes[quads], modes, points, det)
        found[case] = np.stack(
            [gradient[..., 0, 0], gradient[..., 1, 1], gradient[..., 0, 1] + gradient[..., 1, 0]],
            axis=-1,
        )
    if solution.free_strains is not None:
        shapes = shape_functions.values(slopes.shape[2], points.reshape(-1, 2))
        at = shapes.reshape(*points.shape[:2], -1) @ mesh.nodes[quads]
        found -= strains_from(solution.free_strains[:, elements], at)
    return found


def _gradients(nodal: Floats, slopes: Floats) -> Floats:
    """Local gradients (elements, points, 2, 2) of nodal vectors (elements, n, 2)."""
    n_points, n = slopes.shape[1:3]
    flat = np.swapaxes(slopes, 1, 2).reshape(len(slopes), n, 2 * n_points)
    g = np.swapaxes(nodal, 1, 2) @ flat  # (elements, 2, points * 2)
    return np.swapaxes(g.reshape(-1, 2, n_points, 2), 1, 2)


def _mode_gradients(nodes: Floats, modes: Floats, points: Floats, det: Floats) -> Floats:
    """du_i/dx_j of the incompatible modes 1 - ξ² and 1 - η², (elements, points, 2, 2).

    Their slopes are carried over by the Jacobian at the centre, times its determinant there over
    the one here, so that the patch test holds (Taylor, Beresford & Wilson 1976, from memory).
    """
    centre = shape_functions.derivatives(4, np.zeros((1, 2)))[None]
    inverse, det0 = _invert(_gradients(nodes, centre))
    slopes = np.zeros((*points.shape[:2], 2, 2))  # mode, direction
    slopes[..., 0, 0] = -2.0 * points[..., 0]
    slopes[..., 1, 1] = -2.0 * points[..., 1]
    amplitudes = np.swapaxes(modes.reshape(-1, 1, 2, 2), 2, 3)  # (elements, 1, u or v, mode)
    return np.asarray((amplitudes @ slopes) @ inverse * (det0 / det)[..., None, None])


def _invert(jacobian: Floats) -> tuple[Floats, Floats]:
    """Inverse and determinant of (..., 2, 2)."""
    a, b = jacobian[..., 0, 0], jacobian[..., 0, 1]
    c, d = jacobian[..., 1, 0], jacobian[..., 1, 1]
    det = a * d - b * c
    adjugate = np.stack([np.stack([d, -b], axis=-1), np.stack([-c, a], axis=-1)], axis=-2)
    return adjugate / det[..., None, None], det
