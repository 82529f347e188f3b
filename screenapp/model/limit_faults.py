"""Limits that cannot be judged, and what they ask of a material that has it not."""

from __future__ import annotations

import math
from collections.abc import Iterator
from typing import get_args

from screenapp.model.errors import Fault
from screenapp.model.extents import FARTHEST
from screenapp.model.fatigue_faults import fatigue_limit_faults, fatigue_material_faults
from screenapp.model.features import find
from screenapp.model.joint_rules import joint_rules
from screenapp.model.local_strain import TYPICAL, hardening_curve
from screenapp.model.material_axes import RULES
from screenapp.model.material_faults import AXIS_WORDS, positive
from screenapp.model.material_records import AXIS_STRENGTHS
from screenapp.model.part import (
    CircleHole,
    DisplacementLimit,
    FatigueLimit,
    JointLimit,
    Limit,
    Material,
    Part,
    StrainLimit,
    StressLimit,
    StressMeasure,
)


def limit_faults(part: Part) -> Iterator[Fault]:
    """Limits that cannot be judged."""
    for limit in part.limits:
        where = f"limits.{limit.id}"
        if isinstance(limit, JointLimit):
            yield from _joint_limit_faults(limit, part, where)
        elif isinstance(limit, FatigueLimit):
            yield from fatigue_limit_faults(limit, part, where)
        elif isinstance(limit, StrainLimit) and not positive(limit.most):
            yield Fault(
                f"the strain limit {limit.id} is {limit.most:g}",
                "give a strain above zero, e.g. 0.01 for 1 %",
                f"{where}.most",
                (limit.id,),
            )
        if isinstance(limit, StressLimit):
            yield from _stress_limit_faults(limit, where)
        elif isinstance(limit, DisplacementLimit):
            yield from _displacement_limit_faults(limit, where)


def _displacement_limit_faults(limit: DisplacementLimit, where: str) -> Iterator[Fault]:
    if not positive(limit.most):
        yield Fault(
            f"the displacement limit {limit.id} is {limit.most:g} mm",
            "give a displacement above zero",
            f"{where}.most",
            (limit.id,),
        )
    if limit.at is not None and not all(abs(x) <= FARTHEST for x in limit.at):  # NaN is not
        yield Fault(
            f"the place of limit {limit.id} is ({limit.at[0]:.4g}, {limit.at[1]:.4g}) mm",
            "give coordinates of a point of the part in mm",
            f"{where}.at",
            (limit.id,),
        )
    if limit.angle is not None and not math.isfinite(limit.angle):
        yield Fault(
            f"the direction of limit {limit.id} is {limit.angle:g}",
            "give a direction in degrees from +x, or leave it out",
            f"{where}.angle",
            (limit.id,),
        )


def _joint_limit_faults(limit: JointLimit, part: Part, where: str) -> Iterator[Fault]:
    about = (limit.id,)
    found = find(part, limit.on)
    hole = found.record if found is not None else None
    if not isinstance(hole, CircleHole):
        what = "is not there" if found is None else "is no round hole"
        yield Fault(
            f"limit {limit.id} is on {limit.on}, which {what}",
            "choose a round hole that carries a pin",
            f"{where}.on",
            about,
        )
    if limit.rules not in joint_rules():
        yield Fault(
            f"limit {limit.id} asks for the rules “{limit.rules}”",
            f"choose one of: {', '.join(joint_rules())}",
            f"{where}.rules",
            about,
        )
    for name, words, example in (
        ("factor", "the factor", "1"),
        ("pin", "the pin", "12"),
        ("pin_strength", "the pin's strength", "800"),
    ):
        value = getattr(limit, name)
        if value is not None and not positive(value):
            yield Fault(
                f"{words} of limit {limit.id} is {value:g}",
                f"give a number above zero, e.g. {example}",
                f"{where}.{name}",
                about,
            )
    if isinstance(hole, CircleHole) and limit.pin is not None and limit.pin > hole.diameter:
        yield Fault(
            f"the pin of limit {limit.id} has {limit.pin:g} mm, its hole {hole.diameter:g} mm",
            "give a pin that goes into the hole",
            f"{where}.pin",
            about,
        )


def _stress_limit_faults(limit: StressLimit, where: str) -> Iterator[Fault]:
    if not positive(limit.factor):
        yield Fault(
            f"the factor of limit {limit.id} is {limit.factor:g}",
            "give a factor above zero, e.g. 1.5",
            f"{where}.factor",
            (limit.id,),
        )
    if limit.measure not in get_args(StressMeasure):
        yield Fault(
            f"limit {limit.id} is on “{limit.measure}”",
            f"choose one of: {', '.join(get_args(StressMeasure))}",
            f"{where}.measure",
            (limit.id,),
        )
    if limit.against not in ("proof_stress", "strength"):
        yield Fault(
            f"limit {limit.id} is against “{limit.against}”",
            "choose proof_stress or strength",
            f"{where}.against",
            (limit.id,),
        )


