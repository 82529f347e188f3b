"""Factorisation: right answers, refinement, and refusals in words."""

from __future__ import annotations

import importlib.util
import sys
from collections.abc import Sequence

import numpy as np
import pytest
from scipy import sparse

from screenapp.mechanics.linear_solve import Solve, factorise, solve_refined, superlu
from screenapp.model.errors import SolvingError
from tests.mechanics.structured import Floats


def _matrix(n: int = 40) -> sparse.csc_array:
    return sparse.csc_array(
        sparse.diags_array([-1.0, 2.1, -1.0], offsets=[-1, 0, 1], shape=(n, n))  # type: ignore[call-overload]
    )


def _gap(matrix: sparse.csc_array, right: Floats):  # type: ignore[no-untyped-def]
    def gap(terms: Sequence[Floats]) -> Floats:
        return np.asarray(right - sum(matrix @ term for term in terms))

    return gap


def test_several_right_hand_sides_at_once() -> None:
    matrix = _matrix()
    wanted = np.random.default_rng(1).normal(size=(40, 3))
    right = matrix @ wanted
    terms, residual = solve_refined(matrix, right, _gap(matrix, right))
    assert np.sum(terms, axis=0) == pytest.approx(wanted)
    assert residual < 1e-12


def test_a_poor_factor_is_refined_and_a_useless_one_refused() -> None:
    matrix, wanted = _matrix(), np.ones((40, 1))
    right = matrix @ wanted

    def off_by(share: float):  # type: ignore[no-untyped-def]
        def factor(given: sparse.csc_array) -> Solve:
            exact = superlu(given)
            return lambda r: exact(r) * (1.0 + share)

        return factor

    terms, residual = solve_refined(matrix, right, _gap(matrix, right), off_by(1e-4))
    assert len(terms) > 1
    assert residual < 1e-12
    assert np.sum(terms, axis=0) == pytest.approx(wanted, rel=1e-10)
    with pytest.raises(SolvingError, match="relative residual"):
        solve_refined(matrix, right, _gap(matrix, right), off_by(1.5))


def test_a_mechanism_is_named() -> None:
    loose = sparse.csc_array(np.array([[1.0, -1.0, 0.0], [-1.0, 1.0, 0.0], [0.0, 0.0, 1.0]]))
    with pytest.raises(SolvingError, match="mechanism"):
        factorise(loose)


@pytest.mark.parametrize("bad", [np.nan, np.inf])
def test_numbers_that_are_not_finite_are_refused(bad: float) -> None:
    matrix = _matrix(3)
    right = np.array([[1.0], [bad], [0.0]])
    with pytest.raises(SolvingError, match="load or prescribed displacement is not finite"):
        solve_refined(matrix, right, _gap(matrix, right))
    matrix.data[0] = bad
    with pytest.raises(SolvingError, match="stiffness matrix"):
        factorise(matrix)


def test_nothing_to_solve_is_solved() -> None:
    matrix = _matrix(3)
    terms, residual = solve_refined(matrix, np.zeros((3, 0)), lambda t: t[0])
    assert terms[0].shape == (3, 0)
    assert residual == 0.0
    terms, residual = solve_refined(matrix, np.zeros((3, 1)), _gap(matrix, np.zeros((3, 1))))
    assert not terms[0].any()
    assert residual == 0.0


def test_a_pypardiso_that_cannot_be_loaded_is_passed_over(
    monkeypatch: pytest.MonkeyPatch, caplog: pytest.LogCaptureFixture
) -> None:
    """It is found, but importing it fails (None in sys.modules does that): SuperLU steps in."""
    monkeypatch.setattr(importlib.util, "find_spec", lambda name: name)
    monkeypatch.setitem(sys.modules, "pypardiso", None)
    matrix, wanted = _matrix(), np.ones((40, 1))
    assert factorise(matrix)(matrix @ wanted) == pytest.approx(wanted)
    assert "pypardiso is installed but cannot be used" in caplog.text
