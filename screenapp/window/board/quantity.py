"""What is typed into the board's fields, in and out of the displayed units."""

from __future__ import annotations

from collections.abc import Iterable
from threading import Thread

from screenapp.model.kinds import KindName
from screenapp.model.part import Dimension, DisplayUnits
from screenapp.model.typed_values import Typed, read_typed
from screenapp.model.units import format_quantity, parse_quantity


def parse(
    text: str, kind: KindName, units: DisplayUnits, dimensions: Iterable[Dimension] = ()
) -> Typed:
    """What was typed, a quantity or an expression; a bare number is in the displayed unit.

    Raises:
        ScreenappError: the text is neither.
    """
    return read_typed(text, kind, units, dimensions)


def warm_up() -> None:
    """Load the table of units aside: it takes half a second, which the first unit typed would."""
    Thread(target=parse_quantity, args=("1 in", "length"), daemon=True).start()


def written(value: float, kind: KindName, units: DisplayUnits) -> str:
    """A stored value as text: with all its figures where they are few, else with four."""
    full = format_quantity(value, kind, units, digits=8)
    short = format_quantity(value, kind, units)
    return full if len(full) <= len(short) + 3 else short
