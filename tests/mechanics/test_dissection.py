"""The order of elimination from the mesh: whole, sparing, and without effect on the answer."""

from __future__ import annotations

from dataclasses import replace
from typing import get_args

import numpy as np
import pytest
from scipy import sparse
from scipy.sparse.linalg import splu

from screenapp.mechanics.assembly import System, assemble
from screenapp.mechanics.constraints import held_directions, reduce
from screenapp.mechanics.dissection import elimination_order
from screenapp.mechanics.elasticity import constitutive_matrix
from screenapp.mechanics.linear_solve import superlu
from screenapp.model.part import ElementName, FixedSupport
from tests.mechanics.structured import STEEL, Structured, full_ring, rectangle, shaken


def held_system(case: Structured, on: str, element: ElementName) -> tuple[System, sparse.csc_array]:
    """A part held on one feature: the system, and what brings the free unknowns into it."""
    part = replace(case.part, supports=(FixedSupport("s", on),))
    mesh = shaken(case.mesh, case.shape, 0.2)
    system = assemble(mesh, element, constitutive_matrix(STEEL, "plane stress"), 1.0)
    basis = reduce(held_directions(part, case.shape, mesh), mesh, system.index).basis
    return system, sparse.csc_array(basis)


def order_of(system: System, basis: sparse.csc_array) -> np.ndarray:
    node = basis.indices[basis.indptr[:-1]] // 2
    return elimination_order(system.element_nodes, system.mesh.nodes[system.carried], node)


def fill(matrix: sparse.csc_array, setting: str) -> int:
    """Entries of the factor."""
    return int(
        splu(
            matrix,
            permc_spec=setting,
            diag_pivot_thresh=0.0,
            options={"SymmetricMode": True},
        ).L.nnz
    )


@pytest.mark.parametrize("element", get_args(ElementName))
@pytest.mark.parametrize("n", [1, 2, 7])
def test_every_unknown_has_its_turn(element: ElementName, n: int) -> None:
    system, basis = held_system(rectangle(30.0, 20.0, n, n), "e4", element)
    order = order_of(system, basis)
    assert np.array_equal(np.sort(order), np.arange(basis.shape[1]))


@pytest.mark.parametrize(
    ("case", "on"),
    [(rectangle(100.0, 60.0, 50, 30), "e4"), (full_ring(20.0, 40.0, 96, 16), "h1")],
    ids=["plate", "ring"],
)
def test_the_factor_is_no_fuller_than_by_minimum_degree(case: Structured, on: str) -> None:
    """And far less full than in the mesh's own order."""
    system, basis = held_system(case, on, "quad9")
    matrix = sparse.csc_array(basis.T @ system.stiffness @ basis)
    order = order_of(system, basis)
    ours = fill(sparse.csc_array(matrix[order][:, order]), "NATURAL")
    assert ours < 1.05 * fill(matrix, "MMD_AT_PLUS_A")
    assert ours < 0.5 * fill(matrix, "NATURAL")


def test_the_answer_does_not_depend_on_the_order() -> None:
    system, basis = held_system(rectangle(100.0, 60.0, 20, 12), "e4", "quad9")
    matrix = sparse.csc_array(basis.T @ system.stiffness @ basis)
    right = np.random.default_rng(0).standard_normal((matrix.shape[0], 3))
    plain = superlu(matrix)(right)
    assert superlu(matrix, order_of(system, basis))(right) == pytest.approx(
        plain, rel=1e-8, abs=1e-10 * float(np.abs(plain).max())
    )


def test_the_last_cut_divides_the_mesh() -> None:
    """Without the last nodes of the order, the mesh of a plate falls into two parts."""
    system, basis = held_system(rectangle(100.0, 60.0, 20, 12), "e4", "quad4")
    matrix = sparse.csc_array(basis.T @ system.stiffness @ basis)
    first = order_of(system, basis)[: -2 * 13]  # thirteen nodes across the middle
    count, label = sparse.csgraph.connected_components(matrix[first][:, first])
    assert count == 2
    assert np.bincount(label).min() > 0.35 * len(first)
