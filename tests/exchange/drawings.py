"""Drawings written by ezdxf for the tests, and measures of how far two shapes are apart."""

from __future__ import annotations

import math
from collections.abc import Callable
from pathlib import Path
from typing import Any

import ezdxf
import numpy as np

from screenapp.exchange.bringing_in import Brought, bring_in
from screenapp.exchange.choosing import Wishes
from screenapp.exchange.dxf_reading import read_drawing
from screenapp.model.curves import Curve
from screenapp.model.part import Part, Point
from screenapp.model.shape import Shape, shape_of
from screenapp.model.validity import faults_of

MM, INCH, SILENT_UNIT = 4, 1, 0


def write(
    path: Path, draw: Callable[[Any], None], dialect: str = "R2010", unit: int = MM, **how: Any
) -> Path:
    """A file in which `draw` has drawn into the model space."""
    document = ezdxf.new(dialect, units=unit, **how)
    draw(document.modelspace())
    document.saveas(path)
    return path


def bring(path: Path, **wishes: Any) -> Brought:
    """What becomes of a file."""
    return bring_in(read_drawing(path), Wishes(**wishes))


def part_from(path: Path, **wishes: Any) -> Part:
    """The part of a file, whose shape must be sound."""
    brought = bring(path, **wishes)
    assert brought.error is None, str(brought.error)
    assert brought.part is not None
    wrong = [f for f in faults_of(brought.part) if f.blocks and f.field.split(".")[0] in SHAPE]
    assert not wrong, wrong
    return brought.part


SHAPE = ("outline", "holes", "zones")


def texts(brought: Brought, kind: str) -> list[str]:
    """The sentences of a kind."""
    return [remark.text for remark in brought.remarks if remark.kind == kind]


def rectangle(space: Any, x0: float, y0: float, x1: float, y1: float, **on: Any) -> None:
    """A rectangle of four lines."""
    ring = [(x0, y0), (x1, y0), (x1, y1), (x0, y1)]
    for a, b in zip(ring, ring[1:] + ring[:1], strict=True):
        space.add_line(a, b, dxfattribs=on)


def apart(one: Shape, other: Shape) -> float:
    """The largest distance [mm] of a point of either boundary from the other boundary."""
    return max(_from(one, other), _from(other, one))


def distance(place: Point, curves: list[Curve]) -> float:
    """How far a place is from the nearest of some curves [mm]."""
    return min(math.dist(place, tuple(c.point(c.nearest(place)).tolist())) for c in curves)


def _from(one: Shape, other: Shape) -> float:
    curves = [piece.curve for piece in other.curves]
    return max(
        distance((float(x), float(y)), curves)
        for piece in one.curves
        for x, y in piece.curve.point(np.linspace(0.0, 1.0, 7))
    )


def shapes_apart(one: Part, other: Part) -> float:
    """How far the boundaries of two parts are apart, over the size of the first."""
    shape = shape_of(one)
    return apart(shape, shape_of(other)) / shape.size
