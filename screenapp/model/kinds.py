"""The kinds of quantity, how each is stored and how it is shown.

Factors are exact fractions: 1 in = 25.4 mm and 1 lb = 0.45359237 kg by the international yard and
pound agreement of 1959, standard gravity 9.80665 m/s² (3rd CGPM, 1901); from memory.
"""

from __future__ import annotations

from dataclasses import dataclass
from fractions import Fraction
from typing import Literal

from screenapp.model.part import DisplayUnits

KindName = Literal[
    "length",
    "area",
    "force",
    "moment",
    "stress",
    "line_load",
    "bed_stiffness",
    "spring_stiffness",
    "angle",
    "acceleration",
    "density",
    "mass",
    "expansion",
    "speed",
    "temperature",
    "temperature_change",
    "temperature_gradient",
    "ratio",
    "number",
]

_INCH = Fraction(254, 10)
_POUND = Fraction(45359237, 100000000)
_POUND_FORCE = _POUND * Fraction(980665, 100000)


@dataclass(frozen=True)
class Kind:
    """A kind of quantity.

    Attributes:
        noun: "a length".
        stored: the unit in the part file, as pint reads it; "" for a plain number.
        metric, inch: label of the display unit, and how many stored units it is.
        example: what one may type.
        plain: names of units without a dimension that may be typed ("deg", "%").
    """

    noun: str
    stored: str
    metric: tuple[str, Fraction]
    inch: tuple[str, Fraction]
    example: str
    plain: tuple[str, ...] = ()

    def shown(self, display_units: DisplayUnits) -> tuple[str, Fraction]:
        """Label of the display unit, and how many stored units it is."""
        return self.inch if display_units == "in-lbf-ksi" else self.metric


_ONE = Fraction(1)
_DEGREE = ("°", _ONE)
_PERCENT = ("%", Fraction(1, 100))
_PLAIN = ("", _ONE)

KINDS: dict[KindName, Kind] = {
    "length": Kind("a length", "mm", ("mm", _ONE), ("in", _INCH), "12 mm or 0.5 in"),
    "area": Kind("an area", "mm**2", ("mm²", _ONE), ("in²", _INCH**2), "200 mm²"),
    "force": Kind("a force", "N", ("N", _ONE), ("lbf", _POUND_FORCE), "2 kN or 450 lbf"),
    "moment": Kind(
        "a moment", "N*mm", ("N·m", Fraction(1000)), ("lbf·in", _POUND_FORCE * _INCH), "5 N·m"
    ),
    "stress": Kind(
        "a stress",
        "MPa",
        ("MPa", _ONE),
        ("ksi", 1000 * _POUND_FORCE / _INCH**2),
        "80 MPa or 12 ksi",
    ),
    "line_load": Kind(
        "a force per length",
        "N/mm",
        ("N/mm", _ONE),
        ("lbf/in", _POUND_FORCE / _INCH),
        "5 N/mm or 30 lbf/in",
    ),
    "bed_stiffness": Kind(
        "a stiffness per length",
        "N/mm**2",
        ("N/mm²", _ONE),
        ("lbf/in²", _POUND_FORCE / _INCH**2),
        "50 N/mm²",
    ),
    "spring_stiffness": Kind(
        "a stiffness",
        "N/mm",
        ("kN/mm", Fraction(1000)),
        ("lbf/in", _POUND_FORCE / _INCH),
        "50 kN/mm",
    ),
    "angle": Kind(
        "an angle",
        "deg",
        _DEGREE,
        _DEGREE,
        "30° or 0.5 rad",
        ("deg", "degree", "degrees", "rad", "radian", "radians", "mrad", "grad", "arcmin"),
    ),
    "acceleration": Kind(
        "an acceleration",
        "m/s**2",
        ("m/s²", _ONE),
        ("ft/s²", 12 * _INCH / 1000),
        "9.81 m/s² or 3 g",
    ),
    "density": Kind(
        "a density",
        "kg/m**3",
        ("kg/m³", _ONE),
        ("lb/in³", _POUND / (_INCH / 1000) ** 3),
        "2700 kg/m³",
    ),
    "mass": Kind("a mass", "kg", ("kg", _ONE), ("lb", _POUND), "1.2 kg"),
    "expansion": Kind(
        "a coefficient of expansion",
        "1/K",
        ("µm/(m·K)", Fraction(1, 10**6)),
        ("µin/(in·°F)", Fraction(9, 5 * 10**6)),
        "12 µm/(m·K)",
        ("ppm",),
    ),
    "speed": Kind("a speed of rotation", "1/min", ("rpm", _ONE), ("rpm", _ONE), "3000 rpm"),
    # °F has another zero than °C, so a temperature is taken in °C only; a change may be in °F
    "temperature": Kind("a temperature in °C", "", ("°C", _ONE), ("°C", _ONE), "20 °C"),
    "temperature_change": Kind(
        "a change of temperature", "kelvin", ("K", _ONE), ("K", _ONE), "40 K or 72 °F"
    ),
    "temperature_gradient": Kind(
        "a temperature gradient", "kelvin/mm", ("K/mm", _ONE), ("K/mm", _ONE), "0.5 K/mm"
    ),
    "ratio": Kind(
        "a ratio",
        "",
        _PERCENT,
        _PERCENT,
        "2 %",
        ("percent", "permille", "ppm"),
    ),
    "number": Kind("a plain number", "", _PLAIN, _PLAIN, "1.5"),
}
