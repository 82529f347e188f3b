"""Orthotropic sheets: the law turned, even fields, expansion, edges and roots."""

from __future__ import annotations

import math
from dataclasses import replace

import numpy as np
import pytest

from screenapp.mechanics.boundary_chains import boundary_chains
from screenapp.mechanics.characteristic_roots import characteristic_roots, tangential_growth
from screenapp.mechanics.corner_stress import known_corners
from screenapp.mechanics.edge_recovery import isotropic
from screenapp.mechanics.elasticity import constitutive_matrix
from screenapp.mechanics.energy_error import energy_error
from screenapp.mechanics.recovery import recover
from screenapp.mechanics.shear_ends import GROWTH, edge_growth
from screenapp.mechanics.singular_spots import singular_spots
from screenapp.mechanics.solve import solve
from screenapp.model.errors import SolvingError
from screenapp.model.part import (
    Case,
    ElementName,
    FixedSupport,
    LineLoad,
    Material,
    MeshWishes,
    RollerSupport,
    TemperatureLoad,
    Wall,
)
from screenapp.model.shape import shape_of
from tests.mechanics.stress_fields import edge_stress_of, solution_of
from tests.mechanics.structured import STEEL, four_sided, outlined, ring_sector, shaken

GLASS = Material(
    "unidirectional glass",
    39_000.0,
    0.28,
    1900.0,
    expansion=7e-6,
    youngs_modulus_2=8_600.0,
    shear_modulus=3_800.0,
    expansion_2=21e-6,
)
ELEMENTS: tuple[ElementName, ...] = ("quad4", "quad4-incompatible", "quad8", "quad9")


def compliance(material: Material, axis: float) -> np.ndarray:
    """The turned compliance term by term (R. M. Jones, Mechanics of Composite Materials, eq.
    2.88, from memory), none of it shared with the program."""
    c, s = math.cos(math.radians(axis)), math.sin(math.radians(axis))
    assert material.youngs_modulus_2 is not None
    assert material.shear_modulus is not None
    s11, s22 = 1.0 / material.youngs_modulus, 1.0 / material.youngs_modulus_2
    s12, s66 = -material.poissons_ratio * s11, 1.0 / material.shear_modulus
    t11 = s11 * c**4 + (2 * s12 + s66) * s**2 * c**2 + s22 * s**4
    t22 = s11 * s**4 + (2 * s12 + s66) * s**2 * c**2 + s22 * c**4
    t12 = s12 * (s**4 + c**4) + (s11 + s22 - s66) * s**2 * c**2
    t16 = (2 * s11 - 2 * s12 - s66) * s * c**3 - (2 * s22 - 2 * s12 - s66) * s**3 * c
    t26 = (2 * s11 - 2 * s12 - s66) * s**3 * c - (2 * s22 - 2 * s12 - s66) * s * c**3
    t66 = 2 * (2 * s11 + 2 * s22 - 4 * s12 - s66) * s**2 * c**2 + s66 * (s**4 + c**4)
    return np.array([[t11, t12, t16], [t12, t22, t26], [t16, t26, t66]])


@pytest.mark.parametrize("axis", [0.0, 90.0, 27.0, -63.0, 180.0, 135.0])
def test_the_turned_law_is_the_inverse_of_the_turned_compliance(axis: float) -> None:
    law = constitutive_matrix(GLASS, "plane stress", axis)
    np.testing.assert_allclose(law @ compliance(GLASS, axis), np.eye(3), atol=1e-12)


def test_an_isotropic_sheet_given_as_orthotropic_does_not_feel_its_axis() -> None:
    twin = replace(STEEL, youngs_modulus_2=210_000.0, shear_modulus=210_000.0 / 2.6)
    for axis in (0.0, 33.0):
        law = constitutive_matrix(twin, "plane stress", axis)
        np.testing.assert_allclose(law, constitutive_matrix(STEEL, "plane stress"), atol=1e-8)
    assert isotropic(law)
    assert not isotropic(constitutive_matrix(GLASS, "plane stress", 33.0))
    assert not isotropic(constitutive_matrix(GLASS, "plane stress", 0.0))


