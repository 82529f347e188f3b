"""The part as a dimensioned drawing (SVG) for the record: sizes, places, diameters and radii.

Linear dimensions stand in rows below and to the left of the part, diameters and radii at the end
of leaders.  Each leader is tried at several angles and lengths; what finds no free place is left
out: the tables beside the drawing have every number.
"""

from __future__ import annotations

import math
from collections.abc import Iterator

import numpy as np

from screenapp.model.dimension_marks import Mark, rows_of
from screenapp.model.part import Part, Point
from screenapp.model.shape import Shape
from screenapp.model.units import format_number
from screenapp.report.dimension_choice import RIGHT, bolt_circles, drawing_marks, hole_axes
from screenapp.report.dimension_paper import ARROW, PAD, Label, Paper, Spot, width_of
from screenapp.report.drawing import boundary_path, zone_paths

WIDE, TALL = 720.0, 560.0
"""The drawing keeps within this [px]."""

FIRST, ROW, GAP, BEYOND = 24.0, 19.0, 3.0, 4.0
"""From the part to the first dimension line, from one to the next, from a place to its extension
line, and how far that runs beyond [px]."""

AROUND = 82.0
"""Room for leaders where there are no rows [px]."""

GOOD_ENOUGH = 1.5
"""A short leader whose number hides nothing: no other is looked for."""

MOST_LEADERS = 24
"""More would crowd any drawing."""

ANGLES = (40, 140, -40, -140, 65, 115, 20, 160, -65, -115, -20, -160, 90, -90)
LENGTHS = (14.0, 26.0, 42.0, 62.0, 86.0, 115.0, 150.0)
ASIDE = (FIRST, FIRST + ROW, -FIRST, -FIRST - ROW, FIRST + 2 * ROW, 12.0, -12.0)


class _Scale:
    """Turns mm into the drawing's pixels, y downwards."""

    def __init__(self, shape: Shape, below: float, beside: float) -> None:
        x0, y0, x1, y1 = shape.bounds
        self.scale = min((WIDE - beside - AROUND) / (x1 - x0), (TALL - below - AROUND) / (y1 - y0))
        self.x0, self.y1, self.left, self.top = x0, y1, beside, AROUND
        self.width = (x1 - x0) * self.scale + beside + AROUND
        self.height = (y1 - y0) * self.scale + below + AROUND

    def at(self, x: float, y: float) -> Spot:
        return self.left + (x - self.x0) * self.scale, self.top + (self.y1 - y) * self.scale


def dimensioned_svg(part: Part, shape: Shape) -> str:
    """Outline, holes and zones with their dimensions, in the part's display units."""
    groups = drawing_marks(part, shape)
    rows = rows_of(mark for group in groups for mark in group)
    below, beside = (FIRST + ROW * max(0, count - 1) + 20.0 for count in rows)
    scale = _Scale(shape, max(below, AROUND), max(beside, AROUND))
    paper = Paper(scale.width, scale.height)
    for loop in range(len(shape.loops)):
        ring = shape.polyline(loop, 0.3 / scale.scale)
        ends = [scale.at(float(x), float(y)) for x, y in ring]
        for a, b in zip(ends, [*ends[1:], ends[0]], strict=True):
            paper.avoid(_between(a, b))
    _centre_lines(part, scale, paper)
    leaders = 0
    for group in groups:
        drawn = [_Drawn(mark, scale, part) for mark in group]
        what = group[0].what
        if what in ("overall", "place"):
            _linear(drawn[0], paper, (FIRST + ROW * group[0].row,))
        elif what == "size":
            _linear(drawn[0], paper, ASIDE)
        elif leaders < MOST_LEADERS:
            leaders += 1
            _leader(drawn[0].text, paper, [way for one in drawn for way in _ways(one)])
    return (
        '<svg xmlns="http://www.w3.org/2000/svg" role="img" '
        'aria-label="The part with its dimensions" '
        f'viewBox="0 0 {paper.width:.0f} {paper.height:.0f}" width="{paper.width:.0f}">'
        + "".join([*zone_paths(shape, scale), *paper.lines, boundary_path(shape, scale)])
        + "".join(paper.texts)
        + "</svg>"
    )


class _Drawn:
    """A mark on the paper."""

    def __init__(self, mark: Mark, scale: _Scale, part: Part) -> None:
        self.mark = mark
        self.a, self.b = scale.at(*mark.a), scale.at(*mark.b)
        self.along, self.away = _flipped(mark.along), _flipped(mark.away)
        number = format_number(mark.value, mark.kind, part.display_units)
        self.text = mark.lead + number + (" × 45°" if mark.name == RIGHT else "")


def _between(a: Spot, b: Spot) -> np.ndarray:
    return np.linspace(a, b, max(2, math.ceil(math.dist(a, b) / 2.0)))


def _centre_lines(part: Part, scale: _Scale, paper: Paper) -> None:
    """A cross through every round hole, a little longer than it."""
    for centre, radius in bolt_circles(part):
        paper.circle(scale.at(*centre), radius * scale.scale)
    for centre, radius in hole_axes(part):
        (x, y), reach = scale.at(*centre), radius * scale.scale + 5.0
        for dx, dy in ((reach, 0.0), (0.0, reach)):
            paper.line((x - dx, y - dy), (x + dx, y + dy), "centre")


# --- linear -------------------------------------------------------------------------------------


