"""Twenty cases and combinations beside one: a factorisation serves them all.

Run with `python -m pytest tests/benchmarks --benchmark-enable`.
"""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from pytest_benchmark.fixture import BenchmarkFixture

from screenapp.mechanics.solve import solve
from screenapp.model.part import Case, Combination, FixedSupport, ForceLoad, Part, Term
from tests.benchmarks.clocks import processor_seconds
from tests.mechanics.structured import Structured, rectangle, shaken


def with_cases(part: Part, cases: int, combinations: int) -> Part:
    """So many cases, each pulling another way, and combinations of the first two."""
    angles = np.linspace(0.0, np.pi, cases, endpoint=False)
    return replace(
        part,
        supports=(FixedSupport("s1", "e4"),),
        cases=tuple(
            Case(f"k{i}", f"case {i}", (ForceLoad(f"l{i}", "e2", np.cos(a), np.sin(a)),))
            for i, a in enumerate(angles)
        ),
        combinations=tuple(
            Combination(f"m{i}", f"both {i}", (Term("k0", 1.0 + i), Term("k1", 0.5)))
            for i in range(combinations)
        ),
    )


@pytest.fixture
def plate(request: pytest.FixtureRequest) -> Structured:
    """80 thousand unknowns when timed, 2 thousand else."""
    n = 100 if request.config.getoption("benchmark_enable") else 16
    case = rectangle(100.0, 100.0, n, n)
    return replace(case, mesh=shaken(case.mesh, case.shape, 0.2))


def test_twenty_cases_beside_one(benchmark: BenchmarkFixture, plate: Structured) -> None:
    one = with_cases(plate.part, 1, 0)
    twenty = with_cases(plate.part, 10, 10)
    alone = processor_seconds(lambda: solve(one, plate.shape, plate.mesh), 3)
    together = processor_seconds(lambda: solve(twenty, plate.shape, plate.mesh), 3)
    benchmark.extra_info["ratio to one case"] = together / alone
    found = benchmark(lambda: solve(twenty, plate.shape, plate.mesh))
    assert found.displacements.shape[0] == 20
    u = found.displacements
    assert u[11] == pytest.approx(2.0 * u[0] + 0.5 * u[1], abs=1e-9 * float(np.abs(u).max()))
