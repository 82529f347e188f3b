"""A cache keyed by identity: comparing a part or a loop of thousands of corners would cost more."""

from __future__ import annotations

from collections import OrderedDict
from collections.abc import Callable
from typing import TypeVar

Key = TypeVar("Key")
Value = TypeVar("Value")


def kept_by_identity(most: int) -> Callable[[Callable[[Key], Value]], Callable[[Key], Value]]:
    """Keep the results for the `most` objects last asked for; the objects are kept alive."""

    def wrap(make: Callable[[Key], Value]) -> Callable[[Key], Value]:
        kept: OrderedDict[int, tuple[Key, Value]] = OrderedDict()

        def get(key: Key) -> Value:
            found = kept.get(id(key))
            if found is not None:
                kept.move_to_end(id(key))
                return found[1]
            value = make(key)
            kept[id(key)] = key, value
            if len(kept) > most:
                kept.popitem(last=False)
            return value

        return get

    return wrap
