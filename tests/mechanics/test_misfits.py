"""Supports that are not where the drawing has them, case by case, against closed forms."""

from __future__ import annotations

import math
from dataclasses import replace

import numpy as np
import pytest

from screenapp.model import edits
from screenapp.model.errors import InvalidPartError
from screenapp.model.part import (
    Case,
    CircleHole,
    Combination,
    ElasticSupport,
    ElementName,
    FixedSupport,
    ForceLoad,
    MisfitLoad,
    Part,
    PinSupport,
    PrescribedSupport,
    RollerSupport,
    Support,
    SymmetrySupport,
    Term,
)
from screenapp.model.validity import check, faults_of
from tests.mechanics.zoned import ELEMENTS, solved, steel, strip

E, LONG, HIGH, THICK = 210_000.0, 80.0, 20.0, 2.0
BASE = (RollerSupport("s1", "e4", 0.0), RollerSupport("s2", "e1", 90.0))


def bar(supports: tuple[Support, ...], *cases: Case, **more) -> Part:  # type: ignore[no-untyped-def]
    """A bar of 80 × 20 mm, 2 mm thick, without Poisson's effect."""
    return replace(strip(LONG, HIGH, (), supports, cases, (steel(0.0),)), **more)


@pytest.mark.parametrize("element", ELEMENTS)
def test_a_bar_stretched_by_a_misfit_has_e_delta_over_l(element: ElementName) -> None:
    """σ = E δ / L; another case is free of it, and a combination scales it."""
    off = Case("k1", "assembled", (MisfitLoad("l1", "s3", 0.1, 0.0),))
    pulled = Case("k2", "pulled", (ForceLoad("l2", "e2", 400.0, 0.0),))
    both = Combination("m1", "both", (Term("k1", 1.5), Term("k2", 1.0)))
    part = bar((*BASE, RollerSupport("s3", "e2", 0.0)), off, pulled, combinations=(both,))
    check(part)
    found = solved(part, element)
    stress = E * 0.1 / LONG
    for k, wanted in ((0, stress), (1, 0.0), (2, 1.5 * stress)):
        assert found.stress.nodal[k, :, 0] == pytest.approx(
            np.full(found.mesh.n_nodes, wanted), rel=1e-6, abs=1e-6
        )
        given = {r.support: r.x for r in found.solution.reactions[k]}
        assert given["s3"] == pytest.approx(wanted * HIGH * THICK - (400.0 if k else 0.0))
        assert found.solution.balance[k].force < 1e-10


def test_a_misfit_adds_to_what_a_support_prescribes_in_all_cases() -> None:
    supports = (*BASE, PrescribedSupport("s3", "e2", x=0.2))
    part = bar(supports, Case("k1", "more", (MisfitLoad("l1", "s3", 0.1, 0.0),)), Case("k2", "no"))
    found = solved(part)
    assert found.stress.nodal[0, :, 0].mean() == pytest.approx(E * 0.3 / LONG, rel=1e-6)
    assert found.stress.nodal[1, :, 0].mean() == pytest.approx(E * 0.2 / LONG, rel=1e-6)


def test_springs_whose_ground_is_off() -> None:
    """Derived: springs k b in a row with the bar E b t / L; F = δ / (1/(k b) + L/(E b t))."""
    k = 500.0
    supports = (*BASE, ElasticSupport("s3", "e2", normal=k))
    found = solved(bar(supports, Case("k1", "off", (MisfitLoad("l1", "s3", 0.1, 0.0),))))
    force = 0.1 / (1.0 / (k * HIGH) + LONG / (E * HIGH * THICK))
    assert found.solution.reactions[0][2].x == pytest.approx(force, rel=1e-9)
    assert found.stress.nodal[0, :, 0] == pytest.approx(
        np.full(found.mesh.n_nodes, force / (HIGH * THICK)), rel=1e-6
    )


