"""Unknowns that a peak needs: adaptive 9-node quads beside evenly refined 4-node quads.

Both are counted alike: the first mesh from which on all later ones lie within the accuracy.  The
adaptive meshes are the passes of a screening at 0.2 %, the even ones are refined by the root of
two.  All peaks are recovered in the same way (edge recovery): only mesh and element differ.
"""

from __future__ import annotations

import math
from collections.abc import Callable, Iterator
from dataclasses import dataclass, replace

from screenapp.mechanics.recovery import recover
from screenapp.mechanics.solve import solve
from screenapp.meshing.service import Mesher
from screenapp.meshing.sizing import uniform_sizes
from screenapp.model.findings import Fields
from screenapp.model.part import ElementName, MeshWishes, Part
from screenapp.model.shape import shape_of
from screenapp.screening.passes import Pass
from screenapp.screening.screen import screen
from tests.evidence.test_screened_ellipse import elliptic_membrane
from tests.evidence.test_screened_hole import strip

PARTS: dict[str, Callable[[], Part]] = {
    "strip with hole, d/W = 0.2": lambda: strip(0.2),
    "elliptic membrane": lambda: elliptic_membrane(0.005, 6, 4),
}
EVEN: tuple[ElementName, ...] = ("quad4", "quad4-incompatible")


@dataclass(frozen=True)
class Step:
    """Unknowns of a mesh and the largest stress it shows [MPa]."""

    unknowns: int
    peak: float


def adaptive(part: Part, mesher: Mesher) -> list[Step]:
    """The passes of a screening at 0.2 %; its peak must be settled."""
    findings = screen(replace(part, mesh=MeshWishes(tolerance=0.002)), mesher)
    assert findings.cases[0].peaks[0].estimate.trust == "settled"
    return [Step(p.unknowns, p.peak) for p in findings.mesh.passes]


def converged(part: Part, mesher: Mesher) -> float:
    """The peak [MPa] after every pass there is, at a tolerance that no band can meet."""
    findings = screen(replace(part, mesh=MeshWishes(tolerance=0.0005)), mesher)
    return findings.cases[0].peaks[0].estimate.value


def even(part: Part, element: ElementName, most: int, mesher: Mesher) -> Iterator[Step]:
    """Meshes of one size each, from about 500 unknowns until `most` are passed."""
    part = replace(part, mesh=MeshWishes(element))
    shape = shape_of(part)
    size, unknowns = math.sqrt(shape.area / 250.0), 0
    while unknowns < most:
        mesh = mesher.mesh(shape, uniform_sizes(shape, size))
        solution = solve(part, shape, mesh)
        this = Pass(part, shape, Fields(mesh, solution, recover(part, shape, mesh, solution)))
        unknowns = solution.unknowns
        yield Step(unknowns, this.measure_max("von_mises", 0))
        size /= math.sqrt(2.0)


def needed(steps: list[Step], exact: float, accuracy: float) -> int | None:
    """Unknowns of the first step from which on all are within the accuracy; None if the last
    one is not."""
    found = None
    for step in reversed(steps):
        if abs(step.peak / exact - 1.0) > accuracy:
            break
        found = step.unknowns
    return found
