"""How displacements run along the boundary sides of elements."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from screenapp.mechanics.kernels import CARRIED_NODES
from screenapp.mechanics.shape_functions import line_slopes, line_values
from screenapp.model.mesh import Mesh
from screenapp.model.part import ElementName

Floats = NDArray[np.float64]
Ints = NDArray[np.int64]


def carried_sides(
    mesh: Mesh, element: ElementName, sides: Ints, s: Floats
) -> tuple[Ints, Floats, Floats]:
    """Some sides as an element interpolates them: straight with four carried nodes, else quadratic.

    Args:
        s: parameters along a side, -1 to 1, (points,).

    Returns:
        The sides' nodes (n_sides, m), and their shape functions and these' derivatives by `s`,
        (points, m) each; m is 2 or 3.
    """
    if CARRIED_NODES[element] == 4:
        shapes = np.stack([0.5 * (1.0 - s), 0.5 * (1.0 + s)], axis=1)
        return mesh.side_nodes[sides][:, ::2], shapes, np.tile([-0.5, 0.5], (len(s), 1))
    return mesh.side_nodes[sides], line_values(s), line_slopes(s)
