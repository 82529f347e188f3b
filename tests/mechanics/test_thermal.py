"""Changes of temperature against closed forms."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest

from screenapp.mechanics.equilibrium import resultant
from screenapp.mechanics.solve import solve
from screenapp.mechanics.thermal import free_strains, thermal_forces
from screenapp.model.combinations import loadings
from screenapp.model.errors import SolvingError
from screenapp.model.part import (
    Case,
    CircleHole,
    Combination,
    ElementName,
    ForceLoad,
    Material,
    Part,
    RollerSupport,
    TemperatureLoad,
    Term,
    Wall,
)
from tests.mechanics.zoned import ELEMENTS, disc, in_rectangles, meshed, pad, solved, strip

E, NU, ALPHA = 70_000.0, 0.33, 23e-6
ALLOY = Material("alloy", E, NU, 2700.0, 160.0, 215.0, ALPHA)
BRASS = Material("brass", 105_000.0, NU, 8400.0, 300.0, 400.0, 19e-6)
UPRIGHT = (RollerSupport("s1", "e4", 0.0), RollerSupport("s2", "e1", 90.0))
PINNED = (RollerSupport("s1", "e4", 0.0), RollerSupport("s2", "c1", 90.0))
BETWEEN = (*UPRIGHT, RollerSupport("s3", "e2", 0.0))


def heated(load: TemperatureLoad, supports: tuple = UPRIGHT, **more) -> Part:  # type: ignore
    """A strip of 60 × 12 mm."""
    return strip(60.0, 12.0, more.pop("zones", ()), supports, (Case("k", "hot", (load,)),),
                 more.pop("materials", (ALLOY,)), **more)  # fmt: skip


@pytest.mark.parametrize("element", ELEMENTS)
def test_a_free_bar_grows_and_has_no_stress(element: ElementName) -> None:
    part = heated(TemperatureLoad("l", 80.0), holes=(CircleHole("h1", (30.0, 6.0), 5.0),))
    found = solved(part, element)
    assert np.abs(found.stress.nodal).max() < 1e-7
    assert np.abs(found.stress.side).max() < 1e-7
    _, moved = found.reader.read([(60.0, 12.0)])
    np.testing.assert_allclose(moved[0, 0], [ALPHA * 80.0 * 60.0, ALPHA * 80.0 * 12.0], rtol=1e-9)


@pytest.mark.parametrize("element", ELEMENTS)
@pytest.mark.parametrize("state", ["plane stress", "plane strain"])
def test_a_bar_held_at_both_ends_is_pressed(element: ElementName, state: str) -> None:
    """σ = -E α ΔT in plane stress; free along y alone in plane strain: -E α ΔT / (1 - ν)."""
    part = heated(TemperatureLoad("l", 50.0), BETWEEN)
    part = replace(part, wall=Wall(2.0, "alloy", state))  # type: ignore[arg-type]
    found = solved(part, element)
    pressed = -E * ALPHA * 50.0 / (1.0 if state == "plane stress" else 1.0 - NU)
    np.testing.assert_allclose(found.stress.nodal[0, :, 0], pressed, rtol=1e-9)
    np.testing.assert_allclose(found.stress.side[0, ..., 0], pressed, rtol=1e-9)
    assert np.abs(found.stress.nodal[0, :, 1:]).max() < 1e-7
    (thrust,) = (r.x for r in found.solution.reactions[0] if r.support == "s3")
    assert thrust == pytest.approx(pressed * 12.0 * 2.0, rel=1e-9)
    assert found.solution.balance[0].force < 1e-10
    assert found.stress.energy_error.max() < 1e-9


@pytest.mark.parametrize("element", ["quad8", "quad9"])
def test_a_linear_field_bends_a_free_part_without_stress(element: ElementName) -> None:
    """Boley & Weiner: a linear temperature leaves a simply connected free part free of stress;
    it bends to the curvature α dT/dy, here u_y = -α g x²/2 along the lower edge."""
    part = heated(TemperatureLoad("l", -30.0, 0.0, 5.0), PINNED)
    supports = (RollerSupport("s1", "c1", 0.0), RollerSupport("s2", "c1", 90.0),
                RollerSupport("s3", "c4", 0.0))  # fmt: skip
    part = replace(part, supports=supports)
    mesh = in_rectangles(part, 60.0, 12.0) if element == "quad8" else None
    found = solved(part, element, mesh=mesh)
    assert np.abs(found.stress.nodal).max() < 1e-6
    assert np.abs(found.stress.side).max() < 1e-6
    _, moved = found.reader.read([(60.0, 0.0)])
    assert moved[0, 0, 0] == pytest.approx(ALPHA * -30.0 * 60.0, rel=1e-9)
    assert moved[0, 0, 1] == pytest.approx(-ALPHA * 5.0 * 60.0**2 / 2.0, rel=1e-9)


def test_a_held_bar_under_a_gradient_is_stressed_by_its_mean_and_its_slope() -> None:
    """Held at both ends along x only by even displacement: σ = -E α T(y) far from the ends is what
    rollers over the whole ends give exactly."""
    found = solved(heated(TemperatureLoad("l", 20.0, 0.0, 4.0), BETWEEN))
    stress, _ = found.reader.read([(30.0, 0.0), (30.0, 6.0), (30.0, 12.0)])
    wanted = [-E * ALPHA * t for t in (20.0, 44.0, 68.0)]
    np.testing.assert_allclose(stress[0, :, 0], wanted, rtol=1e-6)


def test_a_bimetal_strip_bends_as_timoshenko_says() -> None:
    """Timoshenko 1925 (J. Opt. Soc. Am. 11, from memory), curvature of two strips of thickness
    a1, a2 and moduli E1, E2; the beam is 40 times as long as high, which leaves 1 %."""
    length, low, high, change = 120.0, 1.2, 1.8, 60.0
    part = strip(
        length,
        low + high,
        (pad([(-5.0, low), (length + 5, low), (length + 5, 9.0), (-5.0, 9.0)], None, "brass"),),
        (
            RollerSupport("s1", "c1", 0.0),
            RollerSupport("s2", "c1", 90.0),
            RollerSupport("s3", "c4", 0.0),
        ),
        (Case("k", "hot", (TemperatureLoad("l", change),)),),
        (ALLOY, BRASS),
    )
    found = solved(part, size=0.7)
    _, moved = found.reader.read([(30.0, 0.0), (60.0, 0.0), (90.0, 0.0)])
    y = moved[0, :, 1]
    curvature = (y[0] - 2.0 * y[1] + y[2]) / 30.0**2
    m, n = low / high, E / BRASS.youngs_modulus
    wanted = 6.0 * (BRASS.expansion - ALPHA) * change * (1.0 + m) ** 2  # type: ignore[operator]
    wanted /= (low + high) * (3.0 * (1.0 + m) ** 2 + (1.0 + m * n) * (m**2 + 1.0 / (m * n)))
    assert abs(curvature / -wanted - 1.0) < 0.01


def test_a_hot_spot_presses_itself_and_pulls_round_itself() -> None:
    """A warm disc in a wide plate (Timoshenko & Goodier, art. 151, from memory): -E α ΔT/2 within,
    E α ΔT/2 along its rim just outside; NAFEMS benchmark T1 asks for 50 MPa there (from memory).

    The plate is 20 times as wide as the disc, which leaves (1/20)² of it.
    """
    hot = Material("plate", 100_000.0, 0.3, 7850.0, 235.0, 360.0, 1e-5)
    side, radius = 20.0, 1.0
    part = strip(
        side,
        side,
        (disc((0.0, 0.0), 2.0 * radius, 1.0),),
        UPRIGHT,
        (Case("k", "spot", (TemperatureLoad("l", 100.0, zone="z1"),)),),
        (hot,),
        1.0,
    )
    found = solved(part, size=0.5)
    stress, _ = found.reader.read([(radius * 1.0001, 0.0), (0.3, 0.3), (2.0, 0.0)])
    assert stress[0, 0, 1] == pytest.approx(50.0, rel=0.01)
    np.testing.assert_allclose(stress[0, 1, :2], [-50.0, -50.0], rtol=0.01)
    assert stress[0, 2, 0] == pytest.approx(-50.0 / 4.0, rel=0.03)


def test_the_thrust_under_a_gradient_along_the_bar_is_that_of_its_mean() -> None:
    """∫ εx dA = 0 between the rollers and ∫ σy dA = 0, so N = -E α t ∫ T dA / L exactly."""
    found = solved(heated(TemperatureLoad("l", 10.0, 1.0, 0.0), BETWEEN))
    (thrust,) = (r.x for r in found.solution.reactions[0] if r.support == "s3")
    assert thrust == pytest.approx(-E * ALPHA * 40.0 * 24.0, rel=1e-6)


@pytest.mark.parametrize("element", ELEMENTS)
def test_thermal_forces_are_in_balance_by_themselves(element: ElementName) -> None:
    part = heated(
        TemperatureLoad("l", 30.0, 0.4, -0.7), holes=(CircleHole("h1", (20.0, 6.0), 6.0),)
    )
    part = replace(part, mesh=replace(part.mesh, element=element))
    _, mesh = meshed(part)
    free = free_strains(part, mesh)
    assert free is not None
    force = thermal_forces(part, mesh, free)[0]
    scale = np.abs(force).sum()
    assert np.abs(resultant(mesh.nodes, force)[:2]).max() < 1e-12 * scale
    assert abs(resultant(mesh.nodes, force)[2]) < 1e-12 * scale * 60.0


def test_a_combination_sums_and_scales() -> None:
    hot = Case("k", "hot", (TemperatureLoad("l", 50.0, 0.1),))
    pull = Case("p", "pull", (ForceLoad("f", "e3", 0.0, 300.0),))
    part = replace(
        heated(TemperatureLoad("l", 1.0), BETWEEN),
        cases=(hot, pull),
        combinations=(Combination("c", "both", (Term("k", -0.5), Term("p", 2.0))),),
    )
    found = solved(part)
    a, b, both = found.stress.nodal
    np.testing.assert_allclose(both, -0.5 * a + 2.0 * b, atol=1e-7)
    assert [c.name for c in loadings(part)] == ["hot", "pull", "both"]


def test_no_expansion_is_refused() -> None:
    bare = replace(ALLOY, expansion=None)
    part = heated(TemperatureLoad("l", 50.0), materials=(bare,))
    shape, mesh = meshed(part)
    with pytest.raises(SolvingError, match="no coefficient of expansion"):
        solve(part, shape, mesh)
