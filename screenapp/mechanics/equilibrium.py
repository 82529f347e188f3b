"""What the supports give back, and whether loads and reactions add up to nothing."""

from __future__ import annotations

from collections.abc import Mapping

import numpy as np
from numpy.typing import NDArray

from screenapp.mechanics.constraints import HeldDirections
from screenapp.model.solution import Balance, BoltForce, Reaction

Floats = NDArray[np.float64]


def resultant(positions: Floats, forces: Floats) -> Floats:
    """Force x, y [N] and moment about the origin [N·mm], (3,), of forces (n, 2) at (n, 2) [mm]."""
    return np.array([*forces.sum(axis=0), _moments(positions, forces).sum()])


def reactions(
    held: HeldDirections,
    positions: Floats,
    support_forces: Floats,
    springs: Mapping[int, Floats] | None = None,
) -> tuple[Reaction, ...]:
    """The reaction of every support, in the order of `held.supports`.

    `support_forces` (n_nodes, 2) [N] is K u - f on every mesh node.  A support can only give
    force along the directions it holds.  Where several supports hold one node and that leaves a
    choice, the split with the least sum of squares is taken (two fixed supports share evenly);
    the sum over the supports is the node's whole reaction in every case.

    Args:
        springs: what supports that give way give at the nodes, (n_nodes, 2) [N], by the index of
            the support; it is part of `support_forces`.
    """
    beds = springs or {}
    shares = _shares(held, support_forces - sum(beds.values(), start=np.zeros(2)))
    out = []
    for owner, name in enumerate(held.supports):
        mine = held.owners == owner
        total = resultant(positions[held.nodes[mine]], shares[mine])
        if owner in beds:
            total = total + resultant(positions, beds[owner])
        bolts: tuple[BoltForce, ...] = ()
        if owner in held.bolts:
            nodal = np.zeros(positions.shape)
            np.add.at(nodal, held.nodes[mine], shares[mine])
            nodal += beds.get(owner, 0.0)
            each = ((hole, nodal[nodes].sum(axis=0)) for hole, nodes in held.bolts[owner])
            bolts = tuple(BoltForce(hole, float(f[0]), float(f[1])) for hole, f in each)
        out.append(Reaction(name, float(total[0]), float(total[1]), float(total[2]), bolts))
    return tuple(out)


def balance(positions: Floats, forces: Floats, given: tuple[Reaction, ...]) -> Balance:
    """Loads plus reactions over the sum of the sizes of all nodal forces (and of these times
    their distance from the origin, for the moment), which is never zero by cancelling.

    `forces` (n_nodes, 2) [N] are the nodal loads.
    """
    load = resultant(positions, forces)
    back = np.array([[r.x, r.y, r.moment] for r in given]).reshape(-1, 3)
    left = np.abs(load + back.sum(axis=0))
    size = np.hypot(*forces.T)
    arm = np.hypot(*positions.T)
    reach = float(arm.max(initial=0.0))
    reaction_size = float(np.hypot(back[:, 0], back[:, 1]).sum())
    force_scale = max(float(size.sum()), reaction_size)
    moment_scale = max(float((size * arm).sum()), reaction_size * reach)
    return Balance(
        float(np.hypot(left[0], left[1])) / force_scale if force_scale > 0.0 else 0.0,
        float(left[2]) / moment_scale if moment_scale > 0.0 else 0.0,
    )


def _moments(positions: Floats, forces: Floats) -> Floats:
    return positions[:, 0] * forces[:, 1] - positions[:, 1] * forces[:, 0]


def _shares(held: HeldDirections, support_forces: Floats) -> Floats:
    """The force that each hold gives, (k, 2): along its direction, least squares at each node.

    With the holds' directions D (m, 2) of a node the force r = Dᵀλ has the smallest λ for
    λ = D (DᵀD)⁺ r.
    """
    nodes, inverse = np.unique(held.nodes, return_inverse=True)
    gram = np.zeros((len(nodes), 2, 2))
    np.add.at(gram, inverse, held.directions[:, :, None] * held.directions[:, None, :])
    back = np.linalg.pinv(gram, rcond=1e-9, hermitian=True) @ support_forces[nodes][..., None]
    size = np.einsum("kd,kd->k", held.directions, back[inverse, :, 0])
    return np.asarray(held.directions * size[:, None])
