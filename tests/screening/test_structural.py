"""The structural stress beside a rising place: exact on linear fields, none without room."""

from __future__ import annotations

import math
from collections.abc import Callable
from dataclasses import replace
from typing import cast

import numpy as np
import pytest

from screenapp.mechanics.singular_spots import SingularSpot, singular_spots
from screenapp.model.part import FixedSupport, Part, Wall
from screenapp.model.shape import Shape, shape_of
from screenapp.screening.passes import Pass, PointValues
from screenapp.screening.structural import reading_places, structural_stress
from screenapp.screening.trust import Sample, judge
from tests.model.plates import loop, plate

Floats = np.ndarray
ELL = [(0.0, 0.0), (80.0, 0.0), (80.0, 30.0), (30.0, 30.0), (30.0, 80.0), (0.0, 80.0)]
"""c4 at (30, 30) is re-entrant; e3 runs to it along y = 30, e4 from it along x = 30."""


class FieldPass:
    """Stands in for a pass whose stress is known everywhere, with a doubt of 1 MPa."""

    def __init__(self, stress: Callable[[Floats], Floats], size: float) -> None:
        self.stress, self.size = stress, size

    def read(self, points: Floats, measure: str = "von_mises") -> PointValues:
        n = len(points)
        return PointValues(
            self.stress(points)[None],
            np.zeros((1, n, 2)),
            np.ones((1, n)),
            np.full(n, self.size),
            np.full((1, n), -1),
        )


def passes(stress: Callable[[Floats], Floats], count: int = 4) -> list[Pass]:
    return [cast(Pass, FieldPass(stress, 4.0 / 2**i)) for i in range(count)]


def ell(thickness: float = 5.0, **more: object) -> tuple[Part, Shape, SingularSpot]:
    part = replace(plate(loop(ELL)), supports=(), wall=Wall(thickness, "steel"), **more)  # type: ignore[arg-type]
    shape = shape_of(part)
    (spot,) = singular_spots(part, shape)
    return part, shape, spot


def read_at(part: Part, shape: Shape, spot: SingularSpot) -> set[tuple[float, float]]:
    return {(round(x, 9), round(y, 9)) for x, y in reading_places(part, shape, spot)}


def test_it_is_read_at_0_4_and_1_0_wall_thicknesses_along_both_edges() -> None:
    part, shape, spot = ell()
    assert read_at(part, shape, spot) == {
        (32.0, 30.0),
        (35.0, 30.0),
        (30.0, 32.0),
        (30.0, 35.0),
    }


@pytest.mark.parametrize("slope", [-9.0, -2.0, 0.0, 3.0])
def test_a_linear_field_gives_its_value_at_the_corner(slope: float) -> None:
    part, shape, spot = ell()

    def stress(p: Floats) -> Floats:
        along = 50.0 + slope * (p[:, 0] - 30.0)
        return np.stack([along, 0.0 * along, 0.0 * along], axis=1)

    found = structural_stress(part, shape, passes(stress), spot, "von_mises", 0)
    assert found is not None
    assert found[0].value == pytest.approx(50.0, rel=1e-12)
    assert found[0].trust == "settled"
    assert found[0].low < 50.0 < found[0].high


def test_a_stress_that_changes_its_sign_is_drawn_on_with_its_sign() -> None:
    part, shape, spot = ell()

    def stress(p: Floats) -> Floats:  # 40 at the corner, -8 at 1.0 t, where von Mises says 8
        along = 40.0 - 48.0 / 5.0 * (p[:, 0] - 30.0)
        on_e3 = p[:, 0] > 30.0 + 1e-9
        return np.stack([np.where(on_e3, along, 0.0), 0.0 * along, 0.0 * along], axis=1)

    found = structural_stress(part, shape, passes(stress), spot, "von_mises", 0)
    assert found is not None
    assert (found[1], found[0].value) == ("e3", pytest.approx(40.0, rel=1e-12))


def test_the_larger_of_the_edges_counts_and_is_named() -> None:
    part, shape, spot = ell()

    def stress(p: Floats) -> Floats:
        on_e4 = p[:, 0] < 30.0 + 1e-9
        return np.stack([np.where(on_e4, 0.0, 50.0), np.where(on_e4, 70.0, 0.0), 0.0 * p[:, 0]], 1)

    found = structural_stress(part, shape, passes(stress), spot, "von_mises", 0)
    assert found is not None
    assert (found[1], found[0].value) == ("e4", pytest.approx(70.0))


