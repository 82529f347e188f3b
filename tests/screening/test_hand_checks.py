"""Hand checks: the formula against Howland's figures, matched where it applies and nowhere else."""

from __future__ import annotations

import json
from collections.abc import Iterator
from dataclasses import replace
from datetime import UTC, datetime

import pytest

from screenapp.meshing.service import Mesher
from screenapp.model.hand_formulas import hole_in_strip, shoulder_in_tension
from screenapp.model.part import (
    Case,
    CircleHole,
    FixedSupport,
    LineLoad,
    Loop,
    Part,
    PressureLoad,
    RollerSupport,
    StressLimit,
)
from screenapp.model.result_json import findings_from_record, findings_to_record
from screenapp.model.shape import shape_of
from screenapp.report.page import record_page
from screenapp.screening.handbook_cases import handbook_cases
from screenapp.screening.screen import screen
from tests.model.plates import loop, plate, rectangle

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


@pytest.mark.parametrize(
    ("share", "gross"), [(0.1, 3.03), (0.2, 3.14), (0.3, 3.36), (0.4, 3.74), (0.5, 4.32)]
)
def test_the_formula_follows_howland(share: float, gross: float) -> None:
    # Howland 1930, largest stress over the stress of the whole section, from memory
    assert hole_in_strip(100.0, 10.0 * share, 10.0, 1.0) / 10.0 == pytest.approx(gross, rel=0.005)


def test_a_hole_in_a_strip_is_checked(mesher: Mesher) -> None:
    findings = screen(strip(), mesher)
    (check,) = findings.hand_checks
    assert check.formula == pytest.approx(hole_in_strip(2400.0, 12.0, 40.0, 3.0), rel=1e-6)
    assert abs(check.difference) < 0.01  # the fit and Howland agree within half a per cent
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


@pytest.mark.parametrize(
    "part",
    [
        strip(replace(HOLE, centre=(75.0, 22.0))),  # off the middle
        strip(replace(HOLE, centre=(40.0, 20.0))),  # too near to the end
        strip(replace(HOLE, diameter=22.0)),  # d/W above 0.5
        strip(outline=loop([(0.0, 0.0), (150.0, 0.0), (150.0, 40.0), (0.0, 42.0)])),  # tapered
        replace(strip(), holes=(HOLE, CircleHole("h2", (110.0, 20.0), 4.0))),  # another beside it
        strip(outline=loop([(0, 0), (90, 0), (92, 3), (94, 0), (150, 0), (150, 40), (0, 40)])),
    ],
)
def test_other_shapes_are_left_alone(part: Part) -> None:
    assert handbook_cases(strip(), shape_of(strip()))
    assert not handbook_cases(part, shape_of(part))


def stepped(length: float = 120.0, r: float = 2.0, up: float = 0.0, other: float = 2.0) -> Part:
    """A flat bar that steps from 20 to 10 mm with two fillets, pulled by 100 N."""
    y0, y1, end = 5.0 + up, 15.0 + up, length + 40.0
    points = [(0.0, 0.0), (length, 0.0), (length, y0), (end, y0)]
    points += [(end, y1), (length, y1), (length, 20.0), (0.0, 20.0)]
    part = plate(loop(points, rounds={2: r, 5: other}))
    return replace(
        part,
        holes=(),
        supports=(RollerSupport("s1", "e8"), RollerSupport("s2", "c1", 90.0)),
        cases=(Case("k1", "pull", (LineLoad("l1", "e4", 10.0, 0.0),)),),
    )


@pytest.mark.parametrize(("r", "factor"), [(1.0, 2.51), (2.0, 1.99)])
def test_a_stepped_bar_is_checked(r: float, factor: float, mesher: Mesher) -> None:
    findings = screen(stepped(r=r, other=r), mesher)
    (check,) = findings.hand_checks
    assert check.kind == "shoulder fillets of a stepped flat bar in tension"
    assert check.place == "fillets c3 and c6"
    # chart 3.1 by its fit; the computed value of the same bars agrees within 1 %
    nominal = 100.0 / (10.0 * 3.0)
    assert check.formula / nominal == pytest.approx(factor, abs=0.01)
    assert check.formula == pytest.approx(shoulder_in_tension(100.0, 20.0, 10.0, r, 3.0))
    assert abs(check.difference) < 0.01


@pytest.mark.parametrize(
    "part",
    [
        stepped(length=60.0),  # the wide part is too short for the fit
        stepped(up=1.0),  # not in the middle
        stepped(other=1.0),  # two radii
        replace(stepped(), supports=(RollerSupport("s1", "e8"), RollerSupport("s2", "e1", 90.0))),
        replace(stepped(), holes=(CircleHole("h1", (90.0, 7.0), 3.0),)),
    ],
)
def test_other_steps_are_left_alone(part: Part) -> None:
    assert handbook_cases(stepped(), shape_of(stepped()))
    assert not handbook_cases(part, shape_of(part))


def test_a_record_of_a_part_judged_by_tresca_is_written(mesher: Mesher) -> None:
    part = replace(strip(), limits=(StressLimit("g1", "tresca"),))
    page = record_page(part, screen(part, mesher, fast=True), datetime(2026, 1, 2, tzinfo=UTC))
    assert "Tresca" in page
