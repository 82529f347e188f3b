"""From findings and a view to the scalars that are painted: plain arrays, no Qt."""

from __future__ import annotations

from dataclasses import dataclass
from math import floor, log10

import numpy as np
from numpy.typing import NDArray

from screenapp.model.allowables import allowables
from screenapp.model.findings import Fields
from screenapp.model.material_axes import RULES
from screenapp.model.part import Part, StressLimit
from screenapp.model.solution import principal
from screenapp.model.stress_measures import stress_measure

Floats = NDArray[np.float64]
Ints = NDArray[np.int64]

STRESS_NAMES = {
    "von_mises": "von Mises",
    "tresca": "Tresca",
    "sigma_1": "σ₁ largest principal",
    "sigma_2": "σ₂ smallest principal",
    "sigma_x": "σx",
    "sigma_y": "σy",
    "tau_xy": "τxy",
}
DISPLACEMENT_NAMES = {"u": "displacement", "u_x": "displacement in x", "u_y": "displacement in y"}

DEFORMATION_SHARE = 0.08
"""The largest displacement is drawn as about this share of the part's size."""

ZONE_SHARE = 0.015
"""The hatched zone round an untrusted peak reaches at least this share of the part's size."""

ZONE_ELEMENTS = 2.0
"""... and at least this many elements of the size that stands at the peak."""


@dataclass(frozen=True)
class NoField:
    """Why there is nothing to paint, in words for the user."""

    why: str


def stress_of(fields: Fields, case: int, component: str, part: Part) -> Floats:
    """One stress component [MPa] at every node, (n_nodes,), or where zones meet at the nodes of
    each element, (n_elements, 9)."""
    return fields.mesh.paintable(_component(fields, case, component, part))


def _component(fields: Fields, case: int, component: str, part: Part) -> Floats:
    """One stress component in the numbers of `Mesh.field_quads`, (n_fields,)."""
    stress = fields.stress.nodal[case]
    if component == "sigma_2":
        return principal(stress)[1]
    if component not in ("sigma_x", "sigma_y", "tau_xy"):
        return stress_measure(component, stress, part, fields.mesh.field_zones)
    return np.asarray(stress[:, ("sigma_x", "sigma_y", "tau_xy").index(component)])


def displacement_of(fields: Fields, case: int, component: str) -> Floats:
    """The displacement or one of its components at every node [mm], (n_nodes,)."""
    u = fields.solution.displacements[case]
    if component == "u":
        return np.asarray(np.hypot(u[:, 0], u[:, 1]))
    return np.asarray(u[:, 0 if component == "u_x" else 1])


def utilisation_of(fields: Fields, case: int, part: Part) -> Floats | NoField:
    """Share of the allowable stress used, shaped as by `stress_of`: the worst stress limit's."""
    limits = [limit for limit in part.limits if isinstance(limit, StressLimit)]
    if not limits:
        return NoField("No limit on stress is set: add one under 5 Limits to see how much is used")
    shares: list[Floats] = []
    for limit in limits:
        allowed = allowables(limit, part)
        if allowed is None:
            what = "no proof stress" if limit.against == "proof_stress" else "no strength"
            if limit.measure in RULES:
                what = "not all strengths in its axes"
            return NoField(f"The material has {what}: give it under 2 Wall")
        # compression uses nothing of a limit on the largest principal stress
        measured = np.maximum(_component(fields, case, limit.measure, part), 0.0)
        shares.append(measured / np.array(allowed)[fields.mesh.field_zones + 1])
    return fields.mesh.paintable(np.asarray(np.max(shares, axis=0)))


def error_share_of(fields: Fields, case: int, tolerance: float) -> Floats:
    """Each element's estimated error over its fair share of the tolerance, (n_elements, 9).

    The squares of the shares of n equal elements that together meet the tolerance are
    tolerance² / n each, so 1.0 is an element that spends just what it may.
    """
    error = fields.stress.energy_error[case]
    share = error * np.sqrt(len(error)) / tolerance
    return np.repeat(share[:, None], 9, axis=1)


def deformation_factor(fields: Fields, case: int) -> float:
    """A round factor (1, 2 or 5 times a power of ten) that lets the deformation be seen."""
    u = fields.solution.displacements[case]
    most = float(np.hypot(u[:, 0], u[:, 1]).max())
    size = float(np.hypot(*np.ptp(fields.mesh.nodes, axis=0)))
    if not most > 0.0:
        return 1.0
    wanted = DEFORMATION_SHARE * size / most
    power = 10.0 ** floor(log10(wanted))
    return max(step for step in (1.0, 2.0, 5.0) if step * power <= wanted * 1.0001) * power


def drawn_points(fields: Fields, case: int, factor: float) -> Floats:
    """Places of the nodes with the displacement drawn `factor` times [mm], (n_nodes, 2)."""
    if factor == 0.0:
        return fields.mesh.nodes
    return np.asarray(fields.mesh.nodes + factor * fields.solution.displacements[case])


def moved(fields: Fields, case: int, factor: float, at: tuple[float, float]) -> tuple[float, float]:
    """Where a place of the part is drawn [mm], by the displacement of the node nearest to it."""
    if factor == 0.0:
        return at
    nearest = int(((fields.mesh.nodes - at) ** 2).sum(axis=1).argmin())
    dx, dy = factor * fields.solution.displacements[case, nearest]
    return at[0] + float(dx), at[1] + float(dy)


def zone_round(fields: Fields, at: tuple[float, float]) -> Ints:
    """Elements of the zone round an untrusted peak at `at` [mm]; at least one.

    Stress near a point where it keeps rising is as untrustworthy as the peak; the zone reaches
    two elements of the size found there, and never less than can be seen on the whole part.
    """
    mesh = fields.mesh
    distance = np.hypot(*(mesh.nodes - at).T)[mesh.quads].min(axis=1)
    nearest = int(distance.argmin())
    size = float(np.hypot(*np.ptp(mesh.nodes, axis=0)))
    reach = max(ZONE_ELEMENTS * float(mesh.element_sizes[nearest]), ZONE_SHARE * size)
    return np.flatnonzero(distance <= max(reach, float(distance[nearest])))
