"""Fatigue formulas against figures by hand, notch constants against those that are tabulated."""

from __future__ import annotations

import math

import pytest

from screenapp.model.fatigue import (
    counted_share,
    fatigue_figures,
    notch_sensitivity,
    reversed_amplitude,
)
from screenapp.model.part import Material


def steel(strength: float, **more: object) -> Material:
    return Material(
        "s", 210_000.0, 0.3, 7850.0, None, strength, family="steel", **more  # type: ignore[arg-type]
    )  # fmt: skip


def test_typical_figures_by_the_uniform_material_law() -> None:
    # Bäumel and Seeger 1990, from memory: σf' = 1.5 Rm, b = -0.087; at N = 1e6 0.4245 Rm
    found = fatigue_figures(steel(500.0))
    assert found is not None
    assert found.amplitude(1e6) == pytest.approx(750.0 * math.exp(-0.087 * math.log(2e6)))
    assert found.amplitude(1e6) / 500.0 == pytest.approx(0.4245, abs=1e-4)
    assert "Bäumel" in found.source
    alloy = fatigue_figures(Material("a", 7e4, 0.33, 2700.0, None, 300.0, family="aluminium"))
    assert alloy is not None
    assert (alloy.coefficient, alloy.exponent) == pytest.approx((501.0, -0.095))


def test_given_figures_go_first_and_unknown_ones_are_none() -> None:
    own = fatigue_figures(steel(500.0, fatigue_coefficient=900.0, fatigue_exponent=-0.1))
    assert own is not None
    assert own.amplitude(0.5) == pytest.approx(900.0)  # one reversal
    plastic = Material("p", 2000.0, 0.4, 1000.0, None, 50.0, family="plastic")
    assert fatigue_figures(plastic) is None
    assert fatigue_figures(Material("x", 2e5, 0.3, 7850.0, family="steel")) is None


def test_mean_stress() -> None:
    assert reversed_amplitude(100.0, 0.0, "goodman", 400.0) == 100.0
    assert reversed_amplitude(100.0, 100.0, "goodman", 400.0) == pytest.approx(400.0 / 3.0)
    assert reversed_amplitude(100.0, -100.0, "goodman", 400.0) == 100.0
    assert reversed_amplitude(100.0, 100.0, "smith_watson_topper", 400.0) == pytest.approx(
        100.0 * math.sqrt(2.0)
    )
    assert reversed_amplitude(100.0, 0.0, "smith_watson_topper", 400.0) == 100.0
    assert reversed_amplitude(100.0, -150.0, "smith_watson_topper", 400.0) == 0.0


def test_notch_sensitivity() -> None:
    # Peterson's constants that are tabulated (Dowling, from memory): 0.25 mm normalised (about
    # 580 MPa), 0.064 mm quenched and tempered steel (about 1240 MPa)
    for strength, constant in ((580.0, 0.25), (1240.0, 0.064)):
        q = notch_sensitivity("peterson", 1.0, steel(strength))
        assert 1.0 / q - 1.0 == pytest.approx(constant, rel=0.05)
    # Neuber's √a of Shigley's table for 690 MPa (100 kpsi): 0.062 √in, from memory
    q = notch_sensitivity("neuber", 1.0, steel(690.0))
    assert (1.0 / q - 1.0) ** 2 == pytest.approx(0.062**2 * 25.4, rel=0.25)
    assert notch_sensitivity("none", 0.1, steel(500.0)) == 1.0
    assert notch_sensitivity("peterson", 1e9, steel(500.0)) == pytest.approx(1.0)


def test_counted_share_lies_between_the_sensitivity_and_one() -> None:
    assert counted_share(0.8, 1.0) == 1.0
    assert counted_share(0.8, 3.0) == pytest.approx(2.6 / 3.0)
    assert counted_share(1.0, 3.0) == 1.0
    assert counted_share(0.8, 0.5) == 1.0
