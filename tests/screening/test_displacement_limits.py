"""Displacement at a place and along a direction, against the elongation of a bar (Hooke)."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import replace

import pytest

from screenapp.meshing.service import Mesher
from screenapp.model.part import Case, DisplacementLimit, LineLoad, Part, RollerSupport
from screenapp.model.validity import faults_of
from screenapp.screening.screen import screen
from tests.model.plates import plate

STRAIN = 200.0 / 210_000.0  # 200 MPa, E of the plate's steel; ν = 0.3


@pytest.fixture(scope="module")
def mesher() -> Iterator[Mesher]:
    with Mesher() as warm:
        yield warm


def bar(*limits: DisplacementLimit) -> Part:
    """100 x 50 x 3 mm, held along x on the left and along y in its lower left corner."""
    return replace(
        plate(),
        holes=(),
        supports=(RollerSupport("s1", "e4"), RollerSupport("s2", "c1", 90.0)),
        cases=(Case("k1", "pull", (LineLoad("l1", "e2", 600.0, 0.0),)),),
        limits=limits,
    )


@pytest.mark.parametrize(
    ("limit", "moved"),
    [
        (DisplacementLimit("g1", 1.0, (60.0, 20.0), 0.0), 60.0 * STRAIN),
        (DisplacementLimit("g1", 1.0, (60.0, 20.0), 180.0), 60.0 * STRAIN),  # either way
        (DisplacementLimit("g1", 1.0, (60.0, 20.0), 90.0), 0.3 * 20.0 * STRAIN),
        (DisplacementLimit("g1", 1.0, None, 90.0), 0.3 * 50.0 * STRAIN),
        (
            DisplacementLimit("g1", 1.0, (60.0, 20.0)),
            STRAIN * (60.0**2 + (0.3 * 20.0) ** 2) ** 0.5,
        ),
    ],
)
def test_a_pulled_bar(limit: DisplacementLimit, moved: float, mesher: Mesher) -> None:
    (found,) = screen(bar(limit), mesher).limits
    assert found.utilisation.value == pytest.approx(moved, rel=1e-6)
    assert found.utilisation.low <= moved <= found.utilisation.high
    assert found.verdict == "holds"
    (failed,) = screen(bar(replace(limit, most=0.9 * moved)), mesher).limits
    assert failed.verdict == "does not hold"
    assert f"moves{'' if limit.angle is None else f' along {limit.angle:g}°'} by" in failed.reason


def test_a_place_outside_the_part_is_cautioned_and_undecided(mesher: Mesher) -> None:
    part = bar(DisplacementLimit("g1", 1.0, (120.0, 20.0)))
    (caution,) = (f for f in faults_of(part) if f.field == "limits.g1.at")
    assert not caution.blocks
    assert "the place of limit g1 lies outside the part, 20 mm" in caution.cause
    findings = screen(part, mesher)
    assert findings.verdict == "undecided"
    assert "(120, 20) mm lies outside the part" in findings.reasons[0]
    inside = screen(bar(DisplacementLimit("g1", 1.0)), mesher)
    assert len(findings.mesh.passes) == len(inside.mesh.passes)  # it does not keep it going


@pytest.mark.parametrize(
    ("limit", "field"),
    [
        (DisplacementLimit("g1", 0.0), "most"),
        (DisplacementLimit("g1", 1.0, (float("nan"), 0.0)), "at"),
        (DisplacementLimit("g1", 1.0, None, float("inf")), "angle"),
    ],
)
def test_what_cannot_be_judged_is_a_fault(limit: DisplacementLimit, field: str) -> None:
    assert f"limits.g1.{field}" in [f.field for f in faults_of(bar(limit)) if f.blocks]
