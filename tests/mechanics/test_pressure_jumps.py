"""Beside the end of a pressure the edge's stress is what the edge farther off says it is."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest

from screenapp.mechanics.boundary_chains import boundary_chains
from screenapp.mechanics.corner_stress import pressure_jumps
from screenapp.mechanics.edge_fit import beside_jumps, sample_places
from screenapp.mechanics.loads import nodal_forces, point_node
from screenapp.model.errors import InvalidPartError
from screenapp.model.part import Case, PointLoad
from tests.mechanics.structured import rectangle


@pytest.mark.parametrize("per_side", [1, 2])
def test_a_parabola_on_either_side_is_carried_up_to_the_jump(per_side: int) -> None:
    case = rectangle(12.0, 3.0, 12, 2)
    chains = boundary_chains(case.shape, case.mesh)
    bottom = np.flatnonzero(case.mesh.side_piece == 0)
    jumps = np.zeros(len(case.mesh.sides), dtype=bool)
    jumps[bottom[5]] = True  # at x = 6
    joined = chains.smooth & ~jumps
    x = case.mesh.nodes[case.mesh.side_nodes[:, 1], 0][:, None]
    x = x + 0.5 * sample_places(per_side)
    right = np.where(x < 6.0, 1.0 + x, 30.0 - 2.0 * x)
    if per_side == 2:
        right = right + np.where(x < 6.0, 0.1, -0.2) * x**2
    wrong = right.copy()
    wrong[bottom[5]] += 7.0
    wrong[bottom[6]] -= 3.0
    found = beside_jumps(case.mesh, chains, joined, jumps, wrong[None])[0]
    assert found[bottom] == pytest.approx(right[bottom], abs=1e-9)


def test_a_jump_of_shear_alone_or_at_a_corner_is_none() -> None:
    case = rectangle(12.0, 3.0, 12, 2)
    chains = boundary_chains(case.shape, case.mesh)
    held = np.zeros((len(case.mesh.sides), 2), dtype=bool)
    bottom = np.flatnonzero(case.mesh.side_piece == 0)
    traction = np.zeros((1, len(case.mesh.sides), 3, 2))
    traction[:, bottom[:6], :, 0] = 5.0
    assert not pressure_jumps(chains, traction, held).any()
    traction[:, bottom[:6], :, 1] = 5.0
    found = np.flatnonzero(pressure_jumps(chains, traction, held))
    assert list(found) == [bottom[5]]  # not at the corner where the pressure begins


def test_a_force_at_a_place_of_an_edge_acts_on_the_node_there() -> None:
    case = rectangle(12.0, 3.0, 12, 2)
    load = PointLoad("f", "e3", 3.0, -4.0, 5.0)  # e3 runs from x = 12
    node = point_node(case.part, case.shape, case.mesh, load)
    assert case.mesh.nodes[node] == pytest.approx([7.0, 3.0])
    forces = nodal_forces(case.part, case.shape, case.mesh, Case("k", "only", (load,)))
    assert forces[node] == pytest.approx([3.0, -4.0])
    assert np.count_nonzero(forces) == 2
    with pytest.raises(InvalidPartError, match="cannot carry it"):
        point_node(case.part, case.shape, case.mesh, replace(load, along=5.3))
