"""The next mesh round the numbers that somebody waits for, and a displacement that creeps."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest

from screenapp.mechanics.recovery import recover
from screenapp.mechanics.solve import solve
from screenapp.meshing.service import Mesher
from screenapp.model.findings import Fields
from screenapp.model.part import (
    Case,
    DisplacementLimit,
    FixedSupport,
    ForceLoad,
    PointLoad,
    Probe,
)
from screenapp.screening.adapt import Target, wanted_sizes
from screenapp.screening.passes import Pass
from screenapp.screening.screen import screen
from tests.mechanics.structured import rectangle


@pytest.fixture(scope="module")
def fine() -> Pass:
    """A short cantilever on a mesh that is far finer than 2 % needs."""
    base = rectangle(60.0, 20.0, 24, 8)
    part = replace(
        base.part,
        supports=(FixedSupport("s", "e4"),),
        cases=(Case("k1", "down", (ForceLoad("f", "e2", 0.0, -100.0),)),),
    )
    solution = solve(part, base.shape, base.mesh)
    field = recover(part, base.shape, base.mesh, solution)
    return Pass(part, base.shape, Fields(base.mesh, solution, field))


def ratio(this: Pass, at: tuple[float, float], *watched: Target) -> float:
    """Wanted size over the present one at a point."""
    wanted = wanted_sizes(this.part, this, (), (), watched)
    node = int(np.argmin(np.hypot(*(this.fields.mesh.nodes - at).T)))
    return float(wanted[node] / this.node_sizes[node])


def test_the_mesh_stays_as_fine_where_a_number_is_settled(fine: Pass) -> None:
    assert ratio(fine, (40.0, 10.0)) > 1.2  # left alone, it would become coarser
    assert ratio(fine, (40.0, 10.0), Target((40.0, 10.0), 1.0)) == pytest.approx(1.0)
    assert ratio(fine, (20.0, 10.0), Target((40.0, 10.0), 1.0)) > 1.2


def test_the_mesh_becomes_finer_by_what_a_number_exceeds(fine: Pass) -> None:
    a_little = ratio(fine, (40.0, 10.0), Target((40.0, 10.0), 1.1))
    much = ratio(fine, (40.0, 10.0), Target((40.0, 10.0), 9.0))
    assert a_little == pytest.approx(0.7)
    assert much == pytest.approx(1.0 / 3.0)


def test_the_way_of_a_point_under_a_force_has_no_end() -> None:
    """Spread over its edge the same force moves the part by a settled amount; at a corner it does
    not, and the reading far from it is settled in both."""
    base = rectangle(40.0, 40.0, 2, 2)
    with Mesher() as mesher:
        for at_point in (False, True):
            load = (
                PointLoad("f", "c2", 0.0, -100.0) if at_point else ForceLoad("f", "e2", 0.0, -100.0)
            )
            part = replace(
                base.part,
                supports=(FixedSupport("s", "e4"),),
                cases=(Case("k1", "down", (load,)),),
                limits=(DisplacementLimit("g1", 1.0),),
                readings=(Probe("p1", "far", (15.0, 30.0)),),
            )
            findings = screen(part, mesher)
            trust = findings.cases[0].displacement_max.trust
            assert trust == ("rising" if at_point else "settled")
            assert findings.limits[0].verdict == ("undecided" if at_point else "holds")
            assert ("acts at a point" in findings.limits[0].reason) == at_point
            far = findings.readings[0].values
            assert far["u_x"].trust == far["u_y"].trust == "settled"
