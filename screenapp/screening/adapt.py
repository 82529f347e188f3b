"""The sizes of the next mesh, from what the last one shows.

Two criteria, the smaller size wins: every element should carry the same share of the energy error
(Zienkiewicz & Zhu 1987, exponent 1/(p+1)), and where the stress is above 0.6 of the case's level
the pointwise gap between the recovered and the elements' own stress should be a set share of that
level; what lies round singular places does not count.
Where a peak or a reading is not settled, the mesh goes on to be refined by what its band exceeds.
"""

from __future__ import annotations

import itertools
import math
from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from screenapp.mechanics.singular_spot import SingularSpot
from screenapp.model.combinations import loadings
from screenapp.model.findings import CaseFindings, Estimate, Reading
from screenapp.model.material_axes import RULES
from screenapp.model.part import Part, Point
from screenapp.model.shape import Shape
from screenapp.model.stress_measures import stress_measure
from screenapp.screening.passes import Pass
from screenapp.screening.structural import reading_places
from screenapp.screening.tracking import measures

Floats = NDArray[np.float64]

HIGH_SHARE = 0.6
NEAR = 2.0001
"""Nodes within so many elements belong to a place; a little more than two, so that rounding does
not choose among those that lie two sides away."""
FACTOR_LEAST, FACTOR_MOST = 0.25, 1.5
_SPOT_SHRINK = 0.4
"""Elements at a singular place shrink by this on each pass, to see whether the stress rises."""
_SPOT_LEAST = 1.0 / 40.0
"""... but not below this share of their first size."""


def order(element: str) -> int:
    """Degree of the displacements along a side: 1 or 2."""
    return 1 if element.startswith("quad4") else 2


@dataclass(frozen=True)
class Target:
    """A number that somebody waits for: its place [mm] and its half band over what is allowed.

    With an excess of up to 1 it is settled; the mesh there must not become coarser again, or the
    number would move by what the coarser mesh lacks.
    """

    at: Point
    excess: float


def targets(
    part: Part,
    shape: Shape,
    spots: Sequence[SingularSpot],
    cases: Sequence[CaseFindings],
    readings: Sequence[Reading],
) -> tuple[Target, ...]:
    """Where the next mesh must be as fine or finer for the sake of a peak or a reading."""
    found: list[Target] = []
    for case in cases:
        for peak in case.peaks:
            if peak.estimate.trust != "rising":
                found.append(Target(peak.at, _excess(peak.estimate, peak.allowed or 0.0)))
            beside = peak.structural
            if beside is not None:
                excess = _excess(beside, part.mesh.tolerance * abs(beside.value))
                near = [s for s in spots if math.dist(s.at, peak.at) < 1e-9 * shape.size]
                places = [p for s in near for p in reading_places(part, shape, s)]
                found += [Target(p, excess) for p in places]
    for reading in readings:
        stresses = [e for name, e in reading.values.items() if not name.startswith("u_")]
        if any(e.trust == "rising" for e in stresses):
            continue
        worst = max(_excess(e, reading.allowed or 0.0) for e in stresses)
        found.append(Target(reading.at, worst))
    return tuple(found)


def _excess(estimate: Estimate, allowed: float) -> float:
    half = 0.5 * (estimate.high - estimate.low)
    if estimate.trust == "settled" or allowed <= 0.0 or not math.isfinite(half):
        return 1.0
    return max(1.0 + 1e-9, half / allowed)


def wanted_sizes(
    part: Part,
    last: Pass,
    spots: Sequence[SingularSpot],
    first_sizes: Sequence[float],
    watched: Sequence[Target] = (),
) -> Floats:
    """Wanted element size [mm] at each node of the last mesh, (n_nodes,).

    Args:
        part: the part; its tolerance sets how far to go.
        last: the last pass.
        spots: singular places.
        first_sizes: element size [mm] at each spot on the first pass.
        watched: numbers that somebody waits for.
    """
    mesh = last.fields.mesh
    size = last.node_sizes
    factor = np.minimum(_energy_factor(part, last), _point_factor(part, last))
    wanted = size * np.clip(factor, FACTOR_LEAST, FACTOR_MOST)
    p = order(last.fields.solution.element)
    for target in watched:
        far = np.hypot(*(mesh.nodes - target.at).T)
        near = far < NEAR * size[_first_least(far)]
        shrink = 1.0
        if target.excess > 1.0:
            shrink = min(0.7, max(FACTOR_LEAST, target.excess ** (-1.0 / p)))
        wanted[near] = np.minimum(wanted[near], shrink * size[near])
    for spot, first in zip(spots, first_sizes, strict=True):
        if spot.creep > 0.0:
            continue  # its growth is known, and too slow to be seen
        far = np.hypot(*(mesh.nodes - spot.at).T)
        here = _first_least(far)
        floor = first * _SPOT_LEAST
        # the energy criterion alone would refine towards a singular place without end
        near = far < NEAR * size[here]
        wanted[near] = np.maximum(wanted[near], floor)
        wanted[here] = max(_SPOT_SHRINK * size[here], floor)
    return np.asarray(wanted)


def energy_goal(tolerance: float) -> float:
    """Relative energy-norm error of the whole that goes with a tolerance of the stresses.

    At 2 % stresses this asks for 3.5 %, at 0.2 % for 1.1 % (an energy-norm error enters a
    displacement by its square, a stress inside by about itself, a recovered one by less).
    """
    return 0.25 * float(np.sqrt(tolerance))


def _first_least(far: Floats) -> int:
    """The first of the nodes that are nearest but for rounding."""
    least = float(far.min())
    return int(np.flatnonzero(far <= least + 1e-9 * float(far.max()))[0])


def _energy_factor(part: Part, last: Pass) -> Floats:
    mesh = last.fields.mesh
    error = last.fields.stress.energy_error.max(axis=0)  # the worst case counts
    share = energy_goal(part.mesh.tolerance) / np.sqrt(mesh.n_elements)
    p = order(last.fields.solution.element)
    factor = (share / np.maximum(error, 1e-3 * share)) ** (1.0 / (p + 1.0))
    nodal = np.full(mesh.n_nodes, np.inf)
    np.minimum.at(nodal, mesh.quads, np.broadcast_to(factor[:, None], mesh.quads.shape))
    return nodal


def _point_factor(part: Part, last: Pass) -> Floats:
    mesh = last.fields.mesh
    p = order(last.fields.solution.element)
    factor = np.full(mesh.n_nodes, np.inf)
    rules = [name for name in measures(part) if name in ("von_mises", *RULES)]
    for k, name in itertools.product(range(len(loadings(part))), rules):
        value = stress_measure(name, last.fields.stress.nodal[k], part, mesh.field_zones)
        level = last.level(name, k)
        if level <= 0.0:
            continue
        high = (value > HIGH_SHARE * level) & ~last.round_spots(k)[mesh.field_nodes]
        goal = part.mesh.tolerance * level
        doubt = np.maximum(last.doubt_of(name)[k], 1e-3 * goal)
        np.minimum.at(factor, mesh.field_nodes[high], (goal / doubt[high]) ** (1.0 / p))
    return factor
