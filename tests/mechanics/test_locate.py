"""Points are found in curved quads and come back to where they were."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest

from screenapp.mechanics import shape_functions
from screenapp.mechanics.locate import PointLocator, invert_map
from tests.mechanics.structured import Structured, full_ring, rectangle, shaken


@pytest.fixture(scope="module")
def ring() -> Structured:
    base = full_ring(10.0, 40.0, 24, 6)
    return Structured(base.part, base.shape, shaken(base.mesh, base.shape, 0.2))


def polar(radius: np.ndarray, angle: np.ndarray) -> np.ndarray:
    return np.stack([radius * np.cos(angle), radius * np.sin(angle)], axis=1)


def test_points_inside_are_found_and_map_back(ring: Structured) -> None:
    rng = np.random.default_rng(1)
    points = polar(rng.uniform(10.01, 39.9, 3000), rng.uniform(0.0, 2.0 * np.pi, 3000))
    element, xi = PointLocator(ring.mesh).locate(points)
    assert (element >= 0).all()
    assert (np.abs(xi) <= 1.0).all()
    nodes = ring.mesh.nodes[ring.mesh.quads[element]]
    back = np.einsum("pn,pnk->pk", shape_functions.values(9, xi), nodes)
    assert np.abs(back - points).max() < 1e-10


def test_points_on_the_exact_rim_are_found_though_the_sides_are_parabolas(
    ring: Structured,
) -> None:
    angle = np.linspace(0.0, 2.0 * np.pi, 1001)
    for radius in (10.0, 40.0):
        element, _ = PointLocator(ring.mesh).locate(polar(np.full(1001, radius), angle))
        assert (element >= 0).all()


def test_points_off_the_part_are_not_found(ring: Structured) -> None:
    angle = np.linspace(0.0, 2.0 * np.pi, 97)
    locator = PointLocator(ring.mesh)
    for radius in (0.0, 9.98, 40.05, 1e6):
        element, xi = locator.locate(polar(np.full(97, radius), angle))
        assert (element == -1).all()
        assert np.isnan(xi).all()


def test_nodes_shared_by_elements_belong_to_one_that_holds_them() -> None:
    plate = rectangle(10.0, 4.0, 5, 3)
    element, _ = PointLocator(plate.mesh).locate(plate.mesh.nodes)
    assert (element >= 0).all()
    holds = (plate.mesh.quads[element] == np.arange(plate.mesh.n_nodes)[:, None]).any(axis=1)
    assert holds.all()


def test_no_points_and_points_that_are_not_numbers() -> None:
    locator = PointLocator(rectangle(10.0, 4.0, 5, 3).mesh)
    assert locator.locate(np.empty((0, 2)))[0].shape == (0,)
    assert locator.locate([(np.nan, 1.0), (np.inf, 1.0)])[0].tolist() == [-1, -1]


def test_more_pairs_than_one_batch(monkeypatch: pytest.MonkeyPatch, ring: Structured) -> None:
    rng = np.random.default_rng(2)
    points = polar(rng.uniform(9.0, 41.0, 500), rng.uniform(0.0, 2.0 * np.pi, 500))
    locator = PointLocator(ring.mesh)
    at_once = locator.locate(points)
    monkeypatch.setattr("screenapp.mechanics.locate.PAIRS_AT_A_TIME", 7)
    in_bits = locator.locate(points)
    assert (at_once[0] == in_bits[0]).all()
    np.testing.assert_allclose(in_bits[1], at_once[1], atol=1e-12)


def test_inverse_of_a_strongly_curved_map() -> None:
    """A quarter ring in one quad."""
    corners = np.array([[1, 0], [3, 0], [0, 3], [0, 1]], dtype=float)
    h = np.sqrt(0.5)
    sides = np.array([[2, 0], [3 * h, 3 * h], [0, 2], [h, h]])
    centre = 0.5 * sides.sum(axis=0) - 0.25 * corners.sum(axis=0)
    nodes = np.concatenate([corners, sides, [centre]])
    rng = np.random.default_rng(3)
    xi = rng.uniform(-1.0, 1.0, (200, 2))
    points = shape_functions.values(9, xi) @ nodes
    found = invert_map(np.broadcast_to(nodes, (200, 9, 2)), points)
    assert np.abs(found - xi).max() < 1e-10


def test_a_point_on_a_common_side_is_always_in_the_same_element() -> None:
    """Rounding must not choose: sizes at peaks, and by them the next mesh, hang on it."""
    case = rectangle(30.0, 20.0, 6, 4)
    mesh = shaken(case.mesh, case.shape, 0.2)
    middles = mesh.nodes[np.unique(mesh.quads[:, 4:8])]
    wanted, _ = PointLocator(mesh).locate(middles)
    rng = np.random.default_rng(2)
    for _ in range(5):
        noise = rng.uniform(-1e-13, 1e-13, middles.shape)
        turned = replace(mesh, nodes=mesh.nodes * (1.0 + rng.uniform(-2e-16, 2e-16, (1, 2))))
        assert np.array_equal(PointLocator(turned).locate(middles + noise)[0], wanted)
