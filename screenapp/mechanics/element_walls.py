"""Thickness and elasticity of every element: its zone's, or the wall's."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from screenapp.mechanics.elasticity import axis_of, constitutive_matrix, zone_material
from screenapp.model.mesh import Mesh
from screenapp.model.part import Part

Floats = NDArray[np.float64]
Ints = NDArray[np.int64]


def element_thickness(part: Part, mesh: Mesh) -> Floats:
    """Thickness of each element [mm], (n_elements,)."""
    return _by_zone(part, mesh, [part.wall_of(z).thickness for z in _zones(part)])


def element_hooke(part: Part, mesh: Mesh) -> Floats:
    """The matrix that takes strains to stresses [MPa]: (3, 3) where one serves all elements, else
    (n_elements, 3, 3).

    Raises:
        SolvingError: the wall or a zone has no usable material.
    """
    state = part.wall.state
    every = np.array(
        [constitutive_matrix(zone_material(part, z), state, axis_of(part, z)) for z in _zones(part)]
    )
    if (every == every[0]).all():
        return np.asarray(every[0])
    return np.asarray(every[mesh.element_zones + 1])


def hooke_of(hooke: Floats, elements: Ints | slice) -> Floats:
    """The matrix or matrices of some elements, ready to be multiplied by stresses or strains
    (..., n, k, 3) from the right: (3, 3) or (n, 3, 3)."""
    return hooke if hooke.ndim == 2 else np.asarray(hooke[elements])


def _zones(part: Part) -> range:
    return range(-1, len(part.zones))


def _by_zone(part: Part, mesh: Mesh, values: list[float]) -> Floats:
    return np.asarray(np.array(values, dtype=float)[mesh.element_zones + 1])
