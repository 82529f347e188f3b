"""What plain bilinear quads would show on the very mesh of the last pass.

The mesh is solved once more with its corner nodes alone and read in the same way, so that whatever
differs is the element's doing: an engineer who has to explain a mesh made elsewhere sees how much
of its stiffness was spurious shear.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import replace

import numpy as np

from screenapp.mechanics.loads import nodal_forces
from screenapp.mechanics.recovery import recover
from screenapp.mechanics.solve import solve
from screenapp.mechanics.thermal import thermal_forces
from screenapp.model.combinations import loadings
from screenapp.model.findings import CaseFindings, Fields, Peak, PlainLoss
from screenapp.model.part import ElementName, Part
from screenapp.model.progress import SILENT, Progress
from screenapp.model.shape import Shape
from screenapp.model.stress_measures import stress_measure
from screenapp.screening.passes import Pass

PLAIN: ElementName = "quad4"
GOOD: ElementName = "quad9"

_REACH = 2.0
"""The peak of the other mesh is the highest within this many elements of the place."""


def plain_losses(
    part: Part,
    shape: Shape,
    last: Pass,
    cases: Sequence[CaseFindings],
    progress: Progress = SILENT,
) -> tuple[PlainLoss, ...]:
    """The comparison for every case.

    A part that is itself made of plain quads is compared with nine-node quads on its mesh.

    Raises:
        Cancelled: the user asked to stop.
    """
    own_plain = last.fields.solution.element == PLAIN
    other = _solved(part, shape, last, GOOD if own_plain else PLAIN, progress)
    plain, good = (last, other) if own_plain else (other, last)
    return tuple(_loss(part, shape, plain, good, last, case, k) for k, case in enumerate(cases))


def _solved(part: Part, shape: Shape, last: Pass, element: ElementName, progress: Progress) -> Pass:
    """The same mesh solved with another element."""
    changed = replace(part, mesh=replace(part.mesh, element=element))
    mesh = last.fields.mesh
    solution = solve(changed, shape, mesh, progress)
    progress.check()
    return Pass(
        changed, shape, Fields(mesh, solution, recover(changed, shape, mesh, solution)), last.spots
    )


def _loss(
    part: Part, shape: Shape, plain: Pass, good: Pass, last: Pass, case: CaseFindings, k: int
) -> PlainLoss:
    peak = next(
        (p for p in case.peaks if p.quantity == "von_mises" and p.estimate.trust != "rising"), None
    )
    return PlainLoss(
        case.case,
        _lost(*(_energy(part, shape, one, k) for one in (plain, good))),
        _lost(*(_moved(one, case, k) for one in (plain, good))),
        None if peak is None else _lost(*(_highest(one, last, peak, k) for one in (plain, good))),
        "" if peak is None else peak.place,
    )


def _lost(plain: float, good: float) -> float:
    """The share that the plain quads show too little; 0 where there is nothing to lose."""
    return 1.0 - plain / good if abs(good) > 0.0 and math.isfinite(plain) else 0.0


def _energy(part: Part, shape: Shape, this: Pass, k: int) -> float:
    """Strain energy of a case [N·mm]: half the work of loads and of supports that are moved."""
    solution = this.fields.solution
    forces = nodal_forces(this.part, shape, this.fields.mesh, loadings(part)[k])
    if solution.free_strains is not None:
        forces = forces + thermal_forces(this.part, this.fields.mesh, solution.free_strains)[k]
    if solution.support_forces is not None:
        forces = forces + solution.support_forces[k]
    return 0.5 * float(np.sum(forces * solution.displacements[k]))


def _moved(this: Pass, case: CaseFindings, k: int) -> float:
    """Size of the displacement where the findings have their largest [mm]."""
    nodes = this.fields.mesh.nodes
    nearest = int(np.argmin(np.hypot(*(nodes - case.displacement_at).T)))
    return float(np.hypot(*this.fields.solution.displacements[k, nearest]))


def _highest(this: Pass, last: Pass, peak: Peak, k: int) -> float:
    """The peak as a mesh shows it [MPa]: its highest value close by, else the value at the place.

    Both meshes are the same, so the size of the elements is taken from the last pass.
    """
    at = np.array([peak.at])
    reach = _REACH * float(last.read(at).size[0])
    near = [p.value for p in this.peaks("von_mises", k) if math.dist(p.at, peak.at) <= reach]
    if near:
        return max(near)
    read = this.read(at)
    return float(stress_measure("von_mises", read.stress[k, 0], this.part, read.zones[k, 0]))