FIELDS: dict[type, str] = {StressLimit: "against", JointLimit: "rules", FatigueLimit: "case"}
"""The field of a limit that asks something of the material."""


def limit_material_faults(part: Part) -> Iterator[Fault]:
    """Limits that need a stress which the material of the wall or of a zone has not."""
    used = (part.material_of(zone) for zone in range(-1, len(part.zones)))
    materials = {m.name: m for m in used if m is not None}
    orthotropic = any(m.orthotropic for m in materials.values())
    for limit in part.limits:
        if isinstance(limit, StressLimit) and limit.measure in RULES and not orthotropic:
            yield Fault(
                f"limit {limit.id} counts strengths in a material's axes, but nothing here is "
                "orthotropic",
                "choose another stress for it, or an orthotropic material",
                f"limits.{limit.id}.measure",
                (limit.id,),
            )
        field = FIELDS.get(type(limit), "")
        for material in materials.values():
            if material.orthotropic:
                yield from _orthotropic_faults(limit, material)
                continue
            for stress in _asked(limit):
                if getattr(material, stress, 0.0) is not None:
                    continue
                words = stress.replace("_", " ")
                yield Fault(
                    f"limit {limit.id} asks for the {words}, which “{material.name}” has not",
                    f"give the material a {words}, or change the limit",
                    f"limits.{limit.id}.{field}",
                    (limit.id,),
                )
            if isinstance(limit, FatigueLimit):
                yield from fatigue_material_faults(limit, material)
            if isinstance(limit, StrainLimit) and hardening_curve(material) is None:
                yield Fault(
                    f"limit {limit.id} asks for a hardening curve, which “{material.name}” has not",
                    "give its hardening coefficient and exponent, or its strength and a family of "
                    f"which they are known ({', '.join(TYPICAL)})",
                    f"limits.{limit.id}",
                    (limit.id,),
                )
            if isinstance(limit, JointLimit):
                yield from _foreign_material(limit, material)


NOT_FOR_ORTHOTROPIC = {
    FatigueLimit: "the fatigue rules here are",
    StrainLimit: "Neuber's rule here is",
    JointLimit: "the rules for joints here are",
}
"""Limits whose rules are those of isotropic metals, with what the sentence begins with."""


def _orthotropic_faults(limit: Limit, material: Material) -> Iterator[Fault]:
    """What a limit cannot say of an orthotropic sheet, or asks of it in vain."""
    about = (limit.id,)
    words = NOT_FOR_ORTHOTROPIC.get(type(limit))
    if words is not None:
        yield Fault(
            f"limit {limit.id} cannot judge the orthotropic “{material.name}”: {words} for "
            "isotropic material",
            "remove it, and judge this by the sheet's own handbook",
            f"limits.{limit.id}",
            about,
        )
    if not isinstance(limit, StressLimit):
        return
    if limit.measure not in RULES:
        yield Fault(
            f"limit {limit.id} is on one stress for all directions, which says nothing of the "
            f"strength of the orthotropic “{material.name}”",
            "choose Tsai–Hill (tsai_hill) or the largest stress in its axes (largest_stress)",
            f"limits.{limit.id}.measure",
            about,
        )
        return
    missing = [AXIS_WORDS[name] for name in AXIS_STRENGTHS if getattr(material, name) is None]
    if missing:
        yield Fault(
            f"limit {limit.id} asks for strengths in its axes, and “{material.name}” lacks "
            f"{' and '.join(missing)}",
            "give the material all five strengths, as positive numbers",
            f"limits.{limit.id}.measure",
            about,
        )


def _asked(limit: Limit) -> tuple[str, ...]:
    """The stresses that a limit asks of a material, by their fields."""
    if isinstance(limit, StressLimit):
        return (limit.against,)
    if isinstance(limit, FatigueLimit):
        return ("strength",)
    if isinstance(limit, JointLimit) and limit.rules in joint_rules():
        return tuple(
            dict.fromkeys(s for c in joint_rules()[limit.rules].checks for s in c.stresses)
        )
    return ()


def _foreign_material(limit: JointLimit, material: Material) -> Iterator[Fault]:
    rules = joint_rules().get(limit.rules)
    if rules is None or material.family is None or material.family in rules.families:
        return
    yield Fault(
        f"the rules {rules.name} of limit {limit.id} are written for "
        f"{' and '.join(rules.families)}, not for the {material.family} “{material.name}”",
        "take what they say as a first guess only",
        f"limits.{limit.id}.rules",
        (limit.id,),
        blocks=False,
    )
