"""Patterns of holes: one entry, many holes, ids that stay."""

from __future__ import annotations

import itertools
import math
from dataclasses import replace

import pytest
from hypothesis import given, strategies as st

from screenapp.model import edits
from screenapp.model.errors import Fault, PartFileError
from screenapp.model.features import find, place_name
from screenapp.model.members import all_holes, members, spread_loads
from screenapp.model.part import (
    BearingLoad,
    Case,
    CircleHole,
    FixedSupport,
    ForceLoad,
    Formula,
    Hole,
    Part,
    PressureLoad,
    SlotHole,
)
from screenapp.model.part_json import part_from_text, part_to_text
from screenapp.model.pattern import BoltCircle, GridPattern, RowPattern, stations
from screenapp.model.shape import shape_of
from screenapp.model.validity import faults_of
from tests.model.plates import plate

ROW = CircleHole("h1", (10.0, 10.0), 6.0, RowPattern(4, 15.0))
GRID = CircleHole("h1", (10.0, 10.0), 6.0, GridPattern(3, 2, 20.0, 15.0))
RING = CircleHole("h1", (50.0, 25.0), 4.0, BoltCircle(6, 12.0, 90.0))


def centres(*holes: Hole) -> list[tuple[float, float]]:
    return [h.centre for h in holes if isinstance(h, CircleHole | SlotHole)]


def blocking(part: Part) -> list[Fault]:
    return [f for f in faults_of(part) if f.blocks]


def test_where_the_members_stand() -> None:
    assert centres(*members(ROW)) == [(10.0, 10.0), (25.0, 10.0), (40.0, 10.0), (55.0, 10.0)]
    assert [h.id for h in members(GRID)] == [
        "h1.1-1",
        "h1.1-2",
        "h1.1-3",
        "h1.2-1",
        "h1.2-2",
        "h1.2-3",
    ]
    assert centres(*members(GRID))[-1] == (50.0, 25.0)
    assert centres(*members(RING))[0] == (50.0, 37.0)
    assert centres(*members(RING))[3] == (50.0, 13.0)


def test_a_turned_grid_and_slots_that_turn_with_their_place() -> None:
    turned = replace(GRID, pattern=GridPattern(2, 2, 20.0, 10.0, 90.0))
    assert centres(*members(turned)) == [(10.0, 10.0), (10.0, 30.0), (0.0, 10.0), (0.0, 30.0)]
    slots = members(SlotHole("h2", (0.0, 0.0), 8.0, 3.0, 10.0, BoltCircle(4, 20.0)))
    assert [s.angle for s in slots if isinstance(s, SlotHole)] == [10.0, 100.0, 190.0, 280.0]


@given(st.integers(1, 40), st.floats(0.1, 500.0), st.floats(-720.0, 720.0))
def test_neighbours_on_a_bolt_circle_are_a_chord_apart(n: int, radius: float, start: float) -> None:
    """Chord = 2 r sin(180°/n): plane geometry."""
    at = [(s.x, s.y) for s in stations(BoltCircle(n, radius, start))]
    chord = 2.0 * radius * math.sin(math.pi / n)
    for one, other in itertools.pairwise(at):
        assert math.dist(one, other) == pytest.approx(chord, rel=1e-9, abs=1e-9)
    assert all(math.hypot(*p) == pytest.approx(radius) for p in at)


def test_the_shape_has_every_member_and_the_whole() -> None:
    shape = shape_of(plate(None, GRID))
    assert shape.hole_ids[1:] == ("h1.1-1", "h1.1-2", "h1.1-3", "h1.2-1", "h1.2-2", "h1.2-3")
    assert shape.area == pytest.approx(5000.0 - 6 * math.pi * 9.0)
    assert len(shape.pieces_of("h1.2-3")) == 4
    assert len(shape.pieces_of("h1")) == 24


