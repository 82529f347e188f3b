"""Pins that only push: contact, balance, and the stress far from the pin."""

from __future__ import annotations

import math
from dataclasses import replace

import numpy as np
import pytest

from screenapp.mechanics.one_sided import MOST_ROUNDS
from screenapp.mechanics.solve import solve
from screenapp.model.errors import SolvingError
from screenapp.model.part import (
    BearingLoad,
    Case,
    CircleHole,
    Combination,
    ElementName,
    FixedSupport,
    ForceLoad,
    Part,
    PinSupport,
    RollerSupport,
    SlotHole,
    Term,
)
from screenapp.model.validity import faults_of
from tests.mechanics.zoned import ELEMENTS, Solved, meshed, solved, strip

FORCE, WIDE, RADIUS, THICK = 5000.0, 40.0, 6.0, 2.0
CENTRE = (20.0, 20.0)


def lug(force: float = FORCE) -> Part:
    """A strip pulled at its right end (e2), on a pin in the hole near its left end."""
    return strip(
        100.0,
        WIDE,
        (),
        (PinSupport("s1", "h1"), RollerSupport("s2", "c2", 90.0)),
        (Case("k", "pull", (ForceLoad("l", "e2", force, 0.0),)),),
        holes=(CircleHole("h1", CENTRE, 2.0 * RADIUS),),
    )


def rim(found: Solved) -> tuple[np.ndarray, np.ndarray, np.ndarray]:
    """Angle from +x [deg], push outwards [N] and gap [mm] of each node of the rim."""
    mesh = found.mesh
    sides = mesh.sides_on(found.shape.pieces_of("h1"))
    carried = [0, 2] if found.solution.element.startswith("quad4") else [0, 1, 2]
    nodes = np.unique(mesh.side_nodes[sides][:, carried])
    arm = mesh.nodes[nodes] - CENTRE
    out = arm / np.hypot(*arm.T)[:, None]
    assert found.solution.support_forces is not None
    push = (found.solution.support_forces[0, nodes] * out).sum(axis=1)
    gap = (found.solution.displacements[0, nodes] * out).sum(axis=1)
    return np.degrees(np.arctan2(arm[:, 1], arm[:, 0])), push, gap


@pytest.mark.parametrize("element", ELEMENTS)
def test_the_pin_pushes_and_never_pulls_and_nothing_enters_it(element: ElementName) -> None:
    found = solved(lug(), element)
    angle, push, gap = rim(found)
    assert push.min() > -1e-6 * push.max()
    assert gap.min() > -1e-8 * np.abs(found.solution.displacements).max()
    assert not (push[np.abs(angle) < 85.0] > 1e-6 * push.max()).any()  # pulled off on this side
    touching = 180.0 - np.abs(angle[push > 1e-6 * push.max()])
    assert 60.0 < touching.max() < 95.0  # the pin bears on about half the rim
    given = {r.support: r for r in found.solution.reactions[0]}
    assert given["s1"].x == pytest.approx(-FORCE, rel=1e-9)
    assert given["s1"].y + given["s2"].y == pytest.approx(0.0, abs=1e-6)
    assert found.solution.balance[0].force < 1e-10
    assert found.solution.balance[0].moment < 1e-9


def test_far_from_the_pin_it_is_a_bearing_force() -> None:
    """Saint-Venant: more than a width away the stress is that of the cosine pressure."""
    pin = solved(lug())
    part = replace(
        lug(),
        supports=(RollerSupport("s1", "e2", 0.0), RollerSupport("s2", "c2", 90.0)),
        cases=(Case("k", "bear", (BearingLoad("l", "h1", -FORCE, 0.0),)),),
    )
    bearing = solved(part)
    at = [(70.0, 8.0), (70.0, 20.0)]
    one, two = (f.reader.read(at)[0][0, :, 0] for f in (pin, bearing))
    np.testing.assert_allclose(one, two, rtol=0.01)
    (net,) = (pin.reader.read([(20.0, 14.0)])[0][0, :, 0],)
    assert net[0] > FORCE / (THICK * (WIDE - 2.0 * RADIUS))


