"""Offset of an edge: parallel or concentric, neighbours keep their lines."""

from __future__ import annotations

import math
from dataclasses import replace

import pytest

from screenapp.model import edits
from screenapp.model.curves import Arc, arc_about, tangent_arc
from screenapp.model.part import Loop, Part
from screenapp.model.shape import edge_curves, shape_of
from tests.model.plates import loop, plate


def outline(part: Part) -> Loop:
    assert part.outline is not None
    return part.outline


@pytest.mark.parametrize("clockwise", [False, True])
def test_outwards_is_more_material(clockwise: bool) -> None:
    at = [(0.0, 0.0), (100.0, 0.0), (100.0, 50.0), (0.0, 50.0)]
    part = replace(plate(loop(at[::-1] if clockwise else at)), holes=())
    for edge in ("e1", "e2", "e3", "e4"):
        long = next(
            c.length
            for c, e in zip(edge_curves(outline(part)), outline(part).edges, strict=True)
            if e.id == edge
        )
        for step in (3.0, -3.0):
            made = edits.offset_edge(part, edge, step)
            assert shape_of(made).area == pytest.approx(5000.0 + step * long)
            assert [e.id for e in outline(made).edges] == [e.id for e in outline(part).edges]


def test_a_hole_gets_smaller_by_an_outward_step() -> None:
    part = edits.add_loop_hole(
        replace(plate(), holes=()), [(10.0, 10.0), (30.0, 10.0), (30.0, 20.0), (10.0, 20.0)]
    )
    made = edits.offset_edge(part, "e5", 2.0)
    assert shape_of(made).area == pytest.approx(shape_of(part).area + 40.0)


def test_slanted_neighbours_keep_their_lines() -> None:
    part = replace(plate(loop([(0.0, 0.0), (100.0, 0.0), (80.0, 40.0), (20.0, 40.0)])), holes=())
    made = outline(edits.offset_edge(part, "e3", 10.0))
    assert made.corners[2].at == pytest.approx((75.0, 50.0))
    assert made.corners[3].at == pytest.approx((25.0, 50.0))


def test_an_arc_moves_concentrically_and_arc_neighbours_keep_their_circle() -> None:
    slot = loop(
        [(0.0, 0.0), (40.0, 0.0), (40.0, 20.0), (0.0, 20.0)],
        {1: (50.0, 10.0), 3: (-10.0, 10.0)},
    )
    part = replace(plate(slot), holes=())
    with pytest.raises(edits.EditError, match="would not meet"):
        edits.offset_edge(part, "e2", -2.0)  # its circle leaves the lines that it touches
    made = outline(edits.offset_edge(part, "e1", -2.0))
    arcs = [c for c in edge_curves(made) if isinstance(c, Arc)]
    assert [a.radius for a in arcs] == pytest.approx([10.0, 10.0])
    assert arcs[0].centre == pytest.approx((40.0, 10.0))
    assert made.corners[0].at == pytest.approx((-6.0, 2.0))
    dome = replace(
        plate(loop([(0.0, 0.0), (40.0, 0.0), (40.0, 20.0), (0.0, 20.0)], {2: (20.0, 36.0)})),
        holes=(),
    )
    bigger = edge_curves(outline(edits.offset_edge(dome, "e3", 1.5)))[2]
    before = edge_curves(outline(dome))[2]
    assert isinstance(bigger, Arc)
    assert isinstance(before, Arc)
    assert bigger.radius == pytest.approx(before.radius + 1.5)
    assert bigger.centre == pytest.approx(before.centre)


def test_refusals() -> None:
    dome = replace(plate(loop([(0.0, 0.0), (40.0, 0.0)], {0: (20.0, -20.0)})), holes=())
    with pytest.raises(edits.EditError, match="radius of 20 mm only"):
        edits.offset_edge(dome, "e1", -25.0)
    straight = edits.insert_corner(plate(), "e1", (40.0, 0.0))
    with pytest.raises(edits.EditError, match="would not meet"):
        edits.offset_edge(straight, "e1", 3.0)
    with pytest.raises(edits.EditError):
        edits.offset_edge(plate(), "e1", math.nan)


@pytest.mark.parametrize("end", [(10.0, 10.0), (10.0, -10.0), (-3.0, 8.0), (25.0, 1.0)])
def test_a_tangent_arc_leaves_in_its_direction_and_ends_there(end: tuple[float, float]) -> None:
    for turn in (0.0, 1.0, -2.5):
        arc = tangent_arc((1.0, 2.0), turn, end)
        assert isinstance(arc, Arc)
        assert arc.tangent(0.0) == pytest.approx((math.cos(turn), math.sin(turn)), abs=1e-12)
        assert arc.start == pytest.approx((1.0, 2.0))
        assert arc.end == pytest.approx(end)
    assert tangent_arc((0.0, 0.0), 0.0, (5.0, 0.0)).length == 5.0


def test_an_arc_about_a_centre() -> None:
    left = arc_about((0.0, 0.0), (5.0, 0.0), (0.0, 9.0), left=True)
    right = arc_about((0.0, 0.0), (5.0, 0.0), (0.0, 9.0), left=False)
    assert left.end == pytest.approx((0.0, 5.0))
    assert right.end == pytest.approx((0.0, 5.0))
    assert left.length == pytest.approx(5.0 * math.pi / 2.0)
    assert right.length == pytest.approx(5.0 * 1.5 * math.pi)
