"""What people type where a number stands: a quantity, or an expression with units and dimensions.

    "12 mm"   "1,5"   "2*12 mm"   "width/2 - 0.25 in"   "(3 + 4) mm"

A bare number that is added to a length, or is the whole result, is in the displayed unit; a factor
or a divisor is a plain number.  Expressions are kept in stored units, as the part file holds them:
with inches shown, "width/2 - 0.25" is kept as "width/2 - 6.35" and shown as "width/2 - 6.35 mm".
"""

from __future__ import annotations

import ast
import re
from collections.abc import Callable, Iterable
from dataclasses import dataclass
from fractions import Fraction

from screenapp.model.expressions import (
    FUNCTIONS,
    SAME,
    TOKEN,
    ExpressionError,
    evaluate,
    names_in,
    plain_number,
)
from screenapp.model.kinds import KINDS, KindName
from screenapp.model.part import Dimension, DisplayUnits, Measures
from screenapp.model.unit_text import QuantityError, stored_per_unit
from screenapp.model.units import parse_quantity

_NUMBER = re.compile(r"(?:\d+(?:[.,]\d*)?|[.,]\d+)(?:[eE][+-]?\d+)?")
_UNIT = re.compile(r"\s*([^\W\d_]+(?:[²³]|\^?[23])?(?:/[^\W\d_]+[²³]?)?|[°%\"'])")
_TWO_WAYS = re.compile(r"[1-9]\d{0,2},\d{3}(?!\d)")
_SPACES = str.maketrans({"\u2009": " ", "\u202f": " ", "\u00a0": " ", ";": ","})
_MEASURED: dict[Measures, KindName] = {"length": "length", "angle": "angle", "number": "number"}


@dataclass(frozen=True)
class Typed:
    """What was typed.

    Attributes:
        value: in the stored unit.
        formula: the expression in named dimensions that gives it, in stored units; None if the
            text names no dimension.
    """

    value: float
    formula: str | None = None


def read_typed(
    text: str,
    kind: KindName,
    display_units: DisplayUnits = "mm-N-MPa",
    dimensions: Iterable[Dimension] = (),
) -> Typed:
    """The value, and the expression if there is one, of a typed text.

    Raises:
        QuantityError: it is meant as a quantity and is none of this kind.
        ExpressionError: it is meant as an expression and has no value.

    Example:
        >>> read_typed("2*12 mm", "length")
        Typed(value=24.0, formula=None)
        >>> read_typed("width/2", "length", dimensions=[Dimension("width", 80.0)])
        Typed(value=40.0, formula='width/2')
    """
    named = tuple(dimensions)
    try:
        return Typed(parse_quantity(text, kind, display_units))
    except QuantityError as error:
        if not _is_expression(text, named):
            raise error
    plain = _in_stored_units(text, kind, display_units, frozenset(d.name for d in named))
    stored = _scaled(plain, kind, display_units, named, _multiplied)
    value = evaluate(stored, {d.name: d.value for d in named})
    return Typed(value, stored if names_in(stored) else None)


def shown_formula(
    text: str, kind: KindName, display_units: DisplayUnits, dimensions: Iterable[Dimension] = ()
) -> str:
    """A stored expression as it is shown and typed again: bare lengths say that they are in mm.

    Example:
        >>> shown_formula("w/2 - 6.35", "length", "in-lbf-ksi", [Dimension("w", 80.0)])
        'w/2 - 6.35 mm'
    """
    label = KINDS[kind].stored.replace("**", "")

    def with_unit(number: str, _factor: Fraction, power: int) -> str:
        return f"{number} {label}" if power == 1 else number

    try:
        return _scaled(text, kind, display_units, tuple(dimensions), with_unit)
    except ExpressionError:
        return text


def _is_expression(text: str, dimensions: tuple[Dimension, ...]) -> bool:
    """Whether a text that is no quantity is meant as arithmetic."""
    words = re.findall(r"[^\W\d]\w*", text)
    if any(word in FUNCTIONS or word == "pi" for word in words):
        return True
    if any(d.name in words for d in dimensions):
        return True
    if re.search(r"\d[^\W\d]*\s*[*×·÷+(^]|[*×·(]\s*[\d.,(]|\)", text):
        return True
    if re.search(r"\d\s*[^\W\d]*\s*[-−–/]\s*[\d.,(]", text):
        return True
    return bool(re.search(r"\w\s*[-−–+*/×÷]\s*\w|^[^\W\d]\w*$", text)) and bool(dimensions)


