"""Strains from an element's own displacements."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest

from screenapp.mechanics import shape_functions
from screenapp.mechanics.solve import solve
from screenapp.mechanics.strain_displacement import element_strains, strains_at
from screenapp.model.mesh import NODES_OF_ELEMENT
from screenapp.model.part import Case, ElementName, MeshWishes, PointLoad, RollerSupport
from screenapp.model.solution import Solution
from tests.mechanics.structured import full_ring, rectangle, shaken

ELEMENTS: tuple[ElementName, ...] = ("quad4", "quad4-incompatible", "quad8", "quad9")


@pytest.mark.parametrize("element", ELEMENTS)
def test_strains_are_the_slopes_of_the_displacement_that_the_element_draws(
    element: ElementName,
) -> None:
    """Against central differences of position and displacement over the local coordinates."""
    base = full_ring(10.0, 30.0, 12, 3)
    mesh = shaken(base.mesh, base.shape, 0.2)
    rng = np.random.default_rng(5)
    u = rng.normal(size=(1, mesh.n_nodes, 2))
    solution = Solution(element, u, ((),), (), 0.0, 0)
    points = rng.uniform(-0.9, 0.9, (5, 2))
    found = element_strains(mesh, solution, points)[0]
    n = NODES_OF_ELEMENT[element]
    quads = mesh.quads[:, :n]

    def slopes(nodal: np.ndarray) -> np.ndarray:
        step = 1e-5
        both = []
        for axis in np.eye(2):
            more = shape_functions.values(n, points + step * axis)
            less = shape_functions.values(n, points - step * axis)
            both.append(np.einsum("pn,eni->epi", (more - less) / (2 * step), nodal))
        return np.stack(both, axis=-1)

    gradient = slopes(u[0][quads]) @ np.linalg.inv(slopes(mesh.nodes[quads]))
    wanted = np.stack(
        [gradient[..., 0, 0], gradient[..., 1, 1], gradient[..., 0, 1] + gradient[..., 1, 0]], -1
    )
    np.testing.assert_allclose(found, wanted, atol=1e-7 * np.abs(wanted).max())


def test_incompatible_modes_take_part() -> None:
    """Pure bending of one rectangle: the modes give what the bilinear quad cannot, no shear."""
    plate = rectangle(20.0, 4.0, 1, 1)
    part = replace(
        plate.part,
        mesh=MeshWishes(element="quad4-incompatible"),
        supports=(RollerSupport("s", "e4", 0.0), RollerSupport("t", "c1", 90.0)),
        cases=(
            Case("k", "bent", (PointLoad("a", "c3", -30.0, 0.0), PointLoad("b", "c2", 30.0, 0.0))),
        ),
    )
    solution = solve(part, plate.shape, plate.mesh)
    points = np.array([[x, y] for x in (-0.8, 0.0, 0.7) for y in (-0.9, 0.5)])
    strains = element_strains(plate.mesh, solution, points)[0, 0]
    bending = 30.0 * 4.0 / (4.0**3 / 12.0) / 210_000.0  # strain per mm off the axis
    np.testing.assert_allclose(strains[:, 0], -2.0 * points[:, 1] * bending, atol=1e-12)
    np.testing.assert_allclose(strains[:, 1], 0.3 * 2.0 * points[:, 1] * bending, atol=1e-12)
    np.testing.assert_allclose(strains[:, 2], 0.0, atol=1e-12)


def test_points_of_their_own_agree_with_points_shared_by_all() -> None:
    mesh = full_ring(10.0, 30.0, 8, 2).mesh
    rng = np.random.default_rng(6)
    solution = Solution("quad9", rng.normal(size=(1, mesh.n_nodes, 2)), ((),), (), 0.0, 0)
    points = rng.uniform(-1.0, 1.0, (4, 2))
    shared = element_strains(mesh, solution, points)
    elements = np.array([3, 7, 0, 3])
    own = strains_at(mesh, solution, elements, points)
    np.testing.assert_allclose(own, shared[:, elements, np.arange(4)], atol=1e-12)


def test_chunks_do_not_show(monkeypatch: pytest.MonkeyPatch) -> None:
    base = full_ring(10.0, 30.0, 12, 3)
    rng = np.random.default_rng(7)
    solution = Solution("quad8", rng.normal(size=(1, base.mesh.n_nodes, 2)), ((),), (), 0.0, 0)
    points = np.array([[0.3, -0.2]])
    at_once = element_strains(base.mesh, solution, points)
    monkeypatch.setattr("screenapp.mechanics.strain_displacement.CHUNK", 5)
    np.testing.assert_allclose(element_strains(base.mesh, solution, points), at_once, atol=1e-14)
    some = element_strains(base.mesh, solution, points, np.array([30, 2]))
    np.testing.assert_allclose(some, at_once[:, [30, 2]], atol=1e-14)


def test_rigid_motion_strains_nothing() -> None:
    mesh = full_ring(10.0, 30.0, 8, 2).mesh
    turned = np.stack([5.0 - 0.01 * mesh.nodes[:, 1], 3.0 + 0.01 * mesh.nodes[:, 0]], axis=1)
    solution = Solution("quad9", turned[None], ((),), (), 0.0, 0)
    assert np.abs(element_strains(mesh, solution, np.zeros((1, 2)))).max() < 1e-14
