"""Polynomials fitted to the stress round the inner corner nodes."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest

from screenapp.mechanics import recovery
from screenapp.mechanics.elasticity import constitutive_matrix
from screenapp.mechanics.patch_recovery import recover_inside
from screenapp.mechanics.recovery import averaged_stress, extrapolated_stress, recover
from screenapp.mechanics.solve import solve
from screenapp.model.part import ElementName
from tests.mechanics.stress_fields import (
    Floats,
    kirsch_displacement,
    kirsch_stress,
    solution_of,
)
from tests.mechanics.structured import STEEL, down_and_along, full_ring, rectangle, shaken

HOOKE = constitutive_matrix(STEEL, "plane stress")
ELEMENTS: tuple[ElementName, ...] = ("quad4", "quad4-incompatible", "quad8", "quad9")


def bent(p: Floats) -> Floats:
    """Displacements of degree two: strains and stresses are linear."""
    x, y = p[:, 0] / 60.0, p[:, 1] / 60.0
    return np.stack([x * x + 0.5 * x * y - 0.3 * y * y, 0.2 * x * x - x * y + y * y], axis=1)


def bent_stress(p: Floats) -> Floats:
    x, y = p[:, 0] / 60.0, p[:, 1] / 60.0
    strain = np.stack([2 * x + 0.5 * y, -x + 2 * y, 0.5 * x - 0.6 * y + 0.4 * x - y], axis=1)
    return np.asarray(strain / 60.0 @ HOOKE)


def twisted(p: Floats) -> Floats:
    """Displacements of degree three: strains and stresses are quadratic."""
    x, y = p[:, 0] / 60.0, p[:, 1] / 60.0
    return np.stack([x**3 - 2 * x * y * y + y**3, 0.5 * x**3 + x * x * y - 0.7 * y**3], axis=1)


def twisted_stress(p: Floats) -> Floats:
    x, y = p[:, 0] / 60.0, p[:, 1] / 60.0
    strain = np.stack(
        [
            3 * x * x - 2 * y * y,
            x * x - 2.1 * y * y,
            -4 * x * y + 3 * y * y + 1.5 * x * x + 2 * x * y,
        ],
        axis=1,
    )
    return np.asarray(strain / 60.0 @ HOOKE)


@pytest.mark.parametrize("element", ELEMENTS)
def test_linear_stress_is_found_exactly_by_every_element(element: ElementName) -> None:
    mesh = rectangle(60.0, 24.0, 6, 4).mesh
    found, reached = recover_inside(mesh, solution_of(mesh, bent, element), HOOKE)
    wanted = bent_stress(mesh.nodes[reached])
    np.testing.assert_allclose(found[0, reached], wanted, atol=1e-9 * np.abs(wanted).max())


@pytest.mark.parametrize("element", ["quad8", "quad9"])
def test_quadratic_stress_is_found_exactly(element: ElementName) -> None:
    """Two by two points are exact for it on rectangles, and a parabola carries it to the nodes."""
    mesh = rectangle(60.0, 24.0, 6, 4).mesh
    solution = solution_of(mesh, twisted, element)
    found, reached = recover_inside(mesh, solution, HOOKE)
    wanted = twisted_stress(mesh.nodes[reached])
    scale = np.abs(wanted).max()
    np.testing.assert_allclose(found[0, reached], wanted, atol=1e-9 * scale)
    averaged = averaged_stress(mesh, extrapolated_stress(mesh, solution, HOOKE))
    assert np.abs(averaged[0, reached] - wanted).max() > 1e-3 * scale  # the average does not do it


def test_linear_stress_is_found_exactly_on_distorted_quads() -> None:
    """The nine-node quad holds every parabola also where it is distorted, and so does its patch."""
    base = rectangle(60.0, 24.0, 6, 4)
    mesh = shaken(base.mesh, base.shape, 0.2)
    found, reached = recover_inside(mesh, solution_of(mesh, bent, "quad9"), HOOKE)
    wanted = bent_stress(mesh.nodes[reached])
    np.testing.assert_allclose(found[0, reached], wanted, atol=1e-9 * np.abs(wanted).max())


def test_where_the_patches_reach() -> None:
    """Corner nodes of the boundary, and what only they would serve, are left to the average."""
    mesh = rectangle(60.0, 24.0, 6, 4).mesh
    _, reached = recover_inside(mesh, solution_of(mesh, bent), HOOKE)
    corners = np.unique(mesh.quads[:, :4])
    rim = np.unique(mesh.side_nodes[:, [0, 2]])
    assert reached[np.setdiff1d(corners, rim)].all()
    assert not reached[rim].any()
    assert reached[mesh.quads[:, 8]].sum() == mesh.n_elements  # here each has an inner corner
    strip = rectangle(60.0, 4.0, 6, 1).mesh  # a wall one element wide has no inner corner
    found, reached = recover_inside(strip, solution_of(strip, bent), HOOKE)
    assert not reached.any()
    assert not found.any()


@pytest.mark.parametrize(("element", "order"), [("quad4", 1.7), ("quad8", 2.6), ("quad9", 2.6)])
def test_order_of_convergence(element: ElementName, order: float) -> None:
    """One order more than the element's own stress has; quadratic ones beat the average by far."""
    errors, averages = [], []
    for n in (16, 32, 64):
        mesh = full_ring(1.0, 3.0, n, n // 4).mesh
        solution = solution_of(
            mesh,
            lambda p: kirsch_displacement(p, STEEL.youngs_modulus, STEEL.poissons_ratio),
            element,
        )
        found, reached = recover_inside(mesh, solution, HOOKE)
        inner = np.unique(mesh.quads[:, :4])
        inner = inner[reached[inner]]
        inner = inner[(np.hypot(*mesh.nodes[inner].T) > 1.4)]
        inner = inner[np.hypot(*mesh.nodes[inner].T) < 2.6]
        exact = kirsch_stress(mesh.nodes[inner])
        average = averaged_stress(mesh, extrapolated_stress(mesh, solution, HOOKE))[0]
        errors.append(np.abs(found[0, inner] - exact).max())
        averages.append(np.abs(average[inner] - exact).max())
    assert np.log2(np.array(errors[:-1]) / errors[1:]).min() > order
    if element != "quad4":
        assert errors[-1] < 0.5 * averages[-1]


@pytest.mark.parametrize("element", ELEMENTS)
def test_the_boundary_keeps_its_edge_recovery(
    element: ElementName, monkeypatch: pytest.MonkeyPatch
) -> None:
    """With and without patches, the same along the sides; inside, the patches speak."""
    base = rectangle(60.0, 24.0, 8, 4)
    case = replace(base, mesh=shaken(base.mesh, base.shape, 0.15))
    part = down_and_along(case, element)
    mesh = case.mesh
    solution = solve(part, case.shape, mesh)
    fitted, reached = recover_inside(mesh, solution, HOOKE)
    with_patches = recover(part, case.shape, mesh, solution)
    monkeypatch.setattr(
        recovery, "recover_inside", lambda *_: (np.zeros_like(fitted), np.zeros_like(reached))
    )
    without = recover(part, case.shape, mesh, solution)
    np.testing.assert_array_equal(with_patches.side, without.side)
    rim = np.unique(mesh.side_nodes)
    np.testing.assert_array_equal(with_patches.nodal[:, rim], without.nodal[:, rim])
    inner = np.setdiff1d(np.flatnonzero(reached), rim)
    np.testing.assert_array_equal(with_patches.nodal[:, inner], fitted[:, inner])
    assert not np.allclose(with_patches.nodal[:, inner], without.nodal[:, inner], rtol=1e-6)
