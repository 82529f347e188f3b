"""Handbook cases along the user's path: the computed peak beside formulas and an own reference."""

from __future__ import annotations

from dataclasses import replace

import pytest

from screenapp.model.hand_formulas import curved_bar, hole_off_centre, opposite_notches
from screenapp.model.part import Part
from tests.evidence.screened import Screened
from tests.evidence.table import record
from tests.screening.bars import T, bent, hook, notched, pulled, stepped, strip

SKFEM = "own, scikit-fem (P2 triangles on a mesh of its own, three sizes)"


def fine(part: Part) -> Part:
    return replace(part, mesh=replace(part.mesh, tolerance=0.005))


def hold(check: str, source: str, reference: float, found: float, most: float) -> None:
    error = 100.0 * (found / reference - 1.0)
    record(check, source, reference, found, error, f"{most:g} %")
    assert abs(error) < most


@pytest.mark.parametrize(("radius", "pull", "bend"), [(0.4, 3.4449, 3.0412), (1.0, 2.5216, 2.2204)])
def test_sharp_shoulder_fillets(
    radius: float, pull: float, bend: float, screened: Screened
) -> None:
    """A bar that steps from 25 to 20 mm: factors on the narrow section, each case alone."""
    part = fine(stepped(25.0, 20.0, radius))
    for name, case, factor in (("pulled", pulled("e4"), pull), ("bent", bent("e4"), bend)):
        found = screened(replace(part, cases=(case,)))
        peak = max(found.peak("c3").value, found.peak("c6").value)
        check = f"shoulder fillets, D/d = 1.25, r/d = {radius / 20.0:g}, {name}, screened"
        hold(check, SKFEM, factor, peak / (10.0 / T), 0.5)


def test_opposite_notches(screened: Screened) -> None:
    found = screened(fine(notched(100.0, 20.0))).peak("e2").value
    hold(
        "opposite half-round notches, 2r/W = 0.4, screened [MPa]",
        "fit of Pilkey & Pilkey, Peterson's Stress Concentration Factors (from memory)",
        opposite_notches(1000.0, 20.0, 100.0, T),
        found,
        1.0,
    )


def test_hole_off_the_middle(screened: Screened) -> None:
    part = fine(strip(100.0, 12.0, 30.0))
    found = screened(replace(part, cases=part.cases[:1])).peak("h1").value
    hold(
        "hole off the middle of a strip, c/W = 0.3, r/c = 0.2, screened [MPa]",
        "Roark's Formulas, after Sjöström 1950 (from memory)",
        hole_off_centre(1000.0, 6.0, 30.0, 100.0, T),
        found,
        1.0,
    )


def test_curved_bar(screened: Screened) -> None:
    """Golovin's exact solution of pure bending lies 0.2 % above the theory at ro/ri = 1.5;
    the force, which the theory spreads evenly, adds as much."""
    found = screened(fine(hook(10.0, 15.0, 60.0))).peak("e6").value
    hold(
        "U of a curved bar, ro/ri = 1.5, spread by its legs, screened [MPa]",
        "Winkler & Bach (derived)",
        curved_bar(50.0, 50.0 * 72.5, 10.0, 15.0, T)[0],
        found,
        1.0,
    )