def test_along_a_curved_edge_the_components_turn_with_it() -> None:
    # an arc that leaves the corner c3 = (60, 30): stress along it falls linearly with arc length
    points = [(0.0, 0.0), (100.0, 0.0), (100.0, 30.0), (60.0, 30.0), (0.0, 30.0)]
    part = replace(
        plate(loop(points, through={3: (30.0, 60.0)})), supports=(), wall=Wall(4.0, "steel")
    )
    shape = shape_of(part)
    spot = next(s for s in singular_spots(part, shape) if s.ids[0] == "c4")
    arc = next(c.curve for c in shape.curves if c.feature == "e4")

    def stress(p: Floats) -> Floats:
        t = np.array([arc.nearest((x, y)) for x, y in p])
        along = 90.0 - 5.0 * t * arc.length
        c, s = arc.tangent(t).T
        on = np.hypot(*(arc.point(t) - p).T) < 1e-9
        return np.where(
            on[:, None], np.stack([along * c * c, along * s * s, along * c * s], 1), 0.0
        )

    for name in ("von_mises", "sigma_1"):
        found = structural_stress(part, shape, passes(stress), spot, name, 0)
        assert found is not None
        assert (found[1], found[0].value) == ("e4", pytest.approx(90.0, rel=1e-9))


def test_a_measure_that_is_nothing_there_is_settled_at_nothing() -> None:
    part, shape, spot = ell()

    def compression(p: Floats) -> Floats:
        return np.tile([-50.0, -50.0, 0.0], (len(p), 1))

    found = structural_stress(part, shape, passes(compression), spot, "sigma_1", 0)
    assert found is not None
    assert found[0].value == pytest.approx(-50.0)
    assert found[0].trust == "settled"


def test_it_is_not_settled_before_the_third_pass() -> None:
    part, shape, spot = ell()

    def stress(p: Floats) -> Floats:
        return np.tile([50.0, 0.0, 0.0], (len(p), 1))

    for count, trust in ((1, "unsettled"), (2, "unsettled"), (3, "settled")):
        found = structural_stress(part, shape, passes(stress, count), spot, "von_mises", 0)
        assert found is not None
        assert found[0].trust == trust


def test_the_doubt_is_weighted_like_the_stress() -> None:
    part, shape, spot = ell()

    def stress(p: Floats) -> Floats:
        return np.tile([50.0, 0.0, 0.0], (len(p), 1))

    found = structural_stress(part, shape, passes(stress), spot, "von_mises", 0)
    assert found is not None
    # each place doubts by 1 MPa: 5/3 + 2/3 of it
    samples = [Sample(50.0, 4.0 / 2**i, 7.0 / 3.0) for i in range(4)]
    want = judge(samples, part.mesh.tolerance, 50.0)
    assert found[0].high - found[0].value == pytest.approx(want.high - want.value)


# --- where there is none --------------------------------------------------------------------


def test_edges_that_are_too_short_give_none() -> None:
    # e3 and e4 are 50 long: 1.4 t is more from 36 mm on
    for thickness, places in ((35.0, 4), (36.0, 0)):
        part, shape, spot = ell(thickness)
        assert len(reading_places(part, shape, spot)) == places
    assert structural_stress(part, shape, passes(lambda p: p), spot, "von_mises", 0) is None


def test_a_held_edge_is_no_path() -> None:
    part, shape, _ = ell()
    held = replace(part, supports=(FixedSupport("s1", "e3"),))
    spot = next(s for s in singular_spots(held, shape) if s.ids[0] == "c4")
    assert read_at(held, shape, spot) == {(30.0, 32.0), (30.0, 35.0)}


def test_a_point_force_has_no_toe() -> None:
    part, shape, spot = ell()
    assert reading_places(part, shape, replace(spot, rate=1.0)) == ()


def test_a_reading_outside_the_part_gives_none() -> None:
    part, shape, spot = ell()

    def outside(p: Floats) -> Floats:
        return np.full((len(p), 3), math.nan)

    assert structural_stress(part, shape, passes(outside), spot, "von_mises", 0) is None
