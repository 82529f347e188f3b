"""Principal directions at the middle of every element: arrays only."""

from __future__ import annotations

import numpy as np

from screenapp.model.findings import Fields
from screenapp.model.solution import principal
from screenapp.window.painted import Crosses, Floats, Ints


def crosses_of(fields: Fields, case: int, points: Floats, governing: Ints | None = None) -> Crosses:
    """The crosses of a case, or at each place of the case that governs there.

    Args:
        points: nodes as drawn [mm], (n_nodes, 2).
        governing: index of the case at every node, (n_nodes,) or (n_elements, 9).
    """
    mesh = fields.mesh
    middle = mesh.field_quads[:, 8]
    if governing is None:
        stress = fields.stress.nodal[case][middle]
    else:
        of = governing[mesh.quads[:, 8]] if governing.ndim == 1 else governing[:, 8]
        stress = fields.stress.nodal[of, middle]
    one, two, angle = principal(stress)
    along = np.stack([np.cos(angle), np.sin(angle)], axis=-1)
    across = np.stack([-along[:, 1], along[:, 0]], axis=-1)
    return Crosses(
        points[mesh.quads[:, 8]],
        np.stack([one, two], axis=-1),
        np.stack([along, across], axis=1),
    )
