"""Beds of springs: closed forms, reactions, balance, and what they do to the stress."""

from __future__ import annotations

import math
from dataclasses import replace

import numpy as np
import pytest

from screenapp.mechanics.elastic_supports import spring_tractions
from screenapp.mechanics.singular_spots import singular_spots
from screenapp.model.part import (
    Case,
    CircleHole,
    ElasticSupport,
    ElementName,
    FixedSupport,
    ForceLoad,
    Part,
    PinSupport,
    PressureLoad,
    RollerSupport,
    ShearLoad,
    Support,
)
from screenapp.model.regions import shape_with_zones
from screenapp.model.rigid_motions import free_motions
from screenapp.model.shape import shape_of
from screenapp.model.validity import faults_of
from tests.mechanics.zoned import ELEMENTS, solved, steel, strip

E, THICK = 210_000.0, 2.0


def pulled(*supports: Support, force: float = 4000.0, poisson: float = 0.0) -> Part:
    """A bar of 80 × 20 mm, 2 mm thick, pulled at its right end (e2)."""
    return strip(
        80.0,
        20.0,
        (),
        supports,
        (Case("k", "pull", (ForceLoad("l", "e2", force, 0.0),)),),
        (steel(poisson),),
    )


@pytest.mark.parametrize("element", ELEMENTS)
def test_a_bar_on_springs_moves_by_its_stretch_and_that_of_the_springs(
    element: ElementName,
) -> None:
    """Derived: u(x) = F/(k b) + F x / (E b t), the stress even."""
    k = 500.0
    found = solved(
        pulled(ElasticSupport("s1", "e4", normal=k), RollerSupport("s2", "e1", 90.0)), element
    )
    x = found.mesh.nodes[:, 0]
    expected = 4000.0 / (k * 20.0) + 4000.0 * x / (E * 20.0 * THICK)
    assert found.solution.displacements[0, :, 0] == pytest.approx(expected, rel=1e-9)
    assert found.stress.nodal[0, :, 0] == pytest.approx(np.full(len(x), 100.0), rel=1e-7)
    (spring, roller) = found.solution.reactions[0]
    assert spring.x == pytest.approx(-4000.0, rel=1e-10)
    assert spring.moment == pytest.approx(4000.0 * 10.0, rel=1e-9)
    assert (roller.x, roller.y) == pytest.approx((0.0, 0.0), abs=1e-6)
    assert found.solution.balance[0].force < 1e-10
    assert found.solution.balance[0].moment < 1e-10


def test_a_bar_held_along_its_side_fades_out_as_cosh() -> None:
    """Derived (shear lag with rigid sections): E b t u'' = k u; here both long sides are bedded,
    so that the bar is not bent.  u(x) = F cosh(x/l) / (E b t /l sinh(L/l)), l² = E b t / (2 k)."""
    k, b, long = 20.0, 20.0, 80.0
    beds = (
        ElasticSupport("s1", "e1", along=k),
        ElasticSupport("s2", "e3", along=k),
        RollerSupport("s3", "c1", 90.0),
    )
    found = solved(pulled(*beds))
    length = math.sqrt(E * b * THICK / (2.0 * k))
    assert length > 10.0 * b  # sections stay plane
    x = found.mesh.nodes[:, 0]
    expected = 4000.0 * length * np.cosh(x / length) / (E * b * THICK * math.sinh(long / length))
    assert found.solution.displacements[0, :, 0] == pytest.approx(expected, rel=2e-3)
    total = sum(r.x for r in found.solution.reactions[0][:2])
    assert total == pytest.approx(-4000.0, rel=1e-9)


def beam_on_a_bed(size: float | None = None) -> tuple[Part, float]:
    """A long beam (700 × 10, 2 thick) on springs below, pressed in the middle of its top."""
    k = 20.0
    part = strip(
        700.0,
        10.0,
        (),
        (ElasticSupport("s1", "e1", normal=k), RollerSupport("s2", "c1", 0.0)),
        (Case("k", "press", (ForceLoad("l", "e3", 0.0, -1000.0, 345.0, 355.0),)),),
    )
    inertia = THICK * 10.0**3 / 12.0
    return part, (k / (4.0 * E * inertia)) ** 0.25


