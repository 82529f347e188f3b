"""Random parts of the kinds that the mesher must cope with, each made from a seed.

Every kind is drawn with loops, rounds, circles, slots and arcs as a user would draw it; what does
not fit (a round too big, holes that touch) is drawn again.
"""

from __future__ import annotations

import math
from collections.abc import Callable

import numpy as np

from screenapp.meshing.inside import polygon_of
from screenapp.model.errors import InvalidPartError
from screenapp.model.part import (
    CircleHole,
    Corner,
    Edge,
    Hole,
    Loop,
    LoopHole,
    Part,
    Point,
    SlotHole,
)
from screenapp.model.shape import Shape, shape_of

Random = np.random.Generator


def loop(
    points: list[Point],
    rounds: list[float] | float = 0.0,
    through: dict[int, Point] | None = None,
    first: int = 1,
) -> Loop:
    """A loop with corners c1, c2 ... and edges e1, e2 ...; `through` bends edges (from 0)."""
    radii = [rounds] * len(points) if isinstance(rounds, float) else rounds
    bends = through or {}
    return Loop(
        tuple(
            Corner(f"c{first + i}", p, r)
            for i, (p, r) in enumerate(zip(points, radii, strict=True))
        ),
        tuple(Edge(f"e{first + i}", bends.get(i)) for i in range(len(points))),
    )


def rectangle(width: float, height: float, rounds: list[float] | float = 0.0) -> Loop:
    """A rectangle with its lower left corner at the origin."""
    return loop([(0.0, 0.0), (width, 0.0), (width, height), (0.0, height)], rounds)


def plate(random: Random) -> Part:
    """A plate with up to six holes and slots."""
    w, h = random.uniform(40, 200), random.uniform(30, 120)
    holes: list[Hole] = []
    for k in range(random.integers(1, 7)):
        at = (float(random.uniform(0, w)), float(random.uniform(0, h)))
        d = float(random.uniform(0.03, 0.3) * min(w, h))
        if random.random() < 0.6:
            holes.append(CircleHole(f"h{k}", at, d))
        else:
            length = d * float(random.uniform(1.0, 4.0))
            holes.append(SlotHole(f"h{k}", at, length, d, float(random.uniform(0, 180))))
    return Part(outline=rectangle(w, h, float(random.uniform(0, 0.2) * h)), holes=tuple(holes))


def bracket(random: Random) -> Part:
    """An L with a fillet in its corner and a hole in each arm."""
    w, h = random.uniform(40, 150), random.uniform(40, 150)
    a, b = random.uniform(0.15, 0.5) * h, random.uniform(0.15, 0.5) * w
    points = [(0.0, 0.0), (w, 0.0), (w, a), (b, a), (b, h), (0.0, h)]
    inner = float(random.choice([0.0, 0.5, 2.0, 8.0]))
    rounds = [0.0, *random.uniform(0, 0.4 * a, 2), inner, *random.uniform(0, 0.4 * b, 2)]
    holes = (
        CircleHole("h1", (float(w - 0.5 * a), float(0.5 * a)), float(a * random.uniform(0.1, 0.9))),
        CircleHole(
            "h2", (float(0.5 * b), float(h - 0.6 * b)), float(b * random.uniform(0.1, 0.95))
        ),
    )
    return Part(outline=loop(points, [float(r) for r in rounds]), holes=holes)


def ring(random: Random) -> Part:
    """A disc with an off-centre hole: a wall that gets thin on one side."""
    r = random.uniform(10, 60)
    inner = r * random.uniform(0.2, 0.9)
    off = (r - inner) * random.uniform(0, 0.97)
    outline = loop([(r, 0.0), (-r, 0.0)], 0.0, {0: (0.0, r), 1: (0.0, -r)})
    return Part(outline=outline, holes=(CircleHole("h1", (off, 0.0), 2 * inner),))


