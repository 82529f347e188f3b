"""Holes with a pin by EN 1993-1-8, tables 3.3 and 3.4 (from memory), against figures by hand.

The plate is 100 x 50 x 3 mm of fy 235, fu 360 MPa; its hole of 12 mm stands 20 mm before the end.
"""

from __future__ import annotations

import json
import math
from collections.abc import Iterator
from dataclasses import replace
from pathlib import Path

import pytest

from screenapp.meshing.service import Mesher
from screenapp.model.edit_removal import remove
from screenapp.model.errors import PartFileError
from screenapp.model.findings import Findings, LimitFindings
from screenapp.model.joint_rules import joint_rules, read_joint_rules
from screenapp.model.part import (
    BearingLoad,
    Case,
    CircleHole,
    FixedSupport,
    JointLimit,
    LineLoad,
    Part,
)
from screenapp.model.pattern import RowPattern
from screenapp.model.result_json import findings_from_record, findings_to_record
from screenapp.model.validity import faults_of
from screenapp.screening.screen import screen
from tests.model.plates import STEEL, plate

HOLE = CircleHole("h1", (80.0, 25.0), 12.0)


@pytest.fixture(scope="module")
def mesher() -> Iterator[Mesher]:
    with Mesher() as warm:
        yield warm


def pulled(x: float = 6000.0, y: float = 0.0, hole: CircleHole = HOLE, **limit: object) -> Part:
    load = BearingLoad("l1", hole.id, x, y)
    return replace(
        plate(None, hole),
        cases=(Case("k1", "pull", (load,)),),
        limits=(JointLimit("g1", hole.id, **limit),),  # type: ignore[arg-type]
    )


def by_rule(findings: Findings) -> dict[str, LimitFindings]:
    return {f.rule: f for f in findings.limits}


def test_the_figures_by_hand(mesher: Mesher) -> None:
    findings = screen(pulled(), mesher, fast=True)
    found = by_rule(findings)
    assert {rule: f.utilisation.value for rule, f in found.items()} == pytest.approx(
        {
            # k1 = 2.5 (2.8 · 25/12 - 1.7 = 4.1), αb = 20/36: 2.5 · 0.5556 · 360 · 12 · 3 / 1.25
            "h1 bearing": 6000.0 / 14_400.0,
            # 0.9 (50 - 12) 3 · 360 / 1.25
            "h1 net section": 6000.0 / 29_548.8,
            # 2 · 14 · 3 · 235 / √3
            "h1 shear-out": 6000.0 / (2.0 * 14.0 * 3.0 * 235.0 / math.sqrt(3.0)),
            "h1 end distance e1": 14.4 / 20.0,
            "h1 edge distance e2": 14.4 / 25.0,
        }
    )
    assert {f.verdict for f in found.values()} == {"holds"}
    assert all(f.utilisation.trust == "settled" for f in found.values())
    assumed = found["h1 bearing"].assumed
    for words in ("6000 N at 0°", "from the loads", "e1 20 mm to e2", "table 3.4", "as the hole"):
        assert words in assumed
    assert (
        findings_from_record(json.loads(json.dumps(findings_to_record(findings, pulled())))).limits
        == findings.limits
    )


def test_factor_and_pin_count(mesher: Mesher) -> None:
    part = pulled(factor=1.5, pin=10.0, pin_strength=180.0)
    found = by_rule(screen(part, mesher, fast=True))
    # αb = 180/360 now, d = 10: 2.5 · 0.5 · 360 · 10 · 3 / 1.25
    assert found["h1 bearing"].utilisation.value == pytest.approx(9000.0 / 10_800.0)


def test_too_much_force_and_too_little_distance_do_not_hold(mesher: Mesher) -> None:
    found = by_rule(screen(pulled(20_000.0, hole=replace(HOLE, centre=(88.0, 25.0))), mesher))
    assert found["h1 bearing"].verdict == "does not hold"
    assert "of its resistance of 8640 N under “pull” (EN 1993-1-8, table 3.4)" in (
        found["h1 bearing"].reason
    )
    edge = found["h1 end distance e1"]
    assert edge.verdict == "does not hold"  # 12 mm where 14.4 mm are asked for
    assert "is 12 mm, under the 14.4 mm of EN 1993-1-8, table 3.3" in edge.reason


def test_an_oblique_force_is_measured_square_to_the_edge(mesher: Mesher) -> None:
    # towards the upper right: the line meets the end edge at (100, 45)
    found = by_rule(screen(pulled(3000.0, 3000.0), mesher, fast=True))
    assert found["h1 end distance e1"].utilisation.value == pytest.approx(14.4 / 20.0)
    # rim to edge along the force: 20 √2 - 6
    clear = 20.0 * math.sqrt(2.0) - 6.0
    assert found["h1 shear-out"].utilisation.value == pytest.approx(
        3000.0 * math.sqrt(2.0) / (2.0 * clear * 3.0 * 235.0 / math.sqrt(3.0))
    )


