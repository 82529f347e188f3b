"""What is typed into the board's fields, in and out of the displayed units."""

from __future__ import annotations

from threading import Thread

from screenapp.model.kinds import KindName
from screenapp.model.part import DisplayUnits
from screenapp.model.units import format_quantity, parse_quantity


def parse(text: str, kind: KindName, units: DisplayUnits) -> float:
    """The stored value of a typed text; a bare number is in the displayed unit.

    Raises:
        QuantityError: the text is not such a quantity.
    """
    return parse_quantity(text, kind, units)


def warm_up() -> None:
    """Load the table of units aside: it takes half a second, which the first unit typed would."""
    Thread(target=parse_quantity, args=("1 in", "length"), daemon=True).start()


def written(value: float, kind: KindName, units: DisplayUnits) -> str:
    """A stored value as text: with all its figures where they are few, else with four."""
    full = format_quantity(value, kind, units, digits=8)
    short = format_quantity(value, kind, units)
    return full if len(full) <= len(short) + 3 else short
