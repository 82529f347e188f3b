"""Poisson's ratios that make the stress across the wall count in plane strain."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from screenapp.model.part import Part

Floats = NDArray[np.float64]
Ints = NDArray[np.int64]


def out_of_plane_ratios(part: Part) -> Floats:
    """What `solution.von_mises` needs in the wall itself and in each zone, in this order (so zone k
    is at k + 1): Poisson's ratio of its material in plane strain, 0 in plane stress."""
    found = []
    for zone in range(-1, len(part.zones)):
        material = part.material_of(zone) if part.wall.state == "plane strain" else None
        found.append(material.poissons_ratio if material is not None else 0.0)
    return np.array(found)


def out_of_plane_ratio(part: Part, zones: Ints) -> Floats:
    """The same at places whose zones are known, -1 for the wall itself; of the shape of `zones`."""
    return np.asarray(out_of_plane_ratios(part)[zones + 1])
