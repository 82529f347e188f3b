"""Local yielding at a notch: Neuber's rule with the curve of Ramberg and Osgood.

Stresses in MPa, strains as plain numbers.
"""

from __future__ import annotations

import math
from dataclasses import dataclass

from scipy.optimize import brentq

from screenapp.model.part import Material

TYPICAL = {"steel": (1.65, 0.15), "aluminium": (1.61, 0.11), "titanium": (1.61, 0.11)}
"""K' over the tensile strength, and n': uniform material law of Bäumel and Seeger, Materials Data
for Cyclic Loading, supplement 1 (1990), from memory."""


@dataclass(frozen=True)
class HardeningCurve:
    """The stable cyclic curve ε = σ/E + (σ/K')^(1/n') (Ramberg and Osgood 1943)."""

    modulus: float
    coefficient: float
    exponent: float
    source: str

    def strain(self, stress: float) -> float:
        """The strain that belongs to a stress [MPa]."""
        return float(stress / self.modulus + (stress / self.coefficient) ** (1.0 / self.exponent))

    def at_notch(self, elastic: float) -> tuple[float, float]:
        """Local stress [MPa] and strain where an elastic calculation gives `elastic` [MPa].

        Neuber 1961: the product of stress and strain stays that of the elastic calculation.
        """
        if not math.isfinite(elastic):
            return math.inf, math.inf
        if elastic <= 0.0:
            return 0.0, 0.0
        energy = elastic**2 / self.modulus
        stress = float(brentq(lambda s: s * self.strain(s) - energy, 0.0, elastic, xtol=1e-9))
        return stress, energy / stress


def hardening_curve(material: Material) -> HardeningCurve | None:
    """The curve of a material, given or typical of its family; None where neither is known."""
    modulus = material.youngs_modulus
    if material.hardening_coefficient is not None and material.hardening_exponent is not None:
        return HardeningCurve(
            modulus,
            material.hardening_coefficient,
            material.hardening_exponent,
            "figures of the material",
        )
    typical = TYPICAL.get(material.family or "")
    if typical is None or material.strength is None:
        return None
    return HardeningCurve(
        modulus,
        typical[0] * material.strength,
        typical[1],
        f"typical of {material.family} of that strength (uniform material law, Bäumel and Seeger "
        "1990, from memory)",
    )
