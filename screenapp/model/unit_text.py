"""Understands units as people type them: "kN", "N/mm²", "lbf/in", "µm/(m·K)", "ksi".

The text is taken apart here; pint is asked about one name at a time and multiplies exactly, in
fractions.  Its registry takes a quarter of a second to build and is built when first needed.
"""

from __future__ import annotations

import functools
import re
from fractions import Fraction
from typing import Any

from screenapp.model.errors import ScreenappError
from screenapp.model.kinds import KINDS, Kind


class QuantityError(ScreenappError):
    """What was typed is not a quantity of the wanted kind."""


_SIGNS = str.maketrans(
    {"·": "*", "⋅": "*", "×": "*", "μ": "µ", "″": '"', "′": "'", "²": "2", "³": "3"}
)
_TOKEN = re.compile(r"\s*(?:(\*\*|[*/^()])|(1(?!\d))|([^\W\d]+(?:_\d)?|[%‰°\"'])(-?\d)?)")
_EXPONENT = re.compile(r"\s*(-?\d)(?!\d)")

_ALIASES = {
    '"': "inch",
    "'": "foot",
    "%": "percent",
    "‰": "permille",
    "°": "deg",
    "degF": "delta_degF",
    "degC": "delta_degC",
    "µin": "microinch",
}
_HINTS = {
    ("lb", "a force"): "write lbf",
    ("lbs", "a force"): "write lbf",
    ("kg", "a force"): "write N, or kgf",
    ("t", "a force"): "write kN",
    ("mil", "a length"): "write thou or in",
    ("N", "a stress"): "write N/mm² or MPa",
    ("MPa", "a force per length"): "write N/mm, or make it a pressure",
}


@functools.lru_cache(maxsize=512)
def stored_per_unit(text: str, kind: Kind) -> Fraction:
    """How many stored units of `kind` one of the typed unit is, exactly.

    Raises:
        QuantityError: an unknown unit, or one of another kind.
    """
    if kind is KINDS["speed"]:  # to pint a turn is 2π; here it counts as one
        text = text.replace("rpm", "1/min")
    unit = _product(text, kind)
    wanted = _registry().Quantity(Fraction(1), kind.stored)
    if unit.dimensionality != wanted.dimensionality:
        other = _noun_of(unit)
        raise QuantityError(f"{text} is {other}, {kind.noun} is wanted", _mend(text, kind))
    factor = unit.to(wanted.units).magnitude
    return Fraction(factor)


@functools.cache
def _registry() -> Any:
    import pint  # here, not above: it takes long, and many a start never needs it

    return pint.UnitRegistry(non_int_type=Fraction, cache_folder=None)


def _product(text: str, kind: Kind) -> Any:
    """The typed unit as a pint quantity: factors from left to right, one level of parentheses."""
    plain = text.translate(_SIGNS).replace("°F", "degF").replace("°C", "degC")
    result = _registry().Quantity(Fraction(1))
    divides = outer = False
    inside = wants_factor = False
    at = 0
    while at < len(plain):
        token = _TOKEN.match(plain, at)
        if token is None:
            raise _unknown(text, kind)
        at = token.end()
        sign, one, name, exponent = token.groups()
        if sign in ("*", "/"):
            if wants_factor or (sign == "*" and token.start() == 0):
                raise _unknown(text, kind)
            divides, wants_factor = sign == "/", True
        elif sign == "(" and not inside:
            inside, outer, divides = True, divides, False
        elif sign == ")" and inside and not wants_factor:
            inside, outer, divides = False, False, False
        elif name or one:
            power = int(exponent) if exponent else 1
            if name and (raised := re.compile(r"\s*(?:\*\*|\^)").match(plain, at)):
                number = _EXPONENT.match(plain, raised.end())
                if number is None:
                    raise _unknown(text, kind)
                power, at = int(number[1]), number.end()
            factor = _named(name, text, kind) ** power if name else 1
            result = result / factor if divides != outer else result * factor
            divides = wants_factor = False
        else:
            raise _unknown(text, kind)
    if inside or wants_factor:
        raise _unknown(text, kind)
    return result


def _named(name: str, text: str, kind: Kind) -> Any:
    """One unit by its name."""
    registry = _registry()
    known = _ALIASES.get(name, name)
    if kind is KINDS["acceleration"] and name == "g":
        known = "standard_gravity"
    if not known.isidentifier():  # "¼" counts as a letter to the pattern, but names nothing
        raise _unknown(text, kind, name)
    try:
        unit = registry.Quantity(Fraction(1)) * registry.Quantity(
            Fraction(1), registry.parse_units(known)
        )
    except (_pint_error(), ValueError, AttributeError) as error:
        raise _unknown(text, kind, name) from error
    if unit.dimensionless and known not in kind.plain:
        raise QuantityError(f"{text} does not belong to {kind.noun}", _mend(text, kind))
    return unit


def _pint_error() -> type[Exception]:
    """The base of pint's errors: an unknown name, a unit with an offset or a logarithm."""
    import pint.errors

    found: type[Exception] = pint.errors.PintError
    return found


def _mend(text: str, kind: Kind) -> str:
    return _HINTS.get((text, kind.noun), f"give it like {kind.example}")


def _unknown(text: str, kind: Kind, name: str = "") -> QuantityError:
    near = _right_case(name) if name else None
    mend = f"did you mean {near}?" if near else f"give it like {kind.example}"
    return QuantityError(f'the unit "{name or text}" is not known', mend)


def _right_case(name: str) -> str | None:
    """A common unit that differs from `name` in upper and lower case only."""
    common = ("mm", "in", "N", "kN", "MN", "MPa", "GPa", "kPa", "ksi", "psi", "lbf", "kg", "deg")
    return next((unit for unit in common if unit.lower() == name.lower()), None)


def _noun_of(unit: Any) -> str:
    """What kind of thing a unit measures, in words."""
    for kind in KINDS.values():
        if unit.dimensionality == _registry().Quantity(Fraction(1), kind.stored).dimensionality:
            return kind.noun
    return "another kind of quantity"