# --- numbers with units ---------------------------------------------------------------------


def _in_stored_units(
    text: str, kind: KindName, display_units: DisplayUnits, names: frozenset[str]
) -> str:
    """The text with decimal points, and with each number that has a unit as a stored one.

    Such a number is marked by "§", which later steps take for "has its unit already".
    """
    plain = text.translate(SAME).translate(_SPACES).strip()
    pieces: list[str] = []
    at = depth = 0
    while at < len(plain):
        number = _NUMBER.match(plain, at)
        if number is not None and (at == 0 or not re.match(r"[\w.]", plain[at - 1])):
            digits = _with_point(number.group(), plain, at, inside_call=depth > 0)
            at += len(digits)
            unit = _unit_at(plain, at, names)
            if unit is not None:
                at = unit.end()
                stored = Fraction(digits.replace(",", ".")) * _factor(
                    unit.group(1), kind, display_units
                )
                pieces.append(f"§{plain_number(float(stored))}")
            else:
                pieces.append(digits.replace(",", "."))
            continue
        if (word := re.compile(r"[^\W\d]\w*").match(plain, at)) is not None:
            pieces.append(word.group())
            at = word.end()
            continue
        sign = plain[at]
        if sign == "(" and pieces and (depth or pieces[-1].strip() in ("min", "max")):
            depth += 1
        elif sign == ")" and depth:
            depth -= 1
        pieces.append(sign)
        at += 1
        unit = _unit_at(plain, at, names) if sign == ")" else None
        if unit is not None:
            factor = _factor(unit.group(1), kind, display_units)
            pieces.append(f"*§{plain_number(float(factor))}")
            at = unit.end()
    return "".join(pieces)


def _unit_at(text: str, at: int, names: frozenset[str]) -> re.Match[str] | None:
    """The unit that follows a number; what it is divided by may be a dimension instead."""
    found = _UNIT.match(text, at)
    if found is not None and found.group(1).partition("/")[2] in names:
        return re.compile(r"\s*([^/]+)").match(text, at)
    return found


def _with_point(digits: str, text: str, at: int, inside_call: bool) -> str:
    """The digits that belong to the number; a comma inside min(...) or max(...) needs a space."""
    if "," not in digits:
        return digits
    if inside_call:
        if digits.endswith(","):
            return digits[:-1]
        parted, point = digits.replace(",", ", "), digits.replace(",", ".")
        raise ExpressionError(
            f"{digits} in “{text}” can be read in two ways", f"write {point} or {parted}"
        )
    if _TWO_WAYS.match(text, at):
        point, whole = digits.replace(",", "."), digits.replace(",", "")
        raise QuantityError(
            f"{digits} in “{text}” can be read in two ways", f"write {point} or {whole}"
        )
    return digits


def _factor(unit: str, kind: KindName, display_units: DisplayUnits) -> Fraction:
    """Stored units in one of a unit; angles and lengths may stand in any expression."""
    label, shown = KINDS[kind].shown(display_units)
    if unit == label and label:
        return shown
    first: QuantityError | None = None
    for one in (kind, "length", "angle"):
        try:
            return stored_per_unit(unit, KINDS[one])
        except QuantityError as error:
            first = first or error
    assert first is not None
    raise first


# --- bare numbers ---------------------------------------------------------------------------

_Change = Callable[[str, Fraction, int], str]


def _multiplied(number: str, factor: Fraction, power: int) -> str:
    return plain_number(float(Fraction(number) * factor**power))


@dataclass(frozen=True)
class _Of:
    """What a piece of an expression is: `power` of the kind, or bare numbers still without unit."""

    power: float = 0.0
    bare: bool = False


