"""Ellipses and splines fitted by arcs: within the tolerance, without kinks, with few arcs."""

from __future__ import annotations

import math
from itertools import pairwise
from pathlib import Path
from typing import Any

import numpy as np
import pytest
from ezdxf.math import BSpline, Vec3

from screenapp.exchange.biarcs import arcs_of
from screenapp.exchange.dxf_reading import read_drawing
from screenapp.exchange.free_curves import EllipseArc, Spline
from screenapp.model.curves import Arc, Curve
from screenapp.model.shape import shape_of
from tests.exchange.drawings import distance, part_from, write

WAVE = Spline(
    3,
    (0, 0, 0, 0, 1, 2, 3, 3, 3, 3),
    ((0.0, 0.0), (10.0, 30.0), (25.0, -20.0), (40.0, 30.0), (60.0, 5.0), (70.0, 0.0)),
    (1.0,) * 6,
)
ELLIPSE = EllipseArc((3.0, 4.0), (50.0, 10.0), (-4.0, 20.0), 0.0, 2 * math.pi)


def worst(free: EllipseArc | Spline, arcs: list[Curve]) -> float:
    """The largest distance of either from the other, at places between the fit's own."""
    t = np.concatenate([np.linspace(a, b, 501) for a, b in pairwise(free.breaks)])
    on = free.point(t)
    there = max(distance((float(x), float(y)), arcs) for x, y in on[::3])
    places = np.concatenate([arc.point(np.linspace(0, 1, 9)) for arc in arcs])
    fine = free.point(np.linspace(free.breaks[0], free.breaks[-1], 20001))
    back = max(float(np.min(np.hypot(*(fine - p).T))) for p in places)
    spacing = float(np.max(np.hypot(*np.diff(fine, axis=0).T)))
    return max(there, math.sqrt(max(0.0, back**2 - (spacing / 2) ** 2)))


@pytest.mark.parametrize("free", [WAVE, ELLIPSE])
@pytest.mark.parametrize("tolerance", [0.1, 0.01, 0.001])
def test_the_fit_stays_within_the_tolerance_and_has_no_kinks(
    free: EllipseArc | Spline, tolerance: float
) -> None:
    arcs = arcs_of(free, tolerance)
    assert worst(free, arcs) <= tolerance
    for before, after in pairwise(arcs):
        assert math.dist(before.end, after.start) <= 1e-9
        # merged arcs of one circle may be off by a thousandth of the tolerance
        turn = float(before.tangent(1.0) @ after.tangent(0.0))
        assert turn >= 1.0 - 1e-6


def test_the_number_of_arcs_grows_with_the_cube_root_of_the_accuracy() -> None:
    """A biarc's deviation falls with the third power of its length (Meek & Walton 1995, J. Comput.
    Appl. Math. 59, from memory), so a thousandth needs ten times the arcs; halving may double."""
    few, many = len(arcs_of(WAVE, 0.1)), len(arcs_of(WAVE, 0.0001))
    assert many <= 2 * 10 * few


def test_a_rational_quarter_circle_is_one_arc() -> None:
    """Weights 1, √½, 1 make the exact quarter circle (Piegl & Tiller, The NURBS Book, from
    memory)."""
    quarter = Spline(
        2, (0, 0, 0, 1, 1, 1), ((1.0, 0.0), (1.0, 1.0), (0.0, 1.0)), (1.0, math.sqrt(0.5), 1.0)
    )
    (arc,) = arcs_of(quarter, 0.001)
    assert isinstance(arc, Arc)
    assert arc.radius == pytest.approx(1.0, abs=1e-9)
    assert arc.centre == pytest.approx((0.0, 0.0), abs=1e-9)
    assert arc.sweep == pytest.approx(math.pi / 2, abs=1e-9)


