"""Stress along the boundary, from the boundary's own stretching and the known traction on it.

Where the peaks are, on the boundary, three things are known better than any stress of an element:
the traction (it is given), and the stretching of the edge at the two Gauss points of each side,
where the derivative of a quadratic along its length is one order more accurate (Barlow 1976).  The
stress along the edge follows by Hooke's law, σt = E εt + ν σn in isotropic plane stress, and with
the shear's share where an orthotropic sheet meets the edge askew to its axes.  Between the
samples a polynomial is fitted over neighbouring sides, as far as the boundary and the traction
are smooth.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from screenapp.mechanics.boundary_chains import BoundaryChains
from screenapp.mechanics.corner_stress import (
    JUMP,
    known_corners,
    mirrored_ends,
    pressure_jumps,
    split_corners,
)
from screenapp.mechanics.edge_fit import (
    beside_corners,
    beside_jumps,
    fit_at_ends,
    fit_at_middles,
    sample_places,
)
from screenapp.mechanics.thermal import side_free_strains
from screenapp.model.mesh import Mesh
from screenapp.model.solution import Solution

Floats = NDArray[np.float64]
Ints = NDArray[np.int64]
Bools = NDArray[np.bool_]


def recover_edge_stress(
    mesh: Mesh,
    chains: BoundaryChains,
    samples: Floats,
    traction: Floats,
    held: Bools,
    disturbed: Bools,
    inside: Floats,
    hooke: Floats,
) -> Floats:
    """Stresses at start, middle and end of every boundary side, (n_cases, n_sides, 3, 3) [MPa].

    Args:
        samples: stretching of the sides by `edge_strains`.
        traction: known tractions, (n_cases, n_sides, 3, 2) [MPa].
        held: sides held along their normal and tangent, (n_sides, 2).
        disturbed: sides that end at a corner with a force or support of its own, (n_sides,).
        inside: averaged stresses at the sides' nodes, (n_cases, n_sides, 3, 3) [MPa]; they stand
            in for the traction of a support.
        hooke: turns εx, εy, γxy into stresses [MPa], (3, 3) or one for each side (n_sides, 3, 3).
    """
    joined = joined_sides(chains, traction, held)
    yielding = edge_compliance(chains, hooke)
    mirrored = mirrored_ends(chains, traction, held) & ~_askew(yielding)[:, None]
    normal, shear = edge_tractions(chains, traction, held, inside)
    corner, known = known_corners(chains, traction, held, disturbed, isotropic(hooke))
    before = chains.preceding
    stretch = np.stack(
        [
            edge_stretch(corner[:, before, 1], normal[:, :, 0], shear[:, :, 0], yielding[:, 0]),
            edge_stretch(corner[:, :, 0], normal[:, :, 2], shear[:, :, 2], yielding[:, 2]),
        ],
        axis=2,
    )
    split = split_corners(chains, traction, known)
    samples = beside_corners(mesh, chains, joined, split, samples, stretch)
    samples = beside_jumps(mesh, chains, joined, pressure_jumps(chains, traction, held), samples)
    ends = fit_at_ends(mesh, chains, joined, mirrored, samples)
    ends = np.where(np.stack([known[before], known], axis=1), stretch, ends)
    strain = np.stack([ends[:, :, 0], fit_at_middles(mesh, samples, ends), ends[:, :, 1]], axis=2)
    side = edge_stress(strain, normal, shear, chains, yielding)
    # the support's side takes over what the side that it mirrors knows better
    at_start, at_end = np.flatnonzero(mirrored[:, 0]), np.flatnonzero(mirrored[:, 1])
    side[:, chains.preceding[at_start], 2] = side[:, at_start, 0]
    side[:, chains.following[at_end], 0] = side[:, at_end, 2]
    return side


def isotropic(hooke: Floats) -> Bools:
    """Whether a matrix is the same along any direction, for each of (..., 3, 3)."""
    d = hooke
    scale = 1e-9 * d[..., 0, 0]
    even = np.abs(d[..., 0, 0] - d[..., 1, 1]) <= scale
    plain = np.abs(0.5 * (d[..., 0, 0] - d[..., 0, 1]) - d[..., 2, 2]) <= scale
    return np.asarray(even & plain & (np.abs(d[..., :2, 2]) <= scale[..., None]).all(axis=-1))


def edge_compliance(chains: BoundaryChains, hooke: Floats) -> Floats:
    """What σt, σn and τ of an edge give to its own stretching εt [1/MPa].

    Args:
        hooke: turns εx, εy, γxy into stresses [MPa], (3, 3) or one for each side (n_sides, 3, 3).

    Returns:
        (n_sides, 3 places, 3).
    """
    yielding = np.linalg.inv(np.broadcast_to(hooke, (len(chains.tangents), 3, 3)))
    tx, ty = chains.tangents[..., 0], chains.tangents[..., 1]
    nx, ny = chains.normals[..., 0], chains.normals[..., 1]
    stretch = np.stack([tx * tx, ty * ty, tx * ty], axis=-1)  # εt of εx, εy, γxy
    by = np.stack(
        [
            stretch,
            np.stack([nx * nx, ny * ny, nx * ny], axis=-1),
            np.stack([2.0 * tx * nx, 2.0 * ty * ny, tx * ny + ty * nx], axis=-1),
        ],
        axis=-1,
    )  # σx, σy, τxy of σt, σn, τ
    return np.asarray(((stretch @ yielding)[..., None, :] @ by)[..., 0, :])


def _askew(yielding: Floats) -> Bools:
    """Sides that an orthotropic sheet meets askew to its axes, where nothing goes on as in a
    mirror, (n_sides,); `yielding` by `edge_compliance`."""
    return np.asarray((np.abs(yielding[..., 2]) > 1e-9 * yielding[..., 0]).any(axis=1))


def edge_stretch(along: Floats, normal: Floats, shear: Floats, yielding: Floats) -> Floats:
    """εt from σt, σn and τ of an edge, (n_cases, n_sides) each [MPa]; `yielding` (n_sides, 3) is
    that of `edge_compliance` there."""
    return np.asarray(yielding[:, 0] * along + yielding[:, 1] * normal + yielding[:, 2] * shear)


def joined_sides(chains: BoundaryChains, traction: Floats, held: Bools) -> Bools:
    """Where a fit may run on past the end of a side, (n_sides,).

    It stops at a corner, where a support begins or ends, and where the traction jumps in any case
    (under the end of a pressure the stress along the edge jumps by as much).
    """
    after = chains.following
    scale = np.abs(traction).max(axis=(1, 2, 3), keepdims=True)[:, :, 0, 0] + 1e-300
    jump = np.abs(traction[:, :, 2] - traction[:, after, 0]).max(axis=2)
    steady = (jump <= JUMP * scale).all(axis=0)
    return np.asarray(chains.smooth & steady & (held == held[after]).all(axis=1))


def edge_strains(mesh: Mesh, solution: Solution) -> Floats:
    """Elastic stretching along each side at its sample places, (n_cases, n_sides, n_samples).

    Two samples at the Gauss points of a quadratic side; one at the middle of a `linear` one.
    """
    linear = solution.element.startswith("quad4")
    slopes = _sample_slopes(linear)
    along = np.einsum("pn,snk->spk", slopes, mesh.nodes[mesh.side_nodes])
    moved = np.einsum("pn,csnk->cspk", slopes, solution.displacements[:, mesh.side_nodes])
    stretch = (moved * along).sum(axis=-1) / (along**2).sum(axis=-1)
    if solution.free_strains is not None:
        at = _sample_shapes(linear) @ mesh.nodes[mesh.side_nodes]
        stretch -= side_free_strains(mesh, solution.free_strains, at, along)
    return np.asarray(stretch)


def _sample_slopes(linear: bool) -> Floats:
    """Derivatives of a side's three shape functions at the sample places, (n_samples, 3)."""
    if linear:
        return np.array([[-0.5, 0.0, 0.5]])
    xi = sample_places(2)
    return np.stack([xi - 0.5, -2.0 * xi, xi + 0.5], axis=1)


