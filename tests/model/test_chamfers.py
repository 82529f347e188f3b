"""Chamfers: a property of a corner like its round."""

from __future__ import annotations

import math
from dataclasses import replace

import pytest

from screenapp.model import edits
from screenapp.model.features import find, place_name
from screenapp.model.part import FixedSupport, Part, PointLoad, RollerSupport
from screenapp.model.part_json import part_from_text, part_to_text
from screenapp.model.shape import shape_of
from screenapp.model.validity import faults_of
from tests.model.plates import loop, plate, rectangle


def cut(part: Part, **chamfers: float) -> Part:
    for corner, length in chamfers.items():
        part = edits.set_chamfer(part, corner, length)
    return part


def test_a_chamfer_takes_its_length_of_both_edges() -> None:
    part = cut(plate(rectangle(100.0, 50.0)), c2=6.0)
    shape = shape_of(part)
    assert shape.area == pytest.approx(5000.0 - 18.0 - math.pi * 25.0)
    (piece,) = (shape.curves[i] for i in shape.pieces_of("c2"))
    assert piece.kind == "chamfer"
    assert piece.curve.start == pytest.approx((94.0, 0.0))
    assert piece.curve.end == pytest.approx((100.0, 6.0))
    names = dict(shape.sharp_corners)
    assert "c2" not in names
    assert names["c2.1"] == pytest.approx((94.0, 0.0))
    assert names["c2.2"] == pytest.approx((100.0, 6.0))


def test_at_a_slanted_corner_both_legs_are_equal() -> None:
    part = cut(plate(loop([(0.0, 0.0), (100.0, 0.0), (20.0, 60.0)])), c2=10.0)
    (piece,) = (shape_of(part).curves[i] for i in shape_of(part).pieces_of("c2"))
    assert math.dist(piece.curve.start, (100.0, 0.0)) == pytest.approx(10.0)
    assert math.dist(piece.curve.end, (100.0, 0.0)) == pytest.approx(10.0)


def test_on_an_arc_the_length_is_along_the_arc() -> None:
    half = loop([(0.0, 0.0), (40.0, 0.0)], through={0: (20.0, -20.0)})
    part = cut(replace(plate(half), holes=()), c2=5.0)
    shape = shape_of(part)
    (arc,) = (shape.curves[i] for i in shape.pieces_of("e1"))
    assert arc.curve.length == pytest.approx(20.0 * math.pi - 5.0)


def test_round_and_chamfer_replace_one_another() -> None:
    part = cut(plate(), c1=4.0)
    rounded = edits.set_round(part, "c1", 3.0)
    assert rounded.outline is not None
    assert (rounded.outline.corners[0].round, rounded.outline.corners[0].chamfer) == (3.0, 0.0)
    again = cut(rounded, c1=2.0)
    assert again.outline is not None
    assert (again.outline.corners[0].round, again.outline.corners[0].chamfer) == (0.0, 2.0)
    assert edits.set_round(again, "c1", 0.0).outline == rectangle(100.0, 50.0)


def test_what_does_not_fit_is_said_by_how_much() -> None:
    part = cut(plate(), c1=30.0, c4=30.0)
    fault = next(f for f in faults_of(part) if f.blocks)
    assert fault.cause == "the chamfers at c4 and c1 need 60 mm of edge e4, which is 50 mm long"
    assert fault.mend == "make the chamfers at most 25 mm"
    assert fault.field == "outline.corners.c4.chamfer"
    mixed = edits.set_round(part, "c4", 30.0)
    assert "the rounds and chamfers at" in next(f for f in faults_of(mixed) if f.blocks).cause
    long = next(f for f in faults_of(cut(plate(), c1=60.0)) if f.blocks)
    assert long.cause == "a chamfer of 60 mm does not fit at corner c1"
    both = plate()
    assert both.outline is not None
    corners = (replace(both.outline.corners[0], round=2.0, chamfer=2.0), *both.outline.corners[1:])
    both = replace(both, outline=replace(both.outline, corners=corners))
    assert "both a round and a chamfer" in faults_of(both)[0].cause
    with pytest.raises(edits.EditError, match="chamfer of corner c1"):
        edits.set_chamfer(plate(), "c1", -2.0)


def test_nothing_stands_on_a_corner_cut_off() -> None:
    part = cut(plate(), c2=5.0)
    with pytest.raises(edits.EditError, match="chamfered, so there is no point"):
        edits.add_load(part, "k1", PointLoad("", "c2", 1.0, 0.0))
    with pytest.raises(edits.EditError):
        edits.add_support(part, RollerSupport("", "c2", 0.0))
    assert edits.add_support(part, FixedSupport("", "c1")).supports[-1].on == "c1"


def test_names_and_ends() -> None:
    part = cut(plate(), c2=5.0)
    assert [place_name(part, i) for i in ("c2", "c2.1", "c2.2", "c2.3", "c1.1")] == [
        "chamfer c2",
        "corner c2.1",
        "corner c2.2",
        "“c2.3”",
        "“c1.1”",
    ]
    found = find(part, "c2.1")
    assert found is not None
    assert found.field == "outline.corners.c2"


def test_an_inner_chamfer_is_cautioned_at_its_ends() -> None:
    corner = [(0.0, 0.0), (60.0, 0.0), (60.0, 20.0), (20.0, 20.0), (20.0, 60.0), (0.0, 60.0)]
    part = cut(replace(plate(loop(corner)), holes=()), c4=6.0)
    words = [f.cause for f in faults_of(part) if "re-enters" in f.cause]
    assert [w.split(":")[0] for w in words] == [
        "corner c4.1 re-enters the material at 225° and is sharp",
        "corner c4.2 re-enters the material at 225° and is sharp",
    ]


def test_in_the_file() -> None:
    part = cut(plate(), c2=5.0)
    text = part_to_text(part)
    assert '{"id": "c2", "at": [100, 0], "chamfer": 5}' in text
    assert text.count("chamfer") == 1
    assert part_from_text(text) == part
