"""How many swings a stress may make: Basquin's line, mean stress, notch sensitivity.

All stresses in MPa, lengths in mm.
"""

from __future__ import annotations

import math
from dataclasses import dataclass

from screenapp.model.limit_records import MeanStress, NotchRule
from screenapp.model.part import Material

TYPICAL = {
    "steel": (1.5, -0.087),
    "aluminium": (1.67, -0.095),
    "titanium": (1.67, -0.095),
}
"""σf' over the tensile strength, and b: uniform material law of Bäumel and Seeger, Materials Data
for Cyclic Loading, supplement 1 (1990), from memory."""

PETERSON_ALUMINIUM = 0.51
"""Peterson's constant of aluminium alloys [mm]; Dowling, Mechanical Behavior of Materials, from
memory."""

NEUBER_STRONGEST = 1520.0
"""The fit of Neuber's constant ends at this strength; stronger steels take the value there."""

LEAST_ROOM = 1e-3
"""Goodman's line ends at the strength; beyond, so little of the amplitude is left."""


@dataclass(frozen=True)
class FatigueFigures:
    """Basquin's line σa = coefficient (2 N)^exponent and the tensile strength of a material."""

    coefficient: float
    exponent: float
    strength: float
    source: str

    def amplitude(self, cycles: float) -> float:
        """The amplitude [MPa] of a fully reversed stress that `cycles` swings break."""
        return float(self.coefficient * (2.0 * cycles) ** self.exponent)


def fatigue_figures(material: Material) -> FatigueFigures | None:
    """The figures of a material, given or typical of its family; None where neither is known."""
    if material.strength is None:
        return None
    if material.fatigue_coefficient is not None and material.fatigue_exponent is not None:
        return FatigueFigures(
            material.fatigue_coefficient,
            material.fatigue_exponent,
            material.strength,
            "figures of the material",
        )
    typical = TYPICAL.get(material.family or "")
    if typical is None:
        return None
    factor, exponent = typical
    return FatigueFigures(
        factor * material.strength,
        exponent,
        material.strength,
        f"typical of {material.family} of that strength (uniform material law, Bäumel and Seeger "
        "1990, from memory)",
    )


def reversed_amplitude(amplitude: float, mean: float, rule: MeanStress, strength: float) -> float:
    """The fully reversed amplitude [MPa] that does as much harm as an amplitude about a mean.

    Goodman (1899): σa / (1 - σm / Rm); a mean in compression does no good.  Smith, Watson and
    Topper (1970): √(σmax σa), nothing where σmax is not tension.
    """
    if rule == "goodman":
        return amplitude / max(1.0 - max(mean, 0.0) / strength, LEAST_ROOM)
    return math.sqrt(max(mean + amplitude, 0.0) * amplitude)


def notch_sensitivity(rule: NotchRule, radius: float, material: Material) -> float:
    """q of a notch of that radius: 1 where the whole peak counts, 0 where none of it.

    Peterson: q = 1 / (1 + a/r), a = 0.0254 (2070 / Rm)^1.8 mm of steel.  Neuber:
    q = 1 / (1 + √(ρ/r)), log10 ρ = -(Rm - 134) / 586 of steel.  Both as in Dowling, Mechanical
    Behavior of Materials, from memory.
    """
    strength = material.strength or 0.0
    if rule == "none" or radius <= 0.0 or strength <= 0.0:
        return 1.0
    if rule == "neuber":
        length = 10.0 ** (-(min(strength, NEUBER_STRONGEST) - 134.0) / 586.0)
        return 1.0 / (1.0 + math.sqrt(length / radius))
    steel = 0.0254 * (2070.0 / strength) ** 1.8
    length = PETERSON_ALUMINIUM if material.family == "aluminium" else steel
    return 1.0 / (1.0 + length / radius)


def counted_share(sensitivity: float, concentration: float) -> float:
    """Share of a peak that counts in fatigue, Kf / Kt with Kf = 1 + q (Kt - 1)."""
    kt = max(concentration, 1.0)
    return (1.0 + sensitivity * (kt - 1.0)) / kt
