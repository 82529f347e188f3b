"""What people type and read: "12 mm", "0.5 in", "3/8 in", "2 kN", "1,5", "2 %".

Inside the program every number is in the stored unit of its kind (mm, N, MPa ...).  Both ways are
exact: the text is taken as a fraction, multiplied by an exact factor and rounded to a float once.
"""

from __future__ import annotations

import math
import re
from decimal import ROUND_HALF_EVEN, Context, Decimal
from fractions import Fraction
from functools import lru_cache

from screenapp.model.kinds import KINDS, KindName
from screenapp.model.part import DisplayUnits
from screenapp.model.unit_text import QuantityError, stored_per_unit

__all__ = [
    "KindName",
    "QuantityError",
    "format_number",
    "format_quantity",
    "parse_quantity",
    "unit_label",
]

LONGEST = 60
"""Characters that a quantity may have."""

MINUS = "−"

_DASHES = "−–‒﹣－"
_SPACES = "\u2009\u202f\u00a0\u2007"
_SIGNS = str.maketrans(_DASHES + _SPACES, "-" * len(_DASHES) + " " * len(_SPACES))
_NUMBER = re.compile(
    r"""\s* (?P<sign>[+-]?) \s*
    (?: (?P<fraction> (?:\d+[ -]+)? \d+ \s*/\s* \d+ ) (?![\d.,/])
      | (?P<digits> \d[\d.,]* (?:\ \d{3}(?![\d]) [\d.,]*)* | [.,]\d+ ) (?:[eE](?P<power>[+-]?\d+))?
    )""",
    re.VERBOSE,
)


def parse_quantity(text: str, kind: KindName, display_units: DisplayUnits = "mm-N-MPa") -> float:
    """The stored value of a typed quantity; a bare number is in the display unit.

    A comma may be the decimal sign.  Where a comma might as well part thousands ("12,500"), the
    text is refused rather than guessed at.

    Raises:
        QuantityError: no number, an unknown unit, or a unit of another kind.

    Example:
        >>> parse_quantity("0.5 in", "length")
        12.7
    """
    what = KINDS[kind]
    plain = text.translate(_SIGNS).strip()
    if not plain:
        raise QuantityError("nothing was given", f"give {what.noun} like {what.example}")
    if len(plain) > LONGEST:
        raise QuantityError("the text is too long", f"give {what.noun} like {what.example}")
    found = _NUMBER.match(plain)
    if found is None:
        raise QuantityError(f'"{text}" has no number', f"give {what.noun} like {what.example}")
    number = _number(found, text)
    unit = plain[found.end() :].strip()
    if re.match(r"[.,]|\d(?!\s*/\s*[^\d\s])", unit):
        raise QuantityError(f'"{text}" is not one number', f"give {what.noun} like {what.example}")
    label, factor = what.shown(display_units)
    if unit and unit != label:
        factor = stored_per_unit(unit, what)
    return _finite(number * factor, text)


def format_quantity(
    value: float, kind: KindName, display_units: DisplayUnits = "mm-N-MPa", digits: int | None = 4
) -> str:
    """A stored value as text with its display unit; see `format_number`.

    Example:
        >>> format_quantity(12.7, "length", "in-lbf-ksi")
        '0.5 in'
    """
    number = format_number(value, kind, display_units, digits)
    label = unit_label(kind, display_units)
    return number + label if label in ("", "°") else f"{number} {label}"


@lru_cache(maxsize=4096)
def format_number(
    value: float, kind: KindName, display_units: DisplayUnits = "mm-N-MPa", digits: int | None = 4
) -> str:
    """A stored value as a number in its display unit.

    `digits` is the number of significant figures; whole figures are never cut and closing zeros
    are left out.  With None there are as many as it takes for `parse_quantity` to give back exactly
    `value`.
    """
    if math.isnan(value):
        return "no value"
    if math.isinf(value):
        return "∞" if value > 0 else f"{MINUS}∞"
    factor = KINDS[kind].shown(display_units)[1]
    text = _plain(_rounded(value, factor, digits) if digits else _exact(value, factor))
    return text.replace("-", MINUS)


