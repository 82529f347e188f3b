"""The mass of a part: every zone with its own thickness and density."""

from __future__ import annotations

from screenapp.model.part import Part
from screenapp.model.shape import Shape


def mass_of(part: Part, shape: Shape) -> float:
    """Mass [kg] of a part with this divided shape (`regions.shape_with_zones`); stretches whose
    material is not known weigh nothing."""
    total = 0.0
    for region in shape.parts:
        material = part.material_of(region.zone)
        density = material.density if material is not None else 0.0
        total += region.shape.area * part.wall_of(region.zone).thickness * density
    return total * 1e-9
