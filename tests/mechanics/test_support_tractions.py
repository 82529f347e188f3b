"""Tractions under supports, from the reactions alone, against closed forms."""

from __future__ import annotations

import math
from dataclasses import replace

import numpy as np
import pytest

from screenapp.mechanics.boundary_chains import boundary_chains
from screenapp.mechanics.constraints import held_sides
from screenapp.mechanics.recovery import recover
from screenapp.mechanics.solve import solve
from screenapp.mechanics.support_tractions import field_traction, support_tractions
from screenapp.model.part import (
    Case,
    ElementName,
    FixedSupport,
    LineLoad,
    Load,
    MeshWishes,
    Part,
    PressureLoad,
    RollerSupport,
    Support,
    Wall,
)
from screenapp.model.solution import Solution
from tests.mechanics.structured import STEEL, Structured, full_ring, rectangle, shaken

ELEMENTS: tuple[ElementName, ...] = ("quad4", "quad4-incompatible", "quad8", "quad9")
THICKNESS = 2.5
WALL = Wall(THICKNESS, "steel")
Floats = np.ndarray


def solved(
    case: Structured, supports: tuple[Support, ...], *loads: Load, element: ElementName = "quad9"
) -> tuple[Part, Solution]:
    part = replace(
        case.part,
        supports=supports,
        cases=(Case("k1", "load", loads),),
        mesh=MeshWishes(element=element),
    )
    return part, solve(part, case.shape, case.mesh)


def tractions(
    case: Structured, part: Part, solution: Solution, inside: Floats | None = None
) -> Floats:
    """Of the only case, (n_sides, 3, 2); corners between held sides take what is `inside`."""
    sides = len(case.mesh.sides)
    if inside is None:
        inside = np.zeros((sides, 3, 2))
    assert solution.support_forces is not None
    return support_tractions(
        case.mesh,
        boundary_chains(case.shape, case.mesh),
        held_sides(part, case.shape, case.mesh),
        solution.support_forces,
        np.full(sides, THICKNESS),
        inside[None],
        solution.element.startswith("quad4"),
    )[0]


def on(case: Structured, feature: str) -> Floats:
    return case.mesh.sides_on(case.shape.pieces_of(feature))


def total(case: Structured, traction: Floats) -> Floats:
    """Force of a traction by Simpson's rule on every side, exact for straight sides [N]."""
    ends = case.mesh.nodes[case.mesh.side_nodes]
    length = np.hypot(*(ends[:, 2] - ends[:, 0]).T)
    mean = (traction[:, 0] + 4.0 * traction[:, 1] + traction[:, 2]) / 6.0
    return THICKNESS * (length[:, None] * mean).sum(axis=0)


@pytest.mark.parametrize("element", ELEMENTS)
def test_a_pulled_bar_between_rollers_and_without_poissons_ratio(element: ElementName) -> None:
    for material in (STEEL, replace(STEEL, poissons_ratio=0.0)):
        bar = rectangle(40.0, 10.0, 7, 3, WALL, material)
        bar = replace(bar, mesh=shaken(bar.mesh, bar.shape, 0.2))
        supports: tuple[Support, ...] = (RollerSupport("s1", "e4"), RollerSupport("s2", "e1"))
        if material.poissons_ratio == 0.0:
            supports = (FixedSupport("s1", "e4"),)
        pull = LineLoad("l1", "e2", 30.0 * THICKNESS, 0.0)  # 30 MPa
        part, solution = solved(bar, supports, pull, element=element)
        inside = np.zeros((len(bar.mesh.sides), 3, 2))
        inside[on(bar, "e4")] = -30.0, 0.0
        found = tractions(bar, part, solution, inside)
        assert found[on(bar, "e4")] == pytest.approx(
            np.tile([-30.0, 0.0], (len(on(bar, "e4")), 3, 1)), abs=1e-7
        )
        # the roller below gives nothing, free edges have none
        assert np.abs(np.delete(found, on(bar, "e4"), axis=0)).max() < 1e-7


