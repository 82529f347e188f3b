"""Fatigue limits that cannot be judged, and what they ask of a material that has it not."""

from __future__ import annotations

import math
from collections.abc import Iterator
from typing import get_args

from screenapp.model.errors import Fault
from screenapp.model.fatigue import TYPICAL, fatigue_figures
from screenapp.model.limit_records import FatigueLimit, MeanStress, NotchRule
from screenapp.model.part import Material, Part


def fatigue_limit_faults(limit: FatigueLimit, part: Part, where: str) -> Iterator[Fault]:
    """Cases that are not there, numbers and words that will not do."""
    known = [*(c.id for c in part.cases), *(c.id for c in part.combinations)]
    about = (limit.id,)
    for name in ("case", "other"):
        case = getattr(limit, name)
        if case is not None and case not in known:
            yield Fault(
                f"limit {limit.id} names a case {case} that is not there",
                f"choose one of: {', '.join(known) or 'none yet'}",
                f"{where}.{name}",
                about,
            )
    if limit.case == limit.other:
        yield Fault(
            f"limit {limit.id} swings between {limit.case} and itself",
            "choose another case, or no load",
            f"{where}.other",
            about,
        )
    if not (math.isfinite(limit.cycles) and limit.cycles >= 1.0):
        yield Fault(
            f"limit {limit.id} asks for {limit.cycles:g} cycles",
            "give a number of at least 1, e.g. 1e6",
            f"{where}.cycles",
            about,
        )
    if not (math.isfinite(limit.factor) and limit.factor > 0.0):
        yield Fault(
            f"the factor of limit {limit.id} is {limit.factor:g}",
            "give a factor above zero, e.g. 1.5",
            f"{where}.factor",
            about,
        )
    for name, allowed in (("mean", MeanStress), ("notch", NotchRule)):
        value = getattr(limit, name)
        if value not in get_args(allowed):
            yield Fault(
                f"the {name} of limit {limit.id} is “{value}”",
                f"choose one of: {', '.join(get_args(allowed))}",
                f"{where}.{name}",
                about,
            )


def fatigue_material_faults(limit: FatigueLimit, material: Material) -> Iterator[Fault]:
    """A material without fatigue figures, or for which a notch rule has no constant."""
    if material.strength is None:
        return  # told beside the strength itself
    if fatigue_figures(material) is None:
        yield Fault(
            f"limit {limit.id} asks for fatigue figures, which “{material.name}” has not",
            "give its fatigue coefficient and exponent, or a family of which they are known "
            f"({', '.join(TYPICAL)})",
            f"limits.{limit.id}.case",
            (limit.id,),
        )
    known = {"peterson": ("steel", "aluminium"), "neuber": ("steel",)}
    if limit.notch in known and material.family not in known[limit.notch]:
        yield Fault(
            f"the notch rule of limit {limit.id} has no constant for “{material.name}”: "
            f"it is known of {' and '.join(known[limit.notch])}",
            "let the notches count in full",
            f"limits.{limit.id}.notch",
            (limit.id,),
        )
