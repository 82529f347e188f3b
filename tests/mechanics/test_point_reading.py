"""Stress and displacement at points: inside, on edges, at corners, off the part."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest

from screenapp.mechanics.point_reading import PointReader, nearest_parameters
from screenapp.mechanics.recovery import recover
from screenapp.mechanics.solve import solve
from screenapp.model.curves import Arc, Segment
from screenapp.model.part import (
    Case,
    FixedSupport,
    LineLoad,
    PressureLoad,
    RollerSupport,
    ShearLoad,
    Support,
)
from tests.mechanics.structured import Structured, full_ring, rectangle, shaken


def reader_of(
    case: Structured, supports: tuple[Support, ...], *loads: PressureLoad | ShearLoad | LineLoad
) -> PointReader:
    """A reader of two cases, the second one twice as strong by having every load twice."""
    twice = tuple(replace(load, id=load.id + "x") for load in loads)
    cases = (Case("k1", "once", loads), Case("k2", "twice", (*loads, *twice)))
    part = replace(case.part, supports=supports, cases=cases)
    solution = solve(part, case.shape, case.mesh)
    stress = recover(part, case.shape, case.mesh, solution)
    return PointReader(part, case.shape, case.mesh, solution, stress)


@pytest.fixture(scope="module")
def bar() -> PointReader:
    """A bar pulled along x by 20 MPa, distorted mesh."""
    base = rectangle(60.0, 20.0, 6, 3)
    case = replace(base, mesh=shaken(base.mesh, base.shape, 0.2))
    supports = (RollerSupport("s", "e4", 0.0), RollerSupport("t", "c1", 90.0))
    return reader_of(case, supports, LineLoad("l", "e2", 20.0, 0.0))


@pytest.fixture(scope="module")
def ring() -> tuple[Structured, PointReader]:
    case = full_ring(10.0, 30.0, 24, 6)
    return case, reader_of(case, (FixedSupport("s", "e1"),), PressureLoad("p", "h1", 9.0))


def test_a_pulled_bar_reads_the_same_everywhere(bar: PointReader) -> None:
    rng = np.random.default_rng(4)
    points = rng.uniform((0.0, 0.0), (60.0, 20.0), (200, 2))
    points[:4] = [(0, 0), (60, 0), (60, 20), (30, 0)]
    for stress in (bar.read(points)[0], bar.raw(points)):
        np.testing.assert_allclose(stress[0], np.tile([20.0, 0, 0], (200, 1)), atol=1e-8)
        np.testing.assert_allclose(stress[1], 2.0 * stress[0], atol=1e-8)
    moved = bar.read(points)[1][0]
    strain = 20.0 / 210_000.0
    wanted = np.stack([strain * points[:, 0], -0.3 * strain * points[:, 1]], axis=1)
    np.testing.assert_allclose(moved, wanted, atol=1e-12)


def test_points_off_the_part_read_nothing(bar: PointReader) -> None:
    stress, moved = bar.read([(-1.0, 5.0), (30.0, 20.01), (1e9, 0.0)])
    assert np.isnan(stress).all()
    assert np.isnan(moved).all()
    assert np.isnan(bar.raw([(-1.0, 5.0)])).all()
    assert bar.on_boundary([(-1.0, 5.0)])[0].tolist() == [-1]
    assert bar.read(np.empty((0, 2)))[0].shape == (2, 0, 3)


def test_a_point_of_the_rim_reads_the_edge_recovery(
    ring: tuple[Structured, PointReader],
) -> None:
    case, reader = ring
    sides = case.mesh.sides_on(case.shape.pieces_of("h1"))
    for k, share in enumerate((0.0, 0.5, 1.0)):
        t = case.mesh.side_t[sides] @ [1.0 - share, share]
        pieces = case.mesh.side_piece[sides]
        points = np.array(
            [case.shape.curves[p].curve.point(u) for p, u in zip(pieces, t, strict=True)]
        )
        stress, _ = reader.read(points)
        np.testing.assert_allclose(stress, reader.stress.side[:, sides, k], atol=1e-8)


def test_on_boundary_tells_side_and_place(ring: tuple[Structured, PointReader]) -> None:
    case, reader = ring
    angle = np.radians(np.arange(0.7, 360.0, 3.1))
    for radius in (10.0, 30.0):
        points = radius * np.stack([np.cos(angle), np.sin(angle)], axis=1)
        side, place = reader.on_boundary(points)
        assert (side >= 0).all()
        t = case.mesh.side_t[side]
        at = t[:, 0] + place * (t[:, 1] - t[:, 0])
        back = [
            case.shape.curves[p].curve.point(u)
            for p, u in zip(case.mesh.side_piece[side], at, strict=True)
        ]
        np.testing.assert_allclose(back, points, atol=1e-9)
    assert (reader.on_boundary(points * 0.99)[0] == -1).all()


def test_a_point_on_the_mesh_side_counts_though_the_arc_runs_beside_it(
    ring: tuple[Structured, PointReader],
) -> None:
    case, reader = ring
    p = case.mesh.nodes[case.mesh.side_nodes]
    quarter = 0.375 * p[:, 0] + 0.75 * p[:, 1] - 0.125 * p[:, 2]
    side, place = reader.on_boundary(quarter)
    assert side.tolist() == list(range(len(p)))
    np.testing.assert_allclose(place, 0.25, atol=1e-3)


def test_reading_is_continuous_up_to_the_rim(ring: tuple[Structured, PointReader]) -> None:
    _, reader = ring
    angle = np.linspace(0.1, 6.0, 50)
    ray = np.stack([np.cos(angle), np.sin(angle)], axis=1)
    at_rim, _ = reader.read(10.0 * ray)
    inside, _ = reader.read((10.0 + 1e-3) * ray)
    # the stress falls by about 2/r of itself per mm
    limit = 10.0 * 1e-3 * 2.0 / 10.0 * np.abs(at_rim).max()
    assert np.abs(inside - at_rim).max() < limit


def test_a_corner_with_two_values_reads_the_stronger_one() -> None:
    """A shear on one side of a corner only: the two sides disagree there."""
    case = rectangle(60.0, 20.0, 6, 3)
    reader = reader_of(case, (FixedSupport("s", "e4"),), ShearLoad("t", "e3", 4.0))
    corner = case.mesh.corner_nodes["c3"]
    ends = [reader.stress.side[0, s, k] for s, k in np.argwhere(case.mesh.side_nodes == corner)]
    assert np.abs(ends[0] - ends[1]).max() > 0.1
    found = reader.read([(60.0, 20.0)])[0][0, 0]
    strength = [s[0] ** 2 + s[1] ** 2 - s[0] * s[1] + 3 * s[2] ** 2 for s in ends]
    np.testing.assert_allclose(found, ends[int(np.argmax(strength))], atol=1e-9)


@pytest.mark.parametrize(
    "curve",
    [
        Segment((1.0, 2.0), (5.0, -1.0)),
        Arc((1.0, 1.0), 3.0, 0.4, 2.0),
        Arc((1.0, 1.0), 3.0, -2.5, -4.0),
        Arc((0.0, 0.0), 1.0, 3.0, 6.2),
    ],
)
def test_nearest_parameters_agree_with_the_curve_itself(curve: Segment | Arc) -> None:
    points = np.random.default_rng(8).uniform(-6.0, 6.0, (200, 2))
    wanted = [curve.nearest((float(x), float(y))) for x, y in points]
    np.testing.assert_allclose(nearest_parameters(curve, points), wanted, atol=1e-12)
