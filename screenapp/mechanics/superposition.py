"""Cases that are sums of others: of twenty, often only two or three have to be solved.

The equations are linear.  Where the loads of a case are a weighted sum of those of others (a pull
along another direction, a combination with its factors), so are its displacements.  What is
independent is found from the load vectors themselves, so that nothing has to be known of how the
cases came about: a bearing load turned round presses on the other half of its hole, and counts as
independent by its forces.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray
from scipy.linalg import qr, solve_triangular

Floats = NDArray[np.float64]
Ints = NDArray[np.int64]

NOTHING = 1e-12
"""Share of a case's own loads that may be left unexplained: as large as the relative residual to
which the equations are solved."""

MOST_WEIGHTS = 100.0
"""Largest sum of the sizes of a case's weights, relative to its own loads: with more the sum would
lose digits, and nothing is superposed."""


@dataclass(frozen=True, eq=False)
class Superposition:
    """Every case as a sum of the cases that are solved.

    Attributes:
        solved: positions of the independent cases, rising, (n_solved,).
        weights: of each of them in every case, (n_cases, n_solved); a solved case has itself alone.
    """

    solved: Ints
    weights: Floats

    def spread(self, found: Floats) -> Floats:
        """From the solved cases (n_solved, ...) to all cases (n_cases, ...)."""
        if len(self.solved) == len(self.weights):
            return found
        flat = self.weights @ found.reshape(len(found), -1)
        return flat.reshape(len(flat), *found.shape[1:])


def superpose(loads: Floats) -> Superposition:
    """Independent cases among loads (n_cases, n), whose numbers must be of one kind and size."""
    n_cases = len(loads)
    everything = Superposition(np.arange(n_cases), np.eye(n_cases))
    if n_cases < 2:
        return everything
    size = np.linalg.norm(loads, axis=1)
    acting = np.flatnonzero(size > 0.0)
    if not np.isfinite(size).all() or len(acting) == 0:
        return everything
    columns = np.ascontiguousarray((loads[acting] / size[acting, None]).T)
    upper, order = qr(columns, mode="r", pivoting=True, check_finite=False)
    upper = upper[: len(acting)]
    rank = int((np.abs(np.diag(upper)) > NOTHING).sum())
    left = upper[:rank, rank:]
    shares = solve_triangular(upper[:rank, :rank], left, check_finite=False).T
    if float(np.abs(shares).sum(axis=1).max(initial=0.0)) > MOST_WEIGHTS:
        return everything
    first, others = acting[order[:rank]], acting[order[rank:]]
    solved = np.sort(first)
    weights = np.zeros((n_cases, rank))
    weights[solved, np.arange(rank)] = 1.0
    place = np.searchsorted(solved, first)
    weights[others[:, None], place] = shares * size[others, None] / size[first]
    return Superposition(solved, weights)
