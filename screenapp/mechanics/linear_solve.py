"""One factorisation of the stiffness matrix for all load cases, with the residual checked.

SuperLU is run in its symmetric setting (diagonal pivots), which a positive definite matrix allows,
in an order of elimination that comes from the mesh (`dissection`) or else by minimum degree on
A + Aᵀ; where pypardiso is installed it is used instead.
"""

from __future__ import annotations

import importlib.util
import logging
import weakref
from collections.abc import Callable, Sequence
from typing import Any

import numpy as np
from numpy.typing import NDArray
from scipy import sparse
from scipy.sparse.linalg import splu

from screenapp.model.errors import SolvingError

Floats = NDArray[np.float64]
Ints = NDArray[np.int64]
Solve = Callable[[Floats], Floats]

_log = logging.getLogger(__name__)

PARDISO_NO_MEMORY = -2
"""The library's error number for memory that does not suffice."""

LEAST_ORDERED = 10_000
"""Unknowns below which working out an order takes longer than it saves."""

ENOUGH = 1e-12
"""Relative residual at which refinement stops."""

REFINEMENTS = 4
"""Most steps of refinement: each gains several digits unless the matrix is all but singular."""

TOO_MUCH = 1e-8
"""Relative residual above which the answer is refused: reactions would no longer balance."""


def factorise(matrix: sparse.csc_array, order: Callable[[], Ints] | None = None) -> Solve:
    """Factor a symmetric positive definite matrix; returns a function that takes right-hand
    sides (n, k) to solutions (n, k).

    Args:
        order: gives the unknowns in a good order of elimination, (n,); asked only where the
            library in use has none as good of its own and the matrix is large.

    Raises:
        SolvingError: the matrix is singular (a mechanism), or the memory does not suffice.
    """
    if not np.isfinite(matrix.data).all():
        raise SolvingError(
            "the stiffness matrix holds a number that is not finite",
            "look for sizes, thickness or material values that are far too large or too small",
        )
    solver = _pardiso_solver()
    if solver is not None:
        return _pardiso(solver, matrix)
    if order is None or matrix.shape[0] < LEAST_ORDERED:
        return superlu(matrix)
    return superlu(matrix, order())


def superlu(matrix: sparse.csc_array, order: Ints | None = None) -> Solve:
    """The same by SuperLU in its symmetric setting; minimum degree unless an order is given."""
    try:
        factor = splu(
            matrix if order is None else sparse.csc_array(matrix[order][:, order]),
            permc_spec="MMD_AT_PLUS_A" if order is None else "NATURAL",
            diag_pivot_thresh=0.0,
            options={"SymmetricMode": True},
        )
    except RuntimeError as error:
        if "singular" in str(error):
            raise _mechanism() from error
        raise
    except MemoryError as error:
        raise _no_memory(matrix) from error

    def solve(right: Floats) -> Floats:
        if order is None:
            return np.asarray(factor.solve(np.ascontiguousarray(right)))
        out = np.empty(right.shape)
        out[order] = factor.solve(np.ascontiguousarray(right[order]))
        return out

    return solve


def _pardiso_solver() -> Any:
    """A fresh MKL PARDISO for real symmetric positive definite matrices (type 2), or None.

    The package may be there without a library that it can load: that is no reason not to solve.
    """
    if importlib.util.find_spec("pypardiso") is None:
        return None
    try:
        from pypardiso import PyPardisoSolver

        return PyPardisoSolver(mtype=2)
    except (ImportError, AttributeError, OSError) as error:
        _log.warning("pypardiso is installed but cannot be used, SuperLU is: %s", error)
        return None


def _pardiso(solver: Any, matrix: sparse.csc_array) -> Solve:
    """The same by MKL PARDISO, which reads the upper triangle only."""
    from pypardiso.pardiso_wrapper import PyPardisoError

    upper = sparse.csr_matrix(sparse.triu(matrix, format="csr"))
    try:
        solver.factorize(upper)
    except PyPardisoError as error:
        if error.value == PARDISO_NO_MEMORY:
            raise _no_memory(matrix) from error
        raise _mechanism() from error

    def solve(right: Floats) -> Floats:
        return np.asarray(solver.solve(upper, np.asfortranarray(right))).reshape(right.shape)

    # the library's memory is not Python's: give it back when the factor is no longer used
    weakref.finalize(solve, solver.free_memory, everything=True).atexit = False
    return solve


def solve_refined(
    matrix: sparse.csc_array,
    right: Floats,
    gap_of: Callable[[Sequence[Floats]], Floats],
    factor: Callable[[sparse.csc_array], Solve] = factorise,
) -> tuple[list[Floats], float]:
    """Solve for right-hand sides (n, k) and refine until the residual is as small as it gets.

    Args:
        gap_of: takes the terms whose sum is the answer, (n, k) each, to what is left of the
            right-hand sides, (n, k); it may be more exact than the matrix is.

    Returns:
        The terms of the answer, largest first, and the largest relative residual
        |right - A x| / |right| over the k.

    Raises:
        SolvingError: a mechanism, or a residual that refinement does not bring down.
    """
    if matrix.shape[0] == 0 or right.shape[1] == 0:
        return [np.zeros(right.shape)], 0.0
    if not np.isfinite(right).all():
        raise SolvingError(
            "a load or prescribed displacement is not finite", "give it an ordinary number"
        )
    solve = factor(matrix)
    terms = [solve(right)]
    if not np.isfinite(terms[0]).all():
        raise _mechanism()
    gap = gap_of(terms)
    residuals = _relative(gap, right)
    for _ in range(REFINEMENTS):
        rough = np.flatnonzero(~(residuals <= ENOUGH))
        if not len(rough):
            break
        more = np.zeros(right.shape)
        more[:, rough] = solve(gap[:, rough])
        left = gap_of([*terms, more])
        better = _relative(left, right)
        if not better.max() < residuals.max():
            break
        terms, gap, residuals = [*terms, more], left, better
    residual = float(residuals.max())
    if not residual <= TOO_MUCH:
        raise SolvingError(
            f"the equations are solved to a relative residual of {residual:.1e} only",
            "look for supports that barely hold the part, or for a wall or a material that is "
            "very much softer in one place",
        )
    return terms, residual


def _relative(gap: Floats, right: Floats) -> Floats:
    """Size of each column of the gap relative to its right-hand side, (k,)."""
    size = np.linalg.norm(right, axis=0)
    return np.asarray(np.linalg.norm(gap, axis=0) / np.where(size > 0.0, size, 1.0))


def _no_memory(matrix: sparse.csc_array) -> SolvingError:
    return SolvingError(
        f"{matrix.shape[0]} unknowns need more memory than this machine has",
        "ask for larger elements",
    )


def _mechanism() -> SolvingError:
    return SolvingError(
        "the part is a mechanism: some of it can move without resistance",
        "add a support, or close the place where two regions touch in one point only",
    )
