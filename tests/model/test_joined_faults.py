"""Faults of one kind told in one sentence."""

from __future__ import annotations

from dataclasses import replace

from screenapp.model.cautions import ENTERING, MOST
from screenapp.model.errors import Fault, causes_of, joined
from screenapp.model.validity import faults_of
from tests.model.plates import loop, plate


def test_faults_that_are_alike_stand_together_and_others_keep_their_order() -> None:
    a, b = Fault("a", "mend", ids=("c1",), alike="both"), Fault("b", "mend", ids=("c2",))
    c = Fault("c", "mend", ids=("c3", "c4"), alike="both")
    d = Fault("d", "mend", alike="of its own")
    assert joined((a, b, c, d)) == [(a, c), (b,), (d,)]
    assert causes_of((a, b, c, d)) == ["both: c1, c3, c4", "b", "d"]
    assert causes_of(()) == []


def test_sharp_corners_beyond_those_that_are_listed_are_in_the_sentence_too() -> None:
    """A comb: every gap between two teeth has two corners that re-enter."""
    tooth = ((0.0, 30.0), (5.0, 30.0), (5.0, 10.0), (10.0, 10.0))
    teeth = [(10.0 * i + x, y) for i in range(15) for x, y in tooth]
    points = [(0.0, 0.0), (150.0, 0.0), *reversed(teeth[:-2])]
    part = replace(plate(loop(points)), holes=(), supports=(), cases=())
    sharp = [f for f in faults_of(part) if f.alike == ENTERING]
    assert len(sharp) == MOST + 1
    (said,) = [c for c in causes_of(faults_of(part)) if c.startswith(ENTERING)]
    assert len(said.removeprefix(f"{ENTERING}: ").split(", ")) == 2 * 14
