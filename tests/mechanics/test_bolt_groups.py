"""Groups of bolts: the elastic formula of a rigid plate, rigid bolts, balance, edits."""

from __future__ import annotations

import math
from dataclasses import replace

import numpy as np
import pytest

from screenapp.model import edits
from screenapp.model.part import (
    BoltSupport,
    Case,
    CircleHole,
    ElementName,
    ForceLoad,
    MisfitLoad,
    MomentLoad,
    Part,
    RollerSupport,
    SlotHole,
    Support,
)
from screenapp.model.pattern import BoltCircle, GridPattern
from screenapp.model.validity import faults_of
from tests.mechanics.zoned import ELEMENTS, solved, steel, strip

GRID = CircleHole("h1", (20.0, 15.0), 8.0, GridPattern(2, 3, 30.0, 25.0))
FORCE = (0.0, -900.0)
AT = (160.0, 40.0)  # the middle of the right end, where the force acts


def plate(support: BoltSupport, *holes: CircleHole, case: Case | None = None) -> Part:
    """A plate of 160 × 80 mm, 10 mm thick, loaded at its right end."""
    own = case or Case("k1", "pull", (ForceLoad("l1", "e2", *FORCE),))
    return strip(160.0, 80.0, (), (support,), (own,), (steel(),), 10.0, holes or (GRID,))


def by_formula(centres: np.ndarray, force: np.ndarray, moment: float) -> np.ndarray:
    """What each bolt of equal stiffness gives against a force and the moment about their middle:
    -F/n and -M × r / Σ r² (handbooks of bolted joints, elastic method; common practice)."""
    arm = centres - centres.mean(axis=0)
    across = np.stack([-arm[:, 1], arm[:, 0]], axis=1)
    return -force / len(centres) - moment * across / (arm**2).sum()


def centres_of(part: Part) -> dict[str, tuple[float, float]]:
    return {
        f"h1.{row}-{column}": (20.0 + 30.0 * (column - 1), 15.0 + 25.0 * (row - 1))
        for row in (1, 2, 3)
        for column in (1, 2)
    }


@pytest.mark.parametrize("element", ELEMENTS)
def test_soft_bolts_of_a_stiff_plate_share_as_the_elastic_formula(element: ElementName) -> None:
    """Bolts of 50 N/mm in a plate of steel: it moves as a rigid body, to 1e-3 of their stretch."""
    part = plate(BoltSupport("s1", "h1", stiffness=50.0))
    found = solved(part, element, size=4.0)
    (given,) = found.solution.reactions[0]
    names = [b.on for b in given.bolts]
    assert names == [f"h1.{r}-{c}" for r in (1, 2, 3) for c in (1, 2)]
    centres = np.array([centres_of(part)[n] for n in names])
    middle = centres.mean(axis=0)
    moment = (AT[0] - middle[0]) * FORCE[1] - (AT[1] - middle[1]) * FORCE[0]
    wanted = by_formula(centres, np.array(FORCE), moment)
    got = np.array([[b.x, b.y] for b in given.bolts])
    # a ring of chords (linear sides) has its bolts a little nearer and softer, all alike
    assert got == pytest.approx(wanted, abs=2e-3 * np.abs(wanted).max())
    assert got.sum(axis=0) == pytest.approx([given.x, given.y])
    assert given.y == pytest.approx(900.0, rel=1e-9)
    assert found.solution.balance[0].moment < 1e-9


def test_separate_holes_and_a_pattern_are_one_group() -> None:
    holes = (
        CircleHole("h1", (30.0, 40.0), 10.0, BoltCircle(3, 20.0)),
        CircleHole("h2", (90.0, 20.0), 6.0),
        CircleHole("h3", (90.0, 60.0), 14.0),
    )
    part = plate(BoltSupport("s1", "h1", ("h2", "h3"), 50.0), *holes)
    assert not [f for f in faults_of(part) if f.blocks]
    (given,) = solved(part, size=4.0).solution.reactions[0]
    turn = np.radians([0.0, 120.0, 240.0])
    ring = np.stack([30.0 + 20.0 * np.cos(turn), 40.0 + 20.0 * np.sin(turn)], axis=1)
    centres = np.vstack([ring, [[90.0, 20.0], [90.0, 60.0]]])
    moment = (AT[0] - centres[:, 0].mean()) * FORCE[1]
    assert [b.on for b in given.bolts] == ["h1.1", "h1.2", "h1.3", "h2", "h3"]
    got = np.array([[b.x, b.y] for b in given.bolts])
    assert got == pytest.approx(by_formula(centres, np.array(FORCE), moment), abs=0.02 * 900.0)