def test_a_block_squeezed_between_four_sliding_faces() -> None:
    # hydrostatic: p from the face that is pressed, ν p from what cannot widen (Hooke, derived)
    block = rectangle(20.0, 10.0, 4, 3, WALL)
    supports = tuple(RollerSupport(f"s{i}", e) for i, e in enumerate(("e4", "e1", "e3")))
    part, solution = solved(block, supports, PressureLoad("l1", "e2", 50.0))
    recovered = recover(part, block.shape, block.mesh, solution).side[0]
    for feature in ("e1", "e3", "e4"):
        stress = recovered[on(block, feature)]
        want = np.broadcast_to([-50.0, -0.3 * 50.0, 0.0], stress.shape)
        assert stress == pytest.approx(want, abs=1e-6)


@pytest.mark.parametrize("n_around", [24, 48])
def test_a_ring_with_a_fixed_rim_under_inner_pressure(n_around: int) -> None:
    # u = A r + B / r with u(b) = 0 and σr(a) = -p (Lamé; derived for the fixed rim)
    a, b, p, nu = 10.0, 20.0, 40.0, STEEL.poissons_ratio
    # σr ∝ (1 + ν) A - (1 - ν) B / r², B = -A b²
    at = [(1 + nu) + (1 - nu) * b * b / r**2 for r in (a, b)]
    at_rim = -p * at[1] / at[0]
    ring = full_ring(a, b, n_around, n_around // 4, WALL)
    part, solution = solved(
        ring, (FixedSupport("s1", "e1"), FixedSupport("s2", "e2")), PressureLoad("l1", "h1", p)
    )
    found = tractions(ring, part, solution)
    rim = np.concatenate([on(ring, "e1"), on(ring, "e2")])
    outward = ring.mesh.nodes[ring.mesh.side_nodes[rim]] / b
    along = (found[rim] * outward).sum(axis=-1)
    across = found[rim][..., 0] * outward[..., 1] - found[rim][..., 1] * outward[..., 0]
    error = np.abs(along / at_rim - 1.0).max()
    assert error < 0.02 * (24 / n_around) ** 2
    assert np.abs(across).max() < 0.02 * (24 / n_around) ** 2 * abs(at_rim)


@pytest.mark.parametrize("element", ELEMENTS)
def test_the_force_of_the_traction_is_the_reaction(element: ElementName) -> None:
    # a cantilever that is bent: its fixed end has no finite stress at the corners
    beam = rectangle(50.0, 10.0, 12, 6, WALL)
    part, solution = solved(
        beam, (FixedSupport("s1", "e4"),), LineLoad("l1", "e2", 3.0, -5.0), element=element
    )
    found = tractions(beam, part, solution)
    (reaction,) = solution.reactions[0]
    assert total(beam, found) == pytest.approx([reaction.x, reaction.y], rel=1e-9)
    assert [reaction.x, reaction.y] == pytest.approx([-30.0, 50.0], rel=1e-8)
    # and its moment about the middle of the end: 30 * 0 and 50 N at 50 mm
    ends = beam.mesh.nodes[beam.mesh.side_nodes]
    arm = ends[..., 1] - 5.0
    share = -(found[..., 0] * arm)
    length = np.hypot(*(ends[:, 2] - ends[:, 0]).T)
    moment = THICKNESS * (length * (share @ [1.0, 4.0, 1.0]) / 6.0).sum()
    # a product of two linear functions is beyond two points, not beyond Simpson's three; the
    # nine-node element's traction is quadratic, whose product Simpson overlooks a little
    assert moment == pytest.approx(50.0 * 50.0, rel=1e-8 if element.startswith("quad4") else 0.01)


def test_nothing_held_nothing_found() -> None:
    plate = rectangle(10.0, 10.0, 2, 2, WALL)
    sides = len(plate.mesh.sides)
    found = support_tractions(
        plate.mesh,
        boundary_chains(plate.shape, plate.mesh),
        np.zeros((sides, 2), dtype=bool),
        np.ones((3, plate.mesh.n_nodes, 2)),
        np.full(sides, THICKNESS),
        np.ones((3, sides, 3, 2)),
        False,
    )
    assert found.shape == (3, sides, 3, 2)
    assert not found.any()


def test_traction_of_a_stress() -> None:
    # σ·n on a plane at 30° under uniaxial tension: cos² and -sin cos of it
    n = np.array([math.cos(math.pi / 6), math.sin(math.pi / 6)])
    t = field_traction(n, np.array([80.0, 0.0, 0.0]))
    assert t @ n == pytest.approx(60.0)
    assert t @ np.array([-n[1], n[0]]) == pytest.approx(-80.0 * math.sqrt(3.0) / 4.0)
