"""Symbols of supports, as engineering mechanics textbooks draw them."""

from __future__ import annotations

import math

import numpy as np

from screenapp.model.edge_parts import Span, span_of
from screenapp.model.part import (
    BoltSupport,
    ElasticSupport,
    FixedSupport,
    PinSupport,
    PrescribedSupport,
    RollerSupport,
    Support,
    SymmetrySupport,
    WeldSupport,
)
from screenapp.window.board.drawn_part import DrawnPart
from screenapp.window.board.frame import Floats, Frame
from screenapp.window.board.marks import Mark, middle, radius_px, spanned, stations, to_px
from screenapp.window.board.quantity import written

DOWN = np.array([0.0, 1.0])
HATCH_GAP, HATCH = 8.0, 9.0
SPRING, SPRING_GAP = 18.0, 26.0
"""Length of a spring and distance between two [px]."""
HIGH, HALF = 14.0, 9.0
"""Height and half the base of a support triangle [px]."""


def support_mark(drawn: DrawnPart, frame: Frame, support: Support) -> Mark:
    """The symbol of one support; empty if what it is on is gone."""
    mark = Mark(support.id, "support")
    place = middle(drawn, frame, support.on, span_of(support))
    if place is None:
        return mark
    at, out = place
    if isinstance(support, FixedSupport):
        if support.on in drawn.corners:
            _footed(mark, at, squared(out))
        else:
            _clamped(mark, drawn, frame, support.on, span_of(support))
    elif isinstance(support, SymmetrySupport):
        _mirrored(mark, drawn, frame, support)
    elif isinstance(support, PinSupport):
        _pin(mark, at, radius_px(drawn, frame, support.on))
    elif isinstance(support, ElasticSupport):
        _sprung(mark, drawn, frame, support)
    elif isinstance(support, WeldSupport):
        _welded(mark, drawn, frame, support)
    elif isinstance(support, BoltSupport):
        _bolted(mark, at, radius_px(drawn, frame, support.on), support.stiffness is not None)
    elif isinstance(support, RollerSupport):
        _rolling(mark, drawn, frame, support, at, out)
    else:
        _moved(mark, drawn, support, at, out)
    return mark


def squared(direction: Floats) -> Floats:
    """The nearest of down, up, left and right."""
    if abs(direction[0]) > abs(direction[1]) + 1e-6:
        return np.array([math.copysign(1.0, direction[0]), 0.0])
    return np.array([0.0, math.copysign(1.0, direction[1])])


def _clamped(mark: Mark, drawn: DrawnPart, frame: Frame, on: str, span: Span) -> None:
    """Hatched ground all along."""
    deep = min(HATCH, 0.6 * radius_px(drawn, frame, on))
    line = stations(drawn, frame, on, 6.0, ends=True, span=span)
    if len(line) > 1:
        ground = line.at + 3.0 * line.out
        if on in drawn.holes:
            ground = np.vstack([ground, ground[:1]])
        mark.lines.append(ground)
    hatch = stations(drawn, frame, on, HATCH_GAP, span=span)
    for p, out, along in zip(hatch.at, hatch.out, hatch.along, strict=True):
        foot = p + 3.0 * out
        mark.line(foot, foot + deep * (out - 0.8 * along) / 1.28)


def _footed(mark: Mark, at: Floats, out: Floats) -> None:
    """A triangle on hatched ground: both directions held at a point."""
    side = np.array([-out[1], out[0]])
    base = at + HIGH * out
    mark.line(at, base + HALF * side, base - HALF * side, at)
    _ground(mark, base, out, side)


def _ground(mark: Mark, at: Floats, out: Floats, side: Floats) -> None:
    wide = HALF + 4.0
    mark.line(at - wide * side, at + wide * side)
    for s in np.linspace(-wide + 4.0, wide, 5):
        mark.line(at + s * side, at + (s - 4.0) * side + 5.0 * out)


def _wheeled(mark: Mark, at: Floats, out: Floats) -> None:
    """A triangle on two circles on a line: held along `out`, free across."""
    side = np.array([-out[1], out[0]])
    base = at + 12.0 * out
    mark.line(at, base + 7.0 * side, base - 7.0 * side, at)
    for s in (-4.5, 4.5):
        mark.circle(base + 3.0 * out + s * side, 2.5)
    ground = base + 6.5 * out
    mark.line(ground - 11.0 * side, ground + 11.0 * side)


def _mirrored(mark: Mark, drawn: DrawnPart, frame: Frame, support: SymmetrySupport) -> None:
    """Two short strokes across each end of the line, as drawings mark symmetry (ISO 128)."""
    line = stations(drawn, frame, support.on, 1e9, ends=True, span=span_of(support))
    if len(line) < 2:
        return
    for p, along, way in ((line.at[0], line.along[0], 1.0), (line.at[-1], line.along[-1], -1.0)):
        out = line.out[0]
        for step in (4.0, 8.0):
            foot = p + way * step * along
            mark.line(foot - 7.0 * out, foot + 7.0 * out)
    mark.line(line.at[0] + 2.5 * line.out[0], line.at[-1] + 2.5 * line.out[-1])


