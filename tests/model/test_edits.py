"""Edits: ids survive, nonsense is refused, what is lost is said."""

from __future__ import annotations

import math
from dataclasses import replace

import pytest

from screenapp.model import edits
from screenapp.model.curves import Arc
from screenapp.model.part import (
    BearingLoad,
    CircleHole,
    Corner,
    Edge,
    FixedSupport,
    ForceLoad,
    Formula,
    GravityLoad,
    Loop,
    LoopHole,
    Material,
    Part,
    PointLoad,
    PressureLoad,
    RollerSupport,
    SlotHole,
    StressLimit,
)
from screenapp.model.shape import edge_curves, shape_of

STEEL = Material("steel", 210000.0, 0.3, 7850.0, 235.0, 360.0)


@pytest.fixture
def plate() -> Part:
    part = edits.outline_from_rectangle(Part(), (100.0, 50.0), (0.0, 0.0)).part
    part = edits.add_circle_hole(part, (30.0, 25.0), 10.0)
    part = edits.add_case(part, "Pull")
    part = edits.add_support(part, FixedSupport("", "e4"))
    return edits.add_load(part, "k1", ForceLoad("", "e2", 100.0, 0.0))


def outline(part: Part) -> Loop:
    assert part.outline is not None
    return part.outline


def test_rectangle_runs_counter_clockwise_with_fresh_ids(plate: Part) -> None:
    loop = outline(plate)
    assert [c.id for c in loop.corners] == ["c1", "c2", "c3", "c4"]
    assert [e.id for e in loop.edges] == ["e1", "e2", "e3", "e4"]
    assert shape_of(plate).area == pytest.approx(100 * 50 - math.pi * 25)


def test_new_ids_count_on_from_the_largest(plate: Part) -> None:
    assert edits.new_id(plate, "h") == "h2"
    assert edits.new_id(replace(plate, holes=(CircleHole("h7", (1.0, 1.0), 1.0),)), "h") == "h8"
    assert edits.new_id(plate, "g") == "g1"
    assert edits.new_id(plate, "k") == "k2"


def test_drawing_the_outline_anew_says_what_was_lost(plate: Part) -> None:
    outcome = edits.set_outline(plate, [(0.0, 0.0), (9.0, 0.0), (0.0, 9.0)])
    assert outcome.lost == ("support s1 on e4", "load l1 on e2 (case “Pull”)")
    assert outcome.part.supports == ()
    assert outcome.part.holes == plate.holes


def test_two_corners_need_an_arc() -> None:
    with pytest.raises(edits.EditError, match="encloses nothing"):
        edits.set_outline(Part(), [(0.0, 0.0), (10.0, 0.0)])
    part = edits.set_outline(Part(), [(0.0, 0.0), (10.0, 0.0)], [(5.0, -5.0), None]).part
    assert shape_of(part).area == pytest.approx(0.5 * math.pi * 25)


def test_inserted_corner_leaves_loads_on_their_edge(plate: Part) -> None:
    split = edits.insert_corner(plate, "e2", (101.0, 20.0))
    loop = outline(split)
    assert [e.id for e in loop.edges] == ["e1", "e2", "e5", "e3", "e4"]
    assert loop.corners[2] == Corner("c5", (100.0, 20.0))
    assert split.cases == plate.cases
    assert shape_of(split).area == pytest.approx(shape_of(plate).area)


def test_both_pieces_of_a_split_arc_stay_on_its_circle() -> None:
    part = edits.set_outline(Part(), [(10.0, 0.0), (-10.0, 0.0)], [(0.0, 10.0), None]).part
    split = edits.insert_corner(part, "e1", (3.0, 30.0))
    first, second, _ = edge_curves(outline(split))
    for piece in (first, second):
        assert isinstance(piece, Arc)
        assert piece.radius == pytest.approx(10.0)
        assert piece.centre == pytest.approx((0.0, 0.0), abs=1e-12)
    assert shape_of(split).area == pytest.approx(50 * math.pi)


def test_corner_cannot_be_inserted_at_an_end(plate: Part) -> None:
    with pytest.raises(edits.EditError, match="a corner already"):
        edits.insert_corner(plate, "e1", (-5.0, 0.0))


def test_removing_a_corner_of_a_split_arc_restores_the_arc() -> None:
    part = edits.set_outline(Part(), [(10.0, 0.0), (-10.0, 0.0)], [(0.0, 10.0), None]).part
    split = edits.insert_corner(part, "e1", (3.0, 30.0))
    back = edits.remove_corner(split, "c3").part
    assert [e.id for e in outline(back).edges] == ["e1", "e2"]
    assert shape_of(back).area == pytest.approx(50 * math.pi)


