"""Bars of the handbooks, held free of any disturbance, read back from their own part file."""

from __future__ import annotations

import math
from dataclasses import replace

from screenapp.meshing.service import Mesher
from screenapp.model.findings import HandCheck
from screenapp.model.part import (
    BearingLoad,
    Case,
    CircleHole,
    FixedSupport,
    LineLoad,
    Load,
    Loop,
    Part,
    PinSupport,
    RollerSupport,
)
from screenapp.model.part_json import part_from_text, part_to_text
from screenapp.screening.screen import screen
from tests.model.plates import loop, plate, rectangle

T = 3.0
"""Thickness of every bar [mm]."""


def held(part: Part, left: str, end: str, *cases: Case) -> Part:
    """The bar on rollers along its left end, pulled and bent at its right end unless told else."""
    usual = (pulled(end), bent(end))
    return replace(
        part,
        supports=(RollerSupport("s1", left), RollerSupport("s2", "c1", 90.0)),
        cases=cases or usual,
    )


def pulled(end: str) -> Case:
    """10 N/mm along x on an edge."""
    return Case("k1", "pull", (LineLoad("l1", end, 10.0, 0.0),))


def bent(end: str) -> Case:
    """From 10 to -10 N/mm along x on an edge: a moment and no force."""
    return Case("k2", "bend", (LineLoad("l2", end, 10.0, 0.0, -10.0, 0.0),))


def strip(width: float, diameter: float, near: float, length: float = 400.0) -> Part:
    """A strip with a hole half way along, `near` above its lower edge."""
    hole = CircleHole("h1", (0.5 * length, near), diameter)
    return held(plate(rectangle(length, width), hole), "e4", "e2")


def stepped(wide: float, narrow: float, radius: float) -> Part:
    """A bar that steps down with two fillets, c3 and c6."""
    long, thin, y = 6.0 * wide, 4.0 * narrow, 0.5 * (wide - narrow)
    points = [(0.0, 0.0), (long, 0.0), (long, y), (long + thin, y)]
    points += [(long + thin, y + narrow), (long, y + narrow), (long, wide), (0.0, wide)]
    part = plate(loop(points, rounds={2: radius, 5: radius}))
    return held(replace(part, holes=()), "e8", "e4")


def notched(width: float, radius: float, off: float = 0.0, deep: float = 0.0) -> Part:
    """A strip with half-round notches, e2 below and e6 above, the upper one moved by `off`; or the
    lower one a shallower arc of depth `deep`."""
    x, length = 200.0, 400.0
    points = [(0.0, 0.0), (x - radius, 0.0), (x + radius, 0.0), (length, 0.0), (length, width)]
    points += [(x + off + radius, width), (x + off - radius, width), (0.0, width)]
    through = {1: (x, deep or radius), 5: (x + off, width - radius)}
    part = plate(loop(points, through=through))
    return held(replace(part, holes=()), "e8", "e4", pulled("e4"))


def lug(width: float, diameter: float, beyond: float, pushed: bool) -> Part:
    """A bar of 400 mm with a hole `beyond` from its right end, pulled by 1 kN there: by a pin that
    holds it, or by a bearing load."""
    hole = CircleHole("h1", (400.0 - beyond, 0.5 * width), diameter)
    part = plate(rectangle(400.0, width), hole)
    if not pushed:
        return held(part, "e4", "e2", Case("k1", "pull", (BearingLoad("l1", "h1", 1000.0, 0.0),)))
    pull = Case("k1", "pull", (LineLoad("l1", "e4", -1000.0 / width, 0.0),))
    supports = (PinSupport("s1", "h1"), RollerSupport("s2", "c1", 90.0))
    return replace(part, supports=supports, cases=(pull,))


def hook(inner: float, outer: float, leg: float, *loads: Load) -> Part:
    """A U of half rings with straight legs, fixed at one leg and spread apart at the other."""
    points = [(-leg, -outer), (0.0, -outer), (0.0, outer), (-leg, outer)]
    points += [(-leg, inner), (0.0, inner), (0.0, -inner), (-leg, -inner)]
    return _curved(
        loop(points, through={1: (outer, 0.0), 5: (inner, 0.0)}),
        loads or (LineLoad("l1", "e4", 0.0, 10.0),),
    )


def elbow(inner: float, outer: float, leg: float) -> Part:
    """A quarter ring with straight legs, its free leg pulled outwards at 45°."""
    points = [(-leg, inner), (0.0, inner), (inner, 0.0), (inner, -leg)]
    points += [(outer, -leg), (outer, 0.0), (0.0, outer), (-leg, outer)]
    s = math.sqrt(0.5)
    outline = loop(points, through={1: (inner * s, inner * s), 5: (outer * s, outer * s)})
    return _curved(outline, (LineLoad("l1", "e4", 10.0, -10.0),))


def _curved(outline: Loop, loads: tuple[Load, ...]) -> Part:
    return replace(
        plate(outline),
        holes=(),
        supports=(FixedSupport("s1", "e8"),),
        cases=(Case("k1", "load", loads),),
    )


def checks(part: Part, mesher: Mesher) -> tuple[HandCheck, ...]:
    """What a user finds who opens the part's file and screens it."""
    return screen(part_from_text(part_to_text(part)), mesher).hand_checks
