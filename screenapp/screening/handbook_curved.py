"""Bars that are bent in their plane: two concentric arcs with nothing but material between."""

from __future__ import annotations

import math
from collections.abc import Iterator

import numpy as np

from screenapp.model.curves import Arc
from screenapp.model.hand_formulas import (
    CURVED_LEAST,
    CURVED_MOST,
    CURVED_SOURCE,
    curved_bar,
)
from screenapp.model.part import Part, Point
from screenapp.model.shape import Shape
from screenapp.screening.handbook_geometry import CENTRAL, PARALLEL, HandbookCase, Section

AWAY = 1.0
"""The peak is so many heights of the bar away, along its middle, from either end of the arcs."""


def curved_cases(part: Part, shape: Shape) -> Iterator[HandbookCase]:
    """Every inner arc of a curved bar, with the outer arc about the same centre."""
    arcs = [(i, p.curve) for i, p in enumerate(shape.curves) if isinstance(p.curve, Arc)]
    for i, inner in arcs:
        for j, outer in arcs:
            # the material is outside the one and inside the other
            if inner.sweep < 0.0 < outer.sweep and _match(shape, inner, outer):
                yield _case(part, shape, i, j)


def _match(shape: Shape, inner: Arc, outer: Arc) -> bool:
    off = math.dist(inner.centre, outer.centre)
    if off > max(PARALLEL * shape.size, CENTRAL * 0.2 * (outer.radius - inner.radius)):
        return False
    return CURVED_LEAST <= outer.radius / inner.radius <= CURVED_MOST


def _case(part: Part, shape: Shape, i: int, j: int) -> HandbookCase:
    inner, outer = shape.curves[i].curve, shape.curves[j].curve
    assert isinstance(inner, Arc)
    assert isinstance(outer, Arc)
    low, high, t = inner.radius, outer.radius, part.wall.thickness

    def sections(peak: Point) -> tuple[Section, ...]:
        angle = math.atan2(peak[1] - inner.centre[1], peak[0] - inner.centre[0])
        reach = AWAY * (high - low) / (0.5 * (low + high))
        whole = all(_covers(arc, angle, reach) for arc in (inner, outer))
        if not whole or not _sector_is_clear(shape, inner, high, angle, reach, (i, j)):
            return ()
        out = math.cos(angle), math.sin(angle)
        middle = 0.5 * (low + high)
        place = inner.centre[0] + middle * out[0], inner.centre[1] + middle * out[1]
        # the left hand of this direction is outwards, so a positive moment stretches the inside
        return (Section(place, (out[1], -out[0]), high - low),)

    features = shape.curves[i].feature, shape.curves[j].feature
    return HandbookCase(
        kind="inside of a curved bar",
        features=(features[0],),
        place=f"arc {features[0]}, with arc {features[1]} outside",
        bare=frozenset(features),
        loading="both",
        sections=sections,
        stress=lambda force, moment: curved_bar(force, moment, low, high, t)[0],
        source=CURVED_SOURCE,
        valid=f"outer over inner radius from {CURVED_LEAST:g} to {CURVED_MOST:g}, here "
        f"{high / low:.3g}; at least the bar's height, {high - low:.4g} mm, away from the ends of "
        "the arcs; the theory reads up to 3 % low",
    )


def _covers(arc: Arc, angle: float, reach: float) -> bool:
    """Whether an arc goes on for `reach` [rad] both ways from an angle."""
    if abs(arc.sweep) >= 2.0 * math.pi - PARALLEL:
        return True
    turned = (angle - arc.begin) * math.copysign(1.0, arc.sweep) % (2.0 * math.pi)
    return reach <= turned <= abs(arc.sweep) - reach


def _sector_is_clear(
    shape: Shape, inner: Arc, outer: float, angle: float, reach: float, own: tuple[int, int]
) -> bool:
    """Whether no other piece of the boundary enters the bar within `reach` of an angle."""
    t = np.linspace(0.0, 1.0, 65)
    slack = 1e-9 * shape.size
    for k, piece in enumerate(shape.curves):
        if k in own:
            continue
        x, y = (piece.curve.point(t) - np.array(inner.centre)).T
        r = np.hypot(x, y)
        off = np.abs((np.arctan2(y, x) - angle + np.pi) % (2.0 * np.pi) - np.pi)
        if ((r > inner.radius + slack) & (r < outer - slack) & (off < reach)).any():
            return False
    return True
