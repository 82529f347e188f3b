"""Hand checks in findings, record and page; loads that are none of the handbook's."""

from __future__ import annotations

import json
from collections.abc import Iterator
from dataclasses import replace
from datetime import UTC, datetime

import pytest

from screenapp.meshing.service import Mesher
from screenapp.model.hand_formulas import hole_in_strip
from screenapp.model.part import (
    Case,
    CircleHole,
    FixedSupport,
    LineLoad,
    Loop,
    Part,
    PressureLoad,
    StressLimit,
)
from screenapp.model.result_json import findings_from_record, findings_to_record
from screenapp.report.page import record_page
from screenapp.screening.screen import screen
from tests.model.plates import plate, rectangle

HOLE = CircleHole("h1", (75.0, 20.0), 12.0)


@pytest.fixture(scope="module")
def mesher() -> Iterator[Mesher]:
    with Mesher() as warm:
        yield warm


def strip(
    hole: CircleHole = HOLE, x: float = 60.0, y: float = 0.0, outline: Loop | None = None
) -> Part:
    """150 x 40 x 3 mm, held on the left, pulled by 60 N/mm on the right."""
    part = plate(outline or rectangle(150.0, 40.0), hole)
    return replace(part, cases=(Case("k1", "pull", (LineLoad("l1", "e2", x, y),)),))


def test_a_hole_in_a_strip_is_checked(mesher: Mesher) -> None:
    findings = screen(strip(), mesher)
    (check,) = findings.hand_checks
    assert check.formula == pytest.approx(hole_in_strip(2400.0, 12.0, 40.0, 3.0), rel=1e-6)
    assert abs(check.difference) < 0.01
    assert (check.feature, check.case) == ("h1", "k1")
    assert "N = 2400 N" in check.nominal
    assert "d/W up to 0.5, here 0.3" in check.valid
    record = json.loads(json.dumps(findings_to_record(findings, strip())))
    assert findings_from_record(record).hand_checks == findings.hand_checks
    page = record_page(strip(), findings, datetime(2026, 1, 2, tzinfo=UTC))
    assert "hand check" in page
    assert "Howland 1930" in page


@pytest.mark.parametrize(
    "part",
    [
        strip(y=10.0),  # bent and sheared
        replace(strip(), supports=(FixedSupport("s1", "e4"), FixedSupport("s2", "h1"))),
        replace(
            strip(),
            cases=(
                Case("k1", "p", (LineLoad("l1", "e2", 60.0, 0.0), PressureLoad("l2", "e1", 1.0))),
            ),
        ),
    ],
)
def test_other_loads_are_left_alone(part: Part, mesher: Mesher) -> None:
    assert screen(part, mesher, fast=True).hand_checks == ()


def test_a_record_of_a_part_judged_by_tresca_is_written(mesher: Mesher) -> None:
    part = replace(strip(), limits=(StressLimit("g1", "tresca"),))
    page = record_page(part, screen(part, mesher, fast=True), datetime(2026, 1, 2, tzinfo=UTC))
    assert "Tresca" in page
