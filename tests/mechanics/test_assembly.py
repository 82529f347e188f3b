"""Assembly: symmetric, independent of chunks, and the same forces two ways."""

from __future__ import annotations

from typing import get_args

import numpy as np
import pytest

from screenapp.mechanics import assembly
from screenapp.mechanics.assembly import assemble, condense_loads, internal_forces, spread
from screenapp.mechanics.elasticity import constitutive_matrix
from screenapp.model.errors import Cancelled
from screenapp.model.part import ElementName
from screenapp.model.progress import Progress
from tests.mechanics.structured import STEEL, rectangle, ring_sector, shaken

ELEMENTS: tuple[ElementName, ...] = get_args(ElementName)
ELASTIC = constitutive_matrix(STEEL, "plane stress")
CASE = ring_sector(10.0, 25.0, 80.0, 6, 4)
MESH = shaken(CASE.mesh, CASE.shape, 0.2)


@pytest.mark.parametrize("element", ELEMENTS)
def test_the_whole_matrix_is_symmetric_and_its_energy_is_that_of_the_elements(
    element: ElementName,
) -> None:
    """A uniform stretch stores ½ ε D ε times the volume, whatever the mesh."""
    system = assemble(MESH, element, ELASTIC, 2.0)
    matrix = system.stiffness
    assert abs(matrix - matrix.T).max() == 0.0
    strain = np.array([1e-3, -5e-4, 4e-4])
    x, y = MESH.nodes[system.carried].T
    u = np.stack([strain[0] * x + strain[2] * y, strain[1] * y], axis=1).ravel()
    area = np.sum(MESH.element_sizes**2)
    if element in ("quad8", "quad9"):  # curved sides: the sector's own area but for h⁴
        area = np.pi * 80.0 / 360.0 * (25.0**2 - 10.0**2)
    wanted = 0.5 * strain @ ELASTIC @ strain * 2.0 * area
    assert 0.5 * u @ (matrix @ u) == pytest.approx(wanted, rel=1e-4)


@pytest.mark.parametrize("element", ELEMENTS)
def test_internal_forces_are_the_matrix_times_the_displacements(element: ElementName) -> None:
    system = assemble(MESH, element, ELASTIC, 2.0)
    rng = np.random.default_rng(3)
    terms = [rng.normal(size=(2, 2 * len(system.carried))) * size for size in (1.0, 1e-6)]
    found = internal_forces(system, terms)
    wanted = (system.stiffness @ (terms[0] + terms[1]).T).T
    assert np.abs(found - wanted).max() < 1e-12 * np.abs(wanted).max()


def test_internal_forces_lose_no_digits_to_rigid_motion() -> None:
    """A stretch of 1e-9 beside a turn and a shift of order 1 (each exact in binary): the plain
    product is wrong by the rounding of the large numbers."""
    system = assemble(MESH, "quad9", ELASTIC, 2.0)
    x, y = MESH.nodes[system.carried].T
    stretch = 1e-9 * np.stack([x * y, x - y**2], axis=1).ravel()[None]
    shift = np.tile([8.0, 4.0], len(x))[None]
    turn = np.stack([-0.5 * y, 0.5 * x], axis=1).ravel()[None]
    wanted = internal_forces(system, [stretch])
    size = np.abs(wanted).max()
    found = np.abs(internal_forces(system, [shift, turn, stretch]) - wanted).max()
    plain = np.abs((system.stiffness @ (shift + turn + stretch).T).T - wanted).max()
    assert found < 2e-8 * size
    assert plain > 10.0 * found


def test_chunks_and_thickness_do_not_change_the_sum(monkeypatch: pytest.MonkeyPatch) -> None:
    whole = assemble(MESH, "quad9", ELASTIC, 2.0)
    monkeypatch.setattr(assembly, "CHUNK", 5)
    pieces = assemble(MESH, "quad9", ELASTIC, np.full(MESH.n_elements, 2.0))
    assert abs(whole.stiffness - pieces.stiffness).max() <= 1e-12 * abs(whole.stiffness).max()
    assert pieces.recovery is not None
    assert len(pieces.recovery) == MESH.n_elements


def test_cancelling_stops_the_assembly() -> None:
    with pytest.raises(Cancelled):
        assemble(MESH, "quad9", ELASTIC, 2.0, Progress(cancelled=lambda: True))


def test_condensed_loads_keep_their_resultant() -> None:
    system = assemble(MESH, "quad9", ELASTIC, 2.0)
    forces = np.random.default_rng(4).normal(size=(2, MESH.n_nodes, 2))
    loads = condense_loads(system, forces).reshape(2, -1, 2)
    assert loads.sum(axis=1) == pytest.approx(forces.sum(axis=1))
    at = MESH.nodes[system.carried]
    turned = (at[:, 0] * loads[..., 1] - at[:, 1] * loads[..., 0]).sum(axis=1)
    whole = MESH.nodes[:, 0] * forces[..., 1] - MESH.nodes[:, 1] * forces[..., 0]
    assert turned == pytest.approx(whole.sum(axis=1))


@pytest.mark.parametrize("element", ELEMENTS)
def test_a_linear_field_is_spread_to_every_node(element: ElementName) -> None:
    """On straight sides all nodes of the mesh record must follow, also those not carried."""
    flat = rectangle(7.0, 3.0, 4, 3)
    mesh = shaken(flat.mesh, flat.shape, 0.2)
    system = assemble(mesh, element, ELASTIC, 1.0)
    field = mesh.nodes @ np.array([[2e-3, 1e-3], [-3e-3, 4e-3]]) + [0.5, 0.2]
    moved, modes = spread(
        system, field[system.carried].reshape(1, -1), np.zeros((1, mesh.n_nodes, 2))
    )
    assert moved[0] == pytest.approx(field)
    if element == "quad4-incompatible":
        assert modes is not None
        assert modes.shape == (1, mesh.n_elements, 4)
        assert np.abs(modes).max() < 1e-12
    else:
        assert modes is None
