"""What the wall is made of, as frozen records; units are those of `part.py`."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

MaterialFamily = Literal[
    "steel",
    "cast iron",
    "aluminium",
    "magnesium",
    "titanium",
    "copper",
    "zinc",
    "plastic",
    "laminate",
    "wood",
]


@dataclass(frozen=True)
class Material:
    """A material: isotropic, or an orthotropic sheet.

    A sheet with `youngs_modulus_2` is orthotropic: it has two axes in the plane of the wall, at a
    right angle to each other; the wall (or a zone) says where its 1-axis lies.  Then
    `youngs_modulus` is E1, `poissons_ratio` is ν12 (contraction along 2 over stretch along 1, when
    pulled along 1) and `expansion` is α1; it has no proof stress and no one strength.

    Attributes:
        name: unique in the part, e.g. "EN AW-6082-T6 sheet".
        youngs_modulus: E [MPa].
        poissons_ratio: ν [-], -1 < ν < 0.5.
        density: [kg/m³].
        proof_stress: yield or 0.2 % proof stress [MPa], None if not known.
        strength: tensile strength [MPa], None if not known.
        expansion: coefficient of linear expansion [1/K], None if not known.
        temperature_max: above it the figures no longer stand [°C], None if not known.
        thickness_from, thickness_upto: walls that the figures stand for [mm], None if open.
        family: decides what is typical of its kind (fatigue), None if that is not known.
        fatigue_coefficient: σf' of Basquin's line σa = σf' (2 N)^b [MPa]; None takes what is
            typical of the family.
        fatigue_exponent: b of that line [-], below zero.
        hardening_coefficient: K' of the cyclic curve ε = σ/E + (σ/K')^(1/n') [MPa].
        hardening_exponent: n' of that curve [-].
        youngs_modulus_2: E2 [MPa], None for an isotropic material.
        shear_modulus: G12 [MPa], only of an orthotropic sheet.
        expansion_2: α2 [1/K], None if not known.
        tension_1, compression_1: strengths Xt and Xc along the 1-axis, both positive [MPa].
        tension_2, compression_2: Yt and Yc along the 2-axis [MPa].
        shear_strength: S between the two axes [MPa].
        source: where the figures come from ("EN 485-2", "typical, from memory").
    """

    name: str
    youngs_modulus: float
    poissons_ratio: float
    density: float
    proof_stress: float | None = None
    strength: float | None = None
    expansion: float | None = None
    temperature_max: float | None = None
    thickness_from: float | None = None
    thickness_upto: float | None = None
    family: MaterialFamily | None = None
    fatigue_coefficient: float | None = None
    fatigue_exponent: float | None = None
    hardening_coefficient: float | None = None
    hardening_exponent: float | None = None
    youngs_modulus_2: float | None = None
    shear_modulus: float | None = None
    expansion_2: float | None = None
    tension_1: float | None = None
    compression_1: float | None = None
    tension_2: float | None = None
    compression_2: float | None = None
    shear_strength: float | None = None
    source: str = ""

    @property
    def orthotropic(self) -> bool:
        """Whether it has two axes in the plane of the wall."""
        return self.youngs_modulus_2 is not None

    def stands_for(self, thickness: float) -> bool:
        """Whether the figures stand for a wall of that thickness [mm]."""
        over = self.thickness_from is None or thickness >= self.thickness_from
        return over and (self.thickness_upto is None or thickness <= self.thickness_upto)


AXIS_STRENGTHS = ("tension_1", "compression_1", "tension_2", "compression_2", "shear_strength")
"""The strengths of an orthotropic sheet, by their fields: Xt, Xc, Yt, Yc, S."""

ORTHOTROPIC_ONLY = ("shear_modulus", "expansion_2", *AXIS_STRENGTHS)
"""Figures that only an orthotropic sheet has."""
