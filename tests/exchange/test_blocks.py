"""Blocks, mirrored systems and arrays against places worked out by hand."""

from __future__ import annotations

import math
from pathlib import Path
from typing import Any

import pytest

from screenapp.exchange.dxf_reading import read_drawing
from screenapp.model.curves import Arc, Segment
from screenapp.model.part import CircleHole, Part, SlotHole
from screenapp.model.shape import shape_of
from tests.exchange.drawings import bring, part_from, rectangle, texts, write

DOWN = {"extrusion": (0, 0, -1)}


def circles(part: Part) -> list[tuple[float, float, float]]:
    """Centre and diameter of the round holes, in order."""
    return sorted(
        (round(h.centre[0], 9), round(h.centre[1], 9), round(h.diameter, 9))
        for h in part.holes
        if isinstance(h, CircleHole)
    )


def test_scaled_turned_and_mirrored_blocks(tmp_path: Path) -> None:
    """A circle at (4, 1) in the block, inserted at (x, y): scale first, then turn, then move."""

    def draw(space: Any) -> None:
        rectangle(space, -100, -100, 100, 100)
        space.doc.blocks.new("EAR").add_circle((4, 1), 1)
        inserts = (
            ((50, 50), {"xscale": 2, "yscale": 2, "zscale": 2}),  # (58, 52), r 2
            ((-50, 50), {"rotation": 90}),  # (-51, 54)
            ((50, -50), {"xscale": -1}),  # (46, -49)
            ((-50, -50), {"xscale": -1, "yscale": -1, "rotation": 90}),  # (4,1)->(-4,-1)->(1,-4)
            ((0, 0), DOWN),  # x of an upside-down system runs the other way: (-4, 1)
        )
        for at, how in inserts:
            space.add_blockref("EAR", at, dxfattribs=how)

    part = part_from(write(tmp_path / "b.dxf", draw))
    assert circles(part) == [
        (-51, 54, 2),
        (-49, -54, 2),
        (-4, 1, 2),
        (46, -49, 2),
        (58, 52, 4),
    ]


def test_nested_blocks_and_layer_zero(tmp_path: Path) -> None:
    """Inner: circle at (1, 0).  Middle holds it at (10, 0) turned by 90°: (10, 1).

    Outer is mirrored in x and moved to (50, 20): (40, 21).  What is on layer 0 in a block is seen
    on the layer of its insert (DXF reference).
    """

    def draw(space: Any) -> None:
        rectangle(space, 0, 0, 100, 50, layer="CUT")
        blocks = space.doc.blocks
        blocks.new("INNER").add_circle((1, 0), 0.5)
        middle = blocks.new("MIDDLE")
        middle.add_blockref("INNER", (10, 0), dxfattribs={"rotation": 90})
        middle.add_circle((0, 0), 2, dxfattribs={"layer": "OTHER"})
        at = {"xscale": -1, "layer": "CUT"}
        space.add_blockref("MIDDLE", (50, 20), dxfattribs=at)

    path = write(tmp_path / "n.dxf", draw)
    assert {layer.name: layer.curves for layer in read_drawing(path).layers} == {
        "CUT": 5,
        "OTHER": 1,
    }
    assert circles(part_from(path)) == [(40, 21, 1), (50, 20, 4)]


def test_arrays_of_blocks(tmp_path: Path) -> None:
    """2 rows 10 apart and 3 columns 20 apart, turned by 90°: columns go up, rows to the left."""

    def draw(space: Any) -> None:
        rectangle(space, 0, 0, 100, 80)
        space.doc.blocks.new("H").add_circle((0, 0), 2)
        array = {"row_count": 2, "column_count": 3, "row_spacing": 10, "column_spacing": 20}
        space.add_blockref("H", (50, 10), dxfattribs={**array, "rotation": 90})

    assert circles(part_from(write(tmp_path / "a.dxf", draw))) == [
        (40, 10, 4),
        (40, 30, 4),
        (40, 50, 4),
        (50, 10, 4),
        (50, 30, 4),
        (50, 50, 4),
    ]


def test_unequal_scales_make_ellipses_fitted_within_the_tolerance(tmp_path: Path) -> None:
    def draw(space: Any) -> None:
        rectangle(space, 0, 0, 100, 80)
        space.doc.blocks.new("H").add_circle((0, 0), 1)
        space.add_blockref("H", (50, 40), dxfattribs={"xscale": 20, "yscale": 10})

    part = part_from(write(tmp_path / "e.dxf", draw), tolerance=0.001)
    # a rim that is off by at most 0.001 changes the area by less than that times its length (97)
    assert shape_of(part).area == pytest.approx(8000 - math.pi * 200, abs=0.1)


