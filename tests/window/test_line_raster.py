"""Thin lines: where they fall, how much they cover, and that none is lost at the view's edge."""

from __future__ import annotations

import numpy as np
import pytest
from numpy.testing import assert_allclose

from screenapp.report.raster import Viewport
from screenapp.window.board.line_raster import rasterise_lines
from screenapp.window.board.mesh_item import mesh_lines
from tests.window import fabricate as made

VIEW = Viewport(0.0, 40.0, 1.0, 1.0, 60, 40)


def drawn(
    start: tuple[float, float], end: tuple[float, float], view: Viewport = VIEW
) -> np.ndarray:
    return rasterise_lines(np.array([start], float), np.array([end], float), view)


@pytest.mark.parametrize("end", [(50.0, 30.0), (20.0, 39.0), (50.0, 5.0), (10.5, 35.0)])
def test_coverage_is_one_pixel_wide_all_along(end: tuple[float, float]) -> None:
    start = (10.5, 5.5)
    image = drawn(start, end)
    steps = max(abs(end[0] - start[0]), abs(end[1] - start[1]))
    # one pixel's worth at each step along the longer direction, give or take the ends
    assert image.sum() == pytest.approx(steps, abs=1.0)


def test_line_lies_where_it_should() -> None:
    image = drawn((5.0, 10.0), (55.0, 22.5))
    x, y = VIEW.pixel_centres()
    columns = np.arange(8, 52)
    middle = (image * y[:, None])[:, columns].sum(axis=0) / image[:, columns].sum(axis=0)
    assert_allclose(middle, 10.0 + (x[columns] - 5.0) * 0.25, atol=1e-3)


def test_clipping_changes_nothing_inside() -> None:
    whole = drawn((-1e4, -1e4 + 7.3), (1e4, 1e4 + 7.3))
    near = drawn((-30.0, -22.7), (90.0, 97.3))
    assert_allclose(whole, near, atol=1e-6)
    assert whole.max() > 0.5


def test_lines_outside_leave_nothing() -> None:
    assert drawn((-20.0, -5.0), (90.0, -5.0)).sum() == 0.0
    assert drawn((70.0, 0.0), (70.0, 50.0)).sum() == 0.0


def test_shared_sides_are_drawn_once_and_curved_ones_in_pieces() -> None:
    mesh = made.structured(3, 2)
    starts, _ = mesh_lines(mesh, mesh.nodes)
    assert len(starts) == 3 * 3 + 4 * 2  # rows and columns of sides
    ring = made.ring(16, 2)
    starts, ends = mesh_lines(ring, ring.nodes)
    radius = np.hypot(*((starts + ends) / 2).T)
    on_hole = radius < made.RADIUS * 1.001
    assert on_hole.sum() == 16 * 6
    assert (radius[on_hole] > made.RADIUS * (1 - 0.002)).all()
