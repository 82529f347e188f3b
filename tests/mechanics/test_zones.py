"""Zones of different thickness and material against closed forms, exactly where these are exact."""

from __future__ import annotations

import math
from dataclasses import replace

import numpy as np
import pytest

from screenapp.mechanics.assembly import assemble
from screenapp.mechanics.constraints import prescribe_nodes
from screenapp.mechanics.element_walls import element_hooke, element_thickness
from screenapp.mechanics.equilibrium import resultant
from screenapp.mechanics.linear_system import solve_system
from screenapp.mechanics.loads import nodal_forces
from screenapp.mechanics.recovery import averaged_stress, extrapolated_stress, recover
from screenapp.model.mass import mass_of
from screenapp.model.part import (
    BearingLoad,
    Case,
    CircleHole,
    ElementName,
    FixedSupport,
    ForceLoad,
    GravityLoad,
    MeshWishes,
    PrescribedSupport,
    PressureLoad,
    RollerSupport,
    SlotHole,
    Zone,
)
from screenapp.model.solution import von_mises
from tests.mechanics.zoned import ELEMENTS, Solved, disc, meshed, pad, solved, steel, strip
from tests.model.plates import loop

UPRIGHT = (RollerSupport("s1", "e4", 0.0), RollerSupport("s2", "e1", 90.0))
"""Left edge held along x, lower edge along y."""


@pytest.mark.parametrize("element", ELEMENTS)
def test_two_thicknesses_in_series_carry_the_same_force(element: ElementName) -> None:
    """Without Poisson's ratio each length is in even tension: σ = N / t, u = Σ N L / (E t)."""
    part = strip(
        60.0,
        10.0,
        (pad([(35.0, -5.0), (70.0, -5.0), (70.0, 15.0), (35.0, 15.0)], 5.0),),
        UPRIGHT,
        (Case("k", "pull", (ForceLoad("l", "e2", 800.0, 0.0),)),),
        (steel(0.0),),
    )
    found = solved(part, element)
    stress, moved = found.reader.read([(10.0, 4.0), (50.0, 4.0), (60.0, 5.0)])
    np.testing.assert_allclose(stress[0, :, 0], [40.0, 16.0, 16.0], rtol=1e-9)
    assert np.abs(stress[0, :, 1:]).max() < 1e-7
    assert moved[0, 2, 0] == pytest.approx(800.0 / 210e4 * (35.0 / 2.0 + 25.0 / 5.0), rel=1e-9)
    assert found.stress.energy_error.max() < 1e-9


@pytest.mark.parametrize("element", ELEMENTS)
def test_two_walls_in_parallel_stretch_alike(element: ElementName) -> None:
    """With one Poisson's ratio both strips are in even tension under a common strain."""
    strong = steel(0.3, 210_000.0)
    weak = steel(0.3, 70_000.0, "weak")
    part = strip(
        60.0,
        12.0,
        (pad([(-5.0, 7.0), (65.0, 7.0), (65.0, 20.0), (-5.0, 20.0)], 6.0, "weak"),),
        (*UPRIGHT, PrescribedSupport("s3", "e2", x=0.06)),
        (Case("k", "stretch"),),
        (strong, weak),
    )
    found = solved(part, element)
    stress, _ = found.reader.read([(20.0, 3.0), (20.0, 10.0)])
    np.testing.assert_allclose(stress[0, :, 0], [210.0, 70.0], rtol=1e-9)
    pulled = sum(r.x for r in found.solution.reactions[0] if r.support == "s3")
    assert pulled == pytest.approx(210.0 * 7.0 * 2.0 + 70.0 * 5.0 * 6.0, rel=1e-9)
    assert found.stress.energy_error.max() < 1e-9


