"""Random edits of any kind never break a rule of the record, and unknown ids never slip in."""

from __future__ import annotations

import math
from collections.abc import Callable

from hypothesis import HealthCheck, given, settings, strategies as st

from screenapp.model import edits
from screenapp.model.errors import ScreenappError
from screenapp.model.features import everything, loops_of, places_of
from screenapp.model.part import (
    BearingLoad,
    CircleHole,
    FixedSupport,
    ForceLoad,
    GravityLoad,
    Part,
    PointLoad,
    PressureLoad,
    RollerSupport,
    SlotHole,
    StressLimit,
)
from screenapp.model.part_json import part_from_text, part_to_text
from screenapp.model.validity import faults_of
from tests.model.plates import STEEL, plate

numbers = st.integers(-20, 120).map(float) | st.sampled_from([0.0, 0.5, math.nan, math.inf, 1e9])
points = st.tuples(numbers, numbers)


def _edit(draw: st.DataObject, part: Part) -> Callable[[], Part | edits.Outcome]:
    """One edit, drawn at random, on a thing of the part or on one that is not there."""
    known = [found.record.id for found in everything(part)] + ["gone"]
    id_ = draw.draw(st.sampled_from(known))
    number = draw.draw(numbers)
    at = draw.draw(points)
    other = draw.draw(points)
    return draw.draw(
        st.sampled_from(
            [
                lambda: edits.set_outline(part, [at, other, (7.0, 90.0), (-3.0, 40.0)]),
                lambda: edits.set_outline(part, [at, other], [(50.0, 50.0), None]),
                lambda: edits.outline_from_rectangle(part, at, other),
                lambda: edits.add_circle_hole(part, at, number),
                lambda: edits.add_slot_hole(part, at, number, 5.0, 30.0),
                lambda: edits.add_loop_hole(part, [at, other, (50.0, 20.0)]),
                lambda: edits.move_corner(part, id_, at),
                lambda: edits.move_hole(part, id_, at),
                lambda: edits.resize_hole(part, id_, diameter=number),
                lambda: edits.resize_hole(part, id_, width=number),
                lambda: edits.set_round(part, id_, number),
                lambda: edits.set_edge_arc(part, id_, at),
                lambda: edits.straighten(part, id_),
                lambda: edits.insert_corner(part, id_, at),
                lambda: edits.remove_corner(part, id_),
                lambda: edits.remove(part, id_),
                lambda: edits.remove(part, *draw.draw(st.permutations(known[:-1]))[:3]),
                lambda: edits.move(part, known[::2], number, 3.0),
                lambda: edits.add_support(part, FixedSupport("", id_)),
                lambda: edits.add_support(part, RollerSupport("", id_, None)),
                lambda: edits.replace_support(part, RollerSupport("s1", id_, number)),
                lambda: edits.add_case(part),
                lambda: edits.rename_case(part, id_, "Pull"),
                lambda: edits.add_load(part, "k1", ForceLoad("", id_, number, 1.0)),
                lambda: edits.add_load(part, "k1", BearingLoad("", id_, number, 1.0)),
                lambda: edits.add_load(part, "k2", PointLoad("", id_, 1.0, 1.0)),
                lambda: edits.add_load(part, id_, GravityLoad("", 0.0, -9.81)),
                lambda: edits.replace_load(part, PressureLoad("l1", id_, number)),
                lambda: edits.set_thickness(part, number),
                lambda: edits.set_material(part, STEEL),
                lambda: edits.add_limit(part, StressLimit("", factor=number)),
                lambda: edits.set_mesh(part, tolerance=number),
                lambda: edits.set_mesh_size(part, number),
                lambda: edits.add_probe(part, at),
                lambda: edits.move_probe(part, id_, at),
            ]
        )
    )


def _must_be_whole(part: Part) -> None:
    """The rules that every record keeps, whatever faults its geometry may have."""
    ids = [found.record.id for found in everything(part)]
    assert len(ids) == len(set(ids))
    assert all(ids)
    places = places_of(part)
    for support in part.supports:
        assert support.on in places
    for case in part.cases:
        for load in case.loads:
            assert isinstance(load, GravityLoad) or load.on in places
    for _, _, loop in loops_of(part):
        assert len(loop.corners) == len(loop.edges) >= 2
        for corner in loop.corners:
            assert all(math.isfinite(x) for x in corner.at)
            assert corner.round >= 0.0
    for hole in part.holes:
        if isinstance(hole, CircleHole):
            assert hole.diameter > 0.0
        if isinstance(hole, SlotHole):
            assert hole.length >= hole.width > 0.0
    assert part.wall.thickness > 0.0


@settings(max_examples=60, deadline=None, suppress_health_check=[HealthCheck.too_slow])
@given(st.data())
def test_no_sequence_of_edits_breaks_a_record(data: st.DataObject) -> None:
    part = plate()
    refused: list[ScreenappError] = []
    for _ in range(data.draw(st.integers(5, 25))):
        try:
            result = _edit(data, part)()
        except ScreenappError as error:
            refused.append(error)
            continue
        part = result.part if isinstance(result, edits.Outcome) else result
        _must_be_whole(part)
    faults_of(part)
    assert all(error.cause and error.mend for error in refused)
    assert part_from_text(part_to_text(part)) == part
