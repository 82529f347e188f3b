"""The same flat pattern in every dialect, and drawings of ten kinds as they come from outside."""

from __future__ import annotations

import math
from pathlib import Path
from typing import Any

import ezdxf
import pytest

from screenapp.exchange.dxf_reading import read_drawing
from screenapp.model.part import CircleHole, LoopHole, SlotHole
from screenapp.model.shape import shape_of
from tests.exchange.drawings import MM, SILENT_UNIT, bring, part_from, rectangle, texts, write

DIALECTS = ("R12", "R2000", "R2004", "R2007", "R2010", "R2013", "R2018")


def bracket(space: Any) -> None:
    """100 × 60 with two rounds of 10 and two sharp corners, a hole of 12, a slot of 30 × 8."""
    space.add_line((0, 0), (100, 0))
    space.add_line((100, 0), (100, 50))
    space.add_arc((90, 50), 10, 0, 90)
    space.add_line((90, 60), (10, 60))
    space.add_arc((10, 50), 10, 90, 180)
    space.add_line((0, 50), (0, 0))
    space.add_circle((25, 25), 6)
    space.add_line((50, 36), (72, 36))
    space.add_arc((72, 40), 4, -90, 90)
    space.add_line((72, 44), (50, 44))
    space.add_arc((50, 40), 4, 90, 270)
    space.add_text("rev. B")


AREA = 6000 - 2 * (100 - math.pi * 25) - math.pi * 36 - (22 * 8 + math.pi * 16)


@pytest.mark.parametrize("dialect", DIALECTS)
def test_every_dialect_gives_the_same_part(dialect: str, tmp_path: Path) -> None:
    path = write(tmp_path / "bracket_left.dxf", bracket, dialect)
    drawing = read_drawing(path)
    assert drawing.dialect == dialect
    assert drawing.unit == (None if dialect == "R12" else "mm")
    part = part_from(path, unit="mm")
    assert part.title == "Bracket left"
    assert part.outline is not None
    assert sorted(c.round for c in part.outline.corners) == pytest.approx([0, 0, 10, 10])
    assert {tuple(map(round, c.at)) for c in part.outline.corners} == {
        (0, 0),
        (100, 0),
        (100, 60),
        (0, 60),
    }
    assert all(edge.through is None for edge in part.outline.edges)
    hole, slot = sorted(part.holes, key=lambda h: isinstance(h, SlotHole))
    assert isinstance(hole, CircleHole)
    assert (hole.centre, hole.diameter) == (pytest.approx((25, 25)), pytest.approx(12))
    assert isinstance(slot, SlotHole)
    assert slot.centre == pytest.approx((61, 40))
    assert (slot.length, slot.width) == pytest.approx((30, 8))
    assert slot.angle % 180 == pytest.approx(0.0)
    assert shape_of(part).area == pytest.approx(AREA, rel=1e-9)


def test_a_binary_drawing_is_read_too(tmp_path: Path) -> None:
    document = ezdxf.new("R2010", units=MM)
    bracket(document.modelspace())
    path = tmp_path / "binary.dxf"
    document.saveas(path, fmt="bin")
    assert shape_of(part_from(path)).area == pytest.approx(AREA, rel=1e-9)


def test_polylines_old_and_new_with_bulges(tmp_path: Path) -> None:
    """A stadium of 40 × 20 whose ends are bulges of 1, i.e. half circles (DXF reference)."""
    rows = [(0, 0, 0), (20, 0, 1), (20, 20, 0), (0, 20, 1)]

    def new(space: Any) -> None:
        space.add_lwpolyline(rows, format="xyb", close=True)

    def old(space: Any) -> None:
        space.add_polyline2d(rows, format="xyb", close=True)

    for draw, dialect in ((new, "R2000"), (old, "R12"), (old, "R2018")):
        part = part_from(write(tmp_path / "a.dxf", draw, dialect), unit="mm")
        shape = shape_of(part)
        assert shape.area == pytest.approx(400 + math.pi * 100, rel=1e-12)
        assert shape.bounds == pytest.approx((-10, 0, 30, 20))


