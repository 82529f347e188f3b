"""Supports hold exactly what they say, however they lean or meet."""

from __future__ import annotations

import math
from dataclasses import replace

import numpy as np
import pytest

from screenapp.mechanics.assembly import carried_nodes
from screenapp.mechanics.constraints import held_directions, held_sides, prescribe_nodes, reduce
from screenapp.mechanics.solve import solve
from screenapp.model.errors import InvalidPartError, SolvingError
from screenapp.model.mesh import Mesh
from screenapp.model.part import (
    Case,
    FixedSupport,
    ForceLoad,
    Part,
    PrescribedSupport,
    RollerSupport,
    Support,
)
from tests.mechanics.structured import (
    Floats,
    Structured,
    four_sided,
    full_ring,
    rectangle,
    ring_sector,
)


def _held(case: Structured, *supports: Support) -> tuple[Part, Floats, Floats]:
    """The part, the held displacements (n, 2) and the basis as (n, 2, n_free)."""
    part = replace(case.part, supports=supports)
    carried, index = carried_nodes(case.mesh, "quad9")
    made = reduce(held_directions(part, case.shape, case.mesh), case.mesh, index)
    full = np.zeros((case.mesh.n_nodes, 2))
    full[carried] = made.held[0].reshape(-1, 2)
    basis = np.zeros((case.mesh.n_nodes, 2, made.basis.shape[1]))
    basis[carried] = made.basis.toarray().reshape(len(carried), 2, -1)
    return part, full, basis


def _on(mesh: Mesh, case: Structured, feature: str) -> np.ndarray:  # type: ignore[type-arg]
    return np.unique(mesh.side_nodes[mesh.sides_on(case.shape.pieces_of(feature))])


def test_a_fixed_edge_leaves_nothing_of_its_nodes() -> None:
    case = rectangle(4.0, 2.0, 4, 2)
    _, held, basis = _held(case, FixedSupport("s", "e4"))
    nodes = _on(case.mesh, case, "e4")
    assert not held.any()
    assert not basis[nodes].any()
    assert len(nodes) == 5
    assert basis.shape[2] == 2 * (case.mesh.n_nodes - case.mesh.n_elements - 5)


def test_the_basis_is_orthonormal_and_obeys_leaning_rollers() -> None:
    case = four_sided(((0, 0), (5, 1), (4, 4), (-1, 3)), 3, 2)
    _, held, basis = _held(
        case, RollerSupport("s1", "e1"), RollerSupport("s2", "e3", 70.0), FixedSupport("s3", "c3")
    )
    flat = basis.reshape(-1, basis.shape[2])
    assert flat.T @ flat == pytest.approx(np.eye(basis.shape[2]), abs=1e-14)
    normal = np.array([1.0, -5.0]) / math.sqrt(26.0)
    assert np.abs(np.einsum("d,ndk->nk", normal, basis[_on(case.mesh, case, "e1")])).max() < 1e-14
    lean = np.array([math.cos(math.radians(70.0)), math.sin(math.radians(70.0))])
    assert np.abs(np.einsum("d,ndk->nk", lean, basis[_on(case.mesh, case, "e3")])).max() < 1e-14
    assert not basis[case.mesh.corner_nodes["c3"]].any()
    assert not held.any()


def test_two_rollers_that_meet_at_a_corner_fix_it_and_equal_ones_do_not() -> None:
    case = rectangle(4.0, 2.0, 4, 2)
    _, _, basis = _held(case, RollerSupport("s1", "e1"), RollerSupport("s4", "e4"))
    assert not basis[case.mesh.corner_nodes["c1"]].any()
    _, _, basis = _held(
        case, RollerSupport("s1", "e1"), RollerSupport("s0", "e1", 90.0), FixedSupport("s4", "c1")
    )
    right = basis[case.mesh.corner_nodes["c2"]]
    assert np.abs(right[1]).max() == 0.0
    assert np.abs(right[0]).sum() == 1.0  # free along x, once


def test_a_pin_holds_every_node_of_its_rim_along_the_exact_radius() -> None:
    case = full_ring(5.0, 9.0, 16, 2)
    _, _, basis = _held(case, RollerSupport("pin", "h1"), FixedSupport("stop", "c1"))
    nodes = _on(case.mesh, case, "h1")
    radial = case.mesh.nodes[nodes] / 5.0
    assert np.linalg.norm(radial, axis=1) == pytest.approx(1.0)
    assert np.abs(np.einsum("nd,ndk->nk", radial, basis[nodes])).max() < 1e-12
    assert (np.linalg.norm(basis[nodes], axis=(1, 2)) > 0.99).all()  # each may still slide


def test_prescribed_displacements_combine_and_contradictions_are_named() -> None:
    case = rectangle(4.0, 2.0, 4, 2)
    _, held, basis = _held(
        case, PrescribedSupport("s1", "e1", y=0.2), PrescribedSupport("s4", "e4", x=-0.1)
    )
    corner = case.mesh.corner_nodes["c1"]
    assert held[corner] == pytest.approx([-0.1, 0.2])
    assert not basis[corner].any()
    assert held[case.mesh.corner_nodes["c2"]] == pytest.approx([0.0, 0.2])
    with pytest.raises(InvalidPartError, match="s1 and s4 move the same place") as caught:
        _held(case, PrescribedSupport("s1", "e1", 0.1, 0.2), FixedSupport("s4", "e4"))
    assert caught.value.faults[0].ids == ("s1", "s4")


