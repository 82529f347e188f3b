"""Typed and shown quantities: exact conversions, and no text that is silently misread."""

from __future__ import annotations

import math

import pytest
from hypothesis import given, settings, strategies as st

from screenapp.model.kinds import KINDS, KindName
from screenapp.model.part import DisplayUnits
from screenapp.model.unit_text import stored_per_unit
from screenapp.model.units import (
    QuantityError,
    format_number,
    format_quantity,
    parse_quantity,
    unit_label,
)

INCH: DisplayUnits = "in-lbf-ksi"
METRIC: DisplayUnits = "mm-N-MPa"

kinds = st.sampled_from(sorted(KINDS))
systems = st.sampled_from([METRIC, INCH])


@pytest.mark.parametrize(
    ("text", "kind", "value"),
    [
        ("12 mm", "length", 12.0),
        ("12mm", "length", 12.0),
        ("0.5 in", "length", 12.7),
        ('0.5"', "length", 12.7),
        ("1 ft", "length", 304.8),
        ("3/8 in", "length", 9.525),
        ("1 3/8 in", "length", 34.925),
        ("1-3/8 in", "length", 34.925),
        ("250 µm", "length", 0.25),
        ("10 thou", "length", 0.254),
        ("1,5", "length", 1.5),
        ("0,125", "length", 0.125),
        (",5 mm", "length", 0.5),
        ("5.", "length", 5.0),
        ("−5", "length", -5.0),
        ("+ 5", "length", 5.0),
        ("1\u2009234.5", "length", 1234.5),
        ("12\u202f000 N", "force", 12000.0),
        ("1,234,567", "force", 1234567.0),
        ("1,234.5", "force", 1234.5),
        ("1.234,5", "force", 1234.5),
        ("1.5e3", "force", 1500.0),
        ("2 kN", "force", 2000.0),
        ("1 kgf", "force", 9.80665),
        ("1 lbf", "force", 4.4482216152605),
        ("80 MPa", "stress", 80.0),
        ("80 N/mm²", "stress", 80.0),
        ("80 N/mm^2", "stress", 80.0),
        ("80 N/mm2", "stress", 80.0),
        ("80 N/mm**2", "stress", 80.0),
        ("80 N·mm^-2", "stress", 80.0),
        ("0.08 GPa", "stress", 80.0),
        ("5 kN/m", "line_load", 5.0),
        ("30°", "angle", 30.0),
        ("30 deg", "angle", 30.0),
        ("2 g", "acceleration", 19.6133),
        ("9.81 m/s²", "acceleration", 9.81),
        ("7.85 g/cm³", "density", 7850.0),
        ("5 N m", "moment", 5000.0),
        ("5", "moment", 5000.0),
        ("12 µm/(m·K)", "expansion", 12e-6),
        ("12 μm/m/K", "expansion", 12e-6),
        ("12", "expansion", 12e-6),
        ("12e-6 1/K", "expansion", 12e-6),
        ("12 ppm/K", "expansion", 12e-6),
        ("10 1/°F", "expansion", 18.0),
        ("2 %", "ratio", 0.02),
        ("2", "ratio", 0.02),
        ("0.3", "number", 0.3),
    ],
)
def test_typed_quantities(text: str, kind: KindName, value: float) -> None:
    assert parse_quantity(text, kind) == value


def test_a_kip_per_square_inch() -> None:
    # Derived: 1000 lb x 0.45359237 kg/lb x 9.80665 m/s2 over (25.4 mm)^2.
    assert parse_quantity("12 ksi", "stress") == pytest.approx(
        12 * 1000 * 0.45359237 * 9.80665 / 25.4**2, rel=1e-15
    )


def test_a_radian() -> None:
    assert parse_quantity("1 rad", "angle") == pytest.approx(math.degrees(1.0), rel=1e-15)


def test_a_bare_number_is_in_the_display_unit() -> None:
    assert parse_quantity("0.5", "length", INCH) == 12.7
    assert parse_quantity("0.5", "length", METRIC) == 0.5
    assert parse_quantity("12 mm", "length", INCH) == 12.0


@pytest.mark.parametrize(
    ("text", "kind", "cause", "mend"),
    [
        ("5 mm", "force", "mm is a length, a force is wanted", "2 kN"),
        ("5 lb", "force", "lb is a mass, a force is wanted", "lbf"),
        ("5 kg", "force", "kg is a mass", "kgf"),
        ("5 N", "stress", "N is a force, a stress is wanted", "N/mm²"),
        ("5 MPa", "line_load", "MPa is a stress", "N/mm"),
        ("5 KN", "force", '"KN" is not known', "kN"),
        ("5 mpa", "stress", '"mpa" is not known', "MPa"),
        ("5 bananas", "force", '"bananas" is not known', "2 kN"),
        ("5 %", "angle", "% does not belong to an angle", "30°"),
        ("5 deg", "ratio", "does not belong", "2 %"),
        ("5 rad", "number", "does not belong", "1.5"),
        ("5 mil", "length", "does not belong", "thou"),
        ("5 mm", "number", "mm is a length", "1.5"),
        ("5 degC", "length", "a change of temperature", "12 mm"),
        ("12,500", "force", "read in two ways", "12.500 or 12500"),
        ("-1,250 N", "force", "read in two ways", "1.250 or 1250"),
        ("1..2", "length", "not one number", "1234.5"),
        ("1,2,3", "length", "not one number", "1234.5"),
        ("1 2", "length", "not one number", "12 mm"),
        ("12 mm 5", "length", "not known", "12 mm"),
        ("", "length", "nothing was given", "12 mm"),
        ("mm", "length", "no number", "12 mm"),
        ("nan", "length", "no number", "12 mm"),
        ("inf", "length", "no number", "12 mm"),
        ("1/0", "length", "divides by zero", ""),
        ("1e999", "length", "out of range", ""),
        ("1e99999999999", "length", "out of range", ""),
        ("9" * 61, "length", "too long", ""),
        ("0¼", "length", "not known", ""),
        ("5 N/", "force", "not known", ""),
        ("5 *N", "force", "not known", ""),
        ("5 (N", "force", "not known", ""),
        ("5 N)", "force", "not known", ""),
        ("5 N**99", "force", "not known", ""),
        ("5 m**9", "length", "another kind", ""),
        ("5 __import__('os')", "length", "not known", ""),
    ],
)
def test_what_is_refused(text: str, kind: KindName, cause: str, mend: str) -> None:
    with pytest.raises(QuantityError) as caught:
        parse_quantity(text, kind)
    assert cause in caught.value.cause
    assert mend in caught.value.mend