def test_arcs_and_polylines_of_a_system_seen_from_below(tmp_path: Path) -> None:
    """With the extrusion -Z, x runs to the left: an arc from 30° to 90° of radius 2 about (-5, 3)
    lies about (5, 3) from 150° down to 90°; a bulge to the left bends to the right."""

    def draw(space: Any) -> None:
        space.add_arc((-5, 3), 2, 30, 90, dxfattribs=DOWN)
        space.add_lwpolyline([(0, 0, 1), (-2, 0, 0)], format="xyb", dxfattribs=DOWN)
        space.add_circle((-7, 1), 1, dxfattribs=DOWN)
        space.add_ellipse((1, 1), (2, 0), 1.0, 0.0, math.pi / 2, dxfattribs=DOWN)

    curves = [c.curve for c in read_drawing(write(tmp_path / "d.dxf", draw)).curves]
    arc, bulged, circle, round_ellipse = curves
    assert isinstance(arc, Arc)
    assert arc.start == pytest.approx((5 - math.sqrt(3), 4))
    assert arc.end == pytest.approx((5, 5))
    assert arc.sweep == pytest.approx(-math.pi / 3)
    assert isinstance(bulged, Arc)
    assert bulged.start == pytest.approx((0, 0), abs=1e-12)
    assert bulged.end == pytest.approx((2, 0))
    assert bulged.sweep == pytest.approx(-math.pi)
    assert isinstance(circle, Arc)
    assert circle.centre == pytest.approx((7, 1))
    assert isinstance(round_ellipse, Arc)
    assert round_ellipse.end == pytest.approx((1, -1))


def test_mirrored_flat_pattern_keeps_slots_and_rounds(tmp_path: Path) -> None:
    def draw(space: Any) -> None:
        block = space.doc.blocks.new("HALF")
        b = math.tan(math.pi / 8)
        block.add_lwpolyline(
            [(0, 0, 0), (40, 0, b), (50, 10, 0), (50, 30, 0), (0, 30, 0)], format="xyb", close=True
        )
        block.add_lwpolyline(
            [(15, 10, 0), (25, 10, 1), (25, 16, 0), (15, 16, 1)], format="xyb", close=True
        )
        space.add_blockref("HALF", (0, 0), dxfattribs={"xscale": -1, "rotation": 30})

    part = part_from(write(tmp_path / "m.dxf", draw))
    assert part.outline is not None
    assert sorted(c.round for c in part.outline.corners) == pytest.approx([0, 0, 0, 10])
    (slot,) = part.holes
    assert isinstance(slot, SlotHole)
    # the middle (20, 13) mirrored to (-20, 13), then turned by 30°
    c, s = math.cos(math.pi / 6), math.sin(math.pi / 6)
    assert slot.centre == pytest.approx((-20 * c - 13 * s, -20 * s + 13 * c))
    assert slot.angle == pytest.approx(30.0)


def test_a_block_that_holds_itself_or_is_missing(tmp_path: Path) -> None:
    def draw(space: Any) -> None:
        rectangle(space, 0, 0, 100, 50)
        ring = space.doc.blocks.new("RING")
        ring.add_circle((50, 25), 5)
        ring.add_blockref("RING", (0, 0))
        space.add_blockref("RING", (0, 0))
        space.add_blockref("GONE", (0, 0))

    path = write(tmp_path / "r.dxf", draw)
    assert circles(part_from(path)) == [(50, 25, 10)]
    (said,) = texts(bring(path), "ignored")
    assert "1 endless block" in said
    assert "1 missing block" in said


def test_heights_and_three_dimensions(tmp_path: Path) -> None:
    """All lines at one height are flat; a line that rises is not, and its layer may be left out."""

    def draw(space: Any) -> None:
        ring = [(0, 0, 12), (80, 0, 12), (80, 40, 12), (0, 40, 12)]
        for a, b in zip(ring, ring[1:] + ring[:1], strict=True):
            space.add_line(a, b)
        space.add_line((0, 0, 0), (10, 10, 30), dxfattribs={"layer": "SKETCH"})

    path = write(tmp_path / "h.dxf", draw)
    wrong = bring(path)
    assert wrong.part is None
    assert wrong.error is not None
    assert "1 line on the layer “SKETCH” does not lie in the plane" in wrong.error.cause
    part = part_from(path, roles={"SKETCH": "left out"})
    assert shape_of(part).area == pytest.approx(3200)
    assert all(isinstance(piece.curve, Segment) for piece in shape_of(part).curves)