def test_supports_and_loads_point_at_one_or_all() -> None:
    part = plate(None, ROW)
    for on in ("h1", "h1.3"):
        part = edits.add_support(part, FixedSupport("", on))
        part = edits.add_load(part, "k1", BearingLoad("", on, 600.0, 0.0))
    assert not blocking(part)
    with pytest.raises(edits.EditError, match="no corner, edge or hole"):
        edits.add_support(part, FixedSupport("", "h1.5"))


def test_a_pin_force_on_all_is_shared() -> None:
    part = plate(None, ROW)
    case = Case("k", "x", (BearingLoad("l1", "h1", 600.0, -200.0), ForceLoad("l2", "h1", 8.0, 0.0)))
    loads = spread_loads(part, case)
    assert [getattr(x, "on", "") for x in loads] == ["h1.1", "h1.2", "h1.3", "h1.4", "h1"]
    assert loads[0] == BearingLoad("l1", "h1.1", 150.0, -50.0)


def test_names() -> None:
    part = plate(None, ROW, replace(GRID, id="h2"), replace(RING, id="h3"))
    names = [place_name(part, i) for i in ("h1", "h2", "h3", "h1.2", "h9.2")]
    assert names == ["row of holes h1", "grid of holes h2", "bolt circle h3", "hole h1.2", "“h9.2”"]
    found = find(part, "h2.2-1")
    assert found is not None
    assert (found.field, found.owner) == ("holes.h2", "h2")


@pytest.mark.parametrize(
    ("pattern", "words", "field"),
    [
        (RowPattern(0, 10.0), "count of pattern h1 is 0", "count"),
        (RowPattern(3, 0.0), "pitch of pattern h1 is 0 mm", "pitch"),
        (RowPattern(3, math.nan), "pitch of pattern h1 is not a finite", "pitch"),
        (GridPattern(40, 40, 9.0, 9.0), "has 1600 holes", ""),
        (BoltCircle(5, -3.0), "radius of pattern h1 is -3 mm", "radius"),
        (BoltCircle(5, 10.0, math.inf), "start of pattern h1 is not a finite", "start"),
    ],
)
def test_nonsense_is_refused_and_named(pattern: object, words: str, field: str) -> None:
    bad = plate(None, replace(ROW, pattern=pattern))
    fault = blocking(bad)[0]
    assert words in fault.cause
    assert fault.field == "holes.h1.pattern" + (f".{field}" if field else "")
    with pytest.raises(edits.EditError, match=words.split(" is ")[0]):
        edits.set_pattern(plate(None, ROW), "h1", pattern)  # type: ignore[arg-type]


def test_members_that_meet_are_faults_at_the_pattern() -> None:
    fault = blocking(plate(None, replace(ROW, pattern=RowPattern(3, 5.0))))[0]
    assert "h1.1" in fault.cause
    assert "cross" in fault.cause
    assert fault.field == "holes.h1"


def test_what_was_on_the_hole_stays_on_the_first_member() -> None:
    part = edits.add_support(plate(), FixedSupport("", "h1"))
    made = edits.set_pattern(part, "h1", RowPattern(3, 15.0))
    assert made.lost == ()
    assert made.part.supports[-1].on == "h1.1"
    back = edits.set_pattern(made.part, "h1", None)
    assert back.part == part


def test_what_was_on_a_member_that_goes_is_said() -> None:
    part = plate(None, ROW)
    part = edits.add_support(part, FixedSupport("", "h1.4"))
    part = edits.add_load(part, "k1", PressureLoad("", "h1", 1.0))
    made = edits.change_pattern(part, "h1", count=3)
    assert made.lost == ("support s2 on h1.4",)
    assert len(all_holes(made.part)) == 3
    assert made.part.cases[0].loads[-1].on == "h1"  # type: ignore[union-attr]


def test_another_column_moves_nobody() -> None:
    part = edits.add_support(plate(None, GRID), FixedSupport("", "h1.2-1"))
    made = edits.change_pattern(part, "h1", columns=4)
    assert made.lost == ()
    found = find(made.part, "h1.2-1")
    assert found is not None
    assert found.record.centre == (10.0, 25.0)  # type: ignore[union-attr]


