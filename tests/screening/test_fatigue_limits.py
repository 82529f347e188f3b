"""Fatigue limits: a bar by hand, a hole by its own peak, a swing that peaks where no case does."""

from __future__ import annotations

import math
from collections.abc import Iterator
from dataclasses import replace

import pytest

from screenapp.meshing.service import Mesher
from screenapp.model.edit_removal import remove
from screenapp.model.part import (
    Case,
    CircleHole,
    FatigueLimit,
    LineLoad,
    Part,
    RollerSupport,
    StressLimit,
)
from screenapp.model.validity import faults_of
from screenapp.screening.screen import screen
from tests.model.plates import STEEL, plate, rectangle

ALLOWED = 540.0 * 2e6**-0.087  # 1.5 · 360 MPa, uniform material law, at 1e6 cycles


@pytest.fixture(scope="module")
def mesher() -> Iterator[Mesher]:
    with Mesher() as warm:
        yield warm


def bar(limit: FatigueLimit, *holes: CircleHole) -> Part:
    """100 x 50 x 3 mm, drawn by 100 MPa in one case and pushed by 100 in the other."""
    return replace(
        plate(),
        holes=holes,
        materials=(replace(STEEL, family="steel"),),
        supports=(RollerSupport("s1", "e4"), RollerSupport("s2", "c1", 90.0)),
        cases=(
            Case("k1", "pull", (LineLoad("l1", "e2", 300.0, 0.0),)),
            Case("k2", "push", (LineLoad("l2", "e2", -300.0, 0.0),)),
        ),
        limits=(limit,),
    )


@pytest.mark.parametrize(
    ("limit", "used"),
    [
        # ±50 about 50: Goodman 50 / (1 - 50/360)
        (FatigueLimit("g1", "k1"), 1.5 * 50.0 / (1.0 - 50.0 / 360.0) / ALLOWED),
        (
            FatigueLimit("g1", "k1", mean="smith_watson_topper"),
            1.5 * 50.0 * math.sqrt(2.0) / ALLOWED,
        ),
        (FatigueLimit("g1", "k1", "k2"), 1.5 * 100.0 / ALLOWED),  # ±100 about 0
        (FatigueLimit("g1", "k2"), 1.5 * 50.0 / ALLOWED),  # compression does no good
        (FatigueLimit("g1", "k1", "k2", 1.0, 1.0), 100.0 / (540.0 * 2.0**-0.087)),
        (FatigueLimit("g1", "k1", "k2", 1e6, 2.0, "goodman", "peterson"), 200.0 / ALLOWED),
    ],
)
def test_a_bar(limit: FatigueLimit, used: float, mesher: Mesher) -> None:
    (found,) = screen(bar(limit), mesher).limits
    assert found.utilisation.value == pytest.approx(used, rel=1e-6)
    assert found.utilisation.trust == "settled"
    assert found.verdict == ("holds" if used < 1.0 else "does not hold")
    assert "uniform material law" in found.assumed
    assert f"between “{'push' if limit.case == 'k2' else 'pull'}” and" in found.name


def test_a_hole_swings_by_its_peak_and_its_radius_counts(mesher: Mesher) -> None:
    hole = CircleHole("h1", (50.0, 25.0), 10.0)
    full = FatigueLimit("g1", "k1", "k2", factor=1.0)
    part = replace(
        bar(full, hole), limits=(full, replace(full, id="g2", notch="peterson"), StressLimit("g3"))
    )
    findings = screen(part, mesher)
    whole, less, _, _ = findings.limits
    peak = next(p for p in findings.cases[0].peaks if p.feature == "h1")
    assert whole.utilisation.value == pytest.approx(peak.estimate.value / ALLOWED, rel=1e-3)
    assert whole.place.startswith("hole h1")
    assert whole.utilisation.low < whole.utilisation.value < whole.utilisation.high
    assert whole.verdict == "does not hold"  # 100 · 3.1 against 153 MPa
    assert "the amplitude that it may swing by over 1e+06 cycles (±" in whole.reason
    # Peterson's constant 0.0254 (2070/360)^1.8 = 0.592 mm at 5 mm; one radius below the root of a
    # hole in a wide plate the stress is 1 + 0.5/4 + 1.5/16 = 1.219 of what is far away (Kirsch)
    q, kt = 1.0 / (1.0 + 0.592 / 5.0), 3.0 / 1.219
    share = (1.0 + q * (kt - 1.0)) / kt
    assert less.utilisation.value / whole.utilisation.value == pytest.approx(share, abs=0.01)
    assert "radius 5 mm" in less.assumed


