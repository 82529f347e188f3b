"""Holes that carry a pin or bolt, judged by handbook rules from the force on them in each case."""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass

from screenapp.model.combinations import loadings
from screenapp.model.estimate_text import plain
from screenapp.model.findings import CaseFindings, Estimate, LimitFindings
from screenapp.model.hole_distances import HoleDistances, hole_distances
from screenapp.model.joint_rules import ABSENT, JointRules, joint_rules
from screenapp.model.members import all_holes, bolt_holes, patterned, shared, spread_loads, whole_id
from screenapp.model.part import (
    BearingLoad,
    BoltSupport,
    Case,
    CircleHole,
    ForceLoad,
    JointLimit,
    Load,
    Material,
    Part,
    Point,
)
from screenapp.model.shape import Shape
from screenapp.model.solution import BoltForce, Reaction
from screenapp.screening.passes import Pass
from screenapp.screening.trust import Sample, judge
from screenapp.screening.use import exact, scaled, verdict_on

NOTHING = 1e-7
"""A reaction below this share of the force that the largest stress puts on the hole's projected
area is rounding."""


MOST_USE = 1000.0
"""What has next to no resistance counts as used so many times."""


@dataclass(frozen=True)
class HoleForce:
    """The force that a pin puts on a hole: its size [N] with band, and its components [N]."""

    size: Estimate
    x: float
    y: float
    whence: str


def judge_joint(
    limit: JointLimit,
    part: Part,
    case: CaseFindings,
    k: int,
    shape: Shape | None,
    passes: Sequence[Pass],
) -> tuple[LimitFindings, ...]:
    """Every rule of the limit's set at every hole that it is on, in case `k`."""
    rules = joint_rules()[limit.rules]
    found: list[LimitFindings] = []
    for hole in holes_of(limit, part):
        force = hole_force(part, hole, k, passes, case)
        if shape is None or force is None:
            found.append(_open(limit, hole, case, shape is None))
        elif force.size.value == 0.0:
            found.append(_row(limit, case, hole, "no force on it", exact(0.0), "", ""))
        else:
            found += _rows(limit, rules, part, shape, case, hole, force)
    return tuple(found)


def holes_of(limit: JointLimit, part: Part) -> tuple[CircleHole, ...]:
    """The round holes that a limit is on: one, or all of a pattern."""
    return tuple(
        h
        for h in all_holes(part)
        if isinstance(h, CircleHole) and limit.on in (h.id, whole_id(h.id))
    )


def hole_force(
    part: Part, hole: CircleHole, k: int, passes: Sequence[Pass], found: CaseFindings
) -> HoleForce | None:
    """What loads and supports put on a hole in a case, or None where that cannot be told: a
    support holds a whole pattern, or the screening was not kept."""
    case = loadings(part)[k]
    loads = [load for load in _loads(part, case) if load.on == hole.id]
    x, y = sum(load.x for load in loads), sum(load.y for load in loads)
    whole = whole_id(hole.id)
    bolted = {s.id for s in part.supports if isinstance(s, BoltSupport)}
    supports = {s.id for s in part.supports if s.on == hole.id and s.id not in bolted}
    supports |= {
        s.id
        for s in part.supports
        if isinstance(s, BoltSupport) and any(h.id == hole.id for h in bolt_holes(part, s))
    }
    if whole != hole.id and any(s.on == whole and s.id not in bolted for s in part.supports):
        return None
    if not supports:
        return HoleForce(exact(math.hypot(x, y)), x, y, "from the loads")
    if not passes:
        return None
    forces: list[Point] = []
    for this in passes:
        given: list[Reaction | BoltForce] = []
        for r in this.fields.solution.reactions[k]:
            if r.support in supports:
                given += [b for b in r.bolts if b.on == hole.id] if r.bolts else [r]
        forces.append((x + sum(r.x for r in given), y + sum(r.y for r in given)))
    fx, fy = forces[-1]
    size = math.hypot(fx, fy)
    stress = max((abs(peak.estimate.value) for peak in found.peaks), default=0.0)
    if size <= NOTHING * stress * part.wall.thickness * hole.diameter:
        return HoleForce(exact(0.0), 0.0, 0.0, "")
    samples = [
        Sample(math.hypot(a, b), float(this.sizes.mean()))
        for (a, b), this in zip(forces, passes, strict=True)
    ]
    return HoleForce(
        judge(samples, part.mesh.tolerance, size), fx, fy, "from the reaction of its support"
    )


def _loads(part: Part, case: Case) -> list[BearingLoad | ForceLoad]:
    wholes = {h.id: h for h in part.holes if patterned(h)}
    found: list[Load] = []
    for load in spread_loads(part, case):
        if isinstance(load, ForceLoad) and load.on in wholes:
            found += shared(load, wholes[load.on])
        else:
            found.append(load)
    return [load for load in found if isinstance(load, BearingLoad | ForceLoad)]


