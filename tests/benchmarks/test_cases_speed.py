"""Twenty cases and combinations beside one: a factorisation serves them all, and of cases that are
sums of others only the independent ones are solved.

Run with `python -m pytest tests/benchmarks --benchmark-enable`.
"""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from pytest_benchmark.fixture import BenchmarkFixture

from screenapp.mechanics.assembly import assemble
from screenapp.mechanics.constraints import held_directions
from screenapp.mechanics.element_walls import element_hooke, element_thickness
from screenapp.mechanics.linear_system import solve_system
from screenapp.mechanics.solve import solve
from screenapp.model.part import Case, Combination, FixedSupport, ForceLoad, Part, Term
from screenapp.model.solution import Solution
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


def test_twenty_independent_cases(benchmark: BenchmarkFixture, plate: Structured) -> None:
    """The worst that can be: no case is a sum of others."""
    part, mesh = with_cases(plate.part, 1, 0), plate.mesh
    pulled = np.unique(mesh.side_nodes[mesh.sides_on(plate.shape.pieces_of("e2"))])
    forces = np.zeros((20, mesh.n_nodes, 2))
    forces[:, pulled] = np.random.default_rng(1).normal(size=(20, len(pulled), 2))

    def solved(some: int) -> Solution:
        system = assemble(
            mesh, part.mesh.element, element_hooke(part, mesh), element_thickness(part, mesh)
        )
        return solve_system(system, held_directions(part, plate.shape, mesh), forces[:some])

    alone = processor_seconds(lambda: solved(1), 3)
    together = processor_seconds(lambda: solved(20), 3)
    benchmark.extra_info["ratio to one case"] = together / alone
    found = benchmark(lambda: solved(20))
    assert found.residual < 1e-9
    assert max(b.force for b in found.balance) < 1e-9
