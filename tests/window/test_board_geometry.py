"""Nearest places, rings at fault, grid steps and arcs: the board's geometry without a window."""

from __future__ import annotations

import math
from dataclasses import replace

import numpy as np
import pytest
from hypothesis import given, settings, strategies as st

from screenapp.model.curves import Arc, arc_through
from screenapp.model.part import CircleHole, Corner, Edge, Loop, Part, SlotHole
from screenapp.window.board.drawn_part import drawn_part
from screenapp.window.board.grid import grid_step, round_step
from screenapp.window.board.marks import corner_outward
from screenapp.window.board.snapping import snap_points
from screenapp.window.board.tools.arc import crown
from screenapp.window.board.tools.probe import on_material
from screenapp.window.board.tools.slot import slot_rim
from tests.window.board_kit import plate, ring


def curved() -> Part:
    """A plate with a fillet, an arc that bulges, a round hole and a slanting slot."""
    loop = Loop(
        (
            Corner("c1", (0, 0)),
            Corner("c2", (80, 0)),
            Corner("c3", (80, 50), 12.0),
            Corner("c4", (0, 50)),
        ),
        (Edge("e1"), Edge("e2"), Edge("e3"), Edge("e4", (-20.0, 25.0))),
    )
    return Part(
        outline=loop,
        holes=(CircleHole("h1", (20, 25), 14), SlotHole("h2", (55, 20), 24, 8, 30)),
    )


PART = curved()


@settings(max_examples=60, deadline=None)
@given(st.floats(-60.0, 140.0), st.floats(-50.0, 110.0))
def test_the_nearest_place_is_the_nearest_of_many(x: float, y: float) -> None:
    drawn = drawn_part(PART)
    foot = drawn.index.nearest((x, y))
    assert foot is not None
    spread = np.concatenate([p.curve.point(np.linspace(0, 1, 4001)) for p in drawn.pieces])
    best = float(np.hypot(*(spread - (x, y)).T).min())
    assert foot.far == pytest.approx(math.dist(foot.at, (x, y)), abs=1e-9)
    assert foot.far <= best + 1e-9
    assert foot.far >= best - 0.02  # the samples stand at most 0.02 mm apart


def test_what_is_left_out_is_not_found() -> None:
    drawn = drawn_part(PART)
    foot = drawn.index.nearest((79.9, 20.0), frozenset({"e2"}))
    assert foot is not None
    assert foot.piece.feature != "e2"


def test_a_round_that_does_not_fit_is_drawn_sharp_and_the_holes_stay() -> None:
    outline = PART.outline
    assert outline is not None
    big = replace(
        outline, corners=(*outline.corners[:2], Corner("c3", (80, 50), 500.0), outline.corners[3])
    )
    drawn = drawn_part(replace(PART, outline=big))
    assert {p.feature for p in drawn.pieces} == {"e1", "e2", "e3", "e4", "h1", "h2"}


@pytest.mark.parametrize("size", [0.0, -3.0, math.nan, math.inf])
def test_a_hole_without_a_size_draws_nothing_and_breaks_nothing(size: float) -> None:
    drawn = drawn_part(replace(PART, holes=(CircleHole("h1", (20, 25), size),)))
    assert drawn.pieces_of("h1") == ()
    assert drawn.anchor_of("h1") == (20, 25)
    assert drawn.bounds is not None


def test_corners_that_coincide_break_nothing() -> None:
    drawn = drawn_part(Part(outline=ring((0, 0), (10, 0), (10, 0), (0, 10))))
    assert [p.feature for p in drawn.pieces] == ["e1", "e3", "e4"]


def test_holes_without_an_outline_are_drawn() -> None:
    drawn = drawn_part(Part(holes=PART.holes))
    assert drawn.bounds == pytest.approx((13.0, 12.0, 59.0 + 8.0 * 0.75**0.5, 32.0), abs=0.1)
    assert drawn_part(Part()).bounds is None


def test_material_is_inside_the_outline_outside_the_holes_and_on_the_rims() -> None:
    drawn = drawn_part(PART)
    assert on_material(drawn, (40.0, 40.0))
    assert on_material(drawn, (-10.0, 25.0))  # in the bulge
    assert on_material(drawn, (27.0, 25.0))  # on the rim of h1
    assert not on_material(drawn, (20.0, 25.0))
    assert not on_material(drawn, (55.0, 20.0))
    assert not on_material(drawn, (79.0, 49.0))  # cut off by the fillet


def test_points_to_snap_to() -> None:
    points, places = snap_points(drawn_part(plate()))
    assert places.shape == (len(points), 2)
    assert {(p.kind, p.at) for p in points if p.kind != "corner"} == {
        ("centre", (50.0, 30.0)),
        ("middle", (50.0, 0.0)),
        ("middle", (100.0, 30.0)),
        ("middle", (50.0, 60.0)),
        ("middle", (0.0, 30.0)),
    }


@settings(max_examples=60, deadline=None)
@given(
    st.floats(-50, 50),
    st.floats(-50, 50),
    st.floats(0.1, 80),
    st.floats(0, 6.28),
    st.floats(1.001, 20.0),
    st.floats(-90, 90),
    st.floats(-90, 90),
)
def test_an_arc_by_its_radius_has_that_radius(
    x: float, y: float, chord: float, turn: float, ratio: float, tx: float, ty: float
) -> None:
    a, b = (x, y), (x + chord * math.cos(turn), y + chord * math.sin(turn))
    radius = ratio * chord / 2.0
    through = crown(a, b, radius, (tx, ty))
    assert through is not None
    arc = arc_through(a, through, b)
    assert isinstance(arc, Arc)
    assert arc.radius == pytest.approx(radius, rel=1e-6)
    assert math.dist(a, arc.centre) == pytest.approx(radius, rel=1e-6)


def test_a_radius_below_half_the_chord_makes_no_arc() -> None:
    assert crown((0, 0), (10, 0), 4.9, (5, 5)) is None


def test_grid_steps_are_round_and_never_too_fine() -> None:
    assert [round_step(v) for v in (0.7, 1.0, 1.2, 2.3, 30.0, 60.0)] == [1, 1, 2, 5, 50, 100]
    for scale in np.geomspace(1e-2, 1e4, 40):
        step = grid_step(float(scale), "mm-N-MPa")
        assert 9.0 <= step * scale <= 9.0 * 2.5 + 1e-9
        inches = grid_step(float(scale), "in-lbf-ksi") / 25.4
        mantissa = inches / 10.0 ** math.floor(math.log10(inches) + 1e-9)
        assert min(abs(mantissa - m) for m in (1.0, 2.0, 5.0)) < 1e-9


def test_away_from_a_corner_is_away_from_the_part() -> None:
    drawn = drawn_part(plate())
    assert corner_outward(drawn, (100.0, 60.0)) == pytest.approx([0.5**0.5, -(0.5**0.5)])


def test_a_slot_is_drawn_as_wide_and_long_as_it_will_be() -> None:
    rim = slot_rim((10.0, 10.0), (30.0, 10.0), 8.0)
    assert rim.min(axis=0) == pytest.approx([6.0, 6.0])
    assert rim.max(axis=0) == pytest.approx([34.0, 14.0])
