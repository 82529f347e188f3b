"""Loads that act throughout a part, and a moment on a hole, by the user's path."""

from __future__ import annotations

import math
from dataclasses import replace

import pytest

from screenapp.model.part import (
    Case,
    CircleHole,
    FixedSupport,
    Material,
    MeshWishes,
    MomentLoad,
    Part,
    Probe,
    RollerSupport,
    SpinLoad,
    TemperatureLoad,
    Wall,
    Zone,
)
from tests.evidence.screened import Screened, chain
from tests.evidence.table import record
from tests.evidence.test_screened_ring import quarter_ring
from tests.mechanics.zoned import pad

NU, DENSITY = 0.3, 7850.0


def test_hot_spot_membrane(screened: Screened) -> None:
    """A round spot is warmed: 50 MPa along its rim, just outside (NAFEMS T1, from memory)."""
    part = Part(
        outline=chain([(0.0, 0.0), (10.0, 0.0), (10.0, 10.0), (0.0, 10.0)]),
        zones=(Zone(CircleHole("z1", (0.0, 0.0), 2.0), 1.0),),
        wall=Wall(1.0, "plate"),
        materials=(Material("plate", 100_000.0, NU, DENSITY, expansion=1e-5),),
        supports=(RollerSupport("s1", "e1"), RollerSupport("s2", "e4")),
        cases=(Case("k1", "spot", (TemperatureLoad("l1", 100.0, zone="z1"),)),),
        readings=(Probe("p1", "rim", (1.0, 0.0)),),
        mesh=MeshWishes(tolerance=0.005),
    )
    found = screened(part).reading("rim", "sigma_y")
    error = 100.0 * (found.value / 50.0 - 1.0)
    record("hot spot in a membrane: stress beside it [MPa]", "NAFEMS T1, from memory", 50.0,
           found.value, error, "1 %")  # fmt: skip
    assert abs(error) < 1.0  # the plate is finite: (1/10)² of the stress
    assert found.trust == "settled"


def test_bimetal_strip(screened: Screened) -> None:
    """Curvature of two bonded strips of heights a and b that are warmed (Timoshenko 1925, J. Opt.
    Soc. Am. 11, eq. 4, from memory), read off three places along the bottom edge."""
    length, low, high, change = 120.0, 1.2, 1.8, 60.0
    steel = Material("steel", 210_000.0, NU, DENSITY, expansion=12e-6)
    brass = Material("brass", 105_000.0, 0.34, 8400.0, expansion=19e-6)
    upper = pad([(-5.0, low), (length + 5.0, low), (length + 5.0, 9.0), (-5.0, 9.0)], None, "brass")
    at = (30.0, 60.0, 90.0)
    part = Part(
        outline=chain([(0.0, 0.0), (length, 0.0), (length, low + high), (0.0, low + high)]),
        zones=(upper,),
        wall=Wall(2.0, "steel"),
        materials=(steel, brass),
        supports=(
            RollerSupport("s1", "c1", 0.0),
            RollerSupport("s2", "c1", 90.0),
            RollerSupport("s3", "c4", 0.0),
        ),
        cases=(Case("k1", "warm", (TemperatureLoad("l1", change),)),),
        readings=tuple(Probe(f"p{i}", f"at {x:g}", (x, 0.0)) for i, x in enumerate(at, 1)),
    )
    case = screened(part)
    read = [case.reading(f"at {x:g}", "u_y") for x in at]
    curvature = -(read[0].value - 2.0 * read[1].value + read[2].value) / 30.0**2
    m, n = low / high, steel.youngs_modulus / brass.youngs_modulus
    wanted = 6.0 * 7e-6 * change * (1.0 + m) ** 2 / (low + high)
    wanted /= 3.0 * (1.0 + m) ** 2 + (1.0 + m * n) * (m**2 + 1.0 / (m * n))
    error = 100.0 * (curvature / wanted - 1.0)
    record("bimetal strip, evenly warmed, screened: curvature [1/m]",
           "Timoshenko 1925 (derived)", 1e3 * wanted, 1e3 * curvature, error, "1 %")  # fmt: skip
    assert abs(error) < 1.0  # slender beams: the ends are 10 heights away
    assert {number.trust for number in read} == {"settled"}


def test_spinning_ring(screened: Screened) -> None:
    """Hoop stress at the bore of a ring that spins (Timoshenko & Goodier, art. 32, from memory):
    (3 + ν)/4 ρ ω² (b² + (1 - ν)/(3 + ν) a²) with the inner and outer radius a and b."""
    inner, outer, speed = 20.0, 40.0, 12_000.0
    part = quarter_ring("plane stress")
    part = replace(part, cases=(Case("k1", "spin", (SpinLoad("l1", 0.0, 0.0, speed),)),))
    pull = 1e-12 * DENSITY * (speed * 2.0 * math.pi / 60.0) ** 2
    hoop = 0.25 * (3 + NU) * pull * (outer**2 + (1 - NU) / (3 + NU) * inner**2)
    moved = hoop / 210_000.0 * inner  # free of radial stress there
    case = screened(part)
    for quantity, wanted in (("sigma_y", hoop), ("u_x", moved)):
        found = case.reading("bore", quantity)
        error = 100.0 * (found.value / wanted - 1.0)
        record(f"spinning ring: {quantity} at the bore", "Timoshenko & Goodier, from memory",
               wanted, found.value, error, "0.1 %")  # fmt: skip
        assert abs(error) < 0.1
        assert found.trust == "settled"


@pytest.mark.parametrize("moment", [12_000.0, -5_000.0])
def test_moment_on_a_hole(moment: float, screened: Screened) -> None:
    """A disc held at its rim and turned at its hole is in pure shear, M / (2 π r² t)."""
    size, thick = 30.0, 2.0
    part = Part(
        outline=chain([(size, 0.0), (-size, 0.0)], {0: (0.0, size), 1: (0.0, -size)}),
        holes=(CircleHole("h1", (0.0, 0.0), 20.0),),
        wall=Wall(thick, "steel"),
        materials=(Material("steel", 210_000.0, NU, DENSITY),),
        supports=(FixedSupport("s1", "e1"), FixedSupport("s2", "e2")),
        cases=(Case("k1", "turn", (MomentLoad("l1", "h1", moment),)),),
        readings=(Probe("p1", "between", (18.0, 0.0)), Probe("p2", "hole", (10.0, 0.0))),
        mesh=MeshWishes(tolerance=0.005),
    )
    case = screened(part)
    for name, r in (("between", 18.0), ("hole", 10.0)):
        wanted = -moment / (2.0 * math.pi * r**2 * thick)
        assert case.reading(name, "tau_xy").value == pytest.approx(wanted, rel=2e-3)
    given = sum(r["moment"] for r in case.tree["cases"][0]["reactions"])
    assert given == pytest.approx(-moment, rel=1e-6)
