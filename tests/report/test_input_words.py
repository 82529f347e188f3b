"""The inputs in the record: every hole, ring, dimension, expression and combination is told."""

from __future__ import annotations

import dataclasses
from datetime import UTC, datetime
from pathlib import Path

import pytest

from screenapp.meshing.service import Mesher
from screenapp.model.part import (
    CircleHole,
    Combination,
    Corner,
    Dimension,
    Edge,
    Formula,
    Loop,
    LoopHole,
    Part,
    SlotHole,
    Term,
)
from screenapp.model.part_json import read_part
from screenapp.model.pattern import BoltCircle, GridPattern, RowPattern
from screenapp.report.input_words import dimension_rows, edge_words, hole_words, ring_rows, rings
from screenapp.report.page import record_page
from screenapp.screening.screen import screen

SAMPLES = Path(__file__).parents[2] / "samples"


@pytest.mark.parametrize(
    ("hole", "words"),
    [
        (CircleHole("h1", (10.0, 20.0), 6.0), "round, ⌀ 6 mm at (10 mm, 20 mm)"),
        (
            SlotHole("h1", (0.0, -1.0), 20.0, 8.0, 30.0),
            "slot, 20 mm × 8 mm at (0 mm, -1 mm), turned 30°",
        ),
        (
            CircleHole("h1", (0.0, 0.0), 6.0, RowPattern(4, 15.0, 90.0)),
            "round, ⌀ 6 mm at (0 mm, 0 mm); 4 in a row, 15 mm apart along 90°",
        ),
        (
            CircleHole("h1", (0.0, 0.0), 6.0, GridPattern(3, 2, 15.0, 12.0)),
            "round, ⌀ 6 mm at (0 mm, 0 mm); 3 × 2 in a grid, 15 mm and 12 mm apart along 0°",
        ),
        (
            CircleHole("h1", (0.0, 0.0), 6.0, BoltCircle(6, 40.0, 15.0)),
            "round, ⌀ 6 mm at (0 mm, 0 mm); 6 on a bolt circle of radius 40 mm, the first at 15°",
        ),
    ],
)
def test_a_hole_in_words(hole: CircleHole | SlotHole, words: str) -> None:
    assert hole_words(hole, "mm-N-MPa").replace("−", "-") == words


def test_inches_are_told_as_inches() -> None:
    assert "0.25 in" in hole_words(CircleHole("h1", (0.0, 0.0), 6.35), "in-lbf-ksi")


def test_a_ring_corner_by_corner() -> None:
    loop = Loop(
        (
            Corner("c1", (0.0, 0.0)),
            Corner("c2", (9.0, 0.0), round=2.0),
            Corner("c3", (9.0, 8.0), chamfer=1.5),
        ),
        (Edge("e1"), Edge("e2", (11.0, 4.0)), Edge("e3")),
    )
    rows = ring_rows(loop, "mm-N-MPa")
    assert rows[0] == ("c1", "0 mm", "0 mm", "sharp", "e1, straight")
    assert rows[1][3:] == ("fillet 2 mm", "e2, arc through (11 mm, 4 mm)")
    assert rows[2][3] == "chamfer 1.5 mm"
    part = Part(outline=loop, holes=(CircleHole("h1", (1.0, 1.0), 1.0), LoopHole("h2", loop)))
    assert [name for name, _ in rings(part)] == ["outline", "h2"]
    assert edge_words(Edge("e9"), "mm-N-MPa") == "e9, straight"


def test_dimensions_with_their_bounds() -> None:
    part = Part(
        dimensions=(
            Dimension("width", 80.0, 60.0, None),
            Dimension("lean", 30.0, measures="angle"),
            Dimension("n", 4.0, 2.0, 8.0, "number"),
        )
    )
    assert dimension_rows(part) == (
        ("width", "80 mm", "60 mm", "none"),
        ("lean", "30°", "none", "none"),
        ("n", "4", "2", "8"),
    )


def test_the_page_tells_every_input() -> None:
    part = read_part(SAMPLES / "pump-bracket.part.json")
    first, second = part.cases
    assert part.outline is not None
    corner = part.outline.corners[0]
    part = dataclasses.replace(
        part,
        dimensions=(Dimension("edge_gap", corner.at[0]),),
        formulas=(Formula(f"outline.corners.{corner.id}.at.0", "edge_gap + 0"),),
        combinations=(
            Combination("both", "Both at once", (Term(first.id, 1.35), Term(second.id, -0.5))),
        ),
    )
    with Mesher() as mesher:
        page = record_page(part, screen(part, mesher, fast=True), datetime.now(UTC))
    for said in (
        f"1.35 × {first.name} + -0.5 × {second.name}",
        "edge_gap + 0",
        *(hole_words(hole, "mm-N-MPa") for hole in part.holes),
        *(f"<td>{c.id}</td>" for c in part.outline.corners),
    ):
        assert said in page, said
    assert "e-13" not in page, "no rounding is shown as a force"
