"""The figure of a number's history: where points, band, marks and growth stand."""

from __future__ import annotations

import math

import pytest

from screenapp.model.findings import Estimate, Peak
from screenapp.model.history_figure import history_figure, peak_figure

SETTLED = Peak(
    "von_mises",
    Estimate(103.0, 102.0, 104.0, "settled"),
    (1.0, 2.0),
    "h1",
    "hole h1, 90°",
    history=(90.0, 100.0, 103.0),
    sizes=(4.0, 2.0, 0.5),
    rate=0.02,
    allowed=2.06,
)


def growing(rate: float, sizes: tuple[float, ...]) -> Peak:
    """A peak that is 100 MPa at elements of 1 mm and grows with `rate`."""
    values = tuple(100.0 * size**-rate for size in sizes)
    estimate = Estimate(values[-1], values[-1], math.inf, "rising")
    return Peak(
        "von_mises",
        estimate,
        (0.0, 0.0),
        "c4",
        "corner c4",
        history=values,
        sizes=sizes,
        rate=rate,
        allowed=2.0,
    )


def test_points_stand_by_the_logarithm_of_the_size() -> None:
    figure = peak_figure(SETTLED, "mm-N-MPa")
    assert figure is not None
    assert [x for x, _ in figure.points] == pytest.approx([0.0, 1.0 / 3.0, 1.0])  # 4, 2, 1/2
    heights = [y for _, y in figure.points]
    assert heights == sorted(heights)
    assert all(0.0 < y < 1.0 for y in heights)


def test_band_and_allowed_band_stand_round_the_last_value_on_the_same_scale() -> None:
    figure = peak_figure(SETTLED, "mm-N-MPa")
    assert figure is not None
    assert figure.band is not None
    assert figure.allowed is not None
    last = figure.points[-1][1]
    per_mpa = (figure.points[2][1] - figure.points[1][1]) / 3.0
    assert figure.band == pytest.approx((last - per_mpa, last + per_mpa))
    assert figure.allowed == pytest.approx((last - 2.06 * per_mpa, last + 2.06 * per_mpa))
    assert figure.growth == ()
    assert (figure.left, figure.right) == ("4 mm", "0.5 mm")
    assert figure.note == "band ± 1.0, allowed ± 2.1 MPa"
    assert "3 passes, 90.00, 100.0, 103.0 MPa" in figure.words
    assert "settled" in figure.words


def test_a_rising_number_has_its_growth_and_no_band() -> None:
    sizes = (2.0, 0.8, 0.32, 0.128)
    figure = peak_figure(growing(0.4555, sizes), "mm-N-MPa")  # Williams 1952: 270°
    assert figure is not None
    assert figure.band is None
    assert figure.allowed is None
    assert figure.note == "grows as size^−0.46"
    assert figure.points[-1][0] == pytest.approx(0.8)
    assert figure.growth[-1][0] == pytest.approx(1.0)
    assert figure.growth[-1][1] > figure.points[-1][1]
    assert all(-1e-9 <= y <= 1.0 for _, y in figure.growth)
    # values that follow the law lie on the curve
    x_third, y_third = figure.points[2]
    near = min(figure.growth, key=lambda spot: abs(spot[0] - x_third))
    assert near[1] == pytest.approx(y_third, abs=0.03)


def test_a_history_without_sizes_stands_by_its_passes() -> None:
    bare = Peak("von_mises", SETTLED.estimate, (0, 0), "h1", "hole h1", history=(90.0, 100.0))
    figure = peak_figure(bare, "mm-N-MPa")
    assert figure is not None
    assert [x for x, _ in figure.points] == [0.0, 1.0]
    assert (figure.left, figure.right) == ("pass 1", "pass 2")
    assert figure.allowed is None


@pytest.mark.parametrize("history", [(), (math.nan, 3.0)])
def test_what_was_not_kept_has_no_figure(history: tuple[float, ...]) -> None:
    bare = Peak("von_mises", SETTLED.estimate, (0, 0), "h1", "hole h1", history=history)
    assert peak_figure(bare, "mm-N-MPa") is None


def test_one_pass_and_a_number_that_never_moved_have_a_figure() -> None:
    once = Peak(
        "von_mises",
        Estimate(5.0, -math.inf, math.inf, "unsettled"),
        (0, 0),
        "",
        "inside",
        history=(5.0,),
        sizes=(1.0,),
    )
    figure = peak_figure(once, "mm-N-MPa")
    assert figure is not None
    assert figure.points == ((0.5, pytest.approx(0.5)),)
    assert figure.band is None
    still = history_figure(
        "x",
        SETTLED.__class__(
            "von_mises",
            Estimate(0.0, 0.0, 0.0, "settled"),
            (0, 0),
            "",
            "x",
            history=(0.0, 0.0, 0.0),
            sizes=(1.0, 1.0, 1.0),
            rate=0.0,
            allowed=0.0,
        ),
        Estimate(0.0, 0.0, 0.0, "settled"),
        "mm-N-MPa",
    )
    assert still is not None
    assert all(math.isfinite(x) and math.isfinite(y) for x, y in still.points)


def test_units_are_those_shown() -> None:
    figure = peak_figure(SETTLED, "in-lbf-ksi")
    assert figure is not None
    assert figure.left.endswith(" in")
    assert "ksi" in figure.words
