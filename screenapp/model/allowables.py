"""What a limit allows of a material."""

from __future__ import annotations

from screenapp.model.material_axes import RULES
from screenapp.model.material_records import AXIS_STRENGTHS
from screenapp.model.part import Material, Part, StressLimit


def allowable(limit: StressLimit, material: Material) -> float | None:
    """The stress [MPa] that the limit allows; None if the material does not have it."""
    if limit.measure in RULES and material.orthotropic:
        known = all(getattr(material, name) is not None for name in AXIS_STRENGTHS)
        base = material.tension_1 if known else None  # the rule counts all five by this one
    elif material.orthotropic:
        base = None
    else:
        base = getattr(material, limit.against)
    return None if base is None else float(base) / limit.factor


def allowables(limit: StressLimit, part: Part) -> tuple[float, ...] | None:
    """What the limit allows [MPa] in the wall itself and in each zone, in this order (so zone k is
    at k + 1); None if a material is missing or does not have such a stress."""
    found: list[float] = []
    for zone in range(-1, len(part.zones)):
        material = part.material_of(zone)
        allowed = allowable(limit, material) if material is not None else None
        if allowed is None:
            return None
        found.append(allowed)
    return tuple(found)


def demands(measure: str, part: Part) -> tuple[float, ...]:
    """How much more a stress of a measure counts in the wall itself and in each zone than where
    the limits on it allow most: 1 at least, and 1 everywhere where one material is used."""
    most = [1.0] * (1 + len(part.zones))
    for limit in part.limits:
        if isinstance(limit, StressLimit) and limit.measure == measure:
            allowed = allowables(limit, part)
            if allowed is not None:
                most = [max(m, max(allowed) / a) for m, a in zip(most, allowed, strict=True)]
    return tuple(most)