def test_a_pin_too_far_away_pulls_with_the_side_that_it_touches() -> None:
    """A pin that is off outwards pulls the strip between two holes; inwards it only slackens."""
    holes = (CircleHole("h1", (20.0, 20.0), 12.0), CircleHole("h2", (120.0, 20.0), 12.0))
    part = strip(
        140.0,
        40.0,
        (),
        (FixedSupport("s1", "h1"), PinSupport("s2", "h2"), RollerSupport("s3", "c2", 90.0)),
        (
            Case("k1", "out", (MisfitLoad("l1", "s2", 0.1, 0.0),)),
            Case("k2", "twice", (MisfitLoad("l2", "s2", 0.2, 0.0),)),
        ),
        holes=holes,
    )
    found = solved(part, size=4.0)
    once, twice = ({r.support: r.x for r in given} for given in found.solution.reactions)
    assert once["s2"] > 1000.0
    assert once["s2"] == pytest.approx(-once["s1"], rel=1e-9)
    # what fits without play touches the same half at any misfit: the force is proportional
    assert twice["s2"] == pytest.approx(2.0 * once["s2"], rel=1e-3)
    nodes = found.mesh.side_nodes[found.mesh.sides_on(found.shape.pieces_of("h2"))].ravel()
    arm = found.mesh.nodes[nodes] - (120.0, 20.0)
    out = arm / np.hypot(*arm.T)[:, None]
    moved = (found.solution.displacements[0, nodes] * out).sum(axis=1)
    assert (moved - 0.1 * out[:, 0] > -1e-9).all()  # the rim is nowhere inside the pin


def test_a_turned_beam_feels_the_settlement_of_a_support() -> None:
    """A beam built in at one end whose other end settles by δ: R = 3 E I δ / L³ / (1 + shear)
    (Timoshenko & Goodier for the shear, from memory: 0.2 % of it here)."""
    part = strip(
        200.0, 10.0, (), (FixedSupport("s1", "e4"), RollerSupport("s2", "c2", 90.0)),
        (Case("k1", "settles", (MisfitLoad("l1", "s2", 0.0, -0.5),)),), (steel(0.0),),
    )  # fmt: skip
    found = solved(part, size=2.0)
    inertia = THICK * 10.0**3 / 12.0
    rigid = 3.0 * E * inertia * 0.5 / 200.0**3
    shear = 1.2 * 3.0 * E * inertia / (0.5 * E * 10.0 * THICK * 200.0**2)
    assert found.solution.reactions[0][1].y == pytest.approx(-rigid / (1.0 + shear), rel=5e-3)


def causes(part: Part) -> list[str]:
    return [f.cause for f in faults_of(part) if f.blocks]


def test_bad_misfits_are_told() -> None:
    def told(*loads: MisfitLoad, supports: tuple[Support, ...] = BASE) -> list[str]:
        return causes(bar(supports, Case("k1", "off", loads)))

    assert any("“s9”, which is not there" in c for c in told(MisfitLoad("l1", "s9", 0.1, 0.0)))
    assert any("does not hold" in c for c in told(MisfitLoad("l1", "s1", 0.0, 0.1)))
    assert any("nan" in c for c in told(MisfitLoad("l1", "s1", math.nan, 0.0)))
    assert any("farther than the part" in c for c in told(MisfitLoad("l1", "s1", 500.0, 0.0)))
    assert any("are zero" in c for c in told(MisfitLoad("l1", "s1", 0.0, 0.0)))
    mirrored = (SymmetrySupport("s1", "e4"), BASE[1])
    assert any("symmetry" in c for c in told(MisfitLoad("l1", "s1", 0.1, 0.0), supports=mirrored))
    touching = (FixedSupport("s1", "e4"), FixedSupport("s2", "e1"))
    found = told(MisfitLoad("l1", "s1", 0.1, 0.0), supports=touching)
    assert any("s1 and s2 meet at (0, 0)" in c for c in found)
    assert (
        told(MisfitLoad("l1", "s1", 0.1, 0.0), MisfitLoad("l2", "s2", 0.1, 0.0), supports=touching)
        == []
    )
    with pytest.raises(InvalidPartError):
        solved(bar(touching, Case("k1", "off", (MisfitLoad("l1", "s1", 0.1, 0.0),))))


def test_a_misfit_goes_with_its_support() -> None:
    part = bar(BASE, Case("k1", "off", (MisfitLoad("l1", "s1", 0.1, 0.0),)))
    outcome = edits.remove(part, "s1")
    assert outcome.part.cases[0].loads == ()
    assert any("l1" in word for word in outcome.lost)
    holed = replace(
        part,
        holes=(CircleHole("h1", (40.0, 10.0), 6.0),),
        supports=(*BASE, FixedSupport("s3", "h1")),
        cases=(Case("k1", "off", (MisfitLoad("l1", "s3", 0.1, 0.0),)),),
    )
    outcome = edits.remove(holed, "h1")
    assert outcome.part.cases[0].loads == ()
    assert any("l1" in word for word in outcome.lost)
