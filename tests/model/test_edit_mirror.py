"""Mirrored copies: of holes, patterns and half outlines."""

from __future__ import annotations

import math
from dataclasses import replace

import pytest
from hypothesis import given, strategies as st

from screenapp.model import edits
from screenapp.model.members import all_holes, members
from screenapp.model.part import (
    CircleHole,
    FixedSupport,
    ForceLoad,
    Hole,
    LoopHole,
    Part,
    PointLoad,
    SlotHole,
    Zone,
)
from screenapp.model.pattern import BoltCircle, GridPattern, RowPattern
from screenapp.model.shape import shape_of
from screenapp.model.validity import faults_of
from tests.model.plates import loop, plate, rectangle

UPRIGHT = edits.MirrorLine((50.0, 0.0), 90.0)


def centres(holes: tuple[Hole, ...]) -> set[tuple[float, float]]:
    return {
        (round(h.centre[0], 9), round(h.centre[1], 9))
        for h in holes
        if isinstance(h, CircleHole | SlotHole)
    }


def test_a_hole_and_a_slot_about_an_upright_line() -> None:
    part = plate(
        None, CircleHole("h1", (20.0, 10.0), 6.0), SlotHole("h2", (20.0, 35.0), 12.0, 4.0, 30.0)
    )
    made = edits.mirror_holes(part, ["h1", "h2"], UPRIGHT)
    assert made.holes[2] == CircleHole("h3", (80.0, 10.0), 6.0)
    assert made.holes[3] == SlotHole("h4", (80.0, 35.0), 12.0, 4.0, 150.0)
    assert made.holes[:2] == part.holes


def test_a_loop_gets_ids_of_its_own() -> None:
    part = edits.add_loop_hole(plate(), [(10.0, 10.0), (20.0, 10.0), (10.0, 20.0)])
    made = edits.mirror_holes(part, ["h2"], UPRIGHT)
    copy = made.holes[-1]
    assert isinstance(copy, LoopHole)
    assert [c.at for c in copy.loop.corners] == [(90.0, 10.0), (80.0, 10.0), (90.0, 20.0)]
    assert [c.id for c in copy.loop.corners] == ["c8", "c9", "c10"]
    assert shape_of(made).area == pytest.approx(shape_of(part).area - 50.0)


@pytest.mark.parametrize(
    "pattern",
    [RowPattern(3, 7.0, 20.0), GridPattern(3, 2, 8.0, 6.0, 15.0), BoltCircle(5, 9.0, 40.0)],
)
@pytest.mark.parametrize("angle", [0.0, 90.0, 33.0])
def test_a_pattern_stays_a_pattern(pattern: object, angle: float) -> None:
    hole = SlotHole("h1", (20.0, 20.0), 4.0, 2.0, 10.0, pattern)  # type: ignore[arg-type]
    line = edits.MirrorLine((50.0, 25.0), angle)
    copy = edits.mirror_holes(plate(None, hole), ["h1"], line).holes[-1]
    want = {(round(x, 9), round(y, 9)) for x, y in (line.of(p) for p in centres(members(hole)))}
    got = centres(members(copy))
    assert len(got) == len(want)
    for p in want:
        assert min(math.dist(p, q) for q in got) < 1e-6
    turned = {
        round((2.0 * angle - m.angle) % 180.0, 6) % 180.0
        for m in members(hole)
        if isinstance(m, SlotHole)
    }
    assert turned == {
        round(m.angle % 180.0, 6) % 180.0 for m in members(copy) if isinstance(m, SlotHole)
    }


@given(
    st.tuples(st.floats(-50, 50), st.floats(-50, 50)),
    st.floats(-360, 360),
    st.tuples(st.floats(-50, 50), st.floats(-50, 50)),
)
def test_twice_mirrored_is_the_same(
    by: tuple[float, float], angle: float, p: tuple[float, float]
) -> None:
    line = edits.MirrorLine(by, angle)
    assert line.of(line.of(p)) == pytest.approx(p, abs=1e-9)
    assert math.dist(line.of(p), by) == pytest.approx(math.dist(p, by), abs=1e-9)


def half() -> Part:
    """The lower half of a plate 100 x 50 with a bevel, its mirror edge e3 along y = 25."""
    outline = loop([(10.0, 0.0), (100.0, 0.0), (100.0, 25.0), (0.0, 25.0), (0.0, 10.0)])
    return plate(outline, CircleHole("h1", (50.0, 10.0), 6.0))


