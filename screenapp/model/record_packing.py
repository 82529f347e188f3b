"""Takes frozen records apart into plain JSON values and named arrays, and puts them together.

The records' own type hints say what each value is, so nothing about a record is written twice.
`outline_of` gives a text that changes whenever a record's fields change: entries of another outline
cannot be read and need not be tried.
"""

from __future__ import annotations

import dataclasses
import types
import typing
from collections.abc import Mapping
from typing import Any, TypeVar

import numpy as np
from numpy.typing import NDArray

Record = TypeVar("Record")
Arrays = dict[str, NDArray[Any]]


def pack(value: Any, arrays: Arrays) -> Any:
    """The value as JSON; arrays are put into `arrays` and stand as {"array": name}."""
    if isinstance(value, np.ndarray):
        name = f"a{len(arrays)}"
        arrays[name] = value
        return {"array": name}
    if dataclasses.is_dataclass(value):
        return [pack(getattr(value, f.name), arrays) for f in dataclasses.fields(value)]
    if isinstance(value, tuple):
        return [pack(item, arrays) for item in value]
    if isinstance(value, dict):
        return {key: pack(item, arrays) for key, item in value.items()}
    if isinstance(value, np.generic):
        return value.item()
    return value


def unpack(cls: type[Record], value: Any, arrays: Mapping[str, NDArray[Any]]) -> Record:
    """The record of class `cls` that `pack` took apart.

    Raises:
        ValueError, KeyError, TypeError: the value does not fit the record.
    """
    hints = typing.get_type_hints(cls)
    fields = dataclasses.fields(cls)  # type: ignore[arg-type]
    return cls(
        *(
            _unpacked(hints[field.name], item, arrays)
            for field, item in zip(fields, value, strict=True)
        )
    )


def outline_of(cls: Any) -> str:
    """Names and types of all fields of a record and of the records in it."""
    seen: dict[str, str] = {}
    _outline(cls, seen)
    return "; ".join(f"{name}({fields})" for name, fields in sorted(seen.items()))


def _unpacked(hint: Any, value: Any, arrays: Mapping[str, NDArray[Any]]) -> Any:
    origin, args = typing.get_origin(hint), typing.get_args(hint)
    if origin in (types.UnionType, typing.Union):
        if value is None:
            return None
        return _unpacked(next(a for a in args if a is not types.NoneType), value, arrays)
    if origin is np.ndarray:
        return arrays[value["array"]]
    if origin is tuple:
        kinds = [args[0]] * len(value) if args[-1] is Ellipsis else args
        pairs = zip(kinds, value, strict=True)
        return tuple(_unpacked(kind, item, arrays) for kind, item in pairs)
    if origin is dict:
        return {key: _unpacked(args[1], item, arrays) for key, item in value.items()}
    if dataclasses.is_dataclass(hint):
        return unpack(typing.cast(type, hint), value, arrays)
    return float(value) if hint is float else value


def _outline(hint: Any, seen: dict[str, str]) -> None:
    if dataclasses.is_dataclass(hint):
        name = typing.cast(type, hint).__name__
        if name in seen:
            return
        hints = typing.get_type_hints(hint)
        seen[name] = ", ".join(f"{f.name}: {hints[f.name]}" for f in dataclasses.fields(hint))
        for field in dataclasses.fields(hint):
            _outline(hints[field.name], seen)
    for inner in typing.get_args(hint):
        _outline(inner, seen)