def clip(random: Random) -> Part:
    """A thin C of two arcs with straight ends."""
    r = random.uniform(10, 40)
    wall = random.uniform(0.03, 0.3) * r
    gap = random.uniform(0.3, 1.5)
    a, b = gap / 2, 2 * math.pi - gap / 2

    def at(radius: float, angle: float) -> Point:
        return float(radius * math.cos(angle)), float(radius * math.sin(angle))

    points = [at(r, a), at(r, b), at(r - wall, b), at(r - wall, a)]
    tip = float(random.choice([0.0, 0.2, 0.45])) * wall
    return Part(outline=loop(points, tip, {0: at(r, math.pi), 2: at(r - wall, math.pi)}))


def lug(random: Random) -> Part:
    """A tapered plate with a round end and a pin hole that leaves little wall."""
    w, h = random.uniform(30, 100), random.uniform(40, 160)
    r = random.uniform(0.25, 0.5) * w
    c = (0.0, float(h))
    outline = loop(
        [(-w / 2, 0.0), (w / 2, 0.0), (r, h), (-r, h)], [3.0, 3.0, 0.0, 0.0], {2: (0.0, h + r)}
    )
    return Part(outline=outline, holes=(CircleHole("h1", c, 2 * r * random.uniform(0.3, 0.95)),))


def ligaments(random: Random) -> Part:
    """A row of holes with little material between them and to the edge."""
    d = random.uniform(5, 20)
    gap = d * random.uniform(0.02, 0.3)
    n = int(random.integers(2, 6))
    edge = d * random.uniform(0.02, 0.5)
    w, h = n * (d + gap) + 2 * d, 2 * d + 2 * edge
    holes = tuple(
        CircleHole(f"h{k}", (1.5 * d + k * (d + gap), edge + 0.5 * d), d) for k in range(n)
    )
    return Part(outline=rectangle(w, h), holes=holes)


def gusset(random: Random) -> Part:
    """A triangle with angles down to 20°, some corners rounded, with an angled slot."""
    a, b = random.uniform(50, 150), random.uniform(25, 150)
    rounds = [float(r) for r in random.choice([0.0, 1.0, 3.0], 3)]
    points = [(0.0, 0.0), (a, 0.0), (float(random.uniform(0, a)), b)]
    centre = (sum(p[0] for p in points) / 3, sum(p[1] for p in points) / 3)
    slot = SlotHole("h1", centre, 0.3 * min(a, b), 0.08 * min(a, b), float(random.uniform(0, 180)))
    return Part(outline=loop(points, rounds), holes=(slot,))


def window(random: Random) -> Part:
    """A frame: a plate with one or two rectangular holes with rounded or sharp corners."""
    w, h = random.uniform(60, 200), random.uniform(40, 100)
    wall = random.uniform(0.02, 0.15) * h
    split = w * random.uniform(0.3, 0.7)
    spans = [(wall, split - wall / 2), (split + wall / 2, w - wall)]
    holes = tuple(
        LoopHole(
            f"h{k}",
            loop(
                [(x0, wall), (x1, wall), (x1, h - wall), (x0, h - wall)],
                float(random.choice([0.0, 0.5, 3.0])),
                first=10 + 10 * k,
            ),
        )
        for k, (x0, x1) in enumerate(spans)
    )
    return Part(outline=rectangle(w, h, 2.0), holes=holes)


KINDS: tuple[Callable[[Random], Part], ...] = (
    plate,
    bracket,
    ring,
    clip,
    lug,
    ligaments,
    gusset,
    window,
)


def random_shape(seed: int) -> Shape:
    """The shape of a number: its kind goes round with the number, drawn anew until it is valid."""
    random = np.random.default_rng(seed)
    draw = KINDS[seed % len(KINDS)]
    while True:
        try:
            shape = shape_of(draw(random))
        except InvalidPartError:
            continue
        # Sound to a millionth of the part, and with no wall thinner than a thousandth of it.
        fine = polygon_of(shape, 1e-6 * shape.size)
        narrow = polygon_of(shape, 1e-5 * shape.size).buffer(-5e-4 * shape.size)
        if (
            fine.is_valid
            and narrow.geom_type == "Polygon"
            and len(narrow.interiors) == (len(shape.loops) - 1)
        ):
            return shape
