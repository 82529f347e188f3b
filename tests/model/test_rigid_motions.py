"""Free rigid motions of a plate 100 x 50 with a hole at (50, 25)."""

from __future__ import annotations

import math
from dataclasses import replace

import pytest

from screenapp.model.part import (
    FixedSupport,
    Part,
    PrescribedSupport,
    RollerSupport,
    Support,
)
from screenapp.model.rigid_motions import FreeMotion, free_motions
from screenapp.model.shape import shape_of
from screenapp.model.validity import faults_of
from tests.model.plates import loop, plate


def free(*supports: Support, part: Part | None = None) -> tuple[FreeMotion, ...]:
    held = replace(part or plate(), supports=supports)
    return free_motions(held, shape_of(held))


def words(*supports: Support) -> list[str]:
    return [str(m) for m in free(*supports)]


def test_nothing_held_leaves_all_three() -> None:
    assert words() == ["sliding along x", "sliding along y", "turning about (50, 25)"]


@pytest.mark.parametrize(
    "supports",
    [
        (FixedSupport("s1", "e4"),),
        (FixedSupport("s1", "h1"),),
        (FixedSupport("s1", "c1"), RollerSupport("s2", "c2", 90.0)),
        (RollerSupport("s1", "e4"), RollerSupport("s2", "e1")),
        (RollerSupport("s1", "h1"), RollerSupport("s2", "c2", 90.0)),
        (PrescribedSupport("s1", "e2", 0.1, 0.0),),
        (RollerSupport("s1", "e4"), PrescribedSupport("s2", "c1", None, 0.0)),
    ],
)
def test_held_parts_have_no_free_motion(supports: tuple[Support, ...]) -> None:
    assert free(*supports) == ()
    assert not [f for f in faults_of(replace(plate(), supports=supports)) if f.blocks]


def test_rollers_on_one_edge_leave_the_sliding_along_it() -> None:
    assert words(RollerSupport("s1", "e4")) == ["sliding along y"]
    assert words(RollerSupport("s1", "e1"), RollerSupport("s2", "e3")) == ["sliding along x"]


def test_a_pin_leaves_the_turning_about_it() -> None:
    (motion,) = free(RollerSupport("s1", "h1"))
    assert motion.kind == "turn"
    assert motion.centre == pytest.approx((50.0, 25.0), abs=1e-9)
    (motion,) = free(FixedSupport("s1", "c3"))
    assert motion.centre == pytest.approx((100.0, 50.0), abs=1e-9)


def test_two_rollers_leave_the_turning_about_the_point_where_their_lines_meet() -> None:
    # c1 held along 45° and c2 along 135°: both lines pass through (50, 50)
    (motion,) = free(RollerSupport("s1", "c1", 45.0), RollerSupport("s2", "c2", 135.0))
    assert motion.centre == pytest.approx((50.0, 50.0), abs=1e-9)


def test_parallel_rollers_leave_a_sliding_across_them() -> None:
    motions = free(RollerSupport("s1", "c1", 30.0), RollerSupport("s2", "c3", 30.0))
    assert [m.kind for m in motions] == ["slide"]
    assert str(motions[0]) == "sliding at 120° to x"


def test_one_roller_at_a_corner_leaves_two() -> None:
    motions = free(RollerSupport("s1", "c1", 90.0))
    assert [m.kind for m in motions] == ["slide", "turn"]
    assert str(motions[0]) == "sliding along x"
    # the centre of the turning lies on the roller's line through (0, 0)
    assert motions[1].centre[0] == pytest.approx(0.0, abs=1e-9)


def test_rollers_on_a_round_edge_leave_the_turning_about_its_centre() -> None:
    d = loop([(0, -20), (0, 20), (-30, 0)], {0: (20.0, 0.0)})
    (motion,) = free(RollerSupport("s1", "e1"), part=plate(d))
    assert motion.kind == "turn"
    assert motion.centre == pytest.approx((0.0, 0.0), abs=1e-9)


def test_a_narrow_hold_is_called_weak() -> None:
    beam = loop([(0, 0), (1000, 0), (1000, 0.5), (0, 0.5)])
    motions = free(FixedSupport("s1", "e4"), part=plate(beam))
    assert [(m.kind, m.weak) for m in motions] == [("turn", True)]
    assert math.dist(motions[0].centre, (0.0, 0.25)) < 1.0


@pytest.mark.parametrize("scale", [1e-2, 1.0, 1e3])
def test_size_and_place_of_the_part_do_not_matter(scale: float) -> None:
    points = [(0, 0), (100, 0), (100, 50), (0, 50)]
    far = loop([((x + 700) * scale, (y - 300) * scale) for x, y in points])
    part = Part(outline=far)
    (motion,) = free(FixedSupport("s1", "c1"), part=part)
    assert motion.centre == pytest.approx((700 * scale, -300 * scale), rel=1e-9)
    assert free(FixedSupport("s1", "e1"), part=part) == ()


def test_the_fault_names_the_motion_and_marks_its_centre() -> None:
    part = replace(plate(), supports=(RollerSupport("s1", "h1"),))
    (fault,) = faults_of(part)
    assert fault.cause == "nothing stops the part from turning about (50, 25)"
    assert fault.at == pytest.approx((50.0, 25.0))
    (fault,) = faults_of(replace(plate(), supports=()))
    assert "slide along x and y and turn" in fault.cause
