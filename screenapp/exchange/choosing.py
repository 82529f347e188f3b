"""What of a drawing is taken and at what scale: layers with their roles, and the unit."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field
from fractions import Fraction

from screenapp.exchange.drawing import Drawing, DrawingError, DrawnCurve, Role
from screenapp.model.kinds import KINDS
from screenapp.model.unit_text import stored_per_unit

TOLERANCE = 0.01
"""How far lines may be off unless the user says otherwise [mm]."""

INCH_UNITS = ("in", "ft", "yd", "mile", "thou", "microinch")


@dataclass(frozen=True)
class Wishes:
    """What the user wants of a drawing.

    Attributes:
        roles: role of each layer; those not named keep the one they have by themselves.
        unit: the drawing's unit of length ("mm", "in"); None takes what the file says.
        tolerance: gaps up to this are closed, splines fitted within it, lines nearer than it are
            one [mm].
        outline: which of several outlines, from 1, the largest first; None if there is one only.
    """

    roles: Mapping[str, Role] = field(default_factory=dict)
    unit: str | None = None
    tolerance: float = TOLERANCE
    outline: int | None = None


def scale_of(drawing: Drawing, wishes: Wishes) -> float:
    """mm to one unit of the drawing."""
    unit = wishes.unit or drawing.unit
    if unit is None:
        hint = f"; it only says that it is {drawing.system}" if drawing.system else ""
        raise DrawingError(
            f"{drawing.name} does not say in which unit it is drawn{hint}",
            "give the unit, e.g. --unit mm or --unit in",
        )
    return float(unit_factor(unit))


def unit_factor(unit: str) -> Fraction:
    """mm to one unit of length, exactly.

    Raises:
        QuantityError: no unit of length.

    Example:
        >>> float(unit_factor("in"))
        25.4
    """
    return stored_per_unit(unit, KINDS["length"])


def roles_of(drawing: Drawing, wishes: Wishes) -> list[tuple[str, Role]]:
    """Each layer with its role."""
    return [(layer.name, wishes.roles.get(layer.name, layer.role)) for layer in drawing.layers]


def chosen_curves(drawing: Drawing, wishes: Wishes) -> dict[Role, list[DrawnCurve]]:
    """The curves on the layers that the shape and the zones are made of."""
    names = [layer.name for layer in drawing.layers]
    unknown = [name for name in wishes.roles if name not in names]
    if unknown:
        raise DrawingError(
            f"{drawing.name} has no lines on a layer “{unknown[0]}”",
            f"choose among {_listed(names)}",
        )
    roles = dict(roles_of(drawing, wishes))
    if "shape" not in roles.values():
        raise DrawingError(
            "no layer is chosen to be the shape", f"choose at least one of {_listed(names)}"
        )
    tilted = [c for c in drawing.curves if not c.flat and roles[c.layer] != "left out"]
    if tilted:
        n = len(tilted)
        raise DrawingError(
            f"{n} line{'s' if n > 1 else ''} on the layer{'' if n == 1 else 's'} "
            f"{_listed(sorted({c.layer for c in tilted}))} "
            f"{'do' if n > 1 else 'does'} not lie in the plane of the drawing (it is 3D)",
            "export the flat pattern, seen square to the wall, or leave these layers out",
        )
    return {
        role: [c for c in drawing.curves if roles[c.layer] == role] for role in ("shape", "zone")
    }


def _listed(names: list[str], most: int = 8) -> str:
    shown = [f"“{name}”" for name in names[:most]]
    return ", ".join(shown) + (" …" if len(names) > most else "")


def in_inches(drawing: Drawing, wishes: Wishes) -> bool:
    """Whether the drawing is in a unit of the inch system."""
    return (wishes.unit or drawing.unit) in INCH_UNITS
