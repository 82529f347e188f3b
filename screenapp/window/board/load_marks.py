"""Symbols of loads: arrows as engineering mechanics textbooks draw them."""

from __future__ import annotations

import math

import numpy as np

from screenapp.model.edge_parts import Span, runs_backward, span_of
from screenapp.model.part import (
    BearingLoad,
    ForceLoad,
    GravityLoad,
    LineLoad,
    Load,
    MisfitLoad,
    MomentLoad,
    PlacedLoad,
    PointLoad,
    PressureLoad,
    ShearLoad,
    SpinLoad,
    TemperatureLoad,
)
from screenapp.model.units import format_quantity
from screenapp.window.board.body_load_marks import moment_mark, spin_mark, temperature_mark
from screenapp.window.board.drawn_part import DrawnPart
from screenapp.window.board.frame import Floats, Frame
from screenapp.window.board.marks import Mark, middle, radius_px, stations, to_px

LONG, ROW, ROW_GAP = 46.0, 28.0, 24.0
"""Length of a single arrow and of one in a row, and the gap between those [px]."""

POINT = 1e-6
"""Half the length of edge that stands for a point of it, as a share of the edge."""


def load_mark(drawn: DrawnPart, frame: Frame, load: Load) -> Mark:
    """The symbol of one load; empty if what it is on is gone or it is zero."""
    mark = Mark(load.id, "load")
    if isinstance(load, GravityLoad):
        _own_weight(mark, drawn, frame, load)
        return mark
    if isinstance(load, SpinLoad):
        spin_mark(mark, drawn, frame, load)
        return mark
    if isinstance(load, MisfitLoad):
        _misfit(mark, drawn, frame, load)
        return mark
    if isinstance(load, TemperatureLoad):
        centre = drawn.anchor_of(load.zone) if load.zone is not None else centroid(drawn)
        if centre is not None:
            aside = np.array([-26.0, -20.0]) if load.zone is None else np.zeros(2)
            temperature_mark(mark, drawn, load, frame.pxs(centre) + aside)
        return mark
    place = middle(drawn, frame, load.on, _drawn_span(drawn, load))
    if place is None:
        return mark
    units = drawn.part.display_units
    if isinstance(load, PressureLoad):
        _pressed(mark, drawn, frame, load)
        text = format_quantity(load.pressure, "stress", units)
        if load.end_pressure is not None:
            text += f" to {format_quantity(load.end_pressure, 'stress', units)}"
    elif isinstance(load, ShearLoad):
        _sheared(mark, drawn, frame, load)
        text = format_quantity(load.per_length, "line_load", units)
    elif isinstance(load, LineLoad):
        _spread(mark, drawn, frame, load)
        text = format_quantity(math.hypot(load.x, load.y), "line_load", units)
        if load.end_x is not None or load.end_y is not None:
            x = load.x if load.end_x is None else load.end_x
            y = load.y if load.end_y is None else load.end_y
            text += f" to {format_quantity(math.hypot(x, y), 'line_load', units)}"
    elif isinstance(load, MomentLoad):
        moment_mark(mark, drawn, frame, load, place[0])
        text = format_quantity(load.moment, "moment", units)
    else:
        _single(mark, drawn, frame, load, *place)
        text = format_quantity(math.hypot(load.x, load.y), "force", units)
    if mark.lines:
        mark.label = text
    return mark


def _drawn_span(drawn: DrawnPart, load: PlacedLoad) -> Span:
    """The part of its edge that a load is drawn on: a point of an edge has a length too small to be
    seen, so that it has a place."""
    start, end = span_of(load)
    if start is None or start != end:
        return start, end
    whole = sum(piece.curve.length for piece in drawn.pieces_of(load.on))
    at = min(max(start, 0.0), whole)
    return max(at - POINT * whole, 0.0), min(at + POINT * whole, whole)


def _push(
    mark: Mark, place: tuple[Floats, Floats], way: Floats, long: float, gap: float = 3.0
) -> tuple[Floats, Floats]:
    """An arrow onto the material, or away from it: never across it. Gives tail and tip."""
    at, out = place
    if way @ out > 1e-9:
        tail, tip = at + gap * way, at + (gap + long) * way
    else:
        tail, tip = at - (gap + long) * way, at - gap * way
    mark.arrow(tail, tip)
    return tail, tip


