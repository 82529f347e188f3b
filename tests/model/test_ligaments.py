"""Narrow places against distances worked out by hand."""

from __future__ import annotations

import math

import numpy as np
import pytest

from screenapp.model.ligaments import ligaments, local_thickness, narrowest_ligament
from screenapp.model.part import CircleHole, Hole, Loop, LoopHole, Part, SlotHole
from screenapp.model.shape import Shape, shape_of
from tests.model.plates import loop, rectangle


def shape(outline: Loop, *holes: Hole) -> Shape:
    return shape_of(Part(outline=outline, holes=holes))


PLATE = rectangle(100.0, 50.0)


@pytest.mark.parametrize(
    ("holes", "width", "between"),
    [
        ((), 50.0, {"e1", "e3"}),
        ((CircleHole("h1", (50.0, 8.0), 10.0),), 3.0, {"e1", "h1"}),
        (
            (CircleHole("h1", (30.0, 20.0), 10.0), CircleHole("h2", (39.0, 32.0), 8.0)),
            15.0 - 9.0,
            {"h1", "h2"},
        ),
        ((SlotHole("h1", (50.0, 25.0), 44.0, 4.0, 90.0),), 3.0, {"e1", "h1"}),
        (
            (LoopHole("h1", loop([(30, 20), (70, 20), (50, 48)], prefix="b")),),
            2.0,
            {"e3", "be2"},  # a corner pointing at an edge: either of its edges may be named
        ),
    ],
)
def test_narrowest(holes: tuple[Hole, ...], width: float, between: set[str]) -> None:
    found = narrowest_ligament(shape(PLATE, *holes))
    assert found is not None
    assert found.width == pytest.approx(width, rel=1e-9)
    assert set(found.between) == between


def test_the_middle_lies_between_the_ends() -> None:
    found = narrowest_ligament(shape(PLATE, CircleHole("h1", (50.0, 8.0), 10.0)))
    assert found is not None
    assert found.at == pytest.approx((50.0, 1.5))


def test_a_re_entrant_corner_faces_along_its_diagonal() -> None:
    corner = loop([(0, 0), (90, 0), (90, 40), (40, 40), (40, 90), (0, 90)])
    found = narrowest_ligament(shape(corner, CircleHole("h1", (30.0, 30.0), 16.0)))
    assert found is not None
    assert found.width == pytest.approx(math.hypot(10.0, 10.0) - 8.0)
    assert "h1" in found.between


def test_the_gap_of_a_notch_is_no_ligament() -> None:
    notch = loop([(0, 0), (49, 0), (49, 30), (51, 30), (51, 0), (100, 0), (100, 80), (0, 80)])
    found = narrowest_ligament(shape(notch))
    assert found is not None
    assert found.width == pytest.approx(49.0)  # the legs beside it, not its 2 mm


def test_legs_of_a_rounded_corner_are_no_ligament() -> None:
    found = ligaments(shape(rectangle(100.0, 50.0, 2.0)), 10.0)
    assert found == []


def test_ring_of_two_circles() -> None:
    disc = loop([(-20, 0), (20, 0)], {0: (0.0, -20.0), 1: (0.0, 20.0)})
    found = narrowest_ligament(shape(disc, CircleHole("h1", (3.0, 0.0), 30.0)))
    assert found is not None
    assert found.width == pytest.approx(20.0 - 15.0 - 3.0)
    assert found.at == pytest.approx((19.0, 0.0))


def test_a_disc_has_two_halves_that_face_but_no_narrow_place() -> None:
    disc = loop([(-20, 0), (20, 0)], {0: (0.0, -20.0), 1: (0.0, 20.0)})
    assert narrowest_ligament(shape(disc)) is None


def test_only_those_below_are_given_narrowest_first() -> None:
    plate = shape(PLATE, CircleHole("h1", (20.0, 8.0), 10.0), CircleHole("h2", (60.0, 7.0), 10.0))
    found = ligaments(plate, 5.0)
    assert [round(x.width, 9) for x in found] == [2.0, 3.0]
    assert ligaments(plate, 1.9) == []


def test_local_thickness_of_a_ring_and_a_strip() -> None:
    disc = loop([(-20, 0), (20, 0)], {0: (0.0, -20.0), 1: (0.0, 20.0)})
    ring = shape(disc, CircleHole("h1", (0.0, 0.0), 24.0))
    angles = np.linspace(0.1, 6.2, 40)
    way = np.stack([np.cos(angles), np.sin(angles)], axis=1)
    assert local_thickness(ring, 20.0 * way, -way) == pytest.approx(np.full(40, 8.0))
    assert local_thickness(ring, 12.0 * way, way) == pytest.approx(np.full(40, 8.0))
    x = np.linspace(1.0, 99.0, 25)
    foot = np.stack([x, np.zeros(25)], axis=1)
    up = np.tile([0.0, 1.0], (25, 1))
    assert local_thickness(shape(PLATE), foot, up) == pytest.approx(np.full(25, 50.0))