def test_a_couple_on_a_bolt_circle_is_shared_evenly() -> None:
    """M / (n r) in each bolt, across its radius, for rigid and for soft bolts (symmetry)."""
    holes = (
        CircleHole("h1", (80.0, 40.0), 6.0, BoltCircle(4, 25.0)),
        CircleHole("h2", (80.0, 40.0), 16.0),
    )
    case = Case("k1", "turn", (MomentLoad("l1", "h2", 20_000.0),))
    for stiffness, slack in ((None, 0.05), (100.0, 2e-3)):
        part = plate(BoltSupport("s1", "h1", stiffness=stiffness), *holes, case=case)
        (given,) = solved(part, size=3.0).solution.reactions[0]
        each = 20_000.0 / (4.0 * 25.0)
        sizes = [math.hypot(b.x, b.y) for b in given.bolts]
        # the plate is longer than wide, so that rigid bolts are not quite alike
        assert sizes == pytest.approx([each] * 4, rel=slack)
        assert (given.x, given.y) == pytest.approx((0.0, 0.0), abs=1e-6)
        assert given.moment == pytest.approx(-20_000.0, rel=1e-9)


def test_rigid_bolts_hold_their_rims_and_let_them_turn() -> None:
    bolted = solved(plate(BoltSupport("s1", "h1")), size=4.0)
    rollers = tuple(
        RollerSupport(f"s{k}", name)
        for k, name in enumerate(centres_of(plate(BoltSupport("s", "h1"))))
    )
    part = replace(plate(BoltSupport("s1", "h1")), supports=rollers)
    single = solved(part, size=4.0)
    assert bolted.solution.displacements == pytest.approx(single.solution.displacements, abs=1e-12)
    (group,) = bolted.solution.reactions[0]
    for bolt, one in zip(group.bolts, single.solution.reactions[0], strict=True):
        assert (bolt.x, bolt.y) == pytest.approx((one.x, one.y), abs=1e-6)


def test_one_soft_bolt_moves_by_force_over_stiffness() -> None:
    part = strip(
        80.0,
        40.0,
        (),
        (BoltSupport("s1", "h1", stiffness=1000.0), RollerSupport("s2", "c1", 90.0)),
        (Case("k", "pull", (ForceLoad("l", "e2", 100.0, 0.0),)),),
        (steel(),),
        10.0,
        (CircleHole("h1", (40.0, 20.0), 12.0),),
    )
    found = solved(part, size=2.0)
    assert found.solution.displacements[0, :, 0] == pytest.approx(0.1, rel=5e-3)


def test_a_group_whose_ground_is_off() -> None:
    """Nothing else holds the plate: it goes along, and no bolt feels it."""
    case = Case("k1", "off", (MisfitLoad("l1", "s1", 0.3, 0.1),))
    for stiffness in (None, 500.0):
        found = solved(plate(BoltSupport("s1", "h1", stiffness=stiffness), case=case), size=6.0)
        assert found.solution.displacements[0, :, 0] == pytest.approx(0.3, abs=1e-9)
        assert found.solution.displacements[0, :, 1] == pytest.approx(0.1, abs=1e-9)
        assert np.abs(found.stress.nodal).max() < 1e-4


def causes(*supports: Support) -> list[str]:
    part = replace(
        plate(BoltSupport("s", "h1")),
        holes=(GRID, SlotHole("h2", (110.0, 40.0), 20.0, 8.0)),
        supports=supports,
    )
    return [f.cause for f in faults_of(part) if f.blocks]


def test_bad_groups_are_told() -> None:
    assert causes(BoltSupport("s1", "h1")) == []
    assert any("a bolt in hole h2" in c for c in causes(BoltSupport("s1", "h1", ("h2",))))
    assert any("a bolt in edge e1" in c for c in causes(BoltSupport("s1", "e1")))
    assert any("“h9”" in c for c in causes(BoltSupport("s1", "h1", ("h9",))))
    assert any("twice" in c for c in causes(BoltSupport("s1", "h1", ("h1.2-1",))))
    assert any("twice" in c for c in causes(BoltSupport("s1", "h1.1-1", ("h1.1-1",))))
    assert any("0 N/mm" in c for c in causes(BoltSupport("s1", "h1", stiffness=0.0)))
    assert any("turning" in c for c in causes(BoltSupport("s1", "h1.1-1")))


def test_a_group_survives_edits_of_its_holes() -> None:
    holes = (
        CircleHole("h1", (30.0, 40.0), 8.0),
        CircleHole("h2", (90.0, 20.0), 8.0),
        replace(GRID, id="h3", centre=(110.0, 10.0), pattern=GridPattern(1, 2, 30.0, 25.0)),
    )
    part = plate(BoltSupport("s1", "h1", ("h2", "h3"), 100.0), *holes)
    outcome = edits.remove(part, "h1")
    assert outcome.part.supports == (BoltSupport("s1", "h2", ("h3",), 100.0),)
    assert any("s1" in word for word in outcome.lost)
    broken = edits.break_pattern(part, "h3")
    (group,) = broken.supports
    assert isinstance(group, BoltSupport)
    assert len(group.also) == 3
    assert not [f for f in faults_of(broken) if f.blocks]
    last = replace(part, supports=(BoltSupport("s1", "h2"),))
    assert edits.remove(last, "h2").part.supports == ()
