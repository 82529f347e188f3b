"""Hooke's law in the plane, against its inverse form in space."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest

from screenapp.mechanics.elasticity import constitutive_matrix, wall_material
from screenapp.model.errors import SolvingError
from screenapp.model.part import Material, Part, Wall
from tests.mechanics.structured import STEEL


def test_plane_stress_is_the_inverse_of_free_contraction() -> None:
    e, nu = STEEL.youngs_modulus, STEEL.poissons_ratio
    compliance = np.array([[1, -nu, 0], [-nu, 1, 0], [0, 0, 2 * (1 + nu)]]) / e
    assert constitutive_matrix(STEEL, "plane stress") @ compliance == pytest.approx(
        np.eye(3), abs=1e-12
    )


def test_plane_strain_has_no_strain_across() -> None:
    e, nu = STEEL.youngs_modulus, STEEL.poissons_ratio
    stress = constitutive_matrix(STEEL, "plane strain") @ np.array([1e-3, -4e-4, 2e-4])
    across = nu * (stress[0] + stress[1])
    assert (stress[0] - nu * (stress[1] + across)) / e == pytest.approx(1e-3)
    assert (stress[1] - nu * (stress[0] + across)) / e == pytest.approx(-4e-4)
    assert stress[2] == pytest.approx(2e-4 * e / (2 * (1 + nu)))


@pytest.mark.parametrize(
    ("field", "value", "word"),
    [
        ("youngs_modulus", 0.0, "modulus"),
        ("youngs_modulus", float("nan"), "modulus"),
        ("poissons_ratio", 0.5, "ratio"),
        ("poissons_ratio", -1.0, "ratio"),
        ("poissons_ratio", float("nan"), "ratio"),
    ],
)
def test_impossible_materials_are_refused(field: str, value: float, word: str) -> None:
    material = replace(STEEL, **{field: value})
    with pytest.raises(SolvingError, match=word) as caught:
        constitutive_matrix(material, "plane stress")
    assert STEEL.name in caught.value.cause


def test_a_wall_needs_material_and_thickness() -> None:
    with pytest.raises(SolvingError, match="choose a material"):
        wall_material(Part(wall=Wall(2.0, "gone"), materials=(STEEL,)))
    with pytest.raises(SolvingError, match="thickness above zero"):
        wall_material(Part(wall=Wall(0.0, "steel"), materials=(STEEL,)))
    tin = Material("tin", 5e4, 0.33, 7300.0)
    assert wall_material(Part(wall=Wall(2.0, "tin"), materials=(STEEL, tin))) is tin
