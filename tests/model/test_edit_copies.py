"""Copy and paste of holes."""

from __future__ import annotations

from dataclasses import replace

import pytest

from screenapp.model import edits
from screenapp.model.part import CircleHole, LoopHole
from screenapp.model.pattern import RowPattern
from screenapp.model.shape import shape_of
from tests.model.plates import plate


def test_pasted_holes_have_ids_of_their_own_and_the_same_form() -> None:
    part = plate(None, CircleHole("h1", (10.0, 10.0), 4.0, RowPattern(3, 8.0)))
    part = edits.add_loop_hole(part, [(60.0, 10.0), (70.0, 10.0), (65.0, 20.0)])
    holes = edits.pasted_holes(edits.copy_text(part, ["h1.2", "c5", "e1"]))
    assert holes == part.holes
    made = edits.add_holes(part, holes, 1.0, 20.0)
    assert [h.id for h in made.holes] == ["h1", "h2", "h3", "h4"]
    assert made.holes[2] == replace(part.holes[0], id="h3", centre=(11.0, 30.0))
    copy = made.holes[3]
    assert isinstance(copy, LoopHole)
    assert [c.at for c in copy.loop.corners] == [(61.0, 30.0), (71.0, 30.0), (66.0, 40.0)]
    assert {c.id for c in copy.loop.corners} == {"c8", "c9", "c10"}
    removed = sum(5000.0 - shape_of(replace(plate(), holes=(h,))).area for h in part.holes)
    assert shape_of(made).area == pytest.approx(5000.0 - 2.0 * removed)


@pytest.mark.parametrize("text", ["", "hello", "{}", '{"format": "screenapp part", "version": 2}'])
def test_what_is_no_holes_is_refused(text: str) -> None:
    with pytest.raises(edits.EditError, match="no holes on the clipboard"):
        edits.pasted_holes(text)
    with pytest.raises(edits.EditError, match="no hole in what"):
        edits.copy_text(plate(), ["c1"])
    with pytest.raises(edits.EditError, match="would be at"):
        edits.add_holes(plate(), plate().holes, 1e9, 0.0)