def _scaled(
    text: str,
    kind: KindName,
    display_units: DisplayUnits,
    dimensions: tuple[Dimension, ...],
    change: _Change,
) -> str:
    """The text with every bare number that stands for a quantity changed."""
    factor = KINDS[kind].shown(display_units)[1]
    marks = [m.start() - i for i, m in enumerate(re.finditer("§", text))]
    plain = text.replace("§", "").translate(SAME)
    if factor == 1:
        return plain
    _check_tokens(plain)
    try:
        tree = ast.parse(plain, mode="eval").body
    except (SyntaxError, RecursionError, MemoryError):
        return plain  # `evaluate` says what is wrong
    starts = {len(plain[:m].encode()) for m in marks}
    walk = _Walk(kind, {d.name: d.measures for d in dimensions}, starts)
    if walk.of(tree).bare:
        walk.give_unit(tree, 1.0)
    coded = plain.encode()
    for first, last, power in sorted(walk.found, reverse=True):
        number = coded[first:last].decode()
        coded = coded[:first] + change(number, factor, round(power)).encode() + coded[last:]
    return coded.decode()


def _check_tokens(plain: str) -> None:
    at = 0
    while at < len(plain):
        token = TOKEN.match(plain, at)
        if token is None:
            return
        at = token.end()


class _Walk:
    """Finds which bare numbers of an expression stand for a quantity of the kind."""

    def __init__(self, kind: KindName, measures: dict[str, Measures], known: set[int]) -> None:
        self._kind = kind
        self._measures = measures
        self._known = known
        self.found: list[tuple[int, int, float]] = []

    def of(self, node: ast.expr) -> _Of:
        """What a node is; where a bare number meets a quantity in a sum, it takes the unit."""
        if isinstance(node, ast.Constant):
            if isinstance(node.value, bool) or not isinstance(node.value, int | float):
                return _Of()  # "None" is a name to the user: `evaluate` says that it is not known
            return _Of(1.0) if node.col_offset in self._known else _Of(bare=True)
        if isinstance(node, ast.Name):
            measures = self._measures.get(node.id, "number")
            return _Of(1.0 if _MEASURED[measures] == self._kind else 0.0)
        if isinstance(node, ast.UnaryOp):
            return self.of(node.operand)
        if isinstance(node, ast.BinOp):
            return self._of_two(node)
        if isinstance(node, ast.Call) and isinstance(node.func, ast.Name):
            return self._of_call(node.func.id, node.args)
        return _Of()

    def give_unit(self, node: ast.expr, power: float) -> None:
        """Note the numbers that carry the unit of a bare node."""
        if isinstance(node, ast.Constant) and not isinstance(node.value, bool | None):
            end = node.end_col_offset
            if node.col_offset not in self._known and end is not None:
                self.found.append((node.col_offset, end, power))
        elif isinstance(node, ast.UnaryOp):
            self.give_unit(node.operand, power)
        elif isinstance(node, ast.BinOp):
            if isinstance(node.op, ast.Add | ast.Sub):
                self.give_unit(node.left, power)
                self.give_unit(node.right, power)
            elif isinstance(node.op, ast.Div) or self.of(node.left).bare:
                self.give_unit(node.left, power)
            elif isinstance(node.op, ast.Mult):
                self.give_unit(node.right, power)
        elif isinstance(node, ast.Call):
            for argument in node.args:
                self.give_unit(argument, power)

    def _of_two(self, node: ast.BinOp) -> _Of:
        left, right = self.of(node.left), self.of(node.right)
        if isinstance(node.op, ast.Add | ast.Sub):
            return self._alike([(node.left, left), (node.right, right)])
        if isinstance(node.op, ast.Mult | ast.Div):
            sign = 1.0 if isinstance(node.op, ast.Mult) else -1.0
            power = left.power + sign * right.power
            bare = left.bare or (right.bare and isinstance(node.op, ast.Mult))
            return _Of(power, bare and power == 0.0)
        raised = node.right.value if isinstance(node.right, ast.Constant) else 1
        return _Of(left.power * float(raised) if isinstance(raised, int | float) else 0.0)

    def _of_call(self, name: str, arguments: list[ast.expr]) -> _Of:
        each = [(argument, self.of(argument)) for argument in arguments]
        if name in ("min", "max", "abs"):
            return self._alike(each)
        if name == "sqrt" and each:
            return _Of(each[0][1].power / 2.0)
        return _Of()

    def _alike(self, each: list[tuple[ast.expr, _Of]]) -> _Of:
        """What a sum is: bare numbers in it take the unit of what is not bare."""
        powers = [one.power for _, one in each if not one.bare]
        if not powers:
            return _Of(bare=True)
        power = max(powers, key=abs)
        if power:
            for node, one in each:
                if one.bare:
                    self.give_unit(node, power)
        return _Of(power)
