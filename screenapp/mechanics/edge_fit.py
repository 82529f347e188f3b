"""Polynomials fitted along the boundary through values sampled on its sides."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from screenapp.mechanics.boundary_chains import BoundaryChains, side_lengths
from screenapp.model.mesh import Mesh

Floats = NDArray[np.float64]
Ints = NDArray[np.int64]
Bools = NDArray[np.bool_]

GAUSS = 1.0 / np.sqrt(3.0)


def sample_places(per_side: int) -> Floats:
    """Local places -1..1 of one or two samples on a side."""
    return np.array([-GAUSS, GAUSS]) if per_side == 2 else np.array([0.0])


def fit_at_ends(
    mesh: Mesh, chains: BoundaryChains, joined: Bools, mirrored: Bools, samples: Floats
) -> Floats:
    """Sampled values carried to both ends of every side.

    Where two sides join, a parabola through the four nearest samples (least squares) gives their
    common value.  At the end of a stretch the window leans inwards; at a mirror it runs on into
    the reflection.

    Args:
        joined: where the fit may run past a side's end, (n_sides,).
        mirrored: whether a line of symmetry stands at start and end of each side, (n_sides, 2).
        samples: (n_cases, n_sides, n_samples) at `sample_places`.

    Returns:
        (n_cases, n_sides, 2).
    """
    per_side = samples.shape[2]
    reach = 2 // per_side  # sides on either hand of a junction
    at = side_lengths(mesh, sample_places(per_side))
    walk = _walk(chains, joined, mirrored)
    ends = np.empty((*samples.shape[:2], 2))
    for end, (back, ahead) in enumerate(((reach, reach - 1), (reach - 1, reach))):
        sides, far = _windows(walk, at, chains.lengths, back, ahead)
        known = np.repeat(sides >= 0, per_side, axis=1)
        far = far.reshape(len(sides), -1) - end * chains.lengths[:, None]
        weights = fit_weights(np.where(known, far, 0.0), known, 2)
        values = samples[:, sides].reshape(len(samples), len(sides), -1)
        ends[:, :, end] = (values * weights).sum(axis=-1)
    return ends


def beside_corners(
    mesh: Mesh,
    chains: BoundaryChains,
    joined: Bools,
    split: Bools,
    samples: Floats,
    at_corner: Floats,
) -> Floats:
    """The samples with those beside a split corner replaced by what the next side and the corner's
    own value say: a parabola through them.

    Args:
        joined: where the fit may run past a side's end, (n_sides,).
        split: whether a side ends at a split corner (`corner_stress.split_corners`), (n_sides,).
        samples: (n_cases, n_sides, n_samples) at `sample_places`.
        at_corner: values at start and end of every side, used where a corner is split,
            (n_cases, n_sides, 2).
    """
    per_side = samples.shape[2]
    at = side_lengths(mesh, sample_places(per_side))
    lengths = chains.lengths[:, None]
    out = samples.copy()
    begins = split[chains.preceding]
    for end, corner, beyond, joins in (
        (0, begins & ~split, chains.following, joined),
        (1, split & ~begins, chains.preceding, joined[chains.preceding]),
    ):
        some = np.flatnonzero(corner & joins)
        other = beyond[some]
        # distances from the corner
        own = at[some] if end == 0 else lengths[some] - at[some]
        far = lengths[some] + (at[other] if end == 0 else lengths[other] - at[other])
        given = np.concatenate([np.zeros((len(some), 1)), far], axis=1)
        values = np.concatenate([at_corner[:, some, end, None], samples[:, other]], axis=2)
        for k in range(per_side):
            weights = fit_weights(given - own[:, k, None], np.ones(given.shape, dtype=bool), 2)
            out[:, some, k] = (values * weights).sum(axis=-1)
    return out


def beside_jumps(
    mesh: Mesh, chains: BoundaryChains, joined: Bools, jumps: Bools, samples: Floats
) -> Floats:
    """The samples with those beside a jump of the pressure replaced by what the next two sides say:
    a parabola through their samples.  Where these do not join, they stay.

    Args:
        joined: where the fit may run past a side's end, (n_sides,).
        jumps: whether the pressure jumps at a side's end (`corner_stress.pressure_jumps`),
            (n_sides,).
        samples: (n_cases, n_sides, n_samples) at `sample_places`.
    """
    at = side_lengths(mesh, sample_places(samples.shape[2]))
    out = samples.copy()
    backward = joined[chains.preceding]
    for end, beside, beyond, joins in (
        (0, jumps[chains.preceding], chains.following, joined),
        (1, jumps, chains.preceding, backward),
    ):
        some = np.flatnonzero(beside & joins & joins[beyond])
        one, two = beyond[some], beyond[beyond[some]]
        own, first, second = (
            at[k] if end == 0 else chains.lengths[k, None] - at[k] for k in (some, one, two)
        )  # distances from the end of each that is nearer to the jump
        first = first + chains.lengths[some, None]
        second = second + (chains.lengths[some] + chains.lengths[one])[:, None]
        given = np.concatenate([first, second], axis=1)
        values = np.concatenate([samples[:, one], samples[:, two]], axis=2)
        degree = min(2, given.shape[1] - 1)
        for k in range(samples.shape[2]):
            weights = fit_weights(given - own[:, k, None], np.ones(given.shape, bool), degree)
            out[:, some, k] = (values * weights).sum(axis=-1)
    return out


def fit_at_middles(mesh: Mesh, samples: Floats, ends: Floats) -> Floats:
    """Values at the middle node of every side, (n_cases, n_sides).

    A cubic through both ends and both samples of the side; with one sample, which stands at the
    middle, that sample.  A cubic over the neighbours' samples instead was four times worse next to
    the end of a fillet, where the stress has a kink.
    """
    if samples.shape[2] == 1:
        return samples[:, :, 0]
    at = side_lengths(mesh, np.array([-1.0, -GAUSS, GAUSS, 1.0, 0.0]))
    far = at[:, :4] - at[:, 4:]
    weights = fit_weights(far, np.ones(far.shape, dtype=bool), 3)
    values = np.concatenate([ends[:, :, :1], samples, ends[:, :, 1:]], axis=2)
    return np.asarray((values * weights).sum(axis=-1))


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
