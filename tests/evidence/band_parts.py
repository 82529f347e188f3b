"""Random parts for the calibration of bands: plates with holes, brackets, lugs, clips, levers.

Each comes from a seed alone.  Supports, loads and probes are mixed; about one part in six has a
sharp re-entrant corner, so that rising places are met as well.
"""

from __future__ import annotations

import math

import numpy as np

from screenapp.model.curves import Arc
from screenapp.model.part import (
    BearingLoad,
    Case,
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
    Material,
    MeshWishes,
    Part,
    Point,
    PressureLoad,
    Probe,
    RollerSupport,
    ShearLoad,
    SlotHole,
    StressLimit,
    Support,
    Wall,
)
from screenapp.model.shape import shape_of
from screenapp.model.validity import faults_of

STEEL = Material("steel", 210_000.0, 0.3, 7850.0, 235.0, 360.0)
FAMILIES = ("plate", "bracket", "lug", "clip", "lever")

Random = np.random.Generator


def random_part(seed: int, tolerance: float = 0.02) -> Part:
    """A valid part from a seed: the family goes round, the rest is drawn; with three probes."""
    for attempt in range(100):
        rng = np.random.default_rng([seed, attempt])
        family = FAMILIES[seed % len(FAMILIES)]
        make = {
            "plate": _plate,
            "bracket": _bracket,
            "lug": _lug,
            "clip": _clip,
            "lever": _lever,
        }[family]
        outline, holes, supports, loads = make(rng)
        part = Part(
            title=f"{family} {seed}",
            outline=outline,
            holes=holes,
            wall=Wall(float(rng.choice([1.0, 2.0, 3.0, 5.0])), "steel"),
            materials=(STEEL,),
            supports=supports,
            cases=(Case("k1", "load", loads),),
            limits=(StressLimit("g1"),),
            mesh=MeshWishes(tolerance=tolerance),
        )
        if not any(fault.blocks for fault in faults_of(part)):
            return _with_probes(part, rng)
    raise AssertionError(f"seed {seed} gives no valid part")


def _loop(points: list[Point], rounds: dict[int, float], prefix: str = "") -> Loop:
    corners = tuple(
        Corner(f"{prefix}c{i + 1}", p, rounds.get(i, 0.0)) for i, p in enumerate(points)
    )
    return Loop(corners, tuple(Edge(f"{prefix}e{i + 1}") for i in range(len(points))))


Drawn = tuple[Loop, tuple[Hole, ...], tuple[Support, ...], tuple[Load, ...]]


def _plate(rng: Random) -> Drawn:
    w, h = float(rng.uniform(80, 200)), float(rng.uniform(40, 90))
    holes: list[Hole] = []
    x = 0.25 * w
    number = 1
    while x < 0.8 * w:
        d = float(rng.uniform(0.12, 0.4) * h)
        at = (x, float(h / 2 + rng.uniform(-0.12, 0.12) * h))
        if rng.random() < 0.25:
            holes.append(SlotHole(f"h{number}", at, 1.6 * d, 0.8 * d, float(rng.uniform(0, 180))))
        else:
            holes.append(CircleHole(f"h{number}", at, d))
        number += 1
        x += 1.2 * d + float(rng.uniform(0.2, 0.5) * w)
    supports: tuple[Support, ...] = (
        RollerSupport("s1", "e4"),
        RollerSupport("s2", "e1") if rng.random() < 0.5 else RollerSupport("s2", "c1", 90.0),
    )
    q = float(rng.uniform(20, 120))
    loads: list[Load] = [LineLoad("l1", "e2", q, 0.0)]
    if rng.random() < 0.3:
        loads.append(PressureLoad("l2", "h1", float(rng.uniform(2, 20))))
    return _loop([(0.0, 0.0), (w, 0.0), (w, h), (0.0, h)], {}), tuple(holes), supports, tuple(loads)


def _bracket(rng: Random) -> Drawn:
    leg, arm = float(rng.uniform(80, 140)), float(rng.uniform(80, 140))
    a, b = float(rng.uniform(24, 40)), float(rng.uniform(22, 36))
    sharp = rng.random() < 0.5
    r = 0.0 if sharp else float(rng.uniform(3, 16))
    points = [(0.0, 0.0), (arm, 0.0), (arm, b), (a, b), (a, leg), (0.0, leg)]
    holes: tuple[Hole, ...] = (
        CircleHole("h1", (a / 2, leg - 15.0), float(rng.uniform(6, 11))),
        CircleHole("h2", (a / 2, leg - 45.0), float(rng.uniform(6, 11))),
        CircleHole("h3", (arm - 14.0, b / 2), float(rng.uniform(6, 11))),
    )
    force = float(rng.uniform(300, 1500))
    angle = float(rng.uniform(-2.2, -0.9))
    load: Load = BearingLoad("l1", "h3", force * math.cos(angle), force * math.sin(angle))
    if rng.random() < 0.3:
        load = ForceLoad("l1", "e2", force * math.cos(angle), force * math.sin(angle))
    supports: tuple[Support, ...] = (FixedSupport("s1", "h1"), FixedSupport("s2", "h2"))
    if rng.random() < 0.3:
        supports = (RollerSupport("s1", "h1"), FixedSupport("s2", "h2"))
    extra: tuple[Load, ...] = (GravityLoad("l2", 0.0, -9.81),) if rng.random() < 0.3 else ()
    return _loop(points, {3: r, 1: 4.0, 5: 5.0}), holes, supports, (load, *extra)


