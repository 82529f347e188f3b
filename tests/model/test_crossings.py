"""Crossing, touching and misplaced loops; shapely on flattened loops is the other opinion."""

from __future__ import annotations

import math
from dataclasses import replace

import numpy as np
import pytest
import shapely
from hypothesis import assume, given, settings, strategies as st

from screenapp.model.crossings import boundary_faults
from screenapp.model.curve_table import CurveTable
from screenapp.model.errors import Fault, InvalidPartError
from screenapp.model.part import CircleHole, Hole, Loop, LoopHole, Part, SlotHole
from screenapp.model.shape import shape_of
from tests.model.plates import loop, rectangle


def faults(outline: Loop, *holes: Hole) -> list[Fault]:
    shape = shape_of(Part(outline=outline, holes=holes))
    return boundary_faults(shape, CurveTable.of(shape.curves))


def only(outline: Loop, *holes: Hole) -> Fault:
    found = faults(outline, *holes)
    assert len(found) == 1, [str(f) for f in found]
    return found[0]


PLATE = rectangle(100.0, 50.0)


def test_bow_tie_names_both_edges_and_the_place() -> None:
    fault = only(loop([(0, 0), (10, 10), (10, 0), (0, 10)]))
    assert fault.cause == "edge e1 and edge e3 cross at (5, 5)"
    assert fault.ids == ("e1", "e3")
    assert fault.at == (5.0, 5.0)


def test_corner_on_a_far_edge_touches() -> None:
    found = faults(loop([(0, 0), (10, 0), (10, 10), (5, 0), (0, 10)]))
    assert {f.ids for f in found} == {("e1", "e3"), ("e1", "e4")}
    assert all("touch" in f.cause for f in found)
    assert all(f.at == (5.0, 0.0) for f in found)


def test_two_corners_at_one_place_touch() -> None:
    found = faults(loop([(0, 0), (5, 5), (10, 0), (10, 10), (5, 5), (0, 10)]))
    assert found
    assert all(f.at == pytest.approx((5.0, 5.0)) for f in found)


def test_edges_that_lie_on_one_another_touch() -> None:
    found = faults(loop([(0, 0), (10, 0), (10, 5), (8, 0), (2, 0), (0, 5)]))
    assert ("e1", "e4") in {f.ids for f in found}


def test_edge_that_runs_back_is_a_fold() -> None:
    found = faults(loop([(0, 0), (10, 0), (4, 0), (4, 8)]))
    assert any("enclose an angle of 0°" in f.cause and f.at == (10.0, 0.0) for f in found)


def test_facing_arcs_that_cross() -> None:
    points = [(0.0, 0.0), (10.0, 0.0), (10.0, 8.0), (0.0, 8.0)]
    fault = only(loop(points, {0: (5.0, 4.5), 2: (5.0, 3.5)}))
    assert fault.ids == ("e1", "e3")
    assert "cross" in fault.cause


def test_tangent_arc_and_edge_are_no_touch() -> None:
    slot = loop([(0, 0), (40, 0), (40, 20), (0, 20)], {1: (50.0, 10.0), 3: (-10.0, 10.0)})
    assert faults(slot) == []


@pytest.mark.parametrize("round_", [0.01, 1.0, 10.0, 24.999, 25.0])
def test_rounds_of_any_size_are_no_touch(round_: float) -> None:
    assert faults(rectangle(100.0, 50.0, round_)) == []


@pytest.mark.parametrize(
    ("hole", "word"),
    [
        (CircleHole("h1", (5.0, 25.0), 10.0), "touch"),
        (CircleHole("h1", (4.0, 25.0), 10.0), "cross"),
        (CircleHole("h1", (50.0, 50.0), 10.0), "cross"),
        (CircleHole("h1", (0.0, 0.0), 10.0), "cross"),
        (SlotHole("h1", (50.0, 25.0), 60.0, 10.0, 90.0), "cross"),
        (LoopHole("h1", loop([(50, 0), (60, 20), (40, 20)], prefix="b")), "touch"),
        (CircleHole("h1", (150.0, 25.0), 10.0), "outside"),
        (CircleHole("h1", (50.0, 25.0), 500.0), "surrounds"),
        (LoopHole("h1", PLATE), "touch"),
    ],
)
def test_holes_that_do_not_lie_inside(hole: Hole, word: str) -> None:
    found = faults(PLATE, hole)
    assert found
    assert any(word in f.cause and "h1" in f.cause for f in found), [f.cause for f in found]
    assert all("h1" in f.ids for f in found)


@pytest.mark.parametrize(
    ("other", "word"),
    [
        (CircleHole("h2", (60.0, 25.0), 10.0), "touch"),
        (CircleHole("h2", (59.0, 25.0), 10.0), "cross"),
        (CircleHole("h2", (50.0, 25.0), 10.0), "touch"),
        (CircleHole("h2", (51.0, 25.0), 4.0), "inside hole h1"),
        (SlotHole("h2", (50.0, 25.0), 30.0, 14.0), "inside hole h2"),
        (SlotHole("h2", (50.0, 25.0), 10.0, 10.0), "touch"),
    ],
)
def test_holes_that_meet_one_another(other: Hole, word: str) -> None:
    found = faults(PLATE, CircleHole("h1", (50.0, 25.0), 10.0), other)
    assert found
    assert word in found[0].cause
    assert set(found[0].ids) == {"h1", "h2"}