def test_a_swing_that_peaks_where_neither_case_does(mesher: Mesher) -> None:
    """All-round pull gives an even rim; less the pull along x, what swings is the pull along y,
    three times as large at the sides of the hole (Kirsch), where the pull along x has -1."""
    part = replace(
        bar(FatigueLimit("g1", "k1", "k2", factor=1.0), CircleHole("h1", (50.0, 50.0), 6.0)),
        outline=rectangle(100.0, 100.0),
        supports=(RollerSupport("s1", "e4"), RollerSupport("s2", "e1")),
        cases=(
            Case("k1", "round", (LineLoad("l1", "e2", 30.0, 0.0), LineLoad("l2", "e3", 0.0, 30.0))),
            Case("k2", "x", (LineLoad("l3", "e2", 30.0, 0.0),)),
        ),
    )
    (found,) = screen(part, mesher).limits
    assert abs(found.at[0] - 50.0) == pytest.approx(3.0, abs=0.05)
    assert found.at[1] == pytest.approx(50.0, abs=0.5)
    # ±15 about 5 MPa: 10 MPa · 3 / 2, and (2 - 1) · 10 / 2; a hole of 6 in 100 mm adds 1 %
    assert found.utilisation.value == pytest.approx(15.0 / (1.0 - 5.0 / 360.0) / ALLOWED, rel=0.02)


def test_a_place_that_rises_leaves_it_open(mesher: Mesher) -> None:
    part = plate(None, CircleHole("h1", (70.0, 25.0), 4.0))  # fixed all along e4: corners rise
    part = replace(
        part,
        materials=(replace(STEEL, family="steel"),),
        limits=(FatigueLimit("g1", "k1"),),
    )
    findings = screen(part, mesher)
    assert findings.verdict == "undecided"
    assert findings.limits[0].utilisation.trust == "rising"
    assert findings.limits[0].place.startswith("corner c")


@pytest.mark.parametrize(
    ("limit", "field"),
    [
        (FatigueLimit("g1", "k9"), "case"),
        (FatigueLimit("g1", "k1", "k9"), "other"),
        (FatigueLimit("g1", "k1", "k1"), "other"),
        (FatigueLimit("g1", "k1", cycles=0.0), "cycles"),
        (FatigueLimit("g1", "k1", factor=-1.0), "factor"),
        (FatigueLimit("g1", "k1", mean="gerber"), "mean"),  # type: ignore[arg-type]
        (FatigueLimit("g1", "k1", notch="sharp"), "notch"),  # type: ignore[arg-type]
    ],
)
def test_faults(limit: FatigueLimit, field: str) -> None:
    assert f"limits.g1.{field}" in [f.field for f in faults_of(bar(limit)) if f.blocks]


def test_a_material_without_fatigue_figures_blocks() -> None:
    plastic = replace(STEEL, family="plastic")
    part = replace(bar(FatigueLimit("g1", "k1")), materials=(plastic,))
    assert any("asks for fatigue figures" in f.cause for f in faults_of(part) if f.blocks)
    known = replace(plastic, fatigue_coefficient=90.0, fatigue_exponent=-0.1)
    assert not [f for f in faults_of(replace(part, materials=(known,))) if f.blocks]
    neuber = replace(part, materials=(known,), limits=(FatigueLimit("g1", "k1", notch="neuber"),))
    assert any("no constant for" in f.cause for f in faults_of(neuber) if f.blocks)


def test_removing_a_case_takes_the_limit_along() -> None:
    outcome = remove(bar(FatigueLimit("g1", "k1", "k2")), "k2")
    assert outcome.part.limits == ()
    assert "limit g1 on case k2" in outcome.lost
