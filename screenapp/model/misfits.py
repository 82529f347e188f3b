"""Supports that are not where the drawing has them: how far off in every case, and faults."""

from __future__ import annotations

import math
from collections.abc import Iterator
from dataclasses import replace

import numpy as np
from numpy.typing import NDArray

from screenapp.model.errors import Fault
from screenapp.model.part import Case, MisfitLoad, Part, SymmetrySupport
from screenapp.model.rigid_motions import Held, held_by
from screenapp.model.shape import Shape
from screenapp.model.support_faults import clash
from screenapp.model.support_records import gives_way

Floats = NDArray[np.float64]

_NOTHING = 1e-12
"""Share of the misfit that is nothing along a direction but rounding."""


def movements(part: Part, cases: tuple[Case, ...]) -> Floats | None:
    """How far the supports are off in each case, (n_cases, n_supports, 2) [mm]; None where all are
    in place."""
    number = {support.id: k for k, support in enumerate(part.supports)}
    out = np.zeros((len(cases), len(number), 2))
    for case, own in zip(cases, out, strict=True):
        for load in case.loads:
            if isinstance(load, MisfitLoad) and load.support in number:
                own[number[load.support]] += (load.x, load.y)
    return out if out.any() else None


def without_orphans(part: Part) -> tuple[Part, tuple[str, ...]]:
    """The part without misfits of supports that are gone, and what was taken away in words."""
    there = {support.id for support in part.supports}
    gone = [
        (case, load)
        for case in part.cases
        for load in case.loads
        if isinstance(load, MisfitLoad) and load.support not in there
    ]
    if not gone:
        return part, ()
    lost = {load.id for _, load in gone}
    cases = tuple(
        replace(c, loads=tuple(x for x in c.loads if x.id not in lost)) for c in part.cases
    )
    words = tuple(f"load {x.id} on support {x.support} (case “{c.name}”)" for c, x in gone)
    return replace(part, cases=cases), words


def misfit_faults(part: Part, load: MisfitLoad, name: str, where: str) -> Iterator[Fault]:
    """A misfit of a support that is not there, or that cannot be off."""
    support = next((s for s in part.supports if s.id == load.support), None)
    if support is None:
        known = ", ".join(s.id for s in part.supports) or "none yet"
        yield Fault(
            f"{name} is of support “{load.support}”, which is not there",
            f"choose one of: {known}; or remove it",
            f"{where}.support",
            (load.id,),
        )
    elif isinstance(support, SymmetrySupport):
        yield Fault(
            f"{name} moves {support.id}, which is a line of symmetry",
            "hold the edge by a roller instead, or remove the misfit",
            f"{where}.support",
            (load.id, support.id),
        )


def misfit_faults_of_case(part: Part, case: Case, shape: Shape) -> Iterator[Fault]:
    """Misfits that nothing feels, that are as large as the part, or that contradict each other."""
    mine = [load for load in case.loads if isinstance(load, MisfitLoad)]
    moved = movements(part, (case,))
    if not mine or moved is None:
        return
    where = {load.support: f"cases.{case.id}.loads.{load.id}" for load in mine}
    ids = {load.support: load.id for load in mine}
    held = [
        _moved(held_by(part, support, shape), off)
        for support, off in zip(part.supports, moved[0], strict=True)
    ]
    for support, off, (own, along) in zip(part.supports, moved[0], held, strict=True):
        size = math.hypot(*off)
        if support.id not in ids or not size > 0.0:
            continue
        named = (ids[support.id], support.id)
        if size > shape.size:
            yield Fault(
                f"support {support.id} is {size:g} mm off in case “{case.name}”, farther than the "
                "part is large",
                "give a misfit far smaller than the part",
                where[support.id],
                named,
            )
        elif len(own.points) and np.abs(along).max() <= _NOTHING * size:
            yield Fault(
                f"the misfit of support {support.id} in case “{case.name}” is along a direction in "
                "which it does not hold",
                "turn it, or hold the place in that direction too",
                where[support.id],
                named,
            )
    rigid = [k for k, s in enumerate(part.supports) if not gives_way(s)]
    for a in rigid:
        for b in rigid:
            one, other = part.supports[a].id, part.supports[b].id
            if b <= a or not (one in ids or other in ids):
                continue
            at = clash(held[a][0].points, held[b][0].points, (held[a][0], held[b][0]))
            if at is not None:
                yield Fault(
                    f"supports {one} and {other} meet at ({at[0]:.4g}, {at[1]:.4g}) and are off by "
                    f"different amounts in case “{case.name}”",
                    "give both the same misfit, or put them on places that do not touch",
                    where.get(one, where.get(other, "")),
                    (ids.get(one, ids.get(other, "")), one, other),
                    at,
                )


def _moved(held: Held, off: Floats) -> tuple[Held, Floats]:
    """What a support that is off holds, and how far it is off along each of its directions."""
    along = held.directions @ off
    return Held(held.points, held.directions, held.values + along), along