@pytest.mark.parametrize(
    ("change", "state", "word"),
    [
        ({}, "plane strain", "plane strain"),
        ({"youngs_modulus_2": 0.0}, "plane stress", "solid"),
        ({"shear_modulus": None}, "plane stress", "solid"),
        ({"shear_modulus": float("nan")}, "plane stress", "solid"),
        ({"poissons_ratio": 2.2}, "plane stress", "solid"),  # sqrt(39/8.6) = 2.13
    ],
)
def test_constants_of_no_solid_are_refused(
    change: dict[str, float | None], state: str, word: str
) -> None:
    wrong = replace(GLASS, **change)  # type: ignore[arg-type]
    with pytest.raises(SolvingError, match=word):
        constitutive_matrix(wrong, state, 10.0)  # type: ignore[arg-type]


@pytest.mark.parametrize("element", ELEMENTS)
@pytest.mark.parametrize("axis", [0.0, 30.0, -50.0])
def test_a_strip_pulled_off_its_axes_stretches_and_shears(
    element: ElementName, axis: float
) -> None:
    """100 MPa along x on a distorted mesh: εx = S11 σ, εy = S12 σ, γxy = S16 σ, and that stress
    everywhere, on the edges too."""
    wall = Wall(2.0, "", axis=axis)
    case = four_sided(((0, 0), (60, 0), (60, 20), (0, 20)), 6, 3, wall, GLASS)
    case = replace(case, mesh=shaken(case.mesh, case.shape, 0.2))
    part = replace(
        case.part,
        supports=(FixedSupport("s1", "c1"), RollerSupport("s2", "c2", 90.0)),
        cases=(Case("k", "", (LineLoad("a", "e2", 200.0, 0.0), LineLoad("b", "e4", -200.0, 0.0))),),
        mesh=MeshWishes(element),
    )
    found = solve(part, case.shape, case.mesh)
    s11, s12, s16 = compliance(GLASS, axis)[0] * 100.0
    moved = found.displacements[0]
    right, top = case.mesh.corner_nodes["c2"], case.mesh.corner_nodes["c4"]
    np.testing.assert_allclose(moved[right], [60.0 * s11, 0.0], atol=1e-9 * 60.0 * s11)
    np.testing.assert_allclose(moved[top], [20.0 * s16, 20.0 * s12], atol=1e-9 * 60.0 * s11)
    field = recover(part, case.shape, case.mesh, found)
    even = np.array([100.0, 0.0, 0.0])
    assert np.abs(field.nodal[0] - even).max() < 1e-6
    assert np.abs(field.side[0] - even).max() < 1e-6
    assert field.energy_error.max() < 1e-9


@pytest.mark.parametrize("element", ELEMENTS)
def test_an_even_warming_askew_to_the_edges_gives_no_stress(element: ElementName) -> None:
    """εx = α1 c² + α2 s², γxy = 2 c s (α1 - α2), times 50 K; held so that it can grow."""
    case = four_sided(((0, 0), (60, 0), (60, 20), (0, 20)), 6, 3, Wall(2.0, "", axis=30.0), GLASS)
    case = replace(case, mesh=shaken(case.mesh, case.shape, 0.2))
    part = replace(
        case.part,
        supports=(FixedSupport("s1", "c1"), RollerSupport("s2", "c2", 90.0)),
        cases=(Case("k", "", (TemperatureLoad("t", 50.0),)),),
        mesh=MeshWishes(element),
    )
    found = solve(part, case.shape, case.mesh)
    top = found.displacements[0][case.mesh.corner_nodes["c4"]]
    c2, s2, cs = 0.75, 0.25, 0.25 * math.sqrt(3.0)
    assert top[0] == pytest.approx(20.0 * 50.0 * 2.0 * cs * (7e-6 - 21e-6), rel=1e-9)
    assert top[1] == pytest.approx(20.0 * 50.0 * (7e-6 * s2 + 21e-6 * c2), rel=1e-9)
    field = recover(part, case.shape, case.mesh, found)
    assert np.abs(field.nodal).max() < 1e-6
    assert np.abs(field.side).max() < 1e-6