def test_a_whole_number_is_wanted_for_a_count() -> None:
    with pytest.raises(edits.EditError, match=r"2\.5"):
        edits.change_pattern(plate(None, ROW), "h1", count=2.5)
    with pytest.raises(edits.EditError, match="no radius"):
        edits.change_pattern(plate(None, ROW), "h1", radius=2.5)


def test_breaking_up_keeps_what_stands_on_it() -> None:
    part = plate(None, ROW, CircleHole("h7", (80.0, 40.0), 5.0))
    part = edits.add_support(part, FixedSupport("", "h1"))
    part = edits.add_support(part, FixedSupport("", "h1.2"))
    part = edits.add_load(part, "k1", BearingLoad("", "h1", 400.0, 0.0))
    part = edits.add_load(part, "k1", PressureLoad("", "h1.4", 2.0))
    broken = edits.break_pattern(part, "h1.3")
    assert [h.id for h in broken.holes] == ["h1", "h8", "h9", "h10", "h7"]
    assert centres(*broken.holes[:4]) == centres(*members(ROW))
    assert [s.on for s in broken.supports[1:]] == ["h1", "h8", "h9", "h10", "h8"]
    assert len({s.id for s in broken.supports}) == 6
    bearing = [x for x in broken.cases[0].loads if isinstance(x, BearingLoad)]
    assert [(x.on, x.x) for x in bearing] == [
        ("h1", 100.0),
        ("h8", 100.0),
        ("h9", 100.0),
        ("h10", 100.0),
    ]
    assert broken.cases[0].loads[-1].on == "h10"  # type: ignore[union-attr]
    assert shape_of(broken).area == pytest.approx(shape_of(part).area)
    assert not blocking(broken)


def test_a_member_takes_the_pattern_with_it_and_cannot_go_alone() -> None:
    part = plate(None, ROW)
    moved = edits.move_hole(part, "h1.2", (26.0, 12.0))
    assert centres(*moved.holes) == [(11.0, 12.0)]
    moved = edits.move(part, ["h1.2", "h1.3"], 1.0, 0.0)
    assert centres(*moved.holes) == [(11.0, 10.0)]
    with pytest.raises(edits.EditError, match="one of pattern h1"):
        edits.remove(part, "h1.2")
    held = edits.add_support(part, FixedSupport("", "h1.2"))
    gone = edits.remove(held, "h1")
    assert gone.part.holes == ()
    assert gone.lost == ("support s2 on h1.2",)


def test_in_the_file_it_is_one_entry_and_may_hold_expressions() -> None:
    text = part_to_text(plate(None, ROW, replace(GRID, id="h2")))
    assert text.count('"kind": "circle"') == 2
    assert '"pattern": {"kind": "row", "count": 4, "pitch": 15, "angle": 0}' in text
    text = text.replace('"pitch": 15', '"pitch": "2*7.5 + 1"')
    part = part_from_text(text)
    assert part.formulas == (Formula("holes.h1.pattern.pitch", "2*7.5 + 1"),)
    assert part.holes[0].pattern == RowPattern(4, 16.0)  # type: ignore[union-attr]
    assert part_to_text(part) == text
    changed = edits.change_pattern(part, "h1", pitch=17.0).part
    assert changed.formulas == ()


@pytest.mark.parametrize(
    ("old", "new", "words"),
    [
        ('"count": 4', '"count": 2.5', "2.5 stands here"),
        ('"count": 4', '"count": 0', "0 stands here"),
        ('"kind": "row"', '"kind": "spiral"', "not one of the choices"),
        ('"count": 4', '"number": 4', "not known here"),
        ('"count": 4, ', "", 'has no "count"'),
    ],
)
def test_a_bad_pattern_in_a_file_is_named(old: str, new: str, words: str) -> None:
    with pytest.raises(PartFileError) as caught:
        part_from_text(part_to_text(plate(None, ROW)).replace(old, new))
    assert words in " ".join(f.cause for f in caught.value.faults)
    assert any(f.field.startswith("holes.h1.pattern") for f in caught.value.faults)
