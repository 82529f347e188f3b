"""Loads: resultants, moments, consistency with the element, tractions."""

from __future__ import annotations

import math
from dataclasses import replace
from typing import get_args

import numpy as np
import pytest

from screenapp.mechanics.body_forces import body_force
from screenapp.mechanics.equilibrium import resultant
from screenapp.mechanics.loads import nodal_forces, side_tractions
from screenapp.model.errors import InvalidPartError, SolvingError
from screenapp.model.part import (
    BearingLoad,
    Case,
    ElementName,
    ForceLoad,
    GravityLoad,
    LineLoad,
    Load,
    MeshWishes,
    PointLoad,
    PressureLoad,
    ShearLoad,
    Wall,
)
from tests.mechanics.structured import (
    Floats,
    Structured,
    full_ring,
    rectangle,
    ring_sector,
    shaken,
)

ELEMENTS: tuple[ElementName, ...] = get_args(ElementName)
THICK = 2.5


def _forces(case: Structured, load: Load, element: ElementName = "quad9") -> Floats:
    part = replace(case.part, mesh=MeshWishes(element))
    return nodal_forces(part, case.shape, case.mesh, Case("k", "only", (load,)))


def _tractions(case: Structured, load: Load) -> Floats:
    return side_tractions(case.part, case.shape, case.mesh, Case("k", "only", (load,)))


@pytest.mark.parametrize("element", ELEMENTS)
def test_pressure_on_a_straight_edge(element: ElementName) -> None:
    """Pushes into the material with pressure x thickness x length, at the edge's middle."""
    case = rectangle(8.0, 3.0, 4, 2, Wall(THICK, ""))
    total = resultant(case.mesh.nodes, _forces(case, PressureLoad("p", "e2", 4.0), element))
    force = 4.0 * THICK * 3.0
    assert total == pytest.approx([-force, 0.0, force * 1.5])


def test_consistent_shares_of_a_quadratic_side_are_1_4_1() -> None:
    case = rectangle(6.0, 3.0, 1, 1)
    forces = _forces(case, LineLoad("q", "e3", 0.0, -2.0))
    start, middle, end = case.mesh.side_nodes[case.mesh.side_piece == 2][0]
    assert forces[[start, middle, end], 1] == pytest.approx([-2.0, -8.0, -2.0])
    assert _forces(case, LineLoad("q", "e3", 0.0, -2.0), "quad4")[
        [start, middle, end], 1
    ] == pytest.approx([-6.0, 0.0, -6.0])


@pytest.mark.parametrize("element", ELEMENTS)
def test_pressure_in_a_hole_balances_itself(element: ElementName) -> None:
    case = full_ring(5.0, 9.0, 12, 2, Wall(THICK, ""))
    forces = _forces(case, PressureLoad("p", "h1", 3.0), element)
    total = resultant(case.mesh.nodes, forces)
    assert np.abs(total[:2]).max() < 1e-11 * np.abs(forces).sum()
    assert abs(total[2]) < 1e-10 * np.abs(forces).sum()
    rim = np.unique(case.mesh.side_nodes[case.mesh.sides_on(case.shape.pieces_of("h1"))])
    assert (np.einsum("nd,nd->n", forces[rim], case.mesh.nodes[rim]) >= 0.0).all()  # outwards


def test_pressure_on_an_arc_has_the_force_of_its_chord() -> None:
    """On any curve from A to B the resultant is p t times the chord, turned by 90°."""
    case = ring_sector(5.0, 9.0, 70.0, 7, 2, Wall(THICK, ""))
    total = resultant(case.mesh.nodes, _forces(case, PressureLoad("p", "e2", 3.0)))
    a, b = (
        np.array([9.0, 0.0]),
        9.0 * np.array([math.cos(math.radians(70)), math.sin(math.radians(70))]),
    )
    chord = b - a
    assert total[:2] == pytest.approx(3.0 * THICK * np.array([-chord[1], chord[0]]))


def test_shear_follows_the_boundary_with_the_material_on_its_left() -> None:
    ring = full_ring(5.0, 9.0, 24, 2)
    outer = _forces(ring, ShearLoad("s", "e1", 2.0)) + _forces(ring, ShearLoad("s", "e2", 2.0))
    inner = _forces(ring, ShearLoad("s", "h1", 2.0))
    assert resultant(ring.mesh.nodes, outer)[2] == pytest.approx(
        2.0 * 2 * math.pi * 9.0 * 9.0, rel=1e-4
    )
    assert resultant(ring.mesh.nodes, inner)[2] == pytest.approx(
        -2.0 * 2 * math.pi * 5.0 * 5.0, rel=1e-4
    )


@pytest.mark.parametrize("element", ELEMENTS)
@pytest.mark.parametrize("feature", ["e1", "h1"])
def test_a_spread_force_is_exactly_its_total(element: ElementName, feature: str) -> None:
    ring = full_ring(5.0, 9.0, 12, 2)
    total = resultant(ring.mesh.nodes, _forces(ring, ForceLoad("f", feature, 70.0, -30.0), element))
    assert total[:2] == pytest.approx([70.0, -30.0], rel=1e-13)


@pytest.mark.parametrize("element", ELEMENTS)
@pytest.mark.parametrize("angle", [0.0, 90.0, 13.0, 201.7])
def test_a_pin_gives_exactly_its_force_through_the_centre(
    element: ElementName, angle: float
) -> None:
    case = full_ring(5.0, 9.0, 20, 2, Wall(THICK, ""))
    force = 1000.0 * np.array([math.cos(math.radians(angle)), math.sin(math.radians(angle))])
    forces = _forces(case, BearingLoad("b", "h1", *force), element)
    total = resultant(case.mesh.nodes, forces)
    assert total[:2] == pytest.approx(force, rel=1e-12, abs=1e-9)
    assert abs(total[2]) < 1e-9 * 1000.0 * 5.0


