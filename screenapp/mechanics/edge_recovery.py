"""Stress along the boundary, from the boundary's own stretching and the known traction on it.

Where the peaks are, on the boundary, three things are known better than any stress of an element:
the traction (it is given), and the stretching of the edge at the two Gauss points of each side,
where the derivative of a quadratic along its length is one order more accurate (Barlow 1976).  The
stress along the edge follows by Hooke's law: σt = E εt + ν σn in plane stress.  Between the
samples a polynomial is fitted over neighbouring sides, as far as the boundary and the traction
are smooth.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from screenapp.mechanics.boundary_chains import BoundaryChains, side_lengths
from screenapp.model.mesh import Mesh

Floats = NDArray[np.float64]
Ints = NDArray[np.int64]
Bools = NDArray[np.bool_]

GAUSS = 1.0 / np.sqrt(3.0)
ENDS_AND_MIDDLE = np.array([-1.0, 0.0, 1.0])


@dataclass(frozen=True, eq=False)
class EdgeData:
    """What is known of the boundary, for every case.

    Attributes:
        traction: [MPa] at start, middle and end of every side, (n_cases, n_sides, 3, 2), in x, y.
        held: whether a support holds the side along its normal and along its tangent (n_sides, 2);
            the traction is unknown there.
        joined: whether strain and traction go on smoothly past each side's end, (n_sides,).
    """

    traction: Floats
    held: Bools
    joined: Bools


def joined_sides(chains: BoundaryChains, traction: Floats, held: Bools) -> Bools:
    """Where a fit may run on past the end of a side, (n_sides,).

    It stops at a corner, where a support begins or ends, and where the traction jumps in any case
    (under the end of a pressure the stress along the edge jumps by as much).
    """
    after = chains.following
    scale = np.abs(traction).max(axis=(1, 2, 3), keepdims=True)[:, :, 0, 0] + 1e-300
    jump = np.abs(traction[:, :, 2] - traction[:, after, 0]).max(axis=2)
    steady = (jump <= 1e-3 * scale).all(axis=0)
    return np.asarray(chains.smooth & steady & (held == held[after]).all(axis=1))


def edge_strains(mesh: Mesh, displacements: Floats, linear: bool) -> Floats:
    """Stretching along each side at its sample places, (n_cases, n_sides, n_samples).

    Two samples at the Gauss points of a quadratic side; one at the middle of a `linear` one.
    """
    slopes = _sample_slopes(linear)
    along = np.einsum("pn,snk->spk", slopes, mesh.nodes[mesh.side_nodes])
    moved = np.einsum("pn,csnk->cspk", slopes, displacements[:, mesh.side_nodes])
    return np.asarray((moved * along).sum(axis=-1) / (along**2).sum(axis=-1))


def _sample_slopes(linear: bool) -> Floats:
    """Derivatives of a side's three shape functions at the sample places, (n_samples, 3)."""
    if linear:
        return np.array([[-0.5, 0.0, 0.5]])
    xi = np.array([-GAUSS, GAUSS])
    return np.stack([xi - 0.5, -2.0 * xi, xi + 0.5], axis=1)


def fit_along_edge(
    mesh: Mesh, chains: BoundaryChains, joined: Bools, mirrored: Bools, samples: Floats
) -> Floats:
    """Sampled values fitted along the edge, at start, middle and end of every side.

    Where two sides join, a parabola through the samples of both (least squares) gives their
    common value; the middle of a side takes a cubic through its own samples and both neighbours'.
    At the end of a stretch the window leans inwards; at a mirror it runs on into the reflection.

    Args:
        joined: where the fit may run past a side's end, (n_sides,).
        mirrored: whether a line of symmetry stands at start and end of each side, (n_sides, 2).
        samples: (n_cases, n_sides, n_samples), n_samples = 1 or 2.

    Returns:
        (n_cases, n_sides, 3).
    """
    per_side = samples.shape[2]
    reach = 1 if per_side == 2 else 2  # sides on either hand of a junction
    local = np.array([-GAUSS, GAUSS]) if per_side == 2 else np.array([0.0])
    at = side_lengths(mesh, local)
    places = side_lengths(mesh, ENDS_AND_MIDDLE)
    walk = _walk(chains, joined, mirrored)
    fitted = np.empty((*samples.shape[:2], 3))
    windows = ((reach, reach - 1, 2), (reach, reach, per_side + 1), (reach - 1, reach, 2))
    for place, (back, ahead, degree) in enumerate(windows):
        sides, far = _windows(walk, at, chains.lengths, back, ahead)
        known = np.repeat(sides >= 0, per_side, axis=1)
        far = far.reshape(len(sides), -1) - places[:, place, None]
        weights = fit_weights(np.where(known, far, 0.0), known, degree)
        values = samples[:, sides].reshape(len(samples), len(sides), -1)
        fitted[:, :, place] = (values * weights).sum(axis=-1)
    return fitted


