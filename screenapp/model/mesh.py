"""The mesh record: nine-node quads with curved boundary edges.

Local numbering of a quad (counter-clockwise; ξ to the right, η upwards)::

        3 ---- 6 ---- 2
        |             |        side i runs from corner i to corner (i + 1) % 4,
        7      8      5        its middle node is 4 + i, the centre node is 8
        |             |
        0 ---- 4 ---- 1

The same mesh serves every element: the bilinear quads use columns 0..3, the 8-node quad 0..7.
Interior sides are straight with their middle node at the middle; only boundary sides are curved;
the centre node is the transfinite blend of the eight others.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from screenapp.model.part import ElementName

Floats = NDArray[np.float64]
Ints = NDArray[np.int64]

NODES_OF_ELEMENT: dict[ElementName, int] = {
    "quad4": 4,
    "quad4-incompatible": 4,
    "quad8": 8,
    "quad9": 9,
}


@dataclass(frozen=True, eq=False)
class Mesh:
    """An all-quad mesh of a part.

    Attributes:
        nodes: coordinates [mm], (n_nodes, 2).
        quads: node indices, (n_elements, 9), numbered as in the module's sketch.
        sides: boundary sides as (element, side), (n_sides, 2); material on the left, ordered along
            the boundary: loop by loop, piece by piece of `Shape.curves`.
        side_piece: index into `Shape.curves` for each boundary side, (n_sides,).
        side_t: parameters of both ends of each side on its piece, (n_sides, 2), rising.
        corner_nodes: node index of each sharp corner, by corner id.
        worst_jacobian: the smallest scaled Jacobian at a corner or Gauss point.
        fallback: how a first attempt failed and what was done instead; empty if nothing failed.
    """

    nodes: Floats
    quads: Ints
    sides: Ints
    side_piece: Ints
    side_t: Floats
    corner_nodes: dict[str, int]
    worst_jacobian: float
    fallback: str = ""

    @property
    def n_nodes(self) -> int:
        """Number of nodes of the nine-node mesh."""
        return len(self.nodes)

    @property
    def n_elements(self) -> int:
        """Number of quads."""
        return len(self.quads)

    @property
    def side_nodes(self) -> Ints:
        """Nodes (start, middle, end) of each boundary side, (n_sides, 3)."""
        element, side = self.sides.T
        return np.stack(
            [
                self.quads[element, side],
                self.quads[element, 4 + side],
                self.quads[element, (side + 1) % 4],
            ],
            axis=1,
        )

    def sides_on(self, pieces: tuple[int, ...]) -> Ints:
        """Indices of the boundary sides that lie on the given pieces of the shape."""
        return np.flatnonzero(np.isin(self.side_piece, pieces))

    @property
    def element_sizes(self) -> Floats:
        """Square root of each element's area by its corners [mm], (n_elements,)."""
        p = self.nodes[self.quads[:, :4]]
        d1, d2 = p[:, 2] - p[:, 0], p[:, 3] - p[:, 1]
        return np.sqrt(np.maximum(0.5 * (d1[:, 0] * d2[:, 1] - d1[:, 1] * d2[:, 0]), 0.0))
