"""The record of a part with an orthotropic wall and an isotropic zone in it."""

from __future__ import annotations

from pathlib import Path

from screenapp.meshing.service import Mesher
from screenapp.model.part import (
    Case,
    CircleHole,
    FixedSupport,
    LineLoad,
    Material,
    Part,
    SlotHole,
    StressLimit,
    Wall,
    Zone,
)
from screenapp.report.record import write_record
from screenapp.screening.screen import screen
from tests.evidence.screened import chain
from tests.evidence.test_screened_orthotropic import GLASS

STEEL = Material("steel", 210_000.0, 0.3, 7850.0, proof_stress=235.0)
PART = Part(
    title="Plate with an insert",
    outline=chain([(0.0, 0.0), (120.0, 0.0), (120.0, 60.0), (0.0, 60.0)]),
    holes=(CircleHole("h1", (80.0, 30.0), 12.0),),
    zones=(
        Zone(CircleHole("z1", (80.0, 30.0), 30.0), material="steel"),
        Zone(SlotHole("z2", (35.0, 30.0), 20.0, 8.0), thickness=4.0, axis=90.0),
    ),
    wall=Wall(3.0, "glass", axis=25.0),
    materials=(GLASS, STEEL),
    supports=(FixedSupport("s1", "e4"),),
    cases=(Case("k1", "pulled", (LineLoad("l1", "e2", 20.0, 0.0),)),),
    limits=(StressLimit("q1", "tsai_hill"), StressLimit("q2", "largest_stress")),
)


def test_it_names_both_rules_the_axes_and_what_it_does_not_see(tmp_path: Path) -> None:
    with Mesher() as mesher:
        findings = screen(PART, mesher)
    write_record(PART, findings, tmp_path, Path("insert.part.json"))
    text = (tmp_path / "insert.html").read_text(encoding="utf-8")
    for said in (
        "orthotropic, its 1-axis at 25° from x",
        "its 1-axis at 90° from x",
        "E 210000 MPa",
        "Tsai–Hill, as tension along 1",
        "largest in the axes, as tension along 1",
        "not worked out for an orthotropic sheet",
        "what its layers carry",
    ):
        assert said in text, said
    assert {limit.limit for limit in findings.limits} == {"q1", "q2"}
    inside = [p for c in findings.cases for p in c.peaks if p.zone == "z1"]
    assert inside, "the steel insert is judged too, by its von Mises stress"
    hoop = {p.quantity: p.estimate.value for p in inside if p.feature == "h1"}
    assert hoop["tsai_hill"] == hoop["von_mises"]
