"""The energy error against the true one, and the pointwise jump."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest

from screenapp.mechanics import shape_functions
from screenapp.mechanics.elasticity import constitutive_matrix
from screenapp.mechanics.energy_error import energy_error, pointwise_jump
from screenapp.mechanics.quadrature import gauss_square
from screenapp.mechanics.recovery import (
    averaged_stress,
    extrapolated_stress,
    recover,
    with_edges,
)
from screenapp.mechanics.solve import solve
from screenapp.mechanics.strain_displacement import element_geometry, element_strains
from screenapp.model.part import (
    Case,
    ElementName,
    FixedSupport,
    ForceLoad,
    MeshWishes,
    PressureLoad,
    RollerSupport,
)
from screenapp.model.solution import Solution
from tests.mechanics.structured import STEEL, Structured, rectangle, ring_sector, shaken

HOOKE = constitutive_matrix(STEEL, "plane stress")


def pressed_ring(n: int, element: ElementName) -> tuple[Structured, Solution, np.ndarray]:
    """A quarter of Lamé's ring (20, 40) under 50 MPa inside, distorted; its energy error."""
    base = ring_sector(20.0, 40.0, 90.0, 2 * n, n)
    case = replace(base, mesh=shaken(base.mesh, base.shape, 0.15))
    part = replace(
        case.part,
        mesh=MeshWishes(element=element),
        supports=(RollerSupport("s1", "e1"), RollerSupport("s3", "e3")),
        cases=(Case("k", "pressed", (PressureLoad("p", "e4", 50.0),)),),
    )
    solution = solve(part, case.shape, case.mesh)
    return case, solution, recover(part, case.shape, case.mesh, solution).energy_error


def true_error(case: Structured, solution: Solution) -> float:
    """Energy of the difference to Lamé's stresses (derived), relative to the whole."""
    points, weights = gauss_square(4)
    mesh = case.mesh
    own = element_strains(mesh, solution, points)[0] @ HOOKE
    n = 4 if solution.element.startswith("quad4") else 9
    xy = shape_functions.values(n, points) @ mesh.nodes[mesh.quads[:, :n]]
    r2 = (xy**2).sum(axis=-1)
    c2, s2, cs = xy[..., 0] ** 2 / r2, xy[..., 1] ** 2 / r2, xy[..., 0] * xy[..., 1] / r2
    a = 50.0 * 20.0**2 / (40.0**2 - 20.0**2)
    radial, hoop = a * (1 - 40.0**2 / r2), a * (1 + 40.0**2 / r2)
    exact = np.stack(
        [radial * c2 + hoop * s2, radial * s2 + hoop * c2, (radial - hoop) * cs], axis=-1
    )
    volume = element_geometry(mesh, solution, points) * weights
    compliance = np.linalg.inv(HOOKE)

    def energy(stress: np.ndarray) -> float:
        return float((((stress @ compliance) * stress).sum(axis=-1) * volume).sum())

    return float(np.sqrt(energy(own - exact) / energy(exact)))


@pytest.mark.parametrize("n", [4, 8])
@pytest.mark.parametrize(
    ("element", "low", "high"),
    [("quad9", 0.8, 1.25), ("quad8", 0.8, 1.25), ("quad4", 0.8, 1.25)],
)
def test_estimate_against_the_true_error(
    element: ElementName, low: float, high: float, n: int
) -> None:
    """Effectivity: within a quarter of 1, as an estimate that steers sizes has to be."""
    case, solution, error = pressed_ring(n, element)
    estimate = float(np.sqrt((error**2).sum()))
    assert low < estimate / true_error(case, solution) < high


def test_a_case_without_stress_has_no_error() -> None:
    case = rectangle(60.0, 20.0, 3, 2)
    part = replace(
        case.part,
        supports=(FixedSupport("s", "e4"),),
        cases=(Case("k", "none"), Case("j", "pull", (ForceLoad("f", "e2", 0.0, 9.0),))),
    )
    field = recover(part, case.shape, case.mesh, solve(part, case.shape, case.mesh))
    assert (field.energy_error[0] == 0.0).all()
    assert 0.0 < float((field.energy_error[1] ** 2).sum()) < 1.0


def test_chunks_do_not_show(monkeypatch: pytest.MonkeyPatch) -> None:
    case, solution, _ = pressed_ring(4, "quad9")
    own = extrapolated_stress(case.mesh, solution, HOOKE)
    nodal = averaged_stress(case.mesh, own)
    side = nodal[:, case.mesh.side_nodes]
    at_once = energy_error(case.mesh, solution, HOOKE, nodal, side)
    monkeypatch.setattr("screenapp.mechanics.energy_error.CHUNK", 7)
    in_bits = energy_error(case.mesh, solution, HOOKE, nodal, side)
    np.testing.assert_allclose(in_bits, at_once, rtol=1e-12)


def test_jump_is_the_largest_gap_of_the_elements_at_a_node() -> None:
    """One element disturbed by 8 MPa along x: its nodes see the gap, no others do."""
    mesh = rectangle(60.0, 20.0, 3, 2).mesh
    own = np.zeros((1, mesh.n_elements, 9, 3))
    own[..., 0] = 20.0
    nodal = averaged_stress(mesh, own)
    side = nodal[:, mesh.side_nodes]
    assert np.abs(pointwise_jump(mesh, own, nodal, side)).max() < 1e-12
    own[0, 4, :, 0] += 8.0
    jump = pointwise_jump(mesh, own, with_edges(mesh, nodal, side), side)[0]
    touched = np.isin(np.arange(mesh.n_nodes), mesh.quads[4])
    np.testing.assert_allclose(jump, np.where(touched, 8.0, 0.0), atol=1e-12)
