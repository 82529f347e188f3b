"""Loops of boundary sides: order, lengths, bends, profiles."""

from __future__ import annotations

import numpy as np

from screenapp.mechanics.boundary_chains import boundary_chains, boundary_profile, side_lengths
from screenapp.model.solution import StressField
from tests.mechanics.structured import elliptic_quarter, full_ring, rectangle, ring_sector


def test_a_ring_has_two_closed_smooth_loops() -> None:
    ring = full_ring(10.0, 30.0, 16, 3)
    chains = boundary_chains(ring.shape, ring.mesh)
    nodes = ring.mesh.side_nodes
    assert chains.loops == ((0, 16), (16, 32))
    assert (nodes[:, 2] == nodes[chains.following, 0]).all()
    assert (chains.following[chains.preceding] == np.arange(32)).all()
    assert chains.smooth.all()
    np.testing.assert_allclose(chains.lengths[:16], np.pi * 60.0 / 16, rtol=1e-4)
    np.testing.assert_allclose(chains.lengths[16:], np.pi * 20.0 / 16, rtol=1e-4)
    np.testing.assert_allclose(chains.curvature, np.repeat([1 / 30.0, -1 / 10.0], 16), rtol=1e-3)
    points = ring.mesh.nodes[nodes]
    radial = points / np.linalg.norm(points, axis=-1, keepdims=True)
    outwards = np.repeat([1.0, -1.0], 16)[:, None, None]
    np.testing.assert_allclose(chains.normals, outwards * radial, atol=1e-9)


def test_corners_of_a_rectangle_bend_by_a_right_angle() -> None:
    plate = rectangle(40.0, 30.0, 4, 3)
    chains = boundary_chains(plate.shape, plate.mesh)
    assert int((~chains.smooth).sum()) == 4
    np.testing.assert_allclose(chains.turn[~chains.smooth], np.pi / 2)
    np.testing.assert_allclose(chains.curvature, 0.0, atol=1e-15)


def test_a_re_entrant_corner_turns_the_other_way() -> None:
    """Three quarters of a disc cut from a ring: the corners of its straight ends are convex."""
    sector = ring_sector(10.0, 20.0, 270.0, 12, 2)
    chains = boundary_chains(sector.shape, sector.mesh)
    assert (chains.turn[~chains.smooth] > 0).all()
    hole = full_ring(10.0, 30.0, 8, 2)
    assert (boundary_chains(hole.shape, hole.mesh).curvature[8:] < 0).all()


def test_lengths_run_along_sides_of_uneven_speed() -> None:
    """An ellipse in its angle: the middle node is not half-way; the perimeter is Ramanujan's."""
    case = elliptic_quarter((2.0, 1.0), (3.25, 2.75), 16, 4)
    sides = case.mesh.sides_on(case.shape.pieces_of("e4"))
    lengths = side_lengths(case.mesh, np.array([-1.0, 0.0, 1.0]))[sides]
    h = (1.0 / 3.0) ** 2
    quarter = np.pi * 3.0 * (1 + 3 * h / (10 + np.sqrt(4 - 3 * h))) / 4.0
    assert abs(lengths[:, 2].sum() / quarter - 1.0) < 1e-5
    assert np.abs(lengths[:, 1] / lengths[:, 2] - 0.5).max() > 1e-3
    np.testing.assert_array_equal(lengths[:, 0], 0.0)


def test_profile_runs_on_along_each_loop() -> None:
    ring = full_ring(10.0, 30.0, 16, 3)
    mesh = ring.mesh
    side = np.arange(2 * len(mesh.sides) * 9, dtype=float).reshape(2, -1, 3, 3)
    field = StressField(np.zeros((2, mesh.n_nodes, 3)), side, np.zeros((2, mesh.n_elements)))
    profiles = boundary_profile(ring.shape, mesh, field, 1)
    assert [p.loop for p in profiles] == [0, 1]
    for profile in profiles:
        np.testing.assert_array_equal(profile.stress, side[1, profile.sides])
        assert profile.arc[0, 0] == 0.0
        np.testing.assert_allclose(profile.arc[1:, 0], profile.arc[:-1, 2])
        assert (np.diff(profile.arc, axis=1) > 0).all()
        np.testing.assert_array_equal(profile.points[1:, 0], profile.points[:-1, 2])
    assert abs(profiles[1].arc[-1, 2] / (20.0 * np.pi) - 1.0) < 1e-4
