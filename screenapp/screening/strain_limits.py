"""Limits on local strain: what each peak strains by when it yields, judged peak by peak."""

from __future__ import annotations

from screenapp.model.findings import Estimate, Peak
from screenapp.model.local_strain import HardeningCurve, hardening_curve
from screenapp.model.part import Part, StrainLimit


def strain_limit_name(limit: StrainLimit) -> str:
    """The limit in a few words."""
    return f"local strain under {100.0 * limit.most:g} % by Neuber"


def curve_at(part: Part, peak: Peak) -> HardeningCurve | None:
    """The curve of the material that a peak is in."""
    zone = next((k for k, z in enumerate(part.zones) if z.id == peak.zone), -1)
    material = part.material_of(zone)
    return hardening_curve(material) if material is not None else None


def strain_share(limit: StrainLimit, curve: HardeningCurve, stress: Estimate) -> Estimate:
    """Share of the limit that a peak uses: its value and both ends of its band by Neuber's rule,
    which rises with the stress."""
    value, low, high = (
        curve.at_notch(max(s, 0.0))[1] / limit.most for s in (stress.value, stress.low, stress.high)
    )
    return Estimate(value, low, high, stress.trust)


def strain_words(curve: HardeningCurve, stress: Estimate) -> str:
    """What was assumed, with local stress and strain at a peak."""
    local, strain = curve.at_notch(stress.value)
    return (
        f"elastic {stress.value:.4g} MPa gives {local:.4g} MPa and {100.0 * strain:.3g} % by "
        f"Neuber's rule, taken as if along one axis; ε = σ/E + (σ/{curve.coefficient:.4g} MPa)"
        f"^(1/{curve.exponent:g}), stable cyclic curve, {curve.source}; for yielding that stays "
        "local, not for a section that yields as a whole"
    )
