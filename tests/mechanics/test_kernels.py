"""Element stiffness: rigid motions are free, condensing changes nothing, patches pass."""

from __future__ import annotations

from typing import get_args

import numpy as np
import pytest

from screenapp.mechanics import shape_functions
from screenapp.mechanics.elasticity import constitutive_matrix
from screenapp.mechanics.kernels import element_matrices
from screenapp.mechanics.quadrature import gauss_square
from screenapp.model.errors import SolvingError
from screenapp.model.part import ElementName
from tests.mechanics.structured import STEEL, Floats, ring_sector, shaken

ELEMENTS: tuple[ElementName, ...] = get_args(ElementName)
ELASTIC = constitutive_matrix(STEEL, "plane stress")


def _elements() -> Floats:
    """A few distorted elements, some with a curved side, (n, 9, 2)."""
    case = ring_sector(10.0, 25.0, 80.0, 5, 3)
    mesh = shaken(case.mesh, case.shape, 0.2)
    return mesh.nodes[mesh.quads]


@pytest.mark.parametrize("element", ELEMENTS)
def test_stiffness_is_symmetric_with_three_free_motions(element: ElementName) -> None:
    nodes = _elements()
    made = element_matrices(element, nodes, np.full(len(nodes), 2.0), ELASTIC).stiffness
    size = np.abs(made).max()
    assert np.abs(made - made.transpose(0, 2, 1)).max() < 1e-12 * size
    values = np.linalg.eigvalsh(made)
    assert np.abs(values[:, :3]).max() < 1e-11 * size
    assert values[:, 3].min() > 1e-4 * size
    m = made.shape[1] // 2
    x, y = nodes[:, :m, 0], nodes[:, :m, 1]
    for motion in ((np.ones_like(x), 0 * x), (0 * x, np.ones_like(x)), (-y, x)):
        force = np.einsum("eij,ej->ei", made, np.concatenate(motion, axis=1))
        assert np.abs(force).max() < 1e-10 * size


@pytest.mark.parametrize("element", ["quad4", "quad8", "quad9"])
def test_blocks_agree_with_the_textbook_form(element: ElementName) -> None:
    """∫ BᵀDB t dA written out, the centre node condensed by a Schur complement."""
    nodes = _elements()[:2]
    n, order = {"quad4": (4, 2), "quad8": (8, 3), "quad9": (9, 3)}[element]
    points, weights = gauss_square(order)
    for corners in nodes:
        full = np.zeros((2 * n, 2 * n))
        for local, weight in zip(shape_functions.derivatives(n, points), weights, strict=True):
            jacobian = local.T @ corners[:n]
            slope = np.linalg.solve(jacobian, local.T)
            b = np.zeros((3, 2 * n))
            b[0, :n] = b[2, n:] = slope[0]
            b[1, n:] = b[2, :n] = slope[1]
            full += 3.0 * weight * np.linalg.det(jacobian) * b.T @ ELASTIC @ b
        if n == 9:
            keep, drop = np.delete(np.arange(18), [8, 17]), [8, 17]
            inner = np.linalg.solve(full[np.ix_(drop, drop)], full[np.ix_(drop, keep)])
            full = full[np.ix_(keep, keep)] - full[np.ix_(keep, drop)] @ inner
        made = element_matrices(element, corners[None], np.array([3.0]), ELASTIC).stiffness[0]
        assert np.abs(made - full).max() < 1e-12 * np.abs(full).max()


def test_each_element_has_its_own_thickness() -> None:
    nodes = _elements()[:3]
    thickness = np.array([1.0, 2.0, 0.5])
    made = element_matrices("quad9", nodes, thickness, ELASTIC).stiffness
    unit = element_matrices("quad9", nodes, np.ones(3), ELASTIC).stiffness
    assert made == pytest.approx(unit * thickness[:, None, None])


def test_incompatible_modes_make_a_rectangle_exact_in_pure_bending() -> None:
    """The bar's own end couple, not the plain quad's much larger one (here 13 times)."""
    half_long, half_high = 4.0, 0.8
    corners = np.array([[-1, -1], [1, -1], [1, 1], [-1, 1]]) * [half_long, half_high]
    made = element_matrices("quad4-incompatible", corners[None], np.ones(1), ELASTIC)
    x = np.array([1.0, -1.0, 1.0, -1.0])  # u = ξη at the corners
    force = made.stiffness[0] @ np.concatenate([x, np.zeros(4)])
    couple = (force[2] - force[1]) * half_high
    turn = 2.0 / half_high  # both ends by 1 / half_high
    inertia = (2 * half_high) ** 3 / 12.0
    assert couple == pytest.approx(STEEL.youngs_modulus * inertia * turn / (2 * half_long))


@pytest.mark.parametrize("element", ELEMENTS)
def test_a_folded_element_is_refused_with_its_place(element: ElementName) -> None:
    nodes = np.tile(np.array([7.0, 3.0]) + shape_functions.LOCAL_NODES, (3, 1, 1))
    nodes[1] = nodes[1][:, ::-1]  # x and y exchanged: it runs clockwise
    with pytest.raises(SolvingError, match="folded element near") as caught:
        element_matrices(element, nodes, np.ones(3), ELASTIC)
    assert "(3, 7)" in caught.value.cause
