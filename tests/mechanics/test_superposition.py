"""Cases as sums of those that are solved: beside solving every one of them."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest

from screenapp.mechanics.solve import solve
from screenapp.mechanics.superposition import superpose
from screenapp.model.part import (
    Case,
    Combination,
    FixedSupport,
    ForceLoad,
    Part,
    PrescribedSupport,
    Term,
)
from tests.mechanics.structured import rectangle, shaken


def test_independent_loads_stand_for_themselves() -> None:
    loads = np.random.default_rng(3).normal(size=(4, 50))
    found = superpose(loads)
    assert found.solved.tolist() == [0, 1, 2, 3]
    assert np.array_equal(found.weights, np.eye(4))


def test_sums_are_found_and_give_the_loads_back() -> None:
    base = np.random.default_rng(4).normal(size=(3, 200)) * [[1.0], [1e6], [1e-3]]
    mix = np.array([[1.0, 0, 0], [0, 1, 0], [2.0, 1e-6, 0], [0, 0, 0], [0, 0, 1], [1.0, 0, -50.0]])
    loads = mix @ base
    found = superpose(loads)
    assert len(found.solved) == 3
    rebuilt = found.spread(loads[found.solved])
    size = np.linalg.norm(loads, axis=1)
    assert np.all(np.linalg.norm(rebuilt - loads, axis=1) <= 1e-11 * size)
    # a solved case is itself, to the last bit
    assert np.array_equal(rebuilt[found.solved], loads[found.solved])


def test_a_case_that_differs_a_little_is_solved_by_itself() -> None:
    loads = np.random.default_rng(5).normal(size=(1, 100))
    near = loads.copy()
    near[0, 7] += 1e-9
    assert len(superpose(np.concatenate([loads, near])).solved) == 2


def test_no_load_at_all() -> None:
    found = superpose(np.zeros((3, 10)))
    assert not found.spread(np.zeros((len(found.solved), 10))).any()


def _cases(part: Part, pushed: float) -> Part:
    """Pulls in five directions and two combinations on a plate that may be pushed aside too."""
    angles = np.linspace(0.0, 3.0, 5)
    moved = (PrescribedSupport("s2", "c3", y=pushed),) if pushed else ()
    return replace(
        part,
        supports=(FixedSupport("s1", "e4"), *moved),
        cases=tuple(
            Case(f"k{i}", f"case {i}", (ForceLoad(f"l{i}", "e2", 1e3 * np.cos(a), 50 * np.sin(a)),))
            for i, a in enumerate(angles)
        ),
        combinations=(
            Combination("m1", "more", (Term("k0", -1.5), Term("k3", 0.5))),
            Combination("m2", "none", (Term("k0", 0.0),)),
        ),
    )


@pytest.mark.parametrize("pushed", [0.0, 0.05])
@pytest.mark.parametrize("element", ["quad9", "quad8", "quad4", "quad4-incompatible"])
def test_superposed_cases_are_those_solved_alone(element: str, pushed: float) -> None:
    plate = rectangle(60.0, 40.0, 9, 6)
    mesh = shaken(plate.mesh, plate.shape, 0.2)
    part = _cases(plate.part, pushed)
    part = replace(part, mesh=replace(part.mesh, element=element))  # type: ignore[arg-type]
    together = solve(part, plate.shape, mesh)
    assert together.support_forces is not None
    for k, case in enumerate(part.cases):
        alone = solve(replace(part, cases=(case,), combinations=()), plate.shape, mesh)
        assert alone.support_forces is not None
        for found, wanted in (
            (together.displacements[k], alone.displacements[0]),
            (together.support_forces[k], alone.support_forces[0]),
        ):
            assert np.abs(found - wanted).max() <= 1e-10 * np.abs(wanted).max()
        if alone.internal_modes is not None:
            assert together.internal_modes is not None
            gap = np.abs(together.internal_modes[k] - alone.internal_modes[0])
            assert gap.max() <= 1e-10 * np.abs(alone.internal_modes).max()
        assert together.balance[k].force < 1e-10
        assert together.balance[k].moment < 1e-10
    if not pushed:
        assert np.abs(together.displacements[6]).max() == 0.0
