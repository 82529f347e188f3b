"""What a limit allows of a material."""

from __future__ import annotations

from screenapp.model.part import Material, StressLimit


def allowable(limit: StressLimit, material: Material) -> float | None:
    """The stress [MPa] that the limit allows; None if the material does not have it."""
    base = getattr(material, limit.against)
    return None if base is None else float(base) / limit.factor
