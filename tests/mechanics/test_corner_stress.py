"""What two tractions say of a corner between them."""

from __future__ import annotations

import math
from dataclasses import replace

import numpy as np
import pytest

from screenapp.mechanics.boundary_chains import boundary_chains
from screenapp.mechanics.corner_stress import known_corners, split_corners
from screenapp.mechanics.recovery import recover, split_corner_nodes
from screenapp.mechanics.solve import solve
from screenapp.model.part import Case, FixedSupport, ShearLoad
from tests.mechanics.structured import Structured, four_sided, rectangle

Floats = np.ndarray


def known(case: Structured, traction: Floats) -> tuple[Floats, Floats, Floats]:
    chains = boundary_chains(case.shape, case.mesh)
    held = np.zeros((len(case.mesh.sides), 2), dtype=bool)
    along, sure = known_corners(chains, traction, held, held[:, 0])
    return along, sure, split_corners(chains, traction, sure)


def of_field(case: Structured, stress: Floats) -> Floats:
    """Tractions of an even stress (3,) on every side, (1, n_sides, 3, 2)."""
    n = boundary_chains(case.shape, case.mesh).normals
    x, y, xy = stress
    return np.stack([x * n[..., 0] + xy * n[..., 1], xy * n[..., 0] + y * n[..., 1]], -1)[None]


@pytest.mark.parametrize("corners", [
    ((0, 0), (40, 0), (40, 30), (0, 30)),
    ((0, 0), (50, 5), (60, 40), (-5, 30)),
])  # fmt: skip
def test_an_even_stress_is_given_back_along_both_sides(
    corners: tuple[tuple[float, float], ...],
) -> None:
    case = four_sided(corners, 4, 3)
    stress = np.array([30.0, -12.0, 7.0])
    along, sure, split = known(case, of_field(case, stress))
    assert sure.sum() == 4
    assert not split.any()
    chains = boundary_chains(case.shape, case.mesh)
    for side in np.flatnonzero(sure):
        for k, t in (
            (0, chains.tangents[side, 2]),
            (1, chains.tangents[chains.following[side], 0]),
        ):
            wanted = stress @ [t[0] ** 2, t[1] ** 2, 2.0 * t[0] * t[1]]
            assert along[0, side, k] == pytest.approx(wanted, abs=1e-9)


def test_a_shear_on_one_side_of_a_square_corner() -> None:
    """±π/2 of the shear along the two sides: the wedge's own solution (derived)."""
    case = rectangle(40.0, 30.0, 4, 3)
    traction = np.zeros((1, len(case.mesh.sides), 3, 2))
    right = case.mesh.sides_on(case.shape.pieces_of("e2"))
    traction[0, right, :, 1] = 10.0  # upwards, forwards
    along, sure, split = known(case, traction)
    assert sure.sum() == 4
    (c2,) = np.flatnonzero(case.mesh.side_nodes[:, 2] == case.mesh.corner_nodes["c2"])
    (c3,) = np.flatnonzero(case.mesh.side_nodes[:, 2] == case.mesh.corner_nodes["c3"])
    assert set(np.flatnonzero(split)) == {c2, c3}
    assert along[0, c2] == pytest.approx([5.0 * math.pi, -5.0 * math.pi])
    assert along[0, c3] == pytest.approx([5.0 * math.pi, -5.0 * math.pi])


def test_flat_corners_are_not_taken_for_known() -> None:
    blunt = four_sided(((0, 0), (40, 0), (60, 30), (20, 60)), 4, 4)
    _, sure, _ = known(blunt, np.zeros((1, len(blunt.mesh.sides), 3, 2)))
    turns = boundary_chains(blunt.shape, blunt.mesh).turn
    assert (turns[sure] >= math.radians(45.0)).all()


def test_beside_such_a_corner_the_meshes_agree() -> None:
    """The elements there are wrong by the same share in each mesh; the recovery is not."""
    found = []
    for n in (8, 16, 32):
        case = rectangle(60.0, 30.0, 2 * n, n)
        part = replace(
            case.part,
            supports=(FixedSupport("s1", "e4"),),
            cases=(Case("k1", "shear", (ShearLoad("l1", "e2", 10.0),)),),
        )
        solution = solve(part, case.shape, case.mesh)
        assert len(split_corner_nodes(part, case.shape, case.mesh, solution)) == 2
        field = recover(part, case.shape, case.mesh, solution)
        bottom = case.mesh.sides_on(case.shape.pieces_of("e1"))
        x = case.mesh.nodes[case.mesh.side_nodes[bottom]][..., 0]
        order = np.argsort(x.ravel())
        along = field.side[0, bottom, :, 0].ravel()[order]
        found.append(np.interp([56.25, 52.5, 48.75], x.ravel()[order], along))  # nodes of each
        assert along[-1] == pytest.approx(5.0 * math.pi)
        # half a side from the corner; the corner's own elements show 5 MPa less in every mesh
        assert along[-2] == pytest.approx(5.0 * math.pi, rel=0.05)
    coarse, middle, fine = found
    assert np.abs(coarse - fine).max() < 0.02 * 5.0 * math.pi
    assert np.abs(middle - fine).max() < 0.005 * 5.0 * math.pi
