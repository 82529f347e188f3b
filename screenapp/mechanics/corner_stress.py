"""What is known of the stress where two sides of the boundary meet at an angle.

At a convex corner the tractions on both sides fix the stress (a free corner has none).  At a right
angle against a line of symmetry the field goes on in its mirror image.
"""

from __future__ import annotations

import math

import numpy as np
from numpy.typing import NDArray

from screenapp.mechanics.boundary_chains import SMOOTH_TURN, BoundaryChains
from screenapp.model.mesh import Mesh
from screenapp.model.part import Part, PointLoad

Floats = NDArray[np.float64]
Ints = NDArray[np.int64]
Bools = NDArray[np.bool_]

LEAST_TURN = math.radians(45.0)
"""A corner must turn by this for its tractions to fix the stress; flatter ones reach it too
slowly for the elements next to them (Williams 1952: the next term grows as r^0.18 at 150°)."""

JUMP = 1e-3
"""Share of the largest traction of a case that counts as a jump of it."""

NEGLIGIBLE = 1e-6  # share of the largest traction of a case


def known_corners(
    chains: BoundaryChains,
    traction: Floats,
    held: Bools,
    disturbed: Bools,
    isotropic: Bools | bool = True,
) -> tuple[Floats, Bools]:
    """Stress along both sides at the corner at every side's end, where the tractions fix it.

    Constant tractions on a wedge of angle ω give φ = r² (A cos 2θ + B sin 2θ + C θ + D), with
    σθ = 2 φ/r² and τ = -(φ/r²)' given on both faces and σr = φ''/r² + 2 φ/r² along them (Timoshenko
    & Goodier, Theory of Elasticity, from memory).  Where the tractions contradict each other (a
    shear on one side only) C is not zero and the two sides differ, each with its own limit; that
    holds for isotropic material alone.  Where they agree the stress is the same all over the wedge,
    whatever it is made of.

    Args:
        traction: (n_cases, n_sides, 3, 2) [MPa].
        held: (n_sides, 2).
        disturbed: corners with a point load or a support of their own, by the side that ends
            there, (n_sides,).
        isotropic: whether the material at each side is, (n_sides,) or one for all.

    Returns:
        Stress along the side that ends there and along the one that begins [MPa],
        (n_cases, n_sides, 2), and whether they are known (n_sides,).
    """
    after = chains.following
    turn = chains.turn
    known = (turn >= LEAST_TURN) & (turn <= math.pi - LEAST_TURN) & ~disturbed
    known &= chains.same_wall & ~held.any(axis=1) & ~held[after].any(axis=1)
    along = np.zeros((*traction.shape[:2], 2))
    some = np.flatnonzero(known)
    then = after[some]
    # θ runs from the side that begins (0) to the one that ends (ω)
    faces = ((0.0 * turn[some], then, 0), (math.pi - turn[some], some, 2))
    rows, right = [], []
    for theta, side, place in faces:
        one, nil = np.ones_like(theta), np.zeros_like(theta)
        c, s = np.cos(2.0 * theta), np.sin(2.0 * theta)
        rows += [np.stack(row, -1) for row in ((c, s, theta, one), (-2.0 * s, 2.0 * c, one, nil))]
        pull = traction[:, side, place]
        right.append(0.5 * (pull * chains.normals[side, place]).sum(axis=-1))
        right.append((pull * chains.tangents[side, place]).sum(axis=-1))
    amplitudes = np.linalg.solve(np.stack(rows, axis=1), np.stack(right, axis=-1)[..., None])
    for k, (theta, _, _) in enumerate(faces):
        c, s = np.cos(2.0 * theta), np.sin(2.0 * theta)
        factors = 2.0 * np.stack([-c, -s, theta, np.ones_like(theta)], axis=-1)
        along[:, some, 1 - k] = (amplitudes[..., 0] * factors).sum(axis=-1)
    return along, known & (isotropic | ~split_corners(chains, traction, known))


def split_corners(chains: BoundaryChains, traction: Floats, known: Bools) -> Bools:
    """Corners whose stress is known but differs on the two sides, by the side that ends there,
    (n_sides,).

    No element can show such a stress, however small it is: what the ones at the corner say is wrong
    by the same share in every mesh.
    """
    after = chains.following
    t1, t2 = traction[:, :, 2], traction[:, after, 0]
    n1, n2 = chains.normals[:, 2], chains.normals[after, 0]
    contradiction = np.abs((t1 * n2).sum(axis=-1) - (t2 * n1).sum(axis=-1))
    scale = np.abs(traction).max(axis=(1, 2, 3))[:, None]
    return np.asarray(known & (contradiction > NEGLIGIBLE * scale).any(axis=0))


def pressure_jumps(chains: BoundaryChains, traction: Floats, held: Bools) -> Bools:
    """Places of a smooth free boundary at which the pressure jumps in a case, by the side that ends
    there, (n_sides,).

    The stress along the edge jumps by as much, and turns from one value to the other within the
    material round that point.  As at a split corner, what the elements there say is wrong by the
    same share in every mesh.
    """
    after = chains.following
    gap = np.abs(((traction[:, :, 2] - traction[:, after, 0]) * chains.normals[:, 2]).sum(axis=-1))
    scale = np.abs(traction).max(axis=(1, 2, 3))[:, None]
    free = ~held.any(axis=1) & ~held[after].any(axis=1)
    return np.asarray(chains.smooth & free & (gap > JUMP * scale).any(axis=0))


def mirrored_ends(chains: BoundaryChains, traction: Floats, held: Bools) -> Bools:
    """Whether a line of symmetry stands at the start and end of each side, (n_sides, 2).

    A line of symmetry is a straight side, held along its normal only and free of shear, that meets
    the side at a right angle; the side itself must be free of shear there too.
    """
    shear = np.abs((traction * chains.tangents).sum(axis=-1))
    scale = NEGLIGIBLE * np.abs(traction).max(axis=(1, 2, 3))[:, None, None]
    smooth = (shear <= scale).all(axis=0)  # (n_sides, 3)
    straight = np.abs(chains.curvature) * chains.lengths < 1e-6
    plane = held[:, 0] & ~held[:, 1] & straight & smooth.all(axis=1)
    free = ~held.any(axis=1)
    right = np.abs(chains.turn - 0.5 * math.pi) < SMOOTH_TURN
    right &= chains.same_wall
    before, after = chains.preceding, chains.following
    return np.stack(
        [
            free & smooth[:, 0] & right[before] & plane[before],
            free & smooth[:, 2] & right & plane[after],
        ],
        axis=1,
    )


def disturbed_corners(part: Part, mesh: Mesh) -> Bools:
    """Sides that end at a corner with a point load or a support of its own, (n_sides,)."""
    names = {support.on for support in part.supports}
    names |= {load.on for case in part.cases for load in case.loads if isinstance(load, PointLoad)}
    nodes = [node for name, node in mesh.corner_nodes.items() if name in names]
    return np.isin(mesh.side_nodes[:, 2], nodes)
