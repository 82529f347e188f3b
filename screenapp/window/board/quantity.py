"""What is typed into the board's fields, in and out of the displayed units."""

from __future__ import annotations

from screenapp.model.kinds import KindName
from screenapp.model.part import DisplayUnits
from screenapp.model.units import format_quantity, parse_quantity


def parse(text: str, kind: KindName, units: DisplayUnits) -> float:
    """The stored value of a typed text; a bare number is in the displayed unit.

    Raises:
        QuantityError: the text is not such a quantity.
    """
    return parse_quantity(text, kind, units)


def written(value: float, kind: KindName, units: DisplayUnits) -> str:
    """A stored value as text that tells it exactly where that takes few figures."""
    shown = format_quantity(value, kind, units, digits=7)
    return shown if len(shown) <= 12 else format_quantity(value, kind, units, digits=5)