def _row(mark: Mark, tails: Floats, closed: bool) -> None:
    """The line that joins the far ends of a row of arrows."""
    if len(tails) > 1:
        mark.lines.append(np.vstack([tails, tails[:1]]) if closed else tails)


def _pressed(mark: Mark, drawn: DrawnPart, frame: Frame, load: PressureLoad) -> None:
    last = load.pressure if load.end_pressure is None else load.end_pressure
    most = max(abs(load.pressure), abs(last))
    if most == 0.0:
        return
    hole = load.on in drawn.holes
    long = min(ROW, 0.6 * radius_px(drawn, frame, load.on))
    line = stations(drawn, frame, load.on, ROW_GAP, ends=True, span=span_of(load))
    far = []
    sizes = _varying(drawn, load.on, load.pressure, last, len(line))
    for p, out, size in zip(line.at, line.out, sizes, strict=True):
        sign = -1.0 if size > 0.0 else 1.0
        if abs(size) < 0.12 * most:  # too short for an arrow
            far.append(p + 3.0 * out)
            continue
        tail, tip = _push(mark, (p, out), sign * out, long * abs(size) / most)
        far.append(tail if sign < 0.0 else tip)
    if far:
        _row(mark, np.array(far), hole)
        i = len(far) // 2
        mark.say("", far[i] + (0.0 if hole else label_gap(line.out[i])))


def _varying(drawn: DrawnPart, on: str, first: float, last: float, count: int) -> Floats:
    """Sizes at stations along a boundary whose load varies evenly along the edge as drawn."""
    sizes = np.linspace(first, last, max(count, 2))[:count]
    return sizes[::-1] if runs_backward(drawn.part, on) else sizes


def _sheared(mark: Mark, drawn: DrawnPart, frame: Frame, load: ShearLoad) -> None:
    if load.per_length == 0.0:
        return
    line = stations(drawn, frame, load.on, 30.0, span=span_of(load))
    sign = math.copysign(1.0, load.per_length)
    off = min(7.0, 0.4 * radius_px(drawn, frame, load.on))
    for p, out, along in zip(line.at, line.out, line.along, strict=True):
        foot = p + off * out
        mark.arrow(foot - 11.0 * sign * along, foot + 11.0 * sign * along, 7.0)
    if len(line):
        i = len(line) // 2
        mark.say("", line.at[i] + off * line.out[i] + label_gap(line.out[i]))


def _spread(mark: Mark, drawn: DrawnPart, frame: Frame, load: LineLoad) -> None:
    last_x = load.x if load.end_x is None else load.end_x
    last_y = load.y if load.end_y is None else load.end_y
    most = max(math.hypot(load.x, load.y), math.hypot(last_x, last_y))
    if most == 0.0:
        return
    line = stations(drawn, frame, load.on, ROW_GAP, ends=True, span=span_of(load))
    far = []
    x = _varying(drawn, load.on, load.x, last_x, len(line))
    y = _varying(drawn, load.on, load.y, last_y, len(line))
    for p, out, own_x, own_y in zip(line.at, line.out, x, y, strict=True):
        size, way = math.hypot(own_x, own_y), to_px(own_x, own_y)
        if way is None or size < 0.12 * most:
            far.append(p + 3.0 * out)
            continue
        tail, tip = _push(mark, (p, out), way, ROW * size / most)
        far.append(tip if way @ out > 1e-9 else tail)
    if far:
        _row(mark, np.array(far), load.on in drawn.holes)
        i = len(far) // 2
        mark.say("", far[i] + label_gap((far[i] - line.at[i]) / ROW))


