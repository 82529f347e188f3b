"""What is typed into the board's fields, in and out of the displayed units."""

from __future__ import annotations

from typing import Literal

from screenapp.model.part import DisplayUnits
from screenapp.model.units import parse_quantity

FieldKind = Literal["length", "angle", "force", "pressure", "force per length"]


def parse(text: str, kind: FieldKind, units: DisplayUnits) -> float:
    return float(parse_quantity(text, kind, units))


def written(value: float, kind: FieldKind, units: DisplayUnits) -> str:
    return f"{value:.4g}"