def _lug(rng: Random) -> Drawn:
    w, h = float(rng.uniform(60, 110)), float(rng.uniform(70, 120))
    pin = float(rng.uniform(0.25, 0.45) * w)
    rounds = {2: 0.45 * w, 3: 0.45 * w}
    outline = _loop([(0.0, 0.0), (w, 0.0), (w, h), (0.0, h)], rounds)
    holes = (CircleHole("h1", (w / 2, h - 0.5 * w), pin),)
    angle = float(rng.uniform(0.9, 2.2))
    force = float(rng.uniform(2000, 9000))
    if rng.random() < 0.5:
        supports: tuple[Support, ...] = (FixedSupport("s1", "e1"),)
    else:
        supports = (RollerSupport("s1", "e1"), RollerSupport("s2", "c1", 0.0))
        angle = math.pi / 2
    load = BearingLoad("l1", "h1", force * math.cos(angle), force * math.sin(angle))
    return outline, holes, supports, (load,)


def _clip(rng: Random) -> Drawn:
    r, t = float(rng.uniform(15, 40)), float(rng.uniform(4, 9))
    half = float(rng.uniform(1.9, 2.6))
    outer, inner = Arc((0.0, 0.0), r + t, -half, 2 * half), Arc((0.0, 0.0), r, half, -2 * half)
    corners = (
        Corner("c1", outer.start),
        Corner("c2", outer.end),
        Corner("c3", inner.start),
        Corner("c4", inner.end),
    )
    edges = (
        Edge("e1", (r + t, 0.0)),
        Edge("e2"),
        Edge("e3", (r, 0.0)),
        Edge("e4"),
    )
    force = float(rng.uniform(20, 120))
    supports: tuple[Support, ...] = (FixedSupport("s1", "e4"),)
    load: Load = ForceLoad("l1", "e2", 0.3 * force, force)
    if rng.random() < 0.4:
        load = ShearLoad("l1", "e2", force / t)
    return Loop(corners, edges), (), supports, (load,)


def _lever(rng: Random) -> Drawn:
    length, h0, h1 = (
        float(rng.uniform(110, 180)),
        float(rng.uniform(36, 56)),
        float(rng.uniform(20, 30)),
    )
    neck = float(rng.uniform(0.35, 0.6) * length)
    r = float(rng.uniform(4, 14))
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
    rounds = {2: min(r, 0.45 * fit), 5: min(r, 0.45 * fit), 1: 0.45 * fit, 6: 0.45 * fit, 3: 5.0}
    holes = (
        CircleHole("h1", (h0 / 2, 0.0), float(rng.uniform(0.3, 0.5) * h0)),
        CircleHole("h2", (length - h1 / 2, 0.0), float(rng.uniform(0.25, 0.45) * h1)),
    )
    force = float(rng.uniform(100, 500))
    return (
        _loop(points, rounds),
        holes,
        (FixedSupport("s1", "h1"),),
        (BearingLoad("l1", "h2", 0.4 * force, -force),),
    )


def _with_probes(part: Part, rng: Random) -> Part:
    """Two probes on the boundary and one inside, away from sharp corners."""
    from dataclasses import replace

    from shapely import Point as Dot
    from shapely import Polygon

    shape = shape_of(part)
    rings = [shape.polyline(i, 1e-3 * shape.size) for i in range(len(shape.loops))]
    body = Polygon(rings[0], rings[1:])
    probes: list[Probe] = []
    for i in (1, 2):
        piece = shape.curves[int(rng.integers(len(shape.curves)))]
        at = piece.curve.point(float(rng.uniform(0.2, 0.8)))
        probes.append(Probe(f"p{i}", f"P{i}", (float(at[0]), float(at[1]))))
    x0, y0, x1, y1 = shape.bounds
    for _ in range(200):
        dot = float(rng.uniform(x0, x1)), float(rng.uniform(y0, y1))
        if body.buffer(-0.02 * shape.size).contains(Dot(dot)):
            probes.append(Probe("p3", "P3", dot))
            break
    return replace(part, readings=tuple(probes))
