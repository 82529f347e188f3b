"""Meshes of parts with zones: conforming over every interface, exact in area zone by zone."""

from __future__ import annotations

import numpy as np
import pytest

from screenapp.meshing.checks import connection_faults, measure_quality
from screenapp.meshing.making import make_mesh
from screenapp.meshing.sizing import estimate_elements, initial_sizes
from screenapp.model.mesh import Mesh
from screenapp.model.part import Part
from screenapp.model.regions import shape_with_zones
from screenapp.model.shape import Shape
from screenapp.model.validity import faults_of
from tests.mechanics.zoned import disc, pad, strip
from tests.model.random_zones import zoned_plate


def meshed(part: Part) -> tuple[Shape, Mesh]:
    shape = shape_with_zones(part)
    return shape, make_mesh(shape, initial_sizes(shape, part.mesh))


def on_interfaces(shape: Shape, mesh: Mesh) -> np.ndarray:
    """Element sides (k, 3) between two zones: their nodes, from both sides."""
    quads = mesh.quads
    sides = np.concatenate([quads[:, [i, 4 + i, (i + 1) % 4]] for i in range(4)], axis=0)
    zones = np.tile(mesh.element_zones, 4)
    order = np.argsort(sides[:, 1], kind="stable")
    sides, zones = sides[order], zones[order]
    twin = np.flatnonzero(sides[1:, 1] == sides[:-1, 1])
    return np.asarray(sides[twin[zones[twin] != zones[twin + 1]]])


SOUND = [s for s in range(40) if not any(f.blocks for f in faults_of(zoned_plate(s)))][:16]


@pytest.mark.parametrize("seed", SOUND)
def test_random_zones_are_meshed_soundly(seed: int) -> None:
    part = zoned_plate(seed)
    shape, mesh = meshed(part)
    assert connection_faults(mesh, len(shape.loops)) == []
    quality = measure_quality(mesh)
    assert quality.worst == pytest.approx(mesh.worst_jacobian)
    assert quality.worst > 0.1
    for zone in {region.zone for region in shape.regions}:
        exact = sum(r.shape.area for r in shape.regions if r.zone == zone)
        chosen = np.flatnonzero(mesh.element_zones == zone)
        found = _area(mesh, chosen)
        assert found == pytest.approx(exact, rel=2e-4)  # arcs are parabolas in the mesh
    sides = on_interfaces(shape, mesh)
    points = mesh.nodes[sides].reshape(-1, 2)
    gap = np.full(len(points), np.inf)
    for interface in shape.interfaces:
        curve = interface.curve
        for k, p in enumerate(points):
            near = curve.point(curve.nearest((float(p[0]), float(p[1]))))
            gap[k] = min(gap[k], float(np.hypot(*(near - p))))
    assert gap.max(initial=0.0) < 1e-9 * shape.size


def _area(mesh: Mesh, elements: np.ndarray) -> float:
    part = Mesh(mesh.nodes, mesh.quads[elements], mesh.sides[:0], mesh.side_piece[:0],
                mesh.side_t[:0], {}, 0.0)  # fmt: skip
    return measure_quality(part).area


def test_a_thin_rib_has_elements_across() -> None:
    part = strip(60.0, 30.0, (pad([(-5.0, 14.0), (65.0, 14.0), (65.0, 16.0), (-5.0, 16.0)], 9.0),))
    _, mesh = meshed(part)
    inside = mesh.element_zones == 0
    across = mesh.element_sizes[inside]
    assert across.max() < 2.0 / 3.0 * 1.3


def test_nodes_between_zones_have_a_number_in_each() -> None:
    part = strip(60.0, 30.0, (disc((30.0, 15.0), 16.0, 6.0), disc((30.0, 15.0), 8.0, 1.0, "z2")))
    shape, mesh = meshed(part)
    on_lines = np.unique(on_interfaces(shape, mesh))
    assert len(mesh.field_nodes) == mesh.n_nodes + len(on_lines)
    assert np.array_equal(mesh.field_nodes[mesh.field_quads], mesh.quads)
    assert np.array_equal(np.unique(mesh.field_nodes[mesh.n_nodes :]), on_lines)
    for zone in (-1, 0, 1):
        numbers = np.unique(mesh.field_quads[mesh.element_zones == zone])
        assert np.all(mesh.field_zones[numbers] == zone)


def test_the_number_of_elements_is_estimated() -> None:
    part = strip(60.0, 30.0, (disc((30.0, 15.0), 16.0, 6.0),))
    shape, mesh = meshed(part)
    guess = estimate_elements(shape, initial_sizes(shape, part.mesh))
    assert 0.7 < mesh.n_elements / guess < 1.4


def test_without_zones_nothing_is_numbered_anew() -> None:
    shape, mesh = meshed(strip(60.0, 30.0, ()))
    assert mesh.zones is None
    assert mesh.field_quads is mesh.quads
    assert not shape.regions
