"""Changes of thickness and material screened as a user would, against closed forms."""

from __future__ import annotations

import math
from collections.abc import Iterator
from dataclasses import replace

import numpy as np
import pytest

from screenapp.meshing.service import Mesher
from screenapp.model.part import (
    Case,
    CircleHole,
    ForceLoad,
    Material,
    Part,
    PressureLoad,
    Probe,
    RollerSupport,
    StressLimit,
    Wall,
    Zone,
)
from screenapp.screening.screen import screen
from tests.evidence.table import record
from tests.mechanics.zoned import pad, steel, strip
from tests.model.plates import loop

LAME = "two rings with N and u continuous, after Lamé (Timoshenko & Goodier, art. 28, from memory)"


@pytest.fixture(scope="module")
def mesher() -> Iterator[Mesher]:
    with Mesher() as warm:
        yield warm


def _padded_disc(a: float, b: float, c: float, pad_: Zone, other: Material, far: float) -> Part:
    """A disc of radius `c` pulled all round by `far` [MPa], with a hole of radius `a` in a pad."""
    rim = {
        k: (c * math.cos(math.radians(x)), c * math.sin(math.radians(x)))
        for k, x in enumerate((45.0, 135.0, 225.0, 315.0))
    }
    return Part(
        outline=loop([(c, 0.0), (0.0, c), (-c, 0.0), (0.0, -c)], rim),
        holes=(CircleHole("h1", (0.0, 0.0), 2.0 * a),),
        zones=(pad_,),
        wall=Wall(2.0, "steel"),
        materials=(steel(), other),
        supports=(
            RollerSupport("s1", "c1", 90.0),
            RollerSupport("s2", "c3", 90.0),
            RollerSupport("s3", "c2", 0.0),
        ),
        cases=(Case("k", "", tuple(PressureLoad(f"l{k}", f"e{k}", -far) for k in (1, 2, 3, 4))),),
        limits=(StressLimit("g1"),),
        readings=(Probe("p1", "in", (0.0, b - 0.01)), Probe("p2", "out", (0.0, b + 0.01))),
    )


@pytest.mark.parametrize(
    ("name", "thickness", "modulus", "poisson"),
    [("thicker steel", 5.0, 210_000.0, 0.3), ("a thinner, stiffer sheet", 1.2, 400_000.0, 0.2)],
)
def test_a_zone_round_a_hole_under_even_tension(
    mesher: Mesher, name: str, thickness: float, modulus: float, poisson: float
) -> None:
    a, b, c, far = 6.0, 12.0, 40.0, 20.0
    inner = Material("inner", modulus, poisson, 7850.0, 235.0, 360.0)
    # u = A r + B / r in each ring; σr = E (A / (1 - ν) - B / ((1 + ν) r²)), σθ with a plus
    p1, q1 = modulus / (1.0 - poisson), modulus / (1.0 + poisson)
    p2, q2 = 210e3 / 0.7, 210e3 / 1.3
    rows = [
        [p1, -q1 / a**2, 0.0, 0.0],
        [b, 1.0 / b, -b, -1.0 / b],
        [thickness * p1, -thickness * q1 / b**2, -2.0 * p2, 2.0 * q2 / b**2],
        [0.0, 0.0, p2, -q2 / c**2],
    ]
    a1, b1, a2, b2 = np.linalg.solve(rows, [0.0, 0.0, 0.0, far])
    zone = Zone(CircleHole("z1", (0.0, 0.0), 2.0 * b), thickness, "inner")
    found = screen(_padded_disc(a, b, c, zone, inner, far), mesher)
    hoop = p1 * a1 + q1 * b1 / a**2
    at_hole = next(p for p in found.cases[0].peaks if p.feature == "h1").estimate
    record(
        f"zone of {name} round a hole, even tension: σθ at the hole [MPa]",
        LAME,
        hoop,
        at_hole.value,
        100.0 * (at_hole.value / hoop - 1.0),
        "0.5 %",
    )
    assert at_hole.value == pytest.approx(hoop, rel=5e-3)
    assert at_hole.low <= hoop <= at_hole.high
    for reading, exact in zip(
        found.readings,
        (p1 * a1 + q1 * b1 / (b - 0.01) ** 2, p2 * a2 + q2 * b2 / (b + 0.01) ** 2),
        strict=True,
    ):
        band = reading.values["sigma_x"]
        record(
            f"zone of {name} round a hole: σθ at its edge, {reading.name}side [MPa]",
            LAME,
            exact,
            band.value,
            100.0 * (band.value / exact - 1.0),
            "1 %",
        )
        assert band.value == pytest.approx(exact, rel=1e-2)


def test_two_thicknesses_in_series(mesher: Mesher) -> None:
    """Far from the step each length is in even tension N / t (Saint-Venant)."""
    part = strip(
        120.0,
        20.0,
        (pad([(60.0, -5.0), (130.0, -5.0), (130.0, 25.0), (60.0, 25.0)], 5.0),),
        (RollerSupport("s1", "e4", 0.0), RollerSupport("s2", "e1", 90.0)),
        (Case("k", "", (ForceLoad("l", "e2", 4000.0, 0.0),)),),
    )
    part = replace(
        part, readings=(Probe("p1", "thin", (15.0, 10.0)), Probe("p2", "thick", (105.0, 10.0)))
    )
    found = screen(part, mesher)
    for reading, exact in zip(found.readings, (100.0, 40.0), strict=True):
        value = reading.values["sigma_x"].value
        record(
            f"two thicknesses in series: σ in the {reading.name} length [MPa]",
            "N / t (Saint-Venant)",
            exact,
            value,
            100.0 * (value / exact - 1.0),
            "0.5 %",
        )
        assert value == pytest.approx(exact, rel=5e-3)
