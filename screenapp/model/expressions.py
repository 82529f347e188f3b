"""Arithmetic in named dimensions: "width/2 - 5", "r * sin(30)", "max(3*t, 12)".

Texts are parsed with `ast` and only what is listed here is evaluated, always in floats.  Angles are
in degrees.
"""

from __future__ import annotations

import ast
import difflib
import keyword
import math
import operator
import re
import unicodedata
from collections.abc import Callable, Mapping

from screenapp.model.errors import ScreenappError

LONGEST = 200
"""Characters that an expression may have."""

DEEPEST = 32
"""Levels of nesting that an expression may have."""


class ExpressionError(ScreenappError):
    """An expression cannot be read or has no finite value."""


def sine(degrees: float) -> float:
    """Sine of an angle in degrees, exact at the multiples of 30 and 90 that have an exact one."""
    turned = math.fmod(degrees, 360.0)
    exact = _EXACT_SINES.get(turned % 360.0)
    return math.sin(math.radians(turned)) if exact is None else exact


def cosine(degrees: float) -> float:
    """Cosine of an angle in degrees, exact where `sine` is."""
    turned = math.fmod(degrees, 360.0)
    exact = _EXACT_SINES.get((turned + 90.0) % 360.0)
    return math.cos(math.radians(turned)) if exact is None else exact


def tangent(degrees: float) -> float:
    """Tangent of an angle in degrees; ZeroDivisionError at 90° and 270°."""
    turned = math.fmod(degrees, 180.0)
    if turned % 45.0 == 0.0:
        return sine(turned) / cosine(turned) if turned % 90.0 == 0.0 else _TAN_45[turned % 180.0]
    return math.tan(math.radians(turned))


_EXACT_SINES = {
    0.0: 0.0,
    30.0: 0.5,
    90.0: 1.0,
    150.0: 0.5,
    180.0: 0.0,
    210.0: -0.5,
    270.0: -1.0,
    330.0: -0.5,
}
_TAN_45 = {45.0: 1.0, 135.0: -1.0}

_ONE_ARGUMENT: dict[str, Callable[[float], float]] = {
    "sin": sine,
    "cos": cosine,
    "tan": tangent,
    "sqrt": math.sqrt,
    "abs": abs,
}
_MANY_ARGUMENTS: dict[str, Callable[[list[float]], float]] = {"min": min, "max": max}
_CONSTANTS = {"pi": math.pi}
_BINARY: dict[type[ast.operator], Callable[[float, float], float]] = {
    ast.Add: operator.add,
    ast.Sub: operator.sub,
    ast.Mult: operator.mul,
    ast.Div: operator.truediv,
    ast.Pow: math.pow,
}
_UNARY: dict[type[ast.unaryop], Callable[[float], float]] = {
    ast.UAdd: operator.pos,
    ast.USub: operator.neg,
}
FUNCTIONS = tuple(sorted((*_ONE_ARGUMENT, *_MANY_ARGUMENTS)))

TOKEN = re.compile(
    r"\s+ | (?:\d+\.?\d*|\.\d+)(?:[eE][+-]?\d+)?(?!\w|\.\d) | [^\W\d]\w* | \*\* | [-+*/(),]",
    re.VERBOSE,
)
SAME = str.maketrans({"−": "-", "–": "-", "×": "*", "·": "*", "÷": "/"})


def evaluate(text: str, dimensions: Mapping[str, float]) -> float:
    """The value of an expression.

    Args:
        text: numbers, + - * / ** ( ), sin cos tan (degrees) sqrt abs min max, pi, and the names in
            `dimensions`.
        dimensions: values by name.

    Raises:
        ExpressionError: says what is wrong and how to mend it.

    Example:
        >>> evaluate("width/2 - 5", {"width": 80.0})
        35.0
    """
    tree = _parse(text)
    names = {unicodedata.normalize("NFKC", name): value for name, value in dimensions.items()}
    try:
        value = _value(tree, names, text)
    except ZeroDivisionError as error:
        raise ExpressionError(
            f'"{text}" divides by zero', "change the expression or the dimension it divides by"
        ) from error
    except (OverflowError, ValueError) as error:
        raise ExpressionError(
            f'"{text}" has no finite value', "look for a root or power of a negative number"
        ) from error
    if not math.isfinite(value):
        raise ExpressionError(f'"{text}" has no finite value', "use smaller numbers")
    return value + 0.0  # no negative zero


def names_in(text: str) -> frozenset[str]:
    """The names of dimensions that an expression uses.

    Raises:
        ExpressionError: it cannot be read.
    """
    found = {node.id for node in ast.walk(_parse(text)) if isinstance(node, ast.Name)}
    return frozenset(found - set(FUNCTIONS) - set(_CONSTANTS))


def plain_number(value: float) -> str:
    """A number as an expression writes it; it reads back exactly.

    Example:
        >>> plain_number(12.0), plain_number(0.1)
        ('12', '0.1')
    """
    return f"{value:.0f}" if value == round(value) and abs(value) < 1e15 else repr(value)


