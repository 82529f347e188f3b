"""Materials whose figures cannot be worked with."""

from __future__ import annotations

import math
from collections.abc import Iterator

from screenapp.model.errors import Fault
from screenapp.model.material_records import ORTHOTROPIC_ONLY
from screenapp.model.part import Material, Part

AXIS_WORDS = {
    "shear_modulus": "the shear modulus G12",
    "expansion_2": "an expansion along 2",
    "tension_1": "a tensile strength along 1",
    "compression_1": "a compressive strength along 1",
    "tension_2": "a tensile strength along 2",
    "compression_2": "a compressive strength along 2",
    "shear_strength": "a shear strength",
}
"""The figures that only an orthotropic sheet has, in words."""


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
    yield from axis_faults(part)


def _properties(m: Material) -> Iterator[Fault]:
    where = f"materials.{m.name}"
    for name, words, unit in (
        ("youngs_modulus", "the Young's modulus", "MPa"),
        ("density", "the density", "kg/m³"),
        ("proof_stress", "the proof stress", "MPa"),
        ("strength", "the strength", "MPa"),
        ("fatigue_coefficient", "the fatigue coefficient", "MPa"),
        ("hardening_coefficient", "the hardening coefficient", "MPa"),
        ("youngs_modulus_2", "the modulus E2", "MPa"),
        ("shear_modulus", "the shear modulus G12", "MPa"),
        ("tension_1", "the tensile strength along 1", "MPa"),
        ("compression_1", "the compressive strength along 1", "MPa"),
        ("tension_2", "the tensile strength along 2", "MPa"),
        ("compression_2", "the compressive strength along 2", "MPa"),
        ("shear_strength", "the shear strength", "MPa"),
    ):
        value = getattr(m, name)
        if value is not None and not (positive(value) and 1e-9 < value < 1e12):
            optional = "" if name in ("youngs_modulus", "density") else ", or leave it out"
            yield Fault(
                f"{words} of “{m.name}” is {value:g} {unit}",
                f"give a sensible number of {unit} above zero{optional}",
                f"{where}.{name}",
            )
    if not m.orthotropic and not -1.0 < m.poissons_ratio < 0.5:
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
    yield from _axes(m, where)
    yield from _exponents(m, where)
    yield from _reach(m, where)


def _axes(m: Material, where: str) -> Iterator[Fault]:
    """The constants of an orthotropic sheet: those of a solid, whose strain energy is positive."""
    if not m.orthotropic:
        for name in ORTHOTROPIC_ONLY:
            if getattr(m, name) is not None:
                yield Fault(
                    f"“{m.name}” has {AXIS_WORDS[name]}, but no second Young's modulus",
                    f"give E2 to make it orthotropic, or leave out {AXIS_WORDS[name]}",
                    f"{where}.{name}",
                )
                return
        return
    if m.shear_modulus is None:
        yield Fault(
            f"the orthotropic “{m.name}” has no shear modulus",
            "give G12, which does not follow from the other constants",
            f"{where}.shear_modulus",
        )
    e1, e2, nu = m.youngs_modulus, m.youngs_modulus_2 or 0.0, m.poissons_ratio
    if not math.isfinite(nu) or (e1 > 0.0 and e2 > 0.0 and nu * nu >= e1 / e2):
        most = math.sqrt(e1 / e2) if e1 > 0.0 and e2 > 0.0 else math.nan
        yield Fault(
            f"ν12 of “{m.name}” is {nu:g}, which with E1 {e1:g} and E2 {e2:g} MPa no solid has",
            f"give ν12 between -{most:.3g} and {most:.3g} (ν12² below E1/E2); ν21 = ν12 E2/E1 is "
            "the other one",
            f"{where}.poissons_ratio",
        )
    if m.expansion_2 is not None and not math.isfinite(m.expansion_2):
        yield Fault(
            f"the expansion of “{m.name}” along 2 is not a finite number",
            "give a coefficient in 1/K, or leave it out",
            f"{where}.expansion_2",
        )


def axis_faults(part: Part) -> Iterator[Fault]:
    """Orthotropic sheets in a state or at an angle that they cannot be worked out in."""
    for zone in range(-1, len(part.zones)):
        material, wall = part.material_of(zone), part.wall_of(zone)
        name = part.zones[zone].id if zone >= 0 else ""
        where, about = (f"zones.{name}", (name,)) if name else ("wall", ())
        if wall.axis is not None and not math.isfinite(wall.axis):
            yield Fault(
                f"the direction of the 1-axis is {wall.axis:g}",
                "give it in degrees from +x",
                f"{where}.axis",
                about,
            )
        if material is not None and material.orthotropic and wall.state == "plane strain":
            yield Fault(
                f"“{material.name}” is orthotropic, and plane strain would need its constants "
                "across the wall, which it has not",
                "choose plane stress, or an isotropic material",
                "wall.state",
                about,
            )


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
