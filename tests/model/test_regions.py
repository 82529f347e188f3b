"""Parts divided by their zones: areas are exact, lines end on one another, nothing is lost."""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import replace

import pytest

from screenapp.model.part import CircleHole, LoopHole, Part, Point, SlotHole, Zone
from screenapp.model.regions import shape_with_zones
from screenapp.model.shape import Shape, shape_of
from screenapp.model.validity import faults_of
from tests.model.plates import loop, plate
from tests.model.random_zones import zoned_plate


def pad(points: Sequence[Point], id_: str = "z1", t: float = 6.0, **how: object) -> Zone:
    return Zone(LoopHole(id_, loop(points, prefix=id_, **how)), t)  # type: ignore[arg-type]


def disc(x: float, y: float, diameter: float, id_: str = "z1") -> Zone:
    return Zone(CircleHole(id_, (x, y), diameter), 6.0)


def divided(*zones: Zone, part: Part | None = None) -> Shape:
    part = replace(plate() if part is None else part, zones=zones)
    return shape_with_zones(part)


def areas(shape: Shape) -> dict[int, float]:
    found: dict[int, float] = {}
    for region in shape.regions:
        found[region.zone] = found.get(region.zone, 0.0) + region.shape.area
    return found


def is_sound(shape: Shape, whole: Shape) -> None:
    """Every region is closed, all together are the part, and neighbours share whole lines."""
    assert shape.area == pytest.approx(whole.area, rel=1e-12)
    assert sum(areas(shape).values()) == pytest.approx(whole.area, rel=1e-12)
    n = len(shape.curves)
    used = [p for region in shape.regions for p in region.pieces]
    assert sorted(p for p in used if p < n) == list(range(n))
    assert sorted(p for p in used if p >= n) == sorted(
        2 * list(range(n, n + len(shape.interfaces)))
    )
    for region in shape.regions:
        for first, last in region.shape.loops:
            curves = [c.curve for c in region.shape.curves[first:last]]
            for one, two in zip(curves, [*curves[1:], curves[0]], strict=True):
                assert math.dist(one.end, two.start) < 1e-9 * shape.size
    for interface in shape.interfaces:
        assert interface.left != interface.right


HOLE = math.pi * 25.0


@pytest.mark.parametrize(
    ("zones", "wanted"),
    [
        ((disc(25.0, 25.0, 20.0),), {0: 100.0 * math.pi}),
        ((disc(50.0, 25.0, 30.0),), {0: 225.0 * math.pi - HOLE}),  # round the hole
        ((disc(100.0, 50.0, 40.0),), {0: 100.0 * math.pi}),  # on a corner: a quarter of it
        ((disc(0.0, 25.0, 20.0),), {0: 50.0 * math.pi}),  # over an edge: half of it
        ((disc(45.0, 25.0, 30.0),), {0: 225.0 * math.pi - HOLE}),  # touches the hole: no, holds it
        ((pad([(60.0, -5.0), (80.0, -5.0), (80.0, 60.0), (60.0, 60.0)]),), {0: 1000.0}),
        ((pad([(60.0, 0.0), (80.0, 0.0), (80.0, 50.0), (60.0, 50.0)]),), {0: 1000.0}),
        ((pad([(0.0, 0.0), (50.0, 0.0), (50.0, 50.0), (0.0, 50.0)]),), {0: 2500.0 - HOLE / 2.0}),
        ((pad([(-9.0, -9.0), (150.0, -9.0), (150.0, 90.0), (-9.0, 90.0)]),), {0: 5000.0 - HOLE}),
        ((pad([(80.0, 60.0), (80.0, -5.0), (60.0, -5.0), (60.0, 60.0)]),), {0: 1000.0}),
        (
            (Zone(SlotHole("z1", (20.0, 25.0), 30.0, 10.0, 90.0), 6.0),),
            {0: 200.0 + 25.0 * math.pi},
        ),
    ],
)  # fmt: skip
def test_areas_are_exact(zones: tuple[Zone, ...], wanted: dict[int, float]) -> None:
    shape = divided(*zones)
    is_sound(shape, shape_of(plate()))
    for zone, area in wanted.items():
        assert areas(shape)[zone] == pytest.approx(area, rel=1e-9)