def test_stress_on_a_curved_edge_is_that_of_an_exact_field_askew() -> None:
    """Quadratic displacements, exact in the element: the edge has the field's stress, with the
    shear's share, where the isotropic law would be wrong by tens of per cent."""
    case = ring_sector(10.0, 20.0, 90.0, 12, 6)
    law = constitutive_matrix(GLASS, "plane stress", 25.0)

    def displacement(p: np.ndarray) -> np.ndarray:
        x, y = p.T
        return 1e-4 * np.stack([x * x + 0.3 * x * y, 0.5 * y * y - 0.2 * x * y], axis=-1)

    def stress(p: np.ndarray) -> np.ndarray:
        x, y = p.T
        strain = np.stack([2 * x + 0.3 * y, y - 0.2 * x, 0.3 * x - 0.2 * y], axis=-1)
        return 1e-4 * strain @ law

    moved = solution_of(case.mesh, displacement)
    found = edge_stress_of(case.shape, case.mesh, moved, stress, law)
    exact = stress(case.mesh.nodes[case.mesh.side_nodes].reshape(-1, 2)).reshape(found.shape)
    scale = np.abs(exact).max()
    assert np.abs(found - exact).max() < 3e-3 * scale
    nodal = stress(case.mesh.nodes)[None]
    error = energy_error(case.mesh, moved, law, nodal, exact[None])
    assert error.max() < 1e-2
    plain = replace(STEEL, youngs_modulus=law[0, 0])
    wrong = edge_stress_of(
        case.shape, case.mesh, moved, stress, constitutive_matrix(plain, "plane stress")
    )
    assert np.abs(wrong - exact).max() > 0.1 * scale


def test_roots_along_the_axes_are_those_of_the_textbook() -> None:
    """-i (μ1 + μ2) = sqrt(2 (sqrt(E1/E2) - ν12) + E1/G12) and -μ1 μ2 = sqrt(E1/E2) (Lekhnitskii,
    Anisotropic Plates, from memory), which makes Kt of a hole."""
    one, two = characteristic_roots(constitutive_matrix(GLASS, "plane stress"))
    ratio = math.sqrt(39.0 / 8.6)
    assert (one + two).imag == pytest.approx(math.sqrt(2 * (ratio - 0.28) + 39.0 / 3.8))
    assert (one + two).real == pytest.approx(0.0, abs=1e-9)
    assert (one * two).real == pytest.approx(-ratio)
    turned = constitutive_matrix(GLASS, "plane stress", 40.0)
    assert tangential_growth(turned, 40.0) == pytest.approx(0.5 * (one + two).imag)
    assert tangential_growth(constitutive_matrix(STEEL, "plane stress"), 12.0) == pytest.approx(
        1.0, rel=1e-3
    )


def test_the_edge_under_the_end_of_a_shear_grows_by_the_sheet_s_own_factor() -> None:
    """A sheet with the 1-axis along the edge; the half-plane's stress there, summed up from the
    point force along the edge: ∂σt/∂ln r = Im(μ1 + μ2) Δτ / π, against a solution of ours."""
    square = ((0.0, 0.0), (40.0, 0.0), (40.0, 20.0), (0.0, 20.0))
    part = replace(outlined(square, None, Wall(1.0, ""), GLASS))
    shape = shape_of(part)
    factor = math.sqrt(2 * (math.sqrt(39.0 / 8.6) - 0.28) + 39.0 / 3.8) / math.pi
    assert edge_growth(part, shape, 0) == pytest.approx(factor)
    steel = outlined(square, None, Wall(1.0, ""), STEEL)
    assert edge_growth(steel, shape, 0) == GROWTH


def test_corners_of_glass_rise_without_an_exponent() -> None:
    points = ((0, 0), (40, 0), (40, 20), (20, 20), (20, 40), (0, 40))
    part = outlined(points, None, Wall(2.0, "", axis=20.0), GLASS)
    part = replace(part, supports=(FixedSupport("s", "e1"),))
    spots = {s.place: s for s in singular_spots(part, shape_of(part))}
    assert spots["corner c4"].rate > 0.1
    assert "not worked out" in spots["corner c4"].why
    assert {"corner c1", "corner c2"} <= spots.keys()
    plain = replace(part, materials=(replace(STEEL, name=part.wall.material),))
    assert all("not worked out" not in s.why for s in singular_spots(plain, shape_of(plain)))


def test_corners_between_contradicting_shears_are_not_known_in_glass() -> None:
    """There the isotropic wedge's field does not hold."""
    case = four_sided(((0, 0), (40, 0), (40, 30), (0, 30)), 8, 6)
    chains = boundary_chains(case.shape, case.mesh)
    sides = len(case.mesh.sides)
    held, none = np.zeros((sides, 2), dtype=bool), np.zeros(sides, dtype=bool)
    traction = np.zeros((1, sides, 3, 2))
    traction[0, case.mesh.side_piece == 0, :, 0] = 1.0  # a shear on the bottom alone
    steel = known_corners(chains, traction, held, none)[1]
    glass = known_corners(chains, traction, held, none, np.zeros(sides, dtype=bool))[1]
    assert steel.sum() == 4
    assert glass.sum() == 2  # the two corners that the sheared edge does not meet
