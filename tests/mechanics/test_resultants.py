"""What each load amounts to: against closed forms, and against the nodal forces on a mesh."""

from __future__ import annotations

import math
from dataclasses import replace
from typing import Any

import numpy as np
import pytest

from screenapp.mechanics.equilibrium import resultant
from screenapp.mechanics.loads import nodal_forces
from screenapp.mechanics.resultants import load_resultants, total_of
from screenapp.model.combinations import scaled
from screenapp.model.errors import InvalidPartError, SolvingError
from screenapp.model.part import (
    BearingLoad,
    Case,
    CircleHole,
    ForceLoad,
    GravityLoad,
    LineLoad,
    Load,
    MomentLoad,
    Part,
    PointLoad,
    PressureLoad,
    ShearLoad,
    SpinLoad,
    TemperatureLoad,
    Wall,
    Zone,
)
from screenapp.model.pattern import RowPattern
from screenapp.model.regions import shape_with_zones
from screenapp.model.solution import LoadResultant
from tests.mechanics.structured import full_ring, rectangle as meshed_rectangle, ring_sector
from tests.model.plates import STEEL, loop, plate, rectangle

T = 3.0
"""Wall of `plate` [mm]."""


def of(part: Part, *loads: Load) -> tuple[LoadResultant, ...]:
    case = Case("k", "only", loads)
    part = replace(part, cases=(case,))
    return load_resultants(part, shape_with_zones(part), case)


def one(part: Part, load: Load) -> tuple[float, float, float]:
    (found,) = of(part, load)
    return found.x, found.y, found.moment


def test_pressure_on_a_straight_edge_acts_at_its_middle() -> None:
    (found,) = of(plate(), PressureLoad("p", "e2", 4.0))
    force = 4.0 * T * 50.0
    assert (found.x, found.y) == pytest.approx((-force, 0.0), rel=1e-13)
    assert found.moment == pytest.approx(force * 25.0, rel=1e-13)
    assert found.at == pytest.approx((100.0, 25.0), rel=1e-13)


def test_a_varying_pressure_acts_at_the_middle_of_its_trapezium() -> None:
    """The centroid of a trapezium with sides a, b lies L (a + 2 b) / (3 (a + b)) from a."""
    (found,) = of(plate(), PressureLoad("p", "e2", 1.0, 3.0, 10.0, 40.0))
    force, y = 0.5 * (1.0 + 3.0) * 30.0 * T, 10.0 + 30.0 * 7.0 / 12.0
    assert (found.x, found.moment) == pytest.approx((-force, force * y), rel=1e-13)
    assert found.at == pytest.approx((100.0, y), rel=1e-13)


def test_a_varying_line_load_follows_the_edge_as_it_was_drawn() -> None:
    outline = rectangle(100.0, 50.0)
    backward = loop([c.at for c in reversed(outline.corners)])  # drawn clockwise
    part = replace(plate(backward), supports=())
    (edge,) = [e for e in ("e1", "e2", "e3", "e4") if _spans(part, e, (100.0, 50.0), (100.0, 0.0))]
    (found,) = of(part, LineLoad("q", edge, 0.0, -6.0, end_y=0.0))
    assert found.y == pytest.approx(-6.0 * 50.0 / 2.0)
    (other,) = of(part, LineLoad("q", edge, -6.0, 0.0, end_x=0.0))
    assert other.moment == pytest.approx(
        150.0 * (50.0 - 50.0 / 3.0)
    )  # large where it begins, on top


def _spans(part: Part, edge: str, start: tuple[float, float], end: tuple[float, float]) -> bool:
    ring = part.outline
    assert ring is not None
    i = [e.id for e in ring.edges].index(edge)
    return (ring.corners[i].at, ring.corners[(i + 1) % 4].at) == (start, end)