def test_oblique_prescribed_values_are_met_exactly() -> None:
    """A roller at 30° and a prescribed x together say what y is."""
    case = rectangle(4.0, 2.0, 2, 2)
    _, held, _ = _held(case, RollerSupport("s1", "e1", 30.0), PrescribedSupport("s2", "e1", x=0.3))
    node = case.mesh.corner_nodes["c2"]
    assert held[node] == pytest.approx([0.3, -0.3 / math.tan(math.radians(30.0))])


@pytest.mark.parametrize(
    ("supports", "words"),
    [
        ((), "nothing holds the part"),
        ((RollerSupport("s", "e1"),), "moving along x"),
        ((RollerSupport("s", "e2"), RollerSupport("r", "e4")), "moving along y"),
        ((RollerSupport("s", "e1", 30.0),), "moving along 120°"),
        ((FixedSupport("s", "c3"),), r"turning about \(4, 2\) mm"),
        (
            (RollerSupport("s", "c1", 90.0), RollerSupport("r", "c2", 90.0)),
            "moving along x",
        ),
        ((RollerSupport("s", "c1", 90.0),), "moving in more than one way"),
        ((PrescribedSupport("s", "e1"),), "nothing holds the part"),
    ],
)
def test_a_free_rigid_motion_is_named(supports: tuple[Support, ...], words: str) -> None:
    with pytest.raises(SolvingError, match=words):
        _held(rectangle(4.0, 2.0, 4, 2), *supports)


def test_a_pin_alone_lets_the_part_turn_about_it() -> None:
    with pytest.raises(SolvingError, match=r"turning about \(-?[0-9.e-]+, -?[0-9.e-]+\) mm"):
        _held(full_ring(5.0, 9.0, 16, 2), RollerSupport("pin", "h1"))


def test_misplaced_supports_are_named() -> None:
    case = rectangle(4.0, 2.0, 4, 2)
    with pytest.raises(InvalidPartError, match="s stands on 'e9'"):
        _held(case, FixedSupport("s", "e9"))
    with pytest.raises(InvalidPartError, match="angle"):
        _held(case, RollerSupport("s", "c1"))


def test_held_sides_tell_normal_from_tangent() -> None:
    case = ring_sector(2.0, 4.0, 90.0, 4, 2)
    supports = (
        RollerSupport("s1", "e1", 90.0),  # e1 lies on the x axis: its normal
        RollerSupport("s3", "e3", 90.0),  # e3 lies on the y axis: its tangent
        RollerSupport("s2", "e2"),
        RollerSupport("s4", "e4", 20.0),
        FixedSupport("c", "c1"),
    )
    part = replace(case.part, supports=supports)
    held = held_sides(part, case.shape, case.mesh)
    for feature, wanted in (
        ("e1", [True, False]),
        ("e3", [False, True]),
        ("e2", [True, False]),
        ("e4", [True, True]),
    ):
        on = case.mesh.sides_on(case.shape.pieces_of(feature))
        assert (held[on] == wanted).all(), feature
    assert not held_sides(replace(part, supports=supports[-1:]), case.shape, case.mesh).any()


def test_turning_the_whole_problem_turns_the_answer() -> None:
    """A leaning roller is exact: the same part turned by 37° moves the same way, turned."""
    angle = math.radians(37.0)
    turn = np.array([[math.cos(angle), -math.sin(angle)], [math.sin(angle), math.cos(angle)]])
    corners = np.array([(0.0, 0.0), (6.0, 0.0), (6.0, 2.0), (0.0, 2.0)])
    answers = []
    for matrix, lean in ((np.eye(2), 0.0), (turn, 37.0)):
        case = four_sided(tuple(map(tuple, corners @ matrix.T)), 4, 2)
        force = matrix @ np.array([10.0, -30.0])
        part = replace(
            case.part,
            supports=(
                RollerSupport("s4", "e4"),
                RollerSupport("s1", "c1", 90.0 + lean),
            ),
            cases=(Case("k", "pull", (ForceLoad("f", "e2", float(force[0]), float(force[1])),)),),
        )
        solution = solve(part, case.shape, case.mesh)
        answers.append((solution.displacements[0] @ matrix, solution))
    size = np.abs(answers[0][0]).max()
    assert np.abs(answers[0][0] - answers[1][0]).max() < 1e-11 * size
    back = turn.T @ [sum(r.x for r in answers[1][1].reactions[0]),
                     sum(r.y for r in answers[1][1].reactions[0])]  # fmt: skip
    assert back == pytest.approx([-10.0, 30.0])


def test_prescribed_nodes_hold_both_directions() -> None:
    held = prescribe_nodes(np.array([4, 7]), np.array([[1.0, 2.0], [3.0, 4.0]]))
    assert held.nodes.tolist() == [4, 4, 7, 7]
    assert held.values.tolist() == [1.0, 2.0, 3.0, 4.0]
    assert held.directions.tolist() == [[1, 0], [0, 1]] * 2
