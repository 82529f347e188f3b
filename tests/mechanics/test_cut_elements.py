"""What a cut leaves of elements with curved sides, against closed forms."""

from __future__ import annotations

import math
from collections.abc import Callable

import numpy as np
import pytest
from numpy.typing import NDArray

from screenapp.mechanics import shape_functions
from screenapp.mechanics.cut_elements import area_points, side_pieces
from screenapp.mechanics.quadrature import gauss_square
from screenapp.mechanics.straight_cut import StraightCut, straight_cut
from screenapp.meshing.service import Mesher
from screenapp.meshing.sizing import uniform_sizes
from screenapp.model.mesh import Mesh
from screenapp.model.part import CircleHole
from screenapp.model.shape import Shape, shape_of
from tests.model.plates import plate, rectangle

Floats = NDArray[np.float64]

HOLE = CircleHole("h1", (50.0, 25.0), 30.0)


@pytest.fixture(scope="module")
def holed() -> tuple[Shape, Mesh]:
    part = plate(rectangle(100.0, 50.0), HOLE)
    shape = shape_of(part)
    with Mesher() as mesher:
        return shape, mesher.mesh(shape, uniform_sizes(shape, 5.0))


def left_of(cut: StraightCut) -> Callable[[Floats], NDArray[np.bool_]]:
    return lambda points: (points - cut.start) @ cut.normal < 0.0


def moments(points: Floats, areas: Floats) -> Floats:
    """Area, first and second moments."""
    x, y = points[..., 0], points[..., 1]
    terms = np.stack([np.ones_like(x), x, y, x * x, x * y, y * y], axis=-1)
    return np.asarray((areas[..., None] * terms).sum(axis=(0, 1)))


@pytest.mark.parametrize(
    ("start", "end"),
    [((40.0, -1.0), (40.0, 51.0)), ((30.0, -1.0), (63.0, 51.0)), ((-1.0, 11.0), (101.0, 39.0))],
)
def test_both_sides_of_a_cut_make_the_whole(
    start: tuple[float, float], end: tuple[float, float], holed: tuple[Shape, Mesh]
) -> None:
    shape, mesh = holed
    there, back = straight_cut(shape, start, end), straight_cut(shape, end, start)
    both = sum(moments(*area_points(mesh, cut, left_of(cut))) for cut in (there, back))
    xi, weights = gauss_square(6)
    corners = mesh.nodes[mesh.quads]
    slopes = np.einsum("pna,enb->epab", shape_functions.derivatives(9, xi), corners)
    whole = moments(shape_functions.values(9, xi) @ corners, np.linalg.det(slopes) * weights)
    np.testing.assert_allclose(both, whole, rtol=1e-9)


@pytest.mark.parametrize("off", [-9.0, 0.0, 4.0, 14.5])
def test_a_cut_through_a_hole_takes_a_segment_of_it(off: float, holed: tuple[Shape, Mesh]) -> None:
    """Derived: r² acos(d/r) - d √(r² - d²) is the segment beyond a chord at distance d."""
    shape, mesh = holed
    r = 0.5 * HOLE.diameter
    cut = straight_cut(shape, (50.0 + off, -1.0), (50.0 + off, 51.0))
    _, areas = area_points(mesh, cut, left_of(cut))
    segment = math.pi * r * r - (r * r * math.acos(off / r) - off * math.sqrt(r * r - off * off))
    # the rim is of parabolas: θ⁴/480 of the hole's area
    rim = np.count_nonzero([shape.curves[p].loop == 1 for p in mesh.side_piece])
    slack = (2.0 * math.pi / rim) ** 4 / 480.0 * math.pi * r * r
    assert areas.sum() == pytest.approx((50.0 + off) * 50.0 - segment, abs=1.5 * slack)


def test_a_side_ends_at_the_cut(holed: tuple[Shape, Mesh]) -> None:
    shape, mesh = holed
    cut = straight_cut(shape, (37.3, -1.0), (37.3, 51.0))
    low = np.flatnonzero(np.array([shape.curves[p].feature == "e1" for p in mesh.side_piece]))
    nodes = mesh.nodes[mesh.side_nodes[low]]
    pieces = side_pieces(nodes, cut)
    ends = [nodes[i, 1, 0] + 0.5 * (b) * np.ptp(nodes[i, :, 0]) for i, _, b in pieces]
    assert any(abs(x - 37.3) < 1e-12 for x in ends)
    assert len(pieces) == len(nodes)  # none is lost, none is doubled
