"""How far the solution's own stresses are from the recovered ones: what the mesh still lacks.

The estimate of Zienkiewicz & Zhu 1987 (Int. J. Num. Meth. Engng 24, from memory): the energy of
the difference between the recovered field and the element's own.
"""

from __future__ import annotations

from collections.abc import Callable

import numpy as np
from numpy.typing import NDArray

from screenapp.mechanics import shape_functions
from screenapp.mechanics.element_walls import hooke_of
from screenapp.mechanics.quadrature import gauss_square
from screenapp.mechanics.strain_displacement import CHUNK, element_geometry, element_strains
from screenapp.model.mesh import Mesh
from screenapp.model.solution import Solution, von_mises

Floats = NDArray[np.float64]
Ints = NDArray[np.int64]


def element_nodal(mesh: Mesh, nodal: Floats, side: Floats) -> Floats:
    """The recovered field at the nine nodes of every element, (n_cases, n_elements, 9, 3) [MPa].

    At a sharp corner each element takes the value of its own side.
    """
    own = nodal[:, mesh.field_quads]
    rim, values = rim_nodal(mesh, nodal, side)
    own[:, rim] = values
    return own


def rim_nodal(mesh: Mesh, nodal: Floats, side: Floats) -> tuple[Ints, Floats]:
    """The elements with a side on the boundary and the recovered field at their nine nodes.

    An element with both sides of a sharp corner takes the mean of the two at the corner.

    Returns:
        elements (m,) and stresses (n_cases, m, 9, 3) [MPa].
    """
    element, local = mesh.sides.T
    rim, row = np.unique(element, return_inverse=True)
    places = np.stack([local, 4 + local, (local + 1) % 4], axis=1)
    count = np.zeros((len(rim), 9))
    np.add.at(count, (row[:, None], places), 1.0)
    own = nodal[:, mesh.field_quads[rim]]
    given = count > 0
    for case in range(len(own)):
        total = np.zeros((len(rim), 9, 3))
        np.add.at(total, (row[:, None], places), side[case])
        own[case][given] = total[given] / count[given][:, None]
    return rim, own


def energy_error(
    mesh: Mesh,
    solution: Solution,
    hooke: Floats,
    nodal: Floats,
    side: Floats,
    thickness: Floats | float = 1.0,
) -> Floats:
    """Energy error of each element relative to the whole strain energy, (n_cases, n_elements).

    The squares over the elements add up to the square of the relative error of the whole; a case
    without any stress gives zeros.

    Args:
        hooke: (3, 3) or one for each element (n_elements, 3, 3) [MPa].
        nodal: recovered stresses, (n_cases, n_fields, 3) [MPa].
        side: recovered edge stresses, (n_cases, n_sides, 3, 3) [MPa].
        thickness: of each element [mm], (n_elements,), or one for all.
    """
    points, weights = gauss_square(3)
    linear = solution.element.startswith("quad4")
    shapes = shape_functions.values(4 if linear else 9, points)
    compliance = np.asarray(np.linalg.inv(hooke), dtype=np.float64)
    recovered = element_nodal(mesh, nodal, side)[:, :, : shapes.shape[1]]
    volume = element_geometry(mesh, solution, points) * weights
    volume *= np.broadcast_to(thickness, (mesh.n_elements,))[:, None]
    missed = np.empty((len(nodal), mesh.n_elements))
    stored = np.empty_like(missed)
    for begin in range(0, mesh.n_elements, CHUNK):
        some = np.arange(begin, min(begin + CHUNK, mesh.n_elements))
        own = element_strains(mesh, solution, points, some) @ hooke_of(hooke, some)
        gap, yielding = shapes @ recovered[:, some] - own, hooke_of(compliance, some)
        missed[:, some] = (((gap @ yielding) * gap).sum(axis=-1) * volume[some]).sum(axis=-1)
        stored[:, some] = (((own @ yielding) * own).sum(axis=-1) * volume[some]).sum(axis=-1)
    whole = stored.sum(axis=1, keepdims=True) + missed.sum(axis=1, keepdims=True)
    return np.sqrt(missed / np.where(whole > 0.0, whole, 1.0))


def pointwise_jump(
    mesh: Mesh,
    own: Floats,
    nodal: Floats,
    side: Floats,
    size: Callable[[Floats], Floats] = von_mises,
    split: Ints | None = None,
) -> Floats:
    """Largest gap at each node between the recovered stress and the elements' own, by a measure.

    Args:
        own: each element's stress carried to its nine nodes, (n_cases, n_elements, 9, 3) [MPa].
        nodal: recovered stresses, (n_cases, n_fields, 3) [MPa].
        side: recovered edge stresses, (n_cases, n_sides, 3, 3) [MPa].
        size: the measure of such stresses (n_cases, n_elements, 9, 3), von Mises in plane stress
            if not said.
        split: nodes of split corners (`corner_stress.split_corners`), where the elements' own
            stress is wrong in every mesh: those at such a corner do not count, and the corner takes
            the largest gap of their other corners.

    Returns:
        (n_cases, n_fields) [MPa], in the numbers of `Mesh.field_quads`.
    """
    recovered = size(element_nodal(mesh, nodal, side))
    gap = np.abs(size(own) - recovered)
    jump = np.zeros((len(nodal), len(mesh.field_nodes)))
    at_split = np.isin(mesh.quads[:, :4], [] if split is None else split)
    blind = at_split.any(axis=1)
    quads = mesh.field_quads
    for case in range(len(nodal)):
        np.maximum.at(jump[case], quads[~blind].ravel(), gap[case, ~blind].ravel())
        around = np.where(at_split[blind], 0.0, jump[case, quads[blind, :4]]).max(axis=1)
        corners = quads[blind, :4][at_split[blind]]
        np.maximum.at(jump[case], corners, np.repeat(around, at_split[blind].sum(axis=1)))
    return jump
