"""Lays out JSON for people: two spaces, short records and points on one line, 3 and not 3.0."""

from __future__ import annotations

import json
import math
from typing import Any

WIDTH = 100
"""A record or array that fits into this many columns stands on one line."""


def json_text(root: dict[str, Any]) -> str:
    """The text of an object, ending in a line break; its own keys stand on lines of their own.

    Key order is kept, so equal trees give equal texts.  Numbers are written as the shortest
    decimal that reads back to the same float.

    Raises:
        ValueError: a number is not finite.
    """
    return _expanded(root, 0) + "\n"


def number_text(value: float) -> str:
    """A number as JSON: whole ones without a point, negative zero as 0."""
    if not math.isfinite(value):
        raise ValueError(f"{value} has no form in JSON")
    if value == int(value) and abs(value) < 1e15:
        return str(int(value))
    return repr(float(value))


def _any(value: Any, indent: int, taken: int) -> str:
    if not isinstance(value, dict | list) or not value:
        return _inline(value)
    if _is_flat(value):
        line = _inline(value)
        if taken + len(line) < WIDTH:
            return line
    return _expanded(value, indent)


def _expanded(value: dict[str, Any] | list[Any], indent: int) -> str:
    pad = " " * (indent + 2)
    if isinstance(value, dict):
        keys = [f"{_text(key)}: " for key in value]
        rows = [
            key + _any(item, indent + 2, indent + 2 + len(key))
            for key, item in zip(keys, value.values(), strict=True)
        ]
        opening, closing = "{}"
    else:
        rows = [_any(item, indent + 2, indent + 2) for item in value]
        opening, closing = "[]"
    body = f",\n{pad}".join(rows)
    return f"{opening}\n{pad}{body}\n{' ' * indent}{closing}"


def _is_flat(value: dict[str, Any] | list[Any]) -> bool:
    """Whether it holds nothing deeper than points."""
    items = value.values() if isinstance(value, dict) else value
    return not any(
        isinstance(item, dict)
        or (isinstance(item, list) and any(isinstance(i, dict | list) for i in item))
        for item in items
    )


def _inline(value: Any) -> str:
    if isinstance(value, dict):
        return "{" + ", ".join(f"{_text(k)}: {_inline(v)}" for k, v in value.items()) + "}"
    if isinstance(value, list | tuple):
        return "[" + ", ".join(_inline(v) for v in value) + "]"
    if isinstance(value, str):
        return _text(value)
    if value is None or isinstance(value, bool):
        return json.dumps(value)
    return number_text(value)


def _text(value: str) -> str:
    """A text in quotes; half a character (a lone surrogate) has no UTF-8 form and is replaced."""
    whole = value.encode("utf-16", "surrogatepass").decode("utf-16", "replace")
    return json.dumps(whole, ensure_ascii=False)
