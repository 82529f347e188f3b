"""Which places of a part are known to have no finite stress, and how they are named."""

from __future__ import annotations

import math
from dataclasses import replace

import pytest

from screenapp.mechanics.singular_spots import SingularSpot, faces, singular_spots
from screenapp.model.part import (
    BearingLoad,
    Case,
    CircleHole,
    FixedSupport,
    Load,
    LoopHole,
    Part,
    Point,
    PointLoad,
    PrescribedSupport,
    RollerSupport,
    SlotHole,
    Support,
)
from screenapp.model.shape import shape_of
from tests.model.plates import loop, plate, rectangle

ELL = [(0.0, 0.0), (80.0, 0.0), (80.0, 30.0), (30.0, 30.0), (30.0, 80.0), (0.0, 80.0)]


def held(*supports: Support, part: Part | None = None) -> Part:
    return replace(part or plate(), supports=supports)


def spots(part: Part) -> list[SingularSpot]:
    return list(singular_spots(part, shape_of(part)))


def places(part: Part) -> dict[str, float]:
    """Rate by place, rounded."""
    return {s.place: round(s.rate, 3) for s in spots(part)}


# --- corners --------------------------------------------------------------------------------


def test_a_sharp_re_entrant_corner_is_named_with_its_angle_and_mend() -> None:
    part = held(part=plate(loop(ELL)))
    (spot,) = spots(part)
    assert spot.at == (30.0, 30.0)
    assert spot.ids[0] == "c4"
    assert spot.place == "corner c4"
    assert spot.rate == pytest.approx(0.4555, abs=1e-4)
    assert "270°" in spot.why
    assert "c4" in spot.mend
    assert "radius" in spot.mend
    assert spot.case == ""


def test_a_rounded_corner_is_none_and_so_is_any_convex_one() -> None:
    assert spots(held(part=plate(loop(ELL, rounds={3: 0.2})))) == []
    assert spots(held(part=plate(rectangle(100.0, 50.0)))) == []


def test_the_way_a_loop_was_drawn_does_not_matter() -> None:
    turned = [ELL[0], *reversed(ELL[1:])]
    (spot,) = spots(held(part=plate(loop(turned))))
    assert spot.at == (30.0, 30.0)
    assert spot.rate == pytest.approx(0.4555, abs=1e-4)


@pytest.mark.parametrize(("bend", "named"), [(0.5, False), (2.0, True), (-2.0, False)])
def test_a_nearly_straight_corner_counts_from_a_growth_that_could_be_seen(
    bend: float, named: bool
) -> None:
    # a corner in the upper edge, pushed down by this many degrees on either side
    down = 50.0 * math.tan(math.radians(bend))
    points = [(0.0, 0.0), (100.0, 0.0), (100.0, 50.0), (50.0, 50.0 - down), (0.0, 50.0)]
    found = spots(held(part=plate(loop(points), CircleHole("h1", (20.0, 20.0), 5.0))))
    assert [s.place for s in found] == (["corner c4"] if named else [])


def test_corners_of_a_hole_are_re_entrant_where_the_hole_is_convex() -> None:
    corners = ((40.0, 15.0), (60.0, 15.0), (60.0, 35.0), (40.0, 35.0))
    hole = LoopHole("h1", loop(corners, prefix="h"))
    found = places(held(part=plate(None, hole)))
    assert found == dict.fromkeys([f"corner hc{i}" for i in range(1, 5)], 0.456)


