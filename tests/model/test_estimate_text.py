"""Numbers with their bands in words: what is written must hold what was found."""

from __future__ import annotations

import math
import re

import pytest
from hypothesis import given, strategies as st

from screenapp.model.estimate_text import estimate_text, significant, unit_of, value_text
from screenapp.model.findings import Estimate


@pytest.mark.parametrize(
    ("estimate", "text"),
    [
        (Estimate(143.21, 142.66, 143.7, "settled"), "143.2 ± 0.6 MPa"),
        (Estimate(187.449, 186.5, 188.3, "settled"), "187.4 ± 1.0 MPa"),
        (Estimate(143.2, 140.0, 147.0, "settled"), "143 ± 4 MPa"),
        (Estimate(1432.0, 1370.0, 1490.0, "settled"), "1430 ± 70 MPa"),
        (Estimate(-0.41, -0.45, -0.38, "settled"), "−0.41 ± 0.04 MPa"),
        (Estimate(0.0, 0.0, 0.0, "settled"), "0 MPa"),
        (Estimate(3e-13, -1e-13, 5e-13, "settled"), "0 MPa"),
        (Estimate(310.4, 310.4, math.inf, "rising"), "≥ 310 MPa, rising"),
        (Estimate(-310.4, -math.inf, -310.4, "rising"), "≤ −310 MPa, rising"),
        (Estimate(61.97, 61.97, math.inf, "rising"), "≥ 61.9 MPa, rising"),
        (Estimate(143.21, 100.0, 190.0, "unsettled"), "143 MPa, not settled"),
        (Estimate(math.nan, 0.0, 0.0, "unsettled"), "no value, not settled"),
    ],
)
def test_stress_in_words(estimate: Estimate, text: str) -> None:
    assert estimate_text(estimate, "stress", "mm-N-MPa") == text


def test_inch_units_convert_value_and_band() -> None:
    # 1 ksi = 6.894757 MPa (from memory)
    estimate = Estimate(6.894757 * 20, 6.894757 * 19.9, 6.894757 * 20.1, "settled")
    assert estimate_text(estimate, "stress", "in-lbf-ksi") == "20.00 ± 0.10 ksi"
    assert value_text(Estimate(25.4, 25.3, 25.5, "settled"), "displacement", "in-lbf-ksi") == (
        "1.000 ± 0.004 in"
    )


def test_without_unit_and_without_trust() -> None:
    rising = Estimate(61.97, 61.97, math.inf, "rising")
    assert value_text(rising, "stress", "mm-N-MPa", unit=False) == "≥ 61.9"
    assert value_text(Estimate(1.083, 1.078, 1.087, "settled"), "factor", "mm-N-MPa") == (
        "1.083 ± 0.005"
    )


def test_units_of_factors_are_none() -> None:
    assert unit_of("factor", "in-lbf-ksi") == (1.0, "")


def test_significant_digits() -> None:
    assert [significant(v) for v in (0.012345, 12.345, 12345.0, -1.0)] == [
        "0.0123",
        "12.3",
        "12300",
        "−1.00",
    ]


@given(
    st.floats(-1e4, 1e4).filter(lambda v: abs(v) > 1e-2),
    st.floats(1e-4, 0.2),
    st.floats(1e-4, 0.2),
)
def test_written_band_holds_the_found_band(value: float, below: float, above: float) -> None:
    found = Estimate(value, value - below * abs(value), value + above * abs(value), "settled")
    text = value_text(found, "stress", "mm-N-MPa", unit=False).replace("−", "-")
    middle, half = (float(x) for x in re.split(" ± ", text))
    spare = 1e-6 * abs(value)
    assert middle - half <= found.low + spare
    assert middle + half >= found.high - spare
    # and is not much wider: one step of at least a twentieth, twice (band and value rounded)
    true_half = max(found.high - value, value - found.low)
    assert half <= 1.8 * true_half + 2e-4 * abs(value)


@given(st.floats(1e-3, 1e5))
def test_bound_never_says_more_than_found(value: float) -> None:
    text = value_text(Estimate(value, value, math.inf, "rising"), "stress", "mm-N-MPa", unit=False)
    assert 0.98 * value <= float(text.removeprefix("≥ ")) <= value * (1 + 1e-9)