def test_a_long_beam_on_an_elastic_foundation() -> None:
    """Hetényi 1946, Beams on Elastic Foundation, infinite beam under a short even load (from
    memory): y = q/(2 k) (2 - 2 e^-βa cos βa) and M = q/(2 β²) e^-βa sin βa under its middle, with
    half its length a; y far away falls as e^-βx (cos βx + sin βx)."""
    part, beta = beam_on_a_bed()
    found = solved(part, size=3.0)
    k, q, a = 20.0, 100.0, 5.0
    assert beta * 350.0 > 2.0 * math.pi  # as good as infinite
    fade = math.exp(-beta * a)
    deep = q / k * (1.0 - fade * math.cos(beta * a))
    at = found.reader.read(np.array([[350.0, 0.0], [350.0 + 60.0, 0.0]]))[1][0]
    # shear adds to the beam's deflection near the force: β h is 0.2, so that it is below 2 %
    assert at[0, 1] == pytest.approx(-deep, rel=0.02)
    beside = beta * 60.0
    falls = math.exp(-beside) * (math.cos(beside) + math.sin(beside))
    assert at[1, 1] == pytest.approx(-1000.0 * beta / (2.0 * k) * falls, rel=0.02)
    moment = q / (2.0 * beta**2) * fade * math.sin(beta * a)
    stress = found.reader.read(np.array([[350.0, 0.0]]))[0][0, 0, 0]
    assert stress == pytest.approx(moment * 5.0 / (THICK * 10.0**3 / 12.0), rel=0.02)
    (spring, stop) = found.solution.reactions[0]
    assert spring.y == pytest.approx(1000.0, rel=1e-8)
    assert spring.moment == pytest.approx(1000.0 * 350.0, rel=1e-8)
    assert stop.x == pytest.approx(0.0, abs=1e-6)


@pytest.mark.parametrize("element", ELEMENTS)
def test_springs_round_a_hole_give_way_as_a_pin_in_rubber(element: ElementName) -> None:
    """Derived: a rim that hardly changes its form moves by F / (π r kₙ + π r kₜ).  Linear sides
    make a ring of chords of it, of 20 or more,
    shorter by up to 1 %."""
    part = strip(
        80.0,
        40.0,
        (),
        (ElasticSupport("s1", "h1", 0.5, 0.25),),
        (Case("k", "pull", (ForceLoad("l", "e2", 100.0, 0.0),)),),
        holes=(CircleHole("h1", (40.0, 20.0), 12.0),),
    )
    found = solved(part, element, size=2.0)
    moved = 100.0 / (math.pi * 6.0 * 0.75)
    assert found.solution.displacements[0, :, 0] == pytest.approx(
        moved, rel=1e-2 if element.startswith("quad4") else 2e-3
    )
    assert found.solution.reactions[0][0].x == pytest.approx(-100.0, rel=1e-9)
    assert found.solution.balance[0].moment < 1e-9


def test_stiff_springs_are_a_rigid_hold() -> None:
    rigid = solved(pulled(FixedSupport("s1", "e4"), poisson=0.3), size=2.0)
    stiff = solved(pulled(ElasticSupport("s1", "e4", 1e8, 1e8), poisson=0.3), size=2.0)
    gap = np.abs(stiff.solution.displacements - rigid.solution.displacements).max()
    assert gap < 1e-3 * np.abs(rigid.solution.displacements).max()


def test_the_stress_at_the_bed_obeys_its_traction() -> None:
    """On a bed the recovered stress across the edge is the springs' own pressure."""
    part, _ = beam_on_a_bed()
    found = solved(part, size=3.0)
    sides = found.mesh.sides_on(found.shape.pieces_of("e1"))
    given = spring_tractions(found.part, found.shape, found.mesh, found.solution)[0, sides]
    across = found.stress.side[0, sides, :, 1]
    assert np.abs(given[..., 1]).max() > 1e-3
    assert across == pytest.approx(-given[..., 1], rel=1e-9, abs=1e-9)