def test_an_arc_that_meets_a_line_with_a_kink_is_a_corner_and_a_tangent_one_is_none() -> None:
    # a half round notch in the upper edge: it leaves the edge at a right angle, 90° inside
    points = [(0.0, 0.0), (100.0, 0.0), (100.0, 50.0), (60.0, 50.0), (40.0, 50.0), (0.0, 50.0)]
    half = plate(loop(points, through={3: (50.0, 40.0)}), CircleHole("h1", (20.0, 20.0), 5.0))
    assert spots(held(part=half)) == []
    # a half round bump on it: 270° inside at both ends
    bump = plate(loop(points, through={3: (50.0, 60.0)}), CircleHole("h1", (20.0, 20.0), 5.0))
    assert places(held(part=bump)) == {"corner c4": 0.456, "corner c5": 0.456}
    # an edge that runs on into the arc: e2 and the arc e3 share their tangent at c3
    points = [(0.0, 0.0), (100.0, 0.0), (100.0, 30.0), (60.0, 30.0), (0.0, 30.0)]
    tangent = plate(loop(points, through={2: (80.0, 50.0)}), CircleHole("h1", (20.0, 15.0), 5.0))
    assert places(held(part=tangent)) == {"corner c4": 0.456}


@pytest.mark.parametrize(("side", "counts"), [(1.0, True), (-1.0, False)])
def test_a_cusp_is_a_crack_or_a_thorn_by_the_side_of_the_material(
    side: float, counts: bool
) -> None:
    # two arcs that touch at (50, 20): seen from inside a notch of no angle, or a thorn
    tip: Point = (50.0, 20.0 if side > 0 else 80.0)
    points = [(0.0, 0.0), (100.0, 0.0), (100.0, 50.0), (80.0, 50.0), tip, (20.0, 50.0), (0.0, 50.0)]
    through = {
        3: (50.0 + 30.0 * (1 - math.sqrt(0.5)), tip[1] + side * 30.0 * math.sqrt(0.5)),
        4: (50.0 - 30.0 * (1 - math.sqrt(0.5)), tip[1] + side * 30.0 * math.sqrt(0.5)),
    }
    part = held(part=plate(loop(points, through=through), CircleHole("h1", (20.0, 15.0), 5.0)))
    rates = {s.place: s.rate for s in spots(part)}
    if counts:
        assert rates["corner c5"] == pytest.approx(0.5)
    else:
        assert "corner c5" not in rates


# --- supports -------------------------------------------------------------------------------


def test_the_ends_of_a_fixed_edge() -> None:
    # 90° between fixed and free, plane stress, ν 0.3: λ = 0.7583
    assert places(held(FixedSupport("s1", "e4"))) == {"corner c1": 0.242, "corner c4": 0.242}
    strain = replace(plate(), wall=replace(plate().wall, state="plane strain"))
    assert places(held(FixedSupport("s1", "e4"), part=strain))["corner c1"] == 0.289


@pytest.mark.parametrize(
    "support",
    [
        RollerSupport("s1", "e4"),
        RollerSupport("s1", "e4", 0.0),
        RollerSupport("s1", "e4", 180.0),
        PrescribedSupport("s1", "e4", x=0.0),
    ],
)
def test_a_face_that_slides_ends_at_a_right_angle_without_harm(support: Support) -> None:
    assert spots(held(support)) == []


def test_a_face_held_along_itself_alone() -> None:
    # u_y = 0 and σx = 0 at x = 0 against a free edge: the odd mirror image of a straight free edge
    assert spots(held(PrescribedSupport("s1", "e4", y=0.0))) == []
    # against an edge at 135° it is half of a 270° corner loaded in the odd way: λ = 0.9085
    # (Williams' antisymmetric mode, from memory)
    points = [(0.0, 0.0), (100.0, 0.0), (100.0, 50.0), (-50.0, 50.0)]
    slanted = plate(loop(points))
    found = spots(held(RollerSupport("s1", "e1", 0.0), part=slanted))
    assert {s.place: round(1.0 - s.rate, 3) for s in found} == {"corner c1": 0.909}


def test_a_rim_that_is_held_all_round_has_no_end() -> None:
    for hole in (CircleHole("h1", (50.0, 25.0), 12.0), SlotHole("h1", (50.0, 25.0), 20.0, 8.0, 30)):
        for support in (
            FixedSupport("s1", "h1"),
            RollerSupport("s1", "h1"),
            RollerSupport("s1", "h1", 30.0),
            PrescribedSupport("s1", "h1", y=0.1),
        ):
            assert spots(held(support, part=plate(None, hole))) == [], (hole, support)


