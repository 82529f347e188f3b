"""Whole screenings of the samples, and that the tables' own arithmetic holds."""

from __future__ import annotations

from collections.abc import Iterator
from pathlib import Path

import pytest
from pytest_benchmark.fixture import BenchmarkFixture

from screenapp.meshing.service import Mesher
from screenapp.model.part_json import read_part
from screenapp.screening.screen import screen
from tests.benchmarks.clocks import worker_seconds
from tests.benchmarks.growth import STAGES, Cost, cost, exponent
from tests.benchmarks.sample_times import SAMPLES, sample_times


@pytest.fixture(scope="module")
def mesher() -> Iterator[Mesher]:
    with Mesher() as warm:
        yield warm


@pytest.mark.parametrize("place", SAMPLES, ids=lambda place: place.name.split(".")[0])
def test_sample(benchmark: BenchmarkFixture, place: Path, mesher: Mesher) -> None:
    """From part file to findings, worker warm."""
    findings = benchmark(lambda: screen(read_part(place), mesher))
    assert all(reading.trust == "settled" for reading in findings.readings)


def test_sample_times_split_what_passed(mesher: Mesher) -> None:
    found = list(sample_times(mesher, 1))
    assert [t.name for t in found] == [p.name.removesuffix(".part.json") for p in SAMPLES]
    for t in found:
        assert sum(t.shares.values()) == pytest.approx(1.0)
        assert t.own > 0.0
    assert worker_seconds(mesher) >= sum(t.worker for t in found) > 0.0


def test_exponent_of_a_power_law() -> None:
    """Costs that grow as n^1.5 have the exponent 1.5 at every stage."""
    made = [Cost(n, *[1e-6 * n**1.5] * len(STAGES)) for n in (1_000, 4_000, 20_000)]
    assert [exponent(made, stage) for stage in STAGES] == pytest.approx([1.5] * len(STAGES))


def test_cost_of_a_small_mesh_has_every_stage() -> None:
    found = cost(300)
    assert 1_000 < found.unknowns < 4_000
    assert min(found.assembly, found.factorisation, found.recovery) > 0.0