def test_a_pins_pressure_is_a_cosine_over_half_the_rim() -> None:
    """p₀ = 2 F / (π r t), on the side that the force points to, radial."""
    case = full_ring(5.0, 9.0, 96, 2, Wall(THICK, ""))
    found = _tractions(case, BearingLoad("b", "h1", 0.0, 900.0))
    at = case.mesh.nodes[case.mesh.side_nodes]
    rim = case.mesh.sides_on(case.shape.pieces_of("h1"))
    peak = 2.0 * 900.0 / (math.pi * 5.0 * THICK)
    radial = at[rim] / 5.0
    wanted = peak * np.maximum(radial[..., 1:], 0.0) * radial
    assert np.abs(found[rim] - wanted).max() < 1e-3 * peak
    assert not found[np.setdiff1d(np.arange(len(found)), rim)].any()


def test_a_point_load_stands_on_its_corner_only() -> None:
    case = rectangle(8.0, 3.0, 4, 2)
    forces = _forces(case, PointLoad("f", "c3", 5.0, 6.0))
    assert forces[case.mesh.corner_nodes["c3"]].tolist() == [5.0, 6.0]
    assert np.count_nonzero(forces) == 2
    assert not _tractions(case, PointLoad("f", "c3", 5.0, 6.0)).any()


@pytest.mark.parametrize("element", ELEMENTS)
def test_weight_is_mass_times_acceleration(element: ElementName) -> None:
    """2.5 mm of steel, 8 x 3 mm: 7850 kg/m³ x 60e-9 m³ x 9.81 m/s² = 4.62e-3 N."""
    case = rectangle(8.0, 3.0, 4, 2, Wall(THICK, ""))
    case = replace(case, mesh=shaken(case.mesh, case.shape, 0.2))
    load = GravityLoad("g", 0.0, -9.81)
    total = resultant(case.mesh.nodes, _forces(case, load, element))
    weight = 7850.0 * (8.0 * 3.0 * THICK * 1e-9) * 9.81
    assert total == pytest.approx([0.0, -weight, -weight * 4.0])
    assert body_force(case.part, Case("k", "", (load, load))) == pytest.approx(
        [0.0, -2.0 * 9.81 * 7850.0 * 1e-9]
    )


def test_weight_without_a_material_is_refused() -> None:
    case = rectangle(8.0, 3.0, 4, 2)
    bare = replace(case.part, materials=())
    with pytest.raises(SolvingError, match="choose a material"):
        body_force(bare, Case("k", "", (GravityLoad("g", 0.0, -9.81),)))


@pytest.mark.parametrize(
    "load",
    [
        PressureLoad("p", "e2", 4.0),
        ShearLoad("s", "e4", 3.0),
        LineLoad("q", "e3", 1.0, -2.0),
        ForceLoad("f", "e1", 80.0, 10.0),
    ],
)
def test_tractions_add_up_to_the_nodal_forces(load: Load) -> None:
    """Simpson's rule over the sides of a finely divided sector, times the thickness."""
    case = ring_sector(5.0, 9.0, 70.0, 24, 8, Wall(THICK, ""))
    traction = _tractions(case, load)
    at = case.mesh.nodes[case.mesh.side_nodes]
    length = np.array(
        [
            case.shape.curves[piece].curve.length * (t[1] - t[0])
            for piece, t in zip(case.mesh.side_piece, case.mesh.side_t, strict=True)
        ]
    )
    share = length[:, None] * np.array([1.0, 4.0, 1.0]) / 6.0 * THICK
    mine = resultant(at.reshape(-1, 2), (traction * share[..., None]).reshape(-1, 2))
    wanted = resultant(case.mesh.nodes, _forces(case, load))
    assert mine == pytest.approx(wanted, rel=1e-5, abs=1e-6 * np.abs(wanted).max())


def test_loads_add_up_in_tractions() -> None:
    case = rectangle(8.0, 3.0, 4, 2, Wall(THICK, ""))
    loads = (PressureLoad("p", "e2", 4.0), ShearLoad("s", "e2", 5.0), GravityLoad("g", 0, -9.81))
    found = side_tractions(case.part, case.shape, case.mesh, Case("k", "", loads))
    on = case.mesh.sides_on(case.shape.pieces_of("e2"))
    assert found[on].reshape(-1, 2) == pytest.approx(np.tile([-4.0, 5.0 / THICK], (6, 1)))


@pytest.mark.parametrize(
    ("load", "mend"),
    [
        (PressureLoad("p", "nowhere", 1.0), "edge, a fillet or a hole"),
        (PointLoad("p", "e1", 1.0, 0.0), "sharp corner"),
        (BearingLoad("p", "e1", 1.0, 0.0), "round hole"),
    ],
)
def test_misplaced_loads_are_named(load: Load, mend: str) -> None:
    with pytest.raises(InvalidPartError, match=mend) as caught:
        _forces(rectangle(8.0, 3.0, 4, 2), load)
    assert caught.value.faults[0].ids[0] == "p"


def test_a_pin_of_no_force_gives_none() -> None:
    assert not _forces(full_ring(5.0, 9.0, 12, 2), BearingLoad("b", "h1", 0.0, 0.0)).any()
