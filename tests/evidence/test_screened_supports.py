"""Supports that give way, by the user's path."""

from __future__ import annotations

import math

from screenapp.model.part import (
    BoltSupport,
    Case,
    CircleHole,
    ElasticSupport,
    ForceLoad,
    Material,
    MeshWishes,
    MisfitLoad,
    Part,
    Probe,
    RollerSupport,
    Wall,
)
from screenapp.model.pattern import GridPattern
from tests.evidence.screened import Screened, chain
from tests.evidence.table import record

E, THICK = 210_000.0, 2.0


def test_long_beam_on_an_elastic_foundation(screened: Screened) -> None:
    """Moment under a short even load of length 2 a on an infinite beam: q/(2 β²) e^-βa sin βa with
    β⁴ = k/(4 E I) (Hetényi 1946, Beams on Elastic Foundation, from memory)."""
    long, high, k, half, force = 700.0, 10.0, 20.0, 5.0, 1000.0
    part = Part(
        outline=chain([(0.0, 0.0), (long, 0.0), (long, high), (0.0, high)]),
        wall=Wall(THICK, "steel"),
        materials=(Material("steel", E, 0.3, 7850.0),),
        supports=(ElasticSupport("s1", "e1", normal=k), RollerSupport("s2", "c1", 0.0)),
        cases=(
            Case("k1", "press", (ForceLoad("l1", "e3", 0.0, -force, 345.0, 355.0),)),
        ),
        readings=(Probe("p1", "under", (350.0, 0.0)),),
        mesh=MeshWishes(tolerance=0.005),
    )  # fmt: skip
    inertia = THICK * high**3 / 12.0
    beta = (k / (4.0 * E * inertia)) ** 0.25
    q, fade = force / (2.0 * half), math.exp(-beta * half)
    moment = q / (2.0 * beta**2) * fade * math.sin(beta * half)
    deep = q / k * (1.0 - fade * math.cos(beta * half))
    case = screened(part)
    for quantity, unit, wanted, hold in (
        ("sigma_x", "MPa", moment * 0.5 * high / inertia, 2.0),
        ("u_y", "mm", -deep, 2.0),
    ):
        found = case.reading("under", quantity)
        error = 100.0 * (found.value / wanted - 1.0)
        record(f"long beam on an elastic foundation: {quantity} under the load [{unit}]",
               "Hetényi 1946, from memory", wanted, found.value, error, f"{hold:g} %")  # fmt: skip
        assert abs(error) < hold  # the beam of the book has no shear: βh is 0.2
        assert found.trust == "settled"
    (spring, _) = case.tree["cases"][0]["reactions"]
    assert abs(spring["y"] / force - 1.0) < 1e-8


def test_where_a_bed_stops_the_stress_creeps(screened: Screened) -> None:
    """The end of stiff springs along a straight edge is told, and no tight band is put there."""
    part = Part(
        outline=chain([(0.0, 0.0), (100.0, 0.0), (100.0, 30.0), (0.0, 30.0)]),
        wall=Wall(THICK, "steel"),
        materials=(Material("steel", E, 0.3, 7850.0),),
        supports=(ElasticSupport("s1", "e1", 1e5, 1e5, 0.0, 50.0),),
        cases=(Case("k1", "pull", (ForceLoad("l1", "e2", 3000.0, 0.0),)),),
    )
    case = screened(part)
    near = [p for p in case.tree["cases"][0]["peaks"] if math.dist(p["at"], (50.0, 0.0)) < 2.0]
    assert near
    assert all(p["trust"] == "rising" and "s1" in p["why"] for p in near)


def test_bolt_group_of_a_stiff_plate(screened: Screened) -> None:
    """The most loaded of six bolts far softer than the plate: F/n and M r/Σr² (elastic method of
    handbooks on bolted joints; common practice)."""
    part = Part(
        outline=chain([(0.0, 0.0), (160.0, 0.0), (160.0, 80.0), (0.0, 80.0)]),
        holes=(CircleHole("h1", (20.0, 15.0), 8.0, GridPattern(2, 3, 30.0, 25.0)),),
        wall=Wall(10.0, "steel"),
        materials=(Material("steel", E, 0.3, 7850.0),),
        supports=(BoltSupport("s1", "h1", stiffness=50.0),),
        cases=(Case("k1", "pull", (ForceLoad("l1", "e2", 0.0, -900.0),)),),
    )
    bolts = screened(part).tree["cases"][0]["reactions"][0]["bolts"]
    found = max(math.hypot(b["x"], b["y"]) for b in bolts)
    arm, across = 25.0, 15.0  # of the corner bolts from the middle of the group
    squares = 6 * across**2 + 4 * arm**2
    turn = 900.0 * (160.0 - 35.0) / squares
    wanted = math.hypot(turn * arm, 900.0 / 6.0 + turn * across)
    error = 100.0 * (found / wanted - 1.0)
    record("six soft bolts of a stiff plate: the most loaded [N]",
           "F/n and M r/Σr², common practice", wanted, found, error, "0.2 %")  # fmt: skip
    assert abs(error) < 0.2


def test_bar_stretched_by_a_misfit(screened: Screened) -> None:
    """σ = E δ / L in a bar whose far support is off by δ."""
    part = Part(
        outline=chain([(0.0, 0.0), (80.0, 0.0), (80.0, 20.0), (0.0, 20.0)]),
        wall=Wall(THICK, "steel"),
        materials=(Material("steel", E, 0.3, 7850.0),),
        supports=(
            RollerSupport("s1", "e4", 0.0),
            RollerSupport("s2", "e1", 90.0),
            RollerSupport("s3", "e2", 0.0),
        ),
        cases=(Case("k1", "assembled", (MisfitLoad("l1", "s3", 0.05, 0.0),)),),
        readings=(Probe("p1", "middle", (40.0, 10.0)),),
    )
    found = screened(part).reading("middle", "sigma_x")
    wanted = E * 0.05 / 80.0
    error = 100.0 * (found.value / wanted - 1.0)
    record("bar stretched by a misfit of its support: σ [MPa]", "E δ / L (derived)", wanted,
           found.value, error, "0.01 %")  # fmt: skip
    assert abs(error) < 0.01
    assert found.trust == "settled"