def test_a_straight_spline_is_straight() -> None:
    line = Spline(
        3, (0, 0, 0, 0, 1, 1, 1, 1), ((0.0, 0.0), (1.0, 1.0), (2.0, 2.0), (3.0, 3.0)), (1.0,) * 4
    )
    arcs = arcs_of(line, 0.01)
    assert sum(arc.length for arc in arcs) == pytest.approx(3 * math.sqrt(2))
    assert not any(isinstance(arc, Arc) for arc in arcs)


def test_a_spline_with_a_corner_keeps_it() -> None:
    """A knot as often as the degree is a corner: the curve turns there by a right angle."""
    bent = Spline(
        2,
        (0, 0, 0, 1, 1, 2, 2, 2),
        ((0.0, 0.0), (5.0, 0.0), (10.0, 0.0), (10.0, 5.0), (10.0, 10.0)),
        (1.0,) * 5,
    )
    arcs = arcs_of(bent, 0.01)
    assert any(math.dist(arc.end, (10.0, 0.0)) < 1e-12 for arc in arcs)
    assert sum(arc.length for arc in arcs) == pytest.approx(20.0)


def test_our_evaluation_agrees_with_that_of_ezdxf() -> None:
    weights = (1.0, 2.0, 0.5, 1.0, 3.0, 1.0)
    ours = Spline(3, WAVE.knots, WAVE.control, weights)
    theirs = BSpline(
        [Vec3(p) for p in WAVE.control], order=4, knots=list(WAVE.knots), weights=list(weights)
    )
    t = np.linspace(0.0, 3.0, 31)[:-1]
    found = np.array([(p.x, p.y) for p in theirs.points(t.tolist())])
    np.testing.assert_allclose(ours.point(t), found, atol=1e-12)
    step = 1e-6
    slope = (ours.point(t[1:] + step) - ours.point(t[1:] - step)) / (2 * step)
    np.testing.assert_allclose(ours.derivative(t[1:]), slope, rtol=1e-5, atol=1e-5)


def test_splines_of_every_sort_in_a_file(tmp_path: Path) -> None:
    """By fit points, by control points, rational, closed: each closes its part's outline."""

    def by_fit_points(space: Any) -> None:
        space.add_spline([(0, 0), (10, 8), (25, 12), (40, 8), (50, 0)])
        space.add_line((50, 0), (0, 0))

    def by_control_points(space: Any) -> None:
        space.add_open_spline([(0, 0), (0, 20), (50, 20), (50, 0)], degree=3)
        space.add_line((50, 0), (0, 0))

    def rational(space: Any) -> None:
        space.add_rational_spline([(0, 0), (0, 25), (50, 25), (50, 0)], [1, 2, 2, 1], degree=3)
        space.add_line((50, 0), (0, 0))

    def closed(space: Any) -> None:
        spline = space.add_spline()
        points = [(0, 0, 0), (50, 0, 0), (60, 30, 0), (30, 50, 0), (-10, 30, 0)]
        spline.set_closed(points, degree=3)

    for draw in (by_fit_points, by_control_points, rational, closed):
        path = write(tmp_path / "s.dxf", draw)
        frees = [c.curve for c in read_drawing(path).curves if isinstance(c.curve, Spline)]
        assert len(frees) == 1, draw.__name__
        part = part_from(path, tolerance=0.01)
        pieces = [piece.curve for piece in shape_of(part).curves]
        t = np.concatenate([np.linspace(a, b, 40) for a, b in pairwise(frees[0].breaks)])
        off = max(distance((float(x), float(y)), pieces) for x, y in frees[0].point(t))
        assert off <= 0.0101, draw.__name__


def test_an_ellipse_as_hole_is_near_its_area(tmp_path: Path) -> None:
    def draw(space: Any) -> None:
        space.add_lwpolyline([(0, 0), (100, 0), (100, 60), (0, 60)], close=True)
        space.add_ellipse((50, 30), (20, 10), 0.4)

    part = part_from(write(tmp_path / "e.dxf", draw), tolerance=0.001)
    a = math.hypot(20, 10)
    assert shape_of(part).area == pytest.approx(6000 - math.pi * a * 0.4 * a, abs=0.1)
