"""What the equations gave: displacements, reactions and the checks on them, for every case.

Cases keep the order of `combinations.loadings`.  Stress arrays hold σx, σy, τxy [MPa] on their last
axis.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from screenapp.model.part import ElementName, Point

Floats = NDArray[np.float64]


@dataclass(frozen=True)
class BoltForce:
    """What the bolt in the hole `on` gives: force `x`, `y` [N]."""

    on: str
    x: float
    y: float


@dataclass(frozen=True)
class Reaction:
    """What one support gives: force `x`, `y` [N] and moment about the origin [N·mm]; `bolts` are
    its shares where it is a group of bolts."""

    support: str
    x: float
    y: float
    moment: float
    bolts: tuple[BoltForce, ...] = ()


@dataclass(frozen=True)
class LoadResultant:
    """What one load (or all of a case) amounts to: force `x`, `y` [N] and moment about the origin
    [N·mm].

    Attributes:
        load: id of the load, or of the case.
        at: a place on the line of action, the nearest to where the load acts; where there is only
            a couple, or the line runs far from the part, the middle of where it acts [mm].  None
            if nothing acts.
    """

    load: str
    x: float
    y: float
    moment: float
    at: Point | None


@dataclass(frozen=True)
class Balance:
    """Loads plus reactions, relative to the largest of them: a free body must give zero."""

    force: float
    moment: float


@dataclass(frozen=True, eq=False)
class Solution:
    """Displacements on a mesh.

    Attributes:
        element: the element that was used.
        displacements: [mm], (n_cases, n_nodes, 2).  Nodes that the element does not carry
            (middle and centre nodes of the simpler quads) hold its own interpolation there.
        reactions: for each case, one record for each support.
        balance: for each case.
        residual: largest relative residual of the linear equations over the cases.
        unknowns: number of free displacement components solved for.
        internal_modes: amplitudes of the incompatible modes,
            (n_cases, n_elements, 4), only for "quad4-incompatible"; else None.
        support_forces: what the supports give at each node, (n_cases, n_nodes, 2) [N]; None where
            it was not kept.
        free_strains: strain that the temperature would give each element if it were free,
            a + b x + c y, (n_cases, n_elements, 3, 3): a, b, c along axis 2 and εx, εy, γxy along
            axis 3; None where no case changes the temperature.
    """

    element: ElementName
    displacements: Floats
    reactions: tuple[tuple[Reaction, ...], ...]
    balance: tuple[Balance, ...]
    residual: float
    unknowns: int
    internal_modes: Floats | None = None
    support_forces: Floats | None = None
    free_strains: Floats | None = None


@dataclass(frozen=True, eq=False)
class StressField:
    """Recovered stresses of all cases.

    Attributes:
        nodal: fitted inside, edge recovery on the boundary, (n_cases, n_fields, 3) [MPa], in the
            numbers of `Mesh.field_quads`: those of the nodes, but that a node between zones has a
            value in each.
        side: edge recovery at the start, middle and end of every boundary side,
            (n_cases, n_sides, 3, 3) [MPa]: axis 2 is the place, axis 3 the component.  Two sides
            that meet at a sharp corner keep different values.
        energy_error: estimated energy error of each element relative to the whole strain energy,
            (n_cases, n_elements); the squares add up to the square of the global estimate.
    """

    nodal: Floats
    side: Floats
    energy_error: Floats


def von_mises(stress: Floats, poisson: Floats | float = 0.0) -> Floats:
    """Von Mises stress [MPa] of (..., 3) stresses.

    `poisson` is zero for plane stress; for plane strain give ν, so that σz = ν (σx + σy) counts:
    one for all, or of a shape that broadcasts against (...).
    """
    sx, sy, txy = stress[..., 0], stress[..., 1], stress[..., 2]
    sz = poisson * (sx + sy)
    squares = (sx - sy) ** 2 + (sy - sz) ** 2 + (sz - sx) ** 2
    return np.asarray(np.sqrt(0.5 * squares + 3.0 * txy**2))


def tresca(stress: Floats, poisson: Floats | float = 0.0) -> Floats:
    """Tresca stress [MPa] of (..., 3) stresses: the largest principal stress less the smallest.

    The one across the wall counts: zero in plane stress, ν (σx + σy) in plane strain, for which
    `poisson` is ν.
    """
    first, second, _ = principal(stress)
    third = poisson * (first + second)
    return np.asarray(np.maximum(first, third) - np.minimum(second, third))


def principal(stress: Floats) -> tuple[Floats, Floats, Floats]:
    """In-plane principal stresses σ1 >= σ2 [MPa] and the angle of σ1 [rad] from +x."""
    sx, sy, txy = stress[..., 0], stress[..., 1], stress[..., 2]
    mean, radius = 0.5 * (sx + sy), np.hypot(0.5 * (sx - sy), txy)
    return mean + radius, mean - radius, 0.5 * np.arctan2(2.0 * txy, sx - sy)