def test_removing_a_corner_takes_what_is_on_the_edge_after_it(plate: Part) -> None:
    outcome = edits.remove_corner(plate, "c2")
    assert outcome.lost == ("load l1 on e2 (case “Pull”)",)
    assert [e.id for e in outline(outcome.part).edges] == ["e1", "e3", "e4"]
    first = edits.remove_corner(plate, "c1")  # the ring closes over the joint
    assert [e.id for e in outline(first.part).edges] == ["e2", "e3", "e4"]
    assert first.part.supports == plate.supports
    with pytest.raises(edits.EditError, match="encloses nothing"):
        edits.remove_corner(first.part, "c3")


def test_removing_a_hole_takes_its_loads(plate: Part) -> None:
    part = edits.add_load(plate, "k1", BearingLoad("", "h1", 0.0, 5.0))
    outcome = edits.remove(part, "h1")
    assert outcome.lost == ("load l2 on h1 (case “Pull”)",)
    assert outcome.part == replace(plate, holes=())
    assert edits.remove(part, "h1", "l2").lost == ()


def test_removing_all_corners_removes_the_outline(plate: Part) -> None:
    outcome = edits.remove(plate, "c1", "c2", "c3", "c4")
    assert outcome.part.outline is None
    assert set(outcome.lost) == {"support s1 on e4", "load l1 on e2 (case “Pull”)"}


def test_removing_a_case_names_its_loads(plate: Part) -> None:
    outcome = edits.remove(plate, "k1")
    assert outcome.part.cases == ()
    assert outcome.lost == ("load l1 of case “Pull”",)


def test_edges_cannot_be_removed_alone(plate: Part) -> None:
    with pytest.raises(edits.EditError, match="edge e1"):
        edits.remove(plate, "e1")
    with pytest.raises(edits.EditError, match="nothing in the part"):
        edits.remove(plate, "x")


def test_moving_a_corner_turns_its_arcs_with_it() -> None:
    part = edits.set_outline(Part(), [(10.0, 0.0), (-10.0, 0.0)], [(0.0, 10.0), None]).part
    moved = edits.move_corner(part, "c1", (30.0, 0.0))  # chord twice as long, still a half circle
    assert shape_of(moved).area == pytest.approx(0.5 * math.pi * 400)


def test_moving_a_selection_moves_edges_by_both_ends(plate: Part) -> None:
    part = edits.add_probe(plate, (50.0, 10.0))
    moved = edits.move(part, ["e2", "c3", "h1", "p1", "s1"], 5.0, 1.0)
    assert [c.at for c in outline(moved).corners] == [
        (0.0, 0.0),
        (105.0, 1.0),
        (105.0, 51.0),
        (0.0, 50.0),
    ]
    assert edits.hole_centre(moved.holes[0]) == (35.0, 26.0)
    assert moved.readings[0].at == (55.0, 11.0)
    assert moved.supports == plate.supports


def test_loop_hole_moves_as_a_whole(plate: Part) -> None:
    corners = [(60.0, 10.0), (70.0, 10.0), (70.0, 20.0), (60.0, 20.0)]
    part = edits.add_loop_hole(plate, corners, [(65.0, 8.0), None, None, None])
    moved = edits.move_hole(part, "h2", (75.0, 25.0))
    hole = moved.holes[1]
    assert isinstance(hole, LoopHole)
    assert edits.hole_centre(hole) == (75.0, 25.0)
    assert hole.loop.edges[0].through == (75.0, 18.0)
    assert shape_of(moved).area == pytest.approx(shape_of(part).area)


def test_arc_point_on_the_chord_makes_the_edge_straight(plate: Part) -> None:
    bent = edits.set_edge_arc(plate, "e1", (50.0, -10.0))
    assert outline(bent).edges[0] == Edge("e1", (50.0, -10.0))
    assert outline(edits.set_edge_arc(bent, "e1", (40.0, 0.0))).edges[0] == Edge("e1")
    assert outline(edits.straighten(bent, "e1")).edges[0] == Edge("e1")
    with pytest.raises(edits.EditError, match="not between"):
        edits.set_edge_arc(plate, "e1", (140.0, 0.0))


@pytest.mark.parametrize("bad", [math.nan, math.inf, -1.0, 1e9])
def test_nonsense_sizes_are_refused(plate: Part, bad: float) -> None:
    part = edits.add_slot_hole(plate, (70.0, 25.0), 20.0, 8.0, 30.0)
    for edit in (
        lambda: edits.set_round(part, "c1", bad),
        lambda: edits.resize_hole(part, "h1", diameter=bad),
        lambda: edits.resize_hole(part, "h2", width=bad),
        lambda: edits.add_circle_hole(part, (5.0, 5.0), bad),
        lambda: edits.set_thickness(part, bad),
        lambda: edits.set_mesh(part, tolerance=bad),
    ):
        with pytest.raises(edits.EditError) as error:
            edit()
        assert error.value.mend


