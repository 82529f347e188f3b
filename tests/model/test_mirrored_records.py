"""Supports and loads of a half part are mirrored with it."""

from __future__ import annotations

import math
from dataclasses import replace

import pytest

from screenapp.mechanics.resultants import load_resultants, total_of
from screenapp.model import edits
from screenapp.model.history import History
from screenapp.model.part import (
    BearingLoad,
    BoltSupport,
    Case,
    CircleHole,
    ElasticSupport,
    FixedSupport,
    ForceLoad,
    GravityLoad,
    LineLoad,
    Load,
    MisfitLoad,
    MomentLoad,
    Part,
    PinSupport,
    PointLoad,
    PrescribedSupport,
    PressureLoad,
    RollerSupport,
    ShearLoad,
    SpinLoad,
    Support,
    SymmetrySupport,
    TemperatureLoad,
    Zone,
)
from screenapp.model.part_json import part_to_text
from screenapp.model.pattern import RowPattern
from screenapp.model.regions import shape_with_zones
from screenapp.model.validity import faults_of
from tests.model.plates import loop, plate

LEVEL = (0.0, 25.0)
"""A place of the mirror line of `half`."""


def half(*loads: Load, turn: float = 0.0, clockwise: bool = False) -> Part:
    """The lower half of a plate 100 x 50 with a bevel and a round, its mirror edge e3 (drawn
    clockwise: e2) along y = 25; turned about the origin."""
    c, s = math.cos(math.radians(turn)), math.sin(math.radians(turn))
    places = [(10.0, 0.0), (100.0, 0.0), (100.0, 25.0), (0.0, 25.0), (0.0, 10.0)]
    places = [(c * x - s * y, s * x + c * y) for x, y in places]
    x, y = c * 50.0 - s * 10.0, s * 50.0 + c * 10.0
    outline = loop(places[::-1] if clockwise else places, rounds={3 if clockwise else 1: 4.0})
    part = plate(outline, CircleHole("h1", (x, y), 6.0))
    return replace(part, supports=(), cases=(Case("k1", "pull", loads),))


EVERY: tuple[Load, ...] = (
    PressureLoad("l1", "e1", 3.0),
    PressureLoad("l1", "e2", 3.0, 1.0),
    PressureLoad("l1", "e2", 3.0, 1.0, 4.0, 11.0),
    PressureLoad("l1", "e4", 2.0),
    PressureLoad("l1", "e5", 2.0, 5.0, 1.0),
    ShearLoad("l1", "e1", 2.0),
    ShearLoad("l1", "e2", 2.0),
    ShearLoad("l1", "e4", 2.0, None, 6.0),
    ShearLoad("l1", "h1", 2.0),
    LineLoad("l1", "e4", 2.0, -1.0),
    LineLoad("l1", "e1", 2.0, -1.0, 5.0, None, 10.0),
    LineLoad("l1", "e2", 2.0, -1.0, None, 3.0),
    ForceLoad("l1", "e2", 100.0, 0.0),
    ForceLoad("l1", "e4", 100.0, -30.0),
    ForceLoad("l1", "e5", 100.0, -30.0, 2.0),
    ForceLoad("l1", "h1", 100.0, -30.0),
    BearingLoad("l1", "h1", 100.0, -30.0),
    MomentLoad("l1", "h1", 900.0),
    PointLoad("l1", "c1", 100.0, -30.0),
    PointLoad("l1", "e1", 100.0, -30.0, 20.0, 5.0),
    PointLoad("l1", "e2", 100.0, -30.0, 8.0, 5.0),
    PointLoad("l1", "e4", 100.0, -30.0, 3.0),
)


@pytest.mark.parametrize("load", EVERY, ids=lambda x: f"{type(x).__name__} {x.on}")
@pytest.mark.parametrize("turn", [0.0, 90.0, 37.0])
def test_the_whole_carries_the_load_and_its_mirror_image(load: Load, turn: float) -> None:
    """By their resultants, which are worked out from the drawing by other code."""
    part = half(load, turn=turn)
    made = edits.mirror_half(part, "e3")
    assert [f for f in faults_of(made.part) if f.blocks and "hold" not in f.cause
            and "support" not in f.cause and "cases" in f.field] == []  # fmt: skip
    c, s = math.cos(math.radians(turn)), math.sin(math.radians(turn))
    by = (-s * LEVEL[1], c * LEVEL[1])

    def total(p: Part) -> tuple[float, float, float]:
        """Force along the line and across it, moment about a place of the line."""
        case = p.cases[0]
        found = total_of("k1", load_resultants(p, shape_with_zones(p), case))
        about = found.moment - (by[0] * found.y - by[1] * found.x)
        return c * found.x + s * found.y, c * found.y - s * found.x, about

    one, whole = total(part), total(made.part)
    size = sum(map(abs, one)) + 100.0
    assert whole == pytest.approx((2.0 * one[0], 0.0, 0.0), abs=1e-9 * size)
    # each half has its own
    edits_of_it = made.part.cases[0].loads
    assert len({x.id for x in edits_of_it}) == len(edits_of_it)


