"""Hooke's law of the wall in its plane, isotropic or orthotropic."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from screenapp.model.errors import SolvingError
from screenapp.model.material_axes import turn
from screenapp.model.part import Material, Part, WallState

Floats = NDArray[np.float64]


def constitutive_matrix(material: Material, state: WallState, axis: float = 0.0) -> Floats:
    """The matrix that takes (εx, εy, γxy) to (σx, σy, τxy) [MPa], (3, 3).

    Source: Timoshenko & Goodier, Theory of Elasticity, art. 16 (from memory).

    Args:
        axis: direction of the 1-axis of an orthotropic material from +x [deg].

    Raises:
        SolvingError: E is not positive or ν lies outside -1 < ν < 0.5; an orthotropic material is
            not positive definite, or in plane strain.
    """
    if material.orthotropic:
        return _orthotropic_matrix(material, state, axis)
    e, nu = material.youngs_modulus, material.poissons_ratio
    if not (np.isfinite(e) and e > 0.0):
        raise SolvingError(
            f"Young's modulus of {material.name} is {e:g} MPa", "give a modulus above zero"
        )
    if not -1.0 < nu < 0.5:
        raise SolvingError(
            f"Poisson's ratio of {material.name} is {nu:g}", "give a ratio between -1 and 0.5"
        )
    if state == "plane strain":
        # the wall cannot contract across: same form with E/(1 - ν²) and ν/(1 - ν)
        e, nu = e / (1.0 - nu * nu), nu / (1.0 - nu)
    factor = e / (1.0 - nu * nu)
    return np.array(
        [
            [factor, factor * nu, 0.0],
            [factor * nu, factor, 0.0],
            [0.0, 0.0, 0.5 * factor * (1.0 - nu)],
        ]
    )


def _orthotropic_matrix(material: Material, state: WallState, axis: float) -> Floats:
    """Plane stress of a sheet whose 1-axis is turned by `axis` [deg] from +x.

    Q11 = E1 / (1 - ν12 ν21), Q22 = E2 / (1 - ν12 ν21), Q12 = ν12 Q22, Q66 = G12, turned as Tᵀ Q T
    with T taking strains to the material's axes (R. M. Jones, Mechanics of Composite Materials,
    ch. 2, from memory).
    """
    if state == "plane strain":
        raise SolvingError(
            f"“{material.name}” is orthotropic, and plane strain would need its constants across "
            "the wall, which it has not",
            "choose plane stress, or an isotropic material",
        )
    e1, nu = material.youngs_modulus, material.poissons_ratio
    e2, g = material.youngs_modulus_2 or 0.0, material.shear_modulus or 0.0
    rest = 1.0 - nu * nu * e2 / e1 if e1 > 0.0 else 0.0
    if not (np.isfinite([e1, e2, g, nu, axis]).all() and min(e1, e2, g, rest) > 0.0):
        raise SolvingError(
            f"the elastic constants of “{material.name}” are not those of a solid",
            "give E1, E2 and G12 above zero, and ν12 with ν12² below E1/E2",
        )
    q = np.array([[e1 / rest, nu * e2 / rest, 0.0], [nu * e2 / rest, e2 / rest, 0.0], [0, 0, g]])
    t = strains_to_axes(axis)
    return np.asarray(t.T @ q @ t)


def strains_to_axes(axis: float) -> Floats:
    """The matrix that takes (εx, εy, γxy) to (ε1, ε2, γ12) of axes turned by `axis` [deg], (3, 3).

    Its transpose takes (σ1, σ2, τ12) to (σx, σy, τxy).
    """
    c, s = turn(axis)
    return np.array(
        [
            [c * c, s * s, c * s],
            [s * s, c * c, -c * s],
            [-2.0 * c * s, 2.0 * c * s, c * c - s * s],
        ]
    )


def axis_of(part: Part, zone: int) -> float:
    """Direction of the 1-axis in a zone (-1: in the wall itself) from +x [deg]."""
    return part.wall_of(zone).axis or 0.0


def wall_material(part: Part) -> Material:
    """The material of the part's wall.

    Raises:
        SolvingError: none is chosen, or the wall has no thickness.
    """
    if part.material is None:
        raise SolvingError(
            f"the wall's material {part.wall.material!r} is not among the part's materials",
            "choose a material for the wall",
        )
    if not (np.isfinite(part.wall.thickness) and part.wall.thickness > 0.0):
        raise SolvingError(
            f"the wall is {part.wall.thickness:g} mm thick", "give a thickness above zero"
        )
    return part.material


def zone_material(part: Part, zone: int) -> Material:
    """The material of a zone (by index; -1: of the wall itself).

    Raises:
        SolvingError: as `wall_material`, also for the zone.
    """
    if zone < 0:
        return wall_material(part)
    material, wall = part.material_of(zone), part.wall_of(zone)
    name = part.zones[zone].id
    if material is None:
        raise SolvingError(
            f"the material {wall.material!r} of zone {name} is not among the part's materials",
            "choose a material for the zone",
        )
    if not (np.isfinite(wall.thickness) and wall.thickness > 0.0):
        raise SolvingError(
            f"zone {name} is {wall.thickness:g} mm thick", "give a thickness above zero"
        )
    return material
