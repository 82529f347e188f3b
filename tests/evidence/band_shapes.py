"""Families of random thin-walled parts: what is drawn, held and loaded, drawn from a generator.

Every family mixes what a user would: generous and small fillets, sharp re-entrant corners, round,
slotted and lightening holes, supports on edges, holes and corners, loads of every kind.
"""

from __future__ import annotations

import math
from collections.abc import Callable
from dataclasses import dataclass

import numpy as np

from screenapp.model.curves import Arc
from screenapp.model.part import (
    BearingLoad,
    CircleHole,
    Corner,
    Edge,
    FixedSupport,
    ForceLoad,
    GravityLoad,
    Hole,
    LineLoad,
    Load,
    Loop,
    LoopHole,
    Point,
    PointLoad,
    PrescribedSupport,
    PressureLoad,
    RollerSupport,
    ShearLoad,
    SlotHole,
    Support,
)

Random = np.random.Generator


@dataclass(frozen=True)
class Drawn:
    """A part but for its wall: outline, holes, supports and the loads of one or two cases."""

    outline: Loop
    holes: tuple[Hole, ...]
    supports: tuple[Support, ...]
    cases: tuple[tuple[Load, ...], ...]


def _loop(points: list[Point], rounds: dict[int, float], prefix: str = "") -> Loop:
    corners = tuple(
        Corner(f"{prefix}c{i + 1}", p, rounds.get(i, 0.0)) for i, p in enumerate(points)
    )
    return Loop(corners, tuple(Edge(f"{prefix}e{i + 1}") for i in range(len(points))))


def _number(rng: Random, low: float, high: float) -> float:
    return float(rng.uniform(low, high))


def _inner_radius(rng: Random, sharp: float, most: float) -> float:
    """The radius of a re-entrant corner [mm]: none, small (0.3 to 2) or generous (to `most`)."""
    lot = rng.random()
    if lot < sharp:
        return 0.0
    return _number(rng, 0.3, 2.0) if lot < 0.5 * (1.0 + sharp) else _number(rng, 2.0, most)


def _toward(size: float, angle: float) -> Point:
    return size * math.cos(angle), size * math.sin(angle)


def plate(rng: Random) -> Drawn:
    """A strip with round holes and slots, pulled; or sheared, or pressed in its first hole."""
    w, h = _number(rng, 80, 200), _number(rng, 40, 90)
    holes: list[Hole] = []
    x = 0.25 * w
    while x < 0.8 * w:
        d = _number(rng, 0.12, 0.4) * h
        at, name = (x, h / 2 + _number(rng, -0.12, 0.12) * h), f"h{len(holes) + 1}"
        if rng.random() < 0.25:
            holes.append(SlotHole(name, at, 1.6 * d, 0.8 * d, _number(rng, 0, 180)))
        else:
            holes.append(CircleHole(name, at, d))
        x += 1.2 * d + _number(rng, 0.2, 0.5) * w
    supports: tuple[Support, ...] = (
        RollerSupport("s1", "e4"),
        RollerSupport("s2", "e1") if rng.random() < 0.5 else RollerSupport("s2", "c1", 90.0),
    )
    q = _number(rng, 20, 120)
    first: list[Load] = [LineLoad("l1", "e2", q, 0.0)]
    if rng.random() < 0.3:
        first.append(PressureLoad("l2", "h1", _number(rng, 2, 20)))
    second: Load = ShearLoad("l3", "e2", 0.2 * q)
    if rng.random() < 0.4:
        second = BearingLoad("l3", "h1", *_toward(10.0 * q, _number(rng, -1.0, 1.0)))
    return Drawn(
        _loop([(0.0, 0.0), (w, 0.0), (w, h), (0.0, h)], {}),
        tuple(holes),
        supports,
        (tuple(first), (second,)),
    )


