"""How long recovery and readings take in a mesh of 200,000 quads."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from pytest_benchmark.fixture import BenchmarkFixture

from screenapp.mechanics.locate import PointLocator
from screenapp.mechanics.point_reading import PointReader
from screenapp.mechanics.recovery import recover
from screenapp.model.part import Case, Part, PressureLoad
from screenapp.model.solution import Solution, StressField
from tests.mechanics.stress_fields import kirsch_displacement, solution_of
from tests.mechanics.structured import Structured, full_ring


@pytest.fixture(scope="module")
def large() -> Structured:
    return full_ring(10.0, 40.0, 1000, 200)


@pytest.fixture(scope="module")
def part(large: Structured) -> Part:
    return replace(large.part, cases=(Case("k", "pressed", (PressureLoad("p", "h1", 5.0),)),))


@pytest.fixture(scope="module")
def solution(large: Structured) -> Solution:
    return solution_of(large.mesh, lambda p: kirsch_displacement(p, 210_000.0, 0.3, 10.0))


@pytest.fixture(scope="module")
def stress(large: Structured, part: Part, solution: Solution) -> StressField:
    return recover(part, large.shape, large.mesh, solution)


def points_in_ring(n: int) -> np.ndarray:
    rng = np.random.default_rng(1)
    radius, angle = rng.uniform(10.0, 40.0, n), rng.uniform(0.0, 2.0 * np.pi, n)
    return np.stack([radius * np.cos(angle), radius * np.sin(angle)], axis=1)


def test_recovery(
    benchmark: BenchmarkFixture, large: Structured, part: Part, solution: Solution
) -> None:
    field = benchmark(recover, part, large.shape, large.mesh, solution)
    assert np.isfinite(field.nodal).all()


def test_making_the_grid(benchmark: BenchmarkFixture, large: Structured) -> None:
    locator = benchmark(PointLocator, large.mesh)
    assert (locator.locate(points_in_ring(100))[0] >= 0).all()


def test_locating_one_point(benchmark: BenchmarkFixture, large: Structured) -> None:
    """Was 0.4 ms in the trials that the design rests on."""
    locator, point = PointLocator(large.mesh), points_in_ring(1)
    element, _ = benchmark(locator.locate, point)
    assert element[0] >= 0


def test_locating_many_points(benchmark: BenchmarkFixture, large: Structured) -> None:
    locator, points = PointLocator(large.mesh), points_in_ring(100_000)
    element, _ = benchmark(locator.locate, points)
    assert (element >= 0).all()


def test_reading_one_point(
    benchmark: BenchmarkFixture,
    large: Structured,
    part: Part,
    solution: Solution,
    stress: StressField,
) -> None:
    reader = PointReader(part, large.shape, large.mesh, solution, stress)
    values, _ = benchmark(reader.read, points_in_ring(1))
    assert np.isfinite(values).all()
