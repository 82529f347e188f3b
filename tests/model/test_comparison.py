"""What differs between two parts, told by id, and what became of each utilisation."""

from __future__ import annotations

import math
from dataclasses import replace

from screenapp.model.comparison import Change, UseChange, changes
from screenapp.model.edits import insert_corner
from screenapp.model.findings import Estimate, LimitFindings
from screenapp.model.part import Formula
from tests.model.plates import plate, rectangle


def test_equal_parts_differ_in_nothing() -> None:
    assert changes(plate(), plate()) == ()


def test_a_changed_number_is_one_line() -> None:
    part = plate()
    thicker = replace(part, wall=replace(part.wall, thickness=4.5))
    assert changes(part, thicker) == (Change("wall.thickness", "3", "4.5"),)


def test_a_corner_put_in_between_is_told_by_its_id_alone() -> None:
    part = plate(rectangle(100.0, 50.0))
    more = insert_corner(part, "e1", (40.0, -5.0))
    fields = [c.field for c in changes(part, more)]
    assert fields
    assert all(c.before is None for c in changes(part, more))
    assert not any(".c2." in field or ".c3." in field for field in fields)


def test_an_expression_counts_as_its_text() -> None:
    part = plate()
    told = replace(part, formulas=(Formula("wall.thickness", "t + 1"),))
    assert changes(part, told) == (Change("wall.thickness", "3", "t + 1"),)


def found(value: float, half: float, trust: str = "settled") -> LimitFindings:
    high = math.inf if trust == "rising" else value + half
    estimate = Estimate(value, value - half, high, trust)  # type: ignore[arg-type]
    return LimitFindings("g1", "von Mises", "k1", estimate, "holds", (0.0, 0.0), "hole h1", "")


def test_a_difference_within_the_bands_is_not_clear() -> None:
    use = UseChange("von Mises", "pull", found(0.70, 0.02), found(0.73, 0.02))
    assert use.difference is not None
    assert abs(use.difference - 0.03) < 1e-12
    assert not use.clear
    assert UseChange("von Mises", "pull", found(0.70, 0.01), found(0.73, 0.01)).clear


def test_no_difference_is_told_of_numbers_that_are_not_settled() -> None:
    for one, other in (
        (found(0.7, 0.0, "rising"), found(0.9, 0.01)),
        (found(0.7, 0.01), found(0.9, 0.01, "unsettled")),
        (None, found(0.9, 0.01)),
        (found(0.7, 0.01), None),
    ):
        use = UseChange("von Mises", "pull", one, other)
        assert use.difference is None
        assert not use.clear
