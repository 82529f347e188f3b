"""One factorisation of the stiffness matrix for all load cases, with the residual checked.

SuperLU is run in its symmetric setting (minimum degree on A + Aᵀ, diagonal pivots), which a
positive definite matrix allows; where pypardiso is installed it is used instead.
"""

from __future__ import annotations

import importlib.util
from collections.abc import Callable

import numpy as np
from numpy.typing import NDArray
from scipy import sparse
from scipy.sparse.linalg import splu

from screenapp.model.errors import SolvingError

Floats = NDArray[np.float64]
Solve = Callable[[Floats], Floats]

ENOUGH = 1e-13
"""Relative residual below which no refinement is needed."""

TOO_MUCH = 1e-8
"""Relative residual above which the answer is refused: reactions would no longer balance."""


def factorise(matrix: sparse.csc_array) -> Solve:
    """Factor a symmetric positive definite matrix; returns a function that takes right-hand
    sides (n, k) to solutions (n, k).

    Raises:
        SolvingError: the matrix is singular (a mechanism), or the memory does not suffice.
    """
    if not np.isfinite(matrix.data).all():
        raise SolvingError(
            "the stiffness matrix holds a number that is not finite",
            "look for sizes, thickness or material values that are far too large or too small",
        )
    return _pardiso(matrix) if importlib.util.find_spec("pypardiso") else superlu(matrix)


def superlu(matrix: sparse.csc_array) -> Solve:
    """The same by SuperLU in its symmetric setting."""
    try:
        factor = splu(
            matrix,
            permc_spec="MMD_AT_PLUS_A",
            diag_pivot_thresh=0.0,
            options={"SymmetricMode": True},
        )
    except RuntimeError as error:
        if "singular" in str(error):
            raise _mechanism() from error
        raise
    except MemoryError as error:
        raise SolvingError(
            f"{matrix.shape[0]} unknowns need more memory than this machine has",
            "ask for larger elements",
        ) from error

    def solve(right: Floats) -> Floats:
        return np.asarray(factor.solve(np.ascontiguousarray(right)))

    return solve


def _pardiso(matrix: sparse.csc_array) -> Solve:
    """The same by MKL PARDISO, real symmetric positive definite (matrix type 2)."""
    from pypardiso import PyPardisoSolver

    solver = PyPardisoSolver(mtype=2)
    upper = sparse.csr_matrix(sparse.triu(matrix, format="csr"))
    try:
        solver.factorize(upper)
    except Exception as error:  # pypardiso raises its own type for a zero pivot
        raise _mechanism() from error

    def solve(right: Floats) -> Floats:
        return np.asarray(solver.solve(upper, right)).reshape(right.shape)

    return solve


def solve_checked(
    matrix: sparse.csc_array, right: Floats, factor: Callable[[sparse.csc_array], Solve] = factorise
) -> tuple[Floats, float]:
    """Solve for right-hand sides (n, k), refine once where rounding calls for it.

    Returns:
        The solutions (n, k) and the largest relative residual |b - A x| / |b| over the k.

    Raises:
        SolvingError: a mechanism, or a residual that refinement does not bring down.
    """
    if matrix.shape[0] == 0 or right.shape[1] == 0:
        return np.zeros(right.shape), 0.0
    if not np.isfinite(right).all():
        raise SolvingError(
            "a load or prescribed displacement is not finite", "give it an ordinary number"
        )
    solve = factor(matrix)
    answer = solve(right)
    if not np.isfinite(answer).all():
        raise _mechanism()
    gap, residual = _residual(matrix, answer, right)
    if residual > ENOUGH:
        refined = answer + solve(gap)
        _, better = _residual(matrix, refined, right)
        if better < residual:
            answer, residual = refined, better
    if not residual <= TOO_MUCH:
        raise SolvingError(
            f"the equations are solved to a relative residual of {residual:.1e} only",
            "look for supports that barely hold the part, or for a wall or a material that is "
            "very much softer in one place",
        )
    return answer, residual


def _residual(matrix: sparse.csc_array, answer: Floats, right: Floats) -> tuple[Floats, float]:
    gap = right - matrix @ answer
    size = np.linalg.norm(right, axis=0)
    relative = np.linalg.norm(gap, axis=0) / np.where(size > 0.0, size, 1.0)
    return gap, float(relative.max())


def _mechanism() -> SolvingError:
    return SolvingError(
        "the part is a mechanism: some of it can move without resistance",
        "add a support, or close the place where two regions touch in one point only",
    )
