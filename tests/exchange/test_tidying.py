"""Gaps, lines drawn twice, open chains, branches: each mended or left out, and said with places."""

from __future__ import annotations

import math
from pathlib import Path
from typing import Any

import numpy as np
import pytest

from screenapp.exchange.drawing import PlainCurve
from screenapp.exchange.joining import join
from screenapp.exchange.overlaps import without_overlaps
from screenapp.model.curves import Arc, Curve, Segment
from screenapp.model.part import CircleHole
from screenapp.model.shape import shape_of
from tests.exchange.drawings import bring, part_from, rectangle, texts, write

TWO_PI = 2 * math.pi


def single(*curves: Curve, tolerance: float = 0.01) -> tuple[list[Curve], int]:
    """What stays of curves, and how many were taken away."""
    kept, removed = without_overlaps([PlainCurve(c, "0") for c in curves], tolerance)
    return [c.curve for c in kept], len(removed.places)


# --- gaps ---------------------------------------------------------------------------------------


def test_small_gaps_are_closed_where_the_lines_cross(tmp_path: Path) -> None:
    def draw(space: Any) -> None:
        space.add_line((0, 0), (79.996, 0))  # 0.004 short of the corner
        space.add_line((80, 0.003), (80, 40))
        space.add_line((80, 40), (0, 40))
        space.add_line((0, 40), (0, 0))

    path = write(tmp_path / "gap.dxf", draw)
    brought = bring(path)
    (said,) = texts(brought, "gap")
    assert said == "1 gap of 0.005 mm was closed at (79.998, 0.002)."
    part = part_from(path)
    assert shape_of(part).area == pytest.approx(3200, rel=1e-12)
    assert part.outline is not None
    assert len(part.outline.corners) == 4
    wide = bring(path, tolerance=0.002)
    assert wide.part is None
    assert wide.error is not None
    assert "no closed outline: 1 chain of lines stays open" in wide.error.cause
    (open_,) = texts(wide, "open")
    assert open_ == "A chain of 4 lines is open at (80, 0.003) and (79.996, 0): left out."
    assert [remark.at for remark in wide.remarks if remark.kind == "open"] == [
        ((80.0, 0.003), (79.996, 0.0))
    ]


def test_an_arc_keeps_its_radius_when_a_line_misses_it(tmp_path: Path) -> None:
    def draw(space: Any) -> None:
        space.add_line((0, 0), (50.004, 0))
        space.add_arc((50, 10), 10, -90, 90)
        space.add_line((50.003, 20), (0, 20))
        space.add_line((0, 20), (0, 0))

    path = write(tmp_path / "arc.dxf", draw)
    assert "2 gaps were closed" in texts(bring(path), "gap")[0]
    shape = shape_of(part_from(path))
    assert shape.area == pytest.approx(1000 + 50 * math.pi, rel=1e-12)


def test_nearest_ends_are_joined_first() -> None:
    """Three loose ends near one place: the two nearest belong together."""
    joined = join(
        [Segment((0, 0), (10, 0)), Segment((10.001, 0), (10, 10)), Segment((10.005, 0), (20, 0))],
        0.01,
    )
    assert [gap.size for gap in joined.gaps] == [pytest.approx(0.001)]
    assert sorted(len(chain.curves) for chain in joined.open_chains) == [1, 2]


# --- twice --------------------------------------------------------------------------------------


def test_the_same_line_twice_also_backwards() -> None:
    line = Segment((0, 0), (10, 5))
    assert single(line, line, line.reversed()) == ([line], 2)
    arc = Arc((3, 3), 5, 0.3, 2.0)
    kept, gone = single(arc, arc.reversed(), arc)
    assert gone == 2
    (only,) = kept
    assert isinstance(only, Arc)
    ends = sorted([only.start, only.end]), sorted([arc.start, arc.end])
    for found, drawn in zip(*ends, strict=True):
        assert found == pytest.approx(drawn)
    circle = Arc((3, 3), 5, 0.0, TWO_PI)
    assert single(circle, circle.reversed()) == ([circle], 1)


def test_lines_that_cover_one_another_in_part_become_one() -> None:
    kept, gone = single(Segment((0, 0), (10, 0)), Segment((14, 0), (6, 0)), Segment((2, 0), (3, 0)))
    assert gone == 2
    (only,) = kept
    assert {only.start, only.end} == {(0, 0), (14, 0)}
    arcs = [Arc((0, 0), 2, 0, 2), Arc((0, 0), 2, 3, -2), Arc((0, 0), 2, 5, 0.5)]
    kept, gone = single(*arcs)
    assert gone == 1
    lengths = sorted(c.length for c in kept)
    assert lengths == pytest.approx([1.0, 6.0])
    all_round = [Arc((0, 0), 2, 0, 4), Arc((0, 0), 2, 3, 4)]
    (circle,), gone = single(*all_round)
    assert gone == 1
    assert circle.length == pytest.approx(4 * math.pi)


def test_lines_that_only_touch_or_cross_stay() -> None:
    apart = [
        Segment((0, 0), (10, 0)),
        Segment((10, 0), (20, 0)),  # in line, end to end
        Segment((5, -5), (5, 5)),  # across
        Segment((0, 0.02), (10, 0.02)),  # beside, farther than the tolerance
        Arc((0, 0), 5, 0, 1),
        Arc((0, 0), 5, 1, 1),
        Arc((0, 0), 5.02, 0, 1),
    ]
    assert single(*apart) == (apart, 0)


