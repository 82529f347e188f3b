"""Where supports and loads stand on a mesh: the sides and corner nodes of a named feature."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from screenapp.model.edge_parts import pieces_under
from screenapp.model.errors import Fault, InvalidPartError
from screenapp.model.mesh import Mesh
from screenapp.model.part import Part, PlacedLoad, Support
from screenapp.model.shape import Shape

Floats = NDArray[np.float64]
Ints = NDArray[np.int64]


def sides_of(part: Part, shape: Shape, mesh: Mesh, record: Support | PlacedLoad) -> Ints:
    """Boundary sides that a support or load on an edge, fillet or hole stands on.

    Raises:
        InvalidPartError: the shape has no such feature, or no mesh side lies on it.
    """
    sides = mesh.sides_on(pieces_under(part, shape, record))
    if len(sides) == 0:
        raise misplaced(record.id, record.on, "put it on an edge, a fillet or a hole of the part")
    return sides


def misplaced(by: str, feature: str, mend: str) -> InvalidPartError:
    """The error for a support or load `by` that stands on a feature that cannot carry it."""
    return InvalidPartError.of(
        (Fault(f"{by} stands on {feature!r}, which cannot carry it", mend, "", (by, feature)),)
    )


def side_parameters(mesh: Mesh) -> Floats:
    """Parameters of start, middle and end of every boundary side on its piece, (n_sides, 3)."""
    t0, t1 = mesh.side_t.T
    return np.stack([t0, 0.5 * (t0 + t1), t1], axis=1)


def side_tangents(shape: Shape, mesh: Mesh) -> Floats:
    """Unit tangents of the exact curve at start, middle and end of every boundary side,
    (n_sides, 3, 2); the material lies on their left."""
    t = side_parameters(mesh)
    out = np.empty((*t.shape, 2))
    for piece in np.unique(mesh.side_piece):
        on = mesh.side_piece == piece
        out[on] = shape.curves[piece].curve.tangent(t[on])
    return out


def outward(tangents: Floats) -> Floats:
    """Unit normals that point out of the material, from tangents with it on their left."""
    return np.stack([tangents[..., 1], -tangents[..., 0]], axis=-1)
