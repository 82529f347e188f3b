"""Factorisation in our setting beside scipy's default, on the same stiffness matrix.

Run with `python -m pytest tests/benchmarks --benchmark-enable`.
"""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from pytest_benchmark.fixture import BenchmarkFixture
from scipy import sparse
from scipy.sparse.linalg import splu

from screenapp.mechanics.assembly import assemble
from screenapp.mechanics.constraints import held_directions, reduce
from screenapp.mechanics.elasticity import constitutive_matrix
from screenapp.mechanics.linear_solve import factorise, superlu
from screenapp.model.part import FixedSupport
from tests.mechanics.structured import STEEL, rectangle, shaken


@pytest.fixture(scope="module")
def matrix(request: pytest.FixtureRequest) -> sparse.csc_array:
    """A square plate held on one side: 180 thousand unknowns when timed, 2 thousand else."""
    n = 172 if request.config.getoption("benchmark_enable") else 20
    case = rectangle(100.0, 100.0, n, n)
    mesh = shaken(case.mesh, case.shape, 0.2)
    part = replace(case.part, supports=(FixedSupport("s", "e4"),))
    system = assemble(mesh, "quad9", constitutive_matrix(STEEL, "plane stress"), 1.0)
    basis = reduce(held_directions(part, case.shape, mesh), mesh, system.index).basis
    return sparse.csc_array(basis.T @ system.stiffness @ basis)


@pytest.mark.parametrize("setting", ["ours", "superlu symmetric", "scipy default"])
def test_factorisation(benchmark: BenchmarkFixture, matrix: sparse.csc_array, setting: str) -> None:
    factor = {
        "ours": factorise,  # pypardiso where it is installed
        "superlu symmetric": superlu,
        "scipy default": lambda given: splu(given).solve,
    }[setting]
    solve = benchmark.pedantic(factor, args=(matrix,), rounds=3, iterations=1)
    wanted = np.ones((matrix.shape[0], 1))
    assert solve(matrix @ wanted) == pytest.approx(wanted, rel=1e-6)
