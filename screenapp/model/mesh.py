"""The mesh record: nine-node quads with curved boundary edges.

Local numbering of a quad (counter-clockwise; ξ to the right, η upwards)::

        3 ---- 6 ---- 2
        |             |        side i runs from corner i to corner (i + 1) % 4,
        7      8      5        its middle node is 4 + i, the centre node is 8
        |             |
        0 ---- 4 ---- 1

The same mesh serves every element: the bilinear quads use columns 0..3, the 8-node quad 0..7.
Interior sides are straight with their middle node at the middle; only sides on the boundary and on
interfaces between zones are curved; the centre node is the transfinite blend of the eight others.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

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
        zones: index in `Part.zones` of each element's zone, -1 for the wall itself,
            (n_elements,); None where the part has no zones.
    """

    nodes: Floats
    quads: Ints
    sides: Ints
    side_piece: Ints
    side_t: Floats
    corner_nodes: dict[str, int]
    worst_jacobian: float
    fallback: str = ""
    zones: Ints | None = None

    @cached_property
    def element_zones(self) -> Ints:
        """The zone of each element, -1 for the wall itself, (n_elements,)."""
        return np.full(len(self.quads), -1) if self.zones is None else self.zones

    @cached_property
    def field_quads(self) -> Ints:
        """As `quads`, but for fields that jump between zones: a node where several zones meet has
        a number in each; (n_elements, 9).

        In the first of them (by index) it keeps its own number; the others follow `n_nodes`.
        """
        return self._fields[0]

    @cached_property
    def field_nodes(self) -> Ints:
        """The node behind each number of `field_quads`, (n_fields,); the first are 0, 1, 2 ..."""
        return self._fields[1]

    @cached_property
    def field_zones(self) -> Ints:
        """The zone of each number of `field_quads`, -1 for the wall itself, (n_fields,)."""
        zones = np.full(len(self.field_nodes), -1)
        zones[self.field_quads] = self.element_zones[:, None]
        return zones

    def paintable(self, values: Floats) -> Floats:
        """Values of a field (n_fields,) as they are drawn: at the nodes (n_nodes,), or where zones
        meet at the nodes of each element (n_elements, 9)."""
        return values if len(values) == self.n_nodes else np.asarray(values[self.field_quads])

    @cached_property
    def _fields(self) -> tuple[Ints, Ints]:
        nodes = np.arange(self.n_nodes)
        if self.zones is None or not np.ptp(self.zones):
            return self.quads, nodes
        n = self.n_nodes
        key = (self.zones[:, None] + 1) * n + self.quads
        pairs, number = np.unique(key, return_inverse=True)  # zone by zone
        node = pairs % n
        extra = np.ones(len(pairs), dtype=bool)
        extra[np.unique(node, return_index=True)[1]] = False
        field = np.where(extra, n - 1 + np.cumsum(extra), node)
        return field[number].reshape(self.quads.shape), np.concatenate([nodes, node[extra]])

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

    @property
    def side_fields(self) -> Ints:
        """As `side_nodes`, in the numbers of `field_quads`, (n_sides, 3)."""
        element, side = self.sides.T
        places = np.stack([side, 4 + side, (side + 1) % 4], axis=1)
        return np.asarray(self.field_quads[element[:, None], places])

    def sides_on(self, pieces: tuple[int, ...]) -> Ints:
        """Indices of the boundary sides that lie on the given pieces of the shape."""
        return np.flatnonzero(np.isin(self.side_piece, pieces))

    @property
    def element_sizes(self) -> Floats:
        """Square root of each element's area by its corners [mm], (n_elements,)."""
        p = self.nodes[self.quads[:, :4]]
        d1, d2 = p[:, 2] - p[:, 0], p[:, 3] - p[:, 1]
        return np.sqrt(np.maximum(0.5 * (d1[:, 0] * d2[:, 1] - d1[:, 1] * d2[:, 0]), 0.0))
