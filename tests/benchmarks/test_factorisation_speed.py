"""Factorisation in our setting beside scipy's default, on the same stiffness matrices.

Run with `python -m pytest tests/benchmarks --benchmark-enable`.
"""

from __future__ import annotations

from dataclasses import dataclass, replace
from functools import partial

import numpy as np
import pytest
from pytest_benchmark.fixture import BenchmarkFixture
from scipy import sparse
from scipy.sparse.linalg import splu

from screenapp.mechanics.assembly import System, assemble
from screenapp.mechanics.constraints import held_directions, reduce
from screenapp.mechanics.dissection import elimination_order
from screenapp.mechanics.elasticity import constitutive_matrix
from screenapp.mechanics.linear_solve import Solve, factorise, superlu
from screenapp.meshing.service import Mesher
from screenapp.meshing.sizing import uniform_sizes
from screenapp.model.mesh import Mesh
from screenapp.model.part import FixedSupport, Part
from screenapp.model.shape import Shape, shape_of
from tests.evidence.band_parts import random_part
from tests.mechanics.structured import STEEL, rectangle, shaken


@dataclass(frozen=True)
class Held:
    """The equations of a part that is held."""

    system: System
    basis: sparse.csc_array
    matrix: sparse.csc_array

    def ours(self) -> Solve:
        """In the order that comes from the mesh, order included (pypardiso where there is one)."""
        return factorise(self.matrix, self.order)

    def dissected(self) -> Solve:
        """The same by SuperLU in any case."""
        return superlu(self.matrix, self.order())

    def order(self) -> np.ndarray:
        """As `solve` works it out."""
        node = self.basis.indices[self.basis.indptr[:-1]] // 2
        carried = self.system.mesh.nodes[self.system.carried]
        return elimination_order(self.system.element_nodes, carried, node)


def held(part: Part, shape: Shape, mesh: Mesh) -> Held:
    """Assembled with 9-node quads."""
    system = assemble(mesh, "quad9", constitutive_matrix(STEEL, "plane stress"), 1.0)
    basis = sparse.csc_array(reduce(held_directions(part, shape, mesh), mesh, system.index).basis)
    return Held(system, basis, sparse.csc_array(basis.T @ system.stiffness @ basis))


def square_plate(n: int) -> Held:
    """n x n shaken quads, held on one side."""
    case = rectangle(100.0, 100.0, n, n)
    part = replace(case.part, supports=(FixedSupport("s", "e4"),))
    return held(part, case.shape, shaken(case.mesh, case.shape, 0.2))


def meshed_lug(n: int) -> Held:
    """A lug with about n quads of one size from the mesher."""
    part = random_part(2)
    shape = shape_of(part)
    with Mesher() as mesher:
        mesh = mesher.mesh(shape, uniform_sizes(shape, float(np.sqrt(shape.area / n))))
    return held(part, shape, mesh)


@pytest.fixture(scope="module", params=["square plate", "lug"])
def equations(request: pytest.FixtureRequest) -> Held:
    """180 thousand unknowns when timed, 2 thousand else."""
    large = request.config.getoption("benchmark_enable")
    if request.param == "lug":
        return meshed_lug(32_000 if large else 400)
    return square_plate(172 if large else 20)


@pytest.mark.parametrize(
    "setting", ["ours", "superlu, dissected", "superlu, minimum degree", "scipy default"]
)
def test_factorisation(benchmark: BenchmarkFixture, equations: Held, setting: str) -> None:
    matrix = equations.matrix
    factor = {
        "ours": equations.ours,
        "superlu, dissected": equations.dissected,
        "superlu, minimum degree": partial(superlu, matrix),
        "scipy default": lambda: splu(matrix).solve,
    }[setting]
    solve = benchmark.pedantic(factor, rounds=3, iterations=1)
    wanted = np.ones((matrix.shape[0], 1))
    assert solve(matrix @ wanted) == pytest.approx(wanted, rel=1e-6)
