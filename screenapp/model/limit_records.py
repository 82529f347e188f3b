"""What a part may be asked to keep to: one frozen record for each kind of limit.

Units are those of `part.py`.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

Point = tuple[float, float]
StressMeasure = Literal["von_mises", "tresca", "sigma_1", "tsai_hill", "largest_stress"]
MeanStress = Literal["goodman", "smith_watson_topper"]
NotchRule = Literal["none", "peterson", "neuber"]


@dataclass(frozen=True)
class StressLimit:
    """Everywhere: `measure` times `factor` stays under the material's `against` stress.

    `measure` "von_mises" or "tresca" (both with the principal stress across the wall) is for what
    yields, "sigma_1", the largest tension, for what is brittle.  "tsai_hill" and "largest_stress"
    are for orthotropic sheets, whose strengths in their own axes they count; `against` then stands
    for isotropic zones beside them alone (see `material_axes`).

    `at_rising` says what counts where the stress has no finite value: nothing (the verdict stays
    undecided) or the structural stress, drawn on from 0.4 and 1.0 wall thicknesses.
    """

    id: str
    measure: StressMeasure = "von_mises"
    against: Literal["proof_stress", "strength"] = "proof_stress"
    factor: float = 1.5
    at_rising: Literal["undecided", "structural"] = "undecided"


@dataclass(frozen=True)
class DisplacementLimit:
    """Nowhere, or at one place, the part moves by no more than `most` [mm].

    Attributes:
        at: the place [mm], None for everywhere.
        angle: direction [deg] in which the movement counts, either way; None for its whole length.
    """

    id: str
    most: float
    at: Point | None = None
    angle: float | None = None


@dataclass(frozen=True)
class JointLimit:
    """A round hole that carries a pin or bolt keeps to a handbook's rules.

    Attributes:
        on: id of the hole; of a pattern, every hole of it.
        rules: name of the set in `resources/joint_rules.json`.
        factor: times the force.
        pin: diameter of the pin [mm], None for that of the hole.
        pin_strength: tensile strength of the pin [MPa], None for at least that of the wall.
    """

    id: str
    on: str
    rules: str = "EN 1993-1-8"
    factor: float = 1.0
    pin: float | None = None
    pin_strength: float | None = None


@dataclass(frozen=True)
class FatigueLimit:
    """The stress that swings between two cases, or a case and no load, so many times.

    Attributes:
        case: id of a case or combination.
        other: id of the other one, None for no load.
        cycles: wanted number of cycles.
        factor: times the amplitude.
        mean: how the mean stress counts.
        notch: how the support that a sharp notch gives its root counts; "none": not at all.
    """

    id: str
    case: str
    other: str | None = None
    cycles: float = 1e6
    factor: float = 1.5
    mean: MeanStress = "goodman"
    notch: NotchRule = "none"


@dataclass(frozen=True)
class StrainLimit:
    """Nowhere the local strain, yielding counted by Neuber's rule, is above `most` [-]."""

    id: str
    most: float = 0.01


Limit = StressLimit | DisplacementLimit | JointLimit | FatigueLimit | StrainLimit
