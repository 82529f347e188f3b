"""Reactions of known statics, shared nodes, and the balance that must show a lost force."""

from __future__ import annotations

from dataclasses import replace
from typing import get_args

import numpy as np
import pytest

from screenapp.mechanics.constraints import HeldDirections
from screenapp.mechanics.equilibrium import balance, reactions, resultant
from screenapp.mechanics.solve import solve
from screenapp.model.part import (
    BearingLoad,
    Case,
    ElementName,
    FixedSupport,
    ForceLoad,
    GravityLoad,
    MeshWishes,
    PressureLoad,
    RollerSupport,
)
from screenapp.model.solution import Reaction
from tests.mechanics.structured import full_ring, rectangle


@pytest.mark.parametrize("element", get_args(ElementName))
def test_a_beam_on_two_supports_shares_its_load_by_levers(element: ElementName) -> None:
    """30 N down at the right end of a 6 mm beam held at x = 0 and 4.

    With a roller at (4, 0) and a fixed corner at the origin: R₄ = 30 · 6/4, R₀ = -15.
    """
    case = rectangle(6.0, 1.0, 6, 1)
    part = replace(
        case.part,
        supports=(FixedSupport("a", "c1"), RollerSupport("b", "e9", 90.0)),
        cases=(Case("k", "", (ForceLoad("f", "e2", 0.0, -30.0),)),),
        mesh=MeshWishes(element),
    )
    at = int(np.argmin(np.hypot(*(case.mesh.nodes - [4.0, 0.0]).T)))
    mesh = replace(case.mesh, corner_nodes={**case.mesh.corner_nodes, "e9": at})
    left, right = solve(part, case.shape, mesh).reactions[0]
    assert (left.x, left.y, left.moment) == pytest.approx((0.0, -15.0, 0.0), abs=1e-9)
    assert (right.x, right.y, right.moment) == pytest.approx((0.0, 45.0, 180.0), abs=1e-9)


def test_every_load_is_balanced_on_a_ring_pinned_in_its_hole() -> None:
    case = full_ring(5.0, 9.0, 16, 2)
    part = replace(
        case.part,
        supports=(RollerSupport("pin", "h1"), RollerSupport("stop", "c1", 90.0)),
        cases=(
            Case("a", "", (ForceLoad("f", "e1", 80.0, -20.0),)),
            Case("b", "", (PressureLoad("p", "e1", 3.0), GravityLoad("g", 0.0, -9810.0))),
            Case("c", "", (BearingLoad("b", "h1", 50.0, 10.0),)),
        ),
    )
    solution = solve(part, case.shape, case.mesh)
    assert len(solution.balance) == 3
    for found in solution.balance:
        assert found.force < 1e-12
        assert found.moment < 1e-12
    for given in solution.reactions:
        assert [r.support for r in given] == ["pin", "stop"]
        assert abs(given[0].moment) < 1e-9  # a pin gives no moment about its centre
        assert abs(given[1].x) == 0.0  # a roller gives nothing across
    total = np.sum([[r.x, r.y] for r in solution.reactions[0]], axis=0)
    assert total == pytest.approx([-80.0, 20.0])


def _hold(nodes: list[int], directions: list[list[float]], owners: list[int]) -> HeldDirections:
    return HeldDirections(
        np.array(nodes),
        np.array(directions),
        np.zeros(len(nodes)),
        np.array(owners),
        tuple(f"s{i}" for i in range(max(owners) + 1)),
    )


def test_supports_that_share_a_node_give_along_what_they_hold() -> None:
    at, force = np.array([[2.0, 0.0]]), np.array([[6.0, -8.0]])
    along_x, along_y = [1.0, 0.0], [0.0, 1.0]
    rollers = reactions(_hold([0, 0], [along_x, along_y], [0, 1]), at, force)
    assert [(r.x, r.y, r.moment) for r in rollers] == [(6.0, 0.0, 0.0), (0.0, -8.0, -16.0)]
    both = reactions(_hold([0, 0, 0, 0], [along_x, along_y] * 2, [0, 0, 1, 1]), at, force)
    assert [(r.x, r.y) for r in both] == [
        pytest.approx((3.0, -4.0)),
        pytest.approx((3.0, -4.0)),
    ]
    oblique = reactions(_hold([0, 0], [along_x, [0.6, 0.8]], [0, 1]), at, force)
    assert [(r.x, r.y) for r in oblique] == [
        pytest.approx((12.0, 0.0)),
        pytest.approx((-6.0, -8.0)),
    ]


def test_a_support_without_a_node_gives_nothing() -> None:
    held = HeldDirections(
        np.zeros(0, dtype=np.int64),
        np.zeros((0, 2)),
        np.zeros(0),
        np.zeros(0, dtype=np.int64),
        ("s0",),
    )
    assert reactions(held, np.zeros((1, 2)), np.zeros((1, 2))) == (Reaction("s0", 0.0, 0.0, 0.0),)


def test_balance_shows_a_missing_force_and_a_missing_moment() -> None:
    at, force = np.array([[0.0, 0.0], [4.0, 0.0]]), np.array([[0.0, 5.0], [0.0, 5.0]])
    good = Reaction("s", 0.0, -10.0, -20.0)
    assert balance(at, force, (good,)) == balance(at, 0.0 * force, ())
    assert balance(at, force, (replace(good, y=-9.0),)).force == pytest.approx(0.1)
    assert balance(at, force, (replace(good, moment=-10.0),)).moment == pytest.approx(10.0 / 40.0)
    assert balance(at, force, ()).force == pytest.approx(1.0)


def test_resultant_takes_moments_about_the_origin() -> None:
    found = resultant(np.array([[2.0, 3.0]]), np.array([[5.0, 7.0]]))
    assert found.tolist() == [5.0, 7.0, 2.0 * 7.0 - 3.0 * 5.0]
