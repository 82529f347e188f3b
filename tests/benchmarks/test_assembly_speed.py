"""Assembly of the 9-node quad's stiffness, ours beside scikit-fem's on the same mesh.

Run with `python -m pytest tests/benchmarks --benchmark-enable`; without the switch each runs
once on a small mesh, to show that it still works.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass

import numpy as np
import pytest
from pytest_benchmark.fixture import BenchmarkFixture
from scipy import sparse
from skfem import Basis, BilinearForm, ElementQuad2, ElementVector, MeshQuad, MeshQuad2
from skfem.helpers import ddot, sym_grad, trace

from screenapp.mechanics.assembly import assemble
from screenapp.mechanics.elasticity import constitutive_matrix
from screenapp.mechanics.quadrature import gauss_square
from screenapp.model.mesh import Mesh
from tests.mechanics.structured import STEEL, rectangle, shaken


@dataclass(frozen=True)
class Size:
    """Mesh of the benchmark and the number of displacements that both must come to."""

    mesh: Mesh
    theirs: MeshQuad
    curved: MeshQuad2


def size_of(n: int) -> Size:
    """A square plate of n x n shaken quads."""
    case = rectangle(100.0, 100.0, n, n)
    mesh = shaken(case.mesh, case.shape, 0.2)
    corners, inverse = np.unique(mesh.quads[:, :4], return_inverse=True)
    theirs = MeshQuad(mesh.nodes[corners].T.copy(), inverse.reshape(-1, 4).T.copy())
    return Size(mesh, theirs, MeshQuad2.from_mesh(theirs))


def their_assembly(size: Size, mapping: str) -> Callable[[], sparse.csr_matrix]:
    """Their 9-node element with its centre kept, on straight quads or with the mapping we use."""
    points, weights = gauss_square(3)
    rule = (0.5 * (points.T + 1.0), weights / 4.0)
    mesh = size.theirs if mapping == "bilinear" else size.curved
    e, nu = STEEL.youngs_modulus, STEEL.poissons_ratio
    mu = e / (2 * (1 + nu))
    lam = e * nu / (1 - nu**2)

    @BilinearForm
    def stiffness(u, v, _):  # type: ignore[no-untyped-def]
        strain, virtual = sym_grad(u), sym_grad(v)
        return 2 * mu * ddot(strain, virtual) + lam * trace(strain) * trace(virtual)

    def both() -> sparse.csr_matrix:
        return stiffness.assemble(Basis(mesh, ElementVector(ElementQuad2()), quadrature=rule))

    return both


@pytest.fixture(scope="module")
def size(request: pytest.FixtureRequest) -> Size:
    """180 thousand unknowns when timed, 3 thousand else."""
    return size_of(172 if request.config.getoption("benchmark_enable") else 20)


def test_ours(benchmark: BenchmarkFixture, size: Size) -> None:
    elastic = constitutive_matrix(STEEL, "plane stress")
    system = benchmark(assemble, size.mesh, "quad9", elastic, 1.0)
    assert system.stiffness.shape[0] == 2 * (size.mesh.n_nodes - size.mesh.n_elements)


@pytest.mark.parametrize("mapping", ["bilinear", "nine-node"])
def test_scikit_fem(benchmark: BenchmarkFixture, size: Size, mapping: str) -> None:
    """The same mesh by an independent library."""
    matrix = benchmark.pedantic(their_assembly(size, mapping), rounds=3, iterations=1)
    assert matrix.shape[0] == 2 * size.mesh.n_nodes