def with_name_replaced(text: str, name: str, by: str) -> str:
    """The expression with every use of a name replaced by other text; all else stays as written.

    Example:
        >>> with_name_replaced("width/2 - w", "w", "5")
        'width/2 - 5'
    """
    normal = unicodedata.normalize("NFKC", name)
    pieces, at = [], 0
    while at < len(text):
        token = TOKEN.match(text, at)
        word = token.group() if token is not None else text[at]
        is_name = word.isidentifier() and unicodedata.normalize("NFKC", word) == normal
        pieces.append(by if is_name else word)
        at += len(word)
    return "".join(pieces)


def check_name(name: str) -> None:
    """Raise ExpressionError if a dimension cannot have this name."""
    if not name.isidentifier() or keyword.iskeyword(name):
        raise ExpressionError(
            f'"{name}" cannot name a dimension',
            "use letters, digits and _ and begin with a letter",
        )
    if name in FUNCTIONS or name in _CONSTANTS:
        raise ExpressionError(f'"{name}" already has a meaning in expressions', "use another name")


def _parse(text: str) -> ast.expr:
    if len(text) > LONGEST:
        raise ExpressionError(
            f"the expression is {len(text)} characters long, {LONGEST} are allowed",
            "put parts of it into dimensions of their own",
        )
    plain = text.translate(SAME).strip()
    if not plain:
        raise ExpressionError("the expression is empty", "give a number or an expression")
    at = 0
    while at < len(plain):
        token = TOKEN.match(plain, at)
        if token is None:
            raise ExpressionError(*_stranger(text, plain, at))
        at = token.end()
    try:
        return ast.parse(plain, mode="eval").body
    except (SyntaxError, RecursionError, MemoryError) as error:
        raise ExpressionError(
            f'"{text}" is not a complete expression', "look for a missing operator or parenthesis"
        ) from error


def _stranger(text: str, plain: str, at: int) -> tuple[str, str]:
    """Cause and mend for the character at `at`, which is not understood."""
    if plain[at] == "^":
        return f'"{text}" has a ^', "write ** for a power"
    if re.match(r"\.?\d", plain[at:]):
        word = re.match(r"[\w.]+", plain[at:])
        number = word.group() if word else plain[at]
        return (
            f'"{number}" in "{text}" is not a number',
            "write numbers as 12.5 and put * before a name",
        )
    return f'"{plain[at]}" in "{text}" is not understood', "use + - * / ** ( ) and names"


def _value(node: ast.expr, names: Mapping[str, float], text: str, depth: int = 0) -> float:
    if depth > DEEPEST:
        raise ExpressionError(
            "the expression is nested too deeply", "put parts of it into dimensions of their own"
        )
    deeper = depth + 1
    if isinstance(node, ast.Constant) and isinstance(node.value, int | float):
        if isinstance(node.value, bool):  # the words True and False
            return _named(str(node.value), names, text)
        return float(node.value)
    if isinstance(node, ast.Name):
        return _named(node.id, names, text)
    if isinstance(node, ast.UnaryOp) and type(node.op) in _UNARY:
        return _UNARY[type(node.op)](_value(node.operand, names, text, deeper))
    if isinstance(node, ast.BinOp) and type(node.op) in _BINARY:
        left = _value(node.left, names, text, deeper)
        right = _value(node.right, names, text, deeper)
        if isinstance(node.op, ast.Pow) and left == 0.0 and right < 0.0:
            raise ZeroDivisionError
        return _BINARY[type(node.op)](left, right)
    if isinstance(node, ast.Call) and isinstance(node.func, ast.Name) and not node.keywords:
        values = [_value(argument, names, text, deeper) for argument in node.args]
        return _called(node.func.id, values, text)
    raise ExpressionError(f'"{text}" is more than arithmetic', "use + - * / ** ( ) and names")


def _named(name: str, names: Mapping[str, float], text: str) -> float:
    if name in names:
        return float(names[name])
    if name in _CONSTANTS:
        return _CONSTANTS[name]
    if name in FUNCTIONS:
        raise ExpressionError(f'{name} in "{text}" has no parentheses', f"write {name}(...)")
    near = difflib.get_close_matches(name, names, 1)
    mend = f'did you mean "{near[0]}"?' if near else f'add a dimension "{name}" or use a number'
    raise ExpressionError(f'"{name}" in "{text}" is not a dimension of the part', mend)


def _called(name: str, values: list[float], text: str) -> float:
    if name in _MANY_ARGUMENTS and values:
        return _MANY_ARGUMENTS[name](values)
    if name in _ONE_ARGUMENT and len(values) == 1:
        return _ONE_ARGUMENT[name](values[0])
    if name in FUNCTIONS:
        wanted = "one value" if name in _ONE_ARGUMENT else "one or more values"
        raise ExpressionError(f'{name} in "{text}" has {len(values)} values', f"give it {wanted}")
    raise ExpressionError(
        f'"{name}" in "{text}" is not a function', "there are " + ", ".join(FUNCTIONS)
    )
