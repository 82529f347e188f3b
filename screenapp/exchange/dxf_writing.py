"""Writes a part as DXF R2010: the exact boundary, arcs as arcs, on layers of their own.

Outline and other loops are closed polylines with bulges, round holes are circles.  Nothing is
flattened, so a part read back is the same part to the last decimals.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from pathlib import Path
from typing import Any

import ezdxf
from ezdxf import units as dxf_units

from screenapp.exchange.choosing import unit_factor
from screenapp.exchange.drawing import ZONES, DrawingError
from screenapp.model.curves import Arc, Curve
from screenapp.model.errors import Fault, InvalidPartError
from screenapp.model.members import all_holes
from screenapp.model.part import CircleHole, Part
from screenapp.model.regions import zone_curves
from screenapp.model.shape import BoundaryCurve, shape_of

OUTLINE, HOLES = "OUTLINE", "HOLES"
"""Names of the layers."""

UNIT_CODES = {"mm": dxf_units.MM, "cm": dxf_units.CM, "m": dxf_units.M, "in": dxf_units.IN}
"""Units that a drawing may be written in, and their $INSUNITS."""

LARGEST_TURN = 1.6 * math.pi
"""An arc that turns further is written as two: the bulge of a full turn has no bounds."""


def write_dxf(part: Part, path: Path, unit: str | None = None) -> None:
    """Write the boundary of a part; `unit` is the one that the part is shown in unless given.

    Raises:
        InvalidPartError: the boundary cannot be worked out.
        DrawingError: the unit cannot be written, or the file.
    """
    unit = unit or ("in" if part.display_units == "in-lbf-ksi" else "mm")
    if unit not in UNIT_CODES:
        raise DrawingError(
            f"a drawing cannot be written in {unit}", f"choose {', '.join(UNIT_CODES)}"
        )
    document = _document(part, unit)
    try:
        document.saveas(path)
    except OSError as error:
        raise DrawingError(
            f"{path} cannot be written: {error.strerror or error}", "save in another place"
        ) from error


def _document(part: Part, unit: str) -> Any:
    shape = shape_of(part)
    faults: list[Fault] = []
    zones = zone_curves(part, faults)
    if faults:
        raise InvalidPartError.of(tuple(faults))
    document = ezdxf.new("R2010", units=UNIT_CODES[unit])
    for name, colour in ((OUTLINE, 7), (HOLES, 5), *([(ZONES, 3)] if zones else [])):
        document.layers.add(name, color=colour)
    space = document.modelspace()
    scale = 1.0 / float(unit_factor(unit))
    holes = {hole.id: hole for hole in all_holes(part)}
    for number, (first, last) in enumerate(shape.loops):
        hole = holes.get(shape.hole_ids[number] or "")
        layer = OUTLINE if hole is None else HOLES
        _add(space, hole, shape.curves[first:last], layer, scale)
    for zone, pieces in zip(part.zones, zones, strict=True):
        _add(space, zone.form, pieces, ZONES, scale)
    return document


def _add(
    space: Any, form: object, pieces: Sequence[BoundaryCurve], layer: str, scale: float
) -> None:
    """A circle for a round form, a closed polyline for any other."""
    on = {"layer": layer}
    if isinstance(form, CircleHole):
        x, y = form.centre
        space.add_circle((x * scale, y * scale), 0.5 * form.diameter * scale, dxfattribs=on)
    else:
        space.add_lwpolyline(_vertices(pieces, scale), format="xyb", close=True, dxfattribs=on)


def _vertices(pieces: Sequence[BoundaryCurve], scale: float) -> list[tuple[float, float, float]]:
    """Start and bulge of each piece; a bulge is tan of a quarter of the turn (DXF reference)."""
    rows = []
    for piece in pieces:
        curve = piece.curve
        parts: list[Curve]
        if isinstance(curve, Arc) and abs(curve.sweep) > LARGEST_TURN:
            parts = [curve.part(0.0, 0.5), curve.part(0.5, 1.0)]
        else:
            parts = [curve]
        for one in parts:
            x, y = one.start
            bulge = math.tan(0.25 * one.sweep) if isinstance(one, Arc) else 0.0
            rows.append((x * scale, y * scale, bulge))
    return rows