def test_outline_as_one_circle_and_a_ring_of_arcs(tmp_path: Path) -> None:
    def draw(space: Any) -> None:
        space.add_circle((5, 5), 50)
        for k in range(3):
            space.add_arc((5, 5), 20, 120 * k, 120 * (k + 1))

    part = part_from(write(tmp_path / "disc.dxf", draw))
    assert [type(h) for h in part.holes] == [CircleHole]
    assert part.outline is not None
    assert len(part.outline.edges) == 2
    assert shape_of(part).area == pytest.approx(math.pi * (2500 - 400), rel=1e-12)


def test_layers_are_counted_and_chosen(tmp_path: Path) -> None:
    def draw(space: Any) -> None:
        layers = space.doc.layers
        layers.add("CUT", color=1)
        layers.add("BEND", linetype="DASHDOT")
        layers.add("OLD").off()
        layers.add("COLD").freeze()
        rectangle(space, 0, 0, 80, 40, layer="CUT")
        space.add_line((20, 0), (20, 40), dxfattribs={"layer": "BEND"})
        space.add_circle((50, 20), 5, dxfattribs={"layer": "OLD"})
        space.add_circle((60, 20), 4, dxfattribs={"layer": "COLD"})
        space.add_line((0, 20), (80, 20), dxfattribs={"layer": "CUT", "linetype": "CENTER"})

    path = write(tmp_path / "layers.dxf", draw, setup=True)
    drawing = read_drawing(path)
    rows = {layer.name: (layer.curves, layer.role) for layer in drawing.layers}
    assert rows == {
        "BEND": (1, "left out"),
        "COLD": (1, "left out"),
        "CUT": (4, "shape"),
        "OLD": (1, "left out"),
    }
    assert ("dashed lines", 1) in drawing.ignored
    assert part_from(path).holes == ()
    assert any("“BEND” (1 line)" in text for text in texts(bring(path), "ignored"))
    (hole,) = part_from(path, roles={"OLD": "shape"}).holes
    assert isinstance(hole, CircleHole)
    assert hole.diameter == 10
    wrong = bring(path, roles={"CUTS": "shape"})
    assert wrong.part is None
    assert "CUTS" in str(wrong.error)
    assert "“CUT”" in str(wrong.error)
    none = bring(path, roles={"CUT": "left out"})
    assert "no layer is chosen" in str(none.error)


def test_a_layer_of_zones(tmp_path: Path) -> None:
    def draw(space: Any) -> None:
        rectangle(space, 0, 0, 80, 40, layer="0")
        space.add_circle((20, 20), 8, dxfattribs={"layer": "PADS"})
        rectangle(space, 50, 10, 70, 30, layer="PADS")
        space.add_circle((200, 20), 8, dxfattribs={"layer": "PADS"})

    path = write(tmp_path / "zones.dxf", draw)
    as_holes = bring(path)
    assert as_holes.error is not None
    assert "2 outlines" in as_holes.error.cause, "the stray circle is an outline of its own"
    part = part_from(path, roles={"PADS": "zone"})
    assert part.holes == ()
    assert [zone.form.id for zone in part.zones] == ["z1", "z2"]
    assert sorted(type(zone.form).__name__ for zone in part.zones) == ["CircleHole", "LoopHole"]
    assert all(zone.thickness == 2 * part.wall.thickness for zone in part.zones)


