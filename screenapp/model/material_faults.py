"""Materials whose figures cannot be worked with."""

from __future__ import annotations

import math
from collections.abc import Iterator

from screenapp.model.errors import Fault
from screenapp.model.part import Material, Part


def positive(value: float) -> bool:
    """Whether a number is finite and above zero."""
    return math.isfinite(value) and value > 0.0


def material_faults(part: Part) -> Iterator[Fault]:
    """Properties of all materials that the part carries."""
    seen: set[str] = set()
    for m in part.materials:
        if m.name in seen:
            yield Fault(
                f"two materials are called “{m.name}”",
                "rename or remove one",
                f"materials.{m.name}",
            )
        seen.add(m.name)
        yield from _properties(m)


def _properties(m: Material) -> Iterator[Fault]:
    where = f"materials.{m.name}"
    for name, words, unit in (
        ("youngs_modulus", "the Young's modulus", "MPa"),
        ("density", "the density", "kg/m³"),
        ("proof_stress", "the proof stress", "MPa"),
        ("strength", "the strength", "MPa"),
        ("fatigue_coefficient", "the fatigue coefficient", "MPa"),
        ("hardening_coefficient", "the hardening coefficient", "MPa"),
    ):
        value = getattr(m, name)
        if value is not None and not (positive(value) and 1e-9 < value < 1e12):
            optional = "" if name in ("youngs_modulus", "density") else ", or leave it out"
            yield Fault(
                f"{words} of “{m.name}” is {value:g} {unit}",
                f"give a sensible number of {unit} above zero{optional}",
                f"{where}.{name}",
            )
    if not -1.0 < m.poissons_ratio < 0.5:
        yield Fault(
            f"Poisson's ratio of “{m.name}” is {m.poissons_ratio:g}",
            "give a ratio above -1 and below 0.5",
            f"{where}.poissons_ratio",
        )
    if m.expansion is not None and not math.isfinite(m.expansion):
        yield Fault(
            f"the expansion of “{m.name}” is not a finite number",
            "give a coefficient in 1/K, or leave it out",
            f"{where}.expansion",
        )
    yield from _exponents(m, where)
    yield from _reach(m, where)


def _exponents(m: Material, where: str) -> Iterator[Fault]:
    """Exponents of the fatigue line and of the cyclic curve."""
    if m.fatigue_exponent is not None and not -1.0 < m.fatigue_exponent < 0.0:
        yield Fault(
            f"the fatigue exponent of “{m.name}” is {m.fatigue_exponent:g}",
            "give one between -1 and 0 (metals have about -0.05 to -0.13), or leave it out",
            f"{where}.fatigue_exponent",
        )
    if m.hardening_exponent is not None and not 0.0 < m.hardening_exponent < 1.0:
        yield Fault(
            f"the hardening exponent of “{m.name}” is {m.hardening_exponent:g}",
            "give one between 0 and 1 (metals have about 0.1 to 0.2), or leave it out",
            f"{where}.hardening_exponent",
        )
    for one in ("fatigue", "hardening"):
        pair = (getattr(m, f"{one}_coefficient"), getattr(m, f"{one}_exponent"))
        if (pair[0] is None) != (pair[1] is None):
            yield Fault(
                f"“{m.name}” has only one of the two {one} figures",
                "give coefficient and exponent, or leave both out",
                f"{where}.{one}_{'coefficient' if pair[0] is None else 'exponent'}",
            )


def _reach(m: Material, where: str) -> Iterator[Fault]:
    """The walls and temperatures that the figures stand for."""
    low, high = m.thickness_from, m.thickness_upto
    for name, value in (("thickness_from", low), ("thickness_upto", high)):
        if value is not None and not positive(value):
            yield Fault(
                f"the thickness range of “{m.name}” has a bound of {value:g} mm",
                "give a bound above zero, or leave it out",
                f"{where}.{name}",
            )
    if low is not None and high is not None and low > high:
        yield Fault(
            f"“{m.name}” stands for walls from {low:g} mm to {high:g} mm, which is none",
            "exchange the bounds",
            f"{where}.thickness_from",
        )
    if m.temperature_max is not None and not math.isfinite(m.temperature_max):
        yield Fault(
            f"the highest temperature of “{m.name}” is not a finite number",
            "give one in °C, or leave it out",
            f"{where}.temperature_max",
        )
