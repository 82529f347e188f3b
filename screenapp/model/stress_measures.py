"""A stress measure of every place of a part: which zone it is in decides how it is reckoned."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from screenapp.model.material_axes import RULES, strength_share
from screenapp.model.out_of_plane import out_of_plane_ratio
from screenapp.model.part import Part
from screenapp.model.solution import principal, tresca, von_mises

Floats = NDArray[np.float64]
Ints = NDArray[np.int64]


def stress_measure(name: str, stress: Floats, part: Part, zones: Ints) -> Floats:
    """A stress measure [MPa] of (..., 3) stresses: "von_mises", "tresca", "sigma_1", "sigma_2"
    turned positive for compression, or one of `material_axes.RULES`, as the tension along the
    1-axis that would use as much of the strength (in isotropic zones the von Mises stress).

    `zones` tells the zone of each, -1 for the wall itself; it broadcasts against (...).
    """
    if name in RULES:
        return _in_axes(name, stress, part, zones)
    if name in ("von_mises", "tresca"):
        by = von_mises if name == "von_mises" else tresca
        return by(stress, out_of_plane_ratio(part, zones))
    first, second, _ = principal(stress)
    return first if name == "sigma_1" else np.negative(second)


def _in_axes(rule: str, stress: Floats, part: Part, zones: Ints) -> Floats:
    found = von_mises(stress, out_of_plane_ratio(part, zones))
    where = np.broadcast_to(zones, found.shape)
    for zone in range(-1, len(part.zones)):
        material = part.material_of(zone)
        if material is None or not material.orthotropic or material.tension_1 is None:
            continue
        own = where == zone
        axis = part.wall_of(zone).axis or 0.0
        found[own] = material.tension_1 * strength_share(rule, stress[own], material, axis)
    return found
