"""Sentences in other units: quantities change, everything else stays."""

from __future__ import annotations

import pytest

from screenapp.model.restated import restated

INCH = "in-lbf-ksi"


@pytest.mark.parametrize(
    ("text", "said"),
    [
        ("needs 12.7 mm of edge e3", "needs 0.5 in of edge e3"),
        (
            "keep all coordinates under 25.4 mm: now −50.8 mm",
            "keep all coordinates under 1 in: now −2 in",
        ),
        ("an area of 645.16 mm²", "an area of 1 in²"),
        ("a stress of 6.895 MPa, 4.448 N", "a stress of 1 ksi, 1 lbf"),
        ("write 12.500 or 12500", "write 12.500 or 12500"),
        ("give it like 12 mm or 0.5 in", "give it like 12 mm or 0.5 in"),
        ("hole h2 mm", "hole h2 mm"),
        ("5 N·m", "5 N·m"),
        ("M10 mm", "M10 mm"),
    ],
)
def test_quantities_are_said_in_inches(text: str, said: str) -> None:
    assert restated(text, INCH) == said
    assert restated(text, "mm-N-MPa") == text
