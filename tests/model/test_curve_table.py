"""Answers over many curves at once, against the single curves and against shapely."""

from __future__ import annotations

import numpy as np
import shapely

from screenapp.model.curve_table import CurveTable
from screenapp.model.meetings import closest_approaches, intersections
from screenapp.model.part import CircleHole, Part, SlotHole
from screenapp.model.shape import Shape, shape_of
from tests.model.plates import loop


def mixed() -> Shape:
    outline = loop(
        [(0, 0), (60, 0), (80, 30), (60, 60), (10, 50), (-20, 20)],
        {0: (30.0, 12.0), 2: (85.0, 50.0), 4: (-15.0, 45.0)},
        {1: 4.0, 5: 6.0},
    )
    holes = (CircleHole("h1", (50.0, 35.0), 16.0), SlotHole("h2", (10.0, 28.0), 30.0, 9.0, 25.0))
    return shape_of(Part(outline=outline, holes=holes))


SHAPE = mixed()
TABLE = CurveTable.of(SHAPE.curves)
RANDOM = np.random.default_rng(5)


def test_points_tangents_and_lengths_are_those_of_the_curves() -> None:
    t = RANDOM.random(len(TABLE))
    which = np.arange(len(TABLE))
    for k, piece in enumerate(SHAPE.curves):
        assert np.allclose(TABLE.points(which, t)[k], piece.curve.point(t[k]), atol=1e-12)
        assert np.allclose(TABLE.tangents(which, t)[k], piece.curve.tangent(t[k]), atol=1e-12)
        assert np.isclose(TABLE.lengths[k], piece.curve.length)
        assert np.allclose(TABLE.start[k], piece.curve.start)
        assert np.allclose(TABLE.end[k], piece.curve.end)


def test_nearest_points_are_those_of_a_fine_sampling() -> None:
    t = np.linspace(0.0, 1.0, 4001)
    for k, piece in enumerate(SHAPE.curves):
        points = RANDOM.uniform(-40, 100, (20, 2))
        near = TABLE.points(np.full(20, k), TABLE.nearest(np.full(20, k), points))
        fine = piece.curve.point(t)
        best = np.linalg.norm(points[:, None] - fine[None], axis=2).min(axis=1)
        found = np.linalg.norm(points - near, axis=1)
        assert np.all(found <= best + 1e-9)
        assert np.all(found >= best - piece.curve.length / 4000)


def test_boxes_hold_the_curves_tightly() -> None:
    t = np.linspace(0.0, 1.0, 2001)
    for box, piece in zip(TABLE.boxes, SHAPE.curves, strict=True):
        points = piece.curve.point(t)
        assert np.allclose(box[:2], points.min(axis=0), atol=1e-4)
        assert np.allclose(box[2:], points.max(axis=0), atol=1e-4)
        assert np.all(box[:2] <= points.min(axis=0) + 1e-12)
    assert np.allclose(SHAPE.bounds, [*TABLE.loop_boxes(SHAPE)[0]])


def test_inside_agrees_with_a_fine_polygon() -> None:
    points = RANDOM.uniform([-40, -10], [100, 80], (4000, 2))
    for number in range(3):
        polygon = shapely.Polygon(SHAPE.polyline(number, 1e-6))
        near = shapely.distance(polygon.exterior, shapely.points(points)) < 1e-4
        expected = shapely.contains_xy(polygon, points)
        for found in (
            TABLE.inside(number, points),  # by way of chords
            np.concatenate([TABLE.inside(number, points[k : k + 50]) for k in range(0, 4000, 50)]),
        ):
            assert np.array_equal(found[~near], expected[~near])


def test_inside_on_the_chord_of_an_arc() -> None:
    disc = shape_of(Part(outline=loop([(-5, 0), (5, 0)], {0: (0.0, -5.0), 1: (0.0, 5.0)})))
    table = CurveTable.of(disc.curves)
    on_chord = np.array([[0.0, 0.0], [4.9, 0.0], [-4.9, 0.0], [5.1, 0.0], [-5.1, 0.0]])
    assert table.inside(0, on_chord).tolist() == [True, True, True, False, False]


def test_closest_approaches_and_intersections_agree_with_fine_sampling() -> None:
    """All pairs of 12 random arcs and segments."""
    outline = loop(
        [tuple(p) for p in RANDOM.uniform(0, 30, (12, 2))],
        {k: tuple(RANDOM.uniform(0, 30, 2)) for k in range(0, 12, 2)},
    )
    curves = shape_of(Part(outline=outline)).curves
    table = CurveTable.of(curves)
    i, j = np.triu_indices(12, 1)
    approaches = closest_approaches(table, i, j)
    least = np.full(len(i), np.inf)
    np.minimum.at(least, approaches.pair, approaches.gap)
    pair, points = intersections(table, i, j)
    lines = [shapely.LineString(c.curve.point(np.linspace(0, 1, 3001))) for c in curves]
    for k in range(len(i)):
        expected = lines[i[k]].distance(lines[j[k]])
        if expected > 1e-3:
            assert np.isclose(least[k], expected, atol=1e-3)
            assert k not in pair
    for k, point in zip(pair, points, strict=True):
        for line in (lines[i[k]], lines[j[k]]):
            assert line.distance(shapely.Point(point)) < 1e-3
    crossing = {k for k in range(len(i)) if lines[i[k]].crosses(lines[j[k]])}
    assert crossing <= set(pair.tolist())