def bracket(rng: Random) -> Drawn:
    """An L with two bolt holes in its leg and a pin or an edge loaded on its arm."""
    leg, arm = _number(rng, 80, 140), _number(rng, 80, 140)
    a, b = _number(rng, 24, 40), _number(rng, 22, 36)
    points = [(0.0, 0.0), (arm, 0.0), (arm, b), (a, b), (a, leg), (0.0, leg)]
    holes: tuple[Hole, ...] = (
        CircleHole("h1", (a / 2, leg - 15.0), _number(rng, 6, 11)),
        CircleHole("h2", (a / 2, leg - 45.0), _number(rng, 6, 11)),
        CircleHole("h3", (arm - 14.0, b / 2), _number(rng, 6, 11)),
    )
    down = _toward(_number(rng, 300, 1500), _number(rng, -2.2, -0.9))
    load: Load = BearingLoad("l1", "h3", *down)
    if rng.random() < 0.3:
        load = ForceLoad("l1", "e2", *down)
    supports: tuple[Support, ...] = (FixedSupport("s1", "h1"), FixedSupport("s2", "h2"))
    if rng.random() < 0.3:
        supports = (RollerSupport("s1", "h1"), FixedSupport("s2", "h2"))
    weight = GravityLoad("l2", 0.0, -9.81)
    aside = BearingLoad("l3", "h3", *_toward(_number(rng, 200, 800), _number(rng, 0.0, 6.2)))
    return Drawn(
        _loop(points, {3: _inner_radius(rng, 0.3, 16.0), 1: 4.0, 5: 5.0}),
        holes,
        supports,
        ((load, weight) if rng.random() < 0.3 else (load,), (aside,)),
    )


def lug(rng: Random) -> Drawn:
    """A lug with a round head and a pin; its foot held along an edge."""
    w, h = _number(rng, 60, 110), _number(rng, 70, 120)
    outline = _loop([(0.0, 0.0), (w, 0.0), (w, h), (0.0, h)], {2: 0.45 * w, 3: 0.45 * w})
    holes = (CircleHole("h1", (w / 2, h - 0.5 * w), _number(rng, 0.25, 0.45) * w),)
    angle, force = _number(rng, 0.9, 2.2), _number(rng, 2000, 9000)
    if rng.random() < 0.5:
        supports: tuple[Support, ...] = (FixedSupport("s1", "e1"),)
    else:
        supports = (RollerSupport("s1", "e1"), RollerSupport("s2", "c1", 0.0))
        angle = math.pi / 2
    return Drawn(
        outline,
        holes,
        supports,
        (
            (BearingLoad("l1", "h1", *_toward(force, angle)),),
            (BearingLoad("l2", "h1", *_toward(0.5 * force, math.pi - angle)),),
        ),
    )


def clip(rng: Random) -> Drawn:
    """An open ring of thin section, one end held, the other pushed."""
    r, t = _number(rng, 15, 40), _number(rng, 4, 9)
    half = _number(rng, 1.9, 2.6)
    outer, inner = Arc((0.0, 0.0), r + t, -half, 2 * half), Arc((0.0, 0.0), r, half, -2 * half)
    places = (outer.start, outer.end, inner.start, inner.end)
    corners = tuple(Corner(f"c{i + 1}", at) for i, at in enumerate(places))
    edges = (Edge("e1", (r + t, 0.0)), Edge("e2"), Edge("e3", (r, 0.0)), Edge("e4"))
    force = _number(rng, 20, 120)
    first: Load = ForceLoad("l1", "e2", 0.3 * force, force)
    if rng.random() < 0.4:
        first = ShearLoad("l1", "e2", force / t)
    second: Load = PressureLoad("l2", "e3", _number(rng, 0.05, 0.4))
    if rng.random() < 0.2:
        second = PointLoad("l2", "c3", 0.0, -force)
    return Drawn(Loop(corners, edges), (), (FixedSupport("s1", "e4"),), ((first,), (second,)))