def fit_weights(far: Floats, known: Bools, degree: int) -> Floats:
    """Weights that give a least-squares polynomial's value at 0 from its values at `far`.

    Args:
        far: distances of the samples, (n, n_samples).
        known: which of them count, (n, n_samples).
        degree: of the polynomial, lowered where there are too few samples.

    Returns:
        (n, n_samples), zero where not known.
    """
    weights = np.zeros_like(far)
    scale = np.abs(far).max(axis=1, keepdims=True)
    scale[scale == 0.0] = 1.0
    degrees = np.minimum(degree, known.sum(axis=1) - 1)
    for d in np.unique(degrees):
        rows = degrees == d
        powers = (far[rows] / scale[rows])[..., None] ** np.arange(d + 1)
        powers = np.where(known[rows][..., None], powers, 0.0)
        gram = np.swapaxes(powers, 1, 2) @ powers
        first = np.zeros((int(rows.sum()), d + 1, 1))
        first[:, 0] = 1.0
        weights[rows] = (powers @ np.linalg.solve(gram, first))[..., 0]
    return weights


def _walk(chains: BoundaryChains, joined: Bools, mirrored: Bools) -> Ints:
    """Where a walk along the boundary goes next, (2 n_sides,), -1 where it stops.

    Entry s is side s walked forwards, entry n + s the same side walked backwards.
    """
    own = np.arange(len(joined))
    n, before = len(own), chains.preceding
    ahead = np.where(joined, chains.following, np.where(mirrored[:, 1], n + own, -1))
    back = np.where(joined[before], n + before, np.where(mirrored[:, 0], own, -1))
    return np.concatenate([ahead, back])


def _windows(walk: Ints, at: Floats, lengths: Floats, back: int, ahead: int) -> tuple[Ints, Floats]:
    """The sides that each side's fit draws on, and where their samples lie.

    The side itself comes first.  What the stretch does not offer on one hand is taken on the other.

    Returns:
        sides (n_sides, 1 + 2 w), -1 for none, and distances of their samples from the start of
        the side itself, (n_sides, 1 + 2 w, n_samples).
    """
    n, wanted = len(lengths), back + ahead
    own = np.arange(n)
    fore, aft = _run(walk, own, wanted), _run(walk, own + n, wanted)
    has_fore, has_aft = (fore >= 0).sum(axis=1), (aft >= 0).sum(axis=1)
    n_aft = np.minimum(back, has_aft)
    n_fore = np.minimum(wanted - n_aft, has_fore)
    n_aft = np.minimum(wanted - n_fore, has_aft)
    far_fore = lengths[:, None, None] + _far(fore, at, lengths)
    far_aft = -_far(aft, at, lengths)
    count = np.arange(wanted)
    fore = np.where((fore >= 0) & (count < n_fore[:, None]), fore % n, -1)
    aft = np.where((aft >= 0) & (count < n_aft[:, None]), aft % n, -1)
    sides = np.concatenate([own[:, None], fore, aft], axis=1)
    return sides, np.concatenate([at[:, None], far_fore, far_aft], axis=1)


def _run(walk: Ints, start: Ints, steps: int) -> Ints:
    """The next `steps` entries of a walk from `start`, (n, steps), -1 past its end."""
    run = np.full((len(start), steps), -1, dtype=np.int64)
    here, going = start, np.ones(len(start), dtype=bool)
    for k in range(steps):
        here = np.where(going, walk[here], here)
        going = going & (here >= 0) & (here != start)
        run[going, k] = here[going]
    return run


def _far(run: Ints, at: Floats, lengths: Floats) -> Floats:
    """Distances of the samples along a run from where it begins, (n, steps, n_samples)."""
    n = len(lengths)
    side = run % n
    inside = np.where((run >= n)[..., None], lengths[side][..., None] - at[side], at[side])
    span = lengths[side]
    return np.asarray(inside + (np.cumsum(span, axis=1) - span)[..., None])


def edge_stress(
    strain: Floats, normal: Floats, shear: Floats, chains: BoundaryChains, hooke: Floats
) -> Floats:
    """Stresses σx, σy, τxy from the stretching and the traction of the boundary.

    Args:
        strain: εt along the edge, (n_cases, n_sides, 3).
        normal: σn across it, the same shape [MPa].
        shear: τ between the outward normal and the forward tangent, the same shape [MPa].
        hooke: (3, 3) matrix that turns εx, εy, γxy into stresses [MPa].

    Returns:
        (n_cases, n_sides, 3, 3) [MPa].
    """
    d11, d12 = hooke[0, 0], hooke[0, 1]  # isotropic: the same along any direction
    across = (normal - d12 * strain) / d11
    along = d11 * strain + d12 * across
    t, n = chains.tangents, chains.normals
    xx = along * t[..., 0] ** 2 + normal * n[..., 0] ** 2 + 2.0 * shear * t[..., 0] * n[..., 0]
    yy = along * t[..., 1] ** 2 + normal * n[..., 1] ** 2 + 2.0 * shear * t[..., 1] * n[..., 1]
    xy = (
        along * t[..., 0] * t[..., 1]
        + normal * n[..., 0] * n[..., 1]
        + shear * (t[..., 0] * n[..., 1] + t[..., 1] * n[..., 0])
    )
    return np.stack([xx, yy, xy], axis=-1)
