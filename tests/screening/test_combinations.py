"""Combinations screened: superposition, and the same judgement as for cases."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import replace

import numpy as np
import pytest

from screenapp.meshing.service import Mesher
from screenapp.model.part import (
    Case,
    Combination,
    ForceLoad,
    GravityLoad,
    PressureLoad,
    Probe,
    Term,
)
from screenapp.screening.screen import screen
from tests.model.plates import plate


@pytest.fixture(scope="module")
def mesher() -> Iterator[Mesher]:
    with Mesher() as warm:
        yield warm


def test_displacements_add_up_and_every_finding_speaks_of_the_combination(mesher: Mesher) -> None:
    cases = (
        Case("k1", "pull", (ForceLoad("l1", "e2", 9000.0, 0.0),)),
        Case("k2", "weight", (GravityLoad("l2", 0.0, -981.0), PressureLoad("l3", "e3", 0.5))),
    )
    part = replace(
        plate(),
        cases=cases,
        combinations=(Combination("m1", "both", (Term("k1", 1.5), Term("k2", -0.5))),),
        readings=(Probe("p1", "middle", (20.0, 25.0)),),
    )
    findings = screen(part, mesher)
    assert findings.last is not None
    u = findings.last.solution.displacements
    assert u[2] == pytest.approx(1.5 * u[0] - 0.5 * u[1], abs=1e-12 * float(np.abs(u).max()))
    assert [c.case for c in findings.cases] == ["k1", "k2", "m1"]
    assert findings.cases[2].name == "both"
    assert [(r.probe, r.case) for r in findings.readings] == [
        ("p1", "k1"),
        ("p1", "k2"),
        ("p1", "m1"),
    ]
    assert {g.case for g in findings.limits} == {"k1", "k2", "m1"}
    one, two, both = findings.cases
    for k in range(3):
        assert both.applied[k] == pytest.approx(
            1.5 * one.applied[k] - 0.5 * two.applied[k], abs=1e-6 * abs(both.applied[2])
        )
    assert max(both.balance.force, both.balance.moment) < 1e-8
