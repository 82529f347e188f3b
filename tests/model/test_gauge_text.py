"""The gauge of walls and the losses of plain quads in words."""

from __future__ import annotations

import doctest

import pytest

from screenapp.model import gauge_text
from screenapp.model.findings import PlainLoss, WallGauge
from screenapp.model.gauge_text import loss_text, share_text, wall_text

WALL = WallGauge(
    ("e1", "h3"), "edge e1 and hole h3", 12.0, ((0.0, 0.0), (0.0, 12.0)), 4, 1.0, 1.0302
)


def test_examples() -> None:
    assert doctest.testmod(gauge_text).failed == 0


def test_a_wall_is_one_sentence_in_the_units_shown() -> None:
    assert wall_text(WALL, "mm-N-MPa") == (
        "Wall between edge e1 and hole h3: 12 mm, 4 elements across; plain bilinear quads of that "
        "size are 1.03 times as stiff as it is in bending"
    )
    assert "0.4724 in" in wall_text(WALL, "in-lbf-ksi")


@pytest.mark.parametrize(
    ("lost", "text"),
    [(0.234, "23 % low"), (-0.12, "12 % high"), (0.0162, "1.6 % low"), (4e-4, "the same")],
)
def test_shares(lost: float, text: str) -> None:
    assert share_text(lost) == text


def test_the_case_that_loses_most_is_told_by_name() -> None:
    losses = (
        PlainLoss("k1", 0.01, 0.01, 0.02, "hole h1"),
        PlainLoss("k2", 0.01, 0.012, -0.16, "hole h2"),
        PlainLoss("k3", 0.01, 0.03, None, ""),
    )
    text = loss_text(losses, {"k1": "Pull", "k2": "Push", "k3": "Turn"})
    assert "“Push”" in text
    assert "hole h2 16 % high" in text
    assert loss_text(losses[2:], {"k3": "Turn"}).endswith("displacement 3.0 % low")
    assert loss_text((), {}) == ""