def test_pressure_on_a_fillet_has_the_force_of_its_chord() -> None:
    """On any curve from A to B the resultant is p t times the chord, turned by 90°."""
    part = plate(rectangle(100.0, 50.0, 10.0))
    (found,) = of(part, PressureLoad("p", "c2", 4.0))
    assert (found.x, found.y) == pytest.approx((-4.0 * T * 10.0, 4.0 * T * 10.0), rel=1e-12)
    assert found.moment == pytest.approx(90.0 * found.y - 10.0 * found.x, rel=1e-12)


def test_shear_on_a_fillet() -> None:
    """Its force is q times the chord, its moment about the centre q r times the length."""
    part = plate(rectangle(100.0, 50.0, 10.0))
    (found,) = of(part, ShearLoad("q", "c2", 2.0))
    assert (found.x, found.y) == pytest.approx((20.0, 20.0), rel=1e-12)
    about_centre = found.moment - (90.0 * found.y - 10.0 * found.x)
    assert about_centre == pytest.approx(2.0 * 10.0 * 10.0 * math.pi / 2.0, rel=1e-12)


def test_pressure_round_a_hole_amounts_to_nothing() -> None:
    (found,) = of(plate(), PressureLoad("p", "h1", 7.0))
    assert (found.x, found.y, found.moment) == (0.0, 0.0, 0.0)


def test_shear_round_a_hole_is_a_couple() -> None:
    (found,) = of(plate(), ShearLoad("q", "h1", 2.0))
    assert (found.x, found.y) == (0.0, 0.0)
    assert found.moment == pytest.approx(-2.0 * 5.0 * 2.0 * math.pi * 5.0, rel=1e-12)
    assert found.at == pytest.approx((50.0, 25.0))


def test_a_moment_is_a_couple_at_its_hole() -> None:
    (found,) = of(plate(), MomentLoad("m", "h1", 900.0))
    assert (found.x, found.y) == (0.0, 0.0)
    assert found.moment == pytest.approx(900.0, rel=1e-12)
    assert found.at == pytest.approx((50.0, 25.0))


@pytest.mark.parametrize("angle", [0.0, 13.0, 90.0, 201.7])
def test_a_pin_gives_its_force_through_the_centre(angle: float) -> None:
    x, y = 500.0 * math.cos(math.radians(angle)), 500.0 * math.sin(math.radians(angle))
    assert one(plate(), BearingLoad("b", "h1", x, y)) == pytest.approx(
        (x, y, 50.0 * y - 25.0 * x), rel=1e-12
    )


def test_a_pin_right_above_the_origin_turns_nothing_to_the_last_figure() -> None:
    """The sum over the rim leaves 1e-10 N·mm of rounding, which would be shown."""
    hole = CircleHole("h1", (0.0, 33.7), 13.3)
    part = plate(loop([(-50.0, 0.0), (50.0, 0.0), (50.0, 60.0), (-50.0, 60.0)]), hole)
    (found,) = of(part, BearingLoad("p", "h1", 0.0, 24_000.0))
    assert found.moment == 0.0
    assert found.y == pytest.approx(24_000.0, rel=1e-13)


def test_a_spread_force_on_part_of_an_edge() -> None:
    found = one(plate(), ForceLoad("f", "e2", 0.0, -80.0, 30.0, 50.0))
    assert found == pytest.approx((0.0, -80.0, -8000.0), rel=1e-13)
    found = one(plate(), ForceLoad("f", "e2", -80.0, 0.0, 30.0, 50.0))
    assert found == pytest.approx((-80.0, 0.0, 3200.0), rel=1e-13)


def test_a_force_at_a_corner() -> None:
    assert one(plate(), PointLoad("f", "c3", 3.0, -4.0)) == (3.0, -4.0, 100.0 * -4.0 - 50.0 * 3.0)


def test_a_pins_force_on_a_row_of_holes_acts_at_its_middle() -> None:
    row = CircleHole("h1", (20.0, 25.0), 8.0, RowPattern(4, 20.0, 0.0))
    (found,) = of(plate(None, row), BearingLoad("b", "h1", 0.0, -400.0))
    assert (found.x, found.y, found.moment) == pytest.approx((0.0, -400.0, -400.0 * 50.0))


