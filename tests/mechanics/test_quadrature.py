"""The rules integrate what they promise to."""

from __future__ import annotations

import numpy as np
import pytest

from screenapp.mechanics.quadrature import gauss_line, gauss_square


@pytest.mark.parametrize("n", [1, 2, 3, 5])
def test_line_is_exact_to_degree_2n_minus_1(n: int) -> None:
    x, w = gauss_line(n)
    for degree in range(2 * n):
        exact = 0.0 if degree % 2 else 2.0 / (degree + 1)
        assert w @ x**degree == pytest.approx(exact, abs=1e-14)
    assert w @ x ** (2 * n) != pytest.approx(2.0 / (2 * n + 1), abs=1e-6)


def test_square_multiplies_lines_with_xi_fastest() -> None:
    points, weights = gauss_square(3)
    assert weights @ (points[:, 0] ** 4 * points[:, 1] ** 2) == pytest.approx(0.4 * 2.0 / 3.0)
    assert (np.diff(points[:3, 0]) > 0).all()
    assert np.ptp(points[:3, 1]) == 0.0


def test_rules_cannot_be_overwritten() -> None:
    with pytest.raises(ValueError, match="read-only"):
        gauss_line(2)[0][0] = 1.0
