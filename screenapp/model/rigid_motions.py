"""Which rigid motions of the flat part its supports leave free.

A rigid motion moves the point (x, y) by (a - r (y - y0), b + r (x - x0)): it slides by (a, b) and
turns by r about the part's middle (x0, y0).  Each held direction n at a point p gives one row
(n_x, n_y, n_y (x - x0) - n_x (y - y0)) that must vanish; what the rows leave is free.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import Literal

import numpy as np
from numpy.typing import NDArray

from screenapp.model.edge_parts import pieces_under
from screenapp.model.part import (
    BoltSupport,
    ElasticSupport,
    FixedSupport,
    Part,
    PinSupport,
    Point,
    PrescribedSupport,
    RollerSupport,
    Support,
    SymmetrySupport,
    WeldSupport,
)
from screenapp.model.shape import Shape

Floats = NDArray[np.float64]

FREE = 1e-7
"""A motion is free if its rows are smaller than this share of the largest."""

WEAK = 1e-2
"""A motion is held only weakly if its rows are smaller than this share of the largest."""

SAMPLES = np.linspace(0.0, 1.0, 5)


@dataclass(frozen=True)
class FreeMotion:
    """A motion that nothing stops.

    Attributes:
        kind: "slide" along `direction` or "turn" about `centre`.
        direction: unit vector of a sliding; (0, 0) for a turning.
        centre: what a turning goes round [mm]; the middle of the part for a sliding.
        weak: True if something holds it, but hardly.
    """

    kind: Literal["slide", "turn"]
    direction: Point
    centre: Point
    weak: bool = False

    def __str__(self) -> str:
        if self.kind == "turn":
            return f"turning about ({self.centre[0]:.4g}, {self.centre[1]:.4g})"
        dx, dy = self.direction
        if abs(dy) < 1e-6:
            return "sliding along x"
        if abs(dx) < 1e-6:
            return "sliding along y"
        return f"sliding at {math.degrees(math.atan2(dy, dx)) % 180.0:.3g}° to x"


@dataclass(frozen=True, eq=False)
class Held:
    """Directions in which points are held: points [mm], unit directions and values [mm]."""

    points: Floats
    directions: Floats
    values: Floats


def held_by(part: Part, support: Support, shape: Shape) -> Held:
    """What a support holds, at sample points of the place it is on; empty if there is none."""
    points, normals = _places(part, support, shape)
    n = len(points)
    x, y = np.tile([1.0, 0.0], (n, 1)), np.tile([0.0, 1.0], (n, 1))
    parts: list[tuple[Floats, float]] = []
    if isinstance(support, FixedSupport):
        parts = [(x, 0.0), (y, 0.0)]
    elif isinstance(support, PinSupport | SymmetrySupport | BoltSupport):
        parts = [(normals, 0.0)]  # a pin as if it touched all round
    elif isinstance(support, RollerSupport):
        if support.angle is None:
            parts = [(normals, 0.0)]
        else:
            angle = math.radians(support.angle)
            parts = [(np.tile([math.cos(angle), math.sin(angle)], (n, 1)), 0.0)]
    elif isinstance(support, WeldSupport):
        parts = [(x, 0.0), (y, 0.0)]
    elif isinstance(support, PrescribedSupport):
        given = ((x, support.x), (y, support.y))
        parts = [(direction, value) for direction, value in given if value is not None]
    elif isinstance(support, ElasticSupport):
        along = np.column_stack([-normals[:, 1], normals[:, 0]])
        springs = ((normals, support.normal), (along, support.along))
        parts = [(direction, 0.0) for direction, stiffness in springs if stiffness > 0.0]
    if not parts:
        return Held(np.empty((0, 2)), np.empty((0, 2)), np.empty(0))
    return Held(
        np.concatenate([points] * len(parts)),
        np.concatenate([direction for direction, _ in parts]),
        np.concatenate([np.full(n, value) for _, value in parts]),
    )


def free_motions(part: Part, shape: Shape) -> tuple[FreeMotion, ...]:
    """The rigid motions that the part's supports leave free or hold only weakly.

    None are left if the part is held; all three (two slidings, one turning) if nothing holds it.
    """
    held = [held_by(part, support, shape) for support in part.supports]
    points = np.concatenate([np.empty((0, 2)), *(h.points for h in held)])
    directions = np.concatenate([np.empty((0, 2)), *(h.directions for h in held)])
    return motions_left(points, directions, shape)


def motions_left(points: Floats, directions: Floats, shape: Shape) -> tuple[FreeMotion, ...]:
    """The motions left by holding `points` (n, 2) along unit `directions` (n, 2)."""
    x0, y0, x1, y1 = shape.bounds
    middle, size = np.array([(x0 + x1) / 2.0, (y0 + y1) / 2.0]), math.hypot(x1 - x0, y1 - y0)
    arm = (points - middle) / (0.5 * size)
    moment = directions[:, 1] * arm[:, 0] - directions[:, 0] * arm[:, 1]
    rows = np.column_stack([directions, moment])
    _, strength, motions = np.linalg.svd(np.vstack([rows, np.zeros((3, 3))]))
    largest = max(float(strength[0]), 1e-300)
    free = motions[strength <= FREE * largest]
    weak = motions[(strength > FREE * largest) & (strength < WEAK * largest)]
    return (
        *(_named(m, middle, size) for m in _plainest(free)),
        *(_named(m, middle, size, weak=True) for m in weak),
    )


def _plainest(motions: Floats) -> Floats:
    """The same motions combined so that at most one of them turns."""
    if len(motions) < 2:
        return motions
    turning = motions[:, 2]
    if np.abs(turning).max() < 1e-9:
        return np.array(np.eye(3)[:2])
    if len(motions) == 3:
        return np.eye(3)
    slide = motions[0] * turning[1] - motions[1] * turning[0]
    turn = motions[int(np.argmax(np.abs(turning)))]
    slide = slide / np.linalg.norm(slide)
    turn = turn - (turn @ slide) * slide  # the centre nearest to the middle of the part
    return np.array([slide, turn])


def _named(motion: Floats, middle: Floats, size: float, weak: bool = False) -> FreeMotion:
    a, b, r = (float(v) for v in motion)
    slide = math.hypot(a, b)
    if abs(r) < 1e-4 * slide:
        sign = -1.0 if (a, b) < (0.0, 0.0) else 1.0
        return FreeMotion(
            "slide",
            (sign * a / slide, sign * b / slide),
            (float(middle[0]), float(middle[1])),
            weak,
        )
    rate = r / (0.5 * size)
    x, y = float(middle[0] - b / rate), float(middle[1] + a / rate)
    centre = (x if abs(x) > 1e-9 * size else 0.0, y if abs(y) > 1e-9 * size else 0.0)
    return FreeMotion("turn", (0.0, 0.0), centre, weak)


def _places(part: Part, support: Support, shape: Shape) -> tuple[Floats, Floats]:
    """Sample points of a place and the boundary's outward unit normals there."""
    corner = next((at for id_, at in shape.sharp_corners if id_ == support.on), None)
    if corner is not None:
        return np.array([corner]), np.zeros((1, 2))
    curves = [shape.curves[k].curve for k in pieces_under(part, shape, support)]
    if not curves:
        return np.empty((0, 2)), np.empty((0, 2))
    points = np.concatenate([c.point(SAMPLES) for c in curves])
    tangents = np.concatenate([c.tangent(SAMPLES) for c in curves])
    return points, np.column_stack([tangents[:, 1], -tangents[:, 0]])
