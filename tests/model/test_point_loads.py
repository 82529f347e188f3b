"""Forces at a point of an edge, or on a patch of it: where they may stand, and where they do."""

from __future__ import annotations

import math
from dataclasses import replace

import pytest

from screenapp.model import edits
from screenapp.model.edge_parts import point_of, with_span_ends
from screenapp.model.edits import EditError
from screenapp.model.part import Case, ForceLoad, Part, PointLoad
from screenapp.model.part_json import part_from_text, part_to_text
from screenapp.model.shape import shape_of
from screenapp.model.validity import check, faults_of
from tests.model.plates import loop, plate, rectangle


def with_load(load: PointLoad, part: Part | None = None) -> Part:
    return replace(part or plate(), cases=(Case("k1", "pull", (load,)),))


def test_what_is_not_given_is_not_written() -> None:
    text = part_to_text(with_load(PointLoad("l1", "c3", 1.0, 2.0)))
    assert '{"id": "l1", "kind": "point", "on": "c3", "x": 1, "y": 2}' in text
    patched = with_load(PointLoad("l1", "e3", 1.0, 2.0, 40.0, 5.0))
    assert part_from_text(part_to_text(patched)) == patched


@pytest.mark.parametrize("clockwise", [False, True])
def test_it_stands_where_it_was_drawn(clockwise: bool) -> None:
    """Counted from the edge's first corner, whichever way the outline runs."""
    corners = [(0.0, 0.0), (100.0, 0.0), (100.0, 50.0), (0.0, 50.0)]
    part = plate(loop(corners[::-1] if clockwise else corners))
    edge, at = ("e1", (70.0, 50.0)) if clockwise else ("e3", (70.0, 50.0))
    load = PointLoad("l1", edge, 0.0, -1.0, 30.0 if not clockwise else 70.0)
    part = replace(with_load(load, part), supports=())
    for shape in (shape_of(part), with_span_ends(part, shape_of(part))):
        assert point_of(part, shape, load) == pytest.approx(at)


def test_on_an_arc_it_is_counted_along_the_arc() -> None:
    part = plate(loop([(-30.0, 0.0), (30.0, 0.0)], through={1: (0.0, 30.0)}))
    load = PointLoad("l1", "e2", 0.0, -1.0, 0.25 * math.pi * 30.0)
    at = point_of(part, shape_of(part), load)
    assert at == pytest.approx((30.0 * math.cos(math.pi / 4), 30.0 * math.sin(math.pi / 4)))


def test_it_begins_after_the_round_of_its_corner() -> None:
    part = plate(rectangle(100.0, 50.0, 10.0))
    at = point_of(part, shape_of(part), PointLoad("l1", "e1", 0.0, 1.0, 0.0))
    assert at == pytest.approx((10.0, 0.0))


@pytest.mark.parametrize(
    ("load", "field", "cause", "mend"),
    [
        (PointLoad("l1", "c3", 0, 1, None, 5.0), "patch", "where two edges meet", "edge e2 or e3"),
        (PointLoad("l1", "c3", 0, 1, 5.0), "along", "which has no length", "on an edge"),
        (PointLoad("l1", "e3", 0, 1), "along", "not said where along it", "first corner"),
        (PointLoad("l1", "e3", 0, 1, -1.0), "along", "-1 mm along edge e3", "zero or more"),
        (PointLoad("l1", "e3", 0, 1, math.nan), "along", "nan", "zero or more"),
        (PointLoad("l1", "e3", 0, 1, 101.0), "along", "which is 100 mm|is 100 mm", "move it"),
        (PointLoad("l1", "e3", 0, 1, 98.0, 5.0), "along", "from 95.5 to 100.5", "narrow its patch"),
        (PointLoad("l1", "e3", 0, 1, 50.0, 0.0), "patch", "is 0 mm", "above zero"),
        (PointLoad("l1", "e3", 0, 1, 50.0, math.inf), "patch", "inf", "above zero"),
        (PointLoad("l1", "h1", 0, 1, 5.0), "on", "cannot act on hole h1", "an edge"),
    ],
)
def test_what_cannot_be_is_said(load: PointLoad, field: str, cause: str, mend: str) -> None:
    part = with_load(load)
    (fault,) = [f for f in faults_of(part) if f.blocks]
    assert fault.field == f"cases.k1.loads.l1.{field}"
    assert any(words in fault.cause for words in cause.split("|"))
    assert mend in fault.mend


def test_a_patch_up_to_the_end_of_its_edge_is_sound() -> None:
    check(with_load(PointLoad("l1", "e3", 0.0, -1.0, 97.5, 5.0)))


def test_only_a_point_is_cautioned() -> None:
    def told(load: PointLoad) -> list[str]:
        return [f.cause for f in faults_of(with_load(load)) if "no finite value" in f.cause]

    assert told(PointLoad("l1", "e3", 0.0, -1.0, 50.0, 5.0)) == []
    (words,) = told(PointLoad("l1", "e3", 0.0, -1.0, 50.0))
    assert "on edge e3" in words
    (words,) = told(PointLoad("l1", "c3", 0.0, -1.0))
    assert "at corner c3" in words


def test_moved_to_an_edge_it_stands_in_its_middle() -> None:
    part = edits.put_on(with_load(PointLoad("l1", "c3", 0.0, -1.0)), "l1", "e2")
    assert part.cases[0].loads == (PointLoad("l1", "e2", 0.0, -1.0, 25.0),)
    back = edits.put_on(part, "l1", "c2")
    assert back.cases[0].loads == (PointLoad("l1", "c2", 0.0, -1.0),)
    patched = with_load(PointLoad("l1", "e3", 0.0, -1.0, 50.0, 5.0))
    with pytest.raises(EditError, match="two edges meet"):
        edits.put_on(patched, "l1", "c3")


def test_other_loads_keep_off_corners() -> None:
    with pytest.raises(EditError, match="cannot act on corner"):
        edits.add_load(plate(), "k1", ForceLoad("", "c3", 1.0, 0.0))
