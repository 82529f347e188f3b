"""Zones screened from part to verdict: bands, the material that counts, what does not settle."""

from __future__ import annotations

import math
from collections.abc import Iterator
from dataclasses import replace

import numpy as np
import pytest

from screenapp.meshing.service import Mesher
from screenapp.model.findings import Findings
from screenapp.model.part import (
    Case,
    CircleHole,
    Cut,
    FixedSupport,
    ForceLoad,
    GravityLoad,
    Limit,
    Material,
    Part,
    PrescribedSupport,
    PressureLoad,
    Probe,
    RollerSupport,
    StressLimit,
    Zone,
)
from screenapp.model.result_json import findings_to_record, record_to_text
from screenapp.model.result_reading import findings_from_record
from screenapp.screening.screen import screen
from tests.mechanics.zoned import disc, pad, strip

UPRIGHT = (RollerSupport("s1", "e4", 0.0), RollerSupport("s2", "e1", 90.0))
STRONG = Material("strong", 210_000.0, 0.3, 7850.0, 400.0, 500.0)
WEAK = Material("weak", 210_000.0, 0.3, 7850.0, 100.0, 200.0)


@pytest.fixture(scope="module")
def mesher() -> Iterator[Mesher]:
    with Mesher() as made:
        yield made


def _pulled(*zones: Zone, limits: tuple[Limit, ...] = (StressLimit("g1"),)) -> Part:
    part = strip(
        60.0,
        20.0,
        zones,
        UPRIGHT,
        (Case("k", "pull", (ForceLoad("l", "e2", 2400.0, 0.0),)),),
        (STRONG, WEAK),
        holes=(CircleHole("h1", (20.0, 10.0), 6.0),),
    )
    return replace(part, limits=limits)


@pytest.fixture(scope="module")
def padded(mesher: Mesher) -> Findings:
    part = _pulled(disc((20.0, 10.0), 14.0, 4.0))
    part = replace(
        part, readings=(Probe("p1", "in", (20.0, 13.0)), Probe("p2", "step", (20.0, 17.0)))
    )
    return screen(part, mesher)


def test_a_pad_round_a_hole_lowers_its_stress_and_settles(mesher: Mesher, padded: Findings) -> None:
    bare = screen(_pulled(), mesher)
    before = next(p for p in bare.cases[0].peaks if p.feature == "h1").estimate
    peak = next(p for p in padded.cases[0].peaks if p.feature == "h1")
    assert peak.zone == "z1"
    assert peak.place.endswith(", in zone z1")
    assert peak.estimate.trust == "settled"
    assert 0.5 * before.value < peak.estimate.value < 0.8 * before.value


def test_bands_hold_the_stress_of_a_finer_mesh(mesher: Mesher, padded: Findings) -> None:
    part = _pulled(disc((20.0, 10.0), 14.0, 4.0))
    fine = screen(replace(part, mesh=replace(part.mesh, tolerance=0.002)), mesher)
    for peak in fine.cases[0].peaks:
        twin = min(padded.cases[0].peaks, key=lambda p: math.dist(p.at, peak.at))
        assert (twin.zone, twin.quantity) == (peak.zone, peak.quantity)
        assert twin.estimate.low <= peak.estimate.value <= twin.estimate.high


def test_a_reading_on_the_step_says_which_walls_meet(padded: Findings) -> None:
    inside, step = padded.readings
    assert inside.place.endswith(", in zone z1")
    assert (
        "between the wall and zone z1 (the larger stress of the two sides is given)" in step.place
    )


def test_the_record_names_the_zone_and_is_read_back(padded: Findings) -> None:
    record = findings_to_record(padded, _pulled())
    assert "z1" in {p["zone"] for p in record["cases"][0]["peaks"]}
    assert '"zone": "z1"' in record_to_text(record)
    back = findings_from_record(record)
    assert [p.zone for p in back.cases[0].peaks] == [p.zone for p in padded.cases[0].peaks]


def test_that_the_middle_planes_are_aligned_is_said(padded: Findings) -> None:
    assert any("middle plane" in caution for caution in padded.cautions)