def test_what_is_no_line_is_passed_over_and_counted(tmp_path: Path) -> None:
    def draw(space: Any) -> None:
        rectangle(space, 0, 0, 80, 40)
        space.add_text("A")
        space.add_mtext("B")
        space.add_point((1, 1))
        space.add_hatch().paths.add_polyline_path([(0, 0), (1, 0), (1, 1)])
        space.add_linear_dim(base=(0, -5), p1=(0, 0), p2=(80, 0)).render()
        space.add_solid([(0, 0), (1, 0), (0, 1), (1, 1)])

    brought = bring(write(tmp_path / "dims.dxf", draw, setup=True))
    assert brought.part is not None
    (said,) = texts(brought, "ignored")
    assert said == "Passed over: 1 dimension, 1 filled area, 1 hatch, 1 point, 2 texts."


def test_units_are_read_given_or_asked_for(tmp_path: Path) -> None:
    def draw(space: Any) -> None:
        rectangle(space, 0, 0, 4, 2)

    for code, unit, size in (
        (1, None, 101.6),
        (5, None, 40.0),
        (6, None, 4000.0),
        (4, "in", 101.6),
    ):
        part = part_from(write(tmp_path / "u.dxf", draw, unit=code), unit=unit)
        assert shape_of(part).bounds[2] == pytest.approx(size, rel=1e-15)
        assert part.display_units == ("in-lbf-ksi" if size == 101.6 else "mm-N-MPa")
    silent = bring(write(tmp_path / "silent.dxf", draw, unit=SILENT_UNIT))
    assert silent.part is None
    assert silent.error is not None
    assert "does not say in which unit" in silent.error.cause
    assert "--unit mm" in silent.error.mend


def test_far_from_the_origin_is_moved_there_and_said(tmp_path: Path) -> None:
    def draw(space: Any) -> None:
        rectangle(space, 4e6, 5e6, 4e6 + 80, 5e6 + 40)

    brought = bring(write(tmp_path / "far.dxf", draw))
    assert brought.part is not None
    assert shape_of(brought.part).bounds == pytest.approx((0, 0, 80, 40))
    assert any("far from the origin" in text for text in texts(brought, "note"))


def test_several_outlines_are_named_and_one_is_chosen(tmp_path: Path) -> None:
    def draw(space: Any) -> None:
        rectangle(space, 0, 0, 100, 50)
        space.add_circle((50, 25), 20)
        space.add_circle((50, 25), 5)
        rectangle(space, 200, 0, 230, 20)
        space.add_circle((215, 10), 4)

    path = write(tmp_path / "nest.dxf", draw)
    brought = bring(path)
    assert brought.part is None
    assert brought.error is not None
    assert "3 outlines" in brought.error.cause
    assert "1: 100 × 50 mm at (50, 25), 1 hole" in brought.error.cause
    assert "2: 30 × 20 mm at (215, 10), 1 hole" in brought.error.cause
    assert "3: 10 × 10 mm at (50, 25), 0 holes, inside a hole" in brought.error.cause
    assert [c.holes for c in brought.candidates] == [1, 1, 0]
    assert shape_of(part_from(path, outline=2)).area == pytest.approx(600 - 16 * math.pi)
    assert shape_of(part_from(path, outline=1)).area == pytest.approx(5000 - 400 * math.pi)
    assert "no outline 4" in str(bring(path, outline=4).error)


def test_a_window_with_rounded_corners_is_a_loop_hole(tmp_path: Path) -> None:
    def draw(space: Any) -> None:
        rectangle(space, 0, 0, 100, 60)
        b = math.tan(math.pi / 8)
        rows = [
            (25, 20, 0),
            (75, 20, b),
            (80, 25, 0),
            (80, 35, b),
            (75, 40, 0),
            (25, 40, b),
            (20, 35, 0),
            (20, 25, b),
        ]
        space.add_lwpolyline(rows, format="xyb", close=True)

    part = part_from(write(tmp_path / "w.dxf", draw))
    (hole,) = part.holes
    assert isinstance(hole, LoopHole)
    assert [c.round for c in hole.loop.corners] == pytest.approx([5.0] * 4)
    assert len(hole.loop.edges) == 4
