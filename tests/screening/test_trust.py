"""The rule that turns a history into band and trust."""

import math

from screenapp.screening.trust import Sample, judge, judge_creeping


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


def test_what_rose_is_rising_also_when_its_elements_shrink_no_more() -> None:
    """The elements at a singular place have a least size; passes of that size show no growth."""
    sizes = [8.0, 4.0, 2.0, 1.0, 1.0, 1.0]
    samples = [Sample(100.0 * size**-0.3, size) for size in sizes]
    assert judge(samples, 0.02, samples[-1].value, 0.3).trust == "rising"
    steady = [Sample(100.0, size) for size in sizes]
    assert judge(steady, 0.02, 100.0, 0.3).trust == "settled"


def test_the_recoverys_own_difference_widens_the_band() -> None:
    close = judge(history(100.0, 100.0, 100.0), 0.02, 100.0)
    doubtful = judge([*history(100.0, 100.0), Sample(100.0, 2.0, 4.0)], 0.02, 100.0)
    assert doubtful.high - doubtful.value > close.high - close.value + 1.0
    far_off = judge([*history(100.0, 100.0), Sample(100.0, 2.0, 10.0)], 0.02, 100.0)
    assert far_off.trust == "unsettled"


def creeping(first: float, each_halving: float, passes: int = 5) -> list[Sample]:
    """A displacement that grows by the same with every halving of the elements at a point."""
    return [Sample(first + i * each_halving, 8.0 * 0.5**i) for i in range(passes)]


def test_a_displacement_that_creeps_at_a_point_has_no_finite_value() -> None:
    estimate = judge_creeping(creeping(1.0, 0.02), 0.02, 1.0)
    assert estimate.trust == "rising"
    assert math.isinf(estimate.high)
    assert estimate.low == estimate.value
    downward = judge_creeping(creeping(-1.0, -0.02), 0.02, 1.0)
    assert downward.trust == "rising"
    assert math.isinf(downward.low)
    assert downward.high == downward.value
    # the usual rule would call it settled, as each change is within the tolerance
    assert judge(creeping(1.0, 0.01), 0.02, 1.0).trust == "settled"
    assert judge_creeping(creeping(1.0, 0.01), 0.02, 1.0).trust == "rising"


def test_slow_creep_is_settled_and_its_band_holds_ten_times_smaller_elements() -> None:
    samples = creeping(1.0, 0.002)
    estimate = judge_creeping(samples, 0.02, 1.0)
    assert estimate.trust == "settled"
    tenfold = samples[-1].value + 0.002 * math.log2(10.0)
    assert estimate.value < tenfold < estimate.high


def test_a_displacement_far_from_the_point_is_judged_as_any_other() -> None:
    assert judge_creeping(creeping(1.0, 0.0), 0.02, 1.0) == judge(creeping(1.0, 0.0), 0.02, 1.0)
    assert judge_creeping(creeping(1.0, 0.0, 2), 0.02, 1.0).trust == "unsettled"


def test_a_stress_that_theory_says_creeps_is_never_settled_beyond_its_tolerance() -> None:
    """Where a shear load stops: even a steady history does not make it known."""
    steady = history(*[100.0] * 5)
    assert judge(steady, 0.02, 100.0).trust == "settled"
    rising = judge(steady, 0.02, 100.0, creep=1.0)  # 2.3 MPa on a tenth of the size
    assert rising.trust == "rising"
    assert math.isinf(rising.high)
    little = judge(steady, 0.02, 100.0, creep=0.5)
    assert little.trust == "settled"
    assert little.high - little.value >= 0.5 * math.log(10.0)
    assert judge(steady[:2], 0.02, 100.0, creep=1.0).trust == "unsettled"
