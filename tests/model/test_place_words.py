"""Words for places: on edges by the corners they run between, else by coordinates."""

from __future__ import annotations

import doctest
from dataclasses import replace
from pathlib import Path

import pytest

from screenapp.model import place_words
from screenapp.model.part import Corner, Part, Point
from screenapp.model.part_json import read_part
from screenapp.model.place_words import edge_words, point_words
from screenapp.model.shape import Shape, shape_of
from screenapp.screening.peaks import place_in_words
from tests.window import fabricate as made

SAMPLES = Path(__file__).parents[2] / "samples"


def piece_of(shape: Shape, feature: str) -> int:
    """Index of an edge's piece."""
    return next(i for i, c in enumerate(shape.curves) if c.feature == feature and c.kind == "edge")


def test_examples() -> None:
    assert doctest.testmod(place_words).failed == 0


@pytest.mark.parametrize(
    ("at", "words"),
    [
        ((-24.0, -40.0), "edge e1, 30 % from c1 to c2"),
        ((-60.0, -40.0), "edge e1 at c1"),
        ((59.9, -40.0), "edge e1 at c2"),
        ((59.0, -40.0), "edge e1, 99 % from c1 to c2"),
    ],
)
def test_a_place_on_an_edge_is_told_by_its_corners(at: Point, words: str) -> None:
    shape = shape_of(made.plate())
    assert edge_words(shape, piece_of(shape, "e1"), at) == words


def test_the_last_edge_runs_back_to_the_first_corner_and_roundings_count_as_corners() -> None:
    part = made.plate()
    assert part.outline is not None
    corners = tuple(Corner(c.id, c.at, 8.0 if c.id == "c1" else 0.0) for c in part.outline.corners)
    shape = shape_of(replace(part, outline=replace(part.outline, corners=corners)))
    # e4 runs down from c4 at (-60, 40) to the rounding of c1, which begins at y = -32
    assert edge_words(shape, piece_of(shape, "e4"), (-60.0, 4.0)) == "edge e4, 50 % from c4 to c1"


def test_two_peaks_on_one_edge_have_words_of_their_own() -> None:
    part: Part = read_part(SAMPLES / "hose-clip.part.json")
    shape = shape_of(part)
    piece = piece_of(shape, "e5")
    left, right = (place_in_words(shape, piece, at) for at in ((-12.5, 0.0), (12.5, 0.0)))
    assert left != right
    assert left.startswith("edge e5, ")
    assert left.endswith("from c5 to c6")


def test_rounding_is_no_coordinate() -> None:
    assert point_words((-3e-12, -0.0)) == "(0, 0) mm"
    assert point_words((0.25, -1e-3)) == "(0.25, -0.001) mm"
