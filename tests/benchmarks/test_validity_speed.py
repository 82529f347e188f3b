"""Processor time to examine a part of 2,000 corners and 500 holes, at once and after an edit of it
(the aim is 50 ms), and to drag one of its corners."""

from __future__ import annotations

import itertools
import math
import time

import pytest
from pytest_benchmark.fixture import BenchmarkFixture

from screenapp.model import edits
from screenapp.model.part import (
    Case,
    CircleHole,
    Corner,
    Edge,
    FixedSupport,
    ForceLoad,
    Loop,
    Material,
    Part,
    StressLimit,
    Wall,
)
from screenapp.model.validity import faults_of

pytestmark = pytest.mark.benchmark(timer=time.process_time)


def large_part(round_: float) -> Part:
    """A wavy disc of 2 m with a grid of holes; its corners rounded or sharp."""
    n = 2000
    angles = [2.0 * math.pi * i / n for i in range(n)]
    radii = [1000.0 + (6.0 if i % 4 < 2 else 0.0) for i in range(n)]
    corners = tuple(
        Corner(f"c{i}", (r * math.cos(a), r * math.sin(a)), round_)
        for i, (r, a) in enumerate(zip(radii, angles, strict=True))
    )
    holes = tuple(
        CircleHole(f"h{25 * i + j}", (50.0 * i - 475.0, 40.0 * j - 480.0), 12.0)
        for i in range(20)
        for j in range(25)
    )
    return Part(
        outline=Loop(corners, tuple(Edge(f"e{i}") for i in range(n))),
        holes=holes,
        wall=Wall(3.0, "steel"),
        materials=(Material("steel", 210000.0, 0.3, 7850.0, 235.0),),
        supports=(FixedSupport("s1", "h0"), FixedSupport("s2", "h499")),
        cases=(Case("k1", "pull", (ForceLoad("l1", "e2", 100.0, 0.0),)),),
        limits=(StressLimit("g1"),),
    )


@pytest.mark.parametrize("round_", [0.0, 0.8], ids=["sharp", "rounded"])
def test_examining_a_large_part(benchmark: BenchmarkFixture, round_: float) -> None:
    part = large_part(round_)
    faults = benchmark(faults_of, part)
    assert not any(f.blocks for f in faults)


@pytest.mark.parametrize("round_", [0.0, 0.8], ids=["sharp", "rounded"])
def test_examining_after_an_edit(benchmark: BenchmarkFixture, round_: float) -> None:
    part = large_part(round_)
    faults_of(part)
    steps = itertools.count(1)
    assert part.outline is not None
    x, y = part.outline.corners[700].at

    def edited() -> tuple[tuple[Part], dict[str, object]]:
        away = 0.001 * next(steps)
        return (edits.move_corner(part, "c700", (x + away, y)),), {}

    faults = benchmark.pedantic(faults_of, setup=edited, rounds=30)  # type: ignore[no-untyped-call]
    assert not any(f.blocks for f in faults)


def test_dragging_a_corner_of_a_large_part(benchmark: BenchmarkFixture) -> None:
    part = large_part(0.8)
    moved = benchmark(edits.move_corner, part, "c700", (0.0, 900.0))
    assert moved.outline is not None
    assert moved.outline.corners[700].at == (0.0, 900.0)
