"""Vectors given by a size and a direction, where the size is an expression in named dimensions.

The part file holds components, so the expression stands in each of them: downwards with "2*pull" is
x 0 and y "-(2*pull)"; at 30° it is "(2*pull)*cos(30)" and "(2*pull)*sin(30)".
"""

from __future__ import annotations

import math
import re

from screenapp.model.edit_dimensions import formula_at, values_of
from screenapp.model.expressions import evaluate, plain_number
from screenapp.model.part import Part

Texts = tuple[str | None, str | None]
"""Expressions of x and y; None for a component that is zero."""

_SLANTED = re.compile(r"\((?P<size>.*)\)\*(?P<way>cos|sin)\((?P<angle>-?[\d.e+-]+)\)")
_TURNED = re.compile(r"-\((?P<size>.*)\)")


def component_texts(size: str, angle: float) -> Texts:
    """The expressions of the components of a vector of that size at an angle [deg].

    Example:
        >>> component_texts("2*pull", 270.0), component_texts("pull", 30.0)
        ((None, '-(2*pull)'), ('(pull)*cos(30)', '(pull)*sin(30)'))
    """
    quarter = angle % 360.0 / 90.0
    if quarter == int(quarter):
        text = size if int(quarter) % 4 < 2 else _turned(size)
        return (text, None) if int(quarter) % 2 == 0 else (None, text)
    at = plain_number(angle)
    return f"({size})*cos({at})", f"({size})*sin({at})"


def size_text(x: str | None, y: str | None, at: tuple[float, float]) -> str | None:
    """The expression of the size of a vector whose components are now `at`, from theirs.

    None where they are not of the form that `component_texts` gives.

    Example:
        >>> size_text(None, "-(2*pull)", (0.0, -8.0))
        '2*pull'
    """
    given = x if y is None else y
    if given is None:
        return None
    if x is None or y is None:
        value, other = at if y is None else at[::-1]
        if other != 0.0:
            return None
        return given if value >= 0.0 else _turned(given)
    one, two = _SLANTED.fullmatch(x), _SLANTED.fullmatch(y)
    if one is None or two is None or (one["way"], two["way"]) != ("cos", "sin"):
        return None
    if (one["size"], one["angle"]) != (two["size"], two["angle"]) or not _whole(one["size"]):
        return None
    angle = math.radians(float(one["angle"]))
    forward = at[0] * math.cos(angle) + at[1] * math.sin(angle) >= 0.0
    return one["size"] if forward else _turned(one["size"])


def stored_size(part: Part, field: str, at: tuple[float, float]) -> str | None:
    """The expression of the size of the vector in the record at a dotted path, None for a plain
    one."""
    return size_text(formula_at(part, f"{field}.x"), formula_at(part, f"{field}.y"), at)


def given_vector(
    part: Part, field: str, size: str, angle: float
) -> tuple[float, float, dict[str, str | None]]:
    """Components of a vector given by an expression of its size, and what to keep at which field.

    Raises:
        ExpressionError: it has no value.
    """
    texts, known = component_texts(size, angle), values_of(part)
    x, y = (0.0 if text is None else evaluate(text, known) for text in texts)
    return x, y, {f"{field}.x": texts[0], f"{field}.y": texts[1]}


def _turned(text: str) -> str:
    """The expression with the other sign."""
    found = _TURNED.fullmatch(text)
    return found["size"] if found is not None and _whole(found["size"]) else f"-({text})"


def _whole(text: str) -> bool:
    """Whether every bracket in the text is closed in it."""
    depth = 0
    for letter in text:
        depth += {"(": 1, ")": -1}.get(letter, 0)
        if depth < 0:
            return False
    return depth == 0