def test_a_bed_beside_a_pin_that_only_pushes() -> None:
    part = strip(
        100.0,
        40.0,
        (),
        (PinSupport("s1", "h1"), ElasticSupport("s2", "e2", 50.0, 50.0)),
        (Case("k", "push", (ForceLoad("l", "e3", 0.0, -2000.0),)),),
        holes=(CircleHole("h1", (20.0, 20.0), 12.0),),
    )
    found = solved(part)
    pin, bed = found.solution.reactions[0]
    assert pin.y > 0.0
    assert pin.y + bed.y == pytest.approx(2000.0, rel=1e-9)
    assert found.solution.balance[0].moment < 1e-9


def test_a_sheared_bar_slides_by_the_springs_alone() -> None:
    part = strip(
        60.0, 20.0, (), (ElasticSupport("s1", "e1", 1e4, 100.0),),
        (Case("k", "push", (ShearLoad("l", "e3", -10.0),)),),
    )  # fmt: skip
    found = solved(part)
    assert found.solution.reactions[0][0].x == pytest.approx(-600.0, rel=1e-9)
    low = found.mesh.nodes[:, 1] < 1e-9
    assert found.solution.displacements[0, low, 0].mean() == pytest.approx(0.1, rel=0.05)


def test_springs_stop_the_motions_that_they_resist() -> None:
    def free(*supports: Support) -> list[str]:
        part = pulled(*supports)
        return [str(m) for m in free_motions(part, shape_of(part))]

    assert free(ElasticSupport("s", "e1", 5.0, 5.0)) == []
    assert free(ElasticSupport("s", "e1", 5.0)) == ["sliding along x"]
    assert free(ElasticSupport("s", "e1", 0.0, 5.0)) != []


def test_bad_beds_are_told() -> None:
    def causes(support: Support) -> list[str]:
        return [f.cause for f in faults_of(pulled(support)) if f.blocks]

    assert any("-1 N/mm²" in c for c in causes(ElasticSupport("s1", "e4", -1.0, 2.0)))
    assert any("nan" in c for c in causes(ElasticSupport("s1", "e4", math.nan, 2.0)))
    assert any("without stiffness" in c for c in causes(ElasticSupport("s1", "e4")))
    assert any("corner c1" in c for c in causes(ElasticSupport("s1", "c1", 1.0, 1.0)))
    assert any("no corner, edge or hole" in c for c in causes(ElasticSupport("s1", "e9", 1.0)))
    part = pulled(ElasticSupport("s1", "e4", 10.0))
    assert any("sliding along y" in f.cause for f in faults_of(part) if f.blocks)
    good = pulled(ElasticSupport("s1", "e4", 10.0, 10.0))
    assert not [f for f in faults_of(good) if f.blocks]


def test_a_bed_has_no_rigid_end() -> None:
    """Where a rigid hold ends within an edge the stress is singular; where springs end it is not,
    but for the creep that only the solution tells."""
    rigid = pulled(FixedSupport("s1", "e1", 10.0, 50.0))
    assert len(singular_spots(rigid, shape_with_zones(rigid))) == 2
    soft = replace(rigid, supports=(ElasticSupport("s1", "e1", 50.0, 50.0, 10.0, 50.0),))
    assert singular_spots(soft, shape_with_zones(soft)) == ()


def test_a_pressed_bed_gives_the_pressure_back() -> None:
    """Derived: an even pressure on a bed of any length moves it by p t / k, with no bending."""
    part = strip(
        60.0, 20.0, (),
        (ElasticSupport("s1", "e1", normal=50.0), RollerSupport("s2", "c1", 0.0)),
        (Case("k", "press", (PressureLoad("l", "e3", 10.0),)),), (steel(0.0),),
    )  # fmt: skip
    found = solved(part)
    low = found.mesh.nodes[:, 1] < 1e-9
    assert found.solution.displacements[0, low, 1] == pytest.approx(-10.0 * THICK / 50.0, rel=1e-9)
