"""Stress measures against their definitions and the states that textbooks tabulate."""

from __future__ import annotations

import numpy as np
import pytest

from screenapp.model.solution import tresca, von_mises

# Tresca: σ1 - σ3 of the three principal stresses; Timoshenko, Strength of Materials, from memory


@pytest.mark.parametrize(
    ("stress", "expected"),
    [
        ((100.0, 0.0, 0.0), 100.0),  # uniaxial
        ((-100.0, 0.0, 0.0), 100.0),
        ((0.0, 0.0, 50.0), 100.0),  # pure shear: twice τ
        ((100.0, 80.0, 0.0), 100.0),  # both in tension: the zero across the wall is the third
        ((-100.0, -80.0, 0.0), 100.0),
        ((100.0, -60.0, 0.0), 160.0),
        ((80.0, 20.0, 40.0), 100.0),  # principal stresses 100 and 0
    ],
)
def test_tresca_in_plane_stress(stress: tuple[float, float, float], expected: float) -> None:
    assert float(tresca(np.array(stress))) == pytest.approx(expected)


def test_tresca_in_plane_strain_counts_the_stress_across_the_wall() -> None:
    # σz = 0.3 (100 + 80) = 54: 100 - 54
    assert float(tresca(np.array([100.0, 80.0, 0.0]), 0.3)) == pytest.approx(46.0)


def test_tresca_is_never_under_von_mises_nor_over_two_over_root_three_of_it() -> None:
    stress = np.random.default_rng(4).normal(size=(1000, 3))
    for poisson in (0.0, 0.3):
        ratio = tresca(stress, poisson) / von_mises(stress, poisson)
        assert ratio.min() >= 1.0 - 1e-12
        assert ratio.max() <= 2.0 / np.sqrt(3.0) + 1e-12