def test_the_free_side_of_the_rim_has_no_traction() -> None:
    found = solved(lug())
    x, y = CENTRE
    stress, _ = found.reader.read([(x + RADIUS, y), (x - RADIUS, y)])
    mean = FORCE / (2.0 * RADIUS * THICK)
    assert abs(stress[0, 0, 0]) < 1e-3 * mean  # radial, away from the pin
    assert -2.0 * mean < stress[0, 1, 0] < -0.5 * mean


def test_contact_without_play_grows_with_the_load_and_turns_with_it() -> None:
    """Contact without play is the same for any size of the load; a push bears on the far side."""
    part = lug()
    cases = (
        part.cases[0],
        Case("k2", "twice", (ForceLoad("l2", "e2", 2.0 * FORCE, 0.0),)),
        Case("k3", "push", (ForceLoad("l3", "e2", -FORCE, 0.0),)),
    )
    both = Combination("m", "none", (Term("k", 1.0), Term("k3", 1.0)))
    found = solved(replace(part, cases=cases, combinations=(both,)))
    u = found.solution.displacements
    np.testing.assert_allclose(u[1], 2.0 * u[0], atol=1e-9 * np.abs(u[0]).max())
    assert np.abs(u[2] + u[0]).max() > 0.1 * np.abs(u[0]).max()
    assert np.abs(u[3]).max() < 1e-9 * np.abs(u[0]).max()  # pull and push together are nothing
    assert found.solution.reactions[2][0].x == pytest.approx(FORCE, rel=1e-9)


def test_two_pins_share_a_force_across() -> None:
    """Two holes in a row, pulled down between them: each pin bears half, on its upper side."""
    holes = (CircleHole("h1", (20.0, 20.0), 10.0), CircleHole("h2", (80.0, 20.0), 10.0))
    part = strip(
        100.0, 40.0, (), (PinSupport("s1", "h1"), PinSupport("s2", "h2")),
        (Case("k", "weight", (ForceLoad("l", "e1", 0.0, -400.0),)),), holes=holes,
    )  # fmt: skip
    found = solved(part)
    left, right = found.solution.reactions[0]
    assert (left.y, right.y) == pytest.approx((200.0, 200.0), rel=1e-3)
    assert left.x == pytest.approx(-right.x, abs=1e-6)


def test_a_part_that_lifts_off_is_refused() -> None:
    """On one pin alone, and pushed about it, nothing stops the part from turning."""
    part = replace(lug(), supports=(PinSupport("s1", "h1"),))
    shape, mesh = meshed(part)
    with pytest.raises(SolvingError, match="turning about"):
        solve(part, shape, mesh)
    assert any("turning" in f.cause for f in faults_of(part) if f.blocks)


def test_a_contact_that_does_not_settle_says_so(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr("screenapp.mechanics.one_sided.MOST_ROUNDS", 2)
    part = lug()
    shape, mesh = meshed(part)
    with pytest.raises(SolvingError, match="has not settled after 2 rounds"):
        solve(part, shape, mesh)
    assert MOST_ROUNDS == 40


def test_only_a_round_hole_takes_a_pin() -> None:
    slot = replace(lug(), holes=(SlotHole("h1", CENTRE, 16.0, 8.0),))
    edge = replace(lug(), supports=(PinSupport("s1", "e4"), FixedSupport("s2", "e2")))
    for part in (slot, edge):
        fault = next(f for f in faults_of(part) if f.blocks)
        assert fault.field == "supports.s1.on"
        assert "round hole" in fault.mend


def test_the_peak_is_beside_the_hole_and_the_rim_s_stress_is_smooth() -> None:
    """The recovered radial stress under the pin and its resultant: t ∫ σr cos θ r dθ = F."""
    found = solved(lug(), size=1.5)
    turn = np.radians(np.linspace(90.5, 269.5, 180))
    points = np.stack(
        [CENTRE[0] + RADIUS * np.cos(turn), CENTRE[1] + RADIUS * np.sin(turn)], axis=1
    )
    stress = found.reader.read(points)[0][0]
    c, s = np.cos(turn), np.sin(turn)
    radial = stress[:, 0] * c * c + stress[:, 1] * s * s + 2.0 * stress[:, 2] * c * s
    carried = THICK * RADIUS * float((radial * c).sum()) * math.radians(1.0)
    assert carried == pytest.approx(FORCE, rel=0.01)
    assert math.isfinite(radial.min())