@pytest.mark.parametrize("bad", [math.nan, -math.inf, 1e9])
def test_nonsense_places_are_refused(plate: Part, bad: float) -> None:
    for edit in (
        lambda: edits.move_corner(plate, "c1", (bad, 0.0)),
        lambda: edits.move_hole(plate, "h1", (0.0, bad)),
        lambda: edits.add_probe(plate, (bad, 0.0)),
        lambda: edits.move(plate, ["e1"], bad, 0.0),
        lambda: edits.insert_corner(plate, "e1", (bad, 0.0)),
    ):
        with pytest.raises(edits.EditError):
            edit()


def test_slot_cannot_be_wider_than_long(plate: Part) -> None:
    part = edits.add_slot_hole(plate, (70.0, 25.0), 20.0, 8.0)
    with pytest.raises(edits.EditError, match="wide"):
        edits.resize_hole(part, "h2", width=21.0)
    slot = edits.resize_hole(part, "h2", width=9.0, angle=90.0).holes[1]
    assert slot == SlotHole("h2", (70.0, 25.0), 20.0, 9.0, 90.0)
    with pytest.raises(edits.EditError, match="no diameter"):
        edits.resize_hole(part, "h2", diameter=3.0)


def test_supports_and_loads_go_only_where_they_can_act(plate: Part) -> None:
    rounded = edits.set_round(plate, "c1", 5.0)
    for support in (FixedSupport("", "e9"), FixedSupport("", "c1"), RollerSupport("", "c2")):
        with pytest.raises(edits.EditError):
            edits.add_support(rounded, support)
    for load in (
        BearingLoad("", "e1", 1.0, 0.0),
        PointLoad("", "e1", 1.0, 0.0),
        PressureLoad("", "c2", 1.0),
        ForceLoad("", "e1", math.nan, 0.0),
    ):
        with pytest.raises(edits.EditError):
            edits.add_load(rounded, "k1", load)
    assert edits.add_support(rounded, RollerSupport("", "c2", 90.0)).supports[-1].id == "s2"


def test_a_load_may_change_its_kind(plate: Part) -> None:
    part = edits.replace_load(plate, GravityLoad("l1", 0.0, -9.81))
    assert part.cases[0].loads == (GravityLoad("l1", 0.0, -9.81),)
    part = edits.replace_support(part, RollerSupport("s1", "h1"))
    assert part.supports == (RollerSupport("s1", "h1"),)
    with pytest.raises(edits.EditError):
        edits.replace_load(plate, GravityLoad("l9", 0.0, -9.81))


def test_material_is_copied_and_the_old_one_dropped(plate: Part) -> None:
    part = edits.set_material(edits.set_material(plate, STEEL), replace(STEEL, name="other"))
    assert [m.name for m in part.materials] == ["other"]
    assert part.wall.material == "other"
    with pytest.raises(edits.EditError, match="Poisson"):
        edits.set_material(plate, replace(STEEL, poissons_ratio=0.5))


def test_material_may_lack_what_a_limit_needs(plate: Part) -> None:
    part = edits.add_limit(plate, StressLimit(""))
    bare = edits.set_material(part, replace(STEEL, proof_stress=None))
    assert bare.limits == (StressLimit("g1"),)


def test_case_names_are_unique(plate: Part) -> None:
    part = edits.add_case(plate)
    assert part.cases[1].name == "Case 2"
    with pytest.raises(edits.EditError, match="already"):
        edits.rename_case(part, "k2", "Pull")
    assert edits.rename_case(part, "k2", " Push ").cases[1].name == "Push"


def test_a_changed_number_drops_its_formula(plate: Part) -> None:
    part = replace(
        plate,
        formulas=(
            Formula("outline.corners.c3.at.0", "w"),
            Formula("outline.corners.c3.at.1", "h"),
            Formula("holes.h1.diameter", "d"),
            Formula("wall.thickness", "t"),
        ),
    )
    moved = edits.move_corner(part, "c3", (100.0, 60.0))
    assert [f.text for f in moved.formulas] == ["w", "d", "t"]
    assert [f.text for f in edits.resize_hole(moved, "h1", diameter=8.0).formulas] == ["w", "t"]
    assert [f.text for f in edits.remove(moved, "h1").part.formulas] == ["w", "t"]
    assert edits.set_title(moved, "x").formulas == moved.formulas


def test_formulas_of_materials_with_dots_in_their_name(plate: Part) -> None:
    part = edits.set_material(plate, replace(STEEL, name="EN 1.4301"))
    part = replace(part, formulas=(Formula("materials.EN 1.4301.proof_stress", "230 + 5"),))
    assert edits.set_thickness(part, 4.0).formulas == part.formulas
    assert edits.set_material(part, replace(part.materials[0], proof_stress=1.0)).formulas == ()


def test_place_names(plate: Part) -> None:
    part = edits.set_round(plate, "c2", 3.0)
    names = [edits.place_name(part, i) for i in ("e3", "h1", "c1", "c2", "s1", "nothing")]
    assert names == ["edge e3", "hole h1", "corner c1", "fillet c2", "support s1", "“nothing”"]