def test_the_weakest_material_decides_where_it_stands(mesher: Mesher) -> None:
    """An even pull of 60 MPa: the wall may take 267 MPa, a stretch of weak material 67 MPa; then
    80 MPa beyond what the weak one may."""
    even = strip(
        60.0,
        20.0,
        (pad([(35.0, -5.0), (70.0, -5.0), (70.0, 25.0), (35.0, 25.0)], None, "weak"),),
        UPRIGHT,
        (Case("k", "pull", (PressureLoad("l", "e2", -60.0),)),),
        (STRONG, WEAK),
    )
    even = replace(even, limits=(StressLimit("g1"),))
    found = screen(even, mesher)
    assert found.verdict == "holds"
    assert found.limits[0].utilisation.value == pytest.approx(60.0 * 1.5 / 100.0, rel=5e-3)
    stronger = replace(even, cases=(Case("k", "pull", (PressureLoad("l", "e2", -80.0),)),))
    found = screen(stronger, mesher)
    assert found.verdict == "does not hold"
    assert "zone z1" in found.limits[0].place


def test_a_sharp_step_in_a_weak_place_stays_undecided_or_says_why(mesher: Mesher) -> None:
    """A thin pocket with re-entrant corners inside the part: never a settled number there."""
    part = strip(
        60.0,
        20.0,
        (pad([(20.0, 5.0), (40.0, 5.0), (40.0, 25.0), (20.0, 25.0)], 0.4),),
        UPRIGHT,
        (Case("k", "pull", (ForceLoad("l", "e2", 600.0, 0.0),)),),
        (STRONG,),
    )
    part = replace(part, limits=(StressLimit("g1"),))
    found = screen(part, mesher)
    top = found.cases[0].peaks[0]
    assert top.estimate.trust != "settled"
    assert "zone z1" in top.place + top.why
    assert found.verdict == "undecided"


def test_a_cut_is_read_wall_by_wall(mesher: Mesher) -> None:
    """Two strips of different thickness and modulus under one strain: every stress on the cut and
    every section force is known."""
    soft = replace(STRONG, name="soft", youngs_modulus=70_000.0)
    part = strip(
        60.0,
        20.0,
        (pad([(-5.0, 12.0), (70.0, 12.0), (70.0, 30.0), (-5.0, 30.0)], 5.0, "soft"),),
        (*UPRIGHT, PrescribedSupport("s3", "e2", x=0.06)),
        (Case("k", "stretch"),),
        (STRONG, soft),
    )
    part = replace(part, cuts=(Cut("x1", "across", (30.0, -5.0), (30.0, 25.0)),))
    (cut,) = screen(part, mesher).cuts
    lower, upper = cut.spans
    np.testing.assert_allclose(lower.values["normal"], 210.0, rtol=1e-6)
    np.testing.assert_allclose(upper.values["normal"], 70.0, rtol=1e-6)
    force = 210.0 * 12.0 * 2.0 + 70.0 * 8.0 * 5.0
    assert cut.applied is not None
    assert cut.normal.value == pytest.approx(force, rel=1e-6)
    assert cut.applied.normal == pytest.approx(force, rel=1e-6)
    assert lower.beam is None  # of several materials


def test_section_forces_take_weight_and_pressure_by_the_walls_they_act_on(mesher: Mesher) -> None:
    part = strip(
        60.0,
        20.0,
        (pad([(40.0, -5.0), (70.0, -5.0), (70.0, 30.0), (40.0, 30.0)], 6.0),),
        (FixedSupport("s1", "e4"),),
        (
            Case("k1", "weight", (GravityLoad("l1", 0.0, -9810.0),)),
            Case("k2", "pressure", (PressureLoad("l2", "e3", 2.0),)),
        ),
        (STRONG,),
    )
    part = replace(part, cuts=(Cut("x1", "root", (10.0, 25.0), (10.0, -5.0)),))
    weight, pressure = (c.applied for c in screen(part, mesher).cuts)
    assert weight is not None
    assert pressure is not None
    volume = 30.0 * 20.0 * 2.0 + 20.0 * 20.0 * 6.0
    assert abs(weight.shear) == pytest.approx(7850e-9 * volume * 9810.0, rel=1e-9)
    assert abs(pressure.shear) == pytest.approx(2.0 * (30.0 * 2.0 + 20.0 * 6.0), rel=1e-9)
