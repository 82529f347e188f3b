"""Stress along the boundary against exact fields, and where its fits must stop."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest

from screenapp.mechanics.boundary_chains import boundary_chains
from screenapp.mechanics.constraints import held_sides
from screenapp.mechanics.edge_recovery import joined_sides
from screenapp.mechanics.elasticity import constitutive_matrix
from screenapp.mechanics.recovery import recover
from screenapp.mechanics.solve import solve
from screenapp.model.part import (
    Case,
    ElementName,
    FixedSupport,
    ForceLoad,
    GravityLoad,
    LineLoad,
    Load,
    Material,
    Part,
    PointLoad,
    PressureLoad,
    RollerSupport,
    ShearLoad,
    Support,
    Wall,
    WallState,
)
from screenapp.model.solution import StressField
from tests.mechanics.stress_fields import (
    Floats,
    edge_stress_of,
    kirsch_displacement,
    kirsch_stress,
    solution_of,
)
from tests.mechanics.structured import (
    STEEL,
    WALL,
    Structured,
    four_sided,
    full_ring,
    rectangle,
    ring_sector,
    shaken,
)

HOOKE = constitutive_matrix(STEEL, "plane stress")


def distorted(case: Structured, share: float = 0.25) -> Structured:
    return replace(case, mesh=shaken(case.mesh, case.shape, share))


def loaded(case: Structured, supports: tuple[Support, ...], *loads: Load) -> Part:
    return replace(case.part, supports=supports, cases=(Case("k1", "case", loads),))


def recovered(part: Part, case: Structured) -> StressField:
    return recover(part, case.shape, case.mesh, solve(part, case.shape, case.mesh))


def sides_of(case: Structured, feature: str) -> np.ndarray:
    return case.mesh.sides_on(case.shape.pieces_of(feature))


@pytest.mark.parametrize("element", ["quad4", "quad8", "quad9"])
def test_constant_stress_is_exact(element: ElementName) -> None:
    case = distorted(four_sided(((0, 0), (50, 5), (60, 40), (-5, 30)), 5, 4))
    gradient = np.array([[1e-3, 4e-4], [-2e-4, 6e-4]])
    strain = np.array([1e-3, 6e-4, 2e-4])

    def stress(points: Floats) -> Floats:
        return np.broadcast_to(HOOKE @ strain, (len(points), 3))

    solution = solution_of(case.mesh, lambda p: p @ gradient.T, element)
    found = edge_stress_of(case.shape, case.mesh, solution, stress, HOOKE)
    np.testing.assert_allclose(found, np.broadcast_to(HOOKE @ strain, found.shape), atol=1e-9)


def test_linear_stress_is_exact_on_straight_edges() -> None:
    """A bar bent by end moments: σx = c (y - h/2), carried exactly by the 9-node quad."""
    case = distorted(rectangle(60.0, 20.0, 6, 3), 0.2)
    c, e, nu = 3.0, STEEL.youngs_modulus, STEEL.poissons_ratio

    def displacement(p: Floats) -> Floats:
        x, y = p[:, 0], p[:, 1] - 10.0
        return c / e * np.stack([x * y, -0.5 * (x * x + nu * y * y)], axis=1)

    def stress(p: Floats) -> Floats:
        return np.stack([c * (p[:, 1] - 10.0), 0 * p[:, 0], 0 * p[:, 0]], axis=1)

    found = edge_stress_of(
        case.shape, case.mesh, solution_of(case.mesh, displacement), stress, HOOKE
    )
    wanted = stress(case.mesh.nodes[case.mesh.side_nodes].reshape(-1, 2)).reshape(found.shape)
    np.testing.assert_allclose(found, wanted, atol=1e-9)


@pytest.mark.parametrize(("element", "order"), [("quad9", 3.0), ("quad4", 1.7)])
def test_order_of_convergence_at_a_hole(element: ElementName, order: float) -> None:
    """Exact displacements at the nodes: only the recovery's own error is left.

    A parabola through four samples leaves h³ at least; two straight chords leave h².
    """
    errors = []
    for n in (24, 48, 96):
        case = full_ring(1.0, 1.5, n, 3)
        solution = solution_of(
            case.mesh,
            lambda p: kirsch_displacement(p, STEEL.youngs_modulus, STEEL.poissons_ratio),
            element,
        )
        found = edge_stress_of(case.shape, case.mesh, solution, kirsch_stress, HOOKE)
        points = case.mesh.nodes[case.mesh.side_nodes].reshape(-1, 2)
        errors.append(np.abs(found - kirsch_stress(points).reshape(found.shape)).max())
    assert np.log2(np.array(errors[:-1]) / errors[1:]).min() > order


@pytest.mark.parametrize("state", ["plane stress", "plane strain"])
def test_pressed_ring(state: WallState) -> None:
    """Lamé's ring under inner pressure, whole stress at the loaded rim (derived)."""
    a, b, p = 20.0, 40.0, 50.0
    case = ring_sector(a, b, 90.0, 16, 8, Wall(5.0, "", state))
    part = loaded(
        case, (RollerSupport("s1", "e1"), RollerSupport("s3", "e3")), PressureLoad("p", "e4", p)
    )
    sides = sides_of(case, "e4")
    stress = recovered(part, case).side[0, sides].reshape(-1, 3)
    points = case.mesh.nodes[case.mesh.side_nodes[sides]].reshape(-1, 2)
    c, s = (points / a).T
    hoop, radial = p * (a * a + b * b) / (b * b - a * a), -p
    wanted = np.stack(
        [
            radial * c * c + hoop * s * s,
            radial * s * s + hoop * c * c,
            (radial - hoop) * c * s,
        ],
        axis=1,
    )
    np.testing.assert_allclose(stress, wanted, atol=1e-3 * hoop)