def test_a_hole_ahead_counts_by_its_pitch(mesher: Mesher) -> None:
    row = CircleHole("h1", (40.0, 25.0), 12.0, RowPattern(2, 36.0))
    found = by_rule(screen(pulled(12_000.0, hole=row), mesher, fast=True))
    # the force is shared evenly; αb = 36/36 - 0.25
    assert found["h1.1 bearing"].utilisation.value == pytest.approx(
        6000.0 / (2.5 * 0.75 * 360.0 * 12.0 * 3.0 / 1.25)
    )
    assert found["h1.1 pitch along the force p1"].utilisation.value == pytest.approx(26.4 / 36.0)
    assert found["h1.2 end distance e1"].utilisation.value == pytest.approx(14.4 / 24.0)
    assert "h1.1 end distance e1" not in found


def test_a_held_hole_takes_the_reaction_with_its_band(mesher: Mesher) -> None:
    part = replace(
        pulled(),
        supports=(FixedSupport("s1", "h1"),),
        cases=(
            Case("k1", "pull", (LineLoad("l1", "e4", -40.0, 0.0),)),
            Case("k2", "idle", (LineLoad("l2", "e1", 0.0, -9.0), LineLoad("l3", "e3", 0.0, 9.0))),
        ),
    )
    findings = screen(part, mesher)
    pull = {f.rule: f for f in findings.limits if f.case == "k1"}
    used = pull["h1 bearing"].utilisation
    assert used.value == pytest.approx(2000.0 / 14_400.0, rel=1e-6)
    assert used.low < used.value < used.high
    assert "reaction of its support" in pull["h1 bearing"].assumed
    (idle,) = (f for f in findings.limits if f.case == "k2")
    assert (idle.utilisation.value, idle.verdict) == (0.0, "holds")


def test_a_support_on_a_whole_pattern_is_undecided(mesher: Mesher) -> None:
    row = CircleHole("h1", (40.0, 25.0), 12.0, RowPattern(2, 36.0))
    part = replace(
        pulled(hole=row),
        supports=(FixedSupport("s1", "h1"),),
        cases=(Case("k1", "pull", (LineLoad("l1", "e4", -40.0, 0.0),)),),
    )
    findings = screen(part, mesher, fast=True)
    assert findings.verdict == "undecided"
    assert "hold its holes one by one" in findings.reasons[0]


def test_no_room_beside_the_hole_is_no_resistance(mesher: Mesher) -> None:
    # e2 = 7: 2.8 · 7/12 - 1.7 < 0
    found = by_rule(screen(pulled(hole=replace(HOLE, centre=(80.0, 7.0))), mesher, fast=True))
    assert found["h1 bearing"].verdict == "does not hold"
    assert found["h1 bearing"].utilisation.value == pytest.approx(1000.0)
    assert "its resistance of 0 N" in found["h1 bearing"].reason


@pytest.mark.parametrize(
    ("limit", "field"),
    [
        (JointLimit("g1", "h9"), "on"),
        (JointLimit("g1", "e1"), "on"),
        (JointLimit("g1", "h1", "nobody's"), "rules"),
        (JointLimit("g1", "h1", factor=0.0), "factor"),
        (JointLimit("g1", "h1", pin=-1.0), "pin"),
        (JointLimit("g1", "h1", pin=13.0), "pin"),
        (JointLimit("g1", "h1", pin_strength=math.nan), "pin_strength"),
    ],
)
def test_faults(limit: JointLimit, field: str) -> None:
    part = replace(pulled(), limits=(limit,))
    assert f"limits.g1.{field}" in [f.field for f in faults_of(part) if f.blocks]


def test_a_material_that_lacks_strength_blocks_and_a_foreign_one_is_cautioned() -> None:
    bare = replace(pulled(), materials=(replace(STEEL, strength=None),))
    assert any("asks for the strength" in f.cause for f in faults_of(bare) if f.blocks)
    foreign = replace(pulled(), materials=(replace(STEEL, family="aluminium"),))
    (caution,) = (f for f in faults_of(foreign) if "written for steel" in f.cause)
    assert not caution.blocks


def test_removing_the_hole_takes_the_limit_along() -> None:
    outcome = remove(pulled(), "h1")
    assert outcome.part.limits == ()
    assert "limit g1 on h1" in outcome.lost


def test_rules_that_cannot_be_worked_out_are_refused(tmp_path: Path) -> None:
    text = json.dumps({"format": "screenapp joint rules", "rules": []})
    path = tmp_path / "rules.json"
    path.write_text(text)
    assert read_joint_rules(path) == {}
    rule = {
        "name": "own", "title": "", "source": "", "families": [], "partial_factors": {},
        "checks": [{"name": "bearing", "resistance": "fx*t", "source": "", "assumes": ""}],
        "distances": [],
    }  # fmt: skip
    path.write_text(json.dumps({"format": "screenapp joint rules", "rules": [rule]}))
    with pytest.raises(PartFileError, match=r"rules\.json: in “own”, .*fx"):
        read_joint_rules(path)
    path.write_text("{}")
    with pytest.raises(PartFileError, match="cannot be read"):
        read_joint_rules(path)
    assert "EN 1993-1-8" in joint_rules()
