"""The rule that turns a history into band and trust."""

import math

from screenapp.screening.trust import Sample, judge


def history(*values: float, shrink: float = 0.5) -> list[Sample]:
    """Samples on elements that shrink from pass to pass."""
    return [Sample(v, 8.0 * shrink**i) for i, v in enumerate(values)]


def test_nothing_is_settled_before_the_third_pass() -> None:
    assert judge(history(100.0, 100.0), 0.02, 100.0).trust == "unsettled"
    assert judge(history(100.0, 100.0, 100.0), 0.02, 100.0).trust == "settled"


def test_one_pass_has_no_bound() -> None:
    estimate = judge(history(100.0), 0.02, 100.0)
    assert estimate.trust == "unsettled"
    assert math.isinf(estimate.high)


def test_the_band_holds_the_last_change() -> None:
    estimate = judge(history(90.0, 99.0, 100.0), 0.02, 100.0)
    assert estimate.low <= 99.0 <= estimate.value <= estimate.high


def test_a_change_beyond_the_tolerance_is_not_settled() -> None:
    assert judge(history(90.0, 95.0, 100.0), 0.02, 100.0).trust == "unsettled"


def test_growth_that_the_geometry_predicts_is_rising() -> None:
    values = [100.0 * 2.0 ** (0.4555 * i) for i in range(3)]
    estimate = judge(history(*values), 0.02, values[-1], expected_rate=0.4555)
    assert estimate.trust == "rising"
    assert math.isinf(estimate.high)


def test_growth_unforeseen_needs_four_passes_and_eight_times_smaller_elements() -> None:
    values = [100.0 * 2.0 ** (0.4 * i) for i in range(4)]
    assert judge(history(*values[:3]), 0.02, 100.0).trust == "unsettled"
    assert judge(history(*values), 0.02, 100.0).trust == "rising"


def test_a_steady_value_at_a_predicted_place_needs_a_long_run() -> None:
    assert judge(history(*[100.0] * 3), 0.02, 100.0, 0.4555).trust == "unsettled"
    assert judge(history(*[100.0] * 4), 0.02, 100.0, 0.4555).trust == "settled"
