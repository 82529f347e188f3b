"""The adaptive mesh needs a tenth of the unknowns of even 4-node meshes, or less.

Counts, not times: they are the same on every machine, so they may be asserted.
"""

from __future__ import annotations

import pytest

from screenapp.meshing.service import Mesher
from tests.benchmarks.economy import PARTS, Step, adaptive, converged, even, needed


def test_needed_is_the_first_step_after_which_none_is_off() -> None:
    steps = [Step(10, 1.0), Step(20, 1.2), Step(40, 1.01), Step(80, 1.0)]
    assert needed(steps, 1.0, 0.02) == 40
    assert needed(steps, 1.0, 0.001) == 80
    assert needed(steps[:2], 1.0, 0.02) is None


@pytest.mark.slow
@pytest.mark.timeout(900)
@pytest.mark.parametrize("name", PARTS)
def test_a_tenth_of_the_unknowns(name: str) -> None:
    """For 0.2 % of the peak: nine times the unknowns do not suffice an even mesh of quad4."""
    with Mesher() as mesher:
        part = PARTS[name]()
        exact = converged(part, mesher)
        ours = needed(adaptive(part, mesher), exact, 0.002)
        assert ours is not None
        steps = list(even(part, "quad4", 9 * ours, mesher))[:-1]
        assert needed(steps, exact, 0.002) is None, (ours, steps)
