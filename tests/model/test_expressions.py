"""Expressions: right values, and for everything else an error that says how to mend it."""

from __future__ import annotations

import math

import pytest
from hypothesis import given, strategies as st

from screenapp.model.expressions import (
    ExpressionError,
    check_name,
    cosine,
    evaluate,
    names_in,
    sine,
    tangent,
)

DIMENSIONS = {"width": 80.0, "t": 3.0, "zero": 0.0, "höhe": 12.0, "x2": 5.0}


@pytest.mark.parametrize(
    ("text", "value"),
    [
        ("width/2 - 5", 35.0),
        ("2 + 3 * 4", 14.0),
        ("(2 + 3) * 4", 20.0),
        ("-t**2", -9.0),
        ("2**-1", 0.5),
        ("2**3**2", 512.0),
        ("--t", 3.0),
        ("+1.5e1", 15.0),
        (".5 + 1.", 1.5),
        ("t - -2", 5.0),
        ("width − t × 2 ÷ 6", 79.0),
        ("höhe + x2", 17.0),
        ("sin(30) + cos(60) + tan(45)", 2.0),
        ("sqrt(width*5) + abs(-t)", 23.0),
        ("min(t, width, 1) + max(t)", 4.0),
        ("pi * t", 3 * math.pi),
        ("  7  ", 7.0),
        ("0 * -1", 0.0),
    ],
)
def test_values(text: str, value: float) -> None:
    assert evaluate(text, DIMENSIONS) == value


@pytest.mark.parametrize(
    ("text", "cause", "mend"),
    [
        ("widht/2", '"widht" in "widht/2" is not a dimension', '"width"'),
        ("q", "not a dimension", 'add a dimension "q"'),
        ("1/zero", "divides by zero", "change"),
        ("0**-1", "divides by zero", "change"),
        ("tan(90)", "divides by zero", "change"),
        ("sqrt(-1)", "no finite value", "root"),
        ("(-8)**(1/3)", "no finite value", "negative"),
        ("9**9**9**9", "no finite value", ""),
        ("1e999", "no finite value", "smaller"),
        ("1e308*10", "no finite value", "smaller"),
        ("", "empty", ""),
        ("   ", "empty", ""),
        ("2 +", "not a complete", ""),
        ("(2", "not a complete", ""),
        ("2 3", "not a complete", ""),
        ("2width", "not a number", "*"),
        ("1.2.3", "not a number", ""),
        ("0x10", "not a number", ""),
        ("1_000", "not a number", ""),
        ("2^3", "^", "**"),
        ("1,5", "more than arithmetic", ""),
        ("sin", "no parentheses", "sin(...)"),
        ("sin(1, 2)", "2 values", "one value"),
        ("min()", "0 values", "one or more"),
        ("exp(1)", "not a function", "sqrt"),
        ("width(2)", "not a function", ""),
        ("open('x')", "not understood", ""),
        ("width.real", "not understood", ""),
        ("[1][0]", "not understood", ""),
        ("t if t else 1", "more than arithmetic", ""),
        ("lambda", "not a complete", ""),
        ("True", "not a dimension", ""),
        ("t // 2", "more than arithmetic", ""),
        ("not t", "more than arithmetic", ""),
        ("a := 2", "not understood", ""),
        ("min(*t)", "more than arithmetic", ""),
        ("\x00", "not understood", ""),
        ("1+" * 150 + "1", "301 characters", "dimensions"),
        ("-" * 100 + "1", "nested too deeply", ""),
        ("(" * 99 + "1" + ")" * 99, None, None),
    ],
)
def test_errors(text: str, cause: str | None, mend: str | None) -> None:
    if cause is None:  # parentheses alone are no nesting of work to do
        assert evaluate(text, DIMENSIONS) == 1.0
        return
    with pytest.raises(ExpressionError) as caught:
        evaluate(text, DIMENSIONS)
    assert cause in caught.value.cause
    assert mend is not None
    assert mend in caught.value.mend


@given(st.text(max_size=60) | st.text("0123456789.+-*/() ,wtxesin", max_size=40))
def test_any_text_gives_a_finite_value_or_an_expression_error(text: str) -> None:
    try:
        value = evaluate(text, DIMENSIONS)
    except ExpressionError:
        return
    assert math.isfinite(value)


@given(st.floats(-1e4, 1e4))
def test_angles_in_degrees(angle: float) -> None:
    radians = math.radians(angle)
    assert sine(angle) == pytest.approx(math.sin(radians), abs=1e-11)
    assert cosine(angle) == pytest.approx(math.cos(radians), abs=1e-11)
    if abs(cosine(angle)) > 1e-3:
        assert tangent(angle) == pytest.approx(sine(angle) / cosine(angle), rel=1e-9, abs=1e-12)


@pytest.mark.parametrize("turns", [-2, -1, 0, 3])
def test_angles_with_exact_values(turns: int) -> None:
    full = 360.0 * turns
    assert [sine(full + a) for a in (0, 30, 90, 150, 180, 210, 270, 330)] == [
        0, 0.5, 1, 0.5, 0, -0.5, -1, -0.5,
    ]  # fmt: skip
    assert [cosine(full + a) for a in (0, 60, 90, 120, 180, 240, 270, 300)] == [
        1, 0.5, 0, -0.5, -1, -0.5, 0, 0.5,
    ]  # fmt: skip
    assert [tangent(full + a) for a in (0, 45, 135, 180, 225, -45)] == [0, 1, -1, 0, 1, -1]


def test_names_that_are_used() -> None:
    assert names_in("min(width, pi) - höhe**t") == {"width", "höhe", "t"}


@pytest.mark.parametrize("name", ["width", "w2", "_a", "höhe"])
def test_good_names(name: str) -> None:
    check_name(name)
    assert evaluate(f"{name} + 1", {name: 2.0}) == 3.0


@pytest.mark.parametrize("name", ["", "2w", "a b", "a-b", "pi", "max", "if", "a.b"])
def test_bad_names(name: str) -> None:
    with pytest.raises(ExpressionError):
        check_name(name)


def test_letters_that_look_alike_are_the_same_name() -> None:
    micro_sign, greek_mu = "µ", "μ"
    assert evaluate(micro_sign, {greek_mu: 2.0}) == evaluate(greek_mu, {micro_sign: 2.0}) == 2.0