def _single(
    mark: Mark,
    drawn: DrawnPart,
    frame: Frame,
    load: ForceLoad | BearingLoad | PointLoad,
    at: Floats,
    out: Floats,
) -> None:
    way = to_px(load.x, load.y)
    if way is None:
        return
    hole = load.on in drawn.holes
    if hole:
        radius = radius_px(drawn, frame, load.on)
        tip = at + (radius + LONG - 12.0) * way
        mark.arrow(at, tip, 10.0)
        mark.circle(at, 2.5)
        if isinstance(load, BearingLoad):
            _fan(mark, at, way, radius)
        else:
            mark.circle(at, max(radius - 4.0, 2.0))
        mark.say("", tip + label_gap(way))
        return
    tail, tip = _push(mark, (at, out), way, LONG)
    away = tip if way @ out > 1e-9 else tail
    mark.say("", away + label_gap((away - at) / max(float(np.hypot(*(away - at))), 1e-9)))
    if isinstance(load, ForceLoad | PointLoad):  # the length it is spread over
        line = stations(drawn, frame, load.on, 10.0, ends=True, span=_drawn_span(drawn, load))
        if len(line) > 1:
            rail = line.at + 5.0 * line.out
            mark.lines.append(rail)
            for i in (0, -1):
                mark.line(rail[i] - 4.0 * line.out[i], rail[i] + 4.0 * line.out[i])


def _fan(mark: Mark, centre: Floats, way: Floats, radius: float) -> None:
    """Arrows onto the rim over the half that bears, as long as the cosine law has them."""
    if radius < 12.0:
        return
    for degrees in (-60.0, -30.0, 30.0, 60.0):
        c, s = math.cos(math.radians(degrees)), math.sin(math.radians(degrees))
        ray = np.array([c * way[0] - s * way[1], s * way[0] + c * way[1]])
        long = min(0.75 * radius, 30.0) * c
        mark.arrow(centre + (radius - long) * ray, centre + (radius - 1.0) * ray, 6.0)


def _own_weight(mark: Mark, drawn: DrawnPart, frame: Frame, load: GravityLoad) -> None:
    way = to_px(load.x, load.y)
    centre = centroid(drawn)
    if way is None or centre is None:
        return
    at = frame.pxs(centre)
    mark.circle(at, 6.0)
    turn = np.linspace(0.0, math.pi / 2.0, 9)
    for begin in (0.0, math.pi):
        arc = at + 6.0 * np.stack([np.cos(begin + turn), np.sin(begin + turn)], axis=-1)
        mark.fills.append(np.vstack([at, arc]))
    tip = at + (LONG - 4.0) * way
    mark.arrow(at + 6.0 * way, tip)
    mark.say("own weight", at + 0.5 * (tip - at) + np.array([44.0, 0.0]))


def _misfit(mark: Mark, drawn: DrawnPart, frame: Frame, load: MisfitLoad) -> None:
    """Two bars, where the support should be and where it is, and an arrow from one to the other."""
    support = next((s for s in drawn.part.supports if s.id == load.support), None)
    way = to_px(load.x, load.y)
    place = None if support is None else middle(drawn, frame, support.on, span_of(support))
    if support is None or way is None or place is None:
        return
    at, out = place
    start = at if support.on in drawn.holes else at + 4.0 * out
    side = 9.0 * np.array([-way[1], way[0]])
    tip = start + 34.0 * way
    for end in (start, tip):
        mark.line(end - side, end + side)
    mark.arrow(start, tip)
    size = format_quantity(math.hypot(load.x, load.y), "length", drawn.part.display_units)
    mark.say(f"off by {size}", tip + np.array([52.0 * way[0], 16.0 * way[1]]))


def label_gap(way: Floats) -> Floats:
    """From an arrow's end to the middle of its label: labels are wider than high."""
    return np.array([30.0 * way[0], 12.0 * way[1]])


def centroid(drawn: DrawnPart) -> tuple[float, float] | None:
    """Centre of the area [mm], holes taken out; None without an area."""
    area = mx = my = 0.0
    for loop in range(len(drawn.loops)):  # the outline turns left, holes turn right
        ring = drawn.polyline(loop, 0.05)
        if not len(ring):
            continue
        x, y = ring[:, 0], ring[:, 1]
        nx, ny = np.roll(x, -1), np.roll(y, -1)
        cross = x * ny - nx * y
        area += float(cross.sum()) / 2.0
        mx += float(((x + nx) * cross).sum()) / 6.0
        my += float(((y + ny) * cross).sum()) / 6.0
    return (mx / area, my / area) if area > 0.0 else None
