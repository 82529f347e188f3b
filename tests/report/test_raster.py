"""The rasteriser against fields that are known everywhere, and against gaps between elements."""

from __future__ import annotations

import numpy as np
import pytest
from numpy.testing import assert_allclose, assert_array_equal
from scipy.ndimage import label
from shapely import Polygon, contains_xy

from screenapp.report.raster import Viewport, rasterise
from tests.window import fabricate as made

VIEW = Viewport(left=-70.0, top=46.5, per_pixel_x=0.2, per_pixel_y=0.2, width=700, height=465)


def grid(view: Viewport) -> tuple[np.ndarray, np.ndarray]:
    return np.meshgrid(*view.pixel_centres())


def in_strip(x: np.ndarray, y: np.ndarray, spare: float = 0.0) -> np.ndarray:
    inside = (np.abs(x) < made.HALF_LENGTH - spare) & (np.abs(y) < made.HALF_WIDTH - spare)
    return inside & (np.hypot(x, y) > made.RADIUS + spare)


@pytest.mark.parametrize(("around", "out"), [(16, 6), (64, 20), (256, 60)])
def test_linear_field_is_exact_at_pixel_centres(around: int, out: int) -> None:
    mesh = made.ring(around, out)
    x, y = grid(VIEW)
    image = rasterise(mesh.nodes, mesh.quads, 3 * mesh.nodes[:, 0] - 2 * mesh.nodes[:, 1], VIEW)
    painted = np.isfinite(image)
    # single precision of the image: 24 bits of the largest value, and the nudge of the samples
    assert_allclose(image[painted], (3 * x - 2 * y)[painted], rtol=0, atol=260 * 2**-23)


@pytest.mark.parametrize(("around", "out"), [(16, 6), (64, 20), (256, 60)])
def test_coverage_is_the_part_and_nothing_else(around: int, out: int) -> None:
    mesh = made.ring(around, out)
    x, y = grid(VIEW)
    painted = np.isfinite(rasterise(mesh.nodes, mesh.quads, np.ones(mesh.n_nodes), VIEW))
    # a chord of a side cut into pieces of 10 px leaves its arc (50 px radius) by 10²/8/50 px, and
    # the parabola through three points of the coarsest side's arc (22.5°) by less than that
    spare = (10**2 / 8 / 50 + 0.05) * VIEW.per_pixel_x
    assert painted[in_strip(x, y, spare)].all()
    assert not painted[~in_strip(x, y, -spare)].any()


def test_mesh_lines_on_pixel_centres_leave_no_gap() -> None:
    mesh = made.structured(40, 30, 40.0, 30.0)
    # half-pixel offset: every mesh line runs through pixel centres, every node sits on one
    view = Viewport(-0.125 - 5, 35.125, 0.25, 0.25, 200, 160)
    image = rasterise(mesh.nodes, mesh.quads, mesh.nodes[:, 0], view)
    x, y = grid(view)
    inside = (x > 0) & (x < 40) & (y > 0) & (y < 30)
    assert np.isfinite(image[inside]).all()


def test_neighbours_of_unlike_size_on_the_screen_meet() -> None:
    """A graded, strongly deformed mesh: long thin elements beside short ones, bent sides."""
    mesh = made.ring(48, 12)
    x, y = mesh.nodes.T
    points = mesh.nodes + np.stack([4 * np.sin(y / 7), 5 * np.cos(x / 9)], axis=1)
    for zoom in (0.4, 0.1, 0.02):
        view = Viewport(-24 - 250 * zoom, 6 + 200 * zoom, zoom, zoom, 500, 400)
        painted = np.isfinite(rasterise(points, mesh.quads, np.ones(mesh.n_nodes), view))
        # blank are the outside, in up to three pieces, and the hole: a gap would be one more
        regions, n = label(~painted)
        sizes = np.bincount(regions.ravel())[1:]
        assert n <= 4, f"{n} separate blank regions at {zoom} mm/px: {sorted(sizes)[:8]}"


def test_quadratic_field_is_met_to_the_cut_size() -> None:
    mesh = made.structured(4, 4, 40.0, 40.0)
    view = Viewport(0.0, 40.0, 0.1, 0.1, 400, 400)
    x, y = grid(view)
    values = mesh.nodes[:, 0] ** 2 + mesh.nodes[:, 0] * mesh.nodes[:, 1]
    image = rasterise(mesh.nodes, mesh.quads, values, view)
    # linear interpolation over at most 10 px = 1 mm: second derivative x h² / 8, twice (both ways)
    assert_allclose(image, x**2 + x * y, rtol=0, atol=2 * 2.0 * 1.0**2 / 8 + 1e-3)


def test_image_is_the_window_of_a_larger_image() -> None:
    mesh = made.ring(64, 20)
    values = made.kirsch(mesh.nodes)[:, 0]
    whole = rasterise(mesh.nodes, mesh.quads, values, VIEW)
    part = Viewport(VIEW.left + 40, VIEW.top - 20, 0.2, 0.2, 300, 200)
    assert_allclose(
        rasterise(mesh.nodes, mesh.quads, values, part), whole[100:300, 200:500], atol=1e-3
    )


def test_values_of_elements_stay_in_their_element() -> None:
    mesh = made.structured(2, 1, 20.0, 10.0)
    values = np.repeat([[1.0], [5.0]], 9, axis=1)
    view = Viewport(0.0, 10.0, 0.1, 0.1, 200, 100)
    image = rasterise(mesh.nodes, mesh.quads, values, view)
    assert (image[:, :100] == 1.0).all()
    assert (image[:, 100:] == 5.0).all()


def test_quad_with_inward_corner_is_filled_right() -> None:
    mesh = made.structured(1, 1, 20.0, 20.0)
    corners = np.array([[0, 0], [20, 0], [5.0, 5.0], [0, 20]])  # corner 2 pulled inwards
    points = mesh.nodes.copy()
    points[mesh.quads[0, :4]] = corners
    mids = 0.5 * (corners + np.roll(corners, -1, axis=0))
    points[mesh.quads[0, 4:8]] = mids
    points[mesh.quads[0, 8]] = corners.mean(axis=0)
    view = Viewport(-1.3, 21.7, 2.1, 2.1, 12, 12)  # sides of at most 10 px: one plain quad
    painted = np.isfinite(rasterise(points, mesh.quads, np.ones(9), view))
    x, y = grid(view)
    assert_array_equal(painted, contains_xy(Polygon(corners), x, y))


def test_outside_the_view_nothing_is_painted() -> None:
    mesh = made.structured(3, 3)
    far = Viewport(100.0, 100.0, 0.1, 0.1, 50, 40)
    assert np.isnan(rasterise(mesh.nodes, mesh.quads, np.ones(mesh.n_nodes), far)).all()


def test_values_of_wrong_shape_are_refused() -> None:
    mesh = made.structured(2, 2)
    with pytest.raises(ValueError, match="neither"):
        rasterise(mesh.nodes, mesh.quads, np.ones(3), VIEW)
