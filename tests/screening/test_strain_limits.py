"""Local strain by Neuber's rule, against figures by hand."""

from __future__ import annotations

import math
from collections.abc import Iterator
from dataclasses import replace

import pytest

from screenapp.meshing.service import Mesher
from screenapp.model.local_strain import HardeningCurve, hardening_curve
from screenapp.model.part import Case, LineLoad, Part, RollerSupport, StrainLimit
from screenapp.model.validity import faults_of
from screenapp.screening.screen import screen
from tests.model.plates import STEEL, plate

# K' = 1000 MPa and n' = 0.5, E = 100 GPa: ε = σ/1e5 + (σ/1000)²
CURVE = HardeningCurve(100_000.0, 1000.0, 0.5, "made up")


@pytest.fixture(scope="module")
def mesher() -> Iterator[Mesher]:
    with Mesher() as warm:
        yield warm


def test_neuber_by_hand() -> None:
    # σ = 100: ε = 0.001 + 0.01 = 0.011, σ ε = 1.1 = σe² / E, so σe = √110000
    stress, strain = CURVE.at_notch(math.sqrt(110_000.0))
    assert stress == pytest.approx(100.0)
    assert strain == pytest.approx(0.011)
    assert CURVE.at_notch(0.0) == (0.0, 0.0)
    assert math.isinf(CURVE.at_notch(math.inf)[1])


def test_far_below_yield_it_is_elastic_and_above_it_rises() -> None:
    steel = hardening_curve(replace(STEEL, family="steel"))
    assert steel is not None
    assert (steel.coefficient, steel.exponent) == pytest.approx((1.65 * 360.0, 0.15))
    assert steel.at_notch(50.0)[1] == pytest.approx(50.0 / 210_000.0, rel=1e-3)
    strains = [steel.at_notch(s)[1] for s in (100.0, 300.0, 500.0, 700.0)]
    assert strains == sorted(strains)
    local, strain = steel.at_notch(700.0)
    assert local < 700.0
    assert local * strain == pytest.approx(700.0**2 / 210_000.0)


def test_curves_given_typical_or_unknown() -> None:
    own = replace(STEEL, hardening_coefficient=900.0, hardening_exponent=0.2)
    given = hardening_curve(own)
    assert given is not None
    assert (given.coefficient, given.exponent) == (900.0, 0.2)
    assert hardening_curve(STEEL) is None
    assert hardening_curve(replace(STEEL, family="plastic")) is None


def bar(most: float, stress: float = 300.0) -> Part:
    """A bar without a hole, drawn by `stress` [MPa]: its whole band is that stress."""
    return replace(
        plate(),
        holes=(),
        materials=(replace(STEEL, family="steel"),),
        supports=(RollerSupport("s1", "e4"), RollerSupport("s2", "c1", 90.0)),
        cases=(Case("k1", "pull", (LineLoad("l1", "e2", 3.0 * stress, 0.0),)),),
        limits=(StrainLimit("g1", most),),
    )


def test_a_peak_is_judged_with_its_band(mesher: Mesher) -> None:
    curve = hardening_curve(replace(STEEL, family="steel"))
    assert curve is not None
    local, strain = curve.at_notch(300.0)
    (found,) = screen(bar(0.01), mesher).limits
    used = found.utilisation
    assert used.value == pytest.approx(strain / 0.01, rel=1e-6)
    assert used.low < used.value < used.high
    assert found.verdict == "holds"
    assert f"gives {local:.4g} MPa" in found.assumed
    (failed,) = screen(bar(0.9 * strain), mesher).limits
    assert failed.verdict == "does not hold"
    (close,) = screen(bar(strain), mesher).limits
    assert close.verdict == "undecided"


def test_a_rising_peak_leaves_it_open(mesher: Mesher) -> None:
    part = replace(plate(), materials=bar(0.01).materials, limits=(StrainLimit("g1"),))
    (found,) = screen(part, mesher).limits
    assert (found.verdict, found.utilisation.trust) == ("undecided", "rising")


def test_faults() -> None:
    assert "limits.g1.most" in [f.field for f in faults_of(bar(0.0)) if f.blocks]
    bare = replace(bar(0.01), materials=(STEEL,))
    assert any("asks for a hardening curve" in f.cause for f in faults_of(bare) if f.blocks)