def _linear(one: _Drawn, paper: Paper, reaches: tuple[float, ...]) -> None:
    """Two extension lines and a line with arrows between them, its number in a gap."""
    choices = [layout for reach in reaches for layout in _layouts(one, reach)]
    free = [c for c in choices if not paper.overlaps(c[2])] or (
        choices[:1] if one.mark.what == "overall" else []
    )
    if not free:
        return
    ends, outside, label = min(free, key=lambda c: paper.hides(c[2]))
    if len(reaches) == 1:
        ends, outside, label = free[0]
    for place, end in zip((one.a, one.b), ends, strict=True):
        far = math.dist(place, end)
        if far > GAP:
            way = ((end[0] - place[0]) / far, (end[1] - place[1]) / far)
            paper.line(_moved(place, way, GAP), _moved(end, way, BEYOND))
    long = math.dist(*ends)
    way = ((ends[1][0] - ends[0][0]) / long, (ends[1][1] - ends[0][1]) / long)
    back = (-way[0], -way[1])
    if outside:
        paper.line(_moved(ends[0], way, -2 * ARROW), _moved(ends[1], way, 2 * ARROW))
        paper.arrow(ends[0], way)
        paper.arrow(ends[1], back)
    else:
        paper.line(*ends)
        paper.arrow(ends[0], back)
        paper.arrow(ends[1], way)
    paper.write(label)


def _layouts(one: _Drawn, reach: float) -> Iterator[tuple[tuple[Spot, Spot], bool, Label]]:
    """Ends of the dimension line `reach` [px] beside its places; whether its arrows come from
    outside; its number in the middle, or beyond either end where it is too short."""
    ux, uy = one.away
    high = [p[0] * ux + p[1] * uy for p in (one.a, one.b)]
    line = (max(high) if reach > 0.0 else min(high)) + reach
    ends = tuple(_moved(p, one.away, line - h) for p, h in zip((one.a, one.b), high, strict=True))
    long = math.dist(ends[0], ends[1])
    if long < 1e-6:
        return
    way = ((ends[1][0] - ends[0][0]) / long, (ends[1][1] - ends[0][1]) / long)
    angle = _upright(math.degrees(math.atan2(way[1], way[0])))
    wide = width_of(one.text) + 2 * PAD
    pair = (ends[0], ends[1])
    if long >= wide + 2 * ARROW + 4.0:
        yield pair, False, Label(one.text, _middle(*pair), angle)
        return
    beyond = 2 * ARROW + wide / 2.0 + 2.0
    yield pair, True, Label(one.text, _moved(ends[1], way, beyond), angle)
    yield pair, True, Label(one.text, _moved(ends[0], way, -beyond), angle)


# --- with a leader ------------------------------------------------------------------------------

Way = tuple[Spot, Spot, Spot | None, float]
"""Tip on the circle, direction away from it along the leader, the far end of a line through the
circle (None for none), and how much this way is less liked."""


def _ways(one: _Drawn) -> Iterator[Way]:
    return _round_ways(one) if one.mark.what == "diameter" else _arc_ways(one)


def _round_ways(one: _Drawn) -> Iterator[Way]:
    """Leaders of a diameter: from the circle outwards, at several angles."""
    (ax, ay), (bx, by) = one.a, one.b
    cx, cy, r = (ax + bx) / 2.0, (ay + by) / 2.0, math.dist(one.a, one.b) / 2.0
    for rank, degrees in enumerate(ANGLES):
        turn = math.radians(degrees)
        way = (math.cos(turn), -math.sin(turn))
        tip = (cx + r * way[0], cy + r * way[1])
        through = (cx - r * way[0], cy - r * way[1]) if r > 1.5 * ARROW else None
        yield tip, way, through, 0.6 * rank


def _arc_ways(one: _Drawn) -> Iterator[Way]:
    """Leaders of a radius: from the arc outwards, or back towards its centre."""
    far = math.dist(one.a, one.b) or 1.0
    way = ((one.b[0] - one.a[0]) / far, (one.b[1] - one.a[1]) / far)
    yield one.b, way, None, 0.0
    yield one.b, (-way[0], -way[1]), None, 3.0


def _leader(text: str, paper: Paper, ways: list[Way]) -> None:
    """A line with an arrow at the circle, the number at a short foot at its end."""
    best: tuple[float, Way, Spot, Label] | None = None
    half = width_of(text) / 2.0 + PAD
    for way_ in ways:
        if best is not None and best[0] < GOOD_ENOUGH:
            break
        tip, way, _, dislike = way_
        for length in LENGTHS:
            knee = _moved(tip, way, length)
            side = 1.0 if way[0] >= 0.0 else -1.0
            label = Label(text, (knee[0] + side * (5.0 + half), knee[1]))
            if paper.overlaps(label):
                continue
            cost = dislike + 0.05 * length + 3.0 * paper.hides(label)
            cost += 40.0 * paper.crosses(tip, knee)
            cost += 5.0 * paper.meets(_moved(tip, way, 6.0), knee)
            if best is None or cost < best[0]:
                best = cost, way_, knee, label
    if best is None:
        return
    _, (tip, way, through, _), knee, label = best
    side = 1.0 if way[0] >= 0.0 else -1.0
    paper.line(tip if through is None else through, knee)
    paper.line(knee, (knee[0] + side * 5.0, knee[1]))
    paper.arrow(tip, (-way[0], -way[1]) if through is None else way)
    if through is not None:
        paper.arrow(through, (-way[0], -way[1]))
    paper.write(label)


def _moved(p: Spot, way: Spot, by: float) -> Spot:
    return p[0] + way[0] * by, p[1] + way[1] * by


def _middle(a: Spot, b: Spot) -> Spot:
    return (a[0] + b[0]) / 2.0, (a[1] + b[1]) / 2.0


def _flipped(way: Point) -> Spot:
    return way[0], -way[1]


def _upright(angle: float) -> float:
    """A direction of writing [deg] that is read from below or from the right."""
    if angle > 90.0 - 1e-6:
        return angle - 180.0
    if angle <= -90.0 - 1e-6:
        return angle + 180.0
    return angle