def unit_label(kind: KindName, display_units: DisplayUnits = "mm-N-MPa") -> str:
    """The display unit, e.g. "mm" or "ksi"; empty for a plain number."""
    return KINDS[kind].shown(display_units)[0]


# --- numbers in texts -----------------------------------------------------------------------


def _number(found: re.Match[str], text: str) -> Fraction:
    sign = -1 if found["sign"] == "-" else 1
    if found["fraction"]:
        *whole, over, under = map(int, re.findall(r"\d+", found["fraction"]))
        if under == 0:
            raise QuantityError(f'"{text}" divides by zero', "give another number")
        return sign * (sum(whole) + Fraction(over, under))
    power = found["power"] or "0"
    if len(power.lstrip("+-")) > 3:
        raise QuantityError(f'"{text}" is out of range', "give a number of ordinary size")
    return (
        sign
        * Fraction(_decimal(found["digits"].replace(" ", ""), text))
        * Fraction(10) ** int(power)
    )


def _decimal(digits: str, text: str) -> str:
    """The digits with a full stop as decimal sign and no thousands signs."""
    last = max(digits.rfind("."), digits.rfind(","))
    if last < 0:
        return digits
    sign, other = digits[last], "," if digits[last] == "." else "."
    if other in digits:  # both: the last one is the decimal sign, the other parts thousands
        if digits.count(sign) == 1 and _grouped(digits[:last], other):
            return digits[:last].replace(other, "") + "." + digits[last + 1 :]
    elif digits.count(sign) > 1:
        if _grouped(digits, sign):
            return digits.replace(sign, "")
    elif sign == "," and re.fullmatch(r"[1-9]\d{0,2},\d{3}", digits):
        point, whole = digits.replace(",", "."), digits.replace(",", "")
        raise QuantityError(f'"{text}" can be read in two ways', f"write {point} or {whole}")
    else:
        return digits.replace(",", ".").removesuffix(".")
    raise QuantityError(f'"{text}" is not one number', "write it like 1234.5")


def _grouped(digits: str, sign: str) -> bool:
    """Whether the digits are parted in thousands by `sign`."""
    return re.fullmatch(rf"\d{{1,3}}(?:{re.escape(sign)}\d{{3}})+", digits) is not None


def _finite(value: Fraction, text: str) -> float:
    try:
        return float(value)
    except OverflowError as error:
        raise QuantityError(
            f'"{text}" is out of range', "give a number of ordinary size"
        ) from error


# --- texts of numbers -----------------------------------------------------------------------


def _rounded(value: float, factor: Fraction, digits: int) -> Decimal:
    """The value in display units to `digits` figures, but never coarser than whole ones."""
    shown = _in_decimal(Fraction(value) / factor, max(digits, 30))
    if shown == 0:
        return Decimal(0)
    if shown.adjusted() > 25:  # rounding to whole ones needs more figures than decimal keeps
        return _in_decimal(Fraction(value) / factor, digits)
    places = max(0, digits - 1 - shown.adjusted())
    return round(shown, places) if places < 400 else shown


def _exact(value: float, factor: Fraction) -> Decimal:
    """The shortest decimal in display units that reads back to exactly `value`."""
    shown = Fraction(value) / factor
    digits = 1
    while _to_float(Fraction(text := _in_decimal(shown, digits)) * factor) != value:
        digits += 1
    return text


def _to_float(value: Fraction) -> float:
    """The nearest float, infinity where the rounded decimal lies beyond the largest one."""
    try:
        return float(value)
    except OverflowError:
        return math.inf


def _in_decimal(value: Fraction, digits: int) -> Decimal:
    context = Context(prec=digits, rounding=ROUND_HALF_EVEN)
    return context.divide(Decimal(value.numerator), Decimal(value.denominator))


def _plain(number: Decimal) -> str:
    """Without closing zeros; with a power of ten only where the figure is very small or large."""
    number = number.normalize()
    if number == 0:
        return "0"
    if -5 <= number.adjusted() <= 9:
        return f"{number:f}"
    return f"{number:e}".replace("e+", "e")
