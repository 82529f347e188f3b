"""Random parts for the calibration of bands: plates with holes, brackets, lugs, clips and more.

Each comes from a seed alone.  Shapes, supports, loads, materials, walls and probes are mixed, half
of the parts have two cases, and about one in four has a sharp re-entrant corner or a force at a
point, so that rising places are met as well.
"""

from __future__ import annotations

from dataclasses import replace

import numpy as np
from shapely import Point as Dot, Polygon

from screenapp.model.part import (
    Case,
    Limit,
    Material,
    MeshWishes,
    Part,
    Probe,
    StressLimit,
    Wall,
)
from screenapp.model.shape import shape_of
from screenapp.model.validity import faults_of
from tests.evidence.band_shapes import FAMILIES, Random

MATERIALS = (
    Material("steel", 210_000.0, 0.3, 7850.0, 235.0, 360.0),
    Material("aluminium", 70_000.0, 0.33, 2700.0, 240.0, 290.0),
    Material("moulded", 2_600.0, 0.4, 1410.0, 65.0, 70.0),
)
WALLS = (1.0, 2.0, 3.0, 5.0)
INSIDE = (0.02, 0.008)
"""Least distance of the inner probes from the boundary, over the size of the part."""


def random_part(seed: int, tolerance: float = 0.02) -> Part:
    """A valid part from a seed: the family goes round, the rest is drawn; with four probes."""
    for attempt in range(100):
        rng = np.random.default_rng([seed, attempt])
        make = FAMILIES[seed % len(FAMILIES)]
        drawn = make(rng)
        material = MATERIALS[int(rng.choice(len(MATERIALS), p=(0.5, 0.3, 0.2)))]
        limits: tuple[Limit, ...] = (StressLimit("g1"),)
        if rng.random() < 0.25:
            limits += (StressLimit("g2", "sigma_1", "strength"),)
        state = "plane strain" if rng.random() < 0.1 else "plane stress"
        part = Part(
            title=f"{make.__name__} {seed}",
            outline=drawn.outline,
            holes=drawn.holes,
            wall=Wall(float(rng.choice(WALLS)), material.name, state),
            materials=(material,),
            supports=drawn.supports,
            cases=tuple(
                Case(f"k{i + 1}", f"load {i + 1}", loads)
                for i, loads in enumerate(drawn.cases[: int(rng.integers(1, 3))])
            ),
            limits=limits,
            mesh=MeshWishes(tolerance=tolerance),
        )
        if not any(fault.blocks for fault in faults_of(part)):
            return _with_probes(part, rng)
    raise AssertionError(f"seed {seed} gives no valid part")


def _with_probes(part: Part, rng: Random) -> Part:
    """Two probes on the boundary and two inside, one of which may be near the boundary."""
    shape = shape_of(part)
    rings = [shape.polyline(i, 1e-3 * shape.size) for i in range(len(shape.loops))]
    body = Polygon(rings[0], rings[1:])
    places: list[tuple[float, float]] = []
    for _ in range(2):
        piece = shape.curves[int(rng.integers(len(shape.curves)))]
        x, y = piece.curve.point(float(rng.uniform(0.1, 0.9)))
        places.append((float(x), float(y)))
    x0, y0, x1, y1 = shape.bounds
    for least in INSIDE:
        inner = body.buffer(-least * shape.size)
        for _ in range(500):
            dot = float(rng.uniform(x0, x1)), float(rng.uniform(y0, y1))
            if inner.contains(Dot(dot)):
                places.append(dot)
                break
    probes = tuple(Probe(f"p{i + 1}", f"P{i + 1}", at) for i, at in enumerate(places))
    return replace(part, readings=probes)
