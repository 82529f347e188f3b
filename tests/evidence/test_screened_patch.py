"""A force on a short patch of an edge: a finite stress where the same force at a point has none."""

from __future__ import annotations

import math
from dataclasses import replace

import pytest

from screenapp.model.part import (
    Case,
    Material,
    MeshWishes,
    Part,
    PointLoad,
    PrescribedSupport,
    Probe,
    RollerSupport,
    StressLimit,
    Wall,
)
from tests.evidence.screened import Screened, chain
from tests.evidence.table import record

SIZE, HALF, THICK, PRESSURE = 300.0, 1.0, 5.0, 100.0
"""Side of the block and half length of the patch [mm], wall [mm], force over patch face [MPa]."""

FORCE = 2.0 * HALF * THICK * PRESSURE


def block() -> Part:
    """A square block on a sliding floor, pressed in the middle of its upper edge, e3."""
    half = 0.5 * SIZE
    return Part(
        outline=chain([(0.0, 0.0), (SIZE, 0.0), (SIZE, SIZE), (0.0, SIZE)]),
        wall=Wall(THICK, "steel"),
        materials=(Material("steel", 210_000.0, 0.3, 7850.0, 235.0),),
        supports=(RollerSupport("s1", "e1"), PrescribedSupport("s2", "c1", 0.0)),
        cases=(Case("k1", "pressed", (PointLoad("l1", "e3", 0.0, -FORCE, half, 2.0 * HALF),)),),
        limits=(StressLimit("g1"),),
        mesh=MeshWishes(tolerance=0.02),
        readings=(
            Probe("p1", "under", (half, SIZE)),
            Probe("p2", "below", (half, SIZE - HALF)),
            Probe("p3", "deeper", (half, SIZE - 3.0 * HALF)),
        ),
    )


def test_even_pressure_on_a_strip_of_a_half_plane(screened: Screened) -> None:
    """Timoshenko & Goodier, Theory of Elasticity (from memory): with tan α = a / z below the middle
    of a strip 2 a wide, σy = -p/π (2α + sin 2α) and σx = -p/π (2α - sin 2α); on the edge both are
    -p.  The block is 150 strips wide, so that its own even stress is p / 150."""
    found = screened(block())
    for name, depth in (("under", 0.0), ("below", HALF), ("deeper", 3.0 * HALF)):
        alpha = math.atan2(HALF, depth)
        across = -PRESSURE / math.pi * (2.0 * alpha + math.sin(2.0 * alpha))
        along = -PRESSURE / math.pi * (2.0 * alpha - math.sin(2.0 * alpha))
        for quantity, wanted in (("sigma_y", across), ("sigma_x", along)):
            number = found.reading(name, quantity)
            assert number.trust == "settled"
            assert abs(number.value - wanted) < 0.01 * PRESSURE
            if name == "under" or quantity == "sigma_y":
                record(
                    f"force on a patch of an edge, screened: {quantity} {name} it [MPa]",
                    "Timoshenko & Goodier, strip load on a half-plane (from memory)",
                    wanted,
                    number.value,
                    100.0 * (number.value / wanted - 1.0),
                    "1 % of the pressure",
                )
    (told,) = found.tree["cases"][0]["loads"]
    assert (told["x"], told["y"]) == pytest.approx((0.0, -FORCE))
    assert told["moment"] == pytest.approx(-FORCE * 0.5 * SIZE)
    (peak,) = [p for p in found.tree["cases"][0]["peaks"] if p["feature"] == "e3"][:1]
    assert peak["trust"] == "settled"


def test_the_same_force_at_the_point_rises(screened: Screened) -> None:
    part = block()
    point = PointLoad("l1", "e3", 0.0, -FORCE, 0.5 * SIZE)
    found = screened(replace(part, cases=(Case("k1", "pressed", (point,)),), readings=()))
    assert found.peaks("e3")[0]["trust"] == "rising"
    assert "a force acts at the point" in found.peaks("e3")[0]["why"]
    assert found.tree["verdict"] == "undecided"


def test_a_disc_pressed_between_two_patches(screened: Screened) -> None:
    """Timoshenko & Goodier, circular disk (from memory): in its middle σx = 2 P / (π d t) and
    σy = -6 P / (π d t) under forces at points; patches of 2α change that by the order of α²."""
    radius, alpha, force = 20.0, 0.02, 1000.0
    part = Part(
        outline=chain([(-radius, 0.0), (radius, 0.0)], {0: (0.0, -radius), 1: (0.0, radius)}),
        wall=Wall(THICK, "steel"),
        materials=(Material("steel", 210_000.0, 0.3, 7850.0, 235.0),),
        supports=(
            PrescribedSupport("s1", "c1", 0.0, 0.0),
            PrescribedSupport("s2", "c2", None, 0.0),
        ),
        cases=(
            Case(
                "k1",
                "pressed",
                tuple(
                    PointLoad(f"l{k}", edge, 0.0, y, 0.5 * math.pi * radius, 2.0 * alpha * radius)
                    for k, (edge, y) in enumerate((("e1", force), ("e2", -force)), 1)
                ),
            ),
        ),
        mesh=MeshWishes(tolerance=0.02),
        readings=(Probe("p1", "middle", (0.0, 0.0)), Probe("p2", "top", (0.0, radius))),
    )
    found = screened(part)
    unit = force / (math.pi * radius * THICK)
    for quantity, wanted in (("sigma_x", unit), ("sigma_y", -3.0 * unit)):
        number = found.reading("middle", quantity)
        error = 100.0 * (number.value / wanted - 1.0)
        record(
            f"disc between forces on short patches of its rim, screened: {quantity} in the middle",
            "Timoshenko & Goodier, circular disk (from memory)",
            wanted,
            number.value,
            error,
            "0.3 %",
        )
        assert abs(error) < 0.3
        assert number.trust == "settled"
    under = found.reading("top", "sigma_y")
    assert under.trust == "settled"
    assert abs(under.value + force / (2.0 * alpha * radius * THICK)) < 0.01 * abs(under.value)
    # the force keeps its direction on the arc, so that a little of it is shear at the patch's ends
    (said,) = {p["why"] for p in found.peaks("e2")}
    assert said.startswith("the shear of load l2 ends at a place within e2")
