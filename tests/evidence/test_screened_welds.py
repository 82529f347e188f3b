"""Welds by the user's path: force per length and throat stress against statics."""

from __future__ import annotations

import math

import pytest

from screenapp.meshing.service import Mesher
from screenapp.model.line_force_text import line_force_text
from screenapp.model.part import (
    Case,
    ForceLoad,
    LineLoad,
    Material,
    Part,
    RollerSupport,
    Support,
    Wall,
    WeldSupport,
)
from screenapp.model.result_json import findings_to_record, record_to_text
from screenapp.model.result_reading import findings_from_record
from screenapp.model.validity import faults_of
from screenapp.screening.screen import screen
from tests.evidence.screened import Screened, chain
from tests.evidence.table import record

E, LONG, HIGH, THICK, THROAT = 210_000.0, 80.0, 20.0, 4.0, 5.0


def bar(case: Case, *supports: Support) -> Part:
    """A bar of 80 × 20 mm without Poisson's effect, welded at its left end."""
    return Part(
        outline=chain([(0.0, 0.0), (LONG, 0.0), (LONG, HIGH), (0.0, HIGH)]),
        wall=Wall(THICK, "steel"),
        materials=(Material("steel", E, 0.0, 7850.0, 235.0, 360.0),),
        supports=supports or (WeldSupport("s1", "e4", THROAT),),
        cases=(case,),
    )


def test_a_pulled_weld_gives_the_force_over_its_length(screened: Screened) -> None:
    """q = F / b everywhere, F / (b a) in the throat, and the end goes by q / E (derived)."""
    found = screened(bar(Case("k1", "pull", (ForceLoad("l1", "e2", 4000.0, 0.0),))))
    (force,) = found.tree["cases"][0]["line_forces"]
    assert force["value"] == pytest.approx(4000.0 / HIGH, rel=1e-6)
    assert force["normal"] == pytest.approx(200.0, rel=1e-6)  # it pulls on the bar
    assert force["along"] == pytest.approx(0.0, abs=1e-3)
    assert force["trust"] == "settled"
    moved = found.tree["cases"][0]["displacement_max"]["value"]
    assert moved == pytest.approx(200.0 / E + 4000.0 * LONG / (E * HIGH * THICK), rel=1e-6)


def test_a_bent_weld_gives_6_m_over_its_length_squared(screened: Screened) -> None:
    """An end moment M: q = ± 6 M / b² at the ends of the weld (derived: the bar stays straight
    across, and its end turns on the weld)."""
    part = bar(Case("k1", "bend", (LineLoad("l1", "e2", -60.0, 0.0, 60.0, 0.0),)))
    found = screened(part)
    (force,) = found.tree["cases"][0]["line_forces"]
    moment = 60.0 * HIGH**2 / 6.0
    wanted = 6.0 * moment / HIGH**2
    error = 100.0 * (force["value"] / wanted - 1.0)
    record("weld across a bent bar: largest force per length [N/mm]", "6 M / b² (derived)", wanted,
           force["value"], error, "0.01 %")  # fmt: skip
    assert abs(error) < 0.01
    assert min(math.dist(force["at"], (0.0, y)) for y in (0.0, HIGH)) < 1e-6
    (given,) = found.tree["cases"][0]["reactions"]
    assert abs(given["moment"]) == pytest.approx(moment, rel=1e-6)


def test_a_side_weld_takes_the_pull_along_it(screened: Screened) -> None:
    """The welds' forces add up to the pull whatever their share; what stops within an edge rises
    slowly and is told."""
    welds = (
        WeldSupport("s1", "e1", THROAT, 0.0, 30.0),
        WeldSupport("s2", "e3", THROAT, 50.0, 80.0),
    )
    found = screened(bar(Case("k1", "pull", (ForceLoad("l1", "e2", 4000.0, 0.0),)), *welds))
    case = found.tree["cases"][0]
    assert [r["x"] for r in case["reactions"]] == pytest.approx([-2000.0, -2000.0], rel=1e-3)
    for force in case["line_forces"]:
        assert force["value"] > 2000.0 / 30.0  # more than the mean
        assert force["trust"] == "settled"
        assert abs(force["at"][0] - 30.0) < 3.0 or force["at"][0] < 3.0  # at an end
    assert case["balance"]["force"] < 1e-9


def test_the_record_keeps_line_forces_and_says_them(mesher: Mesher) -> None:
    part = bar(Case("k1", "pull", (ForceLoad("l1", "e2", 4000.0, 0.0),)))
    findings = screen(part, mesher)
    tree = findings_to_record(findings, part)
    again = findings_from_record(tree)
    assert record_to_text(tree)
    (force,) = again.cases[0].line_forces
    assert force.throat == THROAT
    text = line_force_text(force, "mm-N-MPa")
    assert text.startswith("gives most at (0 mm")
    assert ": 200" in text
    assert "pulling across" in text  # the bar is pulled off it
    assert "), 40" in text  # 200 N/mm over a throat of 5 mm
    assert text.endswith("in the throat of 5 mm")


def test_bad_welds_are_told() -> None:
    def causes(*supports: Support) -> list[str]:
        pull = Case("k1", "pull", (ForceLoad("l1", "e2", 4000.0, 0.0),))
        return [f.cause for f in faults_of(bar(pull, *supports)) if f.blocks]

    assert causes(WeldSupport("s1", "e4", 3.0)) == []
    for throat in (0.0, -1.0, math.nan, 1e6):
        assert any("throat" in c for c in causes(WeldSupport("s1", "e4", throat)))
    assert any("corner c1" in c for c in causes(WeldSupport("s1", "c1", 3.0)))
    both = causes(RollerSupport("s2", "c1", 0.0), WeldSupport("s1", "e4", 3.0, 5.0, 2.0))
    assert any("before it starts" in c for c in both)