def _equal_membrane(element: ElementName) -> Solved:
    """A plate with curved zones whose E t is that of the wall: its membrane forces are as if there
    were none, so a linear displacement is the exact answer, whatever the interfaces."""
    part = strip(
        60.0,
        40.0,
        (
            Zone(CircleHole("z1", (20.0, 20.0), 22.0), 4.0, "half"),
            Zone(SlotHole("z2", (45.0, 35.0), 26.0, 12.0, 30.0), 8.0, "quarter"),
            pad([(40.0, -5.0), (70.0, -5.0), (70.0, 10.0)], 1.0, "double", "z3"),
        ),
        materials=(
            steel(),
            steel(0.3, 105_000.0, "half"),
            steel(0.3, 52_500.0, "quarter"),
            steel(0.3, 420_000.0, "double"),
        ),
        cases=(Case("k", "only"),),
    )
    part = replace(part, mesh=MeshWishes(element))
    shape, mesh = meshed(part)
    rim = np.unique(mesh.side_nodes)
    gradient = np.array([[1e-3, 4e-4], [-2e-4, 7e-4]])
    system = assemble(mesh, element, element_hooke(part, mesh), element_thickness(part, mesh))
    held = prescribe_nodes(rim, mesh.nodes[rim] @ gradient.T)
    solution = solve_system(system, held, np.zeros((1, mesh.n_nodes, 2)))
    error = np.abs(solution.displacements[0] - mesh.nodes @ gradient.T)
    used = np.unique(mesh.quads[:, :4])
    assert error[used].max() < 1e-12
    return Solved(part, shape, mesh, solution, recover(part, shape, mesh, solution))


@pytest.mark.parametrize("element", ELEMENTS)
def test_patch_test_across_curved_interfaces(element: ElementName) -> None:
    found = _equal_membrane(element)
    mesh = found.mesh
    assert set(np.unique(mesh.element_zones)) == {-1, 0, 1, 2}
    strain = np.array([1e-3, 7e-4, 2e-4])
    hooke = element_hooke(found.part, mesh)
    inside = averaged_stress(mesh, extrapolated_stress(mesh, found.solution, hooke))
    corners = mesh.field_quads[:, :4]
    wanted = (strain @ hooke)[:, None]
    np.testing.assert_allclose(
        inside[0][corners],
        np.broadcast_to(wanted, (*corners.shape, 3)),
        atol=1e-9 * np.abs(wanted).max(),
    )


def test_a_point_between_zones_reads_the_larger_stress() -> None:
    found = _equal_membrane("quad9")
    reader = found.reader
    at = (9.0, 20.0)  # on the rim of the round zone, where E t is even: half the stress inside
    inside, outside = reader.read([(10.0, 20.0), (8.0, 20.0)])[0][0]
    between = reader.read([at])[0][0, 0]
    np.testing.assert_allclose(outside, 2.0 * inside, rtol=1e-9)
    np.testing.assert_allclose(between, outside, rtol=1e-9)
    assert reader.zones_at([at, (10.0, 20.0), (8.0, 20.0), (-1.0, 0.0)]) == [
        (-1, 0),
        (0,),
        (-1,),
        (),
    ]


def test_loads_act_on_the_thickness_that_is_there() -> None:
    part = strip(
        60.0,
        20.0,
        (pad([(30.0, -5.0), (70.0, -5.0), (70.0, 30.0), (30.0, 30.0)], 5.0),),
        holes=(CircleHole("h1", (30.0, 10.0), 8.0),),
    )
    shape, mesh = meshed(part)
    cases = {
        "pressure": Case("k", "", (PressureLoad("l", "e3", 2.0),)),
        "bearing": Case("k", "", (BearingLoad("l", "h1", 300.0, 400.0),)),
        "weight": Case("k", "", (GravityLoad("l", 0.0, -9.81),)),
        "force": Case("k", "", (ForceLoad("l", "e1", 50.0, 60.0),)),
    }
    total = {
        name: resultant(mesh.nodes, nodal_forces(part, shape, mesh, case))
        for name, case in cases.items()
    }
    lengths = 2.0 * 2.0 * 30.0, 2.0 * 5.0 * 30.0  # pressure times thickness times length
    np.testing.assert_allclose(
        total["pressure"],
        [0.0, -sum(lengths), -15.0 * lengths[0] - 45.0 * lengths[1]],
        rtol=1e-12,
        atol=1e-9,
    )
    np.testing.assert_allclose(total["bearing"][:2], [300.0, 400.0], rtol=1e-12)
    np.testing.assert_allclose(total["force"][:2], [50.0, 60.0], rtol=1e-12)
    weight = -9.81 * mass_of(part, shape)
    # the rim of the hole is a parabola in the mesh: a little less than 1e-4 of the hole's area
    assert total["weight"][1] == pytest.approx(weight, rel=1e-5)