def _sample_shapes(linear: bool) -> Floats:
    """A side's three shape functions at the sample places, (n_samples, 3)."""
    if linear:
        return np.array([[0.5, 0.0, 0.5]])
    xi = sample_places(2)
    return np.stack([0.5 * xi * (xi - 1.0), 1.0 - xi * xi, 0.5 * xi * (xi + 1.0)], axis=1)


def edge_stress(
    strain: Floats, normal: Floats, shear: Floats, chains: BoundaryChains, yielding: Floats
) -> Floats:
    """Stresses σx, σy, τxy from the stretching and the traction of the boundary.

    Args:
        strain: εt along the edge, (n_cases, n_sides, 3).
        normal: σn across it, the same shape [MPa].
        shear: τ between the outward normal and the forward tangent, the same shape [MPa].
        yielding: by `edge_compliance`, (n_sides, 3, 3).

    Returns:
        (n_cases, n_sides, 3, 3) [MPa].
    """
    along = (strain - yielding[..., 1] * normal - yielding[..., 2] * shear) / yielding[..., 0]
    t, n = chains.tangents, chains.normals
    xx = along * t[..., 0] ** 2 + normal * n[..., 0] ** 2 + 2.0 * shear * t[..., 0] * n[..., 0]
    yy = along * t[..., 1] ** 2 + normal * n[..., 1] ** 2 + 2.0 * shear * t[..., 1] * n[..., 1]
    xy = (
        along * t[..., 0] * t[..., 1]
        + normal * n[..., 0] * n[..., 1]
        + shear * (t[..., 0] * n[..., 1] + t[..., 1] * n[..., 0])
    )
    return np.stack([xx, yy, xy], axis=-1)


def edge_tractions(
    chains: BoundaryChains, traction: Floats, held: Bools, stress: Floats
) -> tuple[Floats, Floats]:
    """σn and τ along the boundary: given where it is free or loaded, from `stress` where held.

    Args:
        stress: the averaged field at the sides' nodes, (n_cases, n_sides, 3, 3) [MPa].

    Returns:
        normal and shear stress, (n_cases, n_sides, 3) each [MPa].
    """
    t, n = chains.tangents, chains.normals
    given = np.stack([(traction * n).sum(axis=-1), (traction * t).sum(axis=-1)], axis=-1)
    met = np.stack(
        [
            stress[..., 0] * n[..., 0] + stress[..., 2] * n[..., 1],
            stress[..., 2] * n[..., 0] + stress[..., 1] * n[..., 1],
        ],
        axis=-1,
    )
    own = np.stack([(met * n).sum(axis=-1), (met * t).sum(axis=-1)], axis=-1)
    both = np.where(held[:, None, :], own, given)
    return both[..., 0], both[..., 1]
