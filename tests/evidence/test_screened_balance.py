"""Free bodies: what the loads put on a part, its supports give back."""

from __future__ import annotations

from pathlib import Path

import numpy as np
import pytest
from shapely import Polygon

from screenapp.mechanics.places import outward
from screenapp.model.combinations import loadings
from screenapp.model.mass import mass_of
from screenapp.model.part import (
    BearingLoad,
    Case,
    ForceLoad,
    GravityLoad,
    LineLoad,
    Part,
    PointLoad,
    PressureLoad,
    ShearLoad,
    SpinLoad,
    TemperatureLoad,
)
from screenapp.model.part_json import read_part
from screenapp.model.regions import shape_with_zones
from screenapp.model.shape import Shape, shape_of
from tests.evidence.band_parts import random_part
from tests.evidence.screened import Record, Screened
from tests.evidence.table import record

SAMPLES = sorted((Path(__file__).parents[2] / "samples").glob("*.part.json"))


def forces_of(part: Part, shape: Shape, case: Case) -> np.ndarray:
    """Each load's force [N] straight from the drawing, no mesh, (n_loads, 2)."""
    forces = np.zeros((len(case.loads), 2))
    for k, load in enumerate(case.loads):
        if isinstance(load, ForceLoad | BearingLoad | PointLoad):
            forces[k] = load.x, load.y
        elif isinstance(load, GravityLoad):
            mass = mass_of(part, shape_with_zones(part))
            forces[k] = mass * load.x, mass * load.y
        elif isinstance(load, SpinLoad):
            forces[k] = load.factor * _outward(part, shape, load)
        elif not isinstance(load, TemperatureLoad):  # which is no force
            forces[k] = sum(_along(part, shape, load, i) for i in shape.pieces_of(load.on))
    return forces


def _outward(part: Part, shape: Shape, load: SpinLoad) -> np.ndarray:
    """m ω² r of the centre of mass [N], (2,); of a part without zones."""
    assert part.material is not None
    assert not part.zones
    t = np.linspace(0.0, 1.0, 200, endpoint=False)
    rings = [
        np.concatenate([[shape.curves[i].curve.point(u) for u in t] for i in range(*loop)])
        for loop in shape.loops
    ]
    drawn = Polygon(rings[0], rings[1:])
    mass = 1e-9 * drawn.area * part.wall.thickness * part.material.density
    arm = np.array([drawn.centroid.x - load.x, drawn.centroid.y - load.y])
    return mass * (2.0 * np.pi * load.speed / 60.0) ** 2 * 1e-3 * arm


def _along(
    part: Part, shape: Shape, load: PressureLoad | ShearLoad | LineLoad, piece: int
) -> np.ndarray:
    """Force of an evenly spread load on one piece of the boundary [N], (2,)."""
    curve = shape.curves[piece].curve
    run = curve.point(1.0) - curve.point(0.0)  # the integral of the unit tangent
    if isinstance(load, LineLoad):
        return curve.length * np.array([load.x, load.y])
    if isinstance(load, ShearLoad):
        return load.per_length * run
    return -load.pressure * part.wall.thickness * outward(run)


def check_free_body(part: Part, found: Record) -> float:
    """The largest relative gap of force or moment over the cases; forces also from the drawing."""
    shape, worst = shape_of(part), 0.0
    for case, told in zip(loadings(part), found.tree["cases"], strict=True):
        applied = np.array([told["applied"][k] for k in ("x", "y", "moment")])
        back = np.array([[r[k] for k in ("x", "y", "moment")] for r in told["reactions"]])
        drawn = forces_of(part, shape, case)
        size = float(np.linalg.norm(drawn, axis=1).sum())  # loads may cancel each other
        # warmth and moved supports load a part through its supports alone
        size = max(size, float(np.linalg.norm(back[:, :2], axis=1).sum()))
        gap = applied + back.sum(axis=0)
        worst = max(worst, *(np.abs(gap[:2]) / size), abs(gap[2]) / (size * shape.size))
        worst = max(worst, told["balance"]["force"], told["balance"]["moment"])
        # the mesh follows arcs by parabolas; their length is right to a few parts in 1e5
        assert np.abs(applied[:2] - drawn.sum(axis=0)).max() < 1e-4 * size
        check_each_load(part, case, told["loads"], back, size * shape.size)
    return worst


def check_each_load(
    part: Part, case: Case, told: list[dict[str, float]], back: np.ndarray, scale: float
) -> None:
    """What the loads amount to as they are drawn, and the reactions, cancel.

    Exactly where forces of a given size or loads on straight edges act alone; else as well as the
    mesh follows arcs and round holes.
    """
    assert [each["load"] for each in told] == [load.id for load in case.loads]
    each = np.array([[r[k] for k in ("x", "y", "moment")] for r in told]).reshape(-1, 3)
    gap = np.abs(each.sum(axis=0) + back.sum(axis=0))
    shape = shape_of(part)
    exact = all(
        isinstance(load, BearingLoad | PointLoad | TemperatureLoad)
        or (
            hasattr(load, "on")
            and all(shape.curves[i].curve.curvature == 0.0 for i in shape.pieces_of(load.on))
        )
        for load in case.loads
    )
    assert gap.max() < (1e-8 if exact else 1e-4) * scale


@pytest.mark.parametrize("place", SAMPLES, ids=lambda p: p.name.split(".")[0])
def test_sample(place: Path, screened: Screened) -> None:
    """Loads and reactions of every sample cancel."""
    part = read_part(place)
    worst = check_free_body(part, screened(part))
    record(
        f"free body of the sample {place.name.split('.')[0]}: loads + reactions, relative",
        "statics",
        "0",
        f"{worst:.0e}",
        "< 1e-6 %",
        "1e-8",
    )
    assert worst < 1e-8


def test_random_parts(screened: Screened) -> None:
    """The same on ten random parts of five kinds with mixed supports and loads."""
    worst = 0.0
    for seed in range(200, 210):
        part = random_part(seed)
        worst = max(worst, check_free_body(part, screened(part)))
    record(
        "free body of 10 random parts: loads + reactions, relative, the worst",
        "statics",
        "0",
        f"{worst:.0e}",
        "< 1e-6 %",
        "1e-8",
    )
    assert worst < 1e-8