def test_weight_acts_at_the_centre_of_mass() -> None:
    """A rectangle less a round hole, with a disc of double wall round another point."""
    disc = Zone(CircleHole("z1", (20.0, 30.0), 16.0), 2.0 * T)
    part = replace(plate(None, CircleHole("h1", (70.0, 25.0), 10.0)), zones=(disc,))
    g = 9.81
    (found,) = of(part, GravityLoad("g", 0.0, -g))
    pieces = ((5000.0, 50.0), (-25.0 * math.pi, 70.0), (64.0 * math.pi, 20.0))
    rho = 7850.0 * 1e-9 * T  # kg/mm²
    assert found.y == pytest.approx(-g * rho * sum(a for a, _ in pieces), rel=1e-12)
    assert found.moment == pytest.approx(-g * rho * sum(a * x for a, x in pieces), rel=1e-12)
    assert found.x == 0.0


def test_weight_of_a_half_disc_acts_at_its_centroid() -> None:
    """4 r / (3 π) from its straight edge."""
    part = plate(loop([(-30.0, 0.0), (30.0, 0.0)], through={1: (0.0, 30.0)}))
    (found,) = of(replace(part, holes=(), supports=()), GravityLoad("g", 2.0, 0.0))
    mass = 7850.0 * 1e-9 * T * 0.5 * math.pi * 900.0
    assert found.x == pytest.approx(2.0 * mass, rel=1e-12)
    assert found.at is not None
    assert found.at[1] == pytest.approx(4.0 * 30.0 / (3.0 * math.pi), rel=1e-12)


def test_a_spin_pulls_through_its_axis_and_the_centre_of_mass() -> None:
    """m ω² r, 5 mm aside of the middle of a plate 100 x 50 with its hole in the middle."""
    (found,) = of(plate(), SpinLoad("s", 50.0, 20.0, 3000.0, 1.5))
    mass = 7850.0 * 1e-9 * T * (5000.0 - 25.0 * math.pi)
    force = 1.5 * mass * (2.0 * math.pi * 50.0) ** 2 * 5e-3
    assert (found.x, found.y) == pytest.approx((0.0, force), rel=1e-11, abs=1e-9 * force)
    assert found.moment == pytest.approx(50.0 * force, rel=1e-11)
    assert one(plate(), SpinLoad("s", 50.0, 25.0, 3000.0))[:2] == (0.0, 0.0)


def test_a_change_of_temperature_is_no_force() -> None:
    assert of(plate(), TemperatureLoad("t", 40.0)) == (LoadResultant("t", 0.0, 0.0, 0.0, None),)


def test_a_case_adds_up_its_loads() -> None:
    loads = of(plate(), PointLoad("a", "c2", 0.0, -10.0), PointLoad("b", "c3", 0.0, -30.0),
               PressureLoad("p", "h1", 7.0), TemperatureLoad("t", 40.0),
               PointLoad("d", "c4", 0.0, -40.0))  # fmt: skip
    total = total_of("k", loads)
    assert (total.x, total.y, total.moment) == pytest.approx((0.0, -80.0, -4000.0))
    assert total.at is not None
    assert total.at[0] == pytest.approx(50.0)
    couple = total_of(
        "k", of(plate(), PointLoad("a", "c2", 0.0, -10.0), PointLoad("b", "c1", 0.0, 10.0))
    )
    assert (couple.x, couple.y, couple.moment) == pytest.approx((0.0, 0.0, -1000.0))
    assert couple.at == pytest.approx((50.0, 0.0))
    assert total_of("k", ()) == LoadResultant("k", 0.0, 0.0, 0.0, None)


@pytest.mark.parametrize(
    ("load", "words"),
    [
        (BearingLoad("b", "e1", 1.0, 0.0), "round hole"),
        (PointLoad("b", "e1", 1.0, 0.0), "sharp corner"),
        (PressureLoad("b", "c1", 1.0), "edge"),
    ],
)
def test_what_stands_on_no_fit_place_is_refused(load: Load, words: str) -> None:
    with pytest.raises(InvalidPartError) as told:
        of(plate(), load)
    assert words in told.value.mend