def test_a_half_becomes_whole_and_edges_run_on() -> None:
    made = edits.mirror_half(half(), "e3")
    part = made.part
    assert part.outline is not None
    assert shape_of(part).area == pytest.approx(2.0 * shape_of(half()).area)
    assert [f for f in faults_of(part) if f.blocks] == []
    assert [c.id for c in part.outline.corners if c.id in ("c3", "c4")] == []
    ends = {e.id: part.outline.corners[i].at for i, e in enumerate(part.outline.edges)}
    assert set(ends) >= {"e1", "e2", "e4", "e5"}
    shape = shape_of(part)
    for edge, length in (("e2", 50.0), ("e4", 30.0)):
        (piece,) = shape.pieces_of(edge)
        assert shape.curves[piece].curve.length == pytest.approx(length)
    assert len(part.outline.corners) == 6
    assert centres(part.holes) == {(50.0, 10.0), (50.0, 40.0)}
    assert made.lost == ()


def test_every_edge_of_a_rectangle_will_do() -> None:
    for edge in ("e1", "e2", "e3", "e4"):
        part = edits.mirror_half(replace(plate(), holes=()), edge).part
        assert shape_of(part).area == pytest.approx(10000.0)
        assert part.outline is not None
        assert len(part.outline.corners) == 4
        ids = [x.id for x in (*part.outline.corners, *part.outline.edges)]
        assert len(set(ids)) == 8


def test_rounds_chamfers_arcs_and_slanted_edges_are_mirrored() -> None:
    outline = loop(
        [(0.0, 0.0), (60.0, 0.0), (80.0, 30.0), (0.0, 30.0)], {0: (30.0, -8.0)}, {3: 5.0}
    )
    part = edits.set_chamfer(plate(outline, CircleHole("h1", (20.0, 15.0), 6.0)), "c2", 4.0)
    made = edits.mirror_half(part, "e4").part
    assert made.outline is not None
    whole, one = (
        shape_of(made),
        shape_of(replace(part, outline=edits.set_round(part, "c4", 0.0).outline)),
    )
    assert [f for f in faults_of(made) if f.blocks and f.field.startswith("outline")] == []
    assert sorted(c.chamfer for c in made.outline.corners)[-2:] == [4.0, 4.0]
    assert whole.area == pytest.approx(2.0 * one.area)  # the round at the line is no corner now


def test_half_a_disc_becomes_a_disc_of_two_arcs() -> None:
    part = replace(plate(loop([(-10.0, 0.0), (10.0, 0.0)], {0: (0.0, -10.0)})), holes=())
    made = edits.mirror_half(part, "e2").part
    assert shape_of(made).area == pytest.approx(100.0 * math.pi)


def test_what_stood_on_the_mirror_line_is_said() -> None:
    part = edits.add_support(half(), FixedSupport("", "e3"))
    part = edits.add_load(part, "k1", PointLoad("", "c3", 1.0, 0.0))
    part = edits.add_load(part, "k1", ForceLoad("", "e2", 1.0, 0.0))
    made = edits.mirror_half(part, "e3")
    assert made.lost == ("support s2 on e3", "load l2 on c3 (case “pull”)")
    assert made.part.cases[0].loads == (
        ForceLoad("l1", "e2", 200.0, 0.0),
        ForceLoad("l3", "e2", 2.0, 0.0),
    )


def test_zones_come_along() -> None:
    zone = Zone(CircleHole("z1", (20.0, 12.0), 8.0), 5.0)
    made = edits.mirror_half(replace(half(), zones=(zone,)), "e3").part
    assert [z.id for z in made.zones] == ["z1", "z2"]
    assert made.zones[1].form.centre == (20.0, 38.0)  # type: ignore[union-attr]
    assert len(all_holes(made)) == 2


def test_refusals() -> None:
    part = edits.add_loop_hole(plate(rectangle(100.0, 50.0)), [(1.0, 1.0), (9.0, 1.0), (1.0, 9.0)])
    bent = edits.set_edge_arc(part, "e2", (110.0, 25.0))
    for call, words in (
        (lambda: edits.mirror_half(bent, "e2"), "is an arc"),
        (lambda: edits.mirror_half(part, "e6"), "not of the outline"),
        (lambda: edits.mirror_half(part, "h1"), "not a edge"),
        (lambda: edits.mirror_holes(part, ["c1"], UPRIGHT), "no hole"),
        (lambda: edits.mirror_line_between((1.0, 1.0), (1.0, 1.0)), "are one"),
    ):
        with pytest.raises(edits.EditError, match=words):
            call()
