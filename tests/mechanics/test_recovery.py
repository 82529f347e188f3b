"""The averaged field inside and its meeting with the edges."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest

from screenapp.mechanics.elasticity import constitutive_matrix
from screenapp.mechanics.energy_error import element_nodal
from screenapp.mechanics.recovery import averaged_stress, extrapolated_stress, recover
from screenapp.mechanics.solve import solve
from screenapp.model.part import Case, ElementName, FixedSupport, ForceLoad
from tests.mechanics.stress_fields import (
    Floats,
    kirsch_displacement,
    kirsch_stress,
    solution_of,
)
from tests.mechanics.structured import STEEL, down_and_along, full_ring, rectangle, shaken

HOOKE = constitutive_matrix(STEEL, "plane stress")


def test_linear_stress_is_carried_to_the_nodes_exactly() -> None:
    """σx = c (y - h/2): linear, so 2 x 2 points and a bilinear extrapolation lose nothing on
    parallelograms."""
    mesh = rectangle(60.0, 20.0, 6, 3).mesh
    e, nu = STEEL.youngs_modulus, STEEL.poissons_ratio

    def displacement(p: Floats) -> Floats:
        x, y = p[:, 0], p[:, 1] - 10.0
        return 3.0 / e * np.stack([x * y, -0.5 * (x * x + nu * y * y)], axis=1)

    own = extrapolated_stress(mesh, solution_of(mesh, displacement), HOOKE)
    wanted = np.zeros((mesh.n_nodes, 3))
    wanted[:, 0] = 3.0 * (mesh.nodes[:, 1] - 10.0)
    np.testing.assert_allclose(own[0], wanted[mesh.quads], atol=1e-9)
    np.testing.assert_allclose(averaged_stress(mesh, own)[0], wanted, atol=1e-9)


@pytest.mark.parametrize(("element", "order"), [("quad4", 0.9), ("quad9", 1.9)])
def test_order_of_convergence_inside(element: ElementName, order: float) -> None:
    """The averaged field gains at least the order that the element's own stress has (p)."""
    errors = []
    for n in (16, 32, 64):
        mesh = full_ring(1.0, 3.0, n, n // 4).mesh
        solution = solution_of(
            mesh,
            lambda p: kirsch_displacement(p, STEEL.youngs_modulus, STEEL.poissons_ratio),
            element,
        )
        found = averaged_stress(mesh, extrapolated_stress(mesh, solution, HOOKE))[0]
        corners = np.unique(mesh.quads[:, :4])
        inner = corners[(np.hypot(*mesh.nodes[corners].T) > 1.4)]
        inner = inner[np.hypot(*mesh.nodes[inner].T) < 2.6]
        errors.append(np.abs(found[inner] - kirsch_stress(mesh.nodes[inner])).max())
    assert np.log2(np.array(errors[:-1]) / errors[1:]).min() > order


@pytest.mark.parametrize("element", ["quad4", "quad4-incompatible", "quad8", "quad9"])
def test_nodes_of_the_rim_take_the_mean_of_their_sides(element: ElementName) -> None:
    base = rectangle(60.0, 20.0, 6, 3)
    case = replace(base, mesh=shaken(base.mesh, base.shape, 0.2))
    part = down_and_along(case, element)
    mesh = case.mesh
    field = recover(part, case.shape, mesh, solve(part, case.shape, mesh))
    assert field.nodal.shape == (2, mesh.n_nodes, 3)
    assert field.side.shape == (2, len(mesh.sides), 3, 3)
    assert field.energy_error.shape == (2, mesh.n_elements)
    for node in np.unique(mesh.side_nodes):
        ends = np.argwhere(mesh.side_nodes == node)
        mean = np.mean([field.side[:, s, k] for s, k in ends], axis=0)
        np.testing.assert_allclose(field.nodal[:, node], mean, atol=1e-9)
    # each element at the rim sees its own side
    own = element_nodal(mesh, field.nodal, field.side)
    held_corner = mesh.corner_nodes["c4"]
    for s, k in np.argwhere(mesh.side_nodes == held_corner):
        element_at, local = mesh.sides[s]
        places = [local, 4 + local, (local + 1) % 4]
        both = [field.side[:, t, j] for t, j in np.argwhere(mesh.side_nodes == held_corner)
                if mesh.sides[t][0] == element_at]  # fmt: skip
        np.testing.assert_allclose(own[:, element_at, places[k]], np.mean(both, axis=0), atol=1e-9)


def test_superposition() -> None:
    """Recovery is linear: the sum of two cases is recovered as the sum of their fields."""
    case = rectangle(60.0, 20.0, 6, 3)
    a, b = ForceLoad("f", "e2", 0.0, -100.0), ForceLoad("g", "e3", 300.0, 50.0)
    part = replace(
        case.part,
        supports=(FixedSupport("s", "e4"),),
        cases=(Case("k1", "a", (a,)), Case("k2", "b", (b,)), Case("k3", "both", (a, b))),
    )
    field = recover(part, case.shape, case.mesh, solve(part, case.shape, case.mesh))
    scale = np.abs(field.side).max()
    np.testing.assert_allclose(field.nodal[0] + field.nodal[1], field.nodal[2], atol=1e-9 * scale)
    np.testing.assert_allclose(field.side[0] + field.side[1], field.side[2], atol=1e-9 * scale)