def _pin(mark: Mark, at: Floats, radius: float) -> None:
    """A pin, hatched, on hatched ground: it pushes and does not pull."""
    size = max(min(0.75 * radius, 14.0), 4.0)
    mark.circle(at, size)
    for s in (-0.5, 0.0, 0.5):
        half = size * math.sqrt(1.0 - s * s) * 0.95
        middle_of = at + s * size * np.array([1.0, 1.0]) / math.sqrt(2.0)
        along = half * np.array([1.0, -1.0]) / math.sqrt(2.0)
        mark.line(middle_of - along, middle_of + along)
    _ground(mark, at + (size + 2.0) * DOWN, DOWN, np.array([1.0, 0.0]))


def _sprung(mark: Mark, drawn: DrawnPart, frame: Frame, support: ElasticSupport) -> None:
    """Coils on ground, across the boundary or leaning where they resist sliding too."""
    span = span_of(support)
    inside = radius_px(drawn, frame, support.on)
    high = min(SPRING, 0.7 * inside)
    both = support.normal > 0.0 and support.along > 0.0
    gap = SPRING_GAP * (1.4 if both else 1.0)
    line = stations(drawn, frame, support.on, gap, span=span)
    for p, out, along in zip(line.at, line.out, line.along, strict=True):
        if support.normal > 0.0:
            mark.line(*_coil(p, out, along, high))
            foot = p + high * out
            mark.line(foot - 6.0 * along, foot + 6.0 * along)
        if support.along > 0.0:
            start = p + (high + 5.0 if support.normal > 0.0 else 5.0) * out - 7.0 * along
            mark.line(*_coil(start, along, out, 14.0))
            end = start + 14.0 * along
            mark.line(end - 4.0 * out, end + 4.0 * out)


def _bolted(mark: Mark, at: Floats, radius: float, soft: bool) -> None:
    """The head of a bolt, with its shank; one that gives way stands on a spring."""
    size = max(min(0.7 * radius, 11.0), 4.0)
    turn = np.arange(7) * math.pi / 3.0
    mark.lines.append(at + size * np.stack([np.cos(turn), np.sin(turn)], axis=-1))
    mark.circle(at, 0.55 * size)
    foot = at + (size + 1.0) * DOWN
    side = np.array([1.0, 0.0])
    if soft:
        mark.line(*_coil(foot, DOWN, side, 14.0))
        foot = foot + 14.0 * DOWN
    _ground(mark, foot, DOWN, side)


def _welded(mark: Mark, drawn: DrawnPart, frame: Frame, support: WeldSupport) -> None:
    """A seam: filled triangles that stand on the boundary, side by side."""
    line = stations(drawn, frame, support.on, 10.0, span=span_of(support))
    for p, out, along in zip(line.at, line.out, line.along, strict=True):
        mark.fills.append(np.array([p - 5.0 * along, p + 5.0 * along, p + 8.0 * out]))
        mark.line(p - 5.0 * along, p + 8.0 * out, p + 5.0 * along)


def _coil(at: Floats, way: Floats, side: Floats, long: float) -> list[Floats]:
    """A zigzag from a place along `way`."""
    steps = [(0.0, 0.0), (0.2, 0.0), *((0.3 + 0.1 * i, (-1.0) ** i) for i in range(5)), (0.8, 0.0)]
    return [at + long * t * way + 3.5 * s * side for t, s in (*steps, (1.0, 0.0))]


def _rolling(
    mark: Mark, drawn: DrawnPart, frame: Frame, support: RollerSupport, at: Floats, out: Floats
) -> None:
    held = None
    if support.angle is not None:
        a = math.radians(support.angle)
        held = to_px(math.cos(a), math.sin(a))
    if support.on in drawn.holes:
        if held is None:  # a pin: the part can only turn about it
            mark.circle(at, 3.0)
            _footed(mark, at + 3.0 * DOWN, DOWN)
        else:
            _wheeled(mark, at, held if held @ DOWN >= 0.0 else -held)
        return
    if support.on in drawn.corners:
        held = out if held is None else held
        _wheeled(mark, at, held if held @ out >= 0.0 else -held)
        return
    span = span_of(support)
    long = sum(p.curve.length for p in spanned(drawn, support.on, span)) * frame.scale
    gap = long if long < 70.0 else long / 2.0 if long < 200.0 else long / 3.0
    places = stations(drawn, frame, support.on, max(gap, 1.0), span=span)
    for p, normal in zip(places.at, places.out, strict=True):
        way = normal if held is None else held if held @ normal >= 0.0 else -held
        _wheeled(mark, p, way)


def _moved(
    mark: Mark, drawn: DrawnPart, support: PrescribedSupport, at: Floats, out: Floats
) -> None:
    """An arrow with a bar at its tail for each direction that is given."""
    units = drawn.part.display_units
    words: list[str] = []
    start = at if support.on in drawn.holes else at + 6.0 * out
    for name, value, axis in (
        ("x", support.x, np.array([1.0, 0.0])),
        ("y", support.y, np.array([0.0, -1.0])),
    ):
        if value is None:
            continue
        way = axis if value >= 0.0 else -axis
        side = 6.0 * np.array([-way[1], way[0]])
        mark.line(start - side, start + side)
        mark.arrow(start, start + 30.0 * way)
        words.append(f"{name} {written(value, 'length', units)}")
    mark.say("moved " + ", ".join(words), start + np.array([0.0, 20.0]))
