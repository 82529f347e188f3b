"""Part → DXF → part: the same boundary to 1e-9 of its size, the same holes and slots."""

from __future__ import annotations

import tempfile
from collections import Counter
from dataclasses import replace
from pathlib import Path

import ezdxf
import numpy as np
import pytest
from hypothesis import given, settings, strategies as st

from screenapp.exchange.drawing import DrawingError
from screenapp.exchange.dxf_writing import write_dxf
from screenapp.model.errors import InvalidPartError
from screenapp.model.part import CircleHole, Corner, Edge, Loop, LoopHole, Part, SlotHole, Zone
from screenapp.model.part_json import read_part
from screenapp.model.pattern import BoltCircle
from screenapp.model.shape import shape_of
from screenapp.model.validity import faults_of
from tests.exchange.drawings import SHAPE, bring, part_from, shapes_apart, texts
from tests.meshing.random_shapes import KINDS, rectangle

SAMPLES = Path(__file__).parents[2] / "samples"


def random_part(seed: int) -> Part:
    """A part of a seed whose shape is sound."""
    random = np.random.default_rng(seed)
    while True:
        part = KINDS[seed % len(KINDS)](random)
        if not [f for f in faults_of(part) if f.blocks and f.field.split(".")[0] in SHAPE]:
            return part


def there_and_back(part: Part, unit: str | None = None) -> Part:
    """What is read of what was written."""
    with tempfile.TemporaryDirectory() as folder:
        path = Path(folder) / "part.dxf"
        write_dxf(part, path, unit)
        for kind in ("gap", "twice", "open", "branch"):
            assert texts(bring(path), kind) == []
        return part_from(path)


@settings(max_examples=60, deadline=None)
@given(st.integers(0, 10_000))
def test_random_parts_come_back_exactly(seed: int) -> None:
    part = random_part(seed)
    back = there_and_back(part)
    assert shapes_apart(part, back) <= 1e-9
    assert shape_of(back).area == pytest.approx(shape_of(part).area, rel=1e-9)
    kinds = [Counter(type(hole).__name__ for hole in p.holes) for p in (part, back)]
    assert kinds[0] == kinds[1]


@pytest.mark.parametrize("path", sorted(SAMPLES.glob("*.part.json")), ids=lambda p: p.name)
def test_samples_come_back_with_rounds_between_straight_edges(path: Path) -> None:
    part = read_part(path)
    back = there_and_back(part)
    assert shapes_apart(part, back) <= 1e-9
    outline = part.outline
    assert outline is not None
    assert back.outline is not None
    straight = [edge.through is None for edge in outline.edges]
    wanted = [
        c.round
        for i, c in enumerate(outline.corners)
        if c.round and straight[i] and straight[i - 1]
    ]
    found = [c.round for c in back.outline.corners if c.round]
    assert sorted(found) == pytest.approx(sorted(wanted), rel=1e-9)


def test_patterns_chamfers_and_zones_are_written_as_they_are_cut() -> None:
    outline = rectangle(100.0, 60.0)
    corners = (replace(outline.corners[0], chamfer=5.0), *outline.corners[1:])
    ring = (Corner("c9", (60.0, 10.0)), Corner("c10", (80.0, 10.0)), Corner("c11", (80.0, 30.0)))
    part = Part(
        outline=replace(outline, corners=corners),
        holes=(CircleHole("h1", (30.0, 30.0), 4.0, BoltCircle(6, 10.0, 15.0)),),
        zones=(
            Zone(SlotHole("z1", (70.0, 45.0), 20.0, 8.0, 30.0), 6.0),
            Zone(LoopHole("z2", Loop(ring, (Edge("e9"), Edge("e10"), Edge("e11")))), 1.5),
        ),
    )
    back = there_and_back(part)
    assert shapes_apart(part, back) <= 1e-9
    assert len(back.holes) == 6
    assert all(isinstance(h, CircleHole) and h.diameter == 4.0 for h in back.holes)
    slot, triangle = sorted((z.form for z in back.zones), key=lambda f: isinstance(f, LoopHole))
    assert isinstance(slot, SlotHole)
    assert (slot.length, slot.width, slot.angle) == pytest.approx((20.0, 8.0, 30.0))
    assert isinstance(triangle, LoopHole)
    assert {c.at for c in triangle.loop.corners} == {c.at for c in ring}


def test_inches_are_written_for_parts_shown_in_inches(tmp_path: Path) -> None:
    part = replace(Part(outline=rectangle(25.4, 50.8)), display_units="in-lbf-ksi")
    path = tmp_path / "inch.dxf"
    write_dxf(part, path)
    document = ezdxf.readfile(path)
    assert document.dxfversion == "AC1024", "R2010"
    assert document.units == 1
    (line,) = document.modelspace()
    assert line.dxf.layer == "OUTLINE"
    assert max(p[0] for p in line.get_points()) == pytest.approx(1.0, rel=1e-15)
    back = part_from(path)
    assert back.display_units == "in-lbf-ksi"
    assert shapes_apart(part, back) <= 1e-12
    assert shapes_apart(part, there_and_back(part, "cm")) <= 1e-12


def test_circles_stay_circles_and_arcs_arcs(tmp_path: Path) -> None:
    part = random_part(2)  # a ring: an outline of two arcs and a round hole
    path = tmp_path / "ring.dxf"
    write_dxf(part, path)
    rows = {e.dxf.layer: e.dxftype() for e in ezdxf.readfile(path).modelspace()}
    assert rows == {"OUTLINE": "LWPOLYLINE", "HOLES": "CIRCLE"}
    (hole,) = part.holes
    (back,) = part_from(path).holes
    assert isinstance(hole, CircleHole)
    assert replace(back, id=hole.id) == hole, "to the last bit"


def test_what_cannot_be_written_is_said(tmp_path: Path) -> None:
    with pytest.raises(InvalidPartError, match="no outline"):
        write_dxf(Part(), tmp_path / "none.dxf")
    part = Part(outline=rectangle(10.0, 10.0))
    with pytest.raises(DrawingError, match="cannot be written in furlong"):
        write_dxf(part, tmp_path / "a.dxf", "furlong")
    with pytest.raises(DrawingError, match="cannot be written"):
        write_dxf(part, tmp_path / "no folder" / "a.dxf")
    assert not list(tmp_path.iterdir())