def test_an_outline_drawn_clockwise() -> None:
    part = half(PressureLoad("l1", "e3", 3.0, 1.0), clockwise=True)
    made = edits.mirror_half(part, "e2").part
    assert [x.on for x in made.cases[0].loads] == ["e3", "e3"]
    found = total_of("k1", load_resultants(made, shape_with_zones(made), made.cases[0]))
    assert found.moment == pytest.approx(-25.0 * found.x)


def test_what_is_the_same_on_both_halves_of_an_edge_stands_once() -> None:
    made = edits.mirror_half(half(PressureLoad("l1", "e2", 3.0)), "e3").part
    assert made.cases[0].loads == (PressureLoad("l1", "e2", 3.0),)
    made = edits.mirror_half(half(ForceLoad("l1", "e4", 0.0, -8.0)), "e3").part
    # e4 begins at the line, so that what it was is its second half now
    assert {(x.y, x.start, x.end) for x in made.cases[0].loads} == {  # type: ignore[union-attr]
        (-8.0, 15.0, 30.0),
        (8.0, 0.0, 15.0),
    }


def test_supports_come_along() -> None:
    supports: tuple[Support, ...] = (
        SymmetrySupport("s1", "e3"),
        FixedSupport("s2", "e1"),
        RollerSupport("s3", "e4", 30.0),
        RollerSupport("s4", "e2"),
        PrescribedSupport("s5", "e5", None, 0.5),
        PinSupport("s6", "h1"),
        ElasticSupport("s7", "e1", 5.0, 2.0, 1.0, 9.0),
        BoltSupport("s8", "h2", ("h3.1",), 800.0),
    )
    row = CircleHole("h3", (20.0, 5.0), 3.0, RowPattern(2, 10.0, 0.0))
    part = replace(half(), supports=supports)
    part = replace(part, holes=(*part.holes, CircleHole("h2", (80.0, 10.0), 4.0), row))
    made = edits.mirror_half(part, "e3")
    assert made.lost == ("support s1 on e3",)
    by_kind: dict[type, list[Support]] = {}
    for support in made.part.supports:
        by_kind.setdefault(type(support), []).append(support)
    holes = [h.id for h in made.part.holes]
    images = dict(zip(("h1", "h2", "h3"), holes[3:], strict=True))
    assert SymmetrySupport not in by_kind
    image = by_kind[FixedSupport][1].on
    assert image not in ("e1", "e3")
    assert [(s.on, s.angle, s.start, s.end) for s in by_kind[RollerSupport]] == [  # type: ignore[union-attr]
        ("e4", 30.0, 15.0, 30.0),
        ("e2", None, None, None),
        ("e4", 150.0, 0.0, 15.0),
    ]
    one, other = by_kind[PrescribedSupport]
    assert (one.x, one.y, other.x, other.y) == (None, 0.5, None, -0.5)  # type: ignore[union-attr]
    assert by_kind[PinSupport][1].on == images["h1"]
    springs = by_kind[ElasticSupport][1]
    assert isinstance(springs, ElasticSupport)
    assert (springs.on, springs.start, springs.end) == (image, 77.0, 85.0)  # of 86 mm
    bolts = by_kind[BoltSupport][1]
    assert isinstance(bolts, BoltSupport)
    assert (bolts.on, bolts.also) == (images["h2"], (f"{images['h3']}.1",))
    before = [f.cause for f in faults_of(part) if f.blocks and f.field.startswith("supp")]
    after = [f.cause for f in faults_of(made.part) if f.blocks and f.field.startswith("supp")]
    assert all("different displacements" in cause for cause in (*before, *after))


def test_a_slanted_line_cannot_mirror_one_moved_component() -> None:
    part = half(turn=37.0)
    part = replace(part, supports=(PrescribedSupport("s1", "e5", 0.0), FixedSupport("s2", "e1")))
    made = edits.mirror_half(part, "e3")
    assert made.lost == ("the mirror image of support s1",)
    assert [type(s) for s in made.part.supports] == [PrescribedSupport, FixedSupport, FixedSupport]


def test_misfits_follow_their_support_and_warmth_its_zone() -> None:
    zone = Zone(CircleHole("z1", (20.0, 12.0), 8.0), 5.0)
    loads: tuple[Load, ...] = (
        MisfitLoad("l1", "s1", 0.1, 0.2),
        TemperatureLoad("l2", 40.0, 0.5, 0.25, zone="z1"),
        GravityLoad("l3", 1.0, -9.81),
        SpinLoad("l4", 3.0, 4.0, 1000.0),
    )
    part = replace(half(*loads), supports=(FixedSupport("s1", "h1"),), zones=(zone,))
    made = edits.mirror_half(part, "e3").part
    assert made.cases[0].loads[:4] == loads
    misfit, warmth = made.cases[0].loads[4:]
    assert misfit == MisfitLoad("l5", made.supports[1].id, 0.1, -0.2)
    assert isinstance(warmth, TemperatureLoad)
    assert (warmth.zone, warmth.x, warmth.y) == (made.zones[1].id, 0.5, -0.25)


def test_undo_brings_the_half_back() -> None:
    part = half(*(replace(load, id=f"l{k}") for k, load in enumerate(EVERY)))
    part = replace(part, supports=(SymmetrySupport("s1", "e3"), FixedSupport("s2", "h1")))
    history = History(part)
    history.push("mirror", edits.mirror_half(part, "e3").part)
    assert history.part != part
    history.undo()
    assert part_to_text(history.part) == part_to_text(part)
