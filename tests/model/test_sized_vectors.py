"""Vectors whose size is an expression: components and back."""

from __future__ import annotations

import math

import pytest
from hypothesis import given, strategies as st

from screenapp.model.expressions import evaluate
from screenapp.model.sized_vectors import component_texts, size_text

SIZES = ("pull", "2*pull + 5", "-(pull)", "(pull + 1)*(pull - 1)", "pull/max(1, pull)")


@given(
    st.sampled_from(SIZES),
    st.sampled_from([0.0, 90.0, 180.0, 270.0, 30.0, 225.0, 284.3, -12.5]) | st.floats(-720, 720),
    st.sampled_from([-40.0, 3.0, 1200.0]),
)
def test_the_size_comes_back_with_its_value(size: str, angle: float, pull: float) -> None:
    known = {"pull": pull}
    texts = component_texts(size, angle)
    x, y = (0.0 if t is None else evaluate(t, known) for t in texts)
    value = evaluate(size, known)
    assert math.hypot(x, y) == pytest.approx(abs(value), abs=1e-9)
    if value:
        assert math.cos(math.radians(angle)) * value == pytest.approx(x, abs=1e-6 * abs(value))
        assert math.sin(math.radians(angle)) * value == pytest.approx(y, abs=1e-6 * abs(value))
    back = size_text(*texts, (x, y))
    assert back is not None
    assert evaluate(back, known) == pytest.approx(abs(value))  # a size is never negative


@pytest.mark.parametrize(
    ("x", "y", "at"),
    [
        (None, None, (1.0, 0.0)),
        ("pull", None, (3.0, 4.0)),
        ("pull", "2*pull", (3.0, 6.0)),
        ("(pull)*cos(30)", "(pull)*sin(40)", (1.0, 1.0)),
        ("(pull)*cos(30)", "(lift)*sin(30)", (1.0, 1.0)),
        ("(a)*(b)*cos(30)", "(a)*(b)*sin(30)", (1.0, 1.0)),
    ],
)
def test_other_expressions_are_left_alone(
    x: str | None, y: str | None, at: tuple[float, float]
) -> None:
    assert size_text(x, y, at) is None
