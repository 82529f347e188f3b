"""The test meshes themselves: they must fill their shape and follow the mesh record's rules."""

from __future__ import annotations

import math

import numpy as np
import pytest

from screenapp.mechanics import shape_functions
from tests.mechanics.structured import (
    Structured,
    elliptic_quarter,
    four_sided,
    full_ring,
    rectangle,
    ring_sector,
    shaken,
    slanted_rectangle,
)

ALL = {
    "rectangle": (rectangle(4.0, 2.0, 4, 3), 8.0),
    "trapezoids": (slanted_rectangle(6.0, 0.2, 6, 0.2, True), 1.2),
    "parallelograms": (slanted_rectangle(6.0, 0.2, 6, 0.2, False), 1.2),
    "panel": (four_sided(((0, 0), (48, 44), (48, 60), (0, 44)), 4, 4), 0.5 * 48 * (44 + 16)),
    "sector": (ring_sector(1.0, 2.0, 90.0, 24, 2), math.pi / 4 * 3.0),
    "ring": (full_ring(1.0, 3.0, 48, 2), math.pi * 8.0),
    "ellipses": (
        elliptic_quarter((2.0, 1.0), (3.25, 2.75), 24, 4),
        math.pi / 4 * (3.25 * 2.75 - 2.0),
    ),
}


@pytest.mark.parametrize("name", ALL)
def test_it_fills_its_shape_and_its_sides_close(name: str) -> None:
    """Area by quadrature (quadratic sides: error h⁴) and a boundary that closes."""
    case, area = ALL[name]
    found = _area(case)
    assert found == pytest.approx(area, rel=2e-6)
    nodes = case.mesh.side_nodes
    assert sorted(nodes[:, 0]) == sorted(nodes[:, 2])
    assert (np.diff(case.mesh.side_t, axis=1) > 0).all()
    assert case.mesh.worst_jacobian > 0.3
    for side, piece in zip(nodes, case.mesh.side_piece, strict=True):
        curve = case.shape.curves[piece].curve
        middle = case.mesh.nodes[side[1]]
        t = curve.nearest((float(middle[0]), float(middle[1])))
        assert np.allclose(curve.point(t), middle, atol=1e-9)


def test_shaken_meshes_keep_area_and_boundary() -> None:
    plain = ring_sector(1.0, 2.0, 90.0, 8, 3)
    moved = Structured(plain.part, plain.shape, shaken(plain.mesh, plain.shape, 0.2))
    assert _area(moved) == pytest.approx(_area(plain), rel=1e-12)
    assert not np.allclose(moved.mesh.nodes, plain.mesh.nodes)
    assert np.array_equal(moved.mesh.side_piece, plain.mesh.side_piece)


def _area(case: Structured) -> float:
    g, w = np.polynomial.legendre.leggauss(3)
    xi, eta = np.meshgrid(g, g)
    d = shape_functions.derivatives(9, np.stack([xi.ravel(), eta.ravel()], axis=1))
    jac = np.einsum("qna,enb->eqab", d, case.mesh.nodes[case.mesh.quads])
    return float((np.linalg.det(jac) @ np.outer(w, w).ravel()).sum())