def test_hanging_under_its_own_weight() -> None:
    """σy = ρ g y from the lower end; ν = 0 so that the held end is not squeezed."""
    material = Material("lead", 16_000.0, 0.0, 11_340.0)
    case = distorted(rectangle(20.0, 100.0, 2, 8, WALL, material), 0.2)
    part = loaded(case, (FixedSupport("s", "e3"),), GravityLoad("g", 0.0, -9.81))
    side = recovered(part, case).side[0]
    y = case.mesh.nodes[case.mesh.side_nodes][..., 1]
    wanted = 11_340.0 * 9.81 * 1e-9 * y
    np.testing.assert_allclose(side[..., 1], wanted, atol=1e-9 * wanted.max())
    np.testing.assert_allclose(side[..., [0, 2]], 0.0, atol=1e-9 * wanted.max())


def test_a_fit_stops_where_a_pressure_ends() -> None:
    """Two edges in line, one pressed: the edges join smoothly but the stress along them jumps."""
    case = four_sided(((0, 0), (40, 0), (40, 30), (0, 30)), 8, 6)
    chains = boundary_chains(case.shape, case.mesh)
    traction = np.zeros((2, len(case.mesh.sides), 3, 2))
    held = np.zeros((len(case.mesh.sides), 2), dtype=bool)
    bottom = sides_of(case, "e1")
    assert joined_sides(chains, traction, held)[bottom[:-1]].all()
    traction[1, bottom[:4], :, 1] = 10.0
    stopped = ~joined_sides(chains, traction, held)[bottom[:-1]]
    assert stopped.tolist() == [False, False, False, True, False, False, False]
    held[bottom[2:], 0] = True
    assert not joined_sides(chains, traction, held)[bottom[1]]


def test_no_fit_runs_round_a_corner() -> None:
    case = rectangle(40.0, 30.0, 4, 3)
    chains = boundary_chains(case.shape, case.mesh)
    held = held_sides(case.part, case.shape, case.mesh)
    joined = joined_sides(chains, np.zeros((1, len(held), 3, 2)), held)
    assert int((~joined).sum()) == 4


def test_free_corners_carry_no_stress_and_loaded_ones_what_they_are_given() -> None:
    case = distorted(rectangle(60.0, 20.0, 6, 3))
    part = loaded(
        case,
        (FixedSupport("s", "e4"),),
        ShearLoad("t", "e3", 4.0),
        PressureLoad("p", "e2", -7.0),
        PressureLoad("q", "e1", 5.0),
    )
    field = recovered(part, case)
    at_c2 = case.mesh.corner_nodes["c2"]
    np.testing.assert_allclose(field.nodal[0, at_c2], [7.0, -5.0, 0.0], atol=1e-9)
    # the shear on e3 finds no partner on e2: nothing is known at c3 and the fits speak
    ends = np.argwhere(case.mesh.side_nodes == case.mesh.corner_nodes["c3"])
    values = [field.side[0, s, k] for s, k in ends]
    assert np.abs(values[0] - values[1]).max() > 1e-3


def test_a_corner_under_a_point_load_is_not_called_free() -> None:
    case = rectangle(60.0, 20.0, 6, 3)
    free = loaded(case, (FixedSupport("s", "e4"),), ForceLoad("f", "e3", 0.0, -100.0))
    at_c2 = case.mesh.corner_nodes["c2"]
    under = replace(
        free, cases=(Case("k1", "case", (*free.cases[0].loads, PointLoad("q", "c2", 50.0, 0.0))),)
    )
    assert np.abs(recovered(free, case).nodal[0, at_c2]).max() < 1e-9
    assert np.abs(recovered(under, case).nodal[0, at_c2]).max() > 1.0


def test_at_a_line_of_symmetry_the_half_reads_as_the_whole() -> None:
    """Half a ring pulled up along its outer rim, against the quarter x > 0 on rollers."""
    supports = (RollerSupport("s1", "e1"), RollerSupport("s3", "e3"))
    pull = LineLoad("p", "e2", 0.0, 10.0)
    half = ring_sector(20.0, 40.0, 180.0, 16, 4)
    quarter = ring_sector(20.0, 40.0, 90.0, 8, 4)
    whole = recovered(loaded(half, (*supports, RollerSupport("s2", "c2", 0.0)), pull), half)
    part = recovered(loaded(quarter, supports, pull), quarter)
    for radius in (20.0, 40.0):
        top = np.argmin(np.hypot(*(half.mesh.nodes - (0.0, radius)).T))
        same = np.argmin(np.hypot(*(quarter.mesh.nodes - (0.0, radius)).T))
        inner, at_mirror = whole.nodal[0, top], part.nodal[0, same]
        np.testing.assert_allclose(at_mirror, inner, atol=1e-8 * np.abs(inner).max())