def test_weight_needs_a_material() -> None:
    with pytest.raises(SolvingError):
        of(replace(plate(), materials=()), GravityLoad("g", 0.0, -9.81))


RING: tuple[Load, ...] = (
    PressureLoad("l", "e1", 3.0),
    ShearLoad("l", "h1", 2.0),
    LineLoad("l", "e1", 2.0, -1.0, 0.0, 5.0),
    ForceLoad("l", "h1", 70.0, -30.0),
    BearingLoad("l", "h1", 70.0, -30.0),
    MomentLoad("l", "h1", 500.0),
    GravityLoad("l", 3.0, -9.81),
    SpinLoad("l", 4.0, 3.0, 3000.0),
)


@pytest.mark.parametrize("load", RING, ids=lambda load: type(load).__name__)
@pytest.mark.parametrize("factor", [1.0, -2.5])
def test_the_nodal_forces_amount_to_the_same(load: Load, factor: float) -> None:
    """On a mesh whose sides follow the arcs as parabolas, to (side/radius)⁴ / 200 or so."""
    case = full_ring(5.0, 9.0, 24, 2, Wall(2.0, "steel"))
    part = replace(case.part, materials=(STEEL,))
    acting = Case("k", "only", (scaled(load, factor),))
    forces = nodal_forces(part, case.shape, case.mesh, acting)
    total = resultant(case.mesh.nodes, forces)
    (found,) = load_resultants(part, case.shape, acting)
    size = float(np.hypot(*forces.T).sum())
    assert abs(found.x - total[0]) < 1e-4 * size
    assert abs(found.y - total[1]) < 1e-4 * size
    assert abs(found.moment - total[2]) < 1e-4 * size * 9.0


STRAIGHT: tuple[Any, ...] = (
    PressureLoad("l", "e2", 3.0, -1.0),
    ShearLoad("l", "e3", 2.0),
    LineLoad("l", "e1", 2.0, -1.0, 0.0, 5.0),
    ForceLoad("l", "e2", 70.0, -30.0),
    PointLoad("l", "c3", 70.0, -30.0),
    GravityLoad("l", 3.0, -9.81),
    SpinLoad("l", 4.0, 3.0, 3000.0),
)


@pytest.mark.parametrize("load", STRAIGHT, ids=lambda load: type(load).__name__)
def test_on_straight_edges_the_nodal_forces_amount_to_exactly_the_same(load: Load) -> None:
    case = meshed_rectangle(8.0, 3.0, 4, 2, Wall(2.0, "steel"))
    part = replace(case.part, materials=(STEEL,))
    acting = Case("k", "only", (load,))
    total = resultant(case.mesh.nodes, nodal_forces(part, case.shape, case.mesh, acting))
    (found,) = load_resultants(part, case.shape, acting)
    assert (found.x, found.y, found.moment) == pytest.approx(tuple(total), rel=1e-11, abs=1e-11)


def test_pressure_on_an_arc_of_a_sector() -> None:
    case = ring_sector(5.0, 9.0, 70.0, 7, 2, Wall(2.0, ""))
    (found,) = load_resultants(
        case.part, case.shape, Case("k", "only", (PressureLoad("p", "e2", 3.0),))
    )
    end = 9.0 * np.array([math.cos(math.radians(70)), math.sin(math.radians(70))])
    chord = end - [9.0, 0.0]
    assert (found.x, found.y) == pytest.approx((-6.0 * chord[1], 6.0 * chord[0]), rel=1e-12)
    assert abs(found.moment) < 1e-9  # every bit of it points at the origin


@pytest.mark.parametrize("patch", [None, 6.0])
def test_a_force_at_a_place_of_an_edge(patch: float | None) -> None:
    (found,) = of(plate(), PointLoad("f", "e3", 30.0, -40.0, 20.0, patch))
    assert (found.x, found.y) == pytest.approx((30.0, -40.0))
    assert found.moment == pytest.approx(80.0 * -40.0 - 50.0 * 30.0)
    assert found.at == pytest.approx((80.0, 50.0))
