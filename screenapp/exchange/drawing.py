"""What a drawing file holds of use here: plane curves on layers, as frozen records.

Everything is in the drawing's own unit until a part is made of it.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

from screenapp.exchange.free_curves import EllipseArc, Spline
from screenapp.model.curves import Curve
from screenapp.model.errors import ScreenappError
from screenapp.model.part import Point

AnyCurve = Curve | EllipseArc | Spline
"""A full circle is an Arc with a sweep of 2π."""

Role = Literal["shape", "zone", "left out"]

ZONES = "ZONES"
"""The layer on which this program writes zones."""


class DrawingError(ScreenappError):
    """A drawing cannot be read, or no part can be made of it as asked."""


@dataclass(frozen=True)
class DrawnCurve:
    """A curve of the drawing.

    Attributes:
        curve: projected on the drawing plane, in drawing units.
        layer: the layer it is seen on.
        flat: False if it does not lie in a plane parallel to the drawing plane.
    """

    curve: AnyCurve
    layer: str
    flat: bool = True


@dataclass(frozen=True)
class PlainCurve:
    """A segment or arc [mm] and the layer that it comes from."""

    curve: Curve
    layer: str


@dataclass(frozen=True)
class Layer:
    """A layer that holds at least one curve.

    Attributes:
        name: as in the file.
        curves: how many curves are on it.
        shown: it is switched on and not frozen.
        dashed: its line type is not continuous (centre lines, bend lines, hidden edges).
    """

    name: str
    curves: int
    shown: bool = True
    dashed: bool = False

    @property
    def role(self) -> Role:
        """What is made of it unless the user says otherwise: of full, visible lines the shape."""
        if self.name == ZONES:
            return "zone"
        return "shape" if self.shown and not self.dashed else "left out"


@dataclass(frozen=True)
class Drawing:
    """A drawing as it was read.

    Attributes:
        name: the file's name.
        dialect: "R12" ... "R2018".
        unit: "mm", "in" ... as the file says; None if it does not.
        system: "metric" or "inch" where the file says only that; else "".
        curves: all curves, blocks taken apart.
        layers: in the order of their names.
        ignored: what is there but is no line of a shape, with its number ("texts", 12).
        repaired: what had to be mended for the file to be read.
    """

    name: str
    dialect: str
    unit: str | None
    system: str
    curves: tuple[DrawnCurve, ...]
    layers: tuple[Layer, ...]
    ignored: tuple[tuple[str, int], ...] = ()
    repaired: tuple[str, ...] = ()


@dataclass(frozen=True)
class Remark:
    """One sentence of the report, and the places [mm] it speaks of.

    `kind` tells gaps closed, lines that were there twice, chains left open, lines that branch,
    things ignored, and anything else.
    """

    kind: Literal["gap", "twice", "open", "branch", "ignored", "note"]
    text: str
    at: tuple[Point, ...] = ()
