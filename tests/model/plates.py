"""Small sound parts that tests change."""

from __future__ import annotations

from collections.abc import Sequence

from screenapp.model.part import (
    Case,
    CircleHole,
    Corner,
    Edge,
    FixedSupport,
    ForceLoad,
    Loop,
    Material,
    Part,
    Point,
    StressLimit,
    Wall,
)

STEEL = Material("steel", 210000.0, 0.3, 7850.0, 235.0, 360.0)


def loop(
    points: Sequence[Point],
    through: dict[int, Point] | None = None,
    rounds: dict[int, float] | None = None,
    prefix: str = "",
) -> Loop:
    """A loop c1, c2 ... with arc points and rounds by index (from 0)."""
    through, rounds = through or {}, rounds or {}
    return Loop(
        tuple(Corner(f"{prefix}c{i + 1}", p, rounds.get(i, 0.0)) for i, p in enumerate(points)),
        tuple(Edge(f"{prefix}e{i + 1}", through.get(i)) for i in range(len(points))),
    )


def rectangle(width: float, height: float, round_: float = 0.0) -> Loop:
    """A rectangle with its lower left corner at the origin."""
    points = [(0.0, 0.0), (width, 0.0), (width, height), (0.0, height)]
    return loop(points, rounds=dict.fromkeys(range(4), round_))


def plate(outline: Loop | None = None, *holes: object) -> Part:
    """A 100 x 50 plate (or another outline) with a hole, held on e4, pulled on e2."""
    return Part(
        outline=outline if outline is not None else rectangle(100.0, 50.0),
        holes=tuple(holes) or (CircleHole("h1", (50.0, 25.0), 10.0),),  # type: ignore[arg-type]
        wall=Wall(3.0, "steel"),
        materials=(STEEL,),
        supports=(FixedSupport("s1", "e4"),),
        cases=(Case("k1", "pull", (ForceLoad("l1", "e2", 100.0, 0.0),)),),
        limits=(StressLimit("g1"),),
    )