def _rows(
    limit: JointLimit,
    rules: JointRules,
    part: Part,
    shape: Shape,
    case: CaseFindings,
    hole: CircleHole,
    force: HoleForce,
) -> list[LimitFindings]:
    distances = hole_distances(shape, hole, (force.x, force.y))
    thickness, material = _weakest(part, shape, hole)
    if material is None or material.strength is None or material.proof_stress is None:
        return [_open(limit, hole, case, True)]
    values = {
        "d0": hole.diameter,
        "d": limit.pin or hole.diameter,
        "e1": distances.e1,
        "e2": distances.e2,
        "p1": distances.p1,
        "p2": distances.p2,
        "clear": distances.clear,
        "net": distances.net,
        "t": thickness,
        "fu": material.strength,
        "fy": material.proof_stress,
        "fub": limit.pin_strength or material.strength,
    }
    way = math.degrees(math.atan2(force.y, force.x)) % 360.0
    base = (
        f"force {force.size.value:.4g} N at {way:.0f}° {force.whence}"
        + (f" times {limit.factor:g}" if limit.factor != 1.0 else "")
        + f"; {_measured(distances)}; wall {thickness:g} mm of {material.name}; "
        + (f"pin {limit.pin:g} mm" if limit.pin else "pin as large as the hole")
        + ("" if limit.pin_strength else ", at least as strong as the wall")
    )
    found: list[LimitFindings] = []
    for check in rules.checks:
        resistance = rules.value(check.resistance, values)
        least = limit.factor * force.size.value / MOST_USE
        used = scaled(force.size, limit.factor / max(resistance, least))
        why = (
            f"{check.name} at hole {hole.id} uses {plain(used.value, 2)} of its resistance of "
            f"{resistance:.4g} N under “{case.name}” ({rules.name}, {check.source})"
        )
        assumed = f"{check.assumes}; {base}; {rules.source}, {check.source}"
        found.append(_row(limit, case, hole, check.name, used, why, assumed))
    for rule in rules.distances:
        measured = values[rule.measured]
        if measured >= ABSENT:
            continue
        least = rules.value(rule.least, values)
        name = f"{rule.name} {rule.measured} ≥ {rule.least.replace('*', ' ')}"
        why = (
            f"{rule.name} {rule.measured} of hole {hole.id} is {measured:.4g} mm, under the "
            f"{least:.4g} mm of {rules.name}, {rule.source}"
        )
        assumed = f"{base}; {rules.source}, {rule.source}"
        found.append(_row(limit, case, hole, name, exact(least / measured), why, assumed))
    return found


def _weakest(part: Part, shape: Shape, hole: CircleHole) -> tuple[float, Material | None]:
    """Thickness [mm] and material of the wall at the rim; where zones meet there, of the one that
    bears least by thickness times strength."""
    pieces = [i for i, c in enumerate(shape.curves) if shape.hole_ids[c.loop] == hole.id]
    walls = []
    for zone in {shape.zone_behind(i) for i in pieces}:
        material = part.material_of(zone)
        thickness = part.wall_of(zone).thickness
        strength = material.strength if material is not None and material.strength else 0.0
        walls.append((thickness * strength, thickness, material))
    _, thickness, material = min(walls, key=lambda w: w[0])
    return thickness, material


def _measured(d: HoleDistances) -> str:
    """The distances in words; where two stand for one direction, both."""
    ahead = f"e1 {d.e1:.4g} mm" if d.e1 < ABSENT else f"p1 {d.p1:.4g} mm"
    beside = [f"{n} {v:.4g} mm" for n, v in (("e2", d.e2), ("p2", d.p2)) if v < ABSENT]
    return f"{ahead} to {d.feature}, {' and '.join(beside)} (nearer side {d.beside})"


def _row(
    limit: JointLimit,
    case: CaseFindings,
    hole: CircleHole,
    name: str,
    used: Estimate,
    why: str,
    assumed: str,
) -> LimitFindings:
    verdict = verdict_on(used)
    if verdict == "undecided" and used.trust != "settled":
        why = f"the force on hole {hole.id} under “{case.name}” is not settled"
    elif verdict == "undecided":
        why = f"{why}: too near to all of it to tell"
    return LimitFindings(
        limit.id,
        f"hole {hole.id}: {name}, {limit.rules}",
        case.case,
        used,
        verdict,
        hole.centre,
        f"hole {hole.id}",
        "" if verdict == "holds" else why,
        assumed,
        f"{hole.id} {name.split(' ≥')[0]}",
    )


def _open(limit: JointLimit, hole: CircleHole, case: CaseFindings, unkept: bool) -> LimitFindings:
    why = (
        "the fields of the screening were not kept, or the wall has no strength and proof stress"
        if unkept
        else f"a support holds the whole pattern {whole_id(hole.id)}: hold its holes one by one, "
        "so that each has a reaction of its own"
    )
    return LimitFindings(
        limit.id,
        f"hole {hole.id}, {limit.rules}",
        case.case,
        Estimate(0.0, 0.0, math.inf, "unsettled"),
        "undecided",
        hole.centre,
        f"hole {hole.id}",
        f"hole {hole.id} cannot be judged by {limit.rules}: {why}",
    )