def lever(rng: Random) -> Drawn:
    """A stepped lever on a boss, its steps filleted or sharp, with a pin at its end."""
    length, h0, h1 = _number(rng, 110, 180), _number(rng, 36, 56), _number(rng, 20, 30)
    neck = _number(rng, 0.35, 0.6) * length
    points = [
        (0.0, -h0 / 2),
        (neck, -h0 / 2),
        (neck, -h1 / 2),
        (length, -h1 / 2),
        (length, h1 / 2),
        (neck, h1 / 2),
        (neck, h0 / 2),
        (0.0, h0 / 2),
    ]
    fit = (h0 - h1) / 2
    r = min(_inner_radius(rng, 0.15, 14.0), 0.45 * fit)
    holes = (
        CircleHole("h1", (h0 / 2, 0.0), _number(rng, 0.3, 0.5) * h0),
        CircleHole("h2", (length - h1 / 2, 0.0), _number(rng, 0.25, 0.45) * h1),
    )
    force = _number(rng, 100, 500)
    return Drawn(
        _loop(points, {2: r, 5: r, 1: 0.45 * fit, 6: 0.45 * fit, 3: 5.0}),
        holes,
        (FixedSupport("s1", "h1"),),
        (
            (BearingLoad("l1", "h2", 0.4 * force, -force),),
            (ForceLoad("l2", "e4", 2.0 * force, 0.3 * force),),
        ),
    )


def gusset(rng: Random) -> Drawn:
    """A clipped triangle held along one side, with a triangular lightening hole or a round one."""
    w, h = _number(rng, 90, 180), _number(rng, 80, 160)
    c, d = _number(rng, 12, 25), _number(rng, 12, 25)
    points = [(0.0, 0.0), (w, 0.0), (w, c), (d, h), (0.0, h)]
    size = _number(rng, 0.2, 0.32)
    x, y = 0.14 * w, 0.14 * h
    hole: Hole = CircleHole("h1", (0.28 * w, 0.28 * h), 0.55 * size * min(w, h) * 2.0)
    if rng.random() < 0.6:
        r = _inner_radius(rng, 0.2, 6.0)
        three = [(x, y), (x + 1.6 * size * w, y), (x, y + 1.6 * size * h)]
        hole = LoopHole("h1", _loop(three, dict.fromkeys(range(3), r), "h1"))
    force = _number(rng, 500, 3000)
    tip: Load = ForceLoad("l1", "e2", 0.0, -force)
    if rng.random() < 0.2:
        tip = PointLoad("l1", "c2", 0.0, -force)
    return Drawn(
        _loop(points, {}),
        (hole,),
        (FixedSupport("s1", "e5"),),
        ((tip,), (PressureLoad("l2", "e1", _number(rng, 1, 6)),)),
    )


def notched(rng: Random) -> Drawn:
    """A strip with one notch: U, V or flat, sharp or rounded; pulled by a force or a movement."""
    w, h = _number(rng, 90, 160), _number(rng, 35, 70)
    depth, x = _number(rng, 0.15, 0.45) * h, _number(rng, 0.4, 0.6) * w
    bottom = _number(rng, 0.06, 0.2) * w / 2
    top = bottom + _number(rng, 0.0, 0.6) * depth
    points = [
        (0.0, 0.0),
        (w, 0.0),
        (w, h),
        (x + top, h),
        (x + bottom, h - depth),
        (x - bottom, h - depth),
        (x - top, h),
        (0.0, h),
    ]
    r = min(_inner_radius(rng, 0.25, 8.0), 0.9 * bottom * math.tan(math.pi / 5), 0.6 * depth)
    supports: tuple[Support, ...] = (RollerSupport("s1", "e8"), RollerSupport("s2", "c1", 90.0))
    q = _number(rng, 20, 100)
    first: Load = LineLoad("l1", "e2", q, 0.0)
    second: Load = PressureLoad("l2", "e1", _number(rng, 0.5, 3.0))
    if rng.random() < 0.3:
        supports = (
            FixedSupport("s1", "e8"),
            PrescribedSupport("s2", "e2", _number(rng, 0.02, 0.1)),
        )
        first = GravityLoad("l1", 0.0, -9.81)
    elif rng.random() < 0.4:
        supports = (FixedSupport("s1", "e8"),)
        second = ForceLoad("l2", "e2", 0.0, -3.0 * q)
    return Drawn(_loop(points, {4: r, 5: r}), (), supports, ((first,), (second,)))


FAMILIES: tuple[Callable[[Random], Drawn], ...] = (
    plate,
    bracket,
    lug,
    clip,
    lever,
    gusset,
    notched,
)
