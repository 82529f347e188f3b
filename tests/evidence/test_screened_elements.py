"""One part screened with each of the four quads: what they find, and what they claim of it."""

from __future__ import annotations

from dataclasses import replace
from typing import get_args

import pytest

from screenapp.model.part import ElementName, MeshWishes
from tests.evidence.screened import Screened
from tests.evidence.table import record
from tests.evidence.test_screened_hole import strip

TOLERANCE = 0.02
OWN = 434.8
"""Largest stress at the hole of the strip, d/W = 0.5 [MPa]: own, finite strip."""


@pytest.mark.parametrize("element", get_args(ElementName))
def test_hole_in_a_strip_with_each_element(element: ElementName, screened: Screened) -> None:
    """The peak is settled to 2 % and its band holds the converged value, whatever the element."""
    part = replace(strip(0.5), mesh=MeshWishes(element, TOLERANCE))
    found = screened(part)
    peak = found.peak("h1")
    error = 100.0 * (peak.value / OWN - 1.0)
    record(
        f"hole in a strip, d/W = 0.5, screened with {element} "
        f"({found.unknowns} unknowns, {len(found.passes)} passes, {peak.trust})",
        "own, finite strip",
        OWN,
        peak.value,
        error,
        "2 %",
    )
    assert abs(error) < 100.0 * TOLERANCE
    assert peak.trust == "settled"
    assert peak.holds(OWN)
