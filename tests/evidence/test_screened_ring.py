"""A thick ring under inner pressure, drawn as a quarter on its two lines of symmetry."""

from __future__ import annotations

import math
from typing import get_args

import pytest

from screenapp.model.part import (
    Case,
    Material,
    MeshWishes,
    Part,
    PressureLoad,
    Probe,
    RollerSupport,
    Wall,
    WallState,
)
from tests.evidence.screened import Screened, chain
from tests.evidence.table import record

INNER, OUTER, PRESSURE = 20.0, 40.0, 50.0
E, NU = 210_000.0, 0.3


def quarter_ring(state: WallState) -> Part:
    """e1 and e3 lie on the axes, e2 is the outer rim, e4 the bore."""
    s = math.sqrt(0.5)
    return Part(
        outline=chain(
            [(INNER, 0.0), (OUTER, 0.0), (0.0, OUTER), (0.0, INNER)],
            {1: (OUTER * s, OUTER * s), 3: (INNER * s, INNER * s)},
        ),
        wall=Wall(5.0, "steel", state),
        materials=(Material("steel", E, NU, 7850.0),),
        supports=(RollerSupport("s1", "e1"), RollerSupport("s2", "e3")),
        cases=(Case("k1", "pressed", (PressureLoad("l1", "e4", PRESSURE),)),),
        mesh=MeshWishes(tolerance=0.002),
        readings=(Probe("p1", "bore", (INNER, 0.0)),),
    )


@pytest.mark.parametrize("state", get_args(WallState))
def test_thick_ring(state: WallState, screened: Screened) -> None:
    """Lamé: widening and hoop stress of the bore, and its von Mises peak over the whole rim."""
    e, nu, across = E, NU, 0.0
    a2, b2 = INNER**2, OUTER**2
    hoop = PRESSURE * (b2 + a2) / (b2 - a2)
    if state == "plane strain":
        e, nu, across = E / (1 - NU**2), NU / (1 - NU), NU * (hoop - PRESSURE)
    moved = PRESSURE * a2 / (e * (b2 - a2)) * ((1 - nu) * INNER + (1 + nu) * b2 / INNER)
    first, second, third = hoop, -PRESSURE, across
    mises = math.sqrt(0.5 * ((first - second) ** 2 + (second - third) ** 2 + (third - first) ** 2))
    found = screened(quarter_ring(state))
    for what, number, wanted in (
        ("widening of the bore [mm]", found.reading("bore", "u_x"), moved),
        ("hoop stress at the bore [MPa]", found.reading("bore", "sigma_y"), hoop),
        ("largest von Mises stress [MPa]", found.peak("e4"), mises),
    ):
        error = 100.0 * (number.value / wanted - 1.0)
        check = f"thick ring, {state}, screened: {what}"
        record(check, "Lamé (derived)", wanted, number.value, error, "0.1 %")
        assert abs(error) < 0.1
        assert number.trust == "settled"
        assert number.holds(wanted)