def test_hole_beside_a_concave_arc_is_judged_by_the_arc_and_not_its_chord() -> None:
    bent = loop([(0, 0), (100, 0), (100, 50), (0, 50)], {0: (50.0, 20.0)})
    assert "outside" in only(bent, CircleHole("h1", (50.0, 8.0), 6.0)).cause
    bulged = loop([(0, 0), (100, 0), (100, 50), (0, 50)], {0: (50.0, -20.0)})
    assert faults(bulged, CircleHole("h1", (50.0, -8.0), 6.0)) == []


def test_many_holes_in_a_many_cornered_outline_use_the_same_judgement() -> None:
    """More than 20 000 point-curve pairs take the other way through `inside`."""
    n = 300
    ring = [
        (50 * math.cos(2 * math.pi * i / n), 50 * math.sin(2 * math.pi * i / n)) for i in range(n)
    ]
    grid = [(x, y) for x in range(-56, 57, 8) for y in range(-56, 57, 8)]
    holes = [
        CircleHole(f"h{k}", (float(x), float(y)), 2.0)
        for k, (x, y) in enumerate(grid)
        if abs(math.hypot(x, y) - 50.0) > 1.5
    ]
    outside = {h.id for h in holes if math.hypot(*h.centre) > 50.0}
    found = faults(loop(ring), *holes)
    assert 0 < len(found) <= len(outside)
    assert {f.ids[0] for f in found} <= outside


coordinates = st.tuples(st.integers(0, 40).map(float), st.integers(0, 40).map(float))


@settings(max_examples=300, deadline=None)
@given(st.lists(coordinates, min_size=3, max_size=9, unique=True))
def test_straight_loops_are_sound_exactly_when_shapely_says_so(points) -> None:  # type: ignore[no-untyped-def]
    outline = loop(points)
    try:
        found = faults(outline)
    except InvalidPartError:
        found = [Fault("an edge has no length", "")]
    ring = shapely.LinearRing(points)
    angles = _angles(points)
    assume(angles.min() > 2.0 or angles.min() < 1e-6)
    sound = ring.is_simple and shapely.Polygon(ring).area > 0 and angles.min() > 1e-6
    assert (found == []) == sound, [f.cause for f in found]


def _angles(points: list[tuple[float, float]]) -> np.ndarray:
    """Angles between neighbouring edges [deg], 0 where one runs back on the other."""
    p = np.array(points)
    back, ahead = np.roll(p, 1, axis=0) - p, np.roll(p, -1, axis=0) - p
    cross = back[:, 0] * ahead[:, 1] - back[:, 1] * ahead[:, 0]
    return np.abs(np.degrees(np.arctan2(cross, np.sum(back * ahead, axis=1))))


@settings(max_examples=200, deadline=None)
@given(
    st.lists(coordinates, min_size=3, max_size=6, unique=True),
    st.lists(st.none() | st.floats(-0.9, 0.9), min_size=6, max_size=6),
)
def test_loops_with_arcs_are_sound_exactly_when_shapely_says_so(points, bulges) -> None:  # type: ignore[no-untyped-def]
    """Arcs flattened to 1e-5 mm; loops that come that near to touching are left out."""
    through = {}
    for i, bulge in enumerate(bulges[: len(points)]):
        (ax, ay), (bx, by) = points[i], points[(i + 1) % len(points)]
        if bulge is not None and abs(bulge) > 0.05:
            sag = 0.5 * bulge  # of the chord; at most a little under a half circle
            through[i] = ((ax + bx) / 2 - sag * (by - ay), (ay + by) / 2 + sag * (bx - ax))
    shape = shape_of(Part(outline=loop(points, through)))
    table = CurveTable.of(shape.curves)
    found = boundary_faults(shape, table)
    here = np.arange(len(table))
    u = table.tangents(here, np.ones(len(here)))
    v = np.roll(table.tangents(here, np.zeros(len(here))), -1, axis=0)
    cross = u[:, 0] * v[:, 1] - u[:, 1] * v[:, 0]
    between = 180.0 - np.degrees(np.abs(np.arctan2(cross, np.sum(u * v, axis=1))))
    assume(between.min() > 3.0)  # sharper ones may be called folds
    ring = shapely.LinearRing(shape.polyline(0, 1e-5))
    if ring.is_simple:
        # another opinion on touching: cut the ring at its corners and look for near pieces
        pieces = [
            shapely.LineString(c.curve.point(np.linspace(0.0, 1.0, 200))) for c in shape.curves
        ]
        n = len(pieces)
        apart = [
            pieces[i].distance(pieces[j])
            for i in range(n)
            for j in range(i + 2, n)
            if (j + 1) % n != i
        ]
        assume(not apart or min(apart) > 0.05)
        assert found == [], [f.cause for f in found]
    else:
        assert found


def test_faults_of_one_kind_are_limited_in_number() -> None:
    holes = [CircleHole(f"h{i}", (i * 1.0, 80.0 + i), 0.5) for i in range(60)]
    assert len(faults(PLATE, *holes)) == 20


def test_tiny_fillet_is_said_to_be_short() -> None:
    outline = rectangle(100.0, 50.0)
    corners = (replace(outline.corners[0], round=1e-4), *outline.corners[1:])
    fault = only(replace(outline, corners=corners))
    assert fault.cause.startswith("fillet c1 is only")
    assert fault.field == "outline.corners.c1.round"