def test_a_drawing_in_which_everything_is_there_twice(tmp_path: Path) -> None:
    def draw(space: Any) -> None:
        rectangle(space, 0, 0, 80, 40)
        space.add_lwpolyline([(0, 40), (80, 40), (80, 0), (0, 0)], close=True)
        space.add_line((20, 0), (60, 0))
        for _ in range(3):
            space.add_circle((40, 20), 6)
        space.add_arc((40, 20), 6, 10, 200)

    path = write(tmp_path / "twice.dxf", draw)
    part = part_from(path)
    assert shape_of(part).area == pytest.approx(3200 - 36 * math.pi, rel=1e-12)
    assert [type(h) for h in part.holes] == [CircleHole]
    assert texts(bring(path), "twice") == [
        "8 lines were drawn twice or covered by another, and taken once."
    ]


# --- open chains and branches -------------------------------------------------------------------


def test_open_chains_are_left_out_and_their_ends_told(tmp_path: Path) -> None:
    def draw(space: Any) -> None:
        rectangle(space, 0, 0, 80, 40)
        space.add_lwpolyline([(10, 10), (20, 10), (20, 20)])
        space.add_line((30, 0), (30, 40))  # a bend line from edge to edge

    path = write(tmp_path / "open.dxf", draw)
    brought = bring(path)
    bend, hook = sorted(texts(brought, "open"))
    assert bend.startswith("A chain of 1 line is open at (30, ")
    assert hook.startswith("A chain of 2 lines is open at (")
    assert {frozenset(chain.ends) for chain in brought.open_chains} == {
        frozenset([(10.0, 10.0), (20.0, 20.0)]),
        frozenset([(30.0, 0.0), (30.0, 40.0)]),
    }
    assert shape_of(part_from(path)).area == pytest.approx(3200)


def test_a_hole_is_not_taken_for_the_part_when_the_outline_is_open(tmp_path: Path) -> None:
    def draw(space: Any) -> None:
        space.add_lwpolyline([(0, 0), (80, 0), (80, 40), (0, 40), (0, 2)])
        space.add_circle((40, 20), 6)

    path = write(tmp_path / "hole.dxf", draw)
    brought = bring(path)
    assert brought.part is None
    assert brought.error is not None
    assert "open at (" in brought.error.cause
    assert shape_of(part_from(path, tolerance=2.5)).area > 3000
    assert shape_of(part_from(path, outline=1)).area == pytest.approx(36 * math.pi), "if asked to"


def test_a_line_that_divides_the_part_is_left_out_at_its_branches(tmp_path: Path) -> None:
    """The outline is cut where the bend line meets it, so three lines meet at both ends."""

    def draw(space: Any) -> None:
        ring = [(0, 0), (30, 0), (80, 0), (80, 40), (30, 40), (0, 40)]
        for a, b in zip(ring, ring[1:] + ring[:1], strict=True):
            space.add_line(a, b)
        space.add_line((30, 0), (30, 40))
        space.add_line((0, 0), (-5, -5))  # a tail
        space.add_circle((60, 20), 5)

    path = write(tmp_path / "branch.dxf", draw)
    brought = bring(path)
    (said,) = texts(brought, "branch")
    assert "the way round the outside was taken; 1 line inside was left out" in said
    (tail,) = texts(brought, "open")
    assert "(−5, −5)" in tail
    part = part_from(path)
    assert shape_of(part).area == pytest.approx(3200 - 25 * math.pi)


def test_rings_that_touch_in_one_place_fall_apart_there() -> None:
    """Two triangles that share a corner are two rings, not one that touches itself."""
    one = [(0.0, 0.0), (10.0, 5.0), (10.0, -5.0)]
    two = [(0.0, 0.0), (-10.0, 5.0), (-10.0, -5.0)]
    lines = [Segment(r[i], r[(i + 1) % 3]) for r in (one, two) for i in range(3)]
    joined = join(list(lines), 0.01)
    assert sorted(sorted(s) for s in joined.sources) == [[0, 1, 2], [3, 4, 5]]
    assert joined.branches == ((0.0, 0.0),)
    assert joined.open_chains == ()


def test_a_bridge_between_two_rings_is_left_out() -> None:
    rings = [[(0, 0), (4, 0), (2, 3)], [(10, 0), (14, 0), (12, 3)]]
    lines: list[Curve] = [Segment(r[i], r[(i + 1) % 3]) for r in rings for i in range(3)]
    joined = join([*lines, Segment((4, 0), (10, 0))], 0.01)
    assert sorted(sorted(s) for s in joined.sources) == [[0, 1, 2], [3, 4, 5]]
    assert joined.inner == (6,)


def test_rings_in_any_order_and_direction_are_found() -> None:
    """A hundred random rings whose lines are shuffled and turned at random come back whole."""
    random = np.random.default_rng(7)
    curves: list[Curve] = []
    for k in range(100):
        n = int(random.integers(3, 9))
        angle = np.sort(random.uniform(0, TWO_PI, n)) + 0.01 * np.arange(n)
        points = [(30.0 * k + 10 * math.cos(a), 10 * math.sin(a)) for a in angle]
        curves += [Segment(points[i], points[(i + 1) % n]) for i in range(n)]
    order = random.permutation(len(curves)).tolist()
    mixed = [curves[k].reversed() if random.random() < 0.5 else curves[k] for k in order]
    joined = join(mixed, 1e-3)
    assert len(joined.rings) == 100
    assert joined.open_chains == joined.gaps == joined.branches == ()
    for ring in joined.rings:
        assert all(ring[i].start == ring[i - 1].end for i in range(len(ring)))