def test_where_zones_overlap_the_later_one_wins() -> None:
    shape = divided(disc(100.0, 25.0, 30.0), disc(100.0, 25.0, 10.0, "z2"))
    is_sound(shape, shape_of(plate()))
    assert areas(shape)[1] == pytest.approx(12.5 * math.pi, rel=1e-9)
    assert areas(shape)[0] == pytest.approx(100.0 * math.pi, rel=1e-9)


def test_zones_that_share_an_edge_have_one_line_between_them() -> None:
    left = pad([(60.0, -5.0), (75.0, -5.0), (75.0, 60.0), (60.0, 60.0)])
    right = pad([(75.0, -5.0), (90.0, -5.0), (90.0, 60.0), (75.0, 60.0)], "z2")
    shape = divided(left, right)
    is_sound(shape, shape_of(plate()))
    assert len([i for i in shape.interfaces if {i.left, i.right} == {0, 1}]) == 1
    assert len(shape.interfaces) == 3


def test_a_step_that_crosses_the_part_makes_three_regions() -> None:
    shape = divided(pad([(60.0, -5.0), (80.0, -5.0), (80.0, 60.0), (60.0, 60.0)]))
    assert sorted(r.zone for r in shape.regions) == [-1, -1, 0]
    assert len(shape.pieces_of("e1")) == 3  # the outline's edge goes on under its own name


def test_a_part_without_zones_is_not_divided() -> None:
    assert shape_with_zones(plate()) == shape_of(plate())


@pytest.mark.parametrize(
    ("zone", "words"),
    [
        (disc(200.0, 25.0, 20.0), "lies outside the part"),
        (disc(50.0, 25.0, 8.0), "lies outside the part"),  # in the hole
        (pad([(10.0, 10.0), (30.0, 30.0), (30.0, 10.0), (10.0, 30.0)]), "cross"),
        (pad([(10.0, 1e-3), (50.0, 1e-3), (50.0, 20.0), (10.0, 20.0)]), "almost along"),
        (pad([(10.0, 0.01), (50.0, 0.0), (50.0, 20.0), (10.0, 20.0)]), "zone"),
        (disc(20.0, 10.0, 20.0), "tip"),  # touches the edge from inside
        (pad([(10.0, 10.0), (20.0, 10.0), (20.0, 20.0)], rounds={0: 30.0}), "does not fit"),
    ],
)  # fmt: skip
def test_what_no_mesh_could_fill_is_a_fault(zone: Zone, words: str) -> None:
    faults = [f for f in faults_of(replace(plate(), zones=(zone,))) if f.blocks]
    assert faults
    assert any(words in f.cause for f in faults)
    assert all(f.field.startswith("zones.z1") for f in faults)


def test_a_zone_wholly_under_a_later_one_is_told_and_harms_nothing() -> None:
    part = replace(plate(), zones=(disc(20.0, 25.0, 10.0), disc(20.0, 25.0, 20.0, "z2")))
    told = [f for f in faults_of(part) if "counts for nothing" in f.cause]
    assert [f.blocks for f in told] == [False]
    is_sound(shape_with_zones(part), shape_of(plate()))


@pytest.mark.parametrize("seed", range(60))
def test_random_zones_are_divided_soundly_or_are_at_fault(seed: int) -> None:
    part = zoned_plate(seed)
    if any(f.blocks for f in faults_of(part)):
        return
    is_sound(shape_with_zones(part), shape_of(plate()))


def test_most_random_zones_are_no_fault() -> None:
    sound = [not any(f.blocks for f in faults_of(zoned_plate(seed))) for seed in range(60)]
    assert sum(sound) > 30