@pytest.mark.parametrize(
    ("value", "kind", "system", "text"),
    [
        (12.7, "length", INCH, "0.5 in"),
        (12.7, "length", METRIC, "12.7 mm"),
        (3.0, "length", METRIC, "3 mm"),
        (143.2345, "stress", METRIC, "143.2 MPa"),
        (9.99996, "length", METRIC, "10 mm"),
        (123456.7, "force", METRIC, "123457 N"),
        (-5.25, "force", METRIC, "−5.25 N"),
        (0.0, "length", METRIC, "0 mm"),
        (-0.0, "length", METRIC, "0 mm"),
        (30.0, "angle", METRIC, "30°"),
        (0.02, "ratio", METRIC, "2 %"),
        (0.3, "number", METRIC, "0.3"),
        (1.25e-9, "length", METRIC, "1.25e−9 mm"),
        (1e12, "stress", METRIC, "1e12 MPa"),
        (math.inf, "stress", METRIC, "∞ MPa"),
        (-math.inf, "stress", METRIC, "−∞ MPa"),
        (math.nan, "stress", METRIC, "no value MPa"),
    ],
)
def test_shown_quantities(value: float, kind: KindName, system: DisplayUnits, text: str) -> None:
    assert format_quantity(value, kind, system) == text


@settings(deadline=None, max_examples=200)
@given(st.floats(allow_nan=False, allow_infinity=False, allow_subnormal=False), kinds, systems)
def test_the_exact_form_reads_back_to_the_same_float(
    value: float, kind: KindName, system: DisplayUnits
) -> None:
    text = format_quantity(value, kind, system, digits=None)
    assert parse_quantity(text, kind, system) == value


@settings(deadline=None, max_examples=200)
@given(st.floats(-1e9, 1e9), kinds, systems, st.integers(1, 8))
def test_what_is_shown_reads_back_to_what_is_shown(
    value: float, kind: KindName, system: DisplayUnits, digits: int
) -> None:
    text = format_quantity(value, kind, system, digits)
    assert format_quantity(parse_quantity(text, kind, system), kind, system, digits) == text


@settings(deadline=None, max_examples=200)
@given(st.floats(1e-3, 1e6), kinds, st.integers(2, 8))
def test_what_is_shown_is_near_enough(value: float, kind: KindName, digits: int) -> None:
    back = parse_quantity(format_number(value, kind, INCH, digits), kind, INCH)
    assert back == pytest.approx(value, rel=0.5001 * 10.0 ** (1 - digits))


@pytest.mark.parametrize("kind", sorted(set(KINDS) - {"number", "temperature"}))
@pytest.mark.parametrize("system", [METRIC, INCH])
def test_every_display_unit_is_what_pint_says_it_is(kind: KindName, system: DisplayUnits) -> None:
    label, factor = KINDS[kind].shown(system)
    assert unit_label(kind, system) == label
    assert stored_per_unit(label, KINDS[kind]) == factor


@pytest.mark.parametrize(
    ("text", "kind", "value"),
    [
        ("3000", "speed", 3000.0),
        ("3000 rpm", "speed", 3000.0),
        ("3000 1/min", "speed", 3000.0),
        ("50 Hz", "speed", 3000.0),
        ("50 1/s", "speed", 3000.0),
        ("20 °C", "temperature", 20.0),
        ("40 °C", "temperature_change", 40.0),
        ("72 °F", "temperature_change", 40.0),
        ("40 K", "temperature_change", 40.0),
    ],
)
def test_turns_and_temperatures(text: str, kind: KindName, value: float) -> None:
    assert parse_quantity(text, kind) == pytest.approx(value)


@pytest.mark.parametrize(
    ("text", "kind"),
    [("300 rad/s", "speed"), ("70 °F", "temperature"), ("300 K", "temperature")],
)
def test_turns_in_radians_and_temperatures_with_another_zero_are_refused(
    text: str, kind: KindName
) -> None:
    with pytest.raises(QuantityError):
        parse_quantity(text, kind)


@settings(deadline=None)
@given(st.text(max_size=20) | st.text("0123456789.,/ eEkNmin²°%()*-", max_size=20), kinds)
def test_any_text_gives_a_finite_value_or_a_quantity_error(text: str, kind: KindName) -> None:
    try:
        value = parse_quantity(text, kind)
    except QuantityError:
        return
    assert math.isfinite(value)
