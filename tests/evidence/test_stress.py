"""Stress at edges against published and derived figures."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest

from screenapp.mechanics.assembly import assemble
from screenapp.mechanics.constraints import prescribe_nodes
from screenapp.mechanics.elasticity import constitutive_matrix
from screenapp.mechanics.linear_system import solve_system
from screenapp.mechanics.recovery import recover
from screenapp.mechanics.solve import solve
from screenapp.model.part import (
    Case,
    CircleHole,
    Material,
    PressureLoad,
    RollerSupport,
    Wall,
)
from screenapp.model.shape import shape_of
from tests.evidence.table import record
from tests.mechanics.stress_fields import kirsch_displacement, kirsch_stress
from tests.mechanics.structured import (
    Structured,
    elliptic_quarter,
    mesh_from_corners,
    outlined,
)

STEEL = Material("steel", 210_000.0, 0.3, 7850.0)


@pytest.mark.parametrize(("n_around", "hold"), [(16, 0.2), (32, 0.1)])
def test_elliptic_membrane(n_around: int, hold: float) -> None:
    """σy at the inner end of the long axis; rollers on both axes, 10 MPa pulling outside."""
    case = elliptic_quarter(
        (2000.0, 1000.0), (3250.0, 2750.0), n_around, n_around // 2, Wall(100.0, ""), STEEL
    )
    part = replace(
        case.part,
        supports=(RollerSupport("s1", "e1"), RollerSupport("s3", "e3")),
        cases=(Case("k1", "pulled", (PressureLoad("p", "e2", -10.0),)),),
    )
    solution = solve(part, case.shape, case.mesh)
    field = recover(part, case.shape, case.mesh, solution)
    at_d = case.mesh.corner_nodes["c1"]
    found = float(field.nodal[0, at_d, 1])
    error = 100.0 * (found / 92.7 - 1.0)
    record(
        f"elliptic membrane, {n_around} x {n_around // 2} quad9: σy [MPa]",
        "The Standard NAFEMS Benchmarks, LE1 (from memory)",
        92.7,
        found,
        error,
        f"{hold} %",
    )
    assert abs(error) < hold


def wide_plate(n_around: int, n_across: int) -> Structured:
    """A disc of 20 hole diameters round a hole of radius 1, elements growing outwards."""
    part = outlined(((20.0, 0.0), (-20.0, 0.0)), ((0.0, 20.0), (0.0, -20.0)), Wall(1.0, ""), STEEL)
    part = replace(part, holes=(CircleHole("h1", (0.0, 0.0), 2.0),))
    shape = shape_of(part)
    angle = 2.0 * np.pi * np.arange(n_around) / n_around
    radius = 20.0 ** (np.arange(n_across + 1) / n_across)
    points = np.stack([np.outer(f(angle), radius) for f in (np.cos, np.sin)], axis=2)
    at = np.arange(n_around * (n_across + 1)).reshape(n_around, n_across + 1)
    nxt = np.roll(at, -1, axis=0)
    quads = np.stack([at[:, :-1], at[:, 1:], nxt[:, 1:], nxt[:, :-1]], axis=2).reshape(-1, 4)
    return Structured(part, shape, mesh_from_corners(points.reshape(-1, 2), quads, shape))


def test_small_hole_in_a_wide_plate() -> None:
    """3.00 at the crown; Kirsch's displacements are prescribed at the far boundary, W/d = 20."""
    case = wide_plate(32, 24)
    mesh = case.mesh
    outer = np.unique(
        mesh.side_nodes[
            [s for s, p in enumerate(mesh.side_piece) if case.shape.curves[p].loop == 0]
        ]
    )
    moved = kirsch_displacement(mesh.nodes[outer], STEEL.youngs_modulus, STEEL.poissons_ratio)
    elastic = constitutive_matrix(STEEL, "plane stress")
    solution = solve_system(
        assemble(mesh, "quad9", elastic, 1.0),
        prescribe_nodes(outer, moved),
        np.zeros((1, mesh.n_nodes, 2)),
    )
    part = replace(case.part, cases=(Case("k1", "pulled"),))
    field = recover(part, case.shape, mesh, solution)
    rim = mesh.sides_on(case.shape.pieces_of("h1"))
    found = float(field.side[0, rim, :, 0].max())
    error = 100.0 * (found / 3.0 - 1.0)
    record(
        "small hole in a wide plate, 32 x 24 quad9",
        "Kirsch 1898 (from memory)",
        3.0,
        found,
        error,
        "0.5 %",
    )
    assert abs(error) < 0.5
    # the whole rim, not only the crown
    points = mesh.nodes[mesh.side_nodes[rim]].reshape(-1, 2)
    gap = np.abs(field.side[0, rim].reshape(-1, 3) - kirsch_stress(points))
    assert gap.max() < 0.005 * 3.0
