"""Round holes in screened parts: small in a wide plate, and in strips."""

from __future__ import annotations

import math

import numpy as np
import pytest

from screenapp.model.part import (
    Case,
    CircleHole,
    LineLoad,
    Material,
    MeshWishes,
    Part,
    Point,
    RollerSupport,
    Wall,
)
from tests.evidence.screened import Screened, chain
from tests.evidence.table import record
from tests.mechanics.stress_fields import kirsch_stress

STEEL = Material("steel", 210_000.0, 0.3, 7850.0)


def strip(ratio: float) -> Part:
    """A hole of 20 mm in the middle of a strip three times as long as wide, 100 MPa gross."""
    width = 20.0 / ratio
    return Part(
        outline=chain([(0.0, 0.0), (3 * width, 0.0), (3 * width, width), (0.0, width)]),
        holes=(CircleHole("h1", (1.5 * width, 0.5 * width), 20.0),),
        wall=Wall(2.0, "steel"),
        materials=(STEEL,),
        supports=(RollerSupport("s1", "e4", 0.0), RollerSupport("s2", "c1", 90.0)),
        cases=(Case("k1", "pulled", (LineLoad("l1", "e2", 200.0, 0.0),)),),
        mesh=MeshWishes(tolerance=0.005),
    )


@pytest.mark.parametrize(("ratio", "published", "own"), [(0.2, 3.14, 3.153), (0.5, 4.32, 4.348)])
def test_hole_in_a_strip(ratio: float, published: float, own: float, screened: Screened) -> None:
    """Stress at the hole over the gross stress."""
    peak = screened(strip(ratio)).peak("h1")
    found = peak.value / 100.0
    for source, reference, hold in (
        ("Howland 1930, Phil. Trans. A 229 (from memory)", published, 1.0),
        ("own, finite strip", own, 0.3),
    ):
        error = 100.0 * (found / reference - 1.0)
        record(
            f"hole in a strip, d/W = {ratio}, screened ({source.split(',')[0]})",
            source,
            reference,
            found,
            error,
            f"{hold} %",
        )
        assert abs(error) < hold
    assert peak.trust == "settled"
    assert peak.holds(100.0 * own)


def wide_plate(half: float, steps: int) -> Part:
    """A quarter of a square plate with a hole of radius 1 mm, 1 mm thick, pulled along x.

    The far edges carry Kirsch's own tractions for 100 MPa, each as `steps` line loads that have
    the mean of the exact traction (which differs from the even pull by the square of r/R).
    """
    along = np.linspace(0.0, half, steps + 1)
    right: list[Point] = [(half, float(y)) for y in along]
    top: list[Point] = [(float(x), half) for x in along[-2::-1]]
    s = math.sqrt(0.5)
    corners = [(1.0, 0.0), *right, *top, (0.0, 1.0)]
    loads = []
    for k in range(1, 2 * steps + 1):
        start, end = np.array(corners[k]), np.array(corners[k + 1])
        points, weights = np.polynomial.legendre.leggauss(8)
        at = start + 0.5 * (points[:, None] + 1.0) * (end - start)
        sx, sy, txy = 0.5 * weights @ kirsch_stress(at, 1.0, 100.0)
        x, y = (sx, txy) if k <= steps else (txy, sy)
        loads.append(LineLoad(f"l{k}", f"e{k + 1}", float(x), float(y)))
    return Part(
        outline=chain(corners, {len(corners) - 1: (s, s)}),
        wall=Wall(1.0, "steel"),
        materials=(STEEL,),
        supports=(RollerSupport("s1", "e1"), RollerSupport("s2", f"e{2 * steps + 2}")),
        cases=(Case("k1", "pulled", tuple(loads)),),
        mesh=MeshWishes(tolerance=0.005),
    )


def test_small_hole_in_a_wide_plate(screened: Screened) -> None:
    """3.00 at the crown, W/d = 20, the tractions of the finite region in six steps an edge.

    c15 is the crown of the hole, at (0, 1).
    """
    peak = screened(wide_plate(20.0, 6)).peak("corner c15")
    found = peak.value / 100.0
    error = 100.0 * (found / 3.0 - 1.0)
    record(
        "small hole in a wide plate, W/d = 20, screened",
        "Kirsch 1898 (from memory)",
        3.0,
        found,
        error,
        "0.5 %",
    )
    assert abs(error) < 0.5
    assert peak.trust == "settled"
    assert peak.holds(300.0)
