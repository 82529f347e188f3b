"""Hooke's law of the isotropic wall in its plane."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from screenapp.model.errors import SolvingError
from screenapp.model.part import Material, Part, WallState

Floats = NDArray[np.float64]


def constitutive_matrix(material: Material, state: WallState) -> Floats:
    """The matrix that takes (εx, εy, γxy) to (σx, σy, τxy) [MPa], (3, 3).

    Source: Timoshenko & Goodier, Theory of Elasticity, art. 16 (from memory).

    Raises:
        SolvingError: E is not positive or ν lies outside -1 < ν < 0.5.
    """
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