def test_the_mass_is_exact() -> None:
    part = strip(
        50.0,
        30.0,
        (disc((50.0, 30.0), 20.0, 7.0), disc((25.0, 15.0), 12.0, 1.0, "z2")),
        holes=(CircleHole("h1", (25.0, 15.0), 6.0),),
    )
    quarter, ring = 0.25 * math.pi * 100.0, math.pi * (36.0 - 9.0)
    wall = 1500.0 - quarter - math.pi * 36.0
    volume = 2.0 * wall + 7.0 * quarter + 1.0 * ring
    shape, _ = meshed(part)
    assert mass_of(part, shape) == pytest.approx(7850e-9 * volume, rel=1e-12)


def test_the_whole_is_in_balance() -> None:
    part = strip(
        60.0,
        20.0,
        (disc((60.0, 10.0), 18.0, 6.0), disc((20.0, 0.0), 14.0, 0.8, "z2")),
        (FixedSupport("s1", "e4"),),
        (
            Case(
                "k1", "bend", (ForceLoad("l1", "e2", 10.0, -300.0), PressureLoad("l2", "e1", 1.0))
            ),
            Case("k2", "weight", (GravityLoad("l3", 50.0, -98.1),)),
        ),
    )
    found = solved(part)
    for balance in found.solution.balance:
        assert balance.force < 1e-10
        assert balance.moment < 1e-10


def test_a_pad_round_a_hole_takes_its_share() -> None:
    """A concentric pad in a wide sheet under even tension on all sides has a closed form: two
    rings with N and u continuous (Lamé; Timoshenko & Goodier, art. 28, from memory), here held to
    it at the rim of the hole and on both sides of the interface."""
    a, b, c, t1, t2, far = 6.0, 12.0, 40.0, 5.0, 2.0, 20.0
    e, nu = 210_000.0, 0.3
    # u = A r + B / r in each; N_r = E t (A / (1 - ν) - B / ((1 + ν) r²))
    p, q = 1.0 / (1.0 - nu), 1.0 / (1.0 + nu)
    rows = [
        [p, -q / a**2, 0.0, 0.0],
        [b, 1.0 / b, -b, -1.0 / b],
        [t1 * p, -t1 * q / b**2, -t2 * p, t2 * q / b**2],
        [0.0, 0.0, p, -q / c**2],
    ]
    inner_a, inner_b, outer_a, outer_b = np.linalg.solve(rows, [0.0, 0.0, 0.0, far / e])
    hoop = e * (inner_a * p + inner_b * q / a**2)
    hoop_in, hoop_out = (
        e * (x * p + y * q / b**2) for x, y in ((inner_a, inner_b), (outer_a, outer_b))
    )
    part = strip(1.0, 1.0, ())
    part = replace(
        part,
        outline=loop(
            [(c, 0.0), (0.0, c), (-c, 0.0), (0.0, -c)],
            {
                k: (c * math.cos(math.radians(x)), c * math.sin(math.radians(x)))
                for k, x in enumerate((45.0, 135.0, 225.0, 315.0))
            },
        ),
        holes=(CircleHole("h1", (0.0, 0.0), 2.0 * a),),
        zones=(disc((0.0, 0.0), 2.0 * b, t1),),
        supports=(
            RollerSupport("s1", "c1", 90.0),
            RollerSupport("s2", "c3", 90.0),
            RollerSupport("s3", "c2", 0.0),
        ),
        cases=(
            Case(
                "k",
                "",
                tuple(PressureLoad(f"l{k}", f"e{k}", -far) for k in (1, 2, 3, 4)),
            ),
        ),
    )
    found = solved(part, size=2.0)
    at = found.reader.read([(0.0, a), (0.0, b - 1e-3), (0.0, b + 1e-3)])[0][0]
    assert at[0, 0] == pytest.approx(hoop, rel=2e-3)
    assert at[1, 0] == pytest.approx(hoop_in, rel=1e-2)
    assert at[2, 0] == pytest.approx(hoop_out, rel=1e-2)
    assert von_mises(at[0]) == pytest.approx(hoop, rel=2e-3)