def test_a_support_that_ends_on_a_smooth_boundary() -> None:
    # the edge e4 is held, the fillets at its ends are not: 180°, real part 1/2
    part = held(FixedSupport("s1", "e4"), part=plate(rectangle(100.0, 50.0, 8.0)))
    found = spots(part)
    assert [round(s.rate, 6) for s in found] == [0.5, 0.5]
    assert {frozenset(s.ids) for s in found} == {frozenset(("c1", "e4")), frozenset(("c4", "e4"))}
    assert all(s.place.startswith("the end of a support between ") for s in found)
    assert all("a support ends at the junction of" in s.why for s in found)


def test_a_held_corner_that_turns_inward_and_one_that_turns_outward() -> None:
    inward = held(FixedSupport("s1", "e3"), FixedSupport("s2", "e4"), part=plate(loop(ELL)))
    found = {s.place: s for s in spots(inward)}
    assert "turns sharply" in found["corner c4"].why
    assert "radius" in found["corner c4"].mend
    outward = held(FixedSupport("s1", "e1"), FixedSupport("s2", "e6"), part=plate(loop(ELL)))
    assert "corner c1" not in places(outward)


def test_two_sliding_faces_lock_an_obtuse_corner() -> None:
    points = [(0.0, 0.0), (100.0, 0.0), (100.0, 50.0), (-50.0 / math.sqrt(3.0), 50.0)]
    part = held(RollerSupport("s1", "e1"), RollerSupport("s2", "e4"), part=plate(loop(points)))
    (spot,) = [s for s in spots(part) if s.place == "corner c1"]
    assert spot.rate == pytest.approx(0.5, abs=1e-6)  # 120°: λ = π/ω - 1
    assert "turns sharply" in spot.why


def test_two_supports_on_one_edge_hold_what_both_hold() -> None:
    shape = shape_of(plate())
    roller = RollerSupport("s1", "e4")
    for second, kind in (
        (PrescribedSupport("s2", "e4", y=0.0), "fixed"),
        (RollerSupport("s2", "e4", 45.0), "fixed"),
        (RollerSupport("s2", "e4", 180.0), "normal"),
        (PrescribedSupport("s2", "e4"), "normal"),
        (FixedSupport("s2", "e4"), "fixed"),
    ):
        assert faces(held(roller, second), shape)[3] == kind, second
    around = held(RollerSupport("s1", "h1"), RollerSupport("s2", "h1", 0.0))
    assert set(faces(around, shape)[4:]) == {"fixed"}


# --- points ---------------------------------------------------------------------------------


@pytest.mark.parametrize(
    "support",
    [FixedSupport("s1", "c2"), RollerSupport("s1", "c2", 90.0), PrescribedSupport("s1", "c2", x=1)],
)
def test_a_corner_held_at_a_point(support: Support) -> None:
    (spot,) = spots(held(support))
    assert (spot.at, spot.rate, spot.place) == ((100.0, 0.0), 1.0, "corner c2")
    assert "held at a point" in spot.why


def test_a_point_that_nothing_or_its_edge_already_holds_is_none() -> None:
    assert spots(held(PrescribedSupport("s1", "c2"))) == []
    both = held(FixedSupport("s1", "e4"), FixedSupport("s2", "c1"))
    assert places(both) == {"corner c1": 0.242, "corner c4": 0.242}


def test_a_point_force_belongs_to_its_case_alone() -> None:
    def cases(*loads: Load) -> tuple[Case, ...]:
        return (Case("k1", "one", loads), Case("k2", "two"))

    part = replace(held(), cases=cases(PointLoad("l1", "c3", 0.0, -5.0)))
    (spot,) = spots(part)
    assert (spot.at, spot.rate, spot.case) == ((100.0, 50.0), 1.0, "k1")
    nothing = (PointLoad("l1", "c3", 0.0, 0.0), BearingLoad("l2", "h1", 5.0, 0.0))
    assert spots(replace(held(), cases=cases(*nothing))) == []
