"""Handbook formulas at values that are known without them."""

from __future__ import annotations

import math

import numpy as np
import pytest

from screenapp.model.hand_formulas import (
    CURVED_MOST,
    curved_bar,
    hole_in_bending,
    hole_in_strip,
    hole_off_centre,
    opposite_notches,
    pin_in_lug,
    shoulder_in_bending,
    shoulder_in_tension,
)


@pytest.mark.parametrize(
    ("share", "gross"), [(0.1, 3.03), (0.2, 3.14), (0.3, 3.36), (0.4, 3.74), (0.5, 4.32)]
)
def test_a_hole_in_a_strip_follows_howland(share: float, gross: float) -> None:
    # Howland 1930, largest stress over the stress of the whole section, from memory
    assert hole_in_strip(100.0, 10.0 * share, 10.0, 1.0) / 10.0 == pytest.approx(gross, rel=0.005)


@pytest.mark.parametrize("share", [0.1, 0.2, 0.3, 0.4, 0.5])
def test_a_hole_off_the_middle_becomes_one_in_the_middle(share: float) -> None:
    """Both are fits to Howland there, each within 1 %."""
    middle = hole_off_centre(100.0, 5.0 * share, 5.0, 10.0, 1.0)
    assert middle == pytest.approx(hole_in_strip(100.0, 10.0 * share, 10.0, 1.0), rel=0.015)


@pytest.mark.parametrize("near", [1.0, 2.5, 5.0])
def test_a_small_hole_off_the_middle_has_three_times_the_stress(near: float) -> None:
    # Kirsch 1898
    assert hole_off_centre(100.0, 1e-6, near, 10.0, 1.0) / 10.0 == pytest.approx(3.0, rel=1e-4)


def test_a_small_hole_in_bending_has_twice_the_stress_of_its_height() -> None:
    """Derived: φ = q r³ sin³θ / 6 and what frees the rim give (sin θ - sin 3θ) q r there."""
    angle = np.linspace(0.0, 2.0 * np.pi, 100001)
    factor = float((np.sin(angle) - np.sin(3.0 * angle)).max())
    height = 0.005  # of the rim above the middle of a bar 1 high
    nominal = 12.0 * height  # M y / I for M = 1, t = 1
    assert hole_in_bending(1.0, 2.0 * height, 1.0, 1.0) == pytest.approx(factor * nominal, rel=1e-5)


@pytest.mark.parametrize("formula", [shoulder_in_tension, shoulder_in_bending])
@pytest.mark.parametrize("x", [0.1, 0.5, 1.0, 2.0, 2.001, 5.0, 20.0])
def test_nothing_is_concentrated_where_the_shoulder_is_all(formula: object, x: float) -> None:
    """For 2h/D near 1 the chart's factor goes to 1: it tells a coefficient that is remembered
    wrongly, or with the wrong sign."""
    h = 0.5 * (1.0 - 1e-6)
    narrow = 1.0 - 2.0 * h
    nominal = narrow if formula is shoulder_in_tension else narrow**2 / 6.0
    found = formula(nominal, 1.0, narrow, h / x, 1.0)  # type: ignore[operator]
    assert found == pytest.approx(1.0, abs=0.08)


@pytest.mark.parametrize(
    ("wide", "radius", "pull", "bend"),
    [(25.0, 0.4, 3.445, 3.041), (25.0, 1.0, 2.522, 2.220)],
)
def test_sharp_shoulders_lie_above_the_charts(
    wide: float, radius: float, pull: float, bend: float
) -> None:
    """Factors of a narrow part of 20 mm by scikit-fem (P2 triangles on a mesh of its own, three
    sizes, run for this project): the charts' fits are 5 to 10 % low there, as `valid` says."""
    tension = shoulder_in_tension(20.0, wide, 20.0, radius, 1.0)
    bending = shoulder_in_bending(400.0 / 6.0, wide, 20.0, radius, 1.0)
    assert 0.04 < pull / tension - 1.0 < 0.11
    assert 0.04 < bend / bending - 1.0 < 0.11


def test_notches_go_from_the_half_round_notch_in_a_wide_plate_to_one() -> None:
    # 3.065 is the factor of a half-round notch in the edge of a wide plate (Peterson, from memory)
    assert opposite_notches(1.0, 1e-6, 1.0, 1.0) == pytest.approx(3.065, rel=1e-4)
    last = opposite_notches(1e-6, 0.5 - 0.5e-6, 1.0, 1.0)
    assert last == pytest.approx(1.0, abs=0.01)


def test_a_lug_pulled_by_a_pin_is_worse_than_a_strip_with_a_free_hole() -> None:
    """On the net section: what the pin brings in has to come round the hole."""
    for share in (0.25, 0.3, 0.4, 0.5):
        free = hole_in_strip(1.0, share, 1.0, 1.0)
        assert pin_in_lug(1.0, share, 1.0, 1.0) > 1.05 * free


@pytest.mark.parametrize("ratio", [1.05, 1.3, 2.0, CURVED_MOST])
def test_a_curved_bar_follows_the_exact_solution(ratio: float) -> None:
    """Golovin's solution of pure bending (Timoshenko & Goodier, art. 29, derived)."""
    a, b = 1.0, ratio
    log = math.log(b / a)
    n = (b * b - a * a) ** 2 - 4.0 * (a * b * log) ** 2

    def exact(r: float) -> float:
        inner = -((a * b / r) ** 2) * log
        inner += b * b * math.log(r / b) + a * a * math.log(a / r) + b * b - a * a
        return -4.0 / n * inner

    inside, outside = curved_bar(0.0, 1.0, a, b, 1.0)
    assert inside == pytest.approx(exact(a), rel=0.005)
    assert outside == pytest.approx(exact(b), rel=0.03)
